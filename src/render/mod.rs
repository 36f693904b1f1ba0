//! The `render` room: text and JSON of the values of [`crate::assessment`] and of faults. It computes nothing.

mod block;
pub mod checklist;
mod evidence;
mod fault;
mod html;
pub mod incident;
pub mod json;
pub mod listing;
mod look;
mod markdown;
mod page;
pub mod plan;
pub mod recorded;
mod replay;
mod report;
mod safe;
mod seen;
mod text;
mod units;
mod when;
pub mod why;

pub use block::Block;

pub use fault::faults;
pub use look::Look;
pub use markdown::markdown;
pub use page::diagnosis;
pub use replay::line as replay_line;
pub use report::Report;
pub use seen::seen;
pub use text::text;
pub use units::amount;
