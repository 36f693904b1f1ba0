//! What to do: steps ranked by most good for least harm, what to leave alone, first aid, cautions.

mod advice;
pub mod plan;
mod projected;
pub mod projection;
mod span;
pub mod standing;

pub use advice::{Advice, Advised, Ground, Warned, advise};
pub use projected::Projection;
pub use span::span;
