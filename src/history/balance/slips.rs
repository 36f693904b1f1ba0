//! A test held against itself: a jump by exactly the factor between two ways of stating it, and a single reading that
//! neither its neighbor before nor the one after bears out.

use super::{Pending, Water, put};
use crate::history::memory::{DAY, Series};
use crate::vocabulary::ReadingId;
use crate::water::masses;

/// How far back a step between two ways of stating a test may lie.
const STEP_WITHIN: i64 = 21 * DAY;
/// How many values may have held the new level since.
const STEP_READINGS: usize = 8;
/// How far back a single odd value may lie.
const ODD_WITHIN: i64 = 5 * DAY;

pub(super) fn update(water: &Water<'_>, pending: &mut Pending) {
    let ids = water.ids;
    let tests = [
        (ids.nitrate, Some(masses::NO3_PER_N)),
        (ids.nitrite, Some(masses::NO2_PER_N)),
        (ids.ammonia, None),
        (ids.ph, None),
    ];
    if !tests.iter().any(|(id, _)| water.just_read(*id)) {
        return;
    }
    // All tests are looked at whenever one was read: another test read since doesn't undo a slip.
    let now = water.memory.now();
    let mut jump: Option<f64> = None;
    let mut spike: Option<f64> = None;
    for (id, factor) in tests {
        let Some(series) = series(water, id) else {
            continue;
        };
        let values: Vec<(i64, f64)> = series
            .newest()
            .rev()
            .take(STEP_READINGS + 2)
            .copied()
            .collect();
        if let Some(factor) = factor {
            jump = larger(jump, factor_jump(&values, factor, now));
        }
        spike = larger(spike, one_off(&values, now));
    }
    put(pending, ids.unit_factor_jump, 0, jump);
    put(pending, ids.one_off_spike, 0, spike);
}

fn larger(a: Option<f64>, b: Option<f64>) -> Option<f64> {
    match (a, b) {
        (Some(a), Some(b)) => Some(a.max(b)),
        (a, b) => a.or(b),
    }
}

fn series<'m>(water: &Water<'m>, id: Option<ReadingId>) -> Option<&'m Series> {
    water.memory.reading(id?)?.newest()
}

/// How near (0 to 1) a step in the values (newest first) comes to a factor, up or down. The step may have come with the
/// last value or with an earlier one of the last weeks, as long as all those after it held the new level.
fn factor_jump(values: &[(i64, f64)], factor: f64, now: i64) -> Option<f64> {
    /// Kit steps and ordinary change blur a factor by about a fifth.
    const BLUR: f64 = 0.22;
    /// Values that differ by less than this, as a logarithm, hold one level.
    const HELD: f64 = 0.25;
    let near = |newer: f64, older: f64| {
        if newer <= 0.0 || older <= 0.0 {
            return 0.0;
        }
        let off = ((newer / older).ln().abs() - factor.ln()).abs();
        (1.0 - off / BLUR).clamp(0.0, 1.0)
    };
    let steps = values.windows(2).enumerate().map(|(n, pair)| match pair {
        [newer, older]
            if newer.0 >= now - STEP_WITHIN
                && values
                    .iter()
                    .take(n)
                    .all(|later| later.1 > 0.0 && (later.1 / newer.1).ln().abs() < HELD) =>
        {
            near(newer.1, older.1)
        }
        _ => 0.0,
    });
    (values.len() >= 2).then(|| steps.fold(0.0, f64::max))
}

/// How much (0 to 1) one of the last values (newest first) but the last stands out from its two neighbors, which agree
/// with each other and with what came after.
fn one_off(values: &[(i64, f64)], now: i64) -> Option<f64> {
    let alone = |at: usize| -> Option<bool> {
        let (after, odd, before) = (
            values.get(at.checked_sub(1)?)?,
            values.get(at)?,
            values.get(at + 1)?,
        );
        let latest = values.first()?;
        let size = after.1.abs().max(before.1.abs()).max(0.2);
        let between = (after.1 - before.1).abs().max((latest.1 - before.1).abs());
        let out = (odd.1 - f64::midpoint(after.1, before.1)).abs();
        Some(odd.0 >= now - ODD_WITHIN && out > 0.3 * size && out > 4.0 * between)
    };
    let nearest = alone(1)?;
    let earlier = alone(2).unwrap_or(false) || alone(3).unwrap_or(false);
    Some(if nearest || earlier { 1.0 } else { 0.0 })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn daily(values: &[f64]) -> (Vec<(i64, f64)>, i64) {
        let mut newest_first: Vec<(i64, f64)> = (1_i64..)
            .zip(values)
            .map(|(day, v)| (day * DAY, *v))
            .collect();
        newest_first.reverse();
        let now = newest_first.first().map_or(0, |v| v.0);
        (newest_first, now)
    }

    #[test]
    fn a_step_of_a_factor_is_seen_while_the_new_level_holds() {
        let (values, now) = daily(&[22.0, 24.0, 22.0, 97.0, 100.0, 95.0, 99.0, 98.0]);
        assert!(factor_jump(&values, masses::NO3_PER_N, now).is_some_and(|d| d > 0.6));
        let (values, now) = daily(&[22.0, 24.0, 22.0, 97.0, 60.0, 40.0]);
        assert_eq!(factor_jump(&values, masses::NO3_PER_N, now), Some(0.0));
    }

    #[test]
    fn one_odd_value_is_seen_until_days_later() {
        for (values, fits) in [
            (&[0.3, 0.3, 1.4, 0.3][..], 1.0),
            (&[0.3, 0.3, 1.4, 0.3, 0.32], 1.0),
            (&[0.3, 0.3, 1.4, 1.2, 0.3], 0.0),
            (&[0.3, 0.3, 0.3, 1.4], 0.0),
        ] {
            let (values, now) = daily(values);
            assert_eq!(one_off(&values, now), Some(fits), "{values:?}");
        }
        let (values, now) = daily(&[0.3, 0.3, 1.4, 0.3]);
        assert_eq!(one_off(&values, now + 6 * DAY), Some(0.0));
    }
}
