//! The card for the wall.

use std::fmt::Write as _;

use serde_json::json;

use crate::render::block::Block;
use crate::render::html::{document, escaped};
use crate::render::units;
use crate::shift::{Card, Stop};
use crate::site::{Phone, Site};
use crate::vocabulary::Vocabulary;

/// The heading of something that stops.
fn heading(stop: &Stop) -> &'static str {
    match stop.what {
        "air" => "The air stops",
        "pump" => "The pump stops",
        "heat" => "The heat stops",
        _ => "The power stops",
    }
}

/// How long there is.
fn time(stop: &Stop) -> Option<String> {
    let minutes = stop.minutes?;
    Some(match minutes {
        0..=1 => "at once".to_owned(),
        m if m < 120 => format!("{m} minutes or less"),
        m => format!("{} hours or less", m / 60),
    })
}

fn title(site: &Site) -> String {
    let name = site.name.as_deref().unwrap_or("This farm");
    format!("{name}: when something stops")
}

fn how(card: &Card, site: &Site, words: &Vocabulary) -> String {
    if !card.lacks.is_empty() {
        return format!(
            "How long there is can't be reckoned: the site file lacks {}. Take it that you have minutes.",
            card.lacks.join(", ")
        );
    }
    let warm = card.temperature.zip(words.reading("temperature"));
    let warm = warm.map_or_else(String::new, |(t, id)| {
        format!(" at {}", units::amount(&words[id], t, site.units))
    });
    format!(
        "Minutes until fish are short of oxygen{warm}, halved because bacteria breathe too; with more fish, warmer water or just after feeding there is less. Where the pump or the heat stops there may be hours, but look at once."
    )
}

fn phones(site: &Site) -> impl Iterator<Item = &Phone> {
    site.phone.iter()
}

/// For a terminal or a document.
pub fn page(card: &Card, site: &Site, words: &Vocabulary) -> Vec<Block> {
    let mut page = vec![Block::Head(title(site))];
    page.extend(card.people.clone().map(Block::Para));
    for stop in &card.stops {
        let time = time(stop).map_or_else(String::new, |t| format!(": you have {t}"));
        page.push(Block::Heading(format!("{}{time}", heading(stop))));
        for (number, text) in (1..).zip(&stop.texts) {
            page.push(Block::Numbered(number, text.clone()));
        }
    }
    page.push(Block::Para(how(card, site, words)));
    page.push(Block::Heading("Call".to_owned()));
    page.extend(phones(site).map(|p| Block::Bullet(format!("{}: {}", p.who, p.number))));
    if site.phone.is_empty() {
        page.push(Block::Para(super::NO_PHONES.to_owned()));
    }
    page.push(Block::Heading("Mind".to_owned()));
    page.extend(card.cautions.iter().cloned().map(Block::Bullet));
    page
}

/// For the wall.
pub fn html(card: &Card, site: &Site, words: &Vocabulary) -> String {
    let mut body = String::new();
    // Writing into a string can't fail.
    let _ = write!(body, "<h1>{}</h1>", escaped(&title(site)));
    if let Some(people) = &card.people {
        let _ = write!(body, "<p class=\"people\">{}</p>", escaped(people));
    }
    for stop in &card.stops {
        let time = time(stop).map_or_else(String::new, |t| {
            format!("<span class=\"time\">{}</span>", escaped(&t))
        });
        let _ = write!(body, "<h2>{time}{}</h2><ol>", heading(stop));
        for text in &stop.texts {
            let _ = write!(body, "<li style=\"padding:0\">{}</li>", escaped(text));
        }
        body.push_str("</ol>");
    }
    let _ = write!(
        body,
        "<p style=\"margin-top:4mm\">{}</p><h2>Call</h2>",
        escaped(&how(card, site, words))
    );
    for phone in phones(site) {
        let _ = write!(
            body,
            "<p>{}: <b>{}</b></p>",
            escaped(&phone.who),
            escaped(&phone.number)
        );
    }
    if site.phone.is_empty() {
        let _ = write!(body, "<p>{}</p>", escaped(super::NO_PHONES));
    }
    body.push_str("<h2>Mind</h2>");
    for caution in &card.cautions {
        let _ = write!(body, "<p>{}</p>", escaped(caution));
    }
    document(&title(site), "card", &body)
}

/// For a program.
pub fn json(card: &Card, site: &Site) -> String {
    let made = json!({
        "schema": 1,
        "site": site.name,
        "temperature": card.temperature,
        "lacks": card.lacks,
        "stops": card.stops.iter().map(|s| json!({
            "what": s.what, "minutes": s.minutes,
            "steps": s.steps.iter().zip(&s.texts).map(|(id, text)| json!({"id": id, "text": text})).collect::<Vec<_>>(),
        })).collect::<Vec<_>>(),
        "people": card.people,
        "phone": phones(site).map(|p| json!({"who": p.who, "number": p.number})).collect::<Vec<_>>(),
        "cautions": card.cautions,
    });
    format!("{made:#}\n")
}
