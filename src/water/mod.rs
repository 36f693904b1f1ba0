//! The `water` room (see the map in the crate's documentation).
