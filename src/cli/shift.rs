//! `gillside shift`: the checklist of a shift, a form of it, the card for the wall.

use clap::Args;
use jiff::civil::Date;

use super::Exit;
use super::args::{Common, Format};
use super::context::{Context, only};
use super::incident::folder;
use super::output::Output;
use super::standing::Standing;
use super::stop::Stop;
use crate::assessment::Assessor;
use crate::course;
use crate::diagnosis::Occasion;
use crate::engine::{Engine, Limits};
use crate::fault::{Fault, shown};
use crate::incident::Stored;
use crate::render::{self, checklist};
use crate::shift::{self, Checklist, Ground, Window};

/// What `shift` may be told.
#[derive(Debug, Args)]
pub(super) struct ShiftArgs {
    /// The shift, by its name in the site file [default: the one that starts next]
    #[arg(long, value_name = "NAME")]
    pub shift: Option<String>,
    /// The day it starts on, such as `2026-03-04`
    #[arg(long, value_name = "DATE")]
    pub on: Option<String>,
    /// Write a form to fill in (CSV), for `gillside record --form`
    #[arg(long, conflicts_with = "emergency_card")]
    pub form: bool,
    /// Make the card for the wall: what to do first when air, pump, heat or power stops
    #[arg(long)]
    pub emergency_card: bool,
    /// The log [default: the log that the site file names]
    #[arg(long, value_name = "LOG")]
    pub log: Option<String>,
}

/// Runs it.
pub(super) fn run(args: &ShiftArgs, common: &Common, out: &mut Output) -> Result<Exit, Stop> {
    let context = Context::load(common)?;
    let standing = Standing::load(&context, args.log.as_deref())?;
    if args.emergency_card {
        return card(&context, standing.as_ref(), common.format, out);
    }
    if args.form {
        only(common.format, "shift --form", &[Format::Text])?;
    }
    let window = asked(&context, args.shift.as_deref(), args.on.as_deref())?;
    let stored = folder(&context).load().map_err(|f| Stop::Input(vec![f]))?;
    for fault in &stored.damaged {
        out.remark(&format!("warning: {fault}"));
    }
    let list = list(&context, standing.as_ref(), &stored, window);
    let sheet = checklist::Sheet {
        knowledge: &context.knowledge,
        site: &context.site,
        site_file: context.site_file.as_deref(),
        list: &list,
        assessment: standing.as_ref().map(|s| &s.assessment),
        now: context.now,
    };
    out.write(&match common.format {
        _ if args.form => checklist::form(&sheet),
        Format::Json => checklist::json(&sheet),
        Format::Html => checklist::html(&sheet),
        Format::Markdown => render::markdown(&checklist::page(&sheet)),
        Format::Text => render::text(&checklist::page(&sheet), out.look()),
    })?;
    Ok(Exit::Done)
}

/// The shift that is asked for.
pub(super) fn asked(
    context: &Context,
    name: Option<&str>,
    on: Option<&str>,
) -> Result<Window, Stop> {
    let on = match on {
        None => None,
        Some(text) => Some(text.parse::<Date>().map_err(|_| {
            Stop::usage(Fault::whole(
                "bad-date",
                format!("`--on {}` is not a date", shown(text)),
                "write the day as YYYY-MM-DD, such as 2026-03-04",
            ))
        })?),
    };
    shift::window(&context.site, name, on, context.now).map_err(Stop::usage)
}

/// The checklist of a shift.
pub(super) fn list(
    context: &Context,
    standing: Option<&Standing<'_>>,
    stored: &Stored,
    window: Window,
) -> Checklist {
    let (knowledge, site) = (&context.knowledge, &context.site);
    let assessor = Assessor::new(knowledge, site, Occasion::Review).at(context.now);
    let empty;
    let engine = match standing {
        Some(standing) => &standing.engine,
        None => {
            empty = Engine::new(knowledge, site);
            &empty
        }
    };
    let review = assessor.review(engine);
    let advice = course::Ground {
        knowledge,
        engine,
        site,
        limits: assessor.limits(),
        ranking: &review.ranking,
        decision: &review.decision,
    };
    let ground = Ground {
        advice: &advice,
        log: standing.map(|s| &s.log),
        assessment: standing.map(|s| &s.assessment),
        incidents: &stored.incidents,
        now: context.now,
    };
    shift::checklist(&ground, window)
}

fn card(
    context: &Context,
    standing: Option<&Standing<'_>>,
    format: Format,
    out: &mut Output,
) -> Result<Exit, Stop> {
    let (knowledge, site) = (&context.knowledge, &context.site);
    let limits = Limits::new(knowledge, site);
    let card = shift::card(knowledge, site, &limits, standing.map(|s| &s.log));
    let words = &knowledge.vocabulary;
    out.write(&match format {
        Format::Json => checklist::card::json(&card, site),
        Format::Html => checklist::card::html(&card, site, words),
        Format::Markdown => render::markdown(&checklist::card::page(&card, site, words)),
        Format::Text => render::text(&checklist::card::page(&card, site, words), out.look()),
    })?;
    Ok(Exit::Done)
}
