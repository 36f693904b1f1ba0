//! The files that people write (logs and site files) through the library: good ones, and a table of malformed ones.

mod corrections;
mod csv;
mod json;
mod malformed;
mod merging;
mod properties;
mod site;
mod times;
mod words;
