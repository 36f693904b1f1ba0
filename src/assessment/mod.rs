//! Causes, steps and cautions put together: the value that a page shows and a script reads. Nothing here prints.

mod assess;
mod routine;
mod values;

pub use assess::{Assessor, Review};
pub use routine::span;
pub use values::{
    Assessment, Avoid, CauseReport, Derived, Missing, Override, Projection, StepReport, Tell,
    VerifyReport,
};
