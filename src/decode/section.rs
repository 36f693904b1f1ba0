//! A TOML table that is asked for its keys one by one and then says which keys nobody asked for.

use std::cell::RefCell;
use std::ops::Range;

use toml::de::DeTable;

use super::Node;
use crate::fault::{Fault, Place, Source, did_you_mean};

/// A table of a source. Ask for every key it may have, then call [`Section::finish`].
pub struct Section<'t> {
    source: &'t Source,
    faults: &'t RefCell<Vec<Fault>>,
    table: &'t DeTable<'t>,
    span: Range<usize>,
    name: String,
    asked: Vec<String>,
}

impl<'t> Section<'t> {
    pub(super) fn new(
        source: &'t Source,
        faults: &'t RefCell<Vec<Fault>>,
        table: &'t DeTable<'t>,
        span: Range<usize>,
        name: String,
    ) -> Self {
        Self {
            source,
            faults,
            table,
            span,
            name,
            asked: Vec::new(),
        }
    }

    /// Where the table is.
    pub fn span(&self) -> Range<usize> {
        self.span.clone()
    }

    /// Where the table is written, for messages about it later.
    pub fn place(&self) -> Option<Place> {
        Fault::at(self.source, self.span(), "", "", "").place
    }

    /// The key the table stands under; empty for the whole file.
    pub fn name(&self) -> &str {
        &self.name
    }

    /// Whether the key is there; counts as asking for it.
    pub fn has(&mut self, key: &str) -> bool {
        self.node(key).is_some()
    }

    /// The keys that are there, in the order of their places; counts as asking for all of them.
    pub fn keys(&mut self) -> Vec<String> {
        let mut keys: Vec<(usize, String)> = self
            .table
            .iter()
            .map(|(k, _)| (k.span().start, k.get_ref().to_string()))
            .collect();
        keys.sort();
        self.asked.extend(keys.iter().map(|(_, k)| k.clone()));
        keys.into_iter().map(|(_, k)| k).collect()
    }

    /// The place of a key (not of its value).
    pub fn key_span(&self, key: &str) -> Range<usize> {
        self.table
            .get_key_value(key)
            .map_or(self.span(), |(k, _)| k.span())
    }

    /// The value under a key, if it is there.
    pub fn node(&mut self, key: &str) -> Option<Node<'t>> {
        if !self.asked.iter().any(|k| k == key) {
            self.asked.push(key.to_owned());
        }
        let value = self.table.get(key)?;
        Some(Node {
            source: self.source,
            faults: self.faults,
            value: value.get_ref(),
            span: value.span(),
            name: key.to_owned(),
        })
    }

    /// The value under a key that must be there.
    pub fn required(&mut self, key: &str) -> Option<Node<'t>> {
        let node = self.node(key);
        if node.is_none() {
            self.fault(
                "missing-key",
                format!("`{key}` is missing{}", self.whereabouts()),
                format!("add `{key} = …`"),
            );
        }
        node
    }

    fn whereabouts(&self) -> String {
        if self.name.is_empty() {
            String::new()
        } else {
            format!(" in `{}`", self.name)
        }
    }

    /// A text under a key.
    pub fn text(&mut self, key: &str) -> Option<String> {
        self.node(key)?.text()
    }

    /// A text that must be there.
    pub fn required_text(&mut self, key: &str) -> Option<String> {
        self.required(key)?.text()
    }

    /// A number under a key.
    pub fn number(&mut self, key: &str) -> Option<f64> {
        self.node(key)?.number()
    }

    /// A number that must be there.
    pub fn required_number(&mut self, key: &str) -> Option<f64> {
        self.required(key)?.number()
    }

    /// True or false under a key.
    pub fn flag(&mut self, key: &str) -> Option<bool> {
        self.node(key)?.flag()
    }

    /// A list of texts under a key (one text is a list of one); empty when absent.
    pub fn texts(&mut self, key: &str) -> Vec<String> {
        self.node(key).and_then(|n| n.texts()).unwrap_or_default()
    }

    /// A table under a key.
    pub fn section(&mut self, key: &str) -> Option<Section<'t>> {
        self.node(key)?.section()
    }

    /// The tables of a list of tables (`[[key]]`); empty when absent.
    pub fn sections(&mut self, key: &str) -> Vec<Section<'t>> {
        self.node(key)
            .and_then(|n| n.list())
            .unwrap_or_default()
            .iter()
            .filter_map(Node::section)
            .collect()
    }

    /// Notes a fault about this table.
    pub fn fault(&self, code: &'static str, reason: impl Into<String>, cure: impl Into<String>) {
        self.faults
            .borrow_mut()
            .push(Fault::at(self.source, self.span(), code, reason, cure));
    }

    /// Notes a fault at a key of this table.
    pub fn fault_at_key(
        &self,
        key: &str,
        code: &'static str,
        reason: impl Into<String>,
        cure: impl Into<String>,
    ) {
        self.faults.borrow_mut().push(Fault::at(
            self.source,
            self.key_span(key),
            code,
            reason,
            cure,
        ));
    }

    /// Faults for every key that nobody asked for.
    pub fn finish(self) {
        for (key, _) in self.table {
            if self.asked.iter().any(|k| k == key.get_ref()) {
                continue;
            }
            let cure = did_you_mean(
                key.get_ref(),
                self.asked.iter().map(String::as_str),
                "take it out",
            );
            self.faults.borrow_mut().push(Fault::at(
                self.source,
                key.span(),
                "unknown-key",
                format!("unknown key `{}`{}", key.get_ref(), self.whereabouts()),
                cure,
            ));
        }
    }
}
