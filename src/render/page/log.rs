//! What of the log was used and what was not.

use crate::history::log::Problem;
use crate::render::Report;
use crate::render::block::Block;

/// So many problems are shown word for word.
const SHOWN: usize = 5;

/// The counts, then the first problems.
pub(super) fn block(report: &Report<'_>, page: &mut Vec<Block>) {
    let log = report.log;
    page.push(Block::Heading("The log".to_owned()));
    page.push(Block::Para(format!(
        "{} of {} read and used, {} refused{}.",
        log.rows_used,
        rows(log.rows_read),
        log.rows_refused,
        match log.corrected.len() {
            0 => String::new(),
            corrected => format!(", {corrected} corrected by later ones"),
        }
    )));
    for problem in log.problems.iter().take(SHOWN) {
        page.push(Block::Bullet(said(problem, log.files.len() > 1)));
    }
    let left = log.problem_count.saturating_sub(SHOWN);
    if left > 0 {
        page.push(Block::Para(format!(
            "{left} more of the kind; --format json lists up to 100."
        )));
    }
}

fn rows(count: usize) -> String {
    format!("{count} row{}", if count == 1 { "" } else { "s" })
}

fn said(problem: &Problem, many_files: bool) -> String {
    let file = if many_files {
        format!("{}, ", problem.file)
    } else {
        String::new()
    };
    let column = problem
        .column
        .as_ref()
        .map_or_else(String::new, |c| format!(", column `{c}`"));
    format!(
        "{file}line {}{column}: {}; {}",
        problem.line, problem.reason, problem.cure
    )
}
