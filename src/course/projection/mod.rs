//! The water carried forward in time: one mixed loop of fish, filter, plants, air and what is done to it.
//!
//! | file | job |
//! | --- | --- |
//! | `dopri` | the integrator |
//! | `state` | the numbers of a water, and pH by equilibrium |
//! | `farm` | what stays the same through a run |
//! | `rates` | how fast everything changes |
//! | `run` | a water, a list of actions, a course |
//! | `readings` | what is known of the water now, and how old it is |
//! | `begin` | farm and water from a site and its log |
//! | `capacity` | what the filter can do at present, and how sure that is |
//! | `ahead` | when which limit is passed if nothing is done |

mod ahead;
mod begin;
mod capacity;
mod dopri;
mod farm;
mod rates;
mod readings;
mod run;
mod state;

pub use ahead::{area, projections};
pub use begin::{Begin, Extreme, Lacks};
pub use capacity::{Capacity, Span};
pub use dopri::{Exact, Stuck};
pub use farm::{Farm, Gas};
pub use rates::{Nitrifying, metabolism, nitrifying};
pub use readings::{Known, Readings};
pub use run::{Action, Deed, FINE, Manner, NewWater, ORDINARY, Point, run};
pub use state::{Chemistry, MG_PER_MMOL_CO2, Part, SIZE, State};
