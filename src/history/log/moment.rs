//! The times of a log: RFC 3339, or local time of the site.

use jiff::Timestamp;
use jiff::civil::{Date, DateTime};
use jiff::tz::{AmbiguousOffset, Offset, TimeZone};

use super::problem::Trouble;
use crate::fault::{Fault, shown};

/// Within this many seconds of a change of offset the zone is asked each time. More than the largest change there
/// has been (a whole day, where an island crossed the date line).
const MARGIN: i64 = 26 * 3600;

/// When something was, as far as the text alone can tell.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Moment {
    /// Unix seconds.
    Sure(i64),
    /// A local time that the clocks showed twice.
    Twice(i64, i64),
}

impl Moment {
    /// The reading that is not before `earlier`, the first one if both or none are.
    pub fn not_before(self, earlier: Option<i64>) -> i64 {
        match self {
            Self::Sure(time) => time,
            Self::Twice(first, second) => match earlier {
                Some(earlier) if first < earlier && second >= earlier => second,
                _ => first,
            },
        }
    }
}

/// A time as logs write it, in unix seconds; where it states no offset it is local time in `zone`, and of an hour that
/// the clocks showed twice the first is meant.
///
/// # Errors
/// A fault without a place: not a time, or one that was never on the clock.
pub fn read_time(text: &str, zone: &TimeZone) -> Result<i64, Fault> {
    match Clock::new(zone.clone()).read(text.trim()) {
        Ok(moment) => Ok(moment.not_before(None)),
        Err(trouble) => Err(Fault::whole(trouble.code, trouble.reason, trouble.cure)),
    }
}

/// Reads times in one zone, and remembers the offset until the next time it may change.
#[derive(Debug)]
pub(super) struct Clock {
    zone: TimeZone,
    /// Local seconds from here ...
    from: i64,
    /// ... and before here have the offset.
    until: i64,
    offset: i64,
}

impl Clock {
    pub fn new(zone: TimeZone) -> Self {
        Self {
            zone,
            from: 0,
            until: 0,
            offset: 0,
        }
    }

    /// Reads a time.
    pub fn read(&mut self, text: &str) -> Result<Moment, Trouble> {
        let (local, rest) = local_time(text).ok_or_else(|| form(text))?;
        let local = local.map_err(|()| {
            Trouble::new(
                "bad-time",
                format!("`{}` is no time that there is", shown(text)),
                "correct the day or the hour; years go from 1900 to 2199",
            )
        })?;
        let seconds = Offset::UTC
            .to_timestamp(local)
            .map_err(|_| form(text))?
            .as_second();
        if rest.is_empty() {
            return self.in_zone(local, seconds, text);
        }
        let offset = offset(rest).ok_or_else(|| form(text))?;
        Ok(Moment::Sure(seconds - offset))
    }

    fn in_zone(&mut self, local: DateTime, seconds: i64, text: &str) -> Result<Moment, Trouble> {
        if seconds >= self.from && seconds < self.until {
            return Ok(Moment::Sure(seconds - self.offset));
        }
        let at = |offset: Offset| seconds - i64::from(offset.seconds());
        match self.zone.to_ambiguous_timestamp(local).offset() {
            AmbiguousOffset::Unambiguous { offset } => {
                self.remember(at(offset), offset);
                Ok(Moment::Sure(at(offset)))
            }
            AmbiguousOffset::Fold { before, after } => Ok(Moment::Twice(at(before), at(after))),
            AmbiguousOffset::Gap { .. } => Err(Trouble::new(
                "skipped-hour",
                format!(
                    "`{}` was never on the clock in `{}`: the clocks were put forward over it",
                    shown(text),
                    self.zone.iana_name().unwrap_or("this zone")
                ),
                "write the time as the clock showed it, or with its offset, such as `2026-03-29T01:30:00Z`",
            )),
        }
    }

