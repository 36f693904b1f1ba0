//! A site file from the disk.

use std::io::Read;
use std::path::Path;

use super::{Known, Site, read};
use crate::fault::{Fault, Source, plain_io};

/// Larger than any site file that a person writes.
const LARGEST: u64 = 100_000;

/// Reads the site file at a path.
///
/// Faults are empty when all of it was understood. A file that can't be read at all gives [`Site::default`] and the
/// reason.
pub fn load(path: &Path, known: &Known<'_>) -> (Site, Vec<Fault>) {
    match open(path) {
        Ok(source) => read(&source, known),
        Err(fault) => (Site::default(), vec![*fault]),
    }
}

fn open(path: &Path) -> Result<Source, Box<Fault>> {
    let name = path.display().to_string();
    let unreadable =
        |reason: String, cure: &str| Box::new(Fault::whole("unreadable", reason, cure));
    let about = std::fs::metadata(path).map_err(|e| {
        unreadable(
            format!("the site file `{name}` can't be opened: {}", plain_io(&e)),
            "check the path, or make a site file with `gillside site`",
        )
    })?;
    if about.is_dir() {
        return Err(unreadable(
            format!("`{name}` is a folder, not a site file"),
            "name the file inside it, such as `site.toml`",
        ));
    }
    let mut bytes = Vec::new();
    let file = std::fs::File::open(path);
    file.and_then(|file| file.take(LARGEST + 1).read_to_end(&mut bytes))
        .map_err(|e| {
            unreadable(
                format!("the site file `{name}` can't be read: {}", plain_io(&e)),
                "check that the file may be read",
            )
        })?;
    if bytes.len() as u64 > LARGEST {
        return Err(unreadable(
            format!("the site file `{name}` has more than {LARGEST} bytes"),
            "check that the path is right; a site file is a page or two",
        ));
    }
    match String::from_utf8(bytes) {
        Ok(text) => Ok(Source::new(name, text.trim_start_matches('\u{feff}'))),
        Err(error) => {
            let good = error.utf8_error().valid_up_to();
            let text = String::from_utf8_lossy(error.as_bytes()).into_owned();
            let source = Source::new(name, text);
            Err(Box::new(Fault::at(
                &source,
                good..good + 1,
                "not-utf8",
                "the site file is not UTF-8 text here",
                "save the file as UTF-8",
            )))
        }
    }
}
