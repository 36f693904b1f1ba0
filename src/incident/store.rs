//! The folder of incidents.

use std::fs;
use std::path::{Path, PathBuf};

use jiff::Timestamp;
use jiff::tz::TimeZone;

use super::edit::{Edit, Mark, edited, whole};
use super::model::Incident;
use super::read::read;
use crate::fault::{Fault, Source, did_you_mean, plain_io, shown};
use crate::record::{NotWritten, edit};

/// Larger than any incident that a person follows.
const LARGEST: u64 = 1_000_000;
/// More files than any farm has incidents.
const MOST: usize = 10_000;
/// Incidents of one day with one name.
const SAME: usize = 99;

/// The folder of a site's incidents; it need not be there yet.
#[derive(Debug, Clone)]
pub struct Folder {
    /// Where it is.
    pub path: PathBuf,
    /// The zone of times without an offset.
    pub zone: TimeZone,
}

/// Everything in the folder.
#[derive(Debug, Clone, Default)]
pub struct Stored {
    /// Incidents, the newest first.
    pub incidents: Vec<Incident>,
    /// What is wrong with the files that are damaged.
    pub damaged: Vec<Fault>,
}

impl Stored {
    /// Those that are open.
    pub fn open(&self) -> impl Iterator<Item = &Incident> {
        self.incidents.iter().filter(|i| i.is_open())
    }

    /// The incident that is meant: by its id or the beginning of it; without one, the only one that is open.
    ///
    /// # Errors
    /// None or several are meant.
    pub fn meant(&self, id: Option<&str>) -> Result<&Incident, Fault> {
        let names = || self.incidents.iter().map(|i| i.id.as_str());
        let found: Vec<&Incident> = match id {
            None => self.open().collect(),
            Some(id) => match self.incidents.iter().find(|i| i.id == id) {
                Some(exact) => vec![exact],
                None => self
                    .incidents
                    .iter()
                    .filter(|i| i.id.starts_with(id))
                    .collect(),
            },
        };
        let listed = |found: &[&Incident]| {
            let ids: Vec<&str> = found.iter().map(|i| i.id.as_str()).collect();
            ids.join(", ")
        };
        match (found.as_slice(), id) {
            ([one], _) => Ok(one),
            ([], None) => Err(Fault::whole(
                "no-open-incident",
                "no incident is open",
                "name one of `gillside incident list`, or open one: `gillside incident open`",
            )),
            ([], Some(id)) => Err(Fault::whole(
                "unknown-incident",
                format!("no incident is called `{}`", shown(id)),
                did_you_mean(id, names(), "`gillside incident list` has all"),
            )),
            (several, _) => Err(Fault::whole(
                "several-incidents",
                format!("{} incidents may be meant", several.len()),
                format!("name one: {}", listed(several)),
            )),
        }
    }
}

impl Folder {
    /// Reads all incidents. A folder that is not there holds none.
    ///
    /// # Errors
    /// The folder can't be read.
    pub fn load(&self) -> Result<Stored, Fault> {
        let mut stored = Stored::default();
        let wrong = |e: std::io::Error| {
            Fault::whole(
                "unreadable",
                format!(
                    "the folder of incidents `{}` can't be read: {}",
                    self.path.display(),
                    plain_io(&e)
                ),
                "check the path under `incidents` in the site file",
            )
        };
        let entries = match fs::read_dir(&self.path) {
            Ok(entries) => entries,
            Err(e) if e.kind() == std::io::ErrorKind::NotFound => return Ok(stored),
            Err(e) => return Err(wrong(e)),
        };
        let mut paths: Vec<PathBuf> = Vec::new();
        for entry in entries.take(MOST) {
            let path = entry.map_err(wrong)?.path();
            let hidden = path
                .file_name()
                .is_some_and(|n| n.to_string_lossy().starts_with('.'));
            if !hidden && path.extension().is_some_and(|e| e == "toml") {
                paths.push(path);
            }
        }
        paths.sort();
        for path in paths {
            match self.one(&path) {
                Ok(incident) => stored.incidents.push(incident),
                Err(faults) => stored.damaged.extend(faults),
            }
        }
        stored
            .incidents
            .sort_by(|a, b| b.opened.cmp(&a.opened).then(a.id.cmp(&b.id)));
        Ok(stored)
    }

