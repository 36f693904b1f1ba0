//! The rule base: TOML in, a checked [`Knowledge`] out.
//!
//! `schema` says what the rule base is made of, `test` is the rule language, `load` reads it with every fault placed,
//! `check` finds what is wrong between entries, `origin` says which files there are (embedded, then a farm's overlay).
//! This room knows words and numbers; it knows no history and evaluates nothing.

mod check;
mod ids;
mod load;
mod origin;
mod pace;
mod pace_words;
mod schema;
mod sourced;
mod test;

pub use check::check;
pub use ids::{CauseId, FindingId, StepId};
pub use load::load;
pub use origin::{embedded, embedded_text, folder, shipped};
pub use pace::{Dosable, InstrumentDoubt, Kinetic, Kinetics, PaceLimit, PaceLimits, Pacing, Use};
pub use pace_words::PaceWords;
pub use schema::*;
pub use sourced::{Coverage, SourceUse, Sourced, coverage, sourced};
pub use test::{Bound, Change, Limit, LimitLevel, Over, Ramp, Side, SiteTest, Test};
