//! The places that rows name, each with a number.

use std::collections::HashMap;

use super::limits;
use super::problem::Trouble;
use super::row::PlaceId;
use crate::fault::{did_you_mean, shown};
use crate::site::Site;

/// Numbers places in the order they are met, those of the site file first.
#[derive(Debug)]
pub(super) struct Places {
    names: Vec<String>,
    ids: HashMap<String, PlaceId>,
    listed: usize,
}

impl Places {
    pub fn new(site: &Site) -> Self {
        let mut places = Self {
            names: Vec::new(),
            ids: HashMap::new(),
            listed: 0,
        };
        for place in &site.place {
            places.add(&place.name);
        }
        places.listed = places.names.len();
        places
    }

    fn add(&mut self, name: &str) -> Option<PlaceId> {
        if self.names.len() >= limits::PLACES {
            return None;
        }
        let id = PlaceId(u16::try_from(self.names.len()).ok()?);
        self.names.push(name.to_owned());
        self.ids.insert(name.to_owned(), id);
        Some(id)
    }

    /// The number of a place, and a note when the site file lists places but not this one (once a place). `None` when
    /// there are too many.
    pub fn id(&mut self, name: &str) -> Option<(PlaceId, Option<Trouble>)> {
        if let Some(id) = self.ids.get(name) {
            return Some((*id, None));
        }
        let id = self.add(name)?;
        let listed = self.names.get(..self.listed).unwrap_or_default();
        let note = (!listed.is_empty()).then(|| {
            Trouble::new(
                "unlisted-place",
                format!(
                    "the site file has no place called `{}`; it is followed as a place of its own",
                    shown(name)
                ),
                did_you_mean(
                    name,
                    listed.iter().map(String::as_str),
                    "add it as a `[[place]]` to the site file",
                ),
            )
        });
        Some((id, note))
    }

    pub fn into_names(self) -> Vec<String> {
        self.names
    }
}
