//! `gillside review --replay`: one line per change of the verdict or the leading cause, and always the last row.

use super::args::Format;
use super::context::Context;
use super::output::Output;
use super::review;
use super::stop::Stop;
use crate::assessment::Assessor;
use crate::diagnosis::{Occasion, Verdict};
use crate::history::log::Log;
use crate::render::{self, Report};

/// Judges after every row, each as of its own time; gives the verdict after the last.
pub(super) fn run(
    context: &Context,
    log: &Log,
    format: Format,
    out: &mut Output,
) -> Result<Verdict, Stop> {
    let knowledge = &context.knowledge;
    let assessor = Assessor::new(knowledge, &context.site, Occasion::Review);
    let mut engine = review::engine(context, log);
    let mut before = None;
    let mut verdict = Verdict::Steady;
    let mut version = None;
    for (at, row) in log.rows.iter().enumerate() {
        engine.observe(row);
        let last = at + 1 == log.rows.len();
        // The same facts rank the same, but for what falls due with time and how often an event is noted.
        let same = version == Some(engine.version()) && row.events.is_empty();
        if !last && same && verdict > Verdict::Watch {
            continue;
        }
        version = Some(engine.version());
        let review = assessor.review(&engine);
        verdict = review.decision.verdict;
        let state = (verdict, assessor.leading(&review));
        if before == Some(state) && !last {
            continue;
        }
        before = Some(state);
        let assessment = assessor.assess(&engine, &log.places, Some(row.time));
        let report = Report {
            knowledge,
            site: &context.site,
            site_file: context.site_file.as_deref(),
            assessment: &assessment,
            log,
            present: row.time,
        };
        out.write(&match format {
            Format::Json => render::json::line(&report),
            _ => render::replay_line(&report, state.1),
        })?;
    }
    Ok(verdict)
}
