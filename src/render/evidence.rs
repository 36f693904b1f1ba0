//! One line of a balance sheet in words.

use super::{Report, units, when};
use crate::assessment::span;
use crate::diagnosis::Piece;
use crate::engine::Saw;
use crate::knowledge::{Evidence, Knowledge};
use crate::site::Site;
use crate::vocabulary::ReadingId;

/// What evidence is put into words with.
#[derive(Debug, Clone, Copy)]
pub(super) struct Words<'a> {
    pub knowledge: &'a Knowledge,
    pub site: &'a Site,
    pub places: &'a [String],
    /// The moment the page is about, unix seconds.
    pub moment: i64,
}

impl<'a> Words<'a> {
    /// The words of a report.
    pub fn of(report: &Report<'a>) -> Self {
        Self {
            knowledge: report.knowledge,
            site: report.site,
            places: &report.log.places,
            moment: report.assessment.as_of,
        }
    }
}

/// A value read no longer ago than this needs no time.
const FRESH: i64 = 3600;

impl Words<'_> {
    /// A piece of evidence: what it is, and what was seen of it.
    pub fn piece(&self, piece: &Piece) -> String {
        let seen = piece
            .saw
            .as_ref()
            .and_then(|(reading, saw)| self.saw(*reading, saw, &piece.clause));
        let clause = match (piece.absent, piece.evidence) {
            (false, _) => piece.clause.clone(),
            (true, Some(Evidence::Sign(_))) => format!("looked for and not so: {}", piece.clause),
            (true, None) if self.is_event(&piece.clause) => format!("not noted: {}", piece.clause),
            (true, _) => format!("not so: {}", piece.clause),
        };
        match seen {
            Some(seen) => format!("{clause} ({seen})"),
            None => clause,
        }
    }

    fn is_event(&self, clause: &str) -> bool {
        self.knowledge
            .vocabulary
            .events
            .iter()
            .any(|e| e.name == clause)
    }

    /// A time as the site's clocks show it.
    pub fn time(&self, time: i64) -> String {
        when::short(time, &self.site.timezone)
    }

    /// What was seen of a reading; `beside` is the clause it stands behind, which need not be said again.
    pub fn saw(&self, id: ReadingId, saw: &Saw, beside: &str) -> Option<String> {
        let reading = &self.knowledge.vocabulary[id];
        let system = self.site.units;
        let (what, place) = match saw {
            Saw::Nothing => return None,
            Saw::Value {
                value,
                time,
                place,
                below,
            } => {
                let shown = if *below { value * 2.0 } else { *value };
                let sign = if *below { "<" } else { "" };
                let age = self.moment.saturating_sub(*time);
                let when = if age > FRESH {
                    format!(", {} ago", span(age))
                } else {
                    String::new()
                };
                (
                    format!("{sign}{}{when}", units::amount(reading, shown, system)),
                    *place,
                )
            }
            Saw::Moved {
                early,
                late,
                span: over,
                place,
            } => (
                format!(
                    "from about {} in {}",
                    units::from_to(reading, *early, *late, system),
                    span(*over)
                ),
                *place,
            ),
            Saw::Against {
                value,
                usual,
                place,
            } => (
                format!(
                    "{}, usually {}",
                    units::amount(reading, *value, system),
                    units::amount(reading, *usual, system)
                ),
                *place,
            ),
            Saw::At(time) => (when::short(*time, &self.site.timezone), 0),
        };
        let named = if beside.contains(&reading.name) {
            String::new()
        } else {
            format!("{} ", reading.name)
        };
        let place = place
            .checked_sub(1)
            .filter(|_| reading.local)
            .and_then(|p| self.places.get(usize::from(p)))
            .map_or_else(String::new, |p| format!(", {}", crate::fault::shown(p)));
        Some(format!("{named}{what}{place}"))
    }
}
