//! `gillside incident`: what outlives the person who found it.

use std::path::PathBuf;

use clap::{Args, Subcommand};

use super::Exit;
use super::args::{Common, Format};
use super::context::{Context, only};
use super::output::Output;
use super::shift;
use super::standing::Standing;
use super::stop::Stop;
use crate::diagnosis::Verdict;
use crate::fault::{Fault, did_you_mean, plain_io, shown};
use crate::incident::{
    Book, Edit, Folder, Followed, Incident, Look, Mark, Opening, Similar, Stored, again, checks,
    opened, plan_of, similar,
};
use crate::render::incident::{self as pages, Told};
use crate::render::{self, Block};

/// What `incident` may be told.
#[derive(Debug, Args)]
pub(super) struct IncidentArgs {
    /// What to do with incidents
    #[command(subcommand)]
    pub what: What,
    /// Who does it
    #[arg(long, global = true, value_name = "NAME")]
    pub by: Option<String>,
    /// The log [default: the log that the site file names]
    #[arg(long, global = true, value_name = "LOG")]
    pub log: Option<String>,
}

/// What can be done with incidents. An incident is named by its id or the beginning of it; without a name the only open one
/// is meant.
#[derive(Debug, Subcommand)]
pub(super) enum What {
    /// Lists all, the newest first
    List,
    /// Shows one in full (`--format json` has all an auditor asks for)
    Show {
        /// Which
        id: Option<String>,
    },
    /// Opens one from the log as it stands
    Open,
    /// Puts down somebody's words
    Note {
        /// Which
        #[arg(long = "in", value_name = "ID")]
        id: Option<String>,
        /// The words
        text: String,
    },
    /// Says that a step was done (`plan-1`, `plan-2` … for steps of the plan)
    Done {
        /// Which
        #[arg(long = "in", value_name = "ID")]
        id: Option<String>,
        /// The step
        step: String,
    },
    /// Takes in a paced correction, as `gillside pace … --format json` writes it
    Plan {
        /// Which
        #[arg(long = "in", value_name = "ID")]
        id: Option<String>,
        /// The plan; `-` is standard input
        file: String,
    },
    /// Looks whether the readings move as they should by when they should; if not, says what next
    Follow {
        /// Which
        id: Option<String>,
    },
    /// Closes one
    Close {
        /// Which
        id: Option<String>,
        /// The confirmed cause
        #[arg(long, value_name = "CAUSE")]
        cause: Option<String>,
        /// What came of it
        #[arg(long, value_name = "WORDS")]
        outcome: Option<String>,
    },
    /// Opens one again
    Reopen {
        /// Which
        id: String,
        /// Why
        #[arg(long, value_name = "WORDS")]
        why: Option<String>,
    },
    /// Writes half a page for the next shift
    Handover,
}

/// The folder of a site's incidents.
pub(super) fn folder(context: &Context) -> Folder {
    let named = context.site.incidents.clone();
    Folder {
        path: context.beside_site(&named.unwrap_or_else(|| PathBuf::from("incidents"))),
        zone: context.site.timezone.clone(),
    }
}

