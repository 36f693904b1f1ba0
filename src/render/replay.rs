//! One line of a replay.

use super::Report;
use super::when;
use crate::diagnosis::Verdict;
use crate::knowledge::CauseId;

/// One line: time, verdict, what leads.
pub fn line(report: &Report<'_>, leading: Option<CauseId>) -> String {
    let a = report.assessment;
    let leads = leading.map_or_else(
        || {
            if a.verdict == Verdict::Steady {
                "nothing wrong"
            } else {
                "nothing stands out"
            }
            .to_owned()
        },
        |cause| {
            let likely = a
                .causes
                .iter()
                .find(|c| c.cause == cause)
                .map(|c| c.likely.as_str());
            let cause = &report.knowledge[cause];
            format!(
                "{}: {} ({})",
                likely.unwrap_or("unlikely"),
                cause.name,
                cause.id
            )
        },
    );
    format!(
        "{}  {:<9}  {leads}\n",
        when::sortable(a.as_of, &report.site.timezone),
        a.verdict.word(),
    )
}
