//! The one way a file is changed: all of it is written anew beside it, brought to the disk, and put in its place.
//!
//! A crash between any two instructions leaves the old file or the new one, whole. An append would be shorter, but a
//! row cut off by a power failure can read as another row (`6.4` of `6.45`), and a new column changes the head anyway.
//! Another program's change is noticed: the file is read again before it is replaced, and what was put into the old one
//! in the last instant is carried over.

use std::fs::{self, File, OpenOptions};
use std::io::{self, Read, Seek, SeekFrom, Write};
use std::path::{Path, PathBuf};

use super::lock::{Lock, neighbor};
use crate::fault::{Fault, plain_io};

/// Why nothing was written. The file is as it was.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum NotWritten {
    /// What was asked for can't be done: the reasons.
    Refused(Vec<Fault>),
    /// The system failed: full disk, no permission.
    Failed(Fault),
}

impl NotWritten {
    /// A failure of the system.
    pub fn io(path: &Path, what: &str, error: &io::Error) -> Self {
        let cure = match error.kind() {
            io::ErrorKind::PermissionDenied | io::ErrorKind::ReadOnlyFilesystem => {
                "ask for the right to write there, or choose another place"
            }
            io::ErrorKind::StorageFull
            | io::ErrorKind::QuotaExceeded
            | io::ErrorKind::FileTooLarge => "make room on the disk, and try again",
            io::ErrorKind::NotFound => "make the folder first, or correct the path",
            _ => "check the disk and the path, and try again",
        };
        Self::Failed(Fault::whole(
            "unwritable",
            format!(
                "`{}` was left as it was: {what} ({})",
                path.display(),
                match error.kind() {
                    io::ErrorKind::PermissionDenied => "you may not write there".to_owned(),
                    _ => plain_io(error),
                }
            ),
            cure,
        ))
    }
}

impl From<Fault> for NotWritten {
    fn from(fault: Fault) -> Self {
        Self::Refused(vec![fault])
    }
}

/// How often another program's change is met with a new try.
const TRIES: usize = 20;

/// Changes a file: `make` gets what it holds (`None`: there is no such file) and gives what it shall hold. It is called
/// again when another program has changed the file meanwhile, so it must not have effects of its own.
///
/// # Errors
/// [`NotWritten`]: what `make` refuses, or the system does not do. The file is then as it was.
pub fn edit(
    path: &Path,
    mut make: impl FnMut(Option<&[u8]>) -> Result<Vec<u8>, NotWritten>,
) -> Result<(), NotWritten> {
    // A link stays a link: what it points to is replaced.
    let path = fs::canonicalize(path).unwrap_or_else(|_| path.to_path_buf());
    let _lock = Lock::take(&path)?;
    for _ in 0..TRIES {
        let mut old = open(&path)?;
        let before = old.as_mut().map(|(_, bytes)| std::mem::take(bytes));
        let made = make(before.as_deref())?;
        if before.as_ref() == Some(&made) {
            return Ok(());
        }
        let new = New::write(&path, &made)?;
        if open(&path)?.map(|(_, bytes)| bytes) != before {
            continue; // Dropping the new one takes it away.
        }
        new.replace(&path)?;
        if let Some((file, _)) = old {
            carry_over(&path, file, before.map_or(0, |b| b.len()), made)?;
        }
        return Ok(());
    }
    Err(NotWritten::Failed(Fault::whole(
        "keeps-changing",
        format!("another program keeps changing `{}`", path.display()),
        "wait until it is done, and try again; nothing was written",
    )))
}

/// The file and what it holds; `None` when there is none.
fn open(path: &Path) -> Result<Option<(File, Vec<u8>)>, NotWritten> {
    let wrong = |e: &io::Error| NotWritten::io(path, "it can't be read", e);
    let mut file = match File::open(path) {
        Ok(file) => file,
        Err(e) if e.kind() == io::ErrorKind::NotFound => return Ok(None),
        Err(e) => return Err(wrong(&e)),
    };
    let about = file.metadata().map_err(|e| wrong(&e))?;
    if !about.is_file() {
        return Err(Fault::whole(
            "not-a-file",
            format!("`{}` is no ordinary file", path.display()),
            "name the file itself, such as `log.csv`",
        )
        .into());
    }
    if about.permissions().readonly() {
        return Err(NotWritten::Failed(Fault::whole(
            "read-only",
            format!("`{}` is write-protected", path.display()),
            "take the protection off, or record to another file; nothing was written",
        )));
    }
    let mut bytes = Vec::new();
    file.read_to_end(&mut bytes).map_err(|e| wrong(&e))?;
    Ok(Some((file, bytes)))
}

/// The new file beside the old one; taken away when it is not put in its place.
struct New {
    path: PathBuf,
    placed: bool,
}

impl New {
    fn write(path: &Path, bytes: &[u8]) -> Result<Self, NotWritten> {
        let new = Self {
            path: neighbor(path, "new"),
            placed: false,
        };
        let written = || -> io::Result<()> {
            // What a crash has left there is of no use to anybody: the lock says that nobody is writing it.
            let mut file = OpenOptions::new()
                .create(true)
                .truncate(true)
                .write(true)
                .open(&new.path)?;
            file.write_all(bytes)?;
            if let Ok(about) = fs::metadata(path) {
                file.set_permissions(about.permissions())?;
                #[cfg(unix)]
                keep_owner(&new.path, &about);
            }
            file.sync_all()
        };
        match written() {
            Ok(()) => Ok(new),
            Err(e) => Err(NotWritten::io(path, "there it can't be written anew", &e)),
        }
    }