/// Runs it.
pub(super) fn run(args: &IncidentArgs, common: &Common, out: &mut Output) -> Result<Exit, Stop> {
    let context = Context::load(common)?;
    let folder = folder(&context);
    let stored = folder.load().map_err(|f| Stop::Input(vec![f]))?;
    let desk = Desk {
        context: &context,
        folder: &folder,
        stored: &stored,
        mark: Mark {
            time: context.now,
            by: args.by.as_deref(),
        },
        format: common.format,
    };
    if !matches!(args.what, What::List) {
        for fault in &stored.damaged {
            out.remark(&format!("warning: {fault}"));
        }
    }
    let log = args.log.as_deref();
    match &args.what {
        What::List => match common.format {
            Format::Json => out.write(&pages::list_json(&stored))?,
            _ => desk.write(&pages::list(&stored, &desk.told()), "incident list", out)?,
        },
        What::Show { id } => desk.show(id.as_deref(), log, out)?,
        What::Open => {
            let Some(standing) = Standing::load(&context, log)? else {
                return Err(no_log());
            };
            let made = open(&context, &standing, desk.mark.by)?;
            let text = match (&made, standing.assessment.verdict) {
                (Some(made), _) => format!("Opened {}: {}.", made.id, made.title),
                (None, _) => "Nothing is wrong enough for an incident.".to_owned(),
            };
            desk.write(&[Block::Para(text)], "incident open", out)?;
        }
        What::Note { id, text } => {
            let words = text.replace(['\n', '\r', '\t'], " ");
            desk.put(id.as_deref(), Edit::Note(words), "Noted in", out)?;
        }
        What::Done { id, step } => {
            let incident = desk.meant(id.as_deref())?;
            let from = desk.value_of(incident, step, log)?;
            let edit = Edit::Done(step.clone(), from);
            desk.put(Some(&incident.id), edit, "Put down as done in", out)?;
        }
        What::Plan { id, file } => {
            let plan = plan_of(&read(file)?).map_err(|f| Stop::Input(vec![f]))?;
            desk.put(id.as_deref(), Edit::Plan(plan), "The plan is in", out)?;
        }
        What::Follow { id } => desk.follow(id.as_deref(), log, out)?,
        What::Close { id, cause, outcome } => {
            if let Some(cause) = cause
                && context.knowledge.cause(cause).is_none()
            {
                let known = context.knowledge.causes.iter().map(|c| c.id.as_str());
                return Err(Stop::usage(Fault::whole(
                    "unknown-cause",
                    format!("no cause is called `{}`", shown(cause)),
                    did_you_mean(
                        cause,
                        known,
                        "`gillside knowledge list causes` has all; leave it out if nobody knows",
                    ),
                )));
            }
            let edit = Edit::Close(cause.clone(), outcome.clone());
            desk.put(id.as_deref(), edit, "Closed", out)?;
        }
        What::Reopen { id, why } => {
            desk.put(Some(id), Edit::Reopen(why.clone()), "Open again:", out)?;
        }
        What::Handover => desk.handover(log, out)?,
    }
    Ok(Exit::Done)
}

/// Opens an incident from how the farm stands; `None` when nothing is to be done. What `review --open-incident` calls.
pub(super) fn open(
    context: &Context,
    standing: &Standing<'_>,
    by: Option<&str>,
) -> Result<Option<Incident>, Stop> {
    if standing.assessment.verdict < Verdict::ActToday {
        return Ok(None);
    }
    let seen = render::seen(&standing.report(context));
    let findings = Similar::holding(&standing.engine, &context.knowledge);
    let incident = opened(&Opening {
        assessment: &standing.assessment,
        book: book(context, Some(standing)),
        seen: &seen,
        findings: &findings,
        by,
    });
    Ok(Some(folder(context).add(&incident)?))
}

/// What checks are looked up in.
fn book<'a>(context: &'a Context, standing: Option<&'a Standing<'_>>) -> Book<'a> {
    Book {
        knowledge: &context.knowledge,
        log: standing.map(|s| &s.log),
        memory: standing.map(|s| s.engine.memory()),
        now: context.now,
    }
}

fn no_log() -> Stop {
    Stop::usage(Fault::whole(
        "no-log",
        "there is no log to judge by",
        "name one with `--log log.csv`, or begin one with `gillside record`",
    ))
}

fn read(file: &str) -> Result<String, Stop> {
    let text = match file {
        "-" => std::io::read_to_string(std::io::stdin()),
        path => std::fs::read_to_string(path),
    };
    text.map_err(|e| {
        Stop::Input(vec![Fault::whole(
            "unreadable",
            format!("`{}` can't be read: {}", shown(file), plain_io(&e)),
            "check the path",
        )])
    })
}

/// What every subcommand works with.
struct Desk<'a> {
    context: &'a Context,
    folder: &'a Folder,
    stored: &'a Stored,
    mark: Mark<'a>,
    format: Format,
}

