//! One TOML value with its place.

use std::cell::RefCell;
use std::ops::Range;

use toml::de::DeValue;

use super::Section;
use crate::fault::{Fault, Source};

/// One value somewhere in a source, able to say what is wrong with it.
#[derive(Clone)]
pub struct Node<'t> {
    pub(super) source: &'t Source,
    pub(super) faults: &'t RefCell<Vec<Fault>>,
    pub(super) value: &'t DeValue<'t>,
    pub(super) span: Range<usize>,
    pub(super) name: String,
}

/// What kind of value this is, in plain words.
fn kind_name(value: &DeValue<'_>) -> &'static str {
    match value {
        DeValue::String(_) => "a text",
        DeValue::Integer(_) => "a whole number",
        DeValue::Float(_) => "a number",
        DeValue::Boolean(_) => "true or false",
        DeValue::Datetime(_) => "a date or time",
        DeValue::Array(_) => "a list",
        DeValue::Table(_) => "a table",
    }
}

impl<'t> Node<'t> {
    /// Where it is.
    pub fn span(&self) -> Range<usize> {
        self.span.clone()
    }

    /// The key it stands under.
    pub fn name(&self) -> &str {
        &self.name
    }

    /// The value itself.
    pub fn value(&self) -> &'t DeValue<'t> {
        self.value
    }

    /// Notes a fault here.
    pub fn fault(&self, code: &'static str, reason: impl Into<String>, cure: impl Into<String>) {
        self.faults
            .borrow_mut()
            .push(Fault::at(self.source, self.span(), code, reason, cure));
    }

    fn wrong_kind(&self, wanted: &str) {
        self.fault(
            "wrong-kind",
            format!("`{}` is {}, not {wanted}", self.name, kind_name(self.value)),
            format!("write {wanted} here"),
        );
    }

    /// As a text, or a fault.
    pub fn text(&self) -> Option<String> {
        if let DeValue::String(s) = self.value {
            return Some(s.to_string());
        }
        self.wrong_kind("a text");
        None
    }

    /// As a finite number (whole numbers count), or a fault.
    pub fn number(&self) -> Option<f64> {
        let parsed = match self.value {
            DeValue::Integer(i) => i64::from_str_radix(i.as_str(), i.radix()).ok().map(|v| {
                // Whole numbers a person writes are far below 2^53.
                #[allow(clippy::cast_precision_loss)]
                let wide = v as f64;
                wide
            }),
            DeValue::Float(f) => f.as_str().parse::<f64>().ok(),
            _ => {
                self.wrong_kind("a number");
                return None;
            }
        };
        match parsed {
            Some(v) if v.is_finite() => Some(v),
            _ => {
                self.fault(
                    "not-finite",
                    format!("`{}` is not a finite number", self.name),
                    "write an ordinary number",
                );
                None
            }
        }
    }

    /// As true or false, or a fault.
    pub fn flag(&self) -> Option<bool> {
        if let DeValue::Boolean(b) = self.value {
            return Some(*b);
        }
        self.wrong_kind("true or false");
        None
    }

    /// As the text of a date, time, or date-time, or a fault.
    pub fn date(&self) -> Option<String> {
        if let DeValue::Datetime(d) = self.value {
            return Some(d.to_string());
        }
        self.wrong_kind("a date such as 2025-03-01");
        None
    }

    /// As a table, or a fault.
    pub fn section(&self) -> Option<Section<'t>> {
        if let DeValue::Table(table) = self.value {
            return Some(Section::new(
                self.source,
                self.faults,
                table,
                self.span(),
                self.name.clone(),
            ));
        }
        self.wrong_kind("a table");
        None
    }

    /// As a list, or a fault.
    pub fn list(&self) -> Option<Vec<Node<'t>>> {
        if let DeValue::Array(items) = self.value {
            let nodes = items.iter().map(|item| Node {
                source: self.source,
                faults: self.faults,
                value: item.get_ref(),
                span: item.span(),
                name: self.name.clone(),
            });
            return Some(nodes.collect());
        }
        self.wrong_kind("a list");
        None
    }

    /// As a list of texts, where one text stands for a list of one.
    pub fn texts(&self) -> Option<Vec<String>> {
        match self.value {
            DeValue::String(s) => Some(vec![s.to_string()]),
            DeValue::Array(_) => Some(self.list()?.iter().filter_map(Node::text).collect()),
            _ => {
                self.wrong_kind("a text or a list of texts");
                None
            }
        }
    }
}
