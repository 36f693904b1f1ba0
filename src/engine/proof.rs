//! What a fact rests on: the same test evaluated part by part, with what each part saw.

use super::compile::resolve;
use super::leaf::Saw;
use super::{Degree, Engine, Limits};
use crate::knowledge::{CauseId, Test};
use crate::site::Site;

/// A test, how true it is, what it saw, and its parts.
#[derive(Debug, Clone)]
pub struct Proof<'k> {
    /// The test.
    pub test: &'k Test,
    /// How true.
    pub degree: Degree,
    /// What it saw, for tests without parts.
    pub saw: Saw,
    /// The proofs of its parts; of a finding, the proof of what it follows from.
    pub parts: Vec<Proof<'k>>,
}

/// Evaluates a test from the ground up. `standing` gives the probability of causes, for tests that may ask for it.
pub fn prove<'k>(
    test: &'k Test,
    engine: &Engine<'k>,
    site: &Site,
    limits: &Limits<'_>,
    standing: &impl Fn(&[CauseId]) -> f64,
) -> Proof<'k> {
    let inner = |tests: &'k [Test]| -> Vec<Proof<'k>> {
        tests
            .iter()
            .map(|t| prove(t, engine, site, limits, standing))
            .collect()
    };
    let whole = |degree: Degree, parts: Vec<Proof<'k>>| Proof {
        test,
        degree,
        saw: Saw::Nothing,
        parts,
    };
    let degrees = |parts: &[Proof<'k>]| parts.iter().map(|p| p.degree).collect::<Vec<_>>();
    match test {
        Test::All(tests) => {
            let parts = inner(tests);
            whole(
                degrees(&parts).into_iter().fold(Degree::TRUE, Degree::and),
                parts,
            )
        }
        Test::Any(tests) => {
            let parts = inner(tests);
            whole(
                degrees(&parts).into_iter().fold(Degree::FALSE, Degree::or),
                parts,
            )
        }
        Test::NOf(n, tests) => {
            let parts = inner(tests);
            whole(Degree::nth_largest(*n, degrees(&parts).into_iter()), parts)
        }
        Test::Not(part) => {
            let part = prove(part, engine, site, limits, standing);
            whole(part.degree.complement(), vec![part])
        }
        Test::Finding(id) => {
            let ground = prove(
                &engine.knowledge()[*id].when,
                engine,
                site,
                limits,
                standing,
            );
            whole(engine.finding(*id), vec![ground])
        }
        Test::Cause { causes, likely } => {
            let degree = Degree::of(standing(causes) >= *likely);
            whole(degree, Vec::new())
        }
        _ => {
            let judged = engine.judge_leaf(&resolve(test, engine.knowledge(), site, limits));
            Proof {
                test,
                degree: judged.degree,
                saw: judged.saw,
                parts: Vec::new(),
            }
        }
    }
}
