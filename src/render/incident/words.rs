//! Parts of an incident in words.

use super::Told;
use crate::incident::{Check, Incident, Look, PlanStep, Ranked, Taken};
use crate::render::block::sentence;
use crate::render::{units, when};

/// What parts are put into words with.
#[derive(Debug, Clone, Copy)]
pub(super) struct Words<'a> {
    told: &'a Told<'a>,
}

impl<'a> Words<'a> {
    pub fn of(told: &'a Told<'a>) -> Self {
        Self { told }
    }

    /// A time as the site's clocks show it.
    pub fn at(&self, time: i64) -> String {
        when::short(time, &self.told.site.timezone)
    }

    /// The month and year.
    pub fn month(&self, time: i64) -> String {
        when::month(time, &self.told.site.timezone)
    }

    /// ` by Ines`, or nothing.
    pub fn by(&self, who: Option<&str>) -> String {
        who.map_or_else(String::new, |who| format!(" by {who}"))
    }

    /// A cause's name.
    pub fn cause(&self, id: &str) -> String {
        let knowledge = self.told.knowledge;
        match knowledge.cause(id) {
            Some(cause) => format!("{} ({id})", knowledge[cause].name),
            None => id.to_owned(),
        }
    }

    /// A cause as it was ranked; the word for how likely is today's.
    pub fn ranked(&self, ranked: &Ranked) -> String {
        let words = &self.told.knowledge.scales.words;
        let likely = words
            .iter()
            .find(|(from, _)| ranked.probability >= *from)
            .map_or("", |(_, word)| word.as_str());
        format!("{}: {} ({})", sentence(likely), ranked.name, ranked.id)
    }

    /// A step and whether it was done.
    pub fn step(&self, step: &Taken) -> String {
        let state = match step.done {
            Some(time) => format!("done {}{}", self.at(time), self.by(step.by.as_deref())),
            None => "not done".to_owned(),
        };
        format!("{} [{}; {state}]", step.text, step.id)
    }

    /// A step of the plan and whether it was done.
    pub fn planned(&self, number: usize, step: &PlanStep) -> String {
        let state = match step.done {
            Some(time) => format!("done {}{}", self.at(time), self.by(step.by.as_deref())),
            None => format!("at {}", self.at(step.at)),
        };
        let list = |lead: &str, conditions: &[String]| {
            if conditions.is_empty() {
                String::new()
            } else {
                format!(" {lead}: {}.", conditions.join("; "))
            }
        };
        format!(
            "plan-{number}, {state}: {}.{}{}",
            step.text.trim_end_matches('.'),
            list("Go on only if", &step.go_on_if),
            list("Stop if", &step.stop_if)
        )
    }

    /// What a check is about: the name of its reading or sign.
    pub fn thing(&self, id: &str) -> String {
        let words = &self.told.knowledge.vocabulary;
        match (words.reading(id), words.sign(id)) {
            (Some(reading), _) => sentence(&words[reading].name),
            (None, Some(sign)) => format!("\"{}\"", words[sign].name),
            (None, None) => id.to_owned(),
        }
    }

    fn value(&self, id: &str, value: f64) -> String {
        let words = &self.told.knowledge.vocabulary;
        match words.reading(id) {
            Some(reading) => units::amount(&words[reading], value, self.told.site.units),
            None if value > 0.5 => "seen".to_owned(),
            None => "not seen".to_owned(),
        }
    }

    /// What should happen by when.
    pub fn should(&self, check: &Check) -> String {
        let verify = &check.verify;
        let from = verify
            .from
            .filter(|_| verify.direction != "gone")
            .map_or_else(String::new, |from| {
                format!(" from {}", self.value(&verify.id, from))
            });
        format!(
            "{} should be {}{from} by {}",
            self.thing(&verify.id),
            verify.direction,
            self.at(verify.due)
        )
    }

    /// A check and how it stands.
    pub fn check(&self, check: &Check) -> String {
        let id = &check.verify.id;
        let seen =
            |time: i64, value: f64| format!("{} at {}", self.value(id, value), self.at(time));
        let undone = if check.done {
            ""
        } else {
            " (its step is not done yet)"
        };
        let state = match &check.look {
            Look::Waiting(None, _) => "not due yet".to_owned(),
            Look::Waiting(Some((time, value)), so_far) => {
                let so_far = match so_far {
                    Some(true) => "as it should so far",
                    Some(false) => "not yet moving as it should",
                    None => "too early to tell",
                };
                format!("{}, {so_far}", seen(*time, *value))
            }
            Look::Unread => "DUE, and nothing was read since that could tell".to_owned(),
            Look::Met(time, value) => format!("yes: {}", seen(*time, *value)),
            Look::Missed(time, value) => format!("NO: {}", seen(*time, *value)),
        };
        format!("{}{undone}: {state}.", self.should(check))
    }

    /// Notes, follow-ups and reopenings in the order of time.
    pub fn history(&self, incident: &Incident) -> Vec<String> {
        let mut all: Vec<(i64, String)> = Vec::new();
        for note in &incident.notes {
            let by = self.by(note.by.as_deref());
            all.push((
                note.time,
                format!("{}{by}: {}", self.at(note.time), note.text),
            ));
        }
        for follow in &incident.follows {
            let by = self.by(follow.by.as_deref());
            let found = follow.found.join(" ");
            let at = self.at(follow.time);
            let verdict = follow.verdict.replace('-', " ");
            all.push((
                follow.time,
                format!("{at}{by}, followed up ({verdict}): {found}"),
            ));
        }
        for again in &incident.reopened {
            let by = self.by(again.by.as_deref());
            let why = again.why.as_deref().unwrap_or("no reason given");
            let was = again.was_cause.as_deref().unwrap_or("cause not known");
            all.push((
                again.time,
                format!(
                    "{}{by}, opened again (was closed as {was}): {why}",
                    self.at(again.time)
                ),
            ));
        }
        all.sort_by_key(|(time, _)| *time);
        all.into_iter().map(|(_, text)| text).collect()
    }
}
