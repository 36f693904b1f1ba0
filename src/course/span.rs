//! How long something is, in words.

/// A span of time in a word or two, rounded.
pub fn span(seconds: i64) -> String {
    let (amount, unit) = match seconds {
        s if s < 90 * 60 => ((s + 30) / 60, "minute"),
        s if s < 48 * 3600 => ((s + 1800) / 3600, "hour"),
        s if s < 21 * 86_400 => ((s + 43_200) / 86_400, "day"),
        s => ((s + 302_400) / 604_800, "week"),
    };
    format!("{amount} {unit}{}", if amount == 1 { "" } else { "s" })
}
