//! Exit statuses (data contract, section 10).

use std::process::ExitCode;

/// How a run ended.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Exit {
    /// 0: done.
    Done,
    /// 1: something failed that is not the user's doing, such as a full disk.
    Failed,
    /// 2: wrong usage.
    Usage,
    /// 3: an input can't be used.
    BadInput,
    /// 4: the rule base can't be used.
    BadRules,
    /// 10: `--alert-at` was given and the verdict is at that level or above.
    Alert,
    /// 130: interrupted.
    Interrupted,
}

impl Exit {
    /// The number that the shell sees.
    pub fn status(self) -> u8 {
        match self {
            Self::Done => 0,
            Self::Failed => 1,
            Self::Usage => 2,
            Self::BadInput => 3,
            Self::BadRules => 4,
            Self::Alert => 10,
            Self::Interrupted => 130,
        }
    }
}

impl From<Exit> for ExitCode {
    fn from(exit: Exit) -> Self {
        exit.status().into()
    }
}
