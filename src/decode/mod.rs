//! TOML that people write, walked by hand: every fault has its place, all faults come in one pass, and a key that is
//! not known is a fault with the nearest one that is.

mod section;
mod value;

use std::cell::RefCell;
use std::ops::Range;

use toml::de::{DeTable, DeValue};

use crate::fault::{Fault, Source};

pub use section::Section;
pub use value::Node;

/// Collects faults while one source is walked.
#[derive(Debug)]
pub struct Reader<'s> {
    source: &'s Source,
    faults: RefCell<Vec<Fault>>,
}

impl<'s> Reader<'s> {
    /// A reader of one source, with no faults yet.
    pub fn new(source: &'s Source) -> Self {
        Self {
            source,
            faults: RefCell::new(Vec::new()),
        }
    }

    /// Parses the source; a text that is not TOML leaves faults and what could be recovered.
    pub fn parse(&self) -> toml::Spanned<DeTable<'s>> {
        let (table, errors) = DeTable::parse_recoverable(&self.source.text);
        for error in errors {
            let span = error.span().unwrap_or(0..0);
            let reason = error.message().replace('\n', ", ");
            self.fault(span, "not-toml", reason, "correct the TOML syntax here");
        }
        table
    }

    /// The whole parsed source as a section.
    pub fn root<'t>(&'t self, table: &'t toml::Spanned<DeTable<'s>>) -> Section<'t> {
        Section::new(
            self.source,
            &self.faults,
            table.get_ref(),
            0..1,
            String::new(),
        )
    }

    /// Notes a fault at a byte range.
    pub fn fault(
        &self,
        span: Range<usize>,
        code: &'static str,
        reason: impl Into<String>,
        cure: impl Into<String>,
    ) {
        self.faults
            .borrow_mut()
            .push(Fault::at(self.source, span, code, reason, cure));
    }

    /// The faults found, in the order of their places.
    pub fn into_faults(self) -> Vec<Fault> {
        let mut faults = self.faults.into_inner();
        faults.sort_by_key(|f| f.place.as_ref().map(|p| (p.line, p.column)));
        faults
    }
}

/// Reads one source with `walk`; what it made is returned with all faults found on the way.
pub fn read<T>(source: &Source, walk: impl FnOnce(&mut Section<'_>) -> T) -> (T, Vec<Fault>) {
    let reader = Reader::new(source);
    let table = reader.parse();
    let made = {
        let mut root = reader.root(&table);
        let made = walk(&mut root);
        root.finish();
        made
    };
    drop(table);
    (made, reader.into_faults())
}

/// A borrowed TOML value.
pub type Value<'t> = DeValue<'t>;

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_fault_has_its_place() {
        let source = Source::new(
            "a.toml",
            "name = 3\nphh = 7.0\n[inner]\nx = \"y\"\nbad = nan\n",
        );
        let ((), faults) = read(&source, |root| {
            root.text("name");
            root.number("ph");
            if let Some(mut inner) = root.section("inner") {
                inner.text("x");
                inner.number("bad");
                inner.finish();
            }
        });
        let shown: Vec<String> = faults.iter().map(ToString::to_string).collect();
        assert_eq!(
            shown,
            [
                "a.toml:1:8: `name` is a whole number, not a text; write a text here",
                "a.toml:2:1: unknown key `phh`; did you mean `ph`?",
                "a.toml:5:7: `bad` is not a finite number; write an ordinary number",
            ]
        );
    }

    #[test]
    fn a_broken_file_says_where() {
        let source = Source::new("b.toml", "a = \n");
        let ((), faults) = read(&source, |root| {
            root.text("a");
        });
        assert!(faults.iter().any(|f| f.code == "not-toml"));
    }
}
