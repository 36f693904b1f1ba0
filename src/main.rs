//! The gillside command: parse, run one command, map the outcome to an exit status.

use std::process::ExitCode;

fn main() -> ExitCode {
    gillside::cli::run(std::env::args_os()).into()
}
