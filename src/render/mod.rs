//! The `render` room: text and JSON of the values of [`crate::assessment`] and of faults. It computes nothing.

mod evidence;
mod fault;
pub mod json;
mod look;
mod replay;
mod report;
mod units;
mod when;

pub use fault::faults;
pub use look::Look;
pub use replay::line as replay_line;
pub use report::Report;
