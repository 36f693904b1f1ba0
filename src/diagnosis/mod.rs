//! The `diagnosis` room (see the map in the crate's documentation).
