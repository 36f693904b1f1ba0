//! The `cli` room (see the map in the crate's documentation).

pub mod pace;
pub mod water;
