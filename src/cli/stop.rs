//! Why a command ended without its answer.

use std::io;

use super::Exit;
use super::pace::PaceError;
use super::water::WaterError;
use crate::fault::Fault;

/// Why a command ended early.
#[derive(Debug)]
pub(super) enum Stop {
    /// Asked for in a way that can't be answered.
    Usage(Box<Fault>),
    /// An input can't be used.
    Input(Vec<Fault>),
    /// The rule base can't be used.
    Rules(Vec<Fault>),
    /// A calculation gives no number; the message holds its cure.
    Water(Box<WaterError>),
    /// No plan can be made; the message holds its cure.
    Pace(Box<PaceError>),
    /// A file can't be changed, which is not the user's doing.
    Failed(Box<Fault>),
    /// The answer can't be written.
    Write(io::Error),
    /// Whoever reads the answer has read enough.
    ClosedPipe,
}

impl Stop {
    /// Asked for in a way that can't be answered.
    pub fn usage(fault: Fault) -> Self {
        Self::Usage(Box::new(fault))
    }

    /// How the run ends.
    pub fn exit(&self) -> Exit {
        match self {
            Self::Usage(_) => Exit::Usage,
            Self::Input(_) => Exit::BadInput,
            Self::Rules(_) => Exit::BadRules,
            Self::Water(error) => match error.exit_status() {
                1 => Exit::Failed,
                2 => Exit::Usage,
                _ => Exit::BadInput,
            },
            Self::Pace(error) => match error.exit_status() {
                1 => Exit::Failed,
                2 => Exit::Usage,
                _ => Exit::BadInput,
            },
            Self::Failed(_) | Self::Write(_) => Exit::Failed,
            Self::ClosedPipe => Exit::Done,
        }
    }

    /// The whole of what is to be said, where it is no fault with a place.
    pub fn message(&self) -> Option<String> {
        match self {
            Self::Water(error) => Some(error.to_string()),
            Self::Pace(error) => Some(error.to_string()),
            _ => None,
        }
    }

    /// What is to be said about it.
    pub fn faults(&self) -> Vec<Fault> {
        match self {
            Self::Usage(fault) | Self::Failed(fault) => vec![fault.as_ref().clone()],
            Self::Input(faults) | Self::Rules(faults) => faults.clone(),
            Self::Write(error) => vec![Fault::whole(
                "unwritable",
                format!("the answer can't be written: {error}"),
                "check that there is room where it goes",
            )],
            Self::Water(_) | Self::Pace(_) | Self::ClosedPipe => Vec::new(),
        }
    }
}

impl From<io::Error> for Stop {
    fn from(error: io::Error) -> Self {
        if error.kind() == io::ErrorKind::BrokenPipe {
            Self::ClosedPipe
        } else {
            Self::Write(error)
        }
    }
}
