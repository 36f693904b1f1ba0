//! Corrections in timed steps, each simulated every way things may go before it is shown.
//!
//! | file | job |
//! | --- | --- |
//! | `value` | a plan, a wish, and why there is none |
//! | `ground` | what plans are made from, and how far readings can be trusted |
//! | `clock` | times of steps |
//! | `replay` | steps as actions on the water |
//! | `check` | courses held to limits |
//! | `made` | trying steps, and what all plans say |
//! | the others | one planner each |

mod base;
pub mod check;
mod chloride;
pub mod clock;
mod dechlorinate;
mod exchange;
mod feed;
mod ground;
mod made;
mod oxygen;
pub mod replay;
mod start_up;
mod supplement;
mod temperature;
mod value;
mod words;

pub use ground::{Doubt, Ground, Way, doubts};
pub use value::{Amount, Expect, Kept, Kind, Plan, Refused, Step, Trouble, Warmth, Wish};

/// Plans what is wished.
///
/// # Errors
/// [`Trouble`] when something that must be known is not, or the wish can't be meant so.
pub fn plan(ground: &Ground<'_>, wish: &Wish) -> Result<Plan, Trouble> {
    if !(wish.purity > 0.0 && wish.purity <= 100.0) {
        return Err(Trouble::Usage(ground.words().purity.clone()));
    }
    match wish.kind {
        Kind::Ph | Kind::Alkalinity => base::plan(ground, wish),
        Kind::Temperature => temperature::plan(ground, wish),
        Kind::Exchange => exchange::plan(ground, wish),
        Kind::Chloride => chloride::plan(ground, wish),
        Kind::Feed => feed::plan(ground, wish),
        Kind::Dechlorinate => dechlorinate::plan(ground, wish),
        Kind::Oxygen => oxygen::plan(ground, wish),
        Kind::StartUp => start_up::plan(ground, wish),
        Kind::Supplement => supplement::plan(ground, wish),
    }
}
