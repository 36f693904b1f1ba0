//! Times in writing.

use jiff::Timestamp;
use jiff::tz::TimeZone;

/// RFC 3339 in UTC, for programs.
pub(super) fn utc(time: i64) -> String {
    stamp(time).map_or_else(String::new, |t| t.to_string())
}

/// As the site's clocks show it, without the year: `Mar 4, 07:30`.
pub(super) fn short(time: i64, zone: &TimeZone) -> String {
    local(time, zone, "%b %-d, %H:%M")
}

/// The hour alone: `07:30`.
pub(super) fn hour(time: i64, zone: &TimeZone) -> String {
    local(time, zone, "%H:%M")
}

/// The month and year: `March 2026`.
pub(super) fn month(time: i64, zone: &TimeZone) -> String {
    local(time, zone, "%B %Y")
}

/// The day alone: `Mar 4`.
pub(super) fn day(time: i64, zone: &TimeZone) -> String {
    local(time, zone, "%b %-d")
}

/// As the site's clocks show it: `Mar 4 2026, 07:30`.
pub(super) fn long(time: i64, zone: &TimeZone) -> String {
    local(time, zone, "%b %-d %Y, %H:%M")
}

/// As the site's clocks show it, in an order that sorts: `2026-03-04 07:30`.
pub(super) fn sortable(time: i64, zone: &TimeZone) -> String {
    local(time, zone, "%Y-%m-%d %H:%M")
}

fn local(time: i64, zone: &TimeZone, form: &str) -> String {
    stamp(time).map_or_else(
        || "at an unknown time".to_owned(),
        |t| zone.to_datetime(t).strftime(form).to_string(),
    )
}

fn stamp(time: i64) -> Option<Timestamp> {
    Timestamp::from_second(time).ok()
}
