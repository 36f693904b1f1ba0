//! One input of a calculation: its name, unit, range, and what stands in for it when it is not given.

use super::site_values::SiteKey;
use crate::water::range::Range;
use crate::water::units::Unit;

/// One input of a calculation.
#[derive(Debug, Clone, Copy)]
pub struct Key {
    /// Its name, with underscores.
    pub name: &'static str,
    /// What it is, in a few words.
    pub help: &'static str,
    /// A number or one of some words.
    pub kind: Kind,
    /// What stands in for it when it is not given.
    pub fallback: Fallback,
    /// The site's number that fills it, before the fallback.
    pub site: Option<SiteKey>,
    /// Other names it may be given by.
    pub also: &'static [Also],
    /// Keys that say the same in another way: one of them given keeps this one empty, and both given is a mistake.
    pub rivals: &'static [&'static str],
}

/// What may be given for a key.
#[derive(Debug, Clone, Copy)]
pub enum Kind {
    /// A number, in the first of these units unless it carries another.
    Number {
        /// The units it takes, its own first.
        units: &'static [Unit],
        /// The values the calculation holds for.
        range: Range,
    },
    /// One of some words.
    Word(&'static [&'static str]),
}

/// What stands in for a key that nobody gave.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Fallback {
    /// Nothing: it has to be given.
    Required,
    /// Nothing: the calculation does without.
    Without,
    /// This number.
    Number(f64),
    /// This word.
    Word(&'static str),
}

/// Another name of a key.
#[derive(Debug, Clone, Copy)]
pub struct Also {
    /// The name, with underscores.
    pub name: &'static str,
    /// Its units, its own first.
    pub units: &'static [Unit],
    /// How many of the key's own units one of its own units is.
    pub scale: f64,
}

impl Key {
    /// A number that has to be given.
    pub const fn number(
        name: &'static str,
        units: &'static [Unit],
        range: Range,
        help: &'static str,
    ) -> Self {
        Self {
            name,
            help,
            kind: Kind::Number {
                units,
                range: range.named(name),
            },
            fallback: Fallback::Required,
            site: None,
            also: &[],
            rivals: &[],
        }
    }

    /// One of some words that has to be given.
    pub const fn word(
        name: &'static str,
        words: &'static [&'static str],
        help: &'static str,
    ) -> Self {
        Self {
            name,
            help,
            kind: Kind::Word(words),
            fallback: Fallback::Required,
            site: None,
            also: &[],
            rivals: &[],
        }
    }

    /// Taken as this number when not given.
    #[must_use]
    pub const fn or(self, number: f64) -> Self {
        Self {
            fallback: Fallback::Number(number),
            ..self
        }
    }

    /// Taken as this word when not given.
    #[must_use]
    pub const fn or_word(self, word: &'static str) -> Self {
        Self {
            fallback: Fallback::Word(word),
            ..self
        }
    }

    /// Done without when not given.
    #[must_use]
    pub const fn optional(self) -> Self {
        Self {
            fallback: Fallback::Without,
            ..self
        }
    }

    /// Filled from the site when not given.
    #[must_use]
    pub const fn site(self, key: SiteKey) -> Self {
        Self {
            site: Some(key),
            ..self
        }
    }

    /// May be given by other names.
    #[must_use]
    pub const fn also(self, also: &'static [Also]) -> Self {
        Self { also, ..self }
    }

    /// Says the same as these keys.
    #[must_use]
    pub const fn rivals(self, rivals: &'static [&'static str]) -> Self {
        Self { rivals, ..self }
    }

    /// Whether somebody or the site has to give it.
    pub fn required(&self) -> bool {
        self.fallback == Fallback::Required
    }

    /// Whether it answers to this name, spelled with underscores.
    pub fn answers_to(&self, name: &str) -> bool {
        self.name == name || self.also.iter().any(|a| a.name == name)
    }

    /// Its own unit; empty for a word.
    pub fn unit(&self) -> &'static str {
        match self.kind {
            Kind::Number { units, .. } => units.first().map_or("", |u| u.name),
            Kind::Word(_) => "",
        }
    }

    /// What may be given, for people: "C, 0 to 40", or the words.
    pub fn takes(&self) -> String {
        match self.kind {
            Kind::Number { units, range } => {
                let plain = Range { unit: "", ..range };
                let unit = match self.unit() {
                    "" => String::new(),
                    unit => format!("{unit}, "),
                };
                let others: Vec<_> = units.iter().skip(1).map(|u| u.name).collect();
                if others.is_empty() {
                    format!("{unit}{plain}")
                } else {
                    format!("{unit}{plain} (or in {})", others.join(", "))
                }
            }
            Kind::Word(words) => words.join(", "),
        }
    }
}
