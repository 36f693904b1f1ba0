//! What was seen, in words: what speaks for the leading causes, each thing once.

use super::Report;
use super::evidence::Words;

/// So many causes, and so many clauses in all.
const CAUSES: usize = 3;
const MOST: usize = 8;

/// Dangers, then the strongest evidence for the leading causes.
pub fn seen(report: &Report<'_>) -> Vec<String> {
    let a = report.assessment;
    let words = Words::of(report);
    let mut all = a.dangers.clone();
    let pieces = a
        .causes
        .iter()
        .take(CAUSES)
        .flat_map(|c| &c.evidence_for)
        .filter(|p| !p.absent);
    let mut weighed: Vec<(f64, String)> = pieces.map(|p| (p.weight, words.piece(p))).collect();
    weighed.sort_by(|a, b| b.0.total_cmp(&a.0));
    for (_, clause) in weighed {
        if all.len() < MOST && !all.contains(&clause) {
            all.push(clause);
        }
    }
    all
}
