//! What was known when: reading logs, windows and trends.

pub mod log;
