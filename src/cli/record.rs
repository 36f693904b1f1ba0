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
use crate::render;
use crate::render::recorded::{self, Recorded};

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

/// What is due within so long is asked for.
const SOON: i64 = 8 * 3600;

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
    let standing = Standing::load(context, args.log.as_deref())?;
    let window = super::shift::asked(context, None, None)?;
    let window = crate::shift::Window {
        start: context.now,
        end: window.start.max(context.now.saturating_add(SOON)),
        name: window.name,
    };
    let stored = super::incident::folder(context)
        .load()
        .map_err(|f| Stop::Input(vec![f]))?;
    let list = super::shift::list(context, standing.as_ref(), &stored, window);
    let term = console::Term::stderr();
    term.write_line("One after the other; Enter for what was not measured. Units go behind a number if they are others.")?;
    let words = &context.knowledge.vocabulary;
    let mut made = Given::default();
    let ask = |key: &str, prompt: &str, made: &mut Given| -> Result<(), Stop> {
        loop {
            let asked = dialoguer::Input::<String>::new().with_prompt(prompt);
            let line = match asked.allow_empty(true).interact_text_on(&term) {
                Ok(line) => line,
                Err(dialoguer::Error::IO(e)) => return Err(Stop::Write(e)),
            };
            if line.trim().is_empty() {
                return Ok(());
            }
            match given(&[format!("{key}={line}")], telling) {
                Ok(one) => {
                    made.readings.extend(one.readings);
                    made.signs.extend(one.signs);
                    made.events.extend(one.events);
                    made.note = one.note.or(made.note.take());
                    made.by = one.by.or(made.by.take());
                    return Ok(());
                }
                Err(faults) => {
                    for fault in faults {
                        term.write_line(&format!("{}; {}", fault.reason, fault.cure))?;
                    }
                }
            }
        }
    };
    ask("by", "Your name", &mut made)?;
    for blank in list.items().flat_map(|i| &i.blanks) {
        let reading = &words[blank.reading];
        if made.readings.iter().all(|a| a.reading != blank.reading) {
            let prompt = format!("{} ({})", reading.name, blank.unit);
            ask(&reading.id, &prompt, &mut made)?;
        }
    }
    ask(
        "sign",
        "Signs seen, ids between ; (!id for looked for and not there)",
        &mut made,
    )?;
    ask("event", "What happened, ids between ;", &mut made)?;
    ask("note", "Anything else in your own words", &mut made)?;
    Ok(made)
}