    fn one(&self, path: &Path) -> Result<Incident, Vec<Fault>> {
        let name = path.display().to_string();
        let unreadable = |reason: String| {
            vec![Fault::whole(
                "unreadable",
                format!("the incident `{name}` can't be read: {reason}"),
                "correct it by hand, or take it out of the folder",
            )]
        };
        let about = fs::metadata(path).map_err(|e| unreadable(plain_io(&e)))?;
        if about.len() > LARGEST {
            return Err(unreadable(format!("it has more than {LARGEST} bytes")));
        }
        let text = fs::read_to_string(path).map_err(|e| unreadable(plain_io(&e)))?;
        let id = path.file_stem().unwrap_or_default().to_string_lossy();
        read(&id, &Source::new(name, text), &self.zone)
    }

    /// Writes a new incident, and gives it its id: the day and what leads, with a number when that is taken.
    ///
    /// # Errors
    /// [`NotWritten`].
    pub fn add(&self, incident: &Incident) -> Result<Incident, NotWritten> {
        fs::create_dir_all(&self.path)
            .map_err(|e| NotWritten::io(&self.path, "the folder can't be made", &e))?;
        let day = Timestamp::from_second(incident.opened).map_or_else(
            |_| "undated".to_owned(),
            |t| self.zone.to_datetime(t).date().to_string(),
        );
        let what = incident
            .ranking
            .first()
            .map_or("unknown", |r| r.id.as_str());
        for number in 1..=SAME {
            let id = match number {
                1 => format!("{day}-{what}"),
                n => format!("{day}-{what}-{n}"),
            };
            let path = self.file(&id);
            let mut taken = false;
            edit(&path, |before| {
                taken = before.is_some();
                Ok(before.map_or_else(|| whole(incident).into_bytes(), <[u8]>::to_vec))
            })?;
            if !taken {
                return Ok(Incident {
                    id,
                    ..incident.clone()
                });
            }
        }
        Err(NotWritten::Failed(Fault::whole(
            "too-many-incidents",
            format!("there are {SAME} incidents called `{day}-{what}` already"),
            "close and follow those that there are",
        )))
    }

    fn file(&self, id: &str) -> PathBuf {
        self.path.join(format!("{id}.toml"))
    }

    /// Puts things down in an incident's file, all or none, and gives the incident as it is then.
    ///
    /// # Errors
    /// [`NotWritten`]: the file is damaged or gone, or what is put down does not fit.
    pub fn put(&self, id: &str, edits: &[Edit], mark: Mark<'_>) -> Result<Incident, NotWritten> {
        let path = self.file(id);
        let name = path.display().to_string();
        let mut made = None;
        edit(&path, |before| {
            let gone = || {
                Fault::whole(
                    "unknown-incident",
                    format!("the incident `{id}` is gone"),
                    "`gillside incident list` has all",
                )
            };
            let before = before.ok_or_else(gone)?;
            let mut text = String::from_utf8_lossy(before).into_owned();
            for edit in edits {
                let source = Source::new(&name, &*text);
                let incident = read(id, &source, &self.zone).map_err(NotWritten::Refused)?;
                text = edited(&text, &incident, edit, mark)?;
            }
            let after = read(id, &Source::new(&name, &*text), &self.zone);
            made = Some(after.map_err(NotWritten::Refused)?);
            Ok(text.into_bytes())
        })?;
        made.ok_or_else(|| {
            Fault::whole("nothing-changed", "nothing was put down", "try again").into()
        })
    }
}