    fn remember(&mut self, time: i64, offset: Offset) {
        let Ok(stamp) = Timestamp::from_second(time) else {
            return;
        };
        let change =
            |at: Option<jiff::tz::TimeZoneTransition<'_>>| at.map(|t| t.timestamp().as_second());
        // "Preceding" leaves out a change at the very second it is asked about.
        let past = Timestamp::from_second(time.saturating_add(1)).unwrap_or(stamp);
        let before = change(self.zone.preceding(past).next()).unwrap_or(i64::MIN / 4);
        let after = change(self.zone.following(stamp).next()).unwrap_or(i64::MAX / 4);
        self.offset = i64::from(offset.seconds());
        self.from = before.saturating_add(self.offset + MARGIN);
        self.until = after.saturating_add(self.offset - MARGIN);
    }
}

fn form(text: &str) -> Trouble {
    Trouble::new(
        "bad-time",
        format!("`{}` is not a time", shown(text)),
        "write `YYYY-MM-DD HH:MM`, such as `2026-03-02 07:30`, or with an offset, such as `2026-03-02T07:30:00Z`",
    )
}

/// Two digits.
fn two(bytes: &[u8], at: usize) -> Option<i8> {
    let digit = |b: &u8| b.is_ascii_digit().then(|| b - b'0');
    let value = digit(bytes.get(at)?)? * 10 + digit(bytes.get(at + 1)?)?;
    i8::try_from(value).ok()
}

/// `YYYY-MM-DD HH:MM[:SS[.fraction]]` with a space or `T` between, and what follows it. `None`: not of this form;
/// `Err`: of this form, but no such day or time.
fn local_time(text: &str) -> Option<(Result<DateTime, ()>, &str)> {
    let bytes = text.as_bytes();
    let is = |at: usize, any: &[u8]| bytes.get(at).is_some_and(|b| any.contains(b));
    if !(is(4, b"-") && is(7, b"-") && is(10, b" Tt") && is(13, b":")) {
        return None;
    }
    let year = i16::from(two(bytes, 0)?) * 100 + i16::from(two(bytes, 2)?);
    let (month, day) = (two(bytes, 5)?, two(bytes, 8)?);
    let (hour, minute) = (two(bytes, 11)?, two(bytes, 14)?);
    let mut end = 16;
    let mut second = 0;
    if is(end, b":") {
        second = two(bytes, 17)?;
        end = 19;
        if is(end, b".,") {
            let digits = bytes
                .iter()
                .skip(end + 1)
                .take_while(|b| b.is_ascii_digit());
            let count = digits.count();
            if count == 0 {
                return None;
            }
            end += 1 + count;
        }
    }
    let rest = text.get(end..)?;
    // A leap second is the last second of its minute.
    let second = if second == 60 { 59 } else { second };
    let made = Date::new(year, month, day)
        .and_then(|date| Ok(date.to_datetime(jiff::civil::Time::new(hour, minute, second, 0)?)))
        .map_err(|_| ())
        .and_then(|t| {
            if (1900..2200).contains(&year) {
                Ok(t)
            } else {
                Err(())
            }
        });
    Some((made, rest))
}

