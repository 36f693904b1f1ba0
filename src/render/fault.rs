//! Faults for a person: where, the line with what is meant underlined, the reason, the cure.

use std::fmt::Write as _;

use console::Style;

use super::safe::safe;
use crate::fault::Fault;

/// All faults of one run; empty for none.
pub fn faults(faults: &[Fault], color: bool) -> String {
    let mut text = String::new();
    for fault in faults {
        one(&mut text, fault, color);
    }
    text
}

fn one(text: &mut String, fault: &Fault, color: bool) {
    let style = |s: Style| s.force_styling(color);
    let red = style(Style::new().red().bold());
    let blue = style(Style::new().blue());
    // Writing into a string can't fail.
    let _ = writeln!(
        text,
        "{}: {} [{}]",
        red.apply_to("error"),
        safe(&fault.reason),
        fault.code
    );
    if let Some(place) = &fault.place {
        let file = safe(&place.file);
        let _ = writeln!(
            text,
            "  {} {file}:{}:{}",
            blue.apply_to("at"),
            place.line,
            place.column
        );
        let (line, from, width) = window(&place.excerpt, place.column, place.width);
        if !line.is_empty() {
            let number = place.line.to_string();
            let pad = " ".repeat(number.len());
            let bar = blue.apply_to("|");
            let _ = writeln!(text, "  {} {bar} {line}", blue.apply_to(&number));
            let carets = "^".repeat(width);
            let _ = writeln!(
                text,
                "  {pad} {bar} {}{}",
                " ".repeat(from),
                red.apply_to(carets)
            );
        }
    }
    let _ = writeln!(text, "  {} {}", blue.apply_to("fix:"), safe(&fault.cure));
}

/// Characters of a line that are shown around what is meant.
const SHOWN: usize = 76;

/// The part of a line around what is meant, safe for a terminal, with how far in and how wide that is there.
fn window(line: &str, column: usize, width: usize) -> (String, usize, usize) {
    let at = column.saturating_sub(1);
    let skip = if at + width > SHOWN {
        at.saturating_sub(SHOWN / 3)
    } else {
        0
    };
    let mut out = if skip > 0 {
        "…".to_owned()
    } else {
        String::new()
    };
    let mut from = out.chars().count() + at.saturating_sub(skip);
    let mut end = out.chars().count();
    for c in line.chars().skip(skip).take(SHOWN) {
        // One character stays one column, so that the carets stand under what they mean.
        out.push(if c.is_control() { ' ' } else { c });
        end += 1;
    }
    if line.chars().count() > skip + SHOWN {
        out.push('…');
    }
    from = from.min(end);
    let width = width.clamp(1, end.saturating_sub(from).max(1));
    (out, from, width)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fault::Source;

    fn shown(text: &str, span: std::ops::Range<usize>) -> String {
        let source = Source::new("a.toml", text);
        faults(
            &[Fault::at(&source, span, "bad", "it is bad", "mend it")],
            false,
        )
    }

    #[test]
    fn the_carets_stand_under_what_is_meant() {
        let text = "x = 1\ny = \"é\" # ä\n";
        assert_eq!(
            shown(text, 10..14),
            "error: it is bad [bad]\n  at a.toml:2:5\n  2 | y = \"é\" # ä\n    |     ^^^\n  fix: mend it\n"
        );
    }

    #[test]
    fn a_long_line_is_cut_around_what_is_meant() {
        let text = format!("{}HERE{}", "a".repeat(500), "b".repeat(500));
        let out = shown(&text, 500..504);
        let lines: Vec<&str> = out.lines().collect();
        let at = lines[2].find("HERE").map(|i| lines[2][..i].chars().count());
        assert_eq!(at, lines[3].find('^'));
        assert!(lines.iter().all(|l| l.chars().count() < 100), "{out}");
    }

    #[test]
    fn nothing_in_a_fault_moves_the_cursor() {
        assert!(!shown("x\u{1b}[2J = 1\n", 0..4).contains('\u{1b}'));
        let fault = Fault::whole("bad", "a file called \u{1b}[2J", "mend \u{1b}it");
        assert!(!faults(&[fault], false).contains('\u{1b}'));
    }
}
