//! The checklist as one page to print, on A4 or Letter. What does not fit is counted on it, the least urgent left out first.

use std::fmt::Write as _;

use super::words::{Words, unit};
use super::{NO_PHONES, Sheet, lines};
use crate::render::html::{document, escaped};
use crate::shift::{Item, Kind};

/// Lines that fit in the two columns of the smaller of the two papers, head and foot taken off; and characters of a line.
/// Found by printing in a wide font: a narrower one leaves a little room. Where the reckoning is wrong nothing is lost: the
/// list runs on to a second page.
const LINES: usize = 2 * 58;
const WIDE: usize = 50;

/// The page.
pub fn html(sheet: &Sheet<'_>) -> String {
    let words = Words::of(sheet);
    let (kept, left) = fitting(sheet, &words);
    let mut body = String::new();
    // Writing into a string can't fail.
    let _ = write!(body, "<h1>{}</h1>", escaped(&sheet.title()));
    let mut head: Vec<String> = sheet.standing().into_iter().collect();
    head.extend(
        sheet
            .list
            .open
            .iter()
            .map(|(id, title)| format!("Open incident: {title} ({id}).")),
    );
    for line in head {
        let _ = write!(body, "<p class=\"lead\">{}</p>", escaped(&line));
    }
    body.push_str("<div class=\"list\">");
    for (at, stretch) in sheet.list.stretches.iter().enumerate() {
        let items: Vec<&Item> = stretch
            .items
            .iter()
            .enumerate()
            .filter(|(n, _)| kept.contains(&(at, *n)))
            .map(|(_, item)| item)
            .collect();
        if items.is_empty() {
            continue;
        }
        let _ = write!(body, "<h2>{}</h2><ul>", escaped(&stretch.place));
        for item in items {
            body.push_str(&one(item, &words, sheet));
        }
        body.push_str("</ul>");
    }
    body.push_str("</div>");
    if left > 0 {
        let _ = write!(
            body,
            "<p class=\"more\">{left} more, less urgent: see <code>gillside shift --format text</code></p>"
        );
    }
    body.push_str(&foot(sheet));
    document(&sheet.title(), "checklist", &body)
}

/// What fits: stretch and item of each, and how many don't.
fn fitting(sheet: &Sheet<'_>, words: &Words<'_>) -> (Vec<(usize, usize)>, usize) {
    let mut all: Vec<(u32, usize, usize, usize)> = Vec::new();
    for (at, stretch) in sheet.list.stretches.iter().enumerate() {
        for (n, item) in stretch.items.iter().enumerate() {
            all.push((item.rank, at, n, height(item, words)));
        }
    }
    all.sort_unstable();
    let calls = sheet.site.phone.len().div_ceil(3).max(1);
    let mut room = LINES.saturating_sub(2 * (calls + sheet.list.open.len() * 2));
    let mut kept = Vec::new();
    let mut headed: Vec<usize> = Vec::new();
    let mut full = false;
    for (_, at, n, lines) in &all {
        let head = if headed.contains(at) { 0 } else { 2 };
        if full || lines + head > room {
            // Nothing less urgent is put where something more urgent had no room.
            full = true;
            continue;
        }
        room -= lines + head;
        headed.push(*at);
        kept.push((*at, *n));
    }
    let left = all.len() - kept.len();
    (kept, left)
}

fn height(item: &Item, words: &Words<'_>) -> usize {
    let wrapped = |text: &str| text.chars().count().div_ceil(WIDE).max(1);
    let rest: usize = lines(item, words).iter().map(|l| wrapped(l)).sum();
    wrapped(&words.item(item)) + rest
}

fn one(item: &Item, words: &Words<'_>, sheet: &Sheet<'_>) -> String {
    let class = match item.kind {
        Kind::Check(..) | Kind::Plan(..) | Kind::Step(..) => " class=\"incident\"",
        Kind::Trend(_) | Kind::Tell(..) | Kind::Extra(_) => " class=\"extra\"",
        Kind::Round(_) => "",
    };
    let mut out = format!(
        "<li{class}><b class=\"box\"></b>{}",
        escaped(&words.item(item))
    );
    for blank in &item.blanks {
        let reading = &sheet.knowledge.vocabulary[blank.reading];
        let _ = write!(
            out,
            "<div class=\"blank\">{} <span class=\"line\"></span> {} <small>{}</small></div>",
            escaped(&reading.name),
            escaped(unit(blank)),
            escaped(&words.compare(blank))
        );
    }
    for line in words.conditions(item) {
        let _ = write!(
            out,
            "<div class=\"blank\"><small>{}</small></div>",
            escaped(&line)
        );
    }
    out.push_str("</li>");
    out
}

fn foot(sheet: &Sheet<'_>) -> String {
    let mut out = String::from("<div class=\"foot\"><p><b>Who to call:</b> ");
    let phones: Vec<String> = sheet
        .site
        .phone
        .iter()
        .map(|p| format!("{} <b>{}</b>", escaped(&p.who), escaped(&p.number)))
        .collect();
    out.push_str(&if phones.is_empty() {
        escaped(NO_PHONES)
    } else {
        phones.join(" &nbsp; ")
    });
    out.push_str("</p><p class=\"sign\">Done by <span></span> at <span class=\"short\"></span> Handed over to <span></span></p>");
    let digest: String = sheet.knowledge.digest.chars().take(12).collect();
    let _ = write!(
        out,
        "<p class=\"made\">gillside {}, rule base {digest}; made {}. Local codes, labels and people's safety come first.</p></div>",
        env!("CARGO_PKG_VERSION"),
        escaped(&sheet.at(sheet.now))
    );
    out
}
