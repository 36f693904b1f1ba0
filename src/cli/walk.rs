//! `gillside walk`: asks at the tank, and diagnoses.

mod dialog;
mod front;
mod keep;
mod words;

use std::io::{self, IsTerminal};
use std::path::PathBuf;

use clap::Args;
use serde_json::json;

use super::args::{Common, Format};
use super::context::{Context, only};
use super::output::Output;
use super::stop::Stop;
use super::{Exit, review};
use crate::assessment::Assessor;
use crate::diagnosis::Occasion;
use crate::engine::Engine;
use crate::fault::{Fault, Source, plain_io};
use crate::history::answers::{self, Answers};
use crate::history::log::Log;
use crate::render::{self, Report};
use crate::walk::{Attendant, Given, Walk, ids};
use dialog::{Dialog, Ended};
use front::{Front, Plain, Terminal};
use keep::{Found, Keeper};

/// What `walk` may be told.
#[derive(Debug, Args)]
pub(super) struct WalkArgs {
    /// Take the answers from this file instead of a person; `-` is standard input
    #[arg(long, value_name = "FILE")]
    pub answers: Option<PathBuf>,
    /// Start from this log, and ask only for what is missing or too old
    #[arg(long, value_name = "LOG")]
    pub log: Vec<String>,
    /// Ask with plain numbered lines, for screen readers and simple terminals
    #[arg(long)]
    pub plain: bool,
}

/// Runs it.
pub(super) fn run(args: &WalkArgs, common: &Common, out: &mut Output) -> Result<Exit, Stop> {
    only(
        common.format,
        "walk",
        &[Format::Text, Format::Json, Format::Markdown],
    )?;
    if args.answers.is_none() && !io::stdin().is_terminal() {
        return Err(Stop::usage(Fault::whole(
            "no-terminal",
            "a walk asks a person at a terminal, and there is none",
            "run it in a terminal, or give the answers with `--answers FILE`",
        )));
    }
    let context = Context::load(common)?;
    let log = match args.log.is_empty() {
        true => Log::default(),
        false => review::read(&args.log, false, &context, None)?,
    };
    match &args.answers {
        Some(path) => from_file(path, &context, &log, common.format, out),
        None => at_the_tank(args, &context, &log, common.format, out),
    }
}

/// A walk that starts from what the log tells.
fn start<'k>(context: &'k Context, log: &Log, now: i64) -> Walk<'k> {
    let knowledge = &context.knowledge;
    let assessor = Assessor::new(knowledge, &context.site, Occasion::Walk).at(now);
    let base = match log.rows.is_empty() {
        true => Engine::new(knowledge, &context.site),
        false => review::taken_in(context, log, None),
    };
    Walk::new(assessor, base, now)
}

fn from_file(
    path: &PathBuf,
    context: &Context,
    log: &Log,
    format: Format,
    out: &mut Output,
) -> Result<Exit, Stop> {
    let answers = read(path, context)?;
    let time = answers.time.unwrap_or(context.now);
    let mut walk = start(context, log, time);
    let attendant = Attendant {
        answers: &answers,
        time,
    };
    let stop = attendant.walk(&mut walk);
    let asked = walk.given();
    attendant.tell_the_rest(&mut walk);
    let reason = words::stopped(&context.knowledge, stop);
    show(&walk, context, log, (&asked, &reason, time), format, out)
}

fn read(path: &PathBuf, context: &Context) -> Result<Answers, Stop> {
    let name = path.display().to_string();
    let text = match name.as_str() {
        "-" => io::read_to_string(io::stdin()),
        _ => std::fs::read_to_string(path),
    };
    let text = text.map_err(|error| {
        Stop::Input(vec![Fault::whole(
            "unreadable",
            format!("the answers `{name}` can't be read: {}", plain_io(&error)),
            "check the name and its permissions",
        )])
    })?;
    let source = Source::new(name, text);
    let (answers, faults) = answers::read(
        &source,
        &context.knowledge.vocabulary,
        &context.site.timezone,
    );
    if faults.is_empty() {
        Ok(answers)
    } else {
        Err(Stop::Input(faults))
    }
}

