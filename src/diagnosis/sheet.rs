//! The balance sheet of a cause (Good 1950; Spiegelhalter & Knill-Jones 1984): each piece for and against it with its
//! weight, and what it leaves unexplained.

use super::evidence::{Table, log_likelihood, shows};
use super::odds;
use super::rank::{EXPLAINED, Ranking};
use crate::engine::{Degree, Engine, Limits, Proof, Saw, prove};
use crate::knowledge::{CauseId, Evidence, Knowledge, Test};
use crate::site::Site;
use crate::vocabulary::ReadingId;

/// Pieces lighter than this are not worth a line.
const WORTH_A_LINE: f64 = 0.05;

/// One line of a balance sheet.
#[derive(Debug, Clone, PartialEq)]
pub struct Piece {
    /// What it is; `None` for what makes the cause likelier beforehand (a trigger).
    pub evidence: Option<Evidence>,
    /// A clause.
    pub clause: String,
    /// It was looked for and is not so.
    pub absent: bool,
    /// The reading it rests on and what was seen of it.
    pub saw: Option<(ReadingId, Saw)>,
    /// Natural-log odds for the cause.
    pub weight: f64,
    /// Keys of sources.
    pub source: Vec<String>,
}

/// What the sheet is drawn up from.
pub struct Books<'a, 'k> {
    pub(super) knowledge: &'k Knowledge,
    pub(super) engine: &'a Engine<'k>,
    pub(super) site: &'a Site,
    pub(super) limits: &'a Limits<'k>,
    pub(super) table: &'a Table,
    pub(super) degrees: Vec<Degree>,
    pub(super) ranking: &'a Ranking,
}

