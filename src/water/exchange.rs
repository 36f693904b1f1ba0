//! Water exchange and mixing: mass is kept, whatever is in it.

use super::range::{OutOfRange, Range};

/// Share of the water that is changed at once.
pub const FRACTION: Range = Range::new("exchange_fraction", 0.0, 1.0, "");
/// Tank volumes that flow through.
pub const VOLUMES: Range = Range::not_negative("volumes_through", "volumes");

/// Share (0-1) of what was there that is left after changing a share (0-1) so many times.
///
/// # Errors
/// [`OutOfRange`].
pub fn left_after_batches(exchange_fraction: f64, times: f64) -> Result<f64, OutOfRange> {
    const TIMES: Range = Range::not_negative("times", "");
    Ok((1.0 - FRACTION.check(exchange_fraction)?).powf(TIMES.check(times)?))
}

/// Share (0-1) left in a well-mixed tank after so many volumes have flowed through.
///
/// # Errors
/// [`OutOfRange`].
pub fn left_after_flow(volumes_through: f64) -> Result<f64, OutOfRange> {
    Ok((-VOLUMES.check(volumes_through)?).exp())
}

/// Share of the way from `now` to `makeup` that is left at `target`; all in one unit.
fn way_left(now: f64, makeup: f64, target: f64) -> Result<f64, OutOfRange> {
    let now = Range::not_negative("now", "").check(now)?;
    let makeup = Range::not_negative("makeup", "").check(makeup)?;
    // Exchange moves a value toward the makeup water, and never past it.
    let between = Range::new("target", now.min(makeup), now.max(makeup), "");
    let target = between.check(target)?;
    if target == now {
        return Ok(1.0);
    }
    Ok((target - makeup) / (now - makeup))
}

/// Share (0-1) to change at once to bring a concentration from `now` to `target` with makeup water; all in one unit.
///
/// # Errors
/// [`OutOfRange`]; the target has to lie between the two.
pub fn batch_to_reach(now: f64, makeup: f64, target: f64) -> Result<f64, OutOfRange> {
    Ok(1.0 - way_left(now, makeup, target)?)
}

/// Tank volumes to run through to do the same in a well-mixed tank.
///
/// # Errors
/// [`OutOfRange`]; the target has to lie between the two, and short of the makeup water, which is never quite reached.
pub fn flow_to_reach(now: f64, makeup: f64, target: f64) -> Result<f64, OutOfRange> {
    let left = way_left(now, makeup, target)?;
    if left <= 0.0 {
        let unit = "(the makeup water's own value is never quite reached)";
        let range = Range::new("target", now.min(makeup), now.max(makeup), unit);
        return Err(OutOfRange {
            value: target,
            range,
        });
    }
    // No minus zero when there is nothing to do.
    Ok((-left.ln()).max(0.0))
}

/// Value of two waters mixed, by volume; both volumes in one unit, both values in one unit. For anything that is
/// conserved: a concentration, alkalinity, temperature. Not for pH.
///
/// # Errors
/// [`OutOfRange`].
pub fn mixed(volume_a: f64, value_a: f64, volume_b: f64, value_b: f64) -> Result<f64, OutOfRange> {
    const ANY: Range = Range::new("value", f64::MIN, f64::MAX, "");
    let a = Range::positive("volume_a", "L").check(volume_a)?;
    let b = Range::not_negative("volume_b", "L").check(volume_b)?;
    let share = b / (a + b);
    Ok(ANY.check(value_a)? * (1.0 - share) + ANY.check(value_b)? * share)
}

/// The largest share (0-1) to change at once so that temperature moves by no more than `max_drop` (C).
///
/// # Errors
/// [`OutOfRange`].
pub fn largest_for_temperature(
    temperature: f64,
    makeup_temperature: f64,
    max_drop: f64,
) -> Result<f64, OutOfRange> {
    const WATER: Range = Range::new("temperature", -2.0, 60.0, "C");
    let apart = WATER.check(temperature)?
        - WATER
            .named("makeup_temperature")
            .check(makeup_temperature)?;
    let drop = Range::positive("max_drop", "C").check(max_drop)?;
    Ok(if apart == 0.0 {
        1.0
    } else {
        (drop / apart.abs()).min(1.0)
    })
}

/// Concentration (mg/L) that a source (g/day) settles at with this exchange (L/day) of makeup water (mg/L).
///
/// # Errors
/// [`OutOfRange`].
pub fn steady(
    makeup: f64,
    source_g_per_day: f64,
    exchange_l_per_day: f64,
) -> Result<f64, OutOfRange> {
    let makeup = Range::not_negative("makeup", "mg/L").check(makeup)?;
    let source = Range::not_negative("source_g_per_day", "g/day").check(source_g_per_day)?;
    let exchange = Range::positive("exchange_l_per_day", "L/day").check(exchange_l_per_day)?;
    Ok(makeup + 1000.0 * source / exchange)
}
