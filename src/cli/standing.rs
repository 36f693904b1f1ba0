//! How the farm stands now, for the commands that start from it: record, shift, incident.

use std::path::PathBuf;

use super::context::Context;
use super::review;
use super::stop::Stop;
use crate::assessment::{Assessment, Assessor};
use crate::diagnosis::Occasion;
use crate::engine::Engine;
use crate::fault::Fault;
use crate::history::log::Log;
use crate::record::NotWritten;
use crate::render::Report;

/// The log taken in, and what follows from it.
#[derive(Debug)]
pub(super) struct Standing<'k> {
    pub log: Log,
    pub engine: Engine<'k>,
    pub assessment: Assessment,
    pub present: i64,
}

impl<'k> Standing<'k> {
    /// How things stand with this log at the context's clock; rows that are later are not known yet.
    pub fn of(context: &'k Context, log: Log) -> Self {
        let engine = review::taken_in(context, &log, None);
        let present = context.now.max(engine.memory().now());
        let assessor =
            Assessor::new(&context.knowledge, &context.site, Occasion::Review).at(present);
        let last_row = log.rows.last().map(|row| row.time);
        let assessment = assessor.assess(&engine, &log.places, last_row);
        Self {
            log,
            engine,
            assessment,
            present,
        }
    }

    /// The same from the log that is named or the site's; `None` where there is no log yet.
    pub fn load(context: &'k Context, named: Option<&str>) -> Result<Option<Self>, Stop> {
        let path = match log_path(context, named) {
            Ok(path) => path,
            Err(_) if named.is_none() => return Ok(None),
            Err(stop) => return Err(stop),
        };
        if named.is_none() && !path.exists() {
            return Ok(None);
        }
        let logs = [path.display().to_string()];
        let log = review::read(&logs, false, context, Some(context.now))?;
        Ok(Some(Self::of(context, log)))
    }

    /// What a page is written from.
    pub fn report<'a>(&'a self, context: &'a Context) -> Report<'a> {
        Report {
            knowledge: &context.knowledge,
            site: &context.site,
            site_file: context.site_file.as_deref(),
            assessment: &self.assessment,
            log: &self.log,
            present: self.present,
        }
    }
}

/// The log that is named, or the site's.
pub(super) fn log_path(context: &Context, named: Option<&str>) -> Result<PathBuf, Stop> {
    match (named, &context.site.log) {
        (Some(name), _) => Ok(PathBuf::from(name)),
        (None, Some(path)) => Ok(context.beside_site(path)),
        (None, None) => Err(Stop::Usage(Box::new(Fault::whole(
            "no-log",
            "no log is named",
            "name one with `--log log.csv`, or put `log = \"log.csv\"` into the site file",
        )))),
    }
}

impl From<NotWritten> for Stop {
    fn from(why: NotWritten) -> Self {
        match why {
            NotWritten::Refused(faults) => Self::Input(faults),
            NotWritten::Failed(fault) => Self::Failed(Box::new(fault)),
        }
    }
}