impl<'k> Books<'_, 'k> {
    /// Pieces for and against a cause, heaviest first. Weights are against the rest of the likeliest set that holds it,
    /// so that what another cause explains anyway is not counted twice.
    pub fn sheet(&self, cause: CauseId) -> (Vec<Piece>, Vec<Piece>) {
        let rest: Vec<CauseId> = self.ranking.best_with(cause).map_or_else(Vec::new, |set| {
            set.causes.iter().copied().filter(|c| *c != cause).collect()
        });
        let mut pieces = self.triggers(cause);
        for (index, _) in &self.table.by_cause[cause.index()] {
            let (Some(item), Some(weight)) = (
                self.table.items.get(*index),
                self.ranking.weights.get(*index),
            ) else {
                continue;
            };
            let seen = |with: bool| {
                item.causes
                    .iter()
                    .filter(|(c, _)| rest.contains(c) || (with && *c == cause))
                    .map(|(_, s)| *s)
                    .collect::<Vec<_>>()
            };
            let with = log_likelihood(*weight, shows(item.background, seen(true).into_iter()));
            let without = log_likelihood(*weight, shows(item.background, seen(false).into_iter()));
            let absent = self.degrees.get(*index).is_some_and(|d| d.lo + d.hi < 1.0);
            let effect = self.knowledge[cause]
                .effects
                .iter()
                .find(|e| e.evidence == item.evidence);
            pieces.push(Piece {
                evidence: Some(item.evidence),
                weight: with - without,
                absent,
                source: effect.map(|e| e.source.clone()).unwrap_or_default(),
                ..self.piece(item.evidence)
            });
        }
        pieces.retain(|p| p.weight.abs() >= WORTH_A_LINE);
        pieces.sort_by(|a, b| b.weight.abs().total_cmp(&a.weight.abs()));
        pieces.into_iter().partition(|p| p.weight > 0.0)
    }

    fn triggers(&self, cause: CauseId) -> Vec<Piece> {
        let triggers = &self.knowledge[cause].triggers;
        triggers
            .iter()
            .enumerate()
            .map(|(n, trigger)| {
                let proof = self.prove(&trigger.when);
                let (clause, saw) = self.describe(&proof);
                Piece {
                    evidence: None,
                    clause,
                    absent: proof.degree.lo + proof.degree.hi < 1.0,
                    saw,
                    weight: odds::trigger(self.engine, cause, n),
                    source: trigger.source.clone(),
                }
            })
            .collect()
    }

    fn piece(&self, evidence: Evidence) -> Piece {
        let (clause, saw) = match evidence {
            Evidence::Finding(id) => {
                let proof = self.prove(&self.knowledge[id].when);
                (self.knowledge[id].name.clone(), self.describe(&proof).1)
            }
            Evidence::Sign(id) => (self.knowledge.vocabulary[id].name.clone(), None),
        };
        Piece {
            evidence: Some(evidence),
            clause,
            absent: false,
            saw,
            weight: 0.0,
            source: Vec::new(),
        }
    }

    /// What the n-th trigger of a cause does to the log of its odds.
    pub fn trigger_weight(&self, cause: CauseId, n: usize) -> f64 {
        odds::trigger(self.engine, cause, n)
    }

    /// The proof of a test.
    pub fn prove(&self, test: &'k Test) -> Proof<'k> {
        prove(test, self.engine, self.site, self.limits, &|causes| {
            super::verdict::any_of(self.ranking, causes)
        })
    }

    /// The clause and the reading of the part that decides a test.
    fn describe(&self, proof: &Proof<'k>) -> (String, Option<(ReadingId, Saw)>) {
        let words = &self.knowledge.vocabulary;
        let of = |id: ReadingId| (words[id].name.clone(), Some((id, proof.saw.clone())));
        let sum = |p: &Proof<'_>| p.degree.lo + p.degree.hi;
        match proof.test {
            Test::Level { reading, .. }
            | Test::Changed { reading, .. }
            | Test::Unusual { reading, .. }
            | Test::Odd { reading, .. }
            | Test::Stuck { reading, .. }
            | Test::Disagree { reading, .. } => of(*reading),
            Test::Sign { sign, .. } => (words[*sign].name.clone(), None),
            Test::Event { event, .. } => (words[*event].name.clone(), None),
            Test::Finding(id) => {
                let saw = proof.parts.first().and_then(|p| self.describe(p).1);
                (self.knowledge[*id].name.clone(), saw)
            }
            Test::Site { key, .. } => (format!("the site file's `{key}`"), None),
            Test::Cause { .. } => ("how likely a cause is".to_owned(), None),
            Test::All(_) if proof.degree.lo + proof.degree.hi >= 1.0 => {
                let clauses: Vec<_> = proof.parts.iter().map(|p| self.describe(p)).collect();
                let saw = clauses.iter().find_map(|c| c.1.clone());
                let words: Vec<String> = clauses
                    .into_iter()
                    .zip(&proof.parts)
                    .map(|(c, p)| {
                        if matches!(p.test, Test::Not(_)) {
                            format!("not: {}", c.0)
                        } else {
                            c.0
                        }
                    })
                    .collect();
                (words.join(", and "), saw)
            }
            Test::All(_) => {
                self.decisive(proof.parts.iter().min_by(|a, b| sum(a).total_cmp(&sum(b))))
            }
            Test::Any(_) | Test::NOf(..) => {
                self.decisive(proof.parts.iter().max_by(|a, b| sum(a).total_cmp(&sum(b))))
            }
            Test::Not(_) => self.decisive(proof.parts.first()),
        }
    }

    fn decisive(&self, part: Option<&Proof<'k>>) -> (String, Option<(ReadingId, Saw)>) {
        part.map_or_else(|| (String::new(), None), |p| self.describe(p))
    }

    /// Alarming findings that this cause by itself hardly shows.
    pub fn unexplained(&self, cause: CauseId) -> Vec<String> {
        self.table
            .items
            .iter()
            .zip(&self.degrees)
            .filter(|(item, degree)| {
                let seen = item
                    .causes
                    .iter()
                    .filter(|(c, _)| *c == cause)
                    .map(|(_, s)| *s);
                item.alarming && degree.lo >= 0.5 && shows(item.background, seen) < EXPLAINED
            })
            .map(|(item, _)| self.piece(item.evidence).clause)
            .collect()
    }

    /// The place a cause's strongest local evidence was seen at, by number.
    pub fn place(&self, pieces: &[Piece]) -> Option<u16> {
        pieces.iter().find_map(|p| match &p.saw {
            Some((
                id,
                Saw::Value { place, .. } | Saw::Moved { place, .. } | Saw::Against { place, .. },
            )) if self.knowledge.vocabulary[*id].local && *place > 0 => Some(*place - 1),
            _ => None,
        })
    }
}
