//! The page of a diagnosis, as blocks: what is said, in which order. `text` and `markdown` write the blocks down.
//!
//! The order is for a tired person at five in the morning: the verdict, what to do first, why, then the rest.

mod first;
mod log;
mod made;
mod reasons;
mod steps;

use super::Report;
use super::block::Block;
use crate::diagnosis::Verdict;

/// The page of a diagnosis.
pub fn diagnosis(report: &Report<'_>) -> Vec<Block> {
    let a = report.assessment;
    let mut page = vec![first::title(report)];
    let said = first::block(report, &mut page);
    first::about(report, &mut page);
    if a.verdict > Verdict::Steady {
        reasons::block(report, &mut page);
        steps::block(report, &said.steps, &mut page);
        if !said.missing {
            reasons::missing(report, &mut page);
        }
        list(
            &mut page,
            "Leave alone",
            a.avoid.iter().map(|w| w.text.clone()),
        );
        steps::calls(report, &mut page);
    }
    list(&mut page, "If nothing is done", made::projections(report));
    list(
        &mut page,
        "About the site file",
        a.site_notes.iter().cloned(),
    );
    list(&mut page, "Changed for this farm", made::overrides(report));
    list(
        &mut page,
        "Cautions",
        a.cautions.iter().map(|(_, text)| text.clone()),
    );
    log::block(report, &mut page);
    made::block(report, &mut page);
    page
}

/// A heading with bullets, where there are any.
fn list(page: &mut Vec<Block>, heading: &str, items: impl IntoIterator<Item = String>) {
    let items: Vec<Block> = items.into_iter().map(Block::Bullet).collect();
    if !items.is_empty() {
        page.push(Block::Heading(heading.to_owned()));
        page.extend(items);
    }
}

/// The verdict, and what is to be done first: all of first aid, else one step.
pub(super) fn first_lines(report: &Report<'_>) -> Vec<Block> {
    let mut page = vec![first::title(report)];
    if report.assessment.verdict <= Verdict::Watch {
        return page;
    }
    let mut block = Vec::new();
    first::block(report, &mut block);
    if report.assessment.first_aid.is_empty() {
        // The heading, the first step, and what to look at before it.
        let second = block
            .iter()
            .position(|b| matches!(b, Block::Numbered(2, _)));
        block.truncate(second.unwrap_or(block.len()));
    }
    page.extend(block);
    page
}
