//! `gillside why`: explains one thing of the rule base, or what it rests on in a log.

use clap::Args;

use super::args::{Common, Format};
use super::context::{Context, only};
use super::output::Output;
use super::stop::Stop;
use super::{Exit, review};
use crate::assessment::Assessor;
use crate::diagnosis::Occasion;
use crate::engine::Limits;
use crate::fault::{Fault, shown};
use crate::render::{self, Block, why};

/// What `why` may be told.
#[derive(Debug, Args)]
pub(super) struct WhyArgs {
    /// A cause, finding, step, reading, sign, event, caution, species, source, or a limit such as
    /// species.dissolved-oxygen.stress-low
    #[arg(value_name = "ID")]
    pub id: String,
    /// Show what a cause or a finding rests on in this log, down to the readings; may be given again
    #[arg(long = "log", value_name = "LOG")]
    pub logs: Vec<String>,
    /// With --log: ignore what is later than this
    #[arg(long, value_name = "TIME", requires = "logs")]
    pub as_of: Option<String>,
}

/// Runs it.
pub(super) fn run(args: &WhyArgs, common: &Common, out: &mut Output) -> Result<Exit, Stop> {
    only(common.format, "why", &[Format::Text, Format::Markdown])?;
    let context = Context::load(common)?;
    let limits = Limits::new(&context.knowledge, &context.site);
    let book = why::Book {
        knowledge: &context.knowledge,
        site: &context.site,
        limits: &limits,
    };
    let page = if args.logs.is_empty() {
        book.explain(&args.id)
            .ok_or_else(|| unknown(&book, &args.id))?
    } else {
        proof(args, &context, &book)?
    };
    out.write(&match common.format {
        Format::Markdown => render::markdown(&page),
        _ => render::text(&page, out.look()),
    })?;
    Ok(Exit::Done)
}

fn unknown(book: &why::Book<'_>, id: &str) -> Stop {
    Stop::usage(Fault::whole(
        "unknown-id",
        format!("nothing is called `{}`", shown(id)),
        book.nearest(id).map_or_else(
            || "`gillside knowledge list` names all there is".to_owned(),
            |near| format!("did you mean `{near}`?"),
        ),
    ))
}

fn proof(args: &WhyArgs, context: &Context, book: &why::Book<'_>) -> Result<Vec<Block>, Stop> {
    let knowledge = &context.knowledge;
    let (cause, finding) = (knowledge.cause(&args.id), knowledge.finding(&args.id));
    if cause.is_none() && finding.is_none() {
        return Err(match book.explain(&args.id) {
            None => unknown(book, &args.id),
            Some(_) => Stop::usage(Fault::whole(
                "no-proof",
                format!(
                    "`{}` is neither a cause nor a finding, so no log proves it",
                    args.id
                ),
                "leave out --log to read what it is",
            )),
        });
    }
    let as_of = match &args.as_of {
        Some(text) => Some(context.time("--as-of", text)?),
        None => None,
    };
    let log = review::read(&args.logs, false, context, as_of)?;
    let engine = review::taken_in(context, &log, as_of);
    let moment = engine.memory().now();
    let assessor = Assessor::new(knowledge, &context.site, Occasion::Review);
    let mut page = Vec::new();
    if let Some(id) = cause {
        let proof = assessor.prove_cause(&engine, id);
        page.extend(why::cause_proof(book, &proof, &log.places, moment));
    }
    if let Some(id) = finding {
        let proof = assessor.prove_finding(&engine, id);
        page.extend(why::finding_proof(book, id, &proof, &log.places, moment));
    }
    Ok(page)
}
