//! Chemistry and biology of fish water as pure functions: numbers in, numbers out, no rules, no files, no clock.

pub mod masses;
pub mod units;
