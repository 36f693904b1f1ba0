//! Where pages and complaints go.

use std::io::{self, BufWriter, IsTerminal, Stdout, Write};

use super::args::Color;
use super::stop::Stop;
use crate::render::{Look, faults};

/// Standard output for answers, standard error for everything else.
#[derive(Debug)]
pub(super) struct Output {
    out: BufWriter<Stdout>,
    color: Color,
}

/// Columns of a page that goes into a file or a pipe.
const PIPED: usize = 80;
/// A terminal narrower or wider than this is written as if it had so many columns.
const NARROWEST: usize = 30;
const WIDEST: usize = 100;

impl Output {
    pub fn new(color: Color) -> Self {
        Self {
            out: BufWriter::new(io::stdout()),
            color,
        }
    }

    /// How pages on standard output look: as wide as the terminal (or as `COLUMNS` says), plain when piped.
    pub fn look(&self) -> Look {
        let asked = std::env::var("COLUMNS").ok().and_then(|c| c.parse().ok());
        let term = console::Term::stdout();
        let width = asked
            .or_else(|| term.size_checked().map(|(_, columns)| usize::from(columns)))
            .unwrap_or(PIPED)
            .clamp(NARROWEST, WIDEST);
        Look {
            width,
            color: self.colored(io::stdout().is_terminal()),
        }
    }

    /// `--color`, then `NO_COLOR`, then whether a person looks at it.
    fn colored(&self, terminal: bool) -> bool {
        match self.color {
            Color::Always => true,
            Color::Never => false,
            Color::Auto => {
                terminal
                    && std::env::var_os("NO_COLOR").is_none_or(|v| v.is_empty())
                    && std::env::var_os("TERM").is_none_or(|t| t != "dumb")
            }
        }
    }

    /// Writes a part of the answer.
    pub fn write(&mut self, text: &str) -> Result<(), Stop> {
        Ok(self.out.write_all(text.as_bytes())?)
    }

    /// Sends on what is held back.
    pub fn finish(&mut self) -> Result<(), Stop> {
        Ok(self.out.flush()?)
    }

    /// Says something beside the answer, on standard error.
    pub fn remark(&self, text: &str) {
        // Nobody is left to tell when standard error is gone.
        let _ = writeln!(io::stderr(), "{text}");
    }

    /// Says on standard error why there is no answer.
    pub fn complain(&self, stop: &Stop) {
        let text = match stop.message() {
            Some(message) => format!("error: {message}\n"),
            None => faults(&stop.faults(), self.colored(io::stderr().is_terminal())),
        };
        // Nobody is left to tell when standard error is gone too.
        let _ = io::stderr().write_all(text.as_bytes());
    }
}
