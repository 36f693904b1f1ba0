//! `gillside review`: logs in, a diagnosis out.

use clap::{Args, ValueEnum};

use super::args::{Common, Format};
use super::context::{Context, only};
use super::output::Output;
use super::stop::Stop;
use super::{Exit, replay};
use crate::assessment::Assessor;
use crate::diagnosis::{Occasion, Verdict};
use crate::engine::Engine;
use crate::fault::{Fault, Place};
use crate::history::log::{self, Effect, Input, Log};
use crate::history::memory::Memory;
use crate::render::{self, Report};

/// What `review` may be told.
#[derive(Debug, Args)]
pub(super) struct ReviewArgs {
    /// The logs of one farm, CSV or JSON lines; `-` is standard input [default: the log that the site file names]
    #[arg(value_name = "LOG")]
    pub logs: Vec<String>,
    /// Ignore what is later than this, and judge as of then
    #[arg(long, value_name = "TIME")]
    pub as_of: Option<String>,
    /// Judge after every row, and write one line whenever the verdict or the leading cause changes
    #[arg(long)]
    pub replay: bool,
    /// Take no log of which any row can't be read (exit status 3)
    #[arg(long)]
    pub strict: bool,
    /// Exit with status 10 when the verdict is this or worse
    #[arg(long, value_name = "LEVEL", value_enum)]
    pub alert_at: Option<Level>,
}

/// A verdict as it is typed.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub(super) enum Level {
    /// Nothing to do
    Steady,
    /// Measure again
    Watch,
    /// Act today
    ActToday,
    /// Fish may die within hours
    ActNow,
}

impl Level {
    fn verdict(self) -> Verdict {
        match self {
            Self::Steady => Verdict::Steady,
            Self::Watch => Verdict::Watch,
            Self::ActToday => Verdict::ActToday,
            Self::ActNow => Verdict::ActNow,
        }
    }
}

/// Runs it.
pub(super) fn run(args: &ReviewArgs, common: &Common, out: &mut Output) -> Result<Exit, Stop> {
    let formats: &[Format] = match args.replay {
        true => &[Format::Text, Format::Json],
        false => &[Format::Text, Format::Json, Format::Markdown],
    };
    only(common.format, "review", formats)?;
    let context = Context::load(common)?;
    let as_of = match &args.as_of {
        Some(text) => Some(context.time("--as-of", text)?),
        None => None,
    };
    let log = read(&args.logs, args.strict, &context, as_of)?;
    let verdict = if args.replay {
        replay::run(&context, &log, common.format, out)?
    } else {
        now(&context, &log, as_of, common.format, out)?
    };
    let alert = args
        .alert_at
        .is_some_and(|level| verdict >= level.verdict());
    Ok(if alert { Exit::Alert } else { Exit::Done })
}

/// The log, or why it can't be used.
pub(super) fn read(
    named: &[String],
    strict: bool,
    context: &Context,
    as_of: Option<i64>,
) -> Result<Log, Stop> {
    let inputs = inputs(named, context)?;
    let log = log::read(inputs, &context.knowledge.vocabulary, &context.site, as_of)
        .map_err(Stop::Input)?;
    let refused = || {
        log.problems
            .iter()
            .filter(|p| p.effect == Effect::RowRefused)
    };
    if strict && log.rows_refused > 0 {
        return Err(Stop::Input(refused().map(fault_of).collect()));
    }
    if !log.is_usable() {
        // All that was noticed may be why, not only what cost a row.
        let mut faults: Vec<Fault> = log.problems.iter().map(fault_of).collect();
        faults.push(match as_of {
            Some(_) if log.rows_read == 0 => Fault::whole(
                "no-rows",
                "the log has no row at or before the time of `--as-of`",
                "choose a later time, or leave the option out",
            ),
            _ => Fault::whole(
                "no-rows",
                "no row of the log can be used",
                "a log needs a head such as `time,temperature,ph` and at least one row under it",
            ),
        });
        return Err(Stop::Input(faults));
    }
    Ok(log)
}

/// The logs that are named, or the site's.
fn inputs(named: &[String], context: &Context) -> Result<Vec<Input>, Stop> {
    if !named.is_empty() {
        return Ok(named.iter().map(|n| Input::named(n)).collect());
    }
    match &context.site.log {
        Some(path) => Ok(vec![Input::Path(context.beside_site(path))]),
        None => Err(Stop::usage(Fault::whole(
            "no-log",
            "no log is named",
            "name one, such as `gillside review log.csv`, or put `log = \"log.csv\"` into the site file",
        ))),
    }
}

fn fault_of(problem: &log::Problem) -> Fault {
    let column = problem.column.as_ref();
    Fault {
        place: Some(Place {
            file: problem.file.clone(),
            line: problem.line,
            column: problem.at,
            excerpt: String::new(),
            width: 1,
        }),
        code: problem.code,
        reason: column.map_or_else(
            || problem.reason.clone(),
            |c| format!("column `{c}`: {}", problem.reason),
        ),
        cure: problem.cure.clone(),
    }
}

/// An engine that has not seen a row of this log yet.
pub(super) fn engine<'k>(context: &'k Context, log: &Log) -> Engine<'k> {
    let mut engine = Engine::new(&context.knowledge, &context.site);
    if log.rows.iter().any(|row| !row.events.is_empty()) {
        engine.tell(Memory::keeps_events);
    }
    engine
}

/// An engine that has taken in the log, as of its last row or of the time that was asked for.
pub(super) fn taken_in<'k>(context: &'k Context, log: &Log, as_of: Option<i64>) -> Engine<'k> {
    let mut engine = engine(context, log);
    for row in &log.rows {
        engine.observe(row);
    }
    if let Some(time) = as_of {
        engine.advance(time);
    }
    engine
}

/// The diagnosis as of the last row, or of the time that was asked for.
fn now(
    context: &Context,
    log: &Log,
    as_of: Option<i64>,
    format: Format,
    out: &mut Output,
) -> Result<Verdict, Stop> {
    let engine = taken_in(context, log, as_of);
    let moment = engine.memory().now();
    // Who asks how things stood at a time asks what was due then, unless the clock is given too.
    let present = match as_of {
        Some(time) if !context.clock_given => time,
        _ => context.now.max(moment),
    };
    let knowledge = &context.knowledge;
    let assessor = Assessor::new(knowledge, &context.site, Occasion::Review).at(present);
    let last_row = log.rows.last().map(|row| row.time);
    let assessment = assessor.assess(&engine, &log.places, last_row);
    let report = Report {
        knowledge,
        site: &context.site,
        site_file: context.site_file.as_deref(),
        assessment: &assessment,
        log,
        present,
    };
    let text = match format {
        Format::Json => render::json::page(&report),
        Format::Markdown => render::markdown(&render::diagnosis(&report)),
        Format::Text | Format::Html => render::text(&render::diagnosis(&report), out.look()),
    };
    out.write(&text)?;
    Ok(assessment.verdict)
}
