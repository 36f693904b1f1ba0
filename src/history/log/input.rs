//! Where a log comes from.

use std::fmt;
use std::fs::File;
use std::io::{BufRead, BufReader, Cursor};
use std::path::PathBuf;

use crate::fault::{Fault, plain_io};

/// One log to read.
pub enum Input {
    /// A file.
    Path(PathBuf),
    /// Standard input.
    Stdin,
    /// A text in memory, with a name for messages.
    Text {
        /// What messages call it.
        name: String,
        /// Its bytes.
        bytes: Vec<u8>,
    },
    /// Anything that can be read, with a name for messages.
    Reader {
        /// What messages call it.
        name: String,
        /// Where its bytes come from.
        from: Box<dyn BufRead>,
    },
}

/// Bytes that are read from the disk at a time.
const CHUNK: usize = 1 << 16;

impl Input {
    /// A log as the command line names it: `-` is standard input.
    pub fn named(argument: &str) -> Self {
        match argument {
            "-" => Self::Stdin,
            path => Self::Path(PathBuf::from(path)),
        }
    }

    /// A text in memory.
    pub fn text(name: impl Into<String>, text: impl Into<Vec<u8>>) -> Self {
        Self::Text {
            name: name.into(),
            bytes: text.into(),
        }
    }

    /// What messages call it.
    pub fn name(&self) -> String {
        match self {
            Self::Path(path) => path.display().to_string(),
            Self::Stdin => "standard input".to_owned(),
            Self::Text { name, .. } | Self::Reader { name, .. } => name.clone(),
        }
    }

    pub(super) fn open(self) -> Result<Box<dyn BufRead>, Box<Fault>> {
        let path = match self {
            Self::Path(path) => path,
            Self::Stdin => return Ok(Box::new(BufReader::with_capacity(CHUNK, std::io::stdin()))),
            Self::Text { bytes, .. } => return Ok(Box::new(Cursor::new(bytes))),
            Self::Reader { from, .. } => return Ok(from),
        };
        let name = path.display();
        let about = std::fs::metadata(&path).map_err(|e| {
            unreadable(
                format!("the log `{name}` can't be opened: {}", plain_io(&e)),
                "check the path",
            )
        })?;
        if about.is_dir() {
            return Err(unreadable(
                format!("`{name}` is a folder, not a log"),
                "name the file inside it, such as `log.csv`",
            ));
        }
        let file = File::open(&path).map_err(|e| {
            unreadable(
                format!("the log `{name}` can't be opened: {}", plain_io(&e)),
                "check that the file may be read",
            )
        })?;
        Ok(Box::new(BufReader::with_capacity(CHUNK, file)))
    }
}

fn unreadable(reason: String, cure: &str) -> Box<Fault> {
    Box::new(Fault::whole("unreadable", reason, cure))
}

impl fmt::Debug for Input {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "Input({})", self.name())
    }
}
