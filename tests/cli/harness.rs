//! Runs the program in a folder of its own and holds it to its exit status, standard output and standard error.
//!
//! Standard error must be empty unless a test says otherwise.

use std::io::Write;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

use tempfile::TempDir;

/// What a stream must be.
enum Expect {
    Empty,
    Exactly(String),
    Having(Vec<String>),
}

impl Expect {
    fn check(&self, stream: &str, text: &str, run: &str) {
        match self {
            Expect::Empty => assert_eq!(text, "", "{stream} of {run} is not empty"),
            Expect::Exactly(wanted) => assert_eq!(text, wanted, "{stream} of {run}"),
            Expect::Having(parts) => {
                for part in parts {
                    assert!(
                        text.contains(part.as_str()),
                        "{stream} of {run} lacks {part:?}:\n{text}"
                    );
                }
            }
        }
    }
}

/// What came back.
pub struct Came {
    pub status: i32,
    pub out: String,
    pub err: String,
}

/// One run.
#[must_use]
pub struct Run {
    args: Vec<String>,
    folder: TempDir,
    env: Vec<(String, String)>,
    stdin: Vec<u8>,
    status: i32,
    out: Option<Expect>,
    err: Expect,
}

/// A run of the program with these arguments.
pub fn gillside<const N: usize>(args: [&str; N]) -> Run {
    Run {
        args: args.iter().map(|a| (*a).to_owned()).collect(),
        folder: tempfile::tempdir().unwrap(),
        env: Vec::new(),
        stdin: Vec::new(),
        status: 0,
        out: None,
        err: Expect::Empty,
    }
}

/// A file of the demo farm.
pub fn demo(file: &str) -> String {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    root.join("knowledge/demo").join(file).display().to_string()
}

/// The moment after the demo's last row.
pub const DEMO_CLOCK: &str = "2026-03-04 07:45";

/// A review of the demo farm as its people would see it on that morning, with more arguments.
pub fn demo_review<const N: usize>(more: [&str; N]) -> Run {
    gillside([
        "review",
        "--site",
        &demo("site.toml"),
        "--clock",
        DEMO_CLOCK,
    ])
    .and(more)
}

impl Run {
    /// More arguments.
    pub fn and<const N: usize>(mut self, args: [&str; N]) -> Self {
        self.args.extend(args.iter().map(|a| (*a).to_owned()));
        self
    }

    /// A file in the run's folder.
    pub fn file(self, name: &str, text: impl AsRef<[u8]>) -> Self {
        let path = self.folder.path().join(name);
        std::fs::create_dir_all(path.parent().unwrap()).unwrap();
        std::fs::write(path, text).unwrap();
        self
    }

    /// An environment variable.
    pub fn env(mut self, name: &str, value: &str) -> Self {
        self.env.push((name.to_owned(), value.to_owned()));
        self
    }

    /// So many columns.
    pub fn columns(self, columns: usize) -> Self {
        self.env("COLUMNS", &columns.to_string())
    }

    /// What stands on standard input.
    pub fn stdin(mut self, text: impl AsRef<[u8]>) -> Self {
        self.stdin = text.as_ref().to_vec();
        self
    }

    /// The exit status; 0 unless said.
    pub fn status(mut self, status: i32) -> Self {
        self.status = status;
        self
    }

    /// Standard output is this.
    pub fn out(mut self, text: &str) -> Self {
        self.out = Some(Expect::Exactly(text.to_owned()));
        self
    }

    /// Standard output is empty.
    pub fn no_out(mut self) -> Self {
        self.out = Some(Expect::Empty);
        self
    }

    /// Standard output has these.
    pub fn out_has<const N: usize>(mut self, parts: [&str; N]) -> Self {
        self.out = Some(Expect::Having(
            parts.iter().map(|p| (*p).to_owned()).collect(),
        ));
        self
    }

    /// Standard error is this.
    pub fn err(mut self, text: &str) -> Self {
        self.err = Expect::Exactly(text.to_owned());
        self
    }

    /// Standard error has these.
    pub fn err_has<const N: usize>(mut self, parts: [&str; N]) -> Self {
        self.err = Expect::Having(parts.iter().map(|p| (*p).to_owned()).collect());
        self
    }

    /// The run's folder.
    pub fn folder(&self) -> PathBuf {
        self.folder.path().to_path_buf()
    }

    /// The command, ready to start.
    pub fn command(&self) -> Command {
        let mut command = Command::new(env!("CARGO_BIN_EXE_gillside"));
        command
            .args(&self.args)
            .current_dir(self.folder.path())
            .env_remove("NO_COLOR")
            .env_remove("COLUMNS")
            .envs(self.env.iter().map(|(n, v)| (n, v)))
            .stdin(Stdio::piped())
            .stdout(Stdio::piped())
            .stderr(Stdio::piped());
        command
    }

    /// Runs it, checks everything that was said, and gives back what came.
    pub fn check(self) -> Came {
        let name = format!("`gillside {}`", self.args.join(" "));
        let mut child = self.command().spawn().unwrap();
        // A program that has no use for its input may have gone.
        let _ = child.stdin.take().unwrap().write_all(&self.stdin);
        let output = child.wait_with_output().unwrap();
        let came = Came {
            status: output.status.code().unwrap_or(-1),
            out: String::from_utf8(output.stdout).unwrap(),
            err: String::from_utf8(output.stderr).unwrap(),
        };
        assert_eq!(
            came.status, self.status,
            "exit status of {name}\n{}{}",
            came.out, came.err
        );
        self.err.check("standard error", &came.err, &name);
        if let Some(out) = &self.out {
            out.check("standard output", &came.out, &name);
        }
        assert!(
            !came.err.contains("panicked"),
            "{name} panicked:\n{}",
            came.err
        );
        came
    }
}
