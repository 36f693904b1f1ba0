//! The rule base as flat tables for one site: each distinct test once, parts before wholes, and an index from readings,
//! signs and events to the tests that look at them.

use std::collections::HashMap;

use super::leaf::Slope;
use super::site::settle;
use super::{Degree, Leaf, Limits};
use crate::knowledge::{Evidence, FindingId, Knowledge, Ramp, Test};
use crate::site::Site;
use crate::vocabulary::{ReadingId, SignId};

/// Index of a node.
pub(super) type NodeId = u32;

/// A fact that is kept up to date.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Node {
    /// A test without parts.
    Leaf(u32),
    /// Minimum of earlier nodes.
    All(Vec<NodeId>),
    /// Maximum of earlier nodes.
    Any(Vec<NodeId>),
    /// Complement of an earlier node.
    Not(NodeId),
    /// The n-th largest of earlier nodes.
    NOf(usize, Vec<NodeId>),
}

/// The rule base, compiled for a site.
#[derive(Debug, Clone)]
pub struct Program {
    pub(super) leaves: Vec<Leaf>,
    pub(super) leaf_node: Vec<NodeId>,
    pub(super) nodes: Vec<Node>,
    pub(super) parents: Vec<Vec<NodeId>>,
    pub(super) finding_node: Vec<NodeId>,
    pub(super) trigger_node: Vec<Vec<NodeId>>,
    pub(super) sign_node: Vec<NodeId>,
    pub(super) by_reading: Vec<Vec<u32>>,
    pub(super) by_sign: Vec<Vec<u32>>,
    pub(super) by_event: Vec<Vec<u32>>,
}

impl Program {
    /// Compiles the findings, the triggers of causes and the present standing of every sign.
    pub fn new(knowledge: &Knowledge, site: &Site) -> Self {
        let mut compiler = Compiler::new(knowledge, site);
        for id in &knowledge.order {
            let node = compiler.test(&knowledge[*id].when);
            compiler.finding_node[id.index()] = Some(node);
        }
        let trigger_node = knowledge
            .causes
            .iter()
            .map(|cause| {
                cause
                    .triggers
                    .iter()
                    .map(|t| compiler.test(&t.when))
                    .collect()
            })
            .collect();
        let sign_node = (0..knowledge.vocabulary.signs.len())
            .filter_map(|i| u16::try_from(i).ok())
            .map(|i| {
                compiler.test(&Test::Sign {
                    sign: SignId(i),
                    within: None,
                })
            })
            .collect();
        compiler.finish(trigger_node, sign_node)
    }

    /// The number of distinct tests.
    pub fn tests(&self) -> usize {
        self.leaves.len()
    }

    pub(super) fn finding(&self, id: FindingId) -> Option<NodeId> {
        self.finding_node.get(id.index()).copied()
    }

    /// The node of a piece of evidence.
    pub(super) fn evidence(&self, evidence: Evidence) -> Option<NodeId> {
        match evidence {
            Evidence::Finding(id) => self.finding(id),
            Evidence::Sign(id) => self.sign_node.get(usize::from(id.0)).copied(),
        }
    }
}

struct Compiler<'k> {
    knowledge: &'k Knowledge,
    site: &'k Site,
    limits: Limits<'k>,
    leaves: Vec<Leaf>,
    leaf_node: Vec<NodeId>,
    leaf_index: HashMap<String, NodeId>,
    nodes: Vec<Node>,
    node_index: HashMap<String, NodeId>,
    finding_node: Vec<Option<NodeId>>,
}

impl<'k> Compiler<'k> {
    fn new(knowledge: &'k Knowledge, site: &'k Site) -> Self {
        Self {
            knowledge,
            site,
            limits: Limits::new(knowledge, site),
            leaves: Vec::new(),
            leaf_node: Vec::new(),
            leaf_index: HashMap::new(),
            nodes: Vec::new(),
            node_index: HashMap::new(),
            finding_node: vec![None; knowledge.findings.len()],
        }
    }

    fn push(&mut self, node: Node) -> NodeId {
        let id = NodeId::try_from(self.nodes.len()).unwrap_or(NodeId::MAX);
        self.nodes.push(node);
        id
    }

    fn leaf(&mut self, leaf: Leaf) -> NodeId {
        let key = format!("{leaf:?}");
        if let Some(known) = self.leaf_index.get(&key) {
            return *known;
        }
        let index = u32::try_from(self.leaves.len()).unwrap_or(u32::MAX);
        self.leaves.push(leaf);
        let node = self.push(Node::Leaf(index));
        self.leaf_node.push(node);
        self.leaf_index.insert(key, node);
        node
    }

    fn whole(&mut self, node: Node) -> NodeId {
        let key = format!("{node:?}");
        if let Some(known) = self.node_index.get(&key) {
            return *known;
        }
        let id = self.push(node);
        self.node_index.insert(key, id);
        id
    }

    fn parts(&mut self, tests: &[Test]) -> Vec<NodeId> {
        tests.iter().map(|t| self.test(t)).collect()
    }

    fn test(&mut self, test: &Test) -> NodeId {
        match test {
            Test::All(parts) => {
                let parts = self.parts(parts);
                self.whole(Node::All(parts))
            }
            Test::Any(parts) => {
                let parts = self.parts(parts);
                self.whole(Node::Any(parts))
            }
            Test::NOf(n, parts) => {
                let parts = self.parts(parts);
                self.whole(Node::NOf(*n, parts))
            }
            Test::Not(part) => {
                let part = self.test(part);
                self.whole(Node::Not(part))
            }
            Test::Finding(id) => match self.finding_node.get(id.index()).copied().flatten() {
                Some(node) => node,
                // The order of findings puts every finding after its ground, so this is only ever a finding that is
                // not in the order at all: unknown, rather than wrong.
                None => self.leaf(Leaf::Fixed(Degree::UNKNOWN)),
            },
            leaf => {
                let resolved = resolve(leaf, self.knowledge, self.site, &self.limits);
                self.leaf(resolved)
            }
        }
    }

