//! The numbers of one farm that a projection runs on.

use crate::knowledge::Kinetics;

/// What stays the same through a run.
#[derive(Debug, Clone)]
pub struct Farm<'k> {
    /// Rates.
    pub kinetics: &'k Kinetics,
    /// Liters of water.
    pub volume_l: f64,
    /// mg N/L/day of ammonia that the usual feed gives; 0 where nothing tells.
    pub load: f64,
    /// mg N/L/day that the plants take at most.
    pub plants: f64,
    /// Exchange of oxygen with air, 1/day.
    pub oxygen_exchange: f64,
    /// Oxygen that fish and all that rots use with the usual feed, mg/L/day; nitrification apart.
    pub respiration: f64,
    /// Exchange of carbon dioxide with air, 1/day.
    pub carbon_exchange: f64,
    /// Carbon dioxide that comes with the usual feed, mmol/L/day; what nitrification frees from bicarbonate apart.
    pub breath: f64,
    /// The most that the wetted area turns over at 20 C, mg N/L/day.
    pub ceiling: Option<f64>,
    /// Air pressure, kPa.
    pub pressure: f64,
    /// g/L.
    pub salinity: f64,
    /// mol/L.
    pub ionic: f64,
    /// mol/L.
    pub phosphorus: f64,
    /// Carbon dioxide of water in balance with outdoor air, mmol/L.
    pub air_carbon_dioxide: f64,
    /// Alkalinity that comes in by itself or by routine, mg/L as CaCO3 a day: makeup water, shells, usual doses of base.
    pub supply: f64,
    /// A change of temperature that is under way: C/day now, wearing off.
    pub drift: f64,
}

/// How carbon dioxide passes between water and air.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Gas {
    /// Not at all: for minutes, no water stays so for days.
    Closed,
    /// At a quarter of the usual pace.
    Slow,
    /// At the pace that keeps the present carbon dioxide where it is.
    Usual,
    /// So fast that it is always settled.
    Open,
}

/// How much faster than usual gas passes in the open case; enough to settle within the hour, and not stiff.
const OPEN_PER_DAY: f64 = 72.0;
const SLOW: f64 = 0.25;

impl Farm<'_> {
    /// Exchange (1/day) and breath (mmol/L/day) of carbon dioxide: with more exchange, more breath keeps the same level.
    pub fn gas(&self, gas: Gas) -> (f64, f64) {
        let usual = self.carbon_exchange;
        match gas {
            Gas::Closed => (0.0, 0.0),
            Gas::Slow => (usual * SLOW, self.breath * SLOW),
            Gas::Usual => (usual, self.breath),
            Gas::Open => {
                let open = usual.max(OPEN_PER_DAY);
                (open, self.breath * open / usual.max(1e-9))
            }
        }
    }
}
