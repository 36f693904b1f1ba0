//! The checklist of a shift: text and Markdown (as blocks), JSON, a form to fill in, and a page to print; and the card for
//! the wall.

pub mod card;
mod form;
mod html;
mod json;
mod words;

use std::path::Path;

use super::block::Block;
use super::when;
use crate::assessment::Assessment;
use crate::knowledge::Knowledge;
use crate::shift::{Checklist, Item};
use crate::site::Site;

pub use form::form;
pub use html::html;
pub use json::json;
use words::Words;

/// What a checklist is written from.
#[derive(Debug, Clone, Copy)]
pub struct Sheet<'a> {
    /// The words.
    pub knowledge: &'a Knowledge,
    /// The farm.
    pub site: &'a Site,
    /// The site file, where there is one.
    pub site_file: Option<&'a Path>,
    /// The checklist.
    pub list: &'a Checklist,
    /// The diagnosis of now, where there is a log.
    pub assessment: Option<&'a Assessment>,
    /// What is taken for now, unix seconds.
    pub now: i64,
}

impl Sheet<'_> {
    /// Name of the farm, shift and hours.
    fn title(&self) -> String {
        let name = self
            .site
            .name
            .as_deref()
            .unwrap_or("A farm without a site file");
        format!("{name}: {}", self.hours())
    }

    /// Shift and hours.
    fn hours(&self) -> String {
        let zone = &self.site.timezone;
        let window = &self.list.window;
        let (from, to) = (when::long(window.start, zone), when::hour(window.end, zone));
        match &window.name {
            Some(name) => format!("{name} shift, {from} to {to}"),
            None => format!("the day from {from}"),
        }
    }

    /// How the farm stands, in a line.
    fn standing(&self) -> Option<String> {
        let a = self.assessment?;
        let leading = match (&a.leading_family, a.causes.first()) {
            _ if a.verdict <= crate::diagnosis::Verdict::Watch => None,
            (Some(family), _) => Some(format!("{} {}", family.likely, family.name)),
            (None, Some(cause)) => Some(format!("{}: {}", cause.likely, cause.name)),
            (None, None) => None,
        };
        let verdict = a.verdict.word().replace('-', " ").to_uppercase();
        Some(match leading {
            Some(leading) => format!("As of {}: {verdict}; {leading}.", self.at(a.as_of)),
            None => format!("As of {}: {verdict}.", self.at(a.as_of)),
        })
    }

    fn at(&self, time: i64) -> String {
        when::short(time, &self.site.timezone)
    }
}

/// The checklist for a person at a terminal, or for a document. Nothing is left out.
pub fn page(sheet: &Sheet<'_>) -> Vec<Block> {
    let words = Words::of(sheet);
    let mut page = vec![Block::Head(sheet.title())];
    page.extend(sheet.standing().map(Block::Para));
    for (id, title) in &sheet.list.open {
        page.push(Block::Para(format!("Open incident: {title} ({id}).")));
    }
    for stretch in &sheet.list.stretches {
        page.push(Block::Heading(stretch.place.clone()));
        for item in &stretch.items {
            page.push(Block::Bullet(format!("[ ] {}", words.item(item))));
            page.extend(lines(item, &words).into_iter().map(Block::Under));
        }
    }
    if sheet.list.stretches.is_empty() {
        page.push(Block::Para("Nothing is due.".to_owned()));
    }
    page.push(Block::Heading("Who to call".to_owned()));
    let phones = sheet.site.phone.iter();
    page.extend(phones.map(|p| Block::Bullet(format!("{}: {}", p.who, p.number))));
    if sheet.site.phone.is_empty() {
        page.push(Block::Para(NO_PHONES.to_owned()));
    }
    page.push(Block::Heading("Sign-off".to_owned()));
    page.push(Block::Para(SIGN.to_owned()));
    page.push(Block::Para(RECORD.to_owned()));
    page
}

/// Where the site file has no phone list.
const NO_PHONES: &str = "No numbers yet: add `[[phone]]` with `who` and `number` to the site file (fish vet, electrician, extension service, emergency).";
/// The line to sign on.
const SIGN: &str = "Done by ____________________  at ________  Handed over to ____________________";
/// How what is written on it gets into the log.
const RECORD: &str = "Put it into the log with `gillside record`, or fill in `gillside shift --form` and give it with `gillside record --form FILE`.";

/// What stands under an item: blanks, conditions.
fn lines(item: &Item, words: &Words<'_>) -> Vec<String> {
    let blanks = item.blanks.iter().map(|b| words.blank(b));
    blanks.chain(words.conditions(item)).collect()
}
