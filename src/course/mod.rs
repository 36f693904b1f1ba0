//! What to do: steps ranked by most good for least harm, what to leave alone, first aid, cautions.

mod advice;
mod projected;
mod span;
pub mod plan;
pub mod projection;
pub mod standing;

pub use projected::Projection;
pub use span::span;
pub use advice::{Advice, Advised, Ground, Warned, advise};
