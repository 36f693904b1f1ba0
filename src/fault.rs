//! One fault in something a person wrote: where it is, what is wrong, what to do.

use std::fmt;
use std::sync::OnceLock;

use serde::{Deserialize, Serialize};

/// A text with a name: a file, standard input, or an embedded file of the rule base.
#[derive(Debug, Clone)]
pub struct Source {
    /// The name people know it by, usually a path.
    pub name: String,
    /// The whole text.
    pub text: String,
    /// Where each line begins, counted when a place is first asked for.
    lines: OnceLock<Vec<usize>>,
}

impl Source {
    /// A named text.
    pub fn new(name: impl Into<String>, text: impl Into<String>) -> Self {
        Self {
            name: name.into(),
            text: text.into(),
            lines: OnceLock::new(),
        }
    }

    fn line_starts(&self) -> &[usize] {
        self.lines.get_or_init(|| {
            let ends = self.text.match_indices('\n').map(|(at, _)| at + 1);
            std::iter::once(0).chain(ends).collect()
        })
    }

    /// A line, from 1, without its end.
    fn line(&self, number: usize) -> &str {
        let starts = self.line_starts();
        let start = number.checked_sub(1).and_then(|i| starts.get(i));
        let rest = start
            .and_then(|start| self.text.get(*start..))
            .unwrap_or("");
        rest.lines().next().unwrap_or("")
    }

    /// Line and column (both from 1, column in characters) of a byte offset; an offset past the end is the end.
    pub fn position(&self, offset: usize) -> (usize, usize) {
        let mut end = offset.min(self.text.len());
        while !self.text.is_char_boundary(end) {
            end -= 1;
        }
        let starts = self.line_starts();
        let line = starts.partition_point(|start| *start <= end);
        let start = line
            .checked_sub(1)
            .and_then(|i| starts.get(i))
            .copied()
            .unwrap_or(0);
        (line, self.text[start..end].chars().count() + 1)
    }
}

/// Where a fault is.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Place {
    /// The name of the text.
    pub file: String,
    /// Line, from 1.
    pub line: usize,
    /// Column in characters, from 1.
    pub column: usize,
    /// The line as it stands there.
    pub excerpt: String,
    /// How many characters of the line are meant.
    pub width: usize,
}

/// A fault: place, a stable kebab-case code, what is wrong, what to do about it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Fault {
    /// Where; `None` when the fault is about a whole collection of files.
    pub place: Option<Place>,
    /// A stable id of the kind of fault, such as `unknown-key`.
    pub code: &'static str,
    /// What is wrong: lower case, names in backticks, no full stop.
    pub reason: String,
    /// What to do about it.
    pub cure: String,
}

impl Fault {
    /// A fault at a byte range of a source.
    pub fn at(
        source: &Source,
        span: std::ops::Range<usize>,
        code: &'static str,
        reason: impl Into<String>,
        cure: impl Into<String>,
    ) -> Self {
        let (line, column) = source.position(span.start);
        let excerpt = source.line(line).to_owned();
        let rest = excerpt.chars().count().saturating_sub(column - 1);
        let wanted = source
            .text
            .get(span)
            .map_or(1, |s| s.lines().next().unwrap_or("").chars().count());
        Self {
            place: Some(Place {
                file: source.name.clone(),
                line,
                column,
                excerpt,
                width: wanted.clamp(1, rest.max(1)),
            }),
            code,
            reason: reason.into(),
            cure: cure.into(),
        }
    }

    /// A fault about no single place.
    pub fn whole(code: &'static str, reason: impl Into<String>, cure: impl Into<String>) -> Self {
        Self {
            place: None,
            code,
            reason: reason.into(),
            cure: cure.into(),
        }
    }
}

impl fmt::Display for Fault {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if let Some(place) = &self.place {
            write!(f, "{}:{}:{}: ", place.file, place.line, place.column)?;
        }
        write!(f, "{}; {}", self.reason, self.cure)
    }
}

/// The nearest of the known words to a word that is not known, if one is near enough to be meant. Capitals, and which
/// of hyphen, underscore and space stands between words, don't make a difference.
pub fn nearest<'a>(word: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let plain = |text: &str| text.to_lowercase().replace(['_', ' '], "-");
    let word = plain(word);
    let likeness = |known: &str| {
        let known = plain(known);
        let alike = strsim::jaro_winkler(&word, &known);
        // The measure is hard on short words: two letters swapped or one added are near, too.
        let one_slip = strsim::osa_distance(&word, &known) <= 1 && word.len() > 1;
        if one_slip { alike.max(0.9) } else { alike }
    };
    known
        .into_iter()
        .map(|k| (likeness(k), k))
        .filter(|(score, _)| *score > 0.80)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, k)| k)
}

/// "did you mean `x`" when something is near, else the advice given.
pub fn did_you_mean<'a>(
    word: &str,
    known: impl IntoIterator<Item = &'a str>,
    otherwise: &str,
) -> String {
    match nearest(word, known) {
        Some(k) => format!("did you mean `{k}`?"),
        None => otherwise.to_owned(),
    }
}

/// A person's words as they may be printed inside a message: no control characters, and not too long.
pub fn shown(text: &str) -> String {
    const LONGEST: usize = 60;
    let mut out = String::new();
    for (i, c) in text.chars().enumerate() {
        if i == LONGEST {
            out.push('…');
            break;
        }
        if c.is_control() {
            out.extend(c.escape_default());
        } else {
            out.push(c);
        }
    }
    out
}

/// Why the system could not open or read something, in plain words.
pub fn plain_io(error: &std::io::Error) -> String {
    match error.kind() {
        std::io::ErrorKind::NotFound => "there is no such file".to_owned(),
        std::io::ErrorKind::PermissionDenied => "it may not be read by you".to_owned(),
        std::io::ErrorKind::IsADirectory => "it is a folder".to_owned(),
        _ => error.to_string(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn shown_words_are_safe_and_short() {
        assert_eq!(shown("a\u{1b}[2J\tb"), "a\\u{1b}[2J\\tb");
        assert_eq!(shown(&"x".repeat(100)).chars().count(), 61);
    }

    #[test]
    fn positions_count_characters() {
        let source = Source::new("a.toml", "x = 1\né = 2\n");
        assert_eq!(source.position(0), (1, 1));
        assert_eq!(source.position(8), (2, 2));
        assert_eq!(source.position(999), (3, 1));
    }

    #[test]
    fn nearest_needs_likeness() {
        assert_eq!(nearest("nitrit", ["nitrite", "nitrate"]), Some("nitrite"));
        assert_eq!(nearest("zebra", ["nitrite", "ph"]), None);
        assert_eq!(nearest("PH", ["nitrite", "ph"]), Some("ph"));
        assert_eq!(nearest("hp", ["nitrite", "ph"]), Some("ph"));
        assert_eq!(nearest("Volume L", ["volume_l"]), Some("volume_l"));
    }
}
