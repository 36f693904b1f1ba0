//! What is most likely wrong: joint ranking of causes, the balance sheet, the verdict, and what would tell most.
//!
//! `evidence` is the table of what may be seen and how often under which cause, `odds` what is likelier beforehand,
//! `rank` scores sets of causes, `verdict` decides what the ranking and the direct dangers ask for, `sheet` says what
//! speaks for and against, `tell` what would tell most. This room never prints and never reads a clock.

mod evidence;
mod odds;
mod rank;
mod sheet;
mod tell;
mod verdict;

use crate::engine::{Degree, Engine, Limits};
use crate::knowledge::{CauseId, Knowledge};
use crate::site::Site;

pub use evidence::{Item, Table, shows};
pub use rank::{Ranking, Scored};
pub use sheet::{Books, Piece};
pub use tell::Told;
pub use verdict::{Decision, Verdict};

/// What a diagnosis is made on: a log that somebody reviews, or a walk that somebody started because of something seen.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Occasion {
    /// A log is reviewed.
    Review,
    /// Somebody walks up to the tank.
    Walk,
}

impl Occasion {
    /// How likely it is beforehand that anything is wrong.
    fn incident(self, knowledge: &Knowledge) -> f64 {
        match self {
            Occasion::Review => knowledge.scales.incident_review,
            Occasion::Walk => knowledge.scales.incident_walk,
        }
    }

    /// From which summed probability on of any cause it is worth watching.
    fn watch(self, knowledge: &Knowledge) -> f64 {
        match self {
            Occasion::Review => knowledge.scales.watch,
            Occasion::Walk => knowledge.scales.watch_walk,
        }
    }
}

/// Diagnoses farms of one rule base.
#[derive(Debug, Clone)]
pub struct Doctor<'k> {
    knowledge: &'k Knowledge,
    occasion: Occasion,
    table: Table,
}

impl<'k> Doctor<'k> {
    /// A doctor who knows this rule base and what the diagnosis is made on.
    pub fn new(knowledge: &'k Knowledge, occasion: Occasion) -> Self {
        Self {
            knowledge,
            occasion,
            table: Table::new(knowledge),
        }
    }

    /// The table of evidence.
    pub fn table(&self) -> &Table {
        &self.table
    }

    /// How true every piece of evidence is.
    pub fn degrees(&self, engine: &Engine<'_>) -> Vec<Degree> {
        self.table.degrees(engine)
    }

    /// Ranks the causes.
    pub fn rank(&self, engine: &Engine<'_>) -> Ranking {
        rank::rank(
            &self.table,
            &self.degrees(engine),
            &odds::log_odds(
                self.knowledge,
                engine,
                self.occasion.incident(self.knowledge),
            ),
            self.knowledge.scales.second_cause,
            self.knowledge.scales.evidence,
        )
    }

    /// Decides what the ranking and the direct dangers ask for. `due`: routine readings are overdue.
    pub fn decide(&self, engine: &Engine<'k>, ranking: &Ranking, due: bool) -> Decision<'k> {
        verdict::decide(
            self.knowledge,
            engine,
            ranking,
            self.occasion.watch(self.knowledge),
            due,
        )
    }

    /// What would tell most.
    pub fn tell(&self, engine: &Engine<'_>, ranking: &Ranking) -> Told {
        tell::tell(
            self.knowledge,
            engine,
            &self.table,
            &self.degrees(engine),
            ranking,
        )
    }

    /// The books from which balance sheets are drawn up.
    pub fn books<'a>(
        &'a self,
        engine: &'a Engine<'k>,
        site: &'a Site,
        limits: &'a Limits<'k>,
        ranking: &'a Ranking,
    ) -> Books<'a, 'k> {
        Books {
            knowledge: self.knowledge,
            engine,
            site,
            limits,
            table: &self.table,
            degrees: self.degrees(engine),
            ranking,
        }
    }

    /// The probability that a cause of this family is there.
    pub fn family(&self, ranking: &Ranking, family: &str) -> f64 {
        verdict::family(self.knowledge, ranking, family)
    }

    /// The probability that one of these causes is there.
    pub fn any_of(ranking: &Ranking, causes: &[CauseId]) -> f64 {
        verdict::any_of(ranking, causes)
    }
}
