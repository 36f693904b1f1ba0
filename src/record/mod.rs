//! The `record` room: new rows into a log, so that nothing is lost and nothing is half-written.
//!
//! `given` is what a person says (`ph=6.4`), `form` a filled-in form, `cell` a number in the unit of its column, `sheet`
//! the text of a log with rows added, `safe` the one way a file is changed, `write` puts them together, and `change`
//! says how far a reading has moved since it was last read.

mod cell;
mod change;
mod form;
mod given;
mod lock;
mod moment;
mod safe;
mod sheet;
mod write;

pub use cell::usual_unit;
pub use change::{Change, changes};
pub use form::form;
pub use given::{Amount, Given, Telling, given};
pub use moment::clock_text;
pub use safe::{NotWritten, edit};
pub use write::{Target, Written, write};

/// How a note says which rounds were done: `done: air-round flow-round`.
const DONE: &str = "done:";

/// The ids of rounds that a note says were done, as far as they look like ids.
pub fn done_in(note: &str) -> impl Iterator<Item = &str> {
    note.split(';')
        .filter_map(|part| part.trim().strip_prefix(DONE))
        .flat_map(str::split_whitespace)
}

/// A note that says so.
fn done_note(done: &[String], note: Option<&str>) -> Option<String> {
    let marker = (!done.is_empty()).then(|| format!("{DONE} {}", done.join(" ")));
    match (marker, note) {
        (Some(marker), Some(note)) => Some(format!("{marker}; {note}")),
        (marker, note) => marker.or_else(|| note.map(str::to_owned)),
    }
}

#[cfg(test)]
mod tests {
    use super::{done_in, done_note};

    #[test]
    fn a_note_says_which_rounds_were_done() {
        let done = ["air-round".to_owned(), "flow-round".to_owned()];
        let note = done_note(&done, Some("two fish jumped; done by Rui"));
        assert_eq!(
            note.as_deref(),
            Some("done: air-round flow-round; two fish jumped; done by Rui")
        );
        let read: Vec<&str> = done_in(note.as_deref().unwrap_or_default()).collect();
        assert_eq!(read, ["air-round", "flow-round"]);
        assert_eq!(done_note(&[], None), None);
    }
}
