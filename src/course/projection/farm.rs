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
    /// How far carbon dioxide stands above water in balance with air, mmol/L, at the present feed.
    pub above_air: f64,
    /// What nitrification frees of it from bicarbonate at present, mmol/L/day.
    pub freed: f64,
    /// Breathing at the present feed, as a share of that at the usual feed.
    pub metabolism: f64,
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
    /// Alkalinity is held by usual doses of base, whatever the filter takes: it moves by so much a day (mg/L as CaCO3).
    /// `None`: it goes where supply and filter take it.
    pub held: Option<f64>,
    /// A change of temperature that is under way: C/day now, wearing off.
    pub drift: f64,
}

/// How carbon dioxide passes between water and air.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Gas {
    /// Not at all: for minutes, no water stays so for days.
    Closed,
    /// More slowly than usual: calm air, covered tanks.
    Slow,
    /// At the pace that keeps the present carbon dioxide where it is.
    Usual,
    /// So fast that it is always settled.
    Open,
}

/// How much faster than usual gas passes in the open case; enough to settle within the hour, and not stiff.
const OPEN_PER_DAY: f64 = 72.0;
const SLOW: f64 = 0.6;

impl Farm<'_> {
    /// Exchange (1/day) of carbon dioxide, and the breath (mmol/L/day, of the usual feed) that keeps it where it is.
    pub fn gas(&self, gas: Gas) -> (f64, f64) {
        let usual = self.carbon_exchange;
        let exchange = match gas {
            Gas::Closed => return (0.0, 0.0),
            // Never so slow that what nitrification frees alone would lift the level.
            Gas::Slow if self.above_air > 1e-9 => {
                usual.min((usual * SLOW).max(self.freed / self.above_air))
            }
            Gas::Slow => usual * SLOW,
            Gas::Usual => usual,
            Gas::Open => usual.max(OPEN_PER_DAY),
        };
        (
            exchange,
            (exchange * self.above_air - self.freed) / self.metabolism.max(1e-9),
        )
    }
}
