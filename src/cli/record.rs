//! `gillside record`: readings in, rows of the log out, and a warning at once.

use std::io::IsTerminal;
use std::path::Path;

use clap::Args;

use super::Exit;
use super::args::{Common, Format};
use super::context::{Context, only};
use super::output::Output;
use super::standing::{Standing, log_path};
use super::stop::Stop;
use crate::fault::{Fault, plain_io};
use crate::record::{Given, Target, Telling, Written, changes, form, given, write};
use crate::render::recorded::{self, Recorded};
use crate::render;

/// What `record` may be told.
#[derive(Debug, Args)]
pub(super) struct RecordArgs {
    /// What was measured and seen, such as `ph=6.4 nitrite=0.3 sign=fish-off-feed by=Ines note="two jumped"`; also
    /// `time=`, `place=`, `event=`, `done=` (rounds of the checklist) and `corrects=` (the time of a wrong row). A number
    /// is in the unit of the log's column unless its unit stands behind it (`temperature=72F`). Without any, the
    /// checklist's blanks are asked one by one
    #[arg(value_name = "KEY=VALUE")]
    pub words: Vec<String>,
    /// A filled-in form of `gillside shift --form`
    #[arg(long, value_name = "FILE", conflicts_with = "words")]
    pub form: Option<String>,
    /// The log to write to [default: the log that the site file names]
    #[arg(long, value_name = "LOG")]
    pub log: Option<String>,
}

/// Runs it.
pub(super) fn run(args: &RecordArgs, common: &Common, out: &mut Output) -> Result<Exit, Stop> {
    only(common.format, "record", &[Format::Text, Format::Json])?;
    let context = Context::load(common)?;
    let path = log_path(&context, args.log.as_deref())?;
    let telling = Telling {
        knowledge: &context.knowledge,
        site: &context.site,
    };
    let rows = if let Some(file) = &args.form {
        let text = read_form(file)?;
        form(file, &text, &telling).map_err(Stop::Input)?
    } else if args.words.is_empty() {
        vec![asked(&context, args, &telling)?]
    } else {
        vec![given(&args.words, &telling).map_err(Stop::Input)?]
    };
    let rows: Vec<Given> = rows.into_iter().filter(|row| !row.is_empty()).collect();
    if rows.is_empty() {
        return Err(Stop::Input(vec![Fault::whole(
            "nothing-to-record",
            "there is nothing to record",
            "give at least one reading, sign, event, round that was done, or note",
        )]));
    }
    let target = Target {
        path: &path,
        now: context.now,
    };
    let written = write(&rows, target, &telling)?;
    told(&context, written, &path, common.format, out)?;
    Ok(Exit::Done)
}

fn read_form(file: &str) -> Result<String, Stop> {
    let read = if file == "-" {
        std::io::read_to_string(std::io::stdin())
    } else {
        std::fs::read_to_string(file)
    };
    read.map_err(|e| {
        Stop::Input(vec![Fault::whole(
            "unreadable",
            format!("the form `{file}` can't be read: {}", plain_io(&e)),
            "check the path; make a form with `gillside shift --form`",
        )])
    })
}

/// What was written, how far each reading has moved, and how the farm stands now.
fn told(
    context: &Context,
    written: Written,
    path: &Path,
    format: Format,
    out: &mut Output,
) -> Result<(), Stop> {
    let words = &context.knowledge.vocabulary;
    let moved = written
        .rows
        .iter()
        .filter_map(|at| written.log.rows.get(*at))
        .flat_map(|row| changes(&written.log, row, words))
        .collect();
    let times = written
        .rows
        .iter()
        .filter_map(|at| written.log.rows.get(*at))
        .map(|row| (row.time, row.line))
        .collect();
    let standing = Standing::of(context, written.log);
    let limits = crate::engine::Limits::new(&context.knowledge, &context.site);
    let recorded = Recorded {
        report: standing.report(context),
        limits: &limits,
        path,
        times,
        changes: moved,
        new_columns: written.new_columns,
        made: written.made,
    };
    out.write(&match format {
        Format::Json => recorded::json(&recorded),
        _ => render::text(&recorded::page(&recorded), out.look()),
    })
}

/// Asks for the readings that are due, one by one.
fn asked(context: &Context, args: &RecordArgs, telling: &Telling<'_>) -> Result<Given, Stop> {
    let no_terminal = || {
        Stop::Usage(Box::new(Fault::whole(
            "no-terminal",
            "nothing is given to record, and there is no terminal to ask at",
            "write it like `gillside record ph=6.4 nitrite=0.3`, or fill in a form (`gillside shift --form`) and give it with `--form`",
        )))
    };
    if !(std::io::stdin().is_terminal() && std::io::stderr().is_terminal()) {
        return Err(no_terminal());
    }
    let _ = (context, args);
    let mut words: Vec<String> = Vec::new();
    for reading in context.knowledge.vocabulary.readings.iter().filter(|r| !r.derived) {
        if !["temperature", "ph"].contains(&reading.id.as_str()) {
            continue;
        }
        words.push(reading.id.clone());
    }
    given(&words, telling).map_err(Stop::Input)
}
