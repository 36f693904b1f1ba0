//! Which shift, and from when to when.

use jiff::civil::{Date, DateTime, Time};
use jiff::tz::TimeZone;
use jiff::{Span, Timestamp};

use crate::fault::{Fault, did_you_mean, shown};
use crate::site::{Shift, Site};

/// One shift on one day.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Window {
    /// Its name; `None` where the site names no shifts: then it is the day ahead.
    pub name: Option<String>,
    /// When it begins, unix seconds.
    pub start: i64,
    /// When it ends.
    pub end: i64,
}

const DAY: i64 = 86_400;

/// The shift that is meant: the one named (else the one that starts next), on the day it starts on (else the next such).
/// With a name and no day, a shift that is on now is meant.
///
/// # Errors
/// The site has no such shift.
pub fn window(
    site: &Site,
    name: Option<&str>,
    on: Option<Date>,
    now: i64,
) -> Result<Window, Fault> {
    let zone = &site.timezone;
    let today = Timestamp::from_second(now)
        .map(|t| zone.to_datetime(t).date())
        .unwrap_or_default();
    if site.shift.is_empty() {
        if let Some(name) = name {
            return Err(Fault::whole(
                "unknown-shift",
                format!("the site file has no shift called `{}`", shown(name)),
                "add a `[[shift]]` with name, start and end to it",
            ));
        }
        let start = on.map_or(now, |day| second(day.to_datetime(Time::midnight()), zone));
        return Ok(Window {
            name: None,
            start,
            end: start.saturating_add(DAY),
        });
    }
    let named: Vec<&Shift> = match name {
        None => site.shift.iter().collect(),
        Some(name) => site
            .shift
            .iter()
            .filter(|s| s.name.eq_ignore_ascii_case(name))
            .collect(),
    };
    if named.is_empty() {
        let names = site.shift.iter().map(|s| s.name.as_str());
        let all: Vec<&str> = names.clone().collect();
        let name = name.unwrap_or_default();
        return Err(Fault::whole(
            "unknown-shift",
            format!("the site file has no shift called `{}`", shown(name)),
            did_you_mean(name, names, &format!("it has {}", all.join(", "))),
        ));
    }
    let days: Vec<Date> = match on {
        Some(day) => vec![day],
        // Yesterday, for a shift that goes over midnight.
        None => (-1..=1)
            .filter_map(|n| today.checked_add(Span::new().try_days(n).ok()?).ok())
            .collect(),
    };
    let mut windows: Vec<Window> = named
        .iter()
        .flat_map(|shift| days.iter().map(|day| at(shift, *day, zone)))
        .collect();
    windows.sort_by_key(|w| w.start);
    let fits = |w: &&Window| match (on, name) {
        (Some(_), _) => true,
        (None, Some(_)) => w.end > now,
        (None, None) => w.start >= now,
    };
    windows.iter().find(fits).cloned().ok_or_else(|| {
        Fault::whole(
            "no-shift",
            "no shift starts on that day",
            "give another day with `--on`",
        )
    })
}

fn at(shift: &Shift, day: Date, zone: &TimeZone) -> Window {
    let ends_on = if shift.crosses_midnight() {
        day.tomorrow().unwrap_or(day)
    } else {
        day
    };
    Window {
        name: Some(shift.name.clone()),
        start: second(day.to_datetime(shift.start), zone),
        end: second(ends_on.to_datetime(shift.end), zone),
    }
}

/// A local time; one that the clocks skip is the time after the gap, one that they show twice is the first.
fn second(local: DateTime, zone: &TimeZone) -> i64 {
    zone.to_ambiguous_timestamp(local)
        .compatible()
        .map_or(0, |t| t.as_second())
}

#[cfg(test)]
mod tests {
    use super::*;

    fn site() -> Site {
        let shift = |name: &str, start, end| Shift {
            name: name.to_owned(),
            start: Time::constant(start, 0, 0, 0),
            end: Time::constant(end, 0, 0, 0),
        };
        Site {
            shift: vec![
                shift("early", 6, 14),
                shift("late", 14, 22),
                shift("night", 22, 6),
            ],
            ..Site::default()
        }
    }

    const MIDNIGHT: i64 = 1_772_582_400; // 2026-03-04 00:00 UTC
    const HOUR: i64 = 3600;

    fn found(name: Option<&str>, hour: i64) -> Option<(String, i64)> {
        let w = window(&site(), name, None, MIDNIGHT + hour * HOUR).ok()?;
        Some((w.name?, (w.start - MIDNIGHT) / HOUR))
    }

    #[test]
    fn the_one_that_starts_next() {
        assert_eq!(found(None, 5), Some(("early".to_owned(), 6)));
        assert_eq!(found(None, 6), Some(("early".to_owned(), 6)));
        assert_eq!(found(None, 7), Some(("late".to_owned(), 14)));
        assert_eq!(found(None, 23), Some(("early".to_owned(), 30)));
    }

    #[test]
    fn a_named_one_that_is_on_now_is_meant() {
        assert_eq!(found(Some("Early"), 7), Some(("early".to_owned(), 6)));
        assert_eq!(found(Some("early"), 15), Some(("early".to_owned(), 30)));
        assert_eq!(found(Some("night"), 3), Some(("night".to_owned(), -2)));
        assert_eq!(found(Some("noon"), 3), None);
    }

    #[test]
    fn without_shifts_it_is_the_day_ahead() {
        let w = window(&Site::default(), None, None, 1000).ok();
        assert_eq!(
            w.map(|w| (w.name, w.start, w.end)),
            Some((None, 1000, 1000 + DAY))
        );
    }
}
