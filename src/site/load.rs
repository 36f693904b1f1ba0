//! A site file from the disk.

use std::path::Path;

use super::{Known, Site, read};
use crate::fault::{Fault, Source};

/// Larger than any site file that a person writes.
const LARGEST: u64 = 1_000_000;

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
            format!(
                "the site file `{name}` can't be opened: {}",
                crate::fault::plain_io(&e)
            ),
            "check the path, or make a site file with `gillside site`",
        )
    })?;
    if about.is_dir() {
        return Err(unreadable(
            format!("`{name}` is a folder, not a site file"),
            "name the file inside it, such as `site.toml`",
        ));
    }
    if about.len() > LARGEST {
        return Err(unreadable(
            format!("the site file `{name}` has {} bytes", about.len()),
            "a site file has at most 1000000 bytes; check that the path is right",
        ));
    }
    let bytes = std::fs::read(path).map_err(|e| {
        unreadable(
            format!(
                "the site file `{name}` can't be read: {}",
                crate::fault::plain_io(&e)
            ),
            "check that the file may be read",
        )
    })?;
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
