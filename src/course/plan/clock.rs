//! The times of a plan's steps: within the site's shifts, no closer than the wait between two doses.

use jiff::Timestamp;
use jiff::civil::Time;

use crate::site::Site;

/// A step is planned no later than this before a shift ends, so that the same people see what it did.
const BEFORE_THE_END: i64 = 30 * 60;
/// Times are looked for on the quarter hour.
const QUARTER: i64 = 15 * 60;
const DAY: i64 = 86_400;
/// Where the site names no shifts: the hours of a working day.
const WORKING_DAY: (i8, i8) = (7, 19);

fn somebody_is_there(site: &Site, at: i64) -> bool {
    let local = |seconds: i64| -> Option<Time> {
        let stamp = Timestamp::from_second(seconds).ok()?;
        Some(stamp.to_zoned_datetime(site.timezone.clone()).time())
    };
    let (Some(now), Some(later)) = (local(at), local(at + BEFORE_THE_END)) else {
        return true;
    };
    if site.shift.is_empty() {
        return (WORKING_DAY.0..WORKING_DAY.1).contains(&now.hour());
    }
    site.shift.iter().any(|s| s.covers(now) && s.covers(later))
        // Two shifts that follow each other are one long one.
        || (site.shift.iter().any(|s| s.covers(now)) && site.shift.iter().any(|s| s.covers(later)))
}

/// The next time from `from` on when somebody is there, on the quarter hour.
pub fn next(site: &Site, from: i64) -> i64 {
    let first = from.div_euclid(QUARTER) * QUARTER;
    let first = if first < from { first + QUARTER } else { first };
    (0..8 * DAY / QUARTER)
        .map(|i| first + i * QUARTER)
        .find(|t| somebody_is_there(site, *t))
        .unwrap_or(first)
}

/// Times of steps: for each day (24 hours from the first step on) at most `most` times, at least `wait` seconds apart.
pub fn slots(site: &Site, from: i64, days: usize, most: usize, wait: i64) -> Vec<Vec<i64>> {
    let first = next(site, from);
    let mut last = i64::MIN / 2;
    (0..days)
        .map(|day| {
            let day = i64::try_from(day).unwrap_or(0);
            let begin = first + day * DAY;
            let mut fit = Vec::new();
            for i in 0..DAY / QUARTER {
                let t = begin + i * QUARTER;
                if t - last >= wait && somebody_is_there(site, t) {
                    fit.push(t);
                    last = t;
                }
            }
            let chosen = spread(&fit, most);
            last = chosen.last().copied().unwrap_or(last);
            chosen
        })
        .collect()
}

/// At most so many of the times, spread evenly, the first among them.
fn spread(times: &[i64], most: usize) -> Vec<i64> {
    if times.len() <= most || most == 0 {
        return times.to_vec();
    }
    (0..most)
        .filter_map(|i| times.get(i * times.len() / most).copied())
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::site::Shift;
    use jiff::civil::time;

    #[test]
    fn steps_fall_in_the_shift_and_are_apart() {
        let site = Site {
            shift: vec![Shift {
                name: "early".to_owned(),
                start: time(6, 0, 0, 0),
                end: time(14, 0, 0, 0),
            }],
            ..Site::default()
        };
        let all: Vec<i64> = slots(&site, 15 * 3600, 3, 4, 7200).concat();
        assert_eq!(all.len(), 12);
        for pair in all.windows(2) {
            assert!(pair[1] - pair[0] >= 7200);
        }
        for t in &all {
            let hour = t.rem_euclid(DAY) / 3600;
            assert!((6..14).contains(&hour), "{hour}");
        }
        assert_eq!(all.first(), Some(&(DAY + 6 * 3600)));
    }

    #[test]
    fn without_shifts_nobody_is_called_at_night() {
        let site = Site::default();
        assert_eq!(next(&site, 23 * 3600), DAY + 7 * 3600);
        assert_eq!(next(&site, 8 * 3600 + 60), 8 * 3600 + 900);
    }
}
