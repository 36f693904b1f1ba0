//! How a page looks: its width, and whether color may be used.

/// How a page looks.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Look {
    /// Columns.
    pub width: usize,
    /// Color may be used; words never depend on it.
    pub color: bool,
}
