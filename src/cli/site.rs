//! `gillside site`: makes a site file step by step, and checks one.
use clap::Args;
use super::Exit;
use super::args::Common;
use super::output::Output;
use super::stop::Stop;
/// x
#[derive(Debug, Args)]
pub(super) struct SiteArgs {}
/// x
pub(super) fn run(_: &SiteArgs, _: &Common, _: &mut Output) -> Result<Exit, Stop> { Ok(Exit::Done) }
