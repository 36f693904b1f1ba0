//! A test held against itself: a jump by exactly the factor between two ways of stating it, and a single reading that
//! neither its neighbor before nor the one after bears out.

use super::{Pending, Water, put};
use crate::history::memory::Series;
use crate::vocabulary::ReadingId;
use crate::water::masses;

pub(super) fn update(water: &Water<'_>, pending: &mut Pending) {
    let ids = water.ids;
    let (nitrate, nitrite) = (masses::NO3_PER_N, masses::NO2_PER_N);
    let mut jump: Option<f64> = None;
    let mut spike: Option<f64> = None;
    for (id, factor) in [
        (ids.nitrate, Some(nitrate)),
        (ids.nitrite, Some(nitrite)),
        (ids.ammonia, None),
    ] {
        if !water.just_read(id) {
            continue;
        }
        let Some(series) = series(water, id) else {
            continue;
        };
        if let Some(factor) = factor {
            jump = larger(jump, factor_jump(series, factor));
        }
        spike = larger(spike, one_off(series));
    }
    if water.just_read(ids.ph)
        && let Some(series) = series(water, ids.ph)
    {
        spike = larger(spike, one_off(series));
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

/// How near (0 to 1) the step from the values before to the last one, or to the one before it if that was held, comes
/// to a factor, up or down.
fn factor_jump(series: &Series, factor: f64) -> Option<f64> {
    let values: Vec<f64> = series.newest().rev().take(6).map(|(_, v)| *v).collect();
    let near = |newer: f64, older: f64| {
        if newer <= 0.0 || older <= 0.0 {
            return 0.0;
        }
        let off = ((newer / older).ln().abs() - factor.ln()).abs();
        /// Kit steps and ordinary change blur a factor by about a fifth.
        const BLUR: f64 = 0.22;
        (1.0 - off / BLUR).clamp(0.0, 1.0)
    };
    // The step may have come with any of the last three values, as long as those after it held the new level.
    let steps = values
        .windows(2)
        .take(3)
        .enumerate()
        .map(|(n, pair)| match pair {
            [newer, older]
                if n == 0
                    || values
                        .first()
                        .is_some_and(|last| (last / newer).ln().abs() < 0.25) =>
            {
                near(*newer, *older)
            }
            _ => 0.0,
        });
    (values.len() >= 2).then(|| steps.fold(0.0, f64::max))
}

/// How much (0 to 1) the value before the last stood out from its two neighbors, which agree with each other.
fn one_off(series: &Series) -> Option<f64> {
    let mut newest = series.newest().rev().map(|(_, v)| *v);
    let (last, odd, before) = (newest.next()?, newest.next()?, newest.next()?);
    let between = (last - before).abs();
    let out = (odd - f64::midpoint(last, before)).abs();
    let size = last.abs().max(before.abs());
    let stands_out = out > 0.3 * size.max(0.2) && out > 4.0 * between;
    Some(if stands_out { 1.0 } else { 0.0 })
}
