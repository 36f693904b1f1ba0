//! What a cause or a finding rests on in a log, down to the readings.

use super::Assessor;
use crate::engine::{Degree, Engine, Proof};
use crate::knowledge::{CauseId, Evidence, FindingId};

/// One piece for or against a cause, with its proof.
#[derive(Debug, Clone)]
pub struct ProvenPiece<'k> {
    /// The finding or sign; `None` for what makes the cause likelier beforehand.
    pub evidence: Option<Evidence>,
    /// How true it is.
    pub degree: Degree,
    /// Natural-log odds for the cause; 0 when it is too light to count.
    pub weight: f64,
    /// The proof of its test; `None` for a sign, which is seen or not.
    pub proof: Option<Proof<'k>>,
}

/// A cause, and everything that speaks for and against it.
#[derive(Debug, Clone)]
pub struct CauseProof<'k> {
    /// Which.
    pub cause: CauseId,
    /// Probability.
    pub probability: f64,
    /// The word for it.
    pub likely: String,
    /// Other causes of the likeliest set that holds it: what they explain is not counted for this one.
    pub beside: Vec<CauseId>,
    /// What makes it likelier beforehand, in the order of the rule base.
    pub triggers: Vec<ProvenPiece<'k>>,
    /// What it would show, heaviest first.
    pub effects: Vec<ProvenPiece<'k>>,
    /// Alarming findings it does not explain.
    pub unexplained: Vec<String>,
}

impl<'k> Assessor<'k> {
    /// The proof of a cause as the facts stand.
    pub fn prove_cause(&self, engine: &Engine<'k>, id: CauseId) -> CauseProof<'k> {
        let ranking = self.review(engine).ranking;
        let books = self
            .doctor()
            .books(engine, self.site(), self.limits(), &ranking);
        let (pro, contra) = books.sheet(id);
        let weight = |evidence: Evidence| {
            let mut all = pro.iter().chain(&contra);
            all.find(|p| p.evidence == Some(evidence))
                .map_or(0.0, |p| p.weight)
        };
        let cause = &self.knowledge()[id];
        let triggers = cause.triggers.iter().enumerate().map(|(n, trigger)| {
            let proof = books.prove(&trigger.when);
            ProvenPiece {
                evidence: None,
                degree: proof.degree,
                weight: books.trigger_weight(id, n),
                proof: Some(proof),
            }
        });
        let mut effects: Vec<ProvenPiece<'k>> = cause
            .effects
            .iter()
            .map(|effect| ProvenPiece {
                evidence: Some(effect.evidence),
                degree: engine.evidence(effect.evidence),
                weight: weight(effect.evidence),
                proof: match effect.evidence {
                    Evidence::Finding(id) => Some(books.prove(&self.knowledge()[id].when)),
                    Evidence::Sign(_) => None,
                },
            })
            .collect();
        effects.sort_by(|a, b| b.weight.abs().total_cmp(&a.weight.abs()));
        let probability = ranking.of(id);
        CauseProof {
            cause: id,
            probability,
            likely: self.likely(probability),
            beside: ranking.best_with(id).map_or_else(Vec::new, |set| {
                set.causes.iter().copied().filter(|c| *c != id).collect()
            }),
            triggers: triggers.collect(),
            effects,
            unexplained: books.unexplained(id),
        }
    }

    /// The proof of a finding as the facts stand.
    pub fn prove_finding(&self, engine: &Engine<'k>, id: FindingId) -> Proof<'k> {
        let ranking = self.review(engine).ranking;
        let books = self
            .doctor()
            .books(engine, self.site(), self.limits(), &ranking);
        books.prove(&self.knowledge()[id].when)
    }
}
