//! What the rule base is made of. Field by field this is `knowledge/README.md`.

use serde::{Deserialize, Serialize};
use std::collections::BTreeMap;

use super::{CauseId, FindingId, LimitLevel, Side, StepId, Test};
use crate::fault::Place;
use crate::vocabulary::{EventId, ReadingId, SignId, Vocabulary};

/// How soon something harms.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
pub enum Urgency {
    /// Plants, stock growth.
    Weeks,
    /// Trouble within days.
    Days,
    /// Fish may suffer within hours.
    Hours,
    /// Fish may die within minutes.
    Minutes,
}

impl Urgency {
    /// The word of the contract.
    pub fn word(self) -> &'static str {
        match self {
            Urgency::Weeks => "weeks",
            Urgency::Days => "days",
            Urgency::Hours => "hours",
            Urgency::Minutes => "minutes",
        }
    }

    /// From the word of the contract.
    pub fn from_word(word: &str) -> Option<Self> {
        [Self::Weeks, Self::Days, Self::Hours, Self::Minutes]
            .into_iter()
            .find(|u| u.word() == word)
    }
}

/// When a step is due.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
pub enum When {
    /// In the first minutes.
    Now,
    /// The same day.
    Hours,
    /// Over the next days.
    Days,
    /// Once it gets better.
    Recovery,
}

impl When {
    /// The word of the contract.
    pub fn word(self) -> &'static str {
        match self {
            When::Now => "now",
            When::Hours => "hours",
            When::Days => "days",
            When::Recovery => "recovery",
        }
    }

    /// From the word of the contract.
    pub fn from_word(word: &str) -> Option<Self> {
        [Self::Now, Self::Hours, Self::Days, Self::Recovery]
            .into_iter()
            .find(|w| w.word() == word)
    }
}

/// What follows from readings, signs, events and other findings.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Finding {
    /// Kebab-case id.
    pub id: String,
    /// A clause for people.
    pub name: String,
    /// When it holds.
    pub when: Test,
    /// Share of ordinary days on which it holds with nothing wrong.
    pub background: f64,
    /// Findings and signs of one group tell the same thing; empty for none.
    pub group: String,
    /// A cause must explain it.
    pub alarming: bool,
    /// Danger whatever the cause.
    pub danger: Option<Urgency>,
    /// Fish show distress: a cause that harms in hours is then a matter of now.
    pub distress: bool,
    /// Keys of sources.
    pub source: Vec<String>,
    /// Where it is written.
    pub place: Option<Place>,
}

/// What an effect looks at.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum Evidence {
    /// A finding.
    Finding(FindingId),
    /// A sign.
    Sign(SignId),
}

/// What makes a cause likelier before any effect is seen.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Trigger {
    /// When it holds.
    pub when: Test,
    /// Times the odds when it holds.
    pub odds_times: f64,
    /// Times the odds when it is known not to hold.
    pub odds_times_if_not: f64,
    /// Keys of sources.
    pub source: Vec<String>,
}

/// What a cause does, and how often it shows.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Effect {
    /// The finding or sign.
    pub evidence: Evidence,
    /// Share of such incidents in which it shows; below the background it makes the finding rarer.
    pub seen_in: f64,
    /// Delay from cause to effect, in words (`1-4 d`).
    pub delay: String,
    /// Keys of sources.
    pub source: Vec<String>,
}

/// Which reading or sign shows recovery, which way, by when.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Verify {
    /// Reading or sign id.
    pub id: String,
    /// `rising`, `falling`, `steady` or `gone`.
    pub direction: String,
    /// Seconds.
    pub by: i64,
}

/// A cause that looks like another.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Lookalike {
    /// The other one.
    pub cause: CauseId,
    /// What separates the two.
    pub tell: String,
}

/// What may be wrong.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Cause {
    /// Contract id.
    pub id: String,
    /// A sentence without its full stop.
    pub name: String,
    /// Siblings that a log often cannot tell apart.
    pub family: String,
    /// How soon it harms.
    pub urgency: Urgency,
    /// Share of incidents that are this, nothing else known.
    pub usual: f64,
    /// How it works.
    pub mechanism: String,
    /// What happens next.
    pub outlook: String,
    /// How to know that it gets better.
    pub better: String,
    /// When to stop and call whom.
    pub call: String,
    /// What shows recovery.
    pub verify: Option<Verify>,
    /// What makes it likelier beforehand.
    pub triggers: Vec<Trigger>,
    /// What it does.
    pub effects: Vec<Effect>,
    /// What it is taken for.
    pub lookalikes: Vec<Lookalike>,
    /// Keys of sources.
    pub source: Vec<String>,
    /// Where it is written.
    pub place: Option<Place>,
}

