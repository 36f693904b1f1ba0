//! Where an interrupted walk is kept: written whole after every answer, taken away when the walk ends.

use std::fs;
use std::io::{self, Write};
use std::path::{Path, PathBuf};

use crate::cli::context::Context;
use crate::walk::{Turn, kept};

/// What the file is called.
const NAME: &str = ".gillside-walk.toml";

/// The file of one walk.
pub(super) struct Keeper {
    path: PathBuf,
    started: i64,
}

/// What was found of an earlier walk.
pub(super) enum Found {
    Nothing,
    /// When it started, and its turns.
    Walk(i64, Vec<Turn>),
    /// It can't be used, why, and where it was put.
    Damaged(String, PathBuf),
}

impl Keeper {
    /// In the folder of incidents where there is one, else beside the site file, else here.
    pub fn new(context: &Context, started: i64) -> Self {
        let folder = context
            .site
            .incidents
            .as_ref()
            .map(|p| context.beside_site(p))
            .filter(|p| p.is_dir())
            .unwrap_or_else(|| context.beside_site(Path::new("")));
        Self {
            path: folder.join(NAME),
            started,
        }
    }

    pub fn path(&self) -> &Path {
        &self.path
    }

    /// Looks for an earlier walk.
    pub fn find(&self, context: &Context) -> io::Result<Found> {
        let text = match fs::read_to_string(&self.path) {
            Ok(text) => text,
            Err(error) if error.kind() == io::ErrorKind::NotFound => return Ok(Found::Nothing),
            Err(error) if error.kind() == io::ErrorKind::InvalidData => String::from("\u{0}"),
            Err(error) => return Err(error),
        };
        match kept::read(&context.knowledge.vocabulary, &text) {
            Ok((started, turns)) => Ok(Found::Walk(started, turns)),
            Err(reason) => {
                let aside = self.path.with_extension("toml.damaged");
                fs::rename(&self.path, &aside)?;
                Ok(Found::Damaged(reason, aside))
            }
        }
    }

    /// Goes on with the walk that was found.
    pub fn go_on(&mut self, started: i64) {
        self.started = started;
    }

    /// Writes the walk down: a reader sees all of it or the one before, never a part.
    pub fn save(&self, context: &Context, turns: &[Turn]) -> io::Result<()> {
        let text = kept::write(&context.knowledge.vocabulary, self.started, turns)
            .map_err(io::Error::other)?;
        let folder = self
            .path
            .parent()
            .filter(|p| !p.as_os_str().is_empty())
            .unwrap_or(Path::new("."));
        let mut file = tempfile::NamedTempFile::new_in(folder)?;
        file.write_all(text.as_bytes())?;
        file.as_file().sync_all()?;
        file.persist(&self.path).map_err(|e| e.error)?;
        Ok(())
    }

    /// The walk has ended.
    pub fn forget(&self) -> io::Result<()> {
        match fs::remove_file(&self.path) {
            Err(error) if error.kind() != io::ErrorKind::NotFound => Err(error),
            _ => Ok(()),
        }
    }
}
