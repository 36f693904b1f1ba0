//! How often each finding holds on ordinary days, measured by running the findings over logs of farms with nothing wrong.

use super::Engine;
use crate::history::log::Row;
use crate::history::memory::DAY;
use crate::knowledge::FindingId;

/// What was measured of one finding or sign.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Measured {
    /// Moments (at most one a day and log) at which it was known; one known in part counts in part.
    pub known: f64,
    /// Sum of the degrees to which it surely held at those moments.
    pub held: f64,
}

impl Measured {
    /// Share of the moments at which it held.
    pub fn share(self) -> Option<f64> {
        (self.known > 0.0).then(|| self.held / self.known)
    }
}

/// Runs rows through an engine and adds what holds at the last row of each day to `counts`, one for each finding.
pub fn measure(engine: &mut Engine<'_>, rows: &[Row], counts: &mut [Measured]) {
    for (at, row) in rows.iter().enumerate() {
        engine.observe(row);
        let day = |time: i64| time.div_euclid(DAY);
        if rows
            .get(at + 1)
            .is_some_and(|next| day(next.time) == day(row.time))
        {
            continue;
        }
        for (index, count) in counts.iter_mut().enumerate() {
            let Ok(id) = u16::try_from(index) else {
                continue;
            };
            let degree = engine.finding(FindingId(id));
            count.known += degree.lo + 1.0 - degree.hi;
            count.held += degree.lo;
        }
    }
}
