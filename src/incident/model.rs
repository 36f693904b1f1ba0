//! An incident as its file tells it. Times are unix seconds.

use super::again::Again;
use super::open::{made_by, ranking};
use crate::assessment::Assessment;
use crate::knowledge::Knowledge;

/// What made the ranking: versions.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct MadeBy {
    /// Of the program.
    pub version: String,
    /// Digest of the rule base.
    pub knowledge: String,
    /// The folder of house rules, where there were any.
    pub house_rules: Option<String>,
}

/// A cause as it was ranked.
#[derive(Debug, Clone, PartialEq)]
pub struct Ranked {
    /// Cause id.
    pub id: String,
    /// Its name then.
    pub name: String,
    /// Its probability then, 0 to 1.
    pub probability: f64,
}

/// What shows that a step worked.
#[derive(Debug, Clone, PartialEq)]
pub struct Checked {
    /// Reading or sign id.
    pub id: String,
    /// `rising`, `falling`, `steady` or `gone`.
    pub direction: String,
    /// By when.
    pub due: i64,
    /// What the reading was when the step was chosen or done, in its kept unit.
    pub from: Option<f64>,
}

/// A step that was chosen.
#[derive(Debug, Clone, PartialEq)]
pub struct Taken {
    /// Step id.
    pub id: String,
    /// What to do.
    pub text: String,
    /// `now`, `hours`, `days` or `recovery`.
    pub when: String,
    /// Ids of the causes it is for.
    pub because: Vec<String>,
    /// What to look at first.
    pub check_first: Vec<String>,
    /// What shows that it worked.
    pub verify: Option<Checked>,
    /// When it was done; `None`: not yet.
    pub done: Option<i64>,
    /// Who did it.
    pub by: Option<String>,
}

impl Taken {
    /// Whether it is for the first hours, not for later days.
    pub fn is_soon(&self) -> bool {
        ["now", "hours"].contains(&self.when.as_str())
    }
}

/// Something to leave alone.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Avoided {
    /// Step id.
    pub id: String,
    /// The words.
    pub text: String,
}

/// One step of a paced correction.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct PlanStep {
    /// When.
    pub at: i64,
    /// What to do.
    pub text: String,
    /// Only go on if.
    pub go_on_if: Vec<String>,
    /// Stop if.
    pub stop_if: Vec<String>,
    /// When it was done.
    pub done: Option<i64>,
    /// Who did it.
    pub by: Option<String>,
}

/// Somebody's words.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Note {
    /// When.
    pub time: i64,
    /// Who.
    pub by: Option<String>,
    /// What.
    pub text: String,
}

/// One time it was followed up.
#[derive(Debug, Clone, PartialEq)]
pub struct Followed {
    /// When.
    pub time: i64,
    /// Who.
    pub by: Option<String>,
    /// The verdict then.
    pub verdict: String,
    /// What was found, a sentence each.
    pub found: Vec<String>,
    /// The likeliest causes then.
    pub ranking: Vec<Ranked>,
    /// What made it.
    pub made_by: MadeBy,
}

/// How it ended.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Closed {
    /// When.
    pub time: i64,
    /// Who.
    pub by: Option<String>,
    /// The confirmed cause; `None` where nobody knows.
    pub cause: Option<String>,
    /// What came of it.
    pub outcome: Option<String>,
}

/// One time it was opened again, with how it had been closed before.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Reopened {
    /// When.
    pub time: i64,
    /// Who.
    pub by: Option<String>,
    /// Why.
    pub why: Option<String>,
    /// When it had been closed.
    pub was_closed: i64,
    /// The cause it had been closed with.
    pub was_cause: Option<String>,
}

/// An incident.
#[derive(Debug, Clone, PartialEq)]
pub struct Incident {
    /// The name of its file, without `.toml`.
    pub id: String,
    /// What it is about.
    pub title: String,
    /// When it was opened.
    pub opened: i64,
    /// Who opened it.
    pub by: Option<String>,
    /// The verdict then.
    pub verdict: String,
    /// What was seen, a clause each.
    pub seen: Vec<String>,
    /// Ids of the findings and signs that held.
    pub findings: Vec<String>,
    /// What made the ranking.
    pub made_by: MadeBy,
    /// The causes then, likeliest first.
    pub ranking: Vec<Ranked>,
    /// Steps chosen, in the order to take them.
    pub steps: Vec<Taken>,
    /// What to leave alone.
    pub avoid: Vec<Avoided>,
    /// The paced correction.
    pub plan: Vec<PlanStep>,
    /// Notes, oldest first.
    pub notes: Vec<Note>,
    /// Each time it was followed up, oldest first.
    pub follows: Vec<Followed>,
    /// Each time it was opened again, oldest first.
    pub reopened: Vec<Reopened>,
    /// How it ended; `None`: it is open.
    pub closed: Option<Closed>,
}

impl Incident {
    /// Whether it is still open.
    pub fn is_open(&self) -> bool {
        self.closed.is_none()
    }
}

impl Followed {
    /// What a follow-up puts down; time and name come from whoever writes it.
    pub fn of(
        assessment: &Assessment,
        knowledge: &Knowledge,
        found: Vec<String>,
        again: Option<&Again>,
    ) -> Self {
        let ranking = match again {
            None => ranking(assessment),
            Some(again) => again
                .causes
                .iter()
                .take(4)
                .map(|(id, name, _, after)| Ranked {
                    id: id.clone(),
                    name: name.clone(),
                    probability: (after * 1e4).round() / 1e4,
                })
                .collect(),
        };
        Self {
            time: 0,
            by: None,
            verdict: assessment.verdict.word().to_owned(),
            found,
            ranking,
            made_by: made_by(knowledge),
        }
    }
}
