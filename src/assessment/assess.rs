//! Puts a diagnosis together: facts, causes, verdict, steps, what is missing, cautions.

use super::overrides::{overrides, site_notes};
use super::routine::{Overdue, missing, overdue};
use super::{
    Assessment, Avoid, CauseReport, Derived, Missing, StepReport, Tell, VerifyReport, family,
};
use crate::course::{Advised, Ground, advise};
use crate::diagnosis::{Decision, Doctor, Occasion, Ranking, Told};
use crate::engine::{Engine, Limits};
use crate::knowledge::{CauseId, Knowledge, Verify};
use crate::site::Site;
use crate::vocabulary::ReadingId;

/// A shift where the site names none, seconds.
const SHIFT: i64 = 8 * 3600;
/// Causes likelier than this are all reported (data contract, section 8), and the likeliest few in any case: what is
/// thought of and found unlikely is worth knowing too.
const REPORTED: f64 = 0.01;
const REPORTED_IN_ANY_CASE: usize = 5;
/// So many causes get a balance sheet and the question of what would tell.
const WITH_SHEET: usize = 8;
/// Lines of a sheet, and of what would tell, that are kept.
const SHEET_LINES: usize = 12;
const TELL_LINES: usize = 6;
/// What else would tell, named under missing.
const TELL_MISSING: usize = 4;
/// A question that tells less than this about everything is not worth asking for.
const WORTH_ASKING: f64 = 0.02;

/// The moment's ranking and verdict, cheap enough to draw for every row.
#[derive(Debug, Clone)]
pub struct Review<'k> {
    /// The causes.
    pub ranking: Ranking,
    /// The verdict.
    pub decision: Decision<'k>,
}

/// Assesses one farm.
#[derive(Debug, Clone)]
pub struct Assessor<'k> {
    knowledge: &'k Knowledge,
    site: Site,
    limits: Limits<'k>,
    doctor: Doctor<'k>,
    /// What is taken for now where that is later than what is known; unix seconds.
    present: i64,
}

impl<'k> Assessor<'k> {
    /// An assessor for a site and an occasion.
    pub fn new(knowledge: &'k Knowledge, site: &Site, occasion: Occasion) -> Self {
        Self {
            knowledge,
            site: site.clone(),
            limits: Limits::new(knowledge, site),
            doctor: Doctor::new(knowledge, occasion),
            present: i64::MIN,
        }
    }

    /// Judges what is due at this time (unix seconds) when it is later than the moment that is assessed.
    #[must_use]
    pub fn at(mut self, present: i64) -> Self {
        self.present = present;
        self
    }

    fn overdue(&self, engine: &Engine<'k>) -> Vec<Overdue> {
        let present = self.present.max(engine.memory().now());
        overdue(self.knowledge, engine.memory(), present)
    }

