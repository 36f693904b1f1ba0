//! Every calculation by name: what `gillside water` offers, and what the reference checks hold to.
//!
//! | file | job |
//! | --- | --- |
//! | [`key`] | one input: name, unit, range, what stands in for it |
//! | [`inputs`] | from `key=value` words to values |
//! | [`site_values`] | what a site can fill in |
//! | [`failure`] | why there is no number |
//! | the rest | the calculations, a file a subject; `constants` are not listed |

pub mod failure;
pub mod inputs;
pub mod key;
pub mod site_values;

mod ammonia;
mod biofilter;
mod carbonate;
mod chlorine;
mod common;
mod constants;
mod criteria;
mod dose;
mod exchange;
mod feed;
mod growth;
mod nitrification;
mod nitrite;
mod oxygen;
mod sulfide;
mod units;

pub use failure::Failure;
pub use inputs::{Input, Inputs, Origin, Value};
pub use key::Key;
pub use site_values::SiteValues;

/// One calculation.
pub struct Calculation {
    /// Its name, with hyphens.
    pub name: &'static str,
    /// What it gives, in one line.
    pub help: &'static str,
    /// The unit of its result; empty for a bare number.
    pub unit: &'static str,
    /// Its inputs.
    pub keys: &'static [Key],
    /// Where the formula comes from.
    pub source: &'static [&'static str],
    /// The calculation.
    pub compute: fn(&Inputs) -> Result<f64, Failure>,
}

impl std::fmt::Debug for Calculation {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(self.name)
    }
}

/// Calculations about one subject.
#[derive(Debug)]
pub struct Subject {
    /// Its title.
    pub title: &'static str,
    /// Whether people are shown it; constants answer by name and are not listed.
    pub listed: bool,
    /// Its calculations.
    pub calculations: &'static [Calculation],
}

/// All calculations, by subject, in the order people are shown them.
pub static SUBJECTS: [&Subject; 15] = [
    &ammonia::SUBJECT,
    &criteria::SUBJECT,
    &oxygen::SUBJECT,
    &carbonate::SUBJECT,
    &dose::SUBJECT,
    &nitrification::SUBJECT,
    &biofilter::SUBJECT,
    &growth::SUBJECT,
    &feed::SUBJECT,
    &nitrite::SUBJECT,
    &sulfide::SUBJECT,
    &chlorine::SUBJECT,
    &exchange::SUBJECT,
    &units::SUBJECT,
    &constants::SUBJECT,
];

/// Every calculation, listed or not.
pub fn all() -> impl Iterator<Item = &'static Calculation> {
    SUBJECTS.iter().flat_map(|s| s.calculations)
}

/// The calculations that people are shown.
pub fn listed() -> impl Iterator<Item = &'static Calculation> {
    let shown = SUBJECTS.iter().filter(|s| s.listed);
    shown.flat_map(|s| s.calculations)
}

/// The calculation of this name; hyphens, underscores and case are alike.
///
/// # Errors
/// [`Failure::UnknownName`], with the listed names that are like it.
pub fn find(name: &str) -> Result<&'static Calculation, Failure> {
    let wanted = inputs::underscored(name).replace('_', "-");
    all()
        .find(|c| c.name == wanted)
        .ok_or_else(|| Failure::UnknownName {
            name: name.to_owned(),
            like: like(&wanted),
        })
}

/// The listed names that have these words in them, or else the nearest one.
fn like(wanted: &str) -> Vec<&'static str> {
    let names = || listed().map(|c| c.name);
    let with_it: Vec<_> = names().filter(|n| n.contains(wanted)).collect();
    if with_it.is_empty() || wanted.is_empty() {
        crate::fault::nearest(wanted, names()).into_iter().collect()
    } else {
        with_it
    }
}

/// What a calculation gave.
#[derive(Debug, Clone)]
pub struct Answer {
    /// The calculation.
    pub calculation: &'static Calculation,
    /// The result, in the calculation's unit.
    pub value: f64,
    /// What it was worked out from.
    pub inputs: Inputs,
}

/// Evaluates a calculation from `key=value` words and what the site fills in.
///
/// # Errors
/// [`Failure`].
pub fn evaluate(name: &str, given: &[String], site: &SiteValues) -> Result<Answer, Failure> {
    let calculation = find(name)?;
    let inputs = inputs::read(calculation, given, site)?;
    let value = (calculation.compute)(&inputs)?;
    if !value.is_finite() {
        return Err(Failure::NoNumber {
            name: calculation.name,
        });
    }
    Ok(Answer {
        calculation,
        value,
        inputs,
    })
}
