//! How fast everything changes at a state: feeding and excretion, two-step nitrification, plants, gas.

use super::farm::Farm;
use super::state::{Chemistry, Part, SIZE, State};
use crate::water::masses::CACO3_PER_MEQ;
use crate::water::nitrification::{self, Basis};

/// What drives the water from outside, constant between two actions.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Drive {
    /// Feed as a share of the usual feed.
    pub feed: f64,
    /// Warming by hand, C/day.
    pub heat: f64,
    /// Whether a change of temperature that was under way goes on.
    pub drifts: bool,
    /// Exchange of carbon dioxide, 1/day.
    pub gas_exchange: f64,
    /// Breath of the usual feed, mmol/L/day of carbon dioxide.
    pub breath: f64,
}

/// Fish that fast breathe half as much as fed ones (Fu et al. 2005; see `water::respiration`).
pub fn metabolism(feed: f64) -> f64 {
    f64::midpoint(1.0, feed.max(0.0))
}

/// The two steps at a state, mg N/L/day.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Nitrifying {
    /// Ammonia to nitrite, and as a share of what the bacteria could do at 20 C.
    pub ammonia: (f64, f64),
    /// Nitrite to nitrate, likewise.
    pub nitrite: (f64, f64),
}

fn monod(value: f64, half: f64) -> f64 {
    let value = value.max(0.0);
    value / (half + value)
}

/// What nitrifying bacteria do at a state.
pub fn nitrifying(farm: &Farm<'_>, y: &State, chem: &Chemistry, ph: f64) -> Nitrifying {
    let k = farm.kinetics;
    let warmer = Part::Temperature.of(y) - 20.0;
    let oxygen = Part::Oxygen.of(y);
    let (tan, nitrite) = (Part::Ammonia.of(y).max(0.0), Part::Nitrite.of(y).max(0.0));
    let below_best = (k.ph_best.value - ph).max(0.0);
    let sudden = (Part::UsedToPh.of(y) - ph).max(0.0);
    let slope = k.ph_slope.value / (1.0 - k.ph_slope.value);
    let acid = (1.0 - slope * below_best) * (1.0 - k.ph_shock_slope.value * sudden).max(0.0);
    let acid = acid.clamp(k.ph_floor.value, 1.0);
    let buffer = monod(Part::Alkalinity.of(y), k.alkalinity_half.value);
    let free_ammonia = chem.un_ionized(ph, tan);
    let free_acid = chem.nitrous_acid(ph, nitrite);
    let held = |value: f64, half: f64| half / (half + value);
    let first = monod(tan, k.ammonia_half.value)
        * monod(oxygen, k.ammonia_oxygen_half.value)
        * k.ammonia_growth_theta.value.powf(warmer)
        * acid
        * buffer
        * held(free_ammonia, k.ammonia_free_ammonia.value)
        * held(free_acid, k.ammonia_free_nitrous_acid.value);
    let second = monod(nitrite, k.nitrite_half.value)
        * monod(oxygen, k.nitrite_oxygen_half.value)
        * k.nitrite_growth_theta.value.powf(warmer)
        * acid
        * held(free_ammonia, k.nitrite_free_ammonia.value)
        * held(free_acid, k.nitrite_free_nitrous_acid.value);
    Nitrifying {
        ammonia: (Part::AmmoniaOxidizers.of(y) * first, first),
        nitrite: (Part::NitriteOxidizers.of(y) * second, second),
    }
}

/// The change of every number in a day.
pub fn rates(
    farm: &Farm<'_>,
    y: &State,
    t: f64,
    chem: &Chemistry,
    ph: f64,
    drive: &Drive,
) -> State {
    let k = farm.kinetics;
    let n = nitrifying(farm, y, chem, ph);
    let (first, second) = (n.ammonia.0, n.nitrite.0);
    let mut d = [0.0; SIZE];

    // Feed goes through the gut; a part of the excretion is the fish's own and goes on when they fast.
    let starved = k.starved_share.value;
    let eaten = farm.load * (1.0 - starved) * drive.feed;
    let own = farm.load * starved;
    let excreted = Part::Gut.of(y) * 24.0 / k.excretion_hours.value;
    let nitrate = Part::Nitrate.of(y).max(0.0);
    let plants = farm.plants * monod(nitrate, k.plant_half.value);
    let lost = k.denitrification.value * nitrate;
    Part::Gut.set(&mut d, eaten - excreted);
    Part::Ammonia.set(&mut d, excreted + own - first);
    Part::Nitrite.set(&mut d, first - second);
    Part::Nitrate.set(&mut d, second - plants - lost);
    Part::NitrogenIn.set(&mut d, eaten + own);
    Part::NitrogenOut.set(&mut d, plants + lost);

    // Nitrification takes alkalinity; plants that take nitrate and denitrification give about half of it back.
    let taken = nitrification::ALKALINITY_WITH_CELLS * first;
    let back = nitrification::DENITRIFICATION_ALKALINITY * (plants + lost);
    let supply = farm.held.map_or(farm.supply, |by| by + taken - back);
    Part::Alkalinity.set(&mut d, back - taken + supply);

    let metabolism = metabolism(drive.feed);
    let carbon_dioxide = chem.carbon_dioxide(ph, Part::Carbon.of(y));
    let gas =
        drive.gas_exchange * (farm.air_carbon_dioxide - carbon_dioxide) + drive.breath * metabolism;
    // What comes in by routine is counted as bicarbonate.
    let carbon = gas + supply / CACO3_PER_MEQ;
    Part::Carbon.set(&mut d, carbon);
    Part::CarbonIn.set(&mut d, carbon);

    let oxygen = Part::Oxygen.of(y);
    let used = nitrification::oxygen(Basis::EnergyFirstStep) * first
        + nitrification::oxygen(Basis::EnergySecondStep) * second
        + farm.respiration * metabolism;
    // The last traces are not used up: breathing falls with them.
    let used = used * monod(oxygen, 0.1);
    Part::Oxygen.set(
        &mut d,
        farm.oxygen_exchange * (chem.saturation - oxygen) - used,
    );

    let growth = |largest: f64, share: f64, there: f64| {
        let room = farm
            .ceiling
            .map_or(1.0, |c| (1.0 - there / c.max(1e-9)).max(0.0));
        let decay = k.decay.value * k.decay_theta.value.powf(Part::Temperature.of(y) - 20.0);
        there * (largest * share * room - decay)
    };
    let there = Part::AmmoniaOxidizers.of(y);
    let grown = growth(k.ammonia_growth.value, n.ammonia.1, there);
    Part::AmmoniaOxidizers.set(&mut d, grown);
    let there = Part::NitriteOxidizers.of(y);
    let grown = growth(k.nitrite_growth.value, n.nitrite.1, there);
    Part::NitriteOxidizers.set(&mut d, grown);
    Part::UsedToPh.set(&mut d, (ph - Part::UsedToPh.of(y)) / k.ph_adaptation.value);

    let drift = if drive.drifts {
        farm.drift * (-t * 24.0 / k.temperature_drift.value).exp()
    } else {
        0.0
    };
    Part::Temperature.set(&mut d, drive.heat + drift);
    d
}
