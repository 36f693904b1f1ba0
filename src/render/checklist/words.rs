//! Items and blanks in words.

use super::Sheet;
use crate::assessment::span;
use crate::incident::Look;
use crate::render::block::sentence;
use crate::render::{units, when};
use crate::shift::{Blank, Item, Kind};

/// What items are put into words with.
#[derive(Debug, Clone, Copy)]
pub(super) struct Words<'a> {
    sheet: &'a Sheet<'a>,
}

impl<'a> Words<'a> {
    pub fn of(sheet: &'a Sheet<'a>) -> Self {
        Self { sheet }
    }

    /// A time, without its day where that is the shift's own.
    pub fn at(&self, time: i64) -> String {
        let zone = &self.sheet.site.timezone;
        let window = &self.sheet.list.window;
        if time >= window.start && time < window.end {
            when::hour(time, zone)
        } else {
            when::short(time, zone)
        }
    }

    /// A time of the shift by its hour, another by its day.
    fn day(&self, time: i64) -> String {
        let zone = &self.sheet.site.timezone;
        let start = self.sheet.list.window.start;
        if when::day(time, zone) == when::day(start, zone) {
            when::hour(time, zone)
        } else {
            when::day(time, zone)
        }
    }

    /// Which incident it is for, where more than one is open.
    fn of_incident(&self, id: &str) -> String {
        match self.sheet.list.open.len() {
            0 | 1 => String::new(),
            _ => format!(" [{id}]"),
        }
    }

    fn amount(&self, id: &str, value: f64) -> String {
        let words = &self.sheet.knowledge.vocabulary;
        match words.reading(id) {
            Some(reading) => units::amount(&words[reading], value, self.sheet.site.units),
            None if value > 0.5 => "seen".to_owned(),
            None => "not seen".to_owned(),
        }
    }

    /// What to do, and why in a few words.
    pub fn item(&self, item: &Item) -> String {
        match &item.kind {
            Kind::Check(incident, check) => {
                let verify = &check.verify;
                let (id, due) = (verify.id.as_str(), self.at(verify.due));
                let should = match verify.direction.as_str() {
                    "gone" => "gone".to_owned(),
                    way => match verify.from {
                        Some(from) => format!("{way} from {}", self.amount(id, from)),
                        None => way.to_owned(),
                    },
                };
                let state = match check.look {
                    Look::Missed(time, value) => format!(
                        "was {} at {}, which is not as it should be: `gillside incident follow`",
                        self.amount(id, value),
                        self.at(time)
                    ),
                    _ if verify.due < self.sheet.now => format!("was due {due}"),
                    _ => format!("due {due}"),
                };
                format!(
                    "{} Should be {should}; {state}{}",
                    ended(&sentence(&item.text)),
                    self.of_incident(incident)
                )
            }
            Kind::Step(incident, step) => {
                format!(
                    "{} (step {}){}",
                    item.text,
                    step.id,
                    self.of_incident(incident)
                )
            }
            Kind::Plan(incident, number, step) => format!(
                "{}: {} (step plan-{number}){}",
                self.at(step.at),
                ended(&sentence(&item.text)),
                self.of_incident(incident)
            ),
            Kind::Trend(trend) => {
                let words = &self.sheet.knowledge.vocabulary;
                let reading = &words[trend.reading];
                let system = self.sheet.site.units;
                let way = match trend.way {
                    1 => " and rising",
                    -1 => " and falling",
                    _ => "",
                };
                let limit = units::amount(reading, trend.limit, system);
                let where_ = match (trend.outside, trend.high) {
                    (true, true) => format!(", above {limit}"),
                    (true, false) => format!(", below {limit}"),
                    (false, _) => format!(", nearing {limit}"),
                };
                let again = item.due.map_or_else(String::new, |due| {
                    format!(": measure again at {}", self.at(due))
                });
                format!(
                    "{} {}{way}{where_}{again}",
                    sentence(&reading.name),
                    units::amount(reading, trend.value, system),
                )
            }
            // Which causes it tells apart is on the page of the diagnosis; here there is no room for it.
            Kind::Tell(_, why) if why.starts_with("would tell") => {
                format!(
                    "{} (it tells the likely causes apart)",
                    sentence(&item.text)
                )
            }
            Kind::Tell(_, why) => format!("{} ({why})", sentence(&item.text)),
            Kind::Extra(_) => format!("{} ({})", item.text, item.why),
            Kind::Round(_) => match (item.last, item.every) {
                (Some(last), Some(every)) if every > 36 * 3600 => {
                    let zone = &self.sheet.site.timezone;
                    format!(
                        "{} (every {}, last {})",
                        item.text,
                        span(every),
                        when::day(last, zone)
                    )
                }
                (None, Some(every)) if every > 36 * 3600 => {
                    format!("{} (every {}, never noted)", item.text, span(every))
                }
                _ => item.text.clone(),
            },
        }
    }

    /// A blank with its unit, the band and the last value.
    pub fn blank(&self, blank: &Blank) -> String {
        let reading = &self.sheet.knowledge.vocabulary[blank.reading];
        let notes = self.compare(blank);
        let notes = if notes.is_empty() {
            notes
        } else {
            format!(" ({notes})")
        };
        let unit = unit(blank);
        format!("{} ________ {unit}{notes}", reading.name)
    }

    /// The band and the last value.
    pub fn compare(&self, blank: &Blank) -> String {
        let reading = &self.sheet.knowledge.vocabulary[blank.reading];
        let number = |v: f64| units::plain_number(reading, v);
        let band = match (blank.low, blank.high) {
            (Some(low), Some(high)) => Some(format!("well: {} to {}", number(low), number(high))),
            (Some(low), None) => Some(format!("well: {} or more", number(low))),
            (None, Some(high)) => Some(format!("well: up to {}", number(high))),
            (None, None) => None,
        };
        let last = blank
            .last
            .map(|(time, value)| format!("last {}, {}", number(value), self.day(time)));
        let parts: Vec<String> = band.into_iter().chain(last).collect();
        parts.join("; ")
    }

    /// When to go on and when to stop, and what to look at first.
    pub fn conditions(&self, item: &Item) -> Vec<String> {
        match &item.kind {
            Kind::Plan(_, _, step) => {
                let go = step.go_on_if.iter().map(|c| format!("go on only if: {c}"));
                let stop = step.stop_if.iter().map(|c| format!("stop if: {c}"));
                go.chain(stop).collect()
            }
            Kind::Step(_, step) => {
                let first = step.check_first.iter();
                first.map(|c| format!("check first: {c}")).collect()
            }
            _ => Vec::new(),
        }
    }
}

/// The unit as it is written behind a blank.
pub(super) fn unit(blank: &Blank) -> &str {
    match blank.unit.as_str() {
        "pH" | "count" => "",
        unit => unit,
    }
}

/// With an end to the sentence.
fn ended(text: &str) -> String {
    if text.ends_with(['.', '?', '!']) {
        text.to_owned()
    } else {
        format!("{text}.")
    }
}
