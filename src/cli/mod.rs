//! The `cli` room: one file a command. Arguments in, a call, a page out; no rules and no chemistry here.
//!
//! `args` is what may be typed, `exit` the exit statuses, `stop` why a command ended early, `context` what every
//! command starts from (rule base, site, clock), `output` where pages go.

mod args;
mod context;
mod exit;
mod output;
mod replay;
mod review;
mod stop;

use std::ffi::OsString;

use clap::Parser;
use clap::error::ErrorKind;

use args::{Command, Options};
pub use exit::Exit;
use output::Output;
use stop::Stop;

/// Parses the arguments, runs one command, and says how it ended. Everything that is printed is printed in here.
pub fn run(args: impl IntoIterator<Item = OsString>) -> Exit {
    let options = match Options::try_parse_from(args) {
        Ok(options) => options,
        Err(error) => return usage(&error),
    };
    let mut output = Output::new(options.common.color);
    let ended = match &options.command {
        Command::Review(args) => review::run(args, &options.common, &mut output),
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
