//! Asking at the tank: what next, and when to stop.
//!
//! A [`Walk`] is asked [`Walk::next`] and told answers; it can go back any number of answers, because everything it knows
//! is worked out again from the list of answers. `ask` is what can be asked and answered, `reach` what would settle a
//! test, `worth` what asking is worth, `next` which question comes and when asking stops, `attendant` answers from a
//! file, `typed` what a person types, `kept` the file an interrupted walk is taken up from. This room knows no terminal and reads no clock.

mod aid;
mod ask;
mod attendant;
pub mod kept;
mod next;
mod reach;
mod session;
pub mod typed;
mod worth;

pub use ask::{Answer, Ask, Given};
pub use attendant::{Attendant, ids};
pub use next::{Next, Screen, Stop};
pub use session::{Stage, Turn, Walk};
pub use worth::Prospect;
