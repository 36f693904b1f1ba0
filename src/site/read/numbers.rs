//! Numbers with a range.

use crate::decode::Section;

fn checked(
    section: &mut Section<'_>,
    key: &str,
    good: impl Fn(f64) -> bool,
    range: &str,
) -> Option<f64> {
    let node = section.node(key)?;
    let value = node.number()?;
    if good(value) {
        return Some(value);
    }
    node.fault(
        "out-of-range",
        format!("`{key}` is {value}, but it is {range}"),
        "correct the number, or take the key out if it is not known",
    );
    None
}

/// A number from `low` to `high`.
pub(super) fn within(section: &mut Section<'_>, key: &str, low: f64, high: f64) -> Option<f64> {
    let range = format!("a number from {low} to {high}");
    checked(section, key, |v| (low..=high).contains(&v), &range)
}

/// A number above zero.
pub(super) fn above_zero(section: &mut Section<'_>, key: &str) -> Option<f64> {
    checked(section, key, |v| v > 0.0, "always above 0")
}

/// A number that is not negative.
pub(super) fn not_negative(section: &mut Section<'_>, key: &str) -> Option<f64> {
    checked(section, key, |v| v >= 0.0, "never negative")
}
