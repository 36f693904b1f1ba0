//! One water at one moment: un-ionized ammonia, saturation, carbon dioxide, nitrous acid, chloride against nitrite.

use super::{Farm, Pending, Water, put};
use crate::history::memory::DAY;
use crate::water::{ammonia, anthonisen, carbonate, nitrite, oxygen};

/// Salinity of water nobody measured it in: fresh.
const FRESH: f64 = 0.0;
/// Ratios against less nitrite than a kit can see say nothing.
const LEAST_NITRITE: f64 = 0.02;

pub(super) fn update(water: &Water<'_>, farm: &Farm, pending: &mut Pending) {
    let ids = water.ids;
    let salinity = water.fresh(ids.salinity, 14 * DAY).unwrap_or(FRESH);
    let temperature = water.today(ids.temperature);
    let ph = water.today(ids.ph);
    if water.changed(&[ids.temperature, ids.ph, ids.ammonia])
        && let (Some(total), Some(t), Some(ph)) = (water.today(ids.ammonia), temperature, ph)
    {
        let free = ammonia::un_ionized(total, t, ph, salinity).ok();
        put(pending, ids.un_ionized_ammonia, 0, free);
    }
    if water.changed(&[ids.oxygen, ids.temperature])
        && let Some(t) = temperature
        && let Ok(pressure) = oxygen::pressure_at(farm.elevation_m)
    {
        saturation(water, t, salinity, pressure, pending);
    }
    if water.changed(&[ids.ph, ids.alkalinity])
        && let (Some(alkalinity), Some(t), Some(ph)) =
            (water.fresh(ids.alkalinity, 3 * DAY), temperature, ph)
    {
        let held = carbonate::Sample::new(t, ph, alkalinity)
            .carbon_dioxide()
            .ok();
        put(pending, ids.carbon_dioxide_from_ph, 0, held);
    }
    let measured = water.today(ids.nitrite);
    if water.changed(&[ids.nitrite, ids.chloride, ids.salinity])
        && let Some(nitrite) = measured
    {
        let salty = (salinity > 1.0).then_some(salinity * 1000.0 * nitrite::CHLORIDE_IN_SEA_SALT);
        let chloride = water.fresh(ids.chloride, 10 * DAY).or(salty);
        let ratio = chloride.map(|c| (c / nitrite.max(LEAST_NITRITE)).min(10_000.0));
        put(pending, ids.chloride_to_nitrite, 0, ratio);
    }
    if water.changed(&[ids.nitrite, ids.ph, ids.temperature])
        && let (Some(nitrite), Some(t), Some(ph)) = (measured, temperature, ph)
    {
        let acid = anthonisen::free_nitrous_acid(nitrite, ph, t).ok();
        put(pending, ids.free_nitrous_acid, 0, acid);
    }
    if water.changed(&[ids.nitrite, ids.ammonia])
        && let (Some(nitrite), Some(total)) = (measured, water.today(ids.ammonia))
    {
        /// Below this a kit sees no ammonia, and a ratio to it would be of noise.
        const LEAST_AMMONIA: f64 = 0.1;
        put(
            pending,
            ids.nitrite_to_ammonia,
            0,
            Some(nitrite / total.max(LEAST_AMMONIA)),
        );
    }
}

fn saturation(water: &Water<'_>, t: f64, salinity: f64, pressure: f64, pending: &mut Pending) {
    let Some(track) = water.ids.oxygen.and_then(|id| water.memory.reading(id)) else {
        return;
    };
    let now = water.memory.now();
    for (place, series) in track.places() {
        if let Some((time, value)) = series.last()
            && time == now
        {
            let percent = oxygen::to_saturation(value, t, salinity, pressure).ok();
            put(pending, water.ids.oxygen_saturation, place, percent);
        }
    }
}