/// `Z` or `+HH:MM`, in seconds.
fn offset(text: &str) -> Option<i64> {
    if text.eq_ignore_ascii_case("z") {
        return Some(0);
    }
    let bytes = text.as_bytes();
    let sign = match bytes.first()? {
        b'+' => 1,
        b'-' => -1,
        _ => return None,
    };
    if bytes.len() != 6 || bytes.get(3) != Some(&b':') {
        return None;
    }
    let (hours, minutes) = (two(bytes, 1)?, two(bytes, 4)?);
    if hours > 23 || minutes > 59 {
        return None;
    }
    Some(sign * (i64::from(hours) * 3600 + i64::from(minutes) * 60))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn clock(zone: &str) -> Clock {
        Clock::new(TimeZone::get(zone).unwrap_or(TimeZone::UTC))
    }

    fn read(zone: &str, text: &str) -> Result<Moment, &'static str> {
        clock(zone).read(text).map_err(|t| t.code)
    }

    fn sure(text: &str) -> Result<Moment, &'static str> {
        let stamp: Result<Timestamp, _> = text.parse();
        stamp
            .map(|s| Moment::Sure(s.as_second()))
            .map_err(|_| "test")
    }

    #[test]
    fn both_forms_are_read() {
        for (text, expected) in [
            ("2026-03-04 07:30", "2026-03-04T07:30:00Z"),
            ("2026-03-04T07:30", "2026-03-04T07:30:00Z"),
            ("2026-03-04 07:30:15", "2026-03-04T07:30:15Z"),
            ("2026-03-04 07:30:15.9", "2026-03-04T07:30:15Z"),
            ("2026-03-04T07:30:00Z", "2026-03-04T07:30:00Z"),
            ("2026-03-04t07:30:00z", "2026-03-04T07:30:00Z"),
            ("2026-03-04 07:30:00+01:00", "2026-03-04T06:30:00Z"),
            ("2026-03-04T07:30:00-03:30", "2026-03-04T11:00:00Z"),
            ("2024-02-29 00:00", "2024-02-29T00:00:00Z"),
        ] {
            assert_eq!(read("UTC", text), sure(expected), "{text}");
        }
        assert_eq!(
            read("Europe/Lisbon", "2026-07-01 07:30"),
            sure("2026-07-01T06:30:00Z")
        );
    }

    #[test]
    fn what_is_no_time_is_refused() {
        for text in [
            "",
            "now",
            "2026-03-04",
            "04/03/2026 07:30",
            "2026-03-04 7:30",
            "2026-3-4 07:30",
            "2026-03-04 07:30pm",
            "2026-02-30 07:30",
            "2025-02-29 07:30",
            "2026-03-04 24:00",
            "2026-03-04 07:60",
            "2026-13-04 07:30",
            "0026-03-04 07:30",
            "2026-03-04 07:30:00+1",
            "2026-03-04 07:30:00+24:00",
            "2026-03-04 07:30:00.",
            "2026-03-04 07:30é",
            "é026-03-04 07:30",
        ] {
            assert_eq!(read("UTC", text), Err("bad-time"), "{text}");
        }
    }

    #[test]
    fn clocks_that_change() {
        assert_eq!(
            read("Europe/Lisbon", "2026-03-29 01:30"),
            Err("skipped-hour")
        );
        let twice = read("Europe/Lisbon", "2026-10-25 01:30");
        assert!(matches!(twice, Ok(Moment::Twice(a, b)) if b - a == 3600));
        let first = twice.map(|m| m.not_before(None));
        let second = twice.map(|m| m.not_before(first.ok().map(|t| t + 60)));
        assert_eq!(first.map(Moment::Sure), sure("2026-10-25T00:30:00Z"));
        assert_eq!(second.map(Moment::Sure), sure("2026-10-25T01:30:00Z"));
        assert_eq!(twice.map(|m| m.not_before(first.ok())), first);
    }

    proptest! {
        /// The remembered offset never differs from what the zone says.
        #[test]
        fn remembering_changes_nothing(
            steps in prop::collection::vec(0_i64..40_000_000, 1..30),
            zone in prop::sample::select(vec![
                "Europe/Lisbon", "Pacific/Apia", "Australia/Lord_Howe", "America/Sao_Paulo", "Asia/Kathmandu", "UTC",
            ]),
        ) {
            let mut kept = clock(zone);
            let mut seconds = 1_200_000_000;
            for step in steps {
                seconds += step;
                let Ok(stamp) = Timestamp::from_second(seconds) else { break };
                let text = Offset::UTC.to_datetime(stamp).strftime("%Y-%m-%d %H:%M:%S").to_string();
                prop_assert_eq!(kept.read(&text), clock(zone).read(&text), "{}", text);
            }
        }

        #[test]
        fn any_text_is_answered(text in "\\PC{0,30}") {
            let _ = clock("Europe/Lisbon").read(&text);
        }
    }
}
