//! The outcome of a diagnosis, as plain values: everything a page or a script needs, and nothing of how it is shown.

use crate::course::Projection;
use crate::diagnosis::{Piece, Verdict};
use crate::knowledge::{CauseId, StepId, Urgency, When};
use crate::vocabulary::ReadingId;

/// Something that would tell, if it were looked at.
#[derive(Debug, Clone, PartialEq)]
pub struct Tell {
    /// Reading or sign id.
    pub id: String,
    /// Expected information about the cause, in bits.
    pub bits: f64,
}

/// One cause as it stands.
#[derive(Debug, Clone, PartialEq)]
pub struct CauseReport {
    /// Which.
    pub cause: CauseId,
    /// Its id.
    pub id: String,
    /// Its name, a sentence without full stop.
    pub name: String,
    /// Its family.
    pub family: String,
    /// Probability.
    pub probability: f64,
    /// The word for it ("likely").
    pub likely: String,
    /// How soon it harms.
    pub urgency: Urgency,
    /// The place it is seen at, where one is.
    pub place: Option<String>,
    /// What speaks for it, strongest first.
    pub evidence_for: Vec<Piece>,
    /// What speaks against it, strongest first.
    pub evidence_against: Vec<Piece>,
    /// What would tell most.
    pub would_tell: Vec<Tell>,
    /// Alarming findings it does not explain, as clauses.
    pub leaves_unexplained: Vec<String>,
}

/// A family whose members can't be told apart and that leads the page as a whole.
#[derive(Debug, Clone, PartialEq)]
pub struct LeadingFamily {
    /// Its id.
    pub id: String,
    /// Its name, a sentence without full stop.
    pub name: String,
    /// Probability that any of its causes is there.
    pub probability: f64,
    /// The word for it.
    pub likely: String,
    /// Ids of the causes that can't be told apart, likeliest first.
    pub members: Vec<String>,
    /// Ids of the steps that help under every one of them, best first.
    pub first_steps: Vec<String>,
}

/// What shows that a step worked.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct VerifyReport {
    /// Reading or sign id.
    pub id: String,
    /// `rising`, `falling`, `steady`, `gone`.
    pub direction: String,
    /// Unix seconds by which it should.
    pub by: i64,
}

/// One step to take.
#[derive(Debug, Clone, PartialEq)]
pub struct StepReport {
    /// Which.
    pub step: StepId,
    /// Its id.
    pub id: String,
    /// One imperative sentence.
    pub text: String,
    /// Why and how.
    pub detail: String,
    /// When.
    pub when: When,
    /// Ids of the causes it is for, likeliest first.
    pub because: Vec<String>,
    /// What to look at first.
    pub check_first: Vec<String>,
    /// What shows that it worked.
    pub verify: Option<VerifyReport>,
    /// Kind of `gillside pace` that plans it.
    pub pace: Option<String>,
    /// Expected good less expected harm.
    pub worth: f64,
}

/// Something to leave alone.
#[derive(Debug, Clone, PartialEq)]
pub struct Avoid {
    /// Step id.
    pub id: String,
    /// The words.
    pub text: String,
    /// Ids of the causes under which it would harm.
    pub because: Vec<String>,
    /// Expected harm.
    pub harm: f64,
}

/// Something that should be measured or looked at.
#[derive(Debug, Clone, PartialEq)]
pub struct Missing {
    /// Reading or sign id.
    pub id: String,
    /// Why.
    pub why: String,
}

/// A derived reading as it stands.
#[derive(Debug, Clone, PartialEq)]
pub struct Derived {
    /// Which.
    pub reading: ReadingId,
    /// Its id.
    pub id: String,
    /// Its value.
    pub value: f64,
}

/// A number of the shipped rule base that this farm has changed.
#[derive(Debug, Clone, PartialEq)]
pub struct Override {
    /// What was changed.
    pub id: String,
    /// From what.
    pub from: String,
    /// To what.
    pub to: String,
    /// Whether that is less careful.
    pub loosens: bool,
}

/// The whole outcome.
#[derive(Debug, Clone, PartialEq)]
pub struct Assessment {
    /// Name of the site.
    pub site: Option<String>,
    /// Unix seconds of the moment it is about.
    pub as_of: i64,
    /// Unix seconds of the last row; `None` without any.
    pub last_row: Option<i64>,
    /// How old the last row is in seconds, when that is more than a shift.
    pub last_row_age: Option<i64>,
    /// What the whole asks for.
    pub verdict: Verdict,
    /// The findings of direct danger that hold, as clauses.
    pub dangers: Vec<String>,
    /// What to do before anything is explained; empty unless fish may die within minutes.
    pub first_aid: Vec<StepReport>,
    /// Minutes there are at the least, where the site file allows to reckon them.
    pub minutes_left: Option<u32>,
    /// Causes above one percent, best first.
    pub causes: Vec<CauseReport>,
    /// The family whose members can't be told apart and lead together, if one does.
    pub leading_family: Option<LeadingFamily>,
    /// The question that would tell the leading causes apart: reading or sign id and the question.
    pub best_question: Option<(String, String)>,
    /// Probability that nothing is wrong.
    pub nothing_wrong: f64,
    /// Steps, best first within each `when`.
    pub steps: Vec<StepReport>,
    /// What to leave alone, most harmful first.
    pub avoid: Vec<Avoid>,
    /// What is due or would tell.
    pub missing: Vec<Missing>,
    /// Derived readings that are good now.
    pub derived: Vec<Derived>,
    /// When limits will be passed if nothing is done.
    pub projections: Vec<Projection>,
    /// What is odd about the site file, as sentences.
    pub site_notes: Vec<String>,
    /// What this farm has changed in the rule base.
    pub overrides: Vec<Override>,
    /// Ids and texts of the cautions that apply.
    pub cautions: Vec<(String, String)>,
}