impl<'a> Desk<'a> {
    fn told(&self) -> Told<'a> {
        Told {
            knowledge: &self.context.knowledge,
            site: &self.context.site,
            now: self.context.now,
        }
    }

    fn meant(&self, id: Option<&str>) -> Result<&'a Incident, Stop> {
        self.stored.meant(id).map_err(Stop::usage)
    }

    fn write(&self, page: &[Block], command: &str, out: &mut Output) -> Result<(), Stop> {
        only(self.format, command, &[Format::Text, Format::Markdown])?;
        out.write(&match self.format {
            Format::Markdown => render::markdown(page),
            _ => render::text(page, out.look()),
        })
    }

    fn put(&self, id: Option<&str>, edit: Edit, done: &str, out: &mut Output) -> Result<(), Stop> {
        let incident = self.meant(id)?;
        let after = self.folder.put(&incident.id, &[edit], self.mark)?;
        let text = format!("{done} {}.", after.id);
        self.write(&[Block::Para(text)], "incident", out)
    }

    fn standing(&self, log: Option<&str>) -> Result<Option<Standing<'a>>, Stop> {
        Standing::load(self.context, log)
    }

    fn checked<'i>(
        &self,
        incident: &'i Incident,
        standing: Option<&Standing<'_>>,
    ) -> pages::Standing<'i> {
        pages::Standing {
            incident,
            checks: checks(incident, &book(self.context, standing)),
        }
    }

    fn show(&self, id: Option<&str>, log: Option<&str>, out: &mut Output) -> Result<(), Stop> {
        let incident = self.meant(id)?;
        let standing = self.standing(log)?;
        let checked = self.checked(incident, standing.as_ref());
        let others: Vec<Incident> = self
            .stored
            .incidents
            .iter()
            .filter(|i| i.id != incident.id)
            .cloned()
            .collect();
        let alike = similar(&incident.findings, &others, &self.context.knowledge);
        match self.format {
            Format::Json => {
                let log = standing.as_ref().map(|s| &s.log);
                out.write(&pages::json(&checked, &alike, log, &self.told()))
            }
            _ => {
                let page = pages::show(&checked, &alike, &self.told());
                self.write(&page, "incident show", out)
            }
        }
    }

    /// What a step's reading is now, to be compared with later.
    fn value_of(
        &self,
        incident: &Incident,
        step: &str,
        log: Option<&str>,
    ) -> Result<Option<f64>, Stop> {
        let found = incident.steps.iter().find(|s| s.id == step);
        let Some(verify) = found.and_then(|s| s.verify.as_ref()) else {
            return Ok(None);
        };
        let standing = self.standing(log)?;
        Ok(book(self.context, standing.as_ref()).newest(&verify.id))
    }

    fn follow(&self, id: Option<&str>, log: Option<&str>, out: &mut Output) -> Result<(), Stop> {
        let incident = self.meant(id)?;
        let Some(standing) = self.standing(log)? else {
            return Err(no_log());
        };
        let checked = self.checked(incident, Some(&standing));
        let failed: Vec<_> = checked
            .checks
            .iter()
            .filter(|c| matches!(c.look, Look::Missed(..)))
            .collect();
        let knowledge = &self.context.knowledge;
        let again =
            (!failed.is_empty()).then(|| again(knowledge, &standing.assessment, incident, &failed));
        let text = match self.format {
            Format::Json => pages::follow_json(&checked, again.as_ref()),
            Format::Markdown => {
                render::markdown(&pages::follow(&checked, again.as_ref(), &self.told()))
            }
            _ => {
                only(self.format, "incident follow", &[Format::Text])?;
                let page = pages::follow(&checked, again.as_ref(), &self.told());
                render::text(&page, out.look())
            }
        };
        let found = Followed::of(
            &standing.assessment,
            knowledge,
            pages::found(&checked, &self.told()),
            again.as_ref(),
        );
        if incident.is_open() {
            self.folder
                .put(&incident.id, &[Edit::Follow(found)], self.mark)?;
        }
        out.write(&text)
    }

    fn handover(&self, log: Option<&str>, out: &mut Output) -> Result<(), Stop> {
        let standing = self.standing(log)?;
        let open: Vec<_> = self
            .stored
            .open()
            .map(|i| self.checked(i, standing.as_ref()))
            .collect();
        let window = shift::asked(self.context, None, None)?;
        let list = shift::list(self.context, standing.as_ref(), self.stored, window);
        let next = pages::next_shift(&list, &self.told());
        let page = pages::handover(&open, Some(&next), &self.told());
        self.write(&page, "incident handover", out)
    }
}
