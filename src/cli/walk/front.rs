//! The line of text between a person and the walk: a terminal with an editable line, or plain lines.

use std::io::{self, BufRead, Write};

use console::Term;
use dialoguer::Input;
use textwrap::Options;

/// Who is talked to.
pub(super) trait Front {
    /// Says something.
    fn say(&mut self, text: &str) -> io::Result<()>;
    /// Waits for a line; `None` when nobody is there any more.
    fn hear(&mut self) -> io::Result<Option<String>>;
}

fn wrapped(text: &str, width: usize) -> String {
    let line = |l: &str| {
        let body = l.trim_start();
        let indent = " ".repeat(l.len() - body.len());
        // What follows a number or a letter at the start of a line stays clear of it.
        let lead = body
            .find("  ")
            .map_or(0, |at| if at <= 3 { at + 2 } else { 0 });
        let under = format!("{indent}{}", " ".repeat(lead));
        let options = Options::new(width)
            .initial_indent(&indent)
            .subsequent_indent(&under);
        textwrap::fill(body, options)
    };
    text.lines().map(line).collect::<Vec<_>>().join("\n")
}

/// A terminal: the line can be edited with the arrow keys before Enter.
pub(super) struct Terminal {
    term: Term,
    width: usize,
}

impl Terminal {
    pub fn new(width: usize) -> Self {
        Self {
            term: Term::stdout(),
            width,
        }
    }
}

impl Front for Terminal {
    fn say(&mut self, text: &str) -> io::Result<()> {
        self.term.write_line(&wrapped(text, self.width))
    }

    fn hear(&mut self) -> io::Result<Option<String>> {
        let heard = Input::<String>::new()
            .with_prompt("Answer")
            .allow_empty(true)
            .report(true)
            .interact_text_on(&self.term);
        match heard {
            Ok(line) => Ok(Some(line)),
            Err(dialoguer::Error::IO(error)) if error.kind() == io::ErrorKind::UnexpectedEof => {
                Ok(None)
            }
            Err(dialoguer::Error::IO(error)) => Err(error),
        }
    }
}

/// Plain lines, for screen readers and terminals that can't move the cursor.
pub(super) struct Plain {
    width: usize,
}

impl Plain {
    pub fn new(width: usize) -> Self {
        Self { width }
    }
}

impl Front for Plain {
    fn say(&mut self, text: &str) -> io::Result<()> {
        writeln!(io::stdout(), "{}", wrapped(text, self.width))
    }

    fn hear(&mut self) -> io::Result<Option<String>> {
        let mut out = io::stdout();
        write!(out, "Answer: ")?;
        out.flush()?;
        let mut line = String::new();
        let read = io::stdin().lock().read_line(&mut line)?;
        Ok((read > 0).then_some(line))
    }
}
