//! What was known when: reading logs, remembering them, windows, trends, the farm's own baseline, and what follows by
//! arithmetic (balances). This room knows readings, signs and events by number and nothing about what they mean.

pub mod answers;
pub mod balance;
pub mod log;
pub mod memory;
