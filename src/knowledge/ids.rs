//! Numbers that stand for the entries of the rule base once it is loaded.

use serde::{Deserialize, Serialize};

/// Index of a finding in [`super::Knowledge::findings`].
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
pub struct FindingId(pub u16);

/// Index of a cause in [`super::Knowledge::causes`].
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
pub struct CauseId(pub u16);

/// Index of a step in [`super::Knowledge::steps`].
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
pub struct StepId(pub u16);

impl FindingId {
    /// As an index.
    pub fn index(self) -> usize {
        usize::from(self.0)
    }
}

impl CauseId {
    /// As an index.
    pub fn index(self) -> usize {
        usize::from(self.0)
    }
}

impl StepId {
    /// As an index.
    pub fn index(self) -> usize {
        usize::from(self.0)
    }
}