    fn replace(mut self, path: &Path) -> Result<(), NotWritten> {
        fs::rename(&self.path, path)
            .map_err(|e| NotWritten::io(path, "it can't be replaced", &e))?;
        self.placed = true;
        // The file is in its place; bringing the folder to the disk as well can fail on systems that have no such thing.
        if let Some(folder) = path.parent()
            && let Ok(folder) = File::open(if folder.as_os_str().is_empty() {
                Path::new(".")
            } else {
                folder
            })
        {
            let _ = folder.sync_all();
        }
        Ok(())
    }
}

impl Drop for New {
    fn drop(&mut self) {
        if !self.placed {
            // The next writer would overwrite it anyway.
            let _ = fs::remove_file(&self.path);
        }
    }
}

/// The new file belongs to whom the old one did, where the system lets us.
#[cfg(unix)]
fn keep_owner(new: &Path, about: &fs::Metadata) {
    use std::os::unix::fs::{MetadataExt, chown};
    let _ = chown(new, Some(about.uid()), Some(about.gid()));
}

/// What another program has put at the end of the old file since it was read.
fn carry_over(
    path: &Path,
    mut old: File,
    read: usize,
    mut made: Vec<u8>,
) -> Result<(), NotWritten> {
    let mut late = Vec::new();
    let seen = u64::try_from(read)
        .map_err(io::Error::other)
        .and_then(|at| old.seek(SeekFrom::Start(at)))
        .and_then(|_| old.read_to_end(&mut late));
    if seen.is_err() || late.is_empty() {
        return Ok(());
    }
    made.extend(late);
    New::write(path, &made)?.replace(path)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A folder of its own with a file in it.
    fn file(text: &str) -> io::Result<(tempfile::TempDir, PathBuf)> {
        let folder = tempfile::tempdir()?;
        let path = folder.path().join("log.csv");
        fs::write(&path, text)?;
        Ok((folder, path))
    }

    fn with(before: Option<&[u8]>, more: &str) -> Result<Vec<u8>, NotWritten> {
        let mut made = before.unwrap_or_default().to_vec();
        made.extend(more.bytes());
        Ok(made)
    }

    fn append(path: &Path, text: &str) -> io::Result<()> {
        OpenOptions::new()
            .append(true)
            .open(path)?
            .write_all(text.as_bytes())
    }

    #[test]
    fn what_another_program_writes_meanwhile_is_noticed() -> io::Result<()> {
        let (_folder, path) = file("a\n")?;
        let mut calls = 0;
        let done = edit(&path, |before| {
            calls += 1;
            if calls == 1 {
                let _ = append(&path, "b\n");
            }
            with(before, "c\n")
        });
        assert_eq!((done, calls), (Ok(()), 2));
        assert_eq!(fs::read_to_string(&path)?, "a\nb\nc\n");
        Ok(())
    }

    #[test]
    fn what_comes_in_the_last_instant_is_carried_over() -> io::Result<()> {
        let (_folder, path) = file("a\n")?;
        let old = File::open(&path)?;
        append(&path, "late\n")?;
        fs::rename(&path, path.with_extension("old"))?;
        fs::write(&path, "a\nc\n")?;
        assert_eq!(carry_over(&path, old, 2, b"a\nc\n".to_vec()), Ok(()));
        assert_eq!(fs::read_to_string(&path)?, "a\nc\nlate\n");
        Ok(())
    }

    #[test]
    fn who_never_stops_writing_is_told_of() -> io::Result<()> {
        let (_folder, path) = file("a\n")?;
        let done = edit(&path, |before| {
            let _ = append(&path, "b\n");
            with(before, "c\n")
        });
        assert!(matches!(done, Err(NotWritten::Failed(f)) if f.code == "keeps-changing"));
        assert!(!fs::read_to_string(&path)?.contains('c'));
        assert!(!neighbor(&path, "new").exists());
        Ok(())
    }

    #[test]
    fn a_refusal_leaves_the_file_and_no_litter() -> io::Result<()> {
        let (folder, path) = file("a\n")?;
        let done = edit(&path, |_| Err(Fault::whole("no", "no", "no").into()));
        assert!(done.is_err());
        assert_eq!(fs::read_to_string(&path)?, "a\n");
        let names: Vec<String> = fs::read_dir(folder.path())?
            .filter_map(|e| Some(e.ok()?.file_name().to_string_lossy().into_owned()))
            .filter(|n| !n.contains("lock"))
            .collect();
        assert_eq!(names, ["log.csv"]);
        Ok(())
    }

    #[cfg(unix)]
    #[test]
    fn rights_and_links_stay() -> io::Result<()> {
        use std::os::unix::fs::{PermissionsExt, symlink};
        let (folder, path) = file("a\n")?;
        fs::set_permissions(&path, fs::Permissions::from_mode(0o640))?;
        let link = folder.path().join("link.csv");
        symlink(&path, &link)?;
        assert_eq!(edit(&link, |before| with(before, "b\n")), Ok(()));
        assert!(fs::symlink_metadata(&link)?.is_symlink());
        assert_eq!(fs::metadata(&path)?.permissions().mode() & 0o777, 0o640);
        assert_eq!(fs::read_to_string(&path)?, "a\nb\n");
        Ok(())
    }

    #[test]
    fn litter_of_a_crash_is_written_over() -> io::Result<()> {
        let (_folder, path) = file("a\n")?;
        fs::write(neighbor(&path, "new"), "half of someth")?;
        assert_eq!(edit(&path, |before| with(before, "b\n")), Ok(()));
        assert_eq!(fs::read_to_string(&path)?, "a\nb\n");
        assert!(!neighbor(&path, "new").exists());
        Ok(())
    }
}
