//! What the feed asks of filter, air, buffer and plants, and what there is of each.

use super::{Farm, Pending, Water, put};
use crate::history::memory::{DAY, HOUR};
use crate::water::biofilter::{self, Conditions};
use crate::water::feed::{self, OxygenFor};
use crate::water::{respiration, usual};

pub(super) fn update(water: &Water<'_>, farm: &Farm, pending: &mut Pending) {
    let ids = water.ids;
    let now = water.memory.now();
    if let Some(started) = farm.started
        && due(water, ids.system_age)
    {
        #[allow(clippy::cast_precision_loss)] // ages are far below 2^53 seconds
        let days = (now - started) as f64 / 86_400.0;
        put(pending, ids.system_age, 0, (days >= 0.0).then_some(days));
    }
    if let (Some(biomass), Some(volume)) = (farm.biomass_kg, farm.volume_l)
        && due(water, ids.stocking)
    {
        put(pending, ids.stocking, 0, Some(biomass / (volume / 1000.0)));
    }
    makeup(water, farm, pending);
    deaths(water, farm, pending);
    minutes(water, farm, pending);

    let triggers = [
        ids.feed,
        ids.ammonia,
        ids.nitrite,
        ids.alkalinity,
        ids.temperature,
    ];
    if !water.changed(&triggers) {
        return;
    }
    let Some(feed) = usual_feed(water, farm) else {
        return;
    };
    if let Some(area) = farm.plant_area_m2.filter(|a| *a > 0.0) {
        put(
            pending,
            ids.feed_per_plant_area,
            0,
            Some(feed * 1000.0 / area),
        );
    }
    if let Some(aeration) = farm.aeration_kg_per_day {
        let (low, high) = feed::oxygen_per_feed(OxygenFor::WholeSystem);
        let asked = feed * f64::midpoint(low, high);
        put(
            pending,
            ids.oxygen_margin,
            0,
            (asked > 0.0).then(|| aeration / asked),
        );
    }
    let protein = farm.protein_percent.unwrap_or(usual::PROTEIN_PERCENT);
    let Ok(made) = feed::ammonia(feed, protein) else {
        return; // grams of N a day
    };
    if made <= 0.0 {
        return;
    }
    if let Some(volume) = farm.volume_l {
        let per_liter = made * 1000.0 / volume;
        put(
            pending,
            ids.ammonia_per_load,
            0,
            water.today(ids.ammonia).map(|t| t / per_liter),
        );
        put(
            pending,
            ids.nitrite_per_load,
            0,
            water.today(ids.nitrite).map(|t| t / per_liter),
        );
        if let Some(alkalinity) = water.fresh(ids.alkalinity, 3 * DAY) {
            let days = feed::days_of_alkalinity(
                volume,
                alkalinity,
                usual::ALKALINITY_FLOOR,
                feed,
                protein,
            )
            .ok();
            put(pending, ids.alkalinity_days, 0, days);
        }
    }
    if let Some(area) = farm.area_m2 {
        put(pending, ids.ammonia_load, 0, Some(made / area));
        if let Some(t) = water.today(ids.temperature) {
            let conditions = Conditions {
                temperature: t.clamp(0.0, 36.0),
                ph: water.today(ids.ph).unwrap_or(7.0).clamp(5.0, 9.0),
                dissolved_oxygen: water.today(ids.oxygen).unwrap_or(6.0),
                total_ammonia: usual::TOTAL_AMMONIA,
                alkalinity: None,
                adapted: true,
            };
            let margin = biofilter::capacity(area, &conditions)
                .ok()
                .map(|c| c / made);
            put(pending, ids.nitrification_margin, 0, margin);
        }
    }
}

/// Slow values are put down once a day.
fn due(water: &Water<'_>, id: Option<crate::vocabulary::ReadingId>) -> bool {
    water.fresh(id, DAY - 1).is_none()
}

/// The feed of an ordinary day: what the site states, else the median of the log's last ten days.
fn usual_feed(water: &Water<'_>, farm: &Farm) -> Option<f64> {
    farm.feed_kg_per_day
        .or_else(|| {
            water
                .memory
                .reading(water.ids.feed?)?
                .newest()?
                .middle(10 * DAY)
        })
        .filter(|f| *f > 0.0)
}

/// Share of the volume that was added, in percent a day, over the last three days.
fn makeup(water: &Water<'_>, farm: &Farm, pending: &mut Pending) {
    if !water.just_read(water.ids.makeup) {
        return;
    }
    let (Some(volume), Some(track)) = (
        farm.volume_l,
        water.ids.makeup.and_then(|id| water.memory.reading(id)),
    ) else {
        return;
    };
    let now = water.memory.now();
    let Some(series) = track.newest() else { return };
    let added: f64 = series
        .newest()
        .filter(|(time, _)| now - time < 3 * DAY)
        .map(|(_, liters)| liters)
        .sum();
    // A log of less than three days tells of the days it has, at least of one.
    let begun = water.memory.begun().unwrap_or(now);
    #[allow(clippy::cast_precision_loss)] // ages are far below 2^53 seconds
    let days = ((now - begun) as f64 / 86_400.0).clamp(1.0, 3.0);
    put(
        pending,
        water.ids.makeup_share,
        0,
        Some(100.0 * added / volume / days),
    );
}

/// Percent of the stock that died in a day. The number of fish is reckoned from the biomass and a usual body mass, so
/// this is known to a factor of three at best.
fn deaths(water: &Water<'_>, farm: &Farm, pending: &mut Pending) {
    if !water.just_read(water.ids.deaths) {
        return;
    }
    let Some(series) = water
        .ids
        .deaths
        .and_then(|id| water.memory.reading(id))
        .and_then(|track| track.newest())
    else {
        return;
    };
    let (Some((time, dead)), Some(biomass)) = (series.last(), farm.biomass_kg) else {
        return;
    };
    #[allow(clippy::cast_precision_loss)] // ages are far below 2^53 seconds
    let days = series.before_last().map_or(1.0, |(before, _)| {
        ((time - before) as f64 / 86_400.0).clamp(0.25, 7.0)
    });
    let stock = biomass * 1000.0 / usual::FISH_G;
    put(
        pending,
        water.ids.dead_share,
        0,
        (stock > 0.0).then(|| 100.0 * dead / days / stock),
    );
}

/// Minutes until the fish alone draw the oxygen down to what is short, from the last reading.
fn minutes(water: &Water<'_>, farm: &Farm, pending: &mut Pending) {
    let ids = water.ids;
    if !water.just_read(ids.oxygen) {
        return;
    }
    let (Some(oxygen), Some(t), Some(biomass), Some(volume)) = (
        water.fresh(ids.oxygen, HOUR),
        water.today(ids.temperature),
        farm.biomass_kg,
        farm.volume_l,
    ) else {
        return;
    };
    let left = farm
        .oxygen_use
        .or_else(|| respiration::oxygen_use(t, usual::FISH_G, true).ok())
        .and_then(|each| {
            respiration::minutes_until(oxygen, farm.short_of_oxygen, biomass, volume, each).ok()
        });
    put(pending, ids.oxygen_minutes, 0, left);
}