/// What to do, or to leave alone.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Step {
    /// Kebab-case id.
    pub id: String,
    /// One imperative sentence.
    pub text: String,
    /// Why and how.
    pub detail: String,
    /// When it is due.
    pub when: When,
    /// Belongs to what is said first when fish may die within minutes.
    pub first_aid: bool,
    /// The line for people that opens first aid.
    pub people_first: bool,
    /// Never advised, only ever named under avoid.
    pub temptation: bool,
    /// It only looks or measures: no harm under any cause.
    pub looks: bool,
    /// The law or a life hangs on it: when its `needs` holds it leads its list and is never left out.
    pub pinned: bool,
    /// Steps of one choice stand for one another, and only the one worth most is said; empty for none.
    pub choice: String,
    /// Minutes of work.
    pub effort: f64,
    /// Good done under a cause, 0 to 1.
    pub helps: BTreeMap<CauseId, f64>,
    /// Harm done under a cause, 0 to 1.
    pub harms: BTreeMap<CauseId, f64>,
    /// Must hold.
    pub needs: Option<Test>,
    /// Forbids it.
    pub never_if: Option<Test>,
    /// What to look at first when that is unknown.
    pub check_first: String,
    /// Site `[equipment]` key it needs.
    pub equipment: Option<String>,
    /// What shows that it worked.
    pub verify: Option<Verify>,
    /// The planner that paces it.
    pub pace: Option<String>,
    /// The words when it belongs under avoid.
    pub avoid_text: String,
    /// Keys of sources.
    pub source: Vec<String>,
    /// Where it is written.
    pub place: Option<Place>,
}

/// What is said with every answer it applies to.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Caution {
    /// Kebab-case id.
    pub id: String,
    /// The words.
    pub text: String,
    /// `people`, `fish`, `food` or `law`.
    pub about: String,
    /// With every answer.
    pub always: bool,
    /// When it applies.
    pub when: Option<Test>,
    /// Keys of sources.
    pub source: Vec<String>,
}

/// One species and its limits.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Species {
    /// Contract id.
    pub id: String,
    /// What people call it.
    pub name: String,
    /// A warm-water fish.
    pub warm: bool,
    /// Limits by reading, level and side.
    pub limits: BTreeMap<(ReadingId, u8, u8), f64>,
    /// Sources by reading.
    pub sources: BTreeMap<ReadingId, Vec<String>>,
    /// Milligrams of oxygen per kilogram and hour, fed, where known.
    pub oxygen_use: Option<f64>,
    /// Breathes air as well.
    pub breathes_air: bool,
}

impl Species {
    /// One limit, in the unit of the reading.
    pub fn limit(&self, reading: ReadingId, level: LimitLevel, side: Side) -> Option<f64> {
        self.limits
            .get(&(reading, level as u8, side as u8))
            .copied()
    }
}

/// What is looked at how often.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Round {
    /// Kebab-case id.
    pub id: String,
    /// What to do.
    pub text: String,
    /// Seconds.
    pub every: i64,
    /// Readings it gives.
    pub readings: Vec<ReadingId>,
    /// Events that say it was done.
    pub events: Vec<EventId>,
    /// Only where this holds.
    pub needs: Option<Test>,
    /// Why it is worth the while.
    pub why: String,
    /// Kind of place where it is done.
    pub place: String,
    /// Causes it guards against.
    pub protects: Vec<String>,
    /// Keys of sources.
    pub source: Vec<String>,
}

/// Wetted area of a filter medium.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Media {
    /// Kebab-case id.
    pub id: String,
    /// What people call it.
    pub name: String,
    /// Square meters per liter of bulk volume.
    pub area_m2_per_l: f64,
    /// Keys of sources.
    pub source: Vec<String>,
}

/// A family of causes that a log often can't tell apart.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Family {
    /// Kebab-case id.
    pub id: String,
    /// A sentence without its full stop.
    pub name: String,
    /// Where it is written.
    pub place: Option<Place>,
}

/// A publication.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Reference {
    /// Key.
    pub key: String,
    /// Author.
    pub author: String,
    /// Year, as written.
    pub year: String,
    /// Title.
    pub title: String,
    /// Where it stands.
    pub location: String,
    /// What part was seen.
    pub seen: String,
}

/// Priors, thresholds of the verdict and words: `knowledge/scales.toml`.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Scales {
    /// How likely it is that anything is wrong, in a routine review.
    pub incident_review: f64,
    /// The same when somebody starts a walk.
    pub incident_walk: f64,
    /// Highest possible degree of an event that a log with events does not note.
    pub event_not_noted: f64,
    /// Highest possible degree of a sign that a row with other signs does not note.
    pub sign_not_noted: f64,
    /// How much of the evidence counts (1 = as if every finding were independent).
    pub evidence: f64,
    /// No background counts as smaller than this.
    pub least_background: f64,
    /// The most that all triggers of one cause together multiply its odds by.
    pub triggers: f64,
    /// Penalty on each cause beyond the first in a set, as a factor on its odds.
    pub second_cause: f64,
    /// Summed probability of minutes causes for `act-now`.
    pub act_minutes: f64,
    /// Summed probability of hours causes (and faster) for `act-today`.
    pub act_hours: f64,
    /// Summed probability of days causes (and faster) for `act-today`.
    pub act_days: f64,
    /// Summed probability of anything for `watch`.
    pub watch: f64,
    /// The same in a walk.
    pub watch_walk: f64,
    /// Degree from which a danger finding decides.
    pub danger: f64,
    /// Below this no step is advised for a cause.
    pub step_floor: f64,
    /// Expected harm from which a step is named under avoid.
    pub avoid_floor: f64,
    /// Weight of a cause's good and harm by urgency: weeks, days, hours, minutes.
    pub urgency: [f64; 4],
    /// Words for likelihood, highest first: from this probability on.
    pub words: Vec<(f64, String)>,
}

