//! What may be typed.

use std::path::PathBuf;

use clap::{Args, Parser, Subcommand, ValueEnum};

use super::incident::IncidentArgs;
use super::knowledge::KnowledgeArgs;
use super::pace::PaceArgs;
use super::record::RecordArgs;
use super::review::ReviewArgs;
use super::shift::ShiftArgs;
use super::site::SiteArgs;
use super::walk::WalkArgs;
use super::water::WaterArgs;
use super::why::WhyArgs;

/// Finds what is most likely wrong with the water of a fish farm, and what to do first.
///
/// Exit status: 0 done; 1 something failed that is not your doing; 2 wrong usage; 3 an input can't be used; 4 the rule
/// base can't be used; 10 `--alert-at` was given and the verdict is at that level or above; 130 interrupted.
#[derive(Debug, Parser)]
#[command(
    name = "gillside",
    version,
    max_term_width = 100,
    help_expected = true,
    infer_long_args = false
)]
pub(super) struct Options {
    /// Options of every command
    #[command(flatten)]
    pub common: Common,
    /// What to do
    #[command(subcommand)]
    pub command: Command,
}

/// Options of every command.
#[derive(Debug, Args)]
pub(super) struct Common {
    /// The site file: the farm, its water, its fish [default: site.toml here, if there is one]
    #[arg(long, global = true, value_name = "FILE", help_heading = "Everywhere")]
    pub site: Option<PathBuf>,
    /// A folder of local rules laid over the rule base [default: house-rules beside the site file]
    #[arg(long, global = true, value_name = "DIR", help_heading = "Everywhere")]
    pub house_rules: Option<PathBuf>,
    /// How the answer is written
    #[arg(
        long,
        global = true,
        value_enum,
        default_value = "text",
        help_heading = "Everywhere"
    )]
    pub format: Format,
    /// When to use color (the variable NO_COLOR turns it off as well)
    #[arg(
        long,
        global = true,
        value_enum,
        default_value = "auto",
        help_heading = "Everywhere"
    )]
    pub color: Color,
    /// What is taken for now, such as `2026-03-04 07:30` [default: the machine's clock]
    #[arg(long, global = true, value_name = "TIME", help_heading = "Everywhere")]
    pub clock: Option<String>,
}

/// How an answer is written.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub(super) enum Format {
    /// For a person at a terminal
    Text,
    /// For a program
    Json,
    /// For a document
    Markdown,
    /// For a browser
    Html,
}

impl Format {
    /// As it is typed.
    pub fn word(self) -> &'static str {
        match self {
            Self::Text => "text",
            Self::Json => "json",
            Self::Markdown => "markdown",
            Self::Html => "html",
        }
    }
}

/// When to use color.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub(super) enum Color {
    /// On a terminal
    Auto,
    /// Always
    Always,
    /// Never
    Never,
}

/// The commands.
#[derive(Debug, Subcommand)]
pub(super) enum Command {
    /// Diagnoses from logged readings: what is most likely wrong, and what to do first
    Review(ReviewArgs),
    /// Makes the checklist for a shift: rounds, blanks to fill in, what open incidents and trends call for
    Shift(ShiftArgs),
    /// Writes readings, signs and events into the log, and warns at once
    Record(RecordArgs),
    /// Follows incidents: lists, shows, notes, follows up, closes; makes the handover note
    Incident(IncidentArgs),
    /// Makes a site file, or checks one
    Site(SiteArgs),
    /// Explains a cause, finding, step, reading, sign, event, limit or source
    Why(WhyArgs),
    /// Checks and lists the rule base, and says what it rests on
    Knowledge(KnowledgeArgs),
    /// Asks at the tank what is to be seen and measured, and diagnoses
    Walk(WalkArgs),
    /// Plans one correction in safe steps
    Pace(PaceArgs),
    /// Makes one calculation about water; alone it lists the calculations there are
    Water(WaterArgs),
}
