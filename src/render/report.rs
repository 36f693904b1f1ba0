//! What a page of a diagnosis is written from.

use std::path::Path;

use crate::assessment::Assessment;
use crate::history::log::Log;
use crate::knowledge::Knowledge;
use crate::site::Site;

/// What a page of a diagnosis is written from.
#[derive(Debug, Clone, Copy)]
pub struct Report<'a> {
    /// The words.
    pub knowledge: &'a Knowledge,
    /// The farm.
    pub site: &'a Site,
    /// The site file, where there is one.
    pub site_file: Option<&'a Path>,
    /// The outcome.
    pub assessment: &'a Assessment,
    /// The log it rests on.
    pub log: &'a Log,
    /// What is taken for now, unix seconds.
    pub present: i64,
}
