//! The `cli` room: one file a command. Arguments in, a call, a page out; no rules and no chemistry here.
//!
//! `args` is what may be typed, `exit` the exit statuses, `stop` why a command ended early, `context` what every
//! command starts from (rule base, site, clock), `output` where pages go.

mod args;
mod context;
mod exit;
mod incident;
mod knowledge;
mod output;
pub mod pace;
mod record;
mod replay;
mod review;
mod shift;
mod site;
mod standing;
mod stop;
mod walk;
pub mod water;
mod why;

use std::ffi::OsString;

use clap::Parser;
use clap::error::ErrorKind;

use args::{Command, Common, Format, Options};
use context::{Context, only};
pub use exit::Exit;
use output::Output;
use pace::{PaceArgs, PaceFormat, PaceWorld};
use stop::Stop;
use water::{WaterArgs, WaterFormat};

/// Parses the arguments, runs one command, and says how it ended. Everything that is printed is printed in here.
pub fn run(args: impl IntoIterator<Item = OsString>) -> Exit {
    let options = match Options::try_parse_from(args) {
        Ok(options) => options,
        Err(error) => return usage(&error),
    };
    let mut output = Output::new(options.common.color);
    let ended = match &options.command {
        Command::Review(args) => review::run(args, &options.common, &mut output),
        Command::Why(args) => why::run(args, &options.common, &mut output),
        Command::Knowledge(args) => knowledge::run(args, &options.common, &mut output),
        Command::Walk(args) => walk::run(args, &options.common, &mut output),
        Command::Record(args) => record::run(args, &options.common, &mut output),
        Command::Shift(args) => shift::run(args, &options.common, &mut output),
        Command::Incident(args) => incident::run(args, &options.common, &mut output),
        Command::Site(args) => site::run(args, &options.common, &mut output),
        Command::Pace(args) => plan(args, &options.common, &mut output),
        Command::Water(args) => calculate(args, &options.common, &mut output),
    };
    let ended = ended.and_then(|exit| output.finish().map(|()| exit));
    match ended {
        Ok(exit) => exit,
        Err(Stop::ClosedPipe) => Exit::Done,
        Err(stop) => {
            output.complain(&stop);
            stop.exit()
        }
    }
}

/// `gillside water`, with what the site knows.
fn calculate(args: &WaterArgs, common: &Common, output: &mut Output) -> Result<Exit, Stop> {
    only(common.format, "water", &[Format::Text, Format::Json])?;
    let format = match common.format {
        Format::Json => WaterFormat::Json,
        _ => WaterFormat::Text,
    };
    let context = Context::load(common)?;
    let mut text = Vec::new();
    water::run(args, format, &context.site_values(), &mut text)
        .map_err(|error| Stop::Water(Box::new(error)))?;
    output.write(&String::from_utf8_lossy(&text))?;
    Ok(Exit::Done)
}

/// `gillside pace`, from the site and its log.
fn plan(args: &PaceArgs, common: &Common, output: &mut Output) -> Result<Exit, Stop> {
    only(
        common.format,
        "pace",
        &[Format::Text, Format::Json, Format::Markdown],
    )?;
    let format = match common.format {
        Format::Json => PaceFormat::Json,
        Format::Markdown => PaceFormat::Markdown,
        _ => PaceFormat::Text,
    };
    let context = Context::load(common)?;
    let world = PaceWorld {
        knowledge: &context.knowledge,
        site: &context.site,
        site_log: context
            .site
            .log
            .as_deref()
            .map(|log| context.beside_site(log)),
        now: context.now,
        format,
        width: output.look().width,
    };
    let mut text = Vec::new();
    pace::run(args, &world, &mut text).map_err(|error| Stop::Pace(Box::new(error)))?;
    output.write(&String::from_utf8_lossy(&text))?;
    Ok(Exit::Done)
}

/// Help and version are answers; anything else is wrong usage.
fn usage(error: &clap::Error) -> Exit {
    let answer = matches!(
        error.kind(),
        ErrorKind::DisplayHelp | ErrorKind::DisplayVersion
    );
    // A closed pipe while help is printed is no failure, and there is nobody left to tell of another one.
    let _ = error.print();
    if answer { Exit::Done } else { Exit::Usage }
}
