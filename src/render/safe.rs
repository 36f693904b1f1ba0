//! Words from logs and files, made safe to print.

/// No control characters and nothing that turns the direction of writing: each becomes a visible mark. Line ends and
/// tabs become spaces.
pub(super) fn safe(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '\n' | '\r' | '\t' => out.push(' '),
            c if c.is_control() || is_invisible(c) => out.extend(c.escape_unicode()),
            c => out.push(c),
        }
    }
    out
}

/// Zero-width characters, and those that turn or isolate the direction of writing.
fn is_invisible(c: char) -> bool {
    matches!(c, '\u{200b}'..='\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2060}'..='\u{2069}' | '\u{feff}')
}

#[cfg(test)]
mod tests {
    use super::safe;

    #[test]
    fn nothing_moves_the_cursor() {
        assert_eq!(safe("a\u{1b}[2Jb\nc"), "a\\u{1b}[2Jb c");
        assert_eq!(safe("x\u{9b}31m\u{202e}y"), "x\\u{9b}31m\\u{202e}y");
        assert_eq!(safe("água 22 °C"), "água 22 °C");
    }
}
