//! The `render` room (see the map in the crate's documentation).

pub mod plan;