    fn finish(self, trigger_node: Vec<Vec<NodeId>>, sign_node: Vec<NodeId>) -> Program {
        let mut parents = vec![Vec::new(); self.nodes.len()];
        for (index, node) in self.nodes.iter().enumerate() {
            let Ok(id) = NodeId::try_from(index) else {
                continue;
            };
            let parts: &[NodeId] = match node {
                Node::Leaf(_) => &[],
                Node::All(parts) | Node::Any(parts) | Node::NOf(_, parts) => parts,
                Node::Not(part) => std::slice::from_ref(part),
            };
            for part in parts {
                parents[*part as usize].push(id);
            }
        }
        let vocabulary = &self.knowledge.vocabulary;
        let mut by_reading = vec![Vec::new(); vocabulary.readings.len()];
        let mut by_sign = vec![Vec::new(); vocabulary.signs.len()];
        let mut by_event = vec![Vec::new(); vocabulary.events.len()];
        for (index, leaf) in self.leaves.iter().enumerate() {
            let Ok(index) = u32::try_from(index) else {
                continue;
            };
            match leaf {
                Leaf::Level { reading, .. }
                | Leaf::Changed { reading, .. }
                | Leaf::Unusual { reading, .. }
                | Leaf::Odd(reading, _)
                | Leaf::Stuck(reading, _)
                | Leaf::Disagree(reading, ..) => by_reading[usize::from(reading.0)].push(index),
                Leaf::Sign(sign, ..) => by_sign[usize::from(sign.0)].push(index),
                Leaf::Event { event, .. } => by_event[usize::from(event.0)].push(index),
                Leaf::Fixed(_) => {}
            }
        }
        Program {
            leaves: self.leaves,
            leaf_node: self.leaf_node,
            parents,
            finding_node: self
                .finding_node
                .into_iter()
                .map(|n| n.unwrap_or(0))
                .collect(),
            nodes: self.nodes,
            trigger_node,
            sign_node,
            by_reading,
            by_sign,
            by_event,
        }
    }
}

/// A test without parts, with its names resolved for a site. Tests with parts, findings and causes are unknown here.
pub(super) fn resolve(
    test: &Test,
    knowledge: &Knowledge,
    site: &Site,
    limits: &Limits<'_>,
) -> Leaf {
    let vocabulary = &knowledge.vocabulary;
    let resolution = |id: ReadingId| (vocabulary[id].resolution, vocabulary[id].resolution_share);
    match test {
        Test::Level {
            reading,
            over,
            below,
            above,
            everywhere,
        } => {
            let slope =
                |ramp: &Ramp, rising: bool| slope(ramp, rising, resolution(*reading), limits);
            let sides = [(below, false), (above, true)]
                .map(|(ramp, rising)| ramp.as_ref().map(|ramp| slope(ramp, rising)));
            if sides.iter().any(|side| matches!(side, Some(None))) {
                return Leaf::Fixed(Degree::UNKNOWN);
            }
            let [below, above] = sides.map(Option::flatten);
            Leaf::Level {
                reading: *reading,
                over: *over,
                below,
                above,
                everywhere: *everywhere,
                good_for: vocabulary[*reading].good_for,
            }
        }
        Test::Changed {
            reading,
            change,
            by,
            surely,
            within,
            share,
        } => Leaf::Changed {
            reading: *reading,
            change: *change,
            slope: (*by, *surely),
            within: *within,
            share: *share,
            resolution: resolution(*reading),
            good_for: vocabulary[*reading].good_for,
        },
        Test::Unusual {
            reading,
            spreads,
            side,
        } => Leaf::Unusual {
            reading: *reading,
            spreads: *spreads,
            side: *side,
            resolution: resolution(*reading),
            good_for: vocabulary[*reading].good_for,
        },
        Test::Odd { reading, within } => Leaf::Odd(*reading, *within),
        Test::Stuck { reading, within } => Leaf::Stuck(*reading, *within),
        Test::Disagree {
            reading,
            by,
            within,
        } => Leaf::Disagree(*reading, *by, *within),
        Test::Sign { sign, within } => Leaf::Sign(
            *sign,
            within.unwrap_or(vocabulary[*sign].good_for),
            within.is_some(),
        ),
        Test::Event {
            event,
            within,
            not_within,
        } => Leaf::Event {
            event: *event,
            within: *within,
            not_within: *not_within,
            not_noted: knowledge.scales.event_not_noted,
        },
        Test::Site { key, asks } => Leaf::Fixed(settle(site, key, asks, knowledge)),
        Test::Finding(_)
        | Test::Cause { .. }
        | Test::All(_)
        | Test::Any(_)
        | Test::Not(_)
        | Test::NOf(..) => Leaf::Fixed(Degree::UNKNOWN),
    }
}

/// The two ends of a ramp; `None` where a name has no number here.
fn slope(ramp: &Ramp, rising: bool, resolution: (f64, f64), limits: &Limits<'_>) -> Option<Slope> {
    let start = limits.resolve(ramp.start)?;
    let half = 0.5 * resolution.0.max(resolution.1 * start.abs());
    let own = if rising {
        (start - half, start + half)
    } else {
        (start + half, start - half)
    };
    let Some(full) = ramp.full else {
        return Some(own);
    };
    let full = limits.resolve(full)?;
    // Named ends may meet or cross on a site that has tightened one of them; then the ramp is as wide as the resolution.
    let in_order = if rising { full > start } else { full < start };
    Some(if in_order { (start, full) } else { own })
}
