//! What to do: steps ranked by most good for least harm, what to leave alone, first aid, cautions.

mod advice;
pub mod plan;
pub mod projection;
pub mod standing;

pub use advice::{Advice, Advised, Ground, Warned, advise};