fn at_the_tank(
    args: &WalkArgs,
    context: &Context,
    log: &Log,
    format: Format,
    out: &mut Output,
) -> Result<Exit, Stop> {
    // At every moment all answers are on file, and nothing of the terminal is changed while it waits for a line.
    let interrupted = ctrlc::set_handler(|| {
        let _ = console::Term::stdout().show_cursor();
        eprintln!();
        std::process::exit(i32::from(Exit::Interrupted.status()));
    });
    if let Err(error) = interrupted {
        return Err(Stop::from(io::Error::other(error)));
    }
    let look = out.look();
    let simple = args.plain || std::env::var_os("TERM").is_none_or(|t| t == "dumb");
    let mut terminal = Terminal::new(look.width);
    let mut plain = Plain::new(look.width);
    let front: &mut dyn Front = if simple { &mut plain } else { &mut terminal };
    let mut walk = start(context, log, context.now);
    let mut keeper = Keeper::new(context, context.now);
    offer(context, &mut keeper, &mut walk, front).map_err(|e| kept_fault(&keeper, &e))?;
    let mut dialog = Dialog {
        context,
        walk: &mut walk,
        front,
        keeper: &keeper,
        now: context.now,
        aided: false,
        pending: Vec::new(),
    };
    let ended = match dialog.talk() {
        Ok(ended) => ended,
        Err(error) if error.kind() == io::ErrorKind::Interrupted => return Ok(Exit::Interrupted),
        Err(error) => return Err(kept_fault(&keeper, &error)),
    };
    let reason = match ended {
        Ended::Asked(stop) => words::stopped(&context.knowledge, stop),
        Ended::Told => "You asked to stop.".to_owned(),
        Ended::Gone => return Ok(Exit::Interrupted),
    };
    let asked = walk.given();
    let exit = show(
        &walk,
        context,
        log,
        (&asked, &reason, context.now),
        format,
        out,
    )?;
    keeper.forget().map_err(|e| kept_fault(&keeper, &e))?;
    Ok(exit)
}

/// Offers to go on with a walk that was interrupted.
fn offer(
    context: &Context,
    keeper: &mut Keeper,
    walk: &mut Walk<'_>,
    front: &mut dyn Front,
) -> io::Result<()> {
    match keeper.find(context)? {
        Found::Nothing => {}
        Found::Damaged(reason, aside) => front.say(&format!(
            "An earlier walk can't be used: {reason}. It is kept as {}. This one starts anew.",
            aside.display()
        ))?,
        Found::Walk(started, turns) => {
            let answers: usize = turns.iter().map(|t| t.given.len()).sum();
            let ago = crate::assessment::span((context.now - started).max(0));
            front.say(&format!(
                "A walk of {ago} ago was not finished; {answers} answer{} kept. Go on with it?\ny  go on, n  start anew, Enter  go on",
                if answers == 1 { " is" } else { "s are" }
            ))?;
            let heard = front.hear()?.unwrap_or_default().trim().to_lowercase();
            if heard.starts_with('n') {
                keeper.forget()?;
            } else {
                keeper.go_on(started);
                walk.take_all(turns);
            }
        }
    }
    Ok(())
}

fn kept_fault(keeper: &Keeper, error: &io::Error) -> Stop {
    Stop::from(io::Error::new(
        error.kind(),
        format!("{}: {error}", keeper.path().display()),
    ))
}

/// The same page as `review`, with why asking stopped and what was asked.
fn show(
    walk: &Walk<'_>,
    context: &Context,
    log: &Log,
    (asked, reason, now): (&[Given], &str, i64),
    format: Format,
    out: &mut Output,
) -> Result<Exit, Stop> {
    let last_row = log
        .rows
        .last()
        .map(|row| row.time)
        .or((!walk.given().is_empty()).then_some(now));
    let assessment = walk.assess(&log.places, last_row);
    let report = Report {
        knowledge: &context.knowledge,
        site: &context.site,
        site_file: context.site_file.as_deref(),
        assessment: &assessment,
        log,
        present: now,
    };
    let said = words::answered(&context.knowledge, &context.site, asked);
    let text = match format {
        Format::Json => {
            let mut value = render::json::value(&report);
            if let Some(object) = value.as_object_mut() {
                object.insert("asked".to_owned(), json!(ids(&context.knowledge, asked)));
                object.insert("stopped".to_owned(), json!(reason));
            }
            format!("{value:#}\n")
        }
        Format::Markdown => format!(
            "{}\n{reason}\n\n{said}\n",
            render::markdown(&render::diagnosis(&report))
        ),
        Format::Text | Format::Html => {
            let page = render::text(&render::diagnosis(&report), out.look());
            format!(
                "{page}\n{}\n{}\n",
                textwrap::fill(reason, out.look().width),
                fill(&said, out.look().width)
            )
        }
    };
    out.write(&text)?;
    Ok(Exit::Done)
}

fn fill(text: &str, width: usize) -> String {
    let options = textwrap::Options::new(width).subsequent_indent("   ");
    text.lines()
        .map(|l| textwrap::fill(l, &options))
        .collect::<Vec<_>>()
        .join("\n")
}
