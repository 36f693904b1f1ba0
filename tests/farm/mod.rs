//! A farm in a folder of its own, with a clock that is set: what is typed there one after the other.

#![allow(dead_code)]

use std::path::PathBuf;
use std::process::{Command, Output, Stdio};

use tempfile::TempDir;

/// A folder with a site file and a log.
pub struct Farm {
    folder: TempDir,
    /// What is taken for now.
    pub clock: String,
}

/// What came back.
#[derive(Debug)]
pub struct Came {
    pub status: i32,
    pub out: String,
    pub err: String,
}

impl Farm {
    /// A farm with these files.
    pub fn with(files: &[(&str, &str)]) -> Self {
        let farm = Self {
            folder: tempfile::tempdir().unwrap(),
            clock: "2026-03-02 06:00".to_owned(),
        };
        for (name, text) in files {
            farm.write(name, text);
        }
        farm
    }

    pub fn path(&self, name: &str) -> PathBuf {
        self.folder.path().join(name)
    }

    pub fn write(&self, name: &str, text: &str) {
        let path = self.path(name);
        std::fs::create_dir_all(path.parent().unwrap()).unwrap();
        std::fs::write(path, text).unwrap();
    }

    pub fn read(&self, name: &str) -> String {
        std::fs::read_to_string(self.path(name)).unwrap()
    }

    /// The command in the farm's folder at the farm's time.
    pub fn command(&self, args: &[&str]) -> Command {
        let mut command = Command::new(env!("CARGO_BIN_EXE_gillside"));
        command
            .args(args)
            .args(["--clock", &self.clock])
            .current_dir(self.folder.path())
            .env_remove("COLUMNS")
            .env_remove("NO_COLOR")
            .stdin(Stdio::null())
            .stdout(Stdio::piped())
            .stderr(Stdio::piped());
        command
    }

    /// Runs it, whatever comes.
    pub fn run(&self, args: &[&str]) -> Came {
        came(self.command(args).output().unwrap())
    }

    /// Runs it; it must be done without a complaint. Gives what it said.
    pub fn does(&self, args: &[&str]) -> String {
        let came = self.run(args);
        assert_eq!(
            (came.status, came.err.as_str()),
            (0, ""),
            "{args:?}\n{}",
            came.out
        );
        came.out
    }

    /// Runs it with `--format json`.
    pub fn json(&self, args: &[&str]) -> serde_json::Value {
        let with: Vec<&str> = args.iter().copied().chain(["--format", "json"]).collect();
        serde_json::from_str(&self.does(&with)).unwrap()
    }

    /// Sets the clock.
    pub fn at(&mut self, clock: &str) -> &mut Self {
        clock.clone_into(&mut self.clock);
        self
    }
}

/// What a finished run said.
pub fn came(output: Output) -> Came {
    let came = Came {
        status: output.status.code().unwrap_or(-1),
        out: String::from_utf8(output.stdout).unwrap(),
        err: String::from_utf8(output.stderr).unwrap(),
    };
    assert!(!came.err.contains("panicked"), "{}", came.err);
    came
}

/// The site file of an invented farm with three shifts.
pub const SITE: &str = r#"
name = "Lower barn"
log = "log.csv"
species = "nile-tilapia"
crops = ["leafy-greens"]
started = 2025-03-01
volume_l = 12000
biomass_kg = 320
feed_kg_per_day = 4.5
feed_protein_percent = 32
biofilter_area_m2 = 2600
plant_area_m2 = 90
heated = true
covered_media = true

[makeup]
chlorination = "none"

[[shift]]
name = "early"
start = "06:00"
end = "14:00"

[[shift]]
name = "late"
start = "14:00"
end = "22:00"

[[shift]]
name = "night"
start = "22:00"
end = "06:00"

[[place]]
name = "raft beds"
kind = "raft"

[[place]]
name = "tank 1"
kind = "tank"

[[place]]
name = "sump"
kind = "sump"

[[phone]]
who = "fish vet"
number = "+000 000 000"

[equipment]
solids_filter = false
pure_oxygen = false
"#;

/// The head of that farm's log.
pub const HEAD: &str = "time,temperature,ph,dissolved-oxygen,total-ammonia (mg/L as N),nitrite (mg/L as N),nitrate (mg/L as N),alkalinity,chloride,feed,event,sign,by,note\n";

/// Two ordinary weeks up to March 1 2026, with some weather in the numbers.
pub fn two_weeks() -> String {
    let mut log = HEAD.to_owned();
    for day in 0..14_u32 {
        let date = 16 + day;
        let date = if date > 28 {
            format!("2026-03-{:02}", date - 28)
        } else {
            format!("2026-02-{date:02}")
        };
        let wobble = f64::from(day % 3) * 0.1;
        let weekly = if day % 6 == 0 { "42,52,45" } else { ",," };
        log.push_str(&format!(
            "{date} 07:30,{:.1},{:.2},{:.1},{:.2},0.05,{weekly},4.5,base-added,,Ines,\n",
            23.8 + wobble,
            6.80 + wobble / 5.0,
            6.8 - wobble,
            0.2 + wobble / 4.0,
        ));
        log.push_str(&format!(
            "{date} 17:00,{:.1},6.82,6.5,,,,,,,,,Rui,\n",
            24.1 + wobble
        ));
    }
    log
}
