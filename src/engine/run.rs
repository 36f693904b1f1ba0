//! Keeps the facts of one farm up to date: only tests of what changed, and those whose time has come, are judged again,
//! and only what they feed is computed again.

use std::cmp::Reverse;
use std::collections::BinaryHeap;

use super::compile::{Node, NodeId, resolve};
use super::{Degree, Judged, Limits, Program};
use crate::history::balance::{Balance, Known};
use crate::history::log::Row;
use crate::history::memory::Memory;
use crate::knowledge::{CauseId, Evidence, FindingId, Knowledge, LimitLevel, Side, Test};
use crate::site::Site;
use crate::vocabulary::{ReadingId, Vocabulary};

/// The balances of a site, with what the knowledge base knows of its media and fish.
fn balance(knowledge: &Knowledge, site: &Site) -> Balance {
    let per_m3 = |kind: &str| {
        let media = knowledge.media.iter().find(|m| m.id == kind)?;
        Some(media.area_m2_per_l * 1000.0)
    };
    let area = site.biofilter_area(per_m3).map(|area| area.m2);
    let oxygen_use = knowledge
        .species
        .iter()
        .filter(|s| site.species.contains(&s.id))
        .filter_map(|s| s.oxygen_use)
        .reduce(f64::max);
    let limits = Limits::new(knowledge, site);
    let short = knowledge
        .vocabulary
        .reading("dissolved-oxygen")
        .and_then(|id| limits.species(id, LimitLevel::Stress, Side::Low));
    let known = Known {
        area_m2: area,
        oxygen_use,
        short_of_oxygen: short,
    };
    Balance::new(&knowledge.vocabulary, site, &known)
}

fn inputs(vocabulary: &Vocabulary) -> Vec<(ReadingId, Vec<ReadingId>)> {
    let of = |id: &str| {
        let inputs = crate::history::balance::inputs(id);
        inputs
            .iter()
            .filter_map(|i| vocabulary.reading(i))
            .collect()
    };
    vocabulary
        .readings
        .iter()
        .filter(|r| r.derived)
        .filter_map(|r| Some((vocabulary.reading(&r.id)?, of(&r.id))))
        .collect()
}

/// The facts of one farm as they stand.
#[derive(Debug, Clone)]
pub struct Engine<'k> {
    knowledge: &'k Knowledge,
    program: Program,
    memory: Memory,
    balance: Balance,
    facts: Vec<Degree>,
    dirty: Vec<bool>,
    first_dirty: usize,
    until: Vec<i64>,
    wakes: BinaryHeap<Reverse<(i64, u32)>>,
    version: u64,
    /// What each derived reading is computed from.
    inputs: Vec<(ReadingId, Vec<ReadingId>)>,
}

impl<'k> Engine<'k> {
    /// An engine that knows the rules and the site, and nothing yet of what happened.
    pub fn new(knowledge: &'k Knowledge, site: &Site) -> Self {
        let program = Program::new(knowledge, site);
        let nodes = program.nodes.len();
        let leaves = program.leaves.len();
        let mut engine = Self {
            knowledge,
            memory: Memory::new(&knowledge.vocabulary),
            balance: balance(knowledge, site),
            facts: vec![Degree::UNKNOWN; nodes],
            dirty: vec![true; nodes],
            first_dirty: 0,
            until: vec![i64::MAX; leaves],
            wakes: BinaryHeap::new(),
            version: 0,
            inputs: inputs(&knowledge.vocabulary),
            program,
        };
        engine.judge_all();
        engine.sweep();
        engine
    }

    fn judge_all(&mut self) {
        for leaf in 0..u32::try_from(self.program.leaves.len()).unwrap_or(u32::MAX) {
            self.judge(leaf);
        }
    }

