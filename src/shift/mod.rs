//! The `shift` room: what one shift has to look at, measure and do; and the card for the wall.
//!
//! `window` is which shift and when, `last` when a round was last done, `rounds` what is due of them, `trend` what the
//! readings call for, `pending` what open incidents call for, `list` all of it in the order of a walk, `card` how long
//! there is when something stops.

mod blank;
mod card;
mod last;
mod list;
mod pending;
mod rounds;
mod trend;
mod window;

pub use blank::Blank;
pub use card::{Card, Stop, card};
pub use list::{Checklist, Ground, Item, Kind, Stretch, checklist};
pub use window::{Window, window};
