//! Forward chaining over graded facts.
//!
//! `degree` is graded truth, `leaf` judges one test against the memory of a farm, `compile` turns the rule base into
//! flat tables for one site, `run` keeps the facts up to date row by row, `proof` says what a fact rests on. This room
//! knows no water and no fish: only ids, numbers and times.

mod compile;
mod degree;
mod leaf;
mod measure;
mod proof;
mod run;
mod site;

pub use compile::Program;
pub use degree::Degree;
pub use leaf::{Judged, Leaf, Saw};
pub use measure::{Measured, measure};
pub use proof::{Proof, prove};
pub use run::Engine;
pub use site::Limits;
