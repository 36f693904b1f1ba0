//! The proof of a cause or a finding in a log, as a tree from the whole down to the readings.

use super::Book;
use super::test::Tests;
use crate::assessment::{CauseProof, ProvenPiece};
use crate::engine::{Degree, Proof, Saw};
use crate::knowledge::{Evidence, FindingId, Test};
use crate::render::block::Block;
use crate::render::evidence::Words;

/// The proof of a cause.
pub fn cause(
    book: &Book<'_>,
    proof: &CauseProof<'_>,
    places: &[String],
    moment: i64,
) -> Vec<Block> {
    let k = book.knowledge;
    let cause = &k[proof.cause];
    let mut page = vec![Block::Head(format!(
        "{}: {}, probability {:.3} ({})",
        cause.name, proof.likely, proof.probability, cause.id
    ))];
    page.push(Block::Para(
        "In front of each line stands how true it is: from 0 (surely not) to 1 (surely), a range where not all is \
         known. The weights are natural-log odds for the cause."
            .to_owned(),
    ));
    if !proof.beside.is_empty() {
        let names: Vec<&str> = proof.beside.iter().map(|c| k[*c].id.as_str()).collect();
        page.push(Block::Para(format!(
            "It is weighed beside {}: what that explains anyway does not count for this one.",
            names.join(" and ")
        )));
    }
    let tree = Tree {
        tests: Tests::of(book),
        words: Words {
            knowledge: k,
            site: book.site,
            places,
            moment,
        },
    };
    tree.pieces("Likelier beforehand", &proof.triggers, &mut page);
    tree.pieces("What it would show", &proof.effects, &mut page);
    let unexplained = proof.unexplained.clone();
    Book::list(&mut page, "It does not explain", unexplained);
    page
}

/// The proof of a finding.
pub fn finding(
    book: &Book<'_>,
    id: FindingId,
    proof: &Proof<'_>,
    places: &[String],
    moment: i64,
) -> Vec<Block> {
    let finding = &book.knowledge[id];
    let tree = Tree {
        tests: Tests::of(book),
        words: Words {
            knowledge: book.knowledge,
            site: book.site,
            places,
            moment,
        },
    };
    let mut page = vec![Block::Head(format!(
        "{}: {} ({})",
        finding.name,
        degree(proof.degree),
        finding.id
    ))];
    tree.grow(proof, 0, &mut page);
    page
}

struct Tree<'a> {
    tests: Tests<'a>,
    words: Words<'a>,
}

impl Tree<'_> {
    fn pieces(&self, heading: &str, pieces: &[ProvenPiece<'_>], page: &mut Vec<Block>) {
        if pieces.is_empty() {
            return;
        }
        page.push(Block::Heading(heading.to_owned()));
        for piece in pieces {
            let name = match (piece.evidence, &piece.proof) {
                (Some(Evidence::Finding(id)), _) => {
                    let f = &self.words.knowledge[id];
                    format!("{} [{}]", f.name, f.id)
                }
                (Some(Evidence::Sign(id)), _) => {
                    let s = &self.words.knowledge.vocabulary[id];
                    format!("{} [{}]", s.name, s.id)
                }
                (None, Some(proof)) => self.tests.clause(proof.test),
                (None, None) => String::new(),
            };
            // A trigger without parts says what it saw on its own line.
            let alone = piece
                .proof
                .as_ref()
                .filter(|p| piece.evidence.is_none() && p.parts.is_empty());
            let seen = alone
                .and_then(|p| self.seen(p, &name))
                .map_or_else(String::new, |s| format!(": {s}"));
            let (weight, degree) = (piece.weight + 0.0, degree(piece.degree));
            page.push(Block::Branch(
                0,
                format!("weight {weight:+.2}  {degree}  {name}{seen}"),
            ));
            if let Some(proof) = piece.proof.as_ref().filter(|_| alone.is_none()) {
                self.grow(proof, 1, page);
            }
        }
    }

    fn grow(&self, proof: &Proof<'_>, depth: usize, page: &mut Vec<Block>) {
        let head = self.tests.head(proof.test);
        let seen = self
            .seen(proof, &head)
            .map_or_else(String::new, |s| format!(": {s}"));
        page.push(Block::Branch(
            depth,
            format!("{}  {head}{seen}", degree(proof.degree)),
        ));
        for part in &proof.parts {
            self.grow(part, depth + 1, page);
        }
    }

    fn seen(&self, proof: &Proof<'_>, head: &str) -> Option<String> {
        match proof.test {
            Test::Level { reading, .. }
            | Test::Changed { reading, .. }
            | Test::Unusual { reading, .. }
            | Test::Odd { reading, .. }
            | Test::Stuck { reading, .. }
            | Test::Disagree { reading, .. } => self.words.saw(*reading, &proof.saw, head),
            Test::Sign { .. } | Test::Event { .. } => match &proof.saw {
                Saw::At(time) => Some(self.words.time(*time)),
                _ => None,
            },
            _ => None,
        }
    }
}

/// How true, in a word or a number.
fn degree(degree: Degree) -> String {
    if degree.is_unknown() {
        "unknown".to_owned()
    } else if (degree.hi - degree.lo).abs() < 0.005 {
        format!("{:.2}", degree.lo + 0.0) // no negative zero
    } else {
        format!("{:.2}-{:.2}", degree.lo, degree.hi)
    }
}
