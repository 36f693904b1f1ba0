//! One writer at a time: a lock on a side file, never on the file that is replaced.

use std::fs::{File, OpenOptions, TryLockError};
use std::path::{Path, PathBuf};
use std::thread::sleep;
use std::time::{Duration, Instant};

use super::NotWritten;
use crate::fault::Fault;

/// How long another writer is waited for.
const PATIENCE: Duration = Duration::from_secs(10);
const PAUSE: Duration = Duration::from_millis(10);

/// A held lock; it ends when this is dropped, or when the program dies.
#[derive(Debug)]
pub(super) struct Lock {
    // Only held: the system lets go of the lock when the file is closed.
    _file: File,
}

/// The hidden neighbor of a file: `.log.csv.lock` beside `log.csv`.
pub(super) fn neighbor(path: &Path, ending: &str) -> PathBuf {
    let name = path.file_name().unwrap_or_default().to_string_lossy();
    path.with_file_name(format!(".{name}.{ending}"))
}

impl Lock {
    /// Waits for the lock of a file.
    pub fn take(path: &Path) -> Result<Self, NotWritten> {
        let side = neighbor(path, "lock");
        let file = OpenOptions::new()
            .create(true)
            .truncate(false)
            .write(true)
            .open(&side)
            .map_err(|e| NotWritten::io(path, "nothing can be written beside it", &e))?;
        let begun = Instant::now();
        loop {
            match file.try_lock() {
                Ok(()) => return Ok(Self { _file: file }),
                Err(TryLockError::WouldBlock) if begun.elapsed() < PATIENCE => sleep(PAUSE),
                Err(TryLockError::WouldBlock) => {
                    return Err(NotWritten::Failed(Fault::whole(
                        "locked",
                        format!(
                            "another program has been writing to `{}` for {} seconds",
                            path.display(),
                            PATIENCE.as_secs()
                        ),
                        "wait until it is done, or end it, and try again; nothing was written",
                    )));
                }
                Err(TryLockError::Error(e)) => {
                    return Err(NotWritten::io(path, "it can't be locked", &e));
                }
            }
        }
    }
}
