//! Causes, steps and cautions put together: the value that a page shows and a script reads. Nothing here prints.

mod assess;
mod family;
mod overrides;
mod proven;
mod routine;
mod values;

pub use crate::course::{Projection, span};
pub use assess::{Assessor, Review};
pub use proven::{CauseProof, ProvenPiece};
pub use values::{
    Assessment, Avoid, CauseReport, Derived, LeadingFamily, Missing, Override, StepReport, Tell,
    VerifyReport,
};
