//! Texts, and words out of a closed set.

use crate::decode::{Node, Section};
use crate::fault::{did_you_mean, shown};

/// A text with something in it and no control characters.
pub(super) fn words(section: &mut Section<'_>, key: &str) -> Option<String> {
    words_of(&section.node(key)?)
}

/// The same, where the text must be there.
pub(super) fn required_words(section: &mut Section<'_>, key: &str) -> Option<String> {
    words_of(&section.required(key)?)
}

/// The same for a value.
pub(super) fn words_of(node: &Node<'_>) -> Option<String> {
    let text = node.text()?;
    let trimmed = text.trim();
    if trimmed.is_empty() {
        node.fault(
            "empty-text",
            format!("`{}` is empty", node.name()),
            "write some words, or take the key out",
        );
        return None;
    }
    if trimmed.chars().any(char::is_control) {
        node.fault(
            "control-character",
            format!(
                "`{}` holds a control character: `{}`",
                node.name(),
                shown(trimmed)
            ),
            "write plain text on one line",
        );
        return None;
    }
    Some(trimmed.to_owned())
}

/// A word out of a set.
pub(super) fn one_of<T>(
    section: &mut Section<'_>,
    key: &str,
    known: &[&str],
    of: impl Fn(&str) -> Option<T>,
) -> Option<T> {
    word_of(&section.node(key)?, known, of)
}

/// The same for a value.
pub(super) fn word_of<T>(
    node: &Node<'_>,
    known: &[&str],
    of: impl Fn(&str) -> Option<T>,
) -> Option<T> {
    let word = node.text()?;
    let value = of(&word);
    if value.is_none() {
        let all = format!("it is one of {}", known.join(", "));
        let near = did_you_mean(&word, known.iter().copied(), "");
        node.fault(
            "unknown-word",
            format!("`{}` is not a word for `{}`", shown(&word), node.name()),
            if near.is_empty() {
                all
            } else {
                format!("{near} {all}")
            },
        );
    }
    value
}