    /// The rule base it runs.
    pub fn knowledge(&self) -> &'k Knowledge {
        self.knowledge
    }

    /// The compiled rule base.
    pub fn program(&self) -> &Program {
        &self.program
    }

    /// What is remembered.
    pub fn memory(&self) -> &Memory {
        &self.memory
    }

    /// The site's balances.
    pub fn balance(&self) -> &Balance {
        &self.balance
    }

    /// A number that changes whenever a fact does.
    pub fn version(&self) -> u64 {
        self.version
    }

    /// Takes in a row; rows come in the order of time.
    pub fn observe(&mut self, row: &Row) {
        self.memory.observe(row);
        self.update();
    }

    /// Moves the present forward without a new row.
    pub fn advance(&mut self, now: i64) {
        self.memory.advance(now);
        self.update();
    }

    /// Changes the memory by hand (what answers tell beyond rows) and brings every fact up to date.
    pub fn tell(&mut self, tell: impl FnOnce(&mut Memory)) {
        tell(&mut self.memory);
        self.balance.update(&mut self.memory);
        self.judge_all();
        self.sweep();
    }

    fn update(&mut self) {
        self.balance.update(&mut self.memory);
        for (derived, inputs) in &self.inputs {
            let doubtful = inputs.iter().any(|id| self.memory.is_doubtful(*id));
            self.memory.doubt(*derived, doubtful);
        }
        let changes = self.memory.changes().clone();
        for id in &changes.readings {
            self.judge_each(self.program.by_reading.get(usize::from(id.0)).cloned());
        }
        for id in &changes.signs {
            self.judge_each(self.program.by_sign.get(usize::from(id.0)).cloned());
        }
        for id in &changes.events {
            self.judge_each(self.program.by_event.get(usize::from(id.0)).cloned());
        }
        let now = self.memory.now();
        while let Some(Reverse((time, leaf))) = self.wakes.peek().copied() {
            if time > now {
                break;
            }
            self.wakes.pop();
            if self.until.get(leaf as usize).copied() == Some(time) {
                self.judge(leaf);
            }
        }
        self.sweep();
    }

    fn judge_each(&mut self, leaves: Option<Vec<u32>>) {
        for leaf in leaves.into_iter().flatten() {
            self.judge(leaf);
        }
    }

    fn judge(&mut self, leaf: u32) {
        let index = leaf as usize;
        let judged = self.program.leaves[index].judge(&self.memory);
        if judged.until != i64::MAX && self.until[index] != judged.until {
            self.wakes.push(Reverse((judged.until, leaf)));
        }
        self.until[index] = judged.until;
        let node = self.program.leaf_node[index] as usize;
        if self.facts[node] != judged.degree {
            self.facts[node] = judged.degree;
            self.version += 1;
            self.mark_parents(node);
        }
    }

    fn mark_parents(&mut self, node: usize) {
        for parent in &self.program.parents[node] {
            let parent = *parent as usize;
            self.dirty[parent] = true;
            self.first_dirty = self.first_dirty.min(parent);
        }
    }

    /// Parts come before wholes, so one sweep settles everything.
    fn sweep(&mut self) {
        for node in self.first_dirty..self.facts.len() {
            if !self.dirty[node] {
                continue;
            }
            self.dirty[node] = false;
            let fact = self.compute(node);
            if let Some(fact) = fact
                && fact != self.facts[node]
            {
                self.facts[node] = fact;
                self.version += 1;
                self.mark_parents(node);
            }
        }
        self.first_dirty = self.facts.len();
    }

    fn compute(&self, node: usize) -> Option<Degree> {
        let fact = |id: &NodeId| self.facts[*id as usize];
        Some(match &self.program.nodes[node] {
            Node::Leaf(_) => return None,
            Node::All(parts) => parts.iter().map(fact).fold(Degree::TRUE, Degree::and),
            Node::Any(parts) => parts.iter().map(fact).fold(Degree::FALSE, Degree::or),
            Node::Not(part) => fact(part).complement(),
            Node::NOf(n, parts) => Degree::nth_largest(*n, parts.iter().map(fact)),
        })
    }

    /// How true a finding is.
    pub fn finding(&self, id: FindingId) -> Degree {
        self.node(self.program.finding(id))
    }

    /// How true a piece of evidence is.
    pub fn evidence(&self, evidence: Evidence) -> Degree {
        self.node(self.program.evidence(evidence))
    }

    /// How true the n-th trigger of a cause is.
    pub fn trigger(&self, cause: CauseId, n: usize) -> Degree {
        self.node(
            self.program
                .trigger_node
                .get(cause.index())
                .and_then(|t| t.get(n))
                .copied(),
        )
    }

    fn node(&self, node: Option<NodeId>) -> Degree {
        node.and_then(|n| self.facts.get(n as usize))
            .copied()
            .unwrap_or(Degree::UNKNOWN)
    }

    /// Judges a test without parts that is not part of the compiled program (steps, cautions, rounds).
    pub fn judge_test(
        &self,
        test: &Test,
        site: &Site,
        limits: &Limits<'_>,
        standing: &impl Fn(&[CauseId]) -> f64,
    ) -> Degree {
        if let Test::Cause { causes, likely } = test {
            return Degree::of(standing(causes) >= *likely);
        }
        resolve(test, self.knowledge, site, limits)
            .judge(&self.memory)
            .degree
    }

    /// Judges one test by itself, for proofs.
    pub fn judge_leaf(&self, leaf: &super::Leaf) -> Judged {
        leaf.judge(&self.memory)
    }
}
