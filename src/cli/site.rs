//! `gillside site`: makes a site file step by step, and checks one.

mod made;
mod questions;

use std::io::IsTerminal;
use std::path::{Path, PathBuf};

use clap::{Args, Subcommand};
use console::Term;
use dialoguer::Input;
use serde_json::json;

use super::Exit;
use super::args::{Common, Format};
use super::context::{Context, only};
use super::output::Output;
use super::stop::Stop;
use crate::fault::{Fault, Source};
use crate::knowledge::{self, Knowledge};
use crate::record::{NotWritten, edit};
use crate::render::{self, Block};
use crate::site::{Known, read};
use made::{Answers, Asked, ask_all, lacking};

/// What `site` may be told.
#[derive(Debug, Args)]
pub(super) struct SiteArgs {
    /// What to do with the site file
    #[command(subcommand)]
    pub what: What,
}

/// What can be done with a site file.
#[derive(Debug, Subcommand)]
pub(super) enum What {
    /// Asks for the farm step by step, and writes `site.toml` (or the file that `--site` names)
    New,
    /// Checks the site file, and says what more would be known with more in it
    Check,
}

/// Runs it.
pub(super) fn run(args: &SiteArgs, common: &Common, out: &mut Output) -> Result<Exit, Stop> {
    match args.what {
        What::New => new(common, out)?,
        What::Check => check(common, out)?,
    }
    Ok(Exit::Done)
}

fn check(common: &Common, out: &mut Output) -> Result<(), Stop> {
    only(common.format, "site check", &[Format::Text, Format::Json])?;
    let context = Context::load(common)?;
    let Some(file) = &context.site_file else {
        return Err(Stop::usage(Fault::whole(
            "no-site-file",
            "there is no site file here",
            "make one with `gillside site new`, or name one with `--site FILE`",
        )));
    };
    let lacks = lacking(&context.site);
    let text = match common.format {
        Format::Json => {
            let lacks = lacks.iter().map(|q| json!({"key": q.key, "why": q.why}));
            let made = json!({
                "schema": 1,
                "file": file.display().to_string(),
                "name": context.site.name,
                "good": true,
                "lacks": lacks.collect::<Vec<_>>(),
            });
            format!("{made:#}\n")
        }
        _ => {
            let name = context.site.name.as_deref().unwrap_or_default();
            let mut page = vec![Block::Para(format!("{} is good: {name}.", file.display()))];
            if !lacks.is_empty() {
                page.push(Block::Heading(
                    "Not known, and what it is good for".to_owned(),
                ));
                page.extend(
                    lacks
                        .iter()
                        .map(|q| Block::Bullet(format!("{}: {}", q.key, q.why))),
                );
            }
            render::text(&page, out.look())
        }
    };
    out.write(&text)
}

fn new(common: &Common, out: &mut Output) -> Result<(), Stop> {
    only(common.format, "site new", &[Format::Text])?;
    let path = common
        .site
        .clone()
        .unwrap_or_else(|| PathBuf::from("site.toml"));
    if path.exists() {
        return Err(Stop::usage(Fault::whole(
            "site-file-exists",
            format!("`{}` is there already", path.display()),
            "change it by hand and check it with `gillside site check`, or name another with `--site FILE`",
        )));
    }
    if !(std::io::stdin().is_terminal() && std::io::stdout().is_terminal()) {
        return Err(Stop::usage(Fault::whole(
            "no-terminal",
            "there is no terminal to ask at",
            "run it in a terminal, or write the file by hand: only `name = \"…\"` must be there",
        )));
    }
    let base = knowledge::load(&knowledge::embedded(), &[]).map_err(Stop::Rules)?;
    let mut answers = AtTerminal {
        term: Term::stdout(),
        knowledge: &base,
    };
    answers.term.write_line(WELCOME)?;
    let made = ask_all(&mut answers)?;
    put(&path, &made, &base)?;
    out.write(&format!(
        "\n{} is made. Next:\n  gillside shift --format html > checklist.html   (open it and print it)\n  gillside shift --emergency-card --format html > card.html\n",
        path.display()
    ))
}

const WELCOME: &str = "A site file says what your farm is like. Leave out what you don't know with Enter: it is then unknown, not zero.\nYou can change everything later by hand.";

/// Writes the file, once it has been read through.
fn put(path: &Path, text: &str, base: &Knowledge) -> Result<(), Stop> {
    let faults = faults(text, base);
    if !faults.is_empty() {
        return Err(Stop::Input(faults));
    }
    edit(path, |before| match before {
        None => Ok(text.as_bytes().to_vec()),
        Some(_) => Err(NotWritten::Refused(vec![Fault::whole(
            "site-file-exists",
            format!("`{}` was made by somebody else meanwhile", path.display()),
            "look at it, or name another file with `--site FILE`",
        )])),
    })?;
    Ok(())
}

/// What is wrong with a site file's text.
fn faults(text: &str, base: &Knowledge) -> Vec<Fault> {
    let species: Vec<String> = base.species.iter().map(|s| s.id.clone()).collect();
    let media: Vec<String> = base.media.iter().map(|m| m.id.clone()).collect();
    let known = Known {
        vocabulary: &base.vocabulary,
        species: &species,
        media: &media,
    };
    read(&Source::new("site.toml", text), &known).1
}

/// A person at a terminal.
struct AtTerminal<'k> {
    term: Term,
    knowledge: &'k Knowledge,
}

impl Answers for AtTerminal<'_> {
    fn say(&mut self, text: &str) -> Result<(), Stop> {
        Ok(self.term.write_line(text)?)
    }

    fn ask(&mut self, asked: &Asked) -> Result<String, Stop> {
        let mut prompt = Input::<String>::new()
            .with_prompt(&asked.prompt)
            .allow_empty(true);
        if let Some(usual) = &asked.usual {
            prompt = prompt.default(usual.clone());
        }
        match prompt.interact_text_on(&self.term) {
            Ok(line) => Ok(line),
            Err(dialoguer::Error::IO(e)) => Err(Stop::Write(e)),
        }
    }

    fn faults(&self, text: &str) -> Vec<Fault> {
        faults(text, self.knowledge)
    }

    fn listed(&self, what: &str) -> Vec<String> {
        match what {
            "species" => self
                .knowledge
                .species
                .iter()
                .map(|s| s.id.clone())
                .collect(),
            "media" => self.knowledge.media.iter().map(|m| m.id.clone()).collect(),
            _ => Vec::new(),
        }
    }
}
