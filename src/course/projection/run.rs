//! Runs a water forward through a list of actions.

use super::dopri::{self, Exact, Stuck};
use super::farm::{Farm, Gas};
use super::rates::{Drive, rates};
use super::state::{Chemistry, Part, State};

/// Water that comes in.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct NewWater {
    /// C.
    pub temperature: f64,
    /// mg/L as CaCO3.
    pub alkalinity: f64,
    /// Inorganic carbon, mmol/L.
    pub carbon: f64,
    /// mg/L as N.
    pub ammonia: f64,
    /// mg/L as N.
    pub nitrite: f64,
    /// mg/L as N.
    pub nitrate: f64,
    /// mg/L.
    pub chloride: f64,
    /// mg/L.
    pub sodium: f64,
    /// mg/L.
    pub oxygen: f64,
}

/// What is done to the water at one moment.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Deed {
    /// Adds to one number of the water at once (mg/L; carbon mmol/L; alkalinity may be below zero).
    Add(Part, f64),
    /// Changes this share of the water.
    Exchange(f64, NewWater),
    /// Feeds this share of the usual feed from now on.
    Feed(f64),
    /// Warms (or cools) by this much a day from now on.
    Heat(f64),
}

/// A deed and when, in days from the start.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Action {
    /// Days from the start; actions come in the order of time.
    pub at: f64,
    /// What.
    pub deed: Deed,
}

/// The water at one moment of a run.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// Days from the start.
    pub t: f64,
    /// All numbers.
    pub y: State,
    /// pH.
    pub ph: f64,
    /// mg/L as N.
    pub un_ionized: f64,
    /// mg/L.
    pub carbon_dioxide: f64,
    /// The point right after an action.
    pub after_deed: bool,
}

/// How a run is made.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Manner {
    /// How carbon dioxide passes.
    pub gas: Gas,
    /// How exact.
    pub exact: Exact,
    /// Feed at the start, as a share of the usual feed.
    pub feed: f64,
}

/// For plans and projections.
pub const ORDINARY: Exact = Exact {
    relative: 1e-4,
    absolute: 1e-4,
    longest: 0.25,
};

/// To hold a plan against: steps at most half an hour long.
pub const FINE: Exact = Exact {
    relative: 1e-6,
    absolute: 1e-6,
    longest: 0.02,
};

/// Temperature may move so far before the constants are worked out anew, C.
const SAME_WARMTH: f64 = 0.05;

struct System<'f, 'k> {
    farm: &'f Farm<'k>,
    chem: Chemistry,
    ph: f64,
    drive: Drive,
}

impl System<'_, '_> {
    fn point(&mut self, t: f64, y: &State, after_deed: bool) -> Point {
        self.settle(y);
        let ph = self.ph;
        Point {
            t,
            y: *y,
            ph,
            un_ionized: self.chem.un_ionized(ph, Part::Ammonia.of(y)),
            carbon_dioxide: super::state::MG_PER_MMOL_CO2
                * self.chem.carbon_dioxide(ph, Part::Carbon.of(y)),
            after_deed,
        }
    }

    fn settle(&mut self, y: &State) {
        let t = Part::Temperature.of(y);
        if (t - self.chem.temperature).abs() > SAME_WARMTH
            && let Some(chem) =
                Chemistry::at(t, self.farm.ionic, self.farm.salinity, self.farm.pressure)
        {
            self.chem = chem;
        }
        self.ph = self.chem.ph(
            Part::Alkalinity.of(y),
            Part::Carbon.of(y),
            self.farm.phosphorus,
            self.ph,
        );
    }
}

/// Runs the water for so many days. The points hold the start, every step, and both sides of every action.
///
/// # Errors
/// [`Stuck`] when the numbers leave what can be reckoned.
pub fn run(
    farm: &Farm<'_>,
    start: &State,
    actions: &[Action],
    days: f64,
    manner: &Manner,
) -> Result<Vec<Point>, Stuck> {
    let t = Part::Temperature.of(start);
    let chem = Chemistry::at(t, farm.ionic, farm.salinity, farm.pressure).ok_or(Stuck)?;
    let (gas_exchange, breath) = farm.gas(manner.gas);
    let mut system = System {
        farm,
        chem,
        ph: 7.0,
        drive: Drive {
            feed: manner.feed,
            heat: 0.0,
            drifts: true,
            gas_exchange,
            breath,
        },
    };
    let mut y = *start;
    let mut now = 0.0;
    let mut points = vec![system.point(0.0, &y, false)];
    let within = actions.iter().filter(|a| a.at <= days).collect::<Vec<_>>();
    // What is done at one time is one change of the water.
    for together in within.chunk_by(|a, b| (b.at - a.at).abs() < 1e-9) {
        let at = together.first().map_or(now, |a| a.at.max(now));
        forward(&mut system, (now, at), &mut y, manner, &mut points)?;
        now = at;
        for action in together {
            act(&mut system, &mut y, action.deed);
        }
        let after = system.point(now, &y, true);
        points.push(after);
    }
    forward(&mut system, (now, days), &mut y, manner, &mut points)?;
    Ok(points)
}

fn forward(
    system: &mut System<'_, '_>,
    span: (f64, f64),
    y: &mut State,
    manner: &Manner,
    points: &mut Vec<Point>,
) -> Result<(), Stuck> {
    if span.1 <= span.0 {
        return Ok(());
    }
    dopri::advance(
        system,
        |s: &mut System<'_, '_>, t, y: &State| {
            s.ph = s.chem.ph(
                Part::Alkalinity.of(y),
                Part::Carbon.of(y),
                s.farm.phosphorus,
                s.ph,
            );
            rates(s.farm, y, t, &s.chem, s.ph, &s.drive)
        },
        |s, t, y| {
            let point = s.point(t, y, false);
            points.push(point);
        },
        span,
        y,
        &manner.exact,
    )
}

fn act(system: &mut System<'_, '_>, y: &mut State, deed: Deed) {
    match deed {
        Deed::Add(part, amount) => part.add(y, amount),
        Deed::Feed(share) => system.drive.feed = share,
        Deed::Heat(rate) => {
            system.drive.heat = rate;
            system.drive.drifts = false;
        }
        Deed::Exchange(share, new) => {
            for (part, value) in [
                (Part::Temperature, new.temperature),
                (Part::Alkalinity, new.alkalinity),
                (Part::Carbon, new.carbon),
                (Part::Ammonia, new.ammonia),
                (Part::Nitrite, new.nitrite),
                (Part::Nitrate, new.nitrate),
                (Part::Chloride, new.chloride),
                (Part::Sodium, new.sodium),
                (Part::Oxygen, new.oxygen),
            ] {
                let mixed = part.of(y) + share * (value - part.of(y));
                part.set(y, mixed);
            }
        }
    }
}
