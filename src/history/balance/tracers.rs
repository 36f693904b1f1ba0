//! Dilution or consumption? What nothing eats (chloride, sodium, conductivity less what nitrate explains) falls only
//! when water is replaced. And how much alkalinity was used against what the load should use.

use super::{Farm, Pending, Water, put};
use crate::history::memory::{DAY, Series};
use crate::vocabulary::ReadingId;
use crate::water::activity::CONDUCTIVITY_OF_NITRATE;
use crate::water::{feed, usual};

/// The window over which tracers and nitrate are compared.
const WINDOW: i64 = 10 * DAY;
pub(super) fn update(water: &Water<'_>, farm: &Farm, pending: &mut Pending) {
    let ids = water.ids;
    if water.changed(&[
        ids.nitrate,
        ids.chloride,
        ids.conductivity,
        ids.sodium,
        ids.salinity,
    ]) {
        let nitrate = fall(water, ids.nitrate);
        put(
            pending,
            ids.nitrate_fall_share,
            0,
            nitrate.map(|(share, _)| share),
        );
        let tracer = fall(water, ids.chloride)
            .or_else(|| fall(water, ids.sodium))
            .map(|(share, _)| share)
            .or_else(|| without_nitrate(water))
            .or_else(|| fall(water, ids.salinity).map(|(share, _)| share));
        put(pending, ids.tracer_fall_share, 0, tracer);
    }
    if water.just_read(ids.nitrate) {
        put(
            pending,
            ids.nitrogen_unaccounted,
            0,
            unaccounted(water, farm),
        );
    }
    if water.just_read(ids.alkalinity) {
        put(
            pending,
            ids.alkalinity_use_ratio,
            0,
            alkalinity_use(water, farm),
        );
    }
}

/// By which share a reading fell over the window (negative: it rose), and its level before.
fn fall(water: &Water<'_>, id: Option<ReadingId>) -> Option<(f64, f64)> {
    let series = series(water, id)?;
    let shift = series.shift(WINDOW)?;
    // A tracer measured long ago tells nothing of the present window.
    let (time, _) = series.last()?;
    let told = water.memory.now() - time <= WINDOW / 2 && shift.span >= DAY / 2;
    (told && shift.early > 0.0).then(|| (-shift.change / shift.early, shift.early))
}

fn series<'m>(water: &Water<'m>, id: Option<ReadingId>) -> Option<&'m Series> {
    water.memory.reading(id?)?.newest()
}

/// The fall of conductivity less what the fall of nitrate explains, as a share of the rest.
fn without_nitrate(water: &Water<'_>) -> Option<f64> {
    let (share, before) = fall(water, water.ids.conductivity)?;
    let (explained, of) = match fall(water, water.ids.nitrate) {
        Some((nitrate_share, nitrate)) => (
            nitrate_share * nitrate * CONDUCTIVITY_OF_NITRATE,
            nitrate * CONDUCTIVITY_OF_NITRATE,
        ),
        None => (0.0, 0.0),
    };
    let rest = before - of;
    (rest > before * 0.25).then(|| (share * before - explained) / rest)
}

/// The nitrogen budget over the window: of the ammonia nitrogen that the feed made, the share that is neither in the
/// water (ammonia, nitrite, nitrate), nor in the crop, nor gone with water that was replaced. Near 0 where all is
/// accounted for, near 1 where nitrogen vanishes (denitrification, or a test that reads low); below 0 where more is
/// found than the feed made. Crop uptake is known to a factor of two, so this is evidence of its sign and rough size.
fn unaccounted(water: &Water<'_>, farm: &Farm) -> Option<f64> {
    let ids = water.ids;
    let shift = series(water, ids.nitrate)?.shift(WINDOW)?;
    #[allow(clippy::cast_precision_loss)] // spans are far below 2^53 seconds
    let days = shift.span as f64 / 86_400.0;
    let (feed, volume) = (farm.feed_kg_per_day?, farm.volume_l?);
    let protein = farm.protein_percent.unwrap_or(usual::PROTEIN_PERCENT);
    let made = feed::ammonia(feed, protein).ok()? * days;
    let dissolved = |id| {
        let moved = series(water, id).and_then(|s| s.shift(WINDOW));
        moved.map_or(0.0, |s| s.change) * volume / 1000.0
    };
    let kept = dissolved(ids.nitrate) + dissolved(ids.ammonia) + dissolved(ids.nitrite);
    let crop = farm.plant_area_m2.unwrap_or(0.0) * usual::CROP_UPTAKE * days;
    let replaced = water
        .fresh(ids.makeup_share, WINDOW)
        .map_or(usual::MAKEUP_SHARE, |percent| percent / 100.0);
    let drained = replaced * days * shift.early * volume / 1000.0;
    (days >= 3.0 && made > 0.0).then(|| 1.0 - (kept + crop + drained) / made)
}

/// Observed loss of alkalinity over what nitrifying the feed's ammonia should use: near 1 where nitrification runs and
/// nothing gives alkalinity back; low where it has slowed, or where denitrification or base put some back.
fn alkalinity_use(water: &Water<'_>, farm: &Farm) -> Option<f64> {
    let shift = series(water, water.ids.alkalinity)?.shift(WINDOW)?;
    let feed = farm.feed_kg_per_day?;
    let volume = farm.volume_l?;
    #[allow(clippy::cast_precision_loss)] // spans are far below 2^53 seconds
    let days = shift.span as f64 / 86_400.0;
    let use_per_day =
        feed::alkalinity_use(feed, farm.protein_percent.unwrap_or(usual::PROTEIN_PERCENT)).ok()?;
    let expected = use_per_day * 1000.0 / volume * days;
    (expected > 0.0 && days >= 1.0).then(|| -shift.change / expected)
}
