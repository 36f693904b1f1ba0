//! When a limit will be passed.

/// When a limit will be passed if nothing is done.
#[derive(Debug, Clone, PartialEq)]
pub struct Projection {
    /// Which limit, in words.
    pub limit: String,
    /// Unix seconds, at the earliest.
    pub earliest: i64,
    /// Unix seconds, at the latest; `None`: not within the time looked at.
    pub latest: Option<i64>,
}
