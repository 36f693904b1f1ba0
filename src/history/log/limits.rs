//! How large the parts of a log may be, so that a broken file costs neither memory nor patience. All are far above
//! what a farm writes.

/// Bytes of one cell.
pub const CELL: usize = 10_000;
/// Bytes of one row, all its lines together.
pub const ROW: usize = 100_000;
/// Columns of a file, and different keys in a file of JSON lines.
pub const COLUMNS: usize = 256;
/// Different places in all logs of one call.
pub const PLACES: usize = 1_000;
/// Files in one call.
pub const FILES: usize = 1_000;
/// Problems that are kept word for word; the rest is counted (data contract, section 8).
pub const PROBLEMS: usize = 100;
/// Rows of one and the same time that are held back until their order is sure.
pub const TOGETHER: usize = 256;