    /// The rule base.
    pub fn knowledge(&self) -> &'k Knowledge {
        self.knowledge
    }

    /// The site.
    pub fn site(&self) -> &Site {
        &self.site
    }

    /// The site's limits.
    pub fn limits(&self) -> &Limits<'k> {
        &self.limits
    }

    /// The doctor.
    pub fn doctor(&self) -> &Doctor<'k> {
        &self.doctor
    }

    /// Ranking and verdict as the facts stand.
    pub fn review(&self, engine: &Engine<'k>) -> Review<'k> {
        let ranking = self.doctor.rank(engine);
        let due = !self.overdue(engine).is_empty();
        let decision = self.doctor.decide(engine, &ranking, due);
        Review { ranking, decision }
    }

    /// The cause that leads, unless nothing being wrong is likelier than it.
    pub fn leading(&self, review: &Review<'k>) -> Option<CauseId> {
        let first = review.ranking.order().into_iter().next()?;
        (review.ranking.of(first) >= review.ranking.nothing.min(0.5)).then_some(first)
    }

    /// The whole outcome. `places` are the names of the log's places, `last_row` the time of its last row.
    pub fn assess(
        &self,
        engine: &Engine<'k>,
        places: &[String],
        last_row: Option<i64>,
    ) -> Assessment {
        let review = self.review(engine);
        let ranking = &review.ranking;
        let told = self.doctor.tell(engine, ranking);
        let ground = Ground {
            knowledge: self.knowledge,
            engine,
            site: &self.site,
            limits: &self.limits,
            ranking,
            decision: &review.decision,
        };
        let advice = advise(&ground);
        let now = engine.memory().now();
        let step = |a: &Advised| self.step(a, now);
        let causes = self.causes(engine, ranking, &told, places);
        let leading_family = family::leading(
            self.knowledge,
            ranking,
            &advice,
            |f| self.doctor.family(ranking, f),
            |p| self.likely(p),
        );
        Assessment {
            site: self.site.name.clone(),
            as_of: now,
            last_row,
            last_row_age: last_row
                .map(|time| self.present.max(now).saturating_sub(time))
                .filter(|age| *age > self.site.longest_shift().unwrap_or(SHIFT)),
            verdict: review.decision.verdict,
            dangers: review
                .decision
                .dangers
                .iter()
                .map(|f| f.name.clone())
                .collect(),
            first_aid: advice.first_aid.iter().map(step).collect(),
            minutes_left: review
                .decision
                .first_aid
                .then(|| self.minutes_left(engine))
                .flatten(),
            best_question: self.best_question(
                ranking,
                &told,
                leading_family.as_ref().map(|f| f.id.as_str()),
            ),
            leading_family,
            causes,
            nothing_wrong: ranking.nothing,
            steps: advice.steps.iter().map(step).collect(),
            avoid: advice
                .avoid
                .iter()
                .map(|w| {
                    let step = &self.knowledge[w.step];
                    Avoid {
                        id: step.id.clone(),
                        text: step.avoid_text.clone(),
                        because: self.ids(&w.because),
                        harm: w.harm,
                    }
                })
                .collect(),
            missing: self.missing(&ground, &told),
            derived: self.derived(engine),
            projections: Vec::new(),
            site_notes: site_notes(self.knowledge, &self.site),
            overrides: overrides(self.knowledge, &self.site),
            cautions: self
                .knowledge
                .cautions
                .iter()
                .filter(|c| c.always || c.when.as_ref().is_some_and(|t| ground.holds(t)))
                .map(|c| (c.id.clone(), c.text.clone()))
                .collect(),
        }
    }

    fn ids(&self, causes: &[CauseId]) -> Vec<String> {
        causes
            .iter()
            .map(|c| self.knowledge[*c].id.clone())
            .collect()
    }

    /// The word for a probability.
    pub fn likely(&self, probability: f64) -> String {
        self.knowledge
            .scales
            .words
            .iter()
            .find(|(from, _)| probability >= *from)
            .map_or_else(String::new, |(_, word)| word.clone())
    }

    fn causes(
        &self,
        engine: &Engine<'k>,
        ranking: &Ranking,
        told: &Told,
        places: &[String],
    ) -> Vec<CauseReport> {
        let books = self.doctor.books(engine, &self.site, &self.limits, ranking);
        ranking
            .order()
            .into_iter()
            .enumerate()
            .take_while(|(rank, c)| *rank < REPORTED_IN_ANY_CASE || ranking.of(*c) > REPORTED)
            .map(|(rank, id)| {
                let cause = &self.knowledge[id];
                let (mut pro, mut contra) = if rank < WITH_SHEET {
                    books.sheet(id)
                } else {
                    (Vec::new(), Vec::new())
                };
                pro.truncate(SHEET_LINES);
                contra.truncate(SHEET_LINES);
                CauseReport {
                    cause: id,
                    id: cause.id.clone(),
                    name: cause.name.clone(),
                    family: cause.family.clone(),
                    probability: ranking.of(id),
                    likely: self.likely(ranking.of(id)),
                    urgency: cause.urgency,
                    place: books
                        .place(&pro)
                        .and_then(|p| places.get(usize::from(p)).cloned()),
                    would_tell: told
                        .about(id)
                        .into_iter()
                        .take(TELL_LINES)
                        .map(|(id, bits)| Tell { id, bits })
                        .collect(),
                    leaves_unexplained: if rank < WITH_SHEET {
                        books.unexplained(id)
                    } else {
                        Vec::new()
                    },
                    evidence_for: pro,
                    evidence_against: contra,
                }
            })
            .collect()
    }

    fn best_question(
        &self,
        ranking: &Ranking,
        told: &Told,
        family: Option<&str>,
    ) -> Option<(String, String)> {
        let family = family?;
        let mut all = told.all(|c| {
            if self.knowledge[c].family == family {
                ranking.of(c).max(0.05)
            } else {
                0.0
            }
        });
        all.retain(|(_, bits)| *bits > 0.0);
        all.into_iter()
            .find_map(|(id, _)| self.question(&id).map(|text| (id, text)))
    }

    /// The question for a reading, sign or event.
    pub fn question(&self, id: &str) -> Option<String> {
        let words = &self.knowledge.vocabulary;
        let question = words
            .reading(id)
            .map(|r| &words[r].question)
            .or_else(|| words.sign(id).map(|s| &words[s].question))
            .or_else(|| words.event(id).map(|e| &words[e].question))?;
        (!question.text.is_empty()).then(|| question.text.clone())
    }

    fn step(&self, advised: &Advised, now: i64) -> StepReport {
        let step = &self.knowledge[advised.step];
        StepReport {
            step: advised.step,
            id: step.id.clone(),
            text: step.text.clone(),
            detail: step.detail.clone(),
            when: step.when,
            because: self.ids(&advised.because),
            check_first: if advised.check_first {
                vec![step.check_first.clone()]
            } else {
                Vec::new()
            },
            verify: step
                .verify
                .as_ref()
                .or_else(|| self.verify_of(advised))
                .map(|v| VerifyReport {
                    id: v.id.clone(),
                    direction: v.direction.clone(),
                    by: now + v.by,
                }),
            pace: step.pace.clone(),
            worth: advised.worth,
        }
    }

    /// A step that does not say how it is verified is verified as the cause it is for.
    fn verify_of(&self, advised: &Advised) -> Option<&Verify> {
        self.knowledge[*advised.because.first()?].verify.as_ref()
    }

    fn missing(&self, ground: &Ground<'_, 'k>, told: &Told) -> Vec<Missing> {
        let mut list = missing(ground, &self.overdue(ground.engine));
        if ground.decision.verdict == crate::diagnosis::Verdict::Steady {
            return list;
        }
        let likely = told.all(|c| {
            if ground.ranking.of(c) > 0.03 {
                1.0
            } else {
                0.0
            }
        });
        for (id, bits) in likely.into_iter().take(TELL_MISSING) {
            if bits >= WORTH_ASKING && !list.iter().any(|m| m.id == id) {
                let causes: Vec<&str> = ground
                    .ranking
                    .order()
                    .into_iter()
                    .filter(|c| told.about(*c).iter().any(|(i, b)| *i == id && *b > 0.005))
                    .take(2)
                    .map(|c| self.knowledge[c].name.as_str())
                    .collect();
                list.push(Missing {
                    id,
                    why: match causes[..] {
                        [one] => format!("would tell whether it is this: {one}"),
                        [one, two] => format!("would tell between: {one} / {two}"),
                        _ => "would tell most".to_owned(),
                    },
                });
            }
        }
        list
    }

    fn derived(&self, engine: &Engine<'k>) -> Vec<Derived> {
        let words = &self.knowledge.vocabulary;
        (0..words.readings.len())
            .filter_map(|i| u16::try_from(i).ok().map(ReadingId))
            .filter(|id| words[*id].derived)
            .filter_map(|id| {
                let (time, value) = engine.memory().reading(id)?.newest()?.last()?;
                let good = engine.memory().now() - time <= words[id].good_for;
                good.then(|| Derived {
                    reading: id,
                    id: words[id].id.clone(),
                    value,
                })
            })
            .collect()
    }

    /// The minutes there are at the least: half of what the fish alone would take, since bacteria breathe too and the
    /// stock is known roughly; rounded down.
    fn minutes_left(&self, engine: &Engine<'k>) -> Option<u32> {
        let id = self.knowledge.vocabulary.reading("oxygen-minutes")?;
        let (time, minutes) = engine.memory().reading(id)?.newest()?.last()?;
        if engine.memory().now() - time > self.knowledge.vocabulary[id].good_for.max(3600) {
            return None;
        }
        #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)] // clamped
        let whole = (minutes / 2.0).floor().clamp(0.0, 600.0) as u32;
        Some(whole)
    }
}
