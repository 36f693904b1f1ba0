//! Whole-program tests: what is typed, and exactly what comes back.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

#[path = "cli/harness.rs"]
mod harness;

#[path = "cli/exits.rs"]
mod exits;
#[path = "cli/json.rs"]
mod json;
#[path = "cli/knowledge.rs"]
mod knowledge;
#[path = "cli/logs.rs"]
mod logs;
#[path = "cli/malformed.rs"]
mod malformed;
#[path = "cli/page.rs"]
mod page;
#[path = "cli/why.rs"]
mod why;
