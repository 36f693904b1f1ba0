//! The files that people write (logs and site files) through the library: good ones, and a table of malformed ones.

// A test that can't go on fails, and says where: that is what these are for.
#![allow(clippy::unwrap_used, clippy::panic)]

mod corrections;
mod csv;
mod json;
mod malformed;
mod merging;
mod properties;
mod site;
mod times;
mod words;
