//! `gillside knowledge`: checks and lists the rule base, and says what it rests on.

use std::path::{Path, PathBuf};

use clap::{Args, Subcommand, ValueEnum};

use super::Exit;
use super::args::{Common, Format};
use super::context::{Context, house_rules, only, site_file};
use super::output::Output;
use super::stop::Stop;
use crate::fault::{Fault, Source, did_you_mean, shown};
use crate::knowledge::{self, Knowledge};
use crate::render::{json, listing};

/// What `knowledge` may be told.
#[derive(Debug, Args)]
pub(super) struct KnowledgeArgs {
    /// What to do with it
    #[command(subcommand)]
    pub task: Task,
}

/// What can be done with the rule base.
#[derive(Debug, Subcommand)]
pub(super) enum Task {
    /// Runs all checks; exit status 4 when any fails
    Check {
        /// Another copy of the rule base [default: the one in the program, with the house rules]
        #[arg(value_name = "FOLDER")]
        folder: Option<PathBuf>,
    },
    /// Lists what there is
    List {
        /// Only these
        #[arg(value_name = "KIND", value_enum)]
        kind: Option<Kind>,
    },
    /// Says what rests on which source, and how much is from memory
    Sources {
        /// Only this source, with everything that rests on it
        #[arg(value_name = "KEY")]
        key: Option<String>,
    },
    /// Prints the JSON Schema of `review --format json`
    Schema,
}

/// Kinds of entries.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub(super) enum Kind {
    /// What may be wrong
    Causes,
    /// What follows from readings, signs and events
    Findings,
    /// What to do, and what to leave alone
    Steps,
    /// Numbers
    Readings,
    /// What a person sees
    Signs,
    /// What happened
    Events,
    /// Fish
    Species,
    /// What is said with answers
    Cautions,
    /// What is looked at how often
    Rounds,
    /// Filter media
    Media,
    /// Causes that a log often can't tell apart
    Families,
    /// Publications
    Sources,
}

/// Runs it.
pub(super) fn run(args: &KnowledgeArgs, common: &Common, out: &mut Output) -> Result<Exit, Stop> {
    match &args.task {
        Task::Check { folder } => {
            only(common.format, "knowledge check", &[Format::Text])?;
            check(folder.as_deref(), common, out)?;
        }
        Task::List { kind } => {
            only(
                common.format,
                "knowledge list",
                &[Format::Text, Format::Json],
            )?;
            let base = Context::load(common)?.knowledge;
            list(*kind, &base, common.format, out)?;
        }
        Task::Sources { key } => {
            only(
                common.format,
                "knowledge sources",
                &[Format::Text, Format::Json],
            )?;
            let base = Context::load(common)?.knowledge;
            sources(key.as_deref(), &base, common.format, out)?;
        }
        Task::Schema => {
            only(
                common.format,
                "knowledge schema",
                &[Format::Text, Format::Json],
            )?;
            out.write(json::REVIEW_SCHEMA)?;
        }
    }
    Ok(Exit::Done)
}

fn check(folder: Option<&Path>, common: &Common, out: &mut Output) -> Result<(), Stop> {
    let shipped = match folder {
        Some(folder) => copy(folder)?,
        None => knowledge::embedded(),
    };
    let house = house_rules(common, site_file(common).as_deref())?
        .map_or_else(Vec::new, |(_, files)| files);
    let base = knowledge::load(&shipped, &house).map_err(Stop::Rules)?;
    let faults = knowledge::check(&base);
    if !faults.is_empty() {
        return Err(Stop::Rules(faults));
    }
    out.write(&listing::checked(&base, shipped.len() + house.len()))
}

/// The files of another copy of the rule base; its demo farm is no part of it.
fn copy(folder: &Path) -> Result<Vec<Source>, Stop> {
    let files = knowledge::folder(folder).map_err(|fault| {
        Stop::Input(vec![Fault {
            cure: "name a folder that holds a copy of the rule base".to_owned(),
            ..fault
        }])
    })?;
    let demo = folder.join("demo");
    let rules: Vec<Source> = files
        .into_iter()
        .filter(|f| !Path::new(&f.name).starts_with(&demo))
        .collect();
    if rules.is_empty() {
        return Err(Stop::Input(vec![Fault::whole(
            "no-rules",
            format!("there is no TOML file in `{}`", folder.display()),
            "name a folder that holds a copy of the rule base",
        )]));
    }
    Ok(rules)
}

fn list(
    kind: Option<Kind>,
    base: &Knowledge,
    format: Format,
    out: &mut Output,
) -> Result<(), Stop> {
    let mut parts = listing::catalog(base);
    if let Some(kind) = kind.and_then(|k| k.to_possible_value()) {
        parts.retain(|(name, _)| *name == kind.get_name());
    }
    out.write(&match format {
        Format::Json => listing::list_json(&parts),
        _ => listing::list_text(&parts, out.look()),
    })
}

fn sources(
    key: Option<&str>,
    base: &Knowledge,
    format: Format,
    out: &mut Output,
) -> Result<(), Stop> {
    let coverage = knowledge::coverage(base);
    let known = &coverage.uses;
    if let Some(key) = key
        && !known.iter().any(|s| s.key == key)
    {
        return Err(Stop::usage(Fault::whole(
            "unknown-id",
            format!("no source is called `{}`", shown(key)),
            did_you_mean(
                key,
                known.iter().map(|s| s.key.as_str()),
                "`gillside knowledge sources` names them",
            ),
        )));
    }
    let only: Vec<_> = known
        .iter()
        .filter(|s| key.is_none_or(|k| k == s.key))
        .collect();
    out.write(&match format {
        Format::Json => listing::sources_json(base, &coverage, &only),
        _ => listing::sources_text(base, &coverage, &only, key.is_some(), out.look()),
    })
}