/// Things a person may tell without being asked, picked from one list.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct WalkGroup {
    /// What the list is about.
    pub name: String,
    /// The screens whose signs it holds.
    pub signs: Vec<String>,
    /// The screens whose events it holds.
    pub events: Vec<String>,
}

/// What a walk asks first, and when it stops: `knowledge/walk.toml`.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct WalkRules {
    /// The signs that are asked for before anything else.
    pub vital: Vec<SignId>,
    /// What may be told without being asked.
    pub groups: Vec<WalkGroup>,
    /// So many things a simulated attendant tells without being asked.
    pub told: usize,
    /// Minutes that a question takes besides its effort.
    pub asking: f64,
    /// Probability from which the leading cause stands out.
    pub stands_out: f64,
    /// Expected information, weighted by urgency, per minute, from which a question is worth asking.
    pub least_bits: f64,
    /// Share of the best question's worth from which a line joins its screen.
    pub together: f64,
    /// Lines of a screen at the most.
    pub lines: usize,
    /// Probability that the first steps stay the same from which asking on is idle.
    pub same_steps: f64,
    /// Questions at the most.
    pub most: usize,
}

/// The whole rule base.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Knowledge {
    /// Readings, signs and events.
    pub vocabulary: Vocabulary,
    /// Comfort bands of readings when neither site nor species has one.
    pub comfort: BTreeMap<(ReadingId, u8), f64>,
    /// Findings.
    pub findings: Vec<Finding>,
    /// Findings in an order in which each comes after what it rests on.
    pub order: Vec<FindingId>,
    /// Causes.
    pub causes: Vec<Cause>,
    /// Steps.
    pub steps: Vec<Step>,
    /// Cautions.
    pub cautions: Vec<Caution>,
    /// Species.
    pub species: Vec<Species>,
    /// Rounds.
    pub rounds: Vec<Round>,
    /// Filter media.
    pub media: Vec<Media>,
    /// Families of causes.
    pub families: Vec<Family>,
    /// Publications.
    pub references: Vec<Reference>,
    /// Priors and thresholds.
    pub scales: Scales,
    /// How a walk goes.
    pub walk: WalkRules,
    /// What corrections and projections reckon with.
    pub pacing: super::Pacing,
    /// SHA-256 of the shipped files, in hexadecimal.
    pub digest: String,
    /// The folder of house rules that were laid over it.
    pub house_rules: Option<String>,
}

impl Knowledge {
    /// The finding with this id.
    pub fn finding(&self, id: &str) -> Option<FindingId> {
        position(&self.findings, |f| f.id == id).map(FindingId)
    }

    /// The cause with this id.
    pub fn cause(&self, id: &str) -> Option<CauseId> {
        position(&self.causes, |c| c.id == id).map(CauseId)
    }

    /// The step with this id.
    pub fn step(&self, id: &str) -> Option<StepId> {
        position(&self.steps, |s| s.id == id).map(StepId)
    }

    /// Wetted square meters in a cubic meter of a kind of media.
    pub fn media_m2_per_m3(&self, kind: &str) -> Option<f64> {
        let media = self.media.iter().find(|m| m.id == kind)?;
        Some(media.area_m2_per_l * 1000.0)
    }

    /// The causes of a family.
    pub fn family<'k>(&'k self, family: &'k str) -> impl Iterator<Item = CauseId> + 'k {
        self.causes
            .iter()
            .enumerate()
            .filter(move |(_, c)| c.family == family)
            .filter_map(|(i, _)| u16::try_from(i).ok().map(CauseId))
    }
}

fn position<T>(items: &[T], wanted: impl Fn(&T) -> bool) -> Option<u16> {
    items
        .iter()
        .position(wanted)
        .and_then(|i| u16::try_from(i).ok())
}

impl std::ops::Index<FindingId> for Knowledge {
    type Output = Finding;
    fn index(&self, id: FindingId) -> &Finding {
        &self.findings[id.index()]
    }
}

impl std::ops::Index<CauseId> for Knowledge {
    type Output = Cause;
    fn index(&self, id: CauseId) -> &Cause {
        &self.causes[id.index()]
    }
}

impl std::ops::Index<StepId> for Knowledge {
    type Output = Step;
    fn index(&self, id: StepId) -> &Step {
        &self.steps[id.index()]
    }
}
