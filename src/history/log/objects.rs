//! Rows of JSON lines: one object a line, with the names of columns as keys.

use std::borrow::Cow;
use std::collections::HashMap;
use std::fmt;

use serde::de::{
    Deserialize, DeserializeSeed, Deserializer, Error, IgnoredAny, MapAccess, SeqAccess, Visitor,
};

use super::columns::{Column, Holds};
use super::desk::Spot;
use super::draft::{Draft, Means};
use super::limits;
use super::problem::{Effect, Trouble};
use super::records::characters;
use super::row::Value;
use super::table::Written;

/// The keys met so far.
#[derive(Debug, Default)]
pub(super) struct Objects {
    keys: HashMap<String, Key>,
    /// For every column: the first column that is the same, and the row that last had it.
    slots: Vec<(usize, usize)>,
    row: usize,
}

#[derive(Debug, Clone)]
enum Key {
    Column(usize),
    Refused(Trouble),
}

/// A value of an object, as far as a log may have it.
enum Item<'de> {
    Nothing,
    Number(f64),
    Text(Cow<'de, str>),
    Words(Vec<String>),
    Wrong(&'static str),
}

impl Objects {
    /// Reads a row into the draft; `false` when it is refused.
    pub fn row(
        &mut self,
        written: Written<'_>,
        columns: &mut Vec<Column>,
        draft: &mut Draft,
        means: &mut Means<'_, '_>,
    ) -> bool {
        self.row += 1;
        let mut reader = serde_json::Deserializer::from_str(written.text);
        let mut row = Pairs {
            objects: self,
            columns,
            draft,
            means,
            written,
            good: true,
        };
        let read = (&mut row)
            .deserialize(&mut reader)
            .and_then(|()| reader.end());
        let good = row.good;
        let Err(error) = read else { return good };
        let text = error.to_string();
        let reason = text
            .rsplit_once(" at line ")
            .map_or(text.as_str(), |(reason, _)| reason);
        let spot = Spot {
            file: written.file,
            line: written.line,
            at: error.column().max(1),
        };
        let trouble = Trouble::new(
            "not-json",
            format!("this is not a row of JSON: {reason}"),
            "write one whole object a line, such as `{\"time\": \"2026-03-02 07:30\", \"ph\": 6.9}`",
        );
        means.desk.tell(spot, None, trouble, Effect::RowRefused);
        false
    }

    /// What a key that was not met before means, told once.
    fn learn(
        &mut self,
        name: &str,
        columns: &mut Vec<Column>,
        means: &mut Means<'_, '_>,
        spot: Spot,
    ) -> Key {
        if self.keys.len() >= limits::COLUMNS {
            return Key::Refused(Trouble::new(
                "too-many-columns",
                format!("the file has more than {} different keys", limits::COLUMNS),
                "keep to the names of readings and the free columns",
            ));
        }
        let key = match Column::of(name.trim(), means.desk.site, means.desk.vocabulary) {
            Err(wrong) if wrong.code == "unknown-unit" => Key::Refused(wrong.into()),
            Err(wrong) => {
                means
                    .desk
                    .tell(spot, Some(name), wrong.into(), Effect::ColumnSkipped);
                self.add(Column::unused(name), columns)
            }
            Ok(column) => match column.obstacle(means.desk.site) {
                Some(trouble) => {
                    means
                        .desk
                        .tell(spot, Some(name), trouble, Effect::ColumnSkipped);
                    self.add(Column::unused(name), columns)
                }
                None => {
                    means.desk.column(spot, &column);
                    self.add(column, columns)
                }
            },
        };
        self.keys.insert(name.to_owned(), key.clone());
        key
    }

    fn add(&mut self, column: Column, columns: &mut Vec<Column>) -> Key {
        let index = columns.len();
        let first = columns
            .iter()
            .position(|c| column.same_as(c))
            .unwrap_or(index);
        columns.push(column);
        self.slots.push((first, 0));
        Key::Column(index)
    }

    /// Marks a column as given in this row; `false` when the same was given already.
    fn first_time(&mut self, index: usize) -> bool {
        let slot = self.slots.get(index).map_or(index, |(first, _)| *first);
        let row = self.row;
        self.slots
            .get_mut(slot)
            .is_none_or(|(_, last)| std::mem::replace(last, row) != row)
    }
}

struct Pairs<'r, 'f, 'a, 't> {
    objects: &'r mut Objects,
    columns: &'r mut Vec<Column>,
    draft: &'r mut Draft,
    means: &'r mut Means<'f, 'a>,
    written: Written<'t>,
    good: bool,
}

impl Pairs<'_, '_, '_, '_> {
    fn spot(&self, key: &str) -> Spot {
        let quoted = format!("\"{key}\"");
        let at = self
            .written
            .text
            .find(&quoted)
            .map_or(1, |at| characters(self.written.text, at));
        Spot {
            file: self.written.file,
            line: self.written.line,
            at,
        }
    }

    fn tell(&mut self, key: &str, trouble: Trouble, effect: Effect) {
        self.good &= effect != Effect::RowRefused;
        let spot = self.spot(key);
        self.means.desk.tell(spot, Some(key), trouble, effect);
    }

    fn pair(&mut self, key: &str, item: Item<'_>) {
        let known = match self.objects.keys.get(key) {
            Some(known) => known.clone(),
            None => {
                let spot = self.spot(key);
                self.objects.learn(key, self.columns, self.means, spot)
            }
        };
        let index = match known {
            Key::Column(index) => index,
            Key::Refused(trouble) => return self.tell(key, trouble, Effect::RowRefused),
        };
        if !self.objects.first_time(index) {
            let trouble = Trouble::new(
                "given-twice",
                "the row gives this twice",
                "leave one of the two",
            );
            return self.tell(key, trouble, Effect::RowRefused);
        }
        let Some(column) = self.columns.get(index) else {
            return;
        };
        match (item, &column.holds) {
            (Item::Nothing, _) | (_, Holds::Nothing) => {}
            (Item::Number(amount), Holds::Reading(measure)) => {
                let value = Value {
                    amount,
                    below: false,
                };
                self.draft.measured(index, measure, value, &amount);
            }
            (Item::Number(amount), _) => {
                self.draft
                    .cell(index, column, &amount.to_string(), self.means)
            }
            (Item::Text(text), _) => {
                if !text.trim().is_empty() {
                    self.draft.cell(index, column, text.trim(), self.means);
                }
            }
            (Item::Words(words), Holds::Sign | Holds::Event) => {
                self.draft.cell(index, column, &words.join(";"), self.means);
            }
            (Item::Words(_), _) => self.wrong_kind("a list"),
            (Item::Wrong(kind), _) => self.wrong_kind(kind),
        }
        for (trouble, effect) in std::mem::take(&mut self.draft.troubles) {
            self.tell(key, trouble, effect);
        }
    }

    fn wrong_kind(&mut self, kind: &str) {
        let trouble = Trouble::new(
            "wrong-kind",
            format!("the value is {kind}"),
            "write a number or a text; `sign` and `event` may be lists of texts",
        );
        self.draft.troubles.push((trouble, Effect::RowRefused));
    }
}

impl<'de> DeserializeSeed<'de> for &mut Pairs<'_, '_, '_, '_> {
    type Value = ();

    fn deserialize<D: Deserializer<'de>>(self, from: D) -> Result<(), D::Error> {
        from.deserialize_map(self)
    }
}

impl<'de> Visitor<'de> for &mut Pairs<'_, '_, '_, '_> {
    type Value = ();

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("an object")
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<(), A::Error> {
        while let Some(key) = map.next_key::<Cow<'de, str>>()? {
            let item = map.next_value::<Item<'de>>()?;
            self.pair(&key, item);
        }
        Ok(())
    }
}

impl<'de> Deserialize<'de> for Item<'de> {
    fn deserialize<D: Deserializer<'de>>(from: D) -> Result<Self, D::Error> {
        from.deserialize_any(ItemVisitor)
    }
}

struct ItemVisitor;

impl<'de> Visitor<'de> for ItemVisitor {
    type Value = Item<'de>;

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a number or a text")
    }

    fn visit_unit<E: Error>(self) -> Result<Self::Value, E> {
        Ok(Item::Nothing)
    }

    fn visit_bool<E: Error>(self, _: bool) -> Result<Self::Value, E> {
        Ok(Item::Wrong("true or false"))
    }

    fn visit_f64<E: Error>(self, number: f64) -> Result<Self::Value, E> {
        Ok(Item::Number(number))
    }

    // Whole numbers above 2^53 are no readings; they lose their last digits and are implausible all the same.
    #[allow(clippy::cast_precision_loss)]
    fn visit_i64<E: Error>(self, number: i64) -> Result<Self::Value, E> {
        Ok(Item::Number(number as f64))
    }

    #[allow(clippy::cast_precision_loss)]
    fn visit_u64<E: Error>(self, number: u64) -> Result<Self::Value, E> {
        Ok(Item::Number(number as f64))
    }

    fn visit_str<E: Error>(self, text: &str) -> Result<Self::Value, E> {
        Ok(Item::Text(Cow::Owned(text.to_owned())))
    }

    fn visit_borrowed_str<E: Error>(self, text: &'de str) -> Result<Self::Value, E> {
        Ok(Item::Text(Cow::Borrowed(text)))
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut list: A) -> Result<Self::Value, A::Error> {
        let mut words = Vec::new();
        let mut good = true;
        while let Some(item) = list.next_element::<Item<'de>>()? {
            match item {
                Item::Text(text) => words.push(text.into_owned()),
                _ => good = false,
            }
        }
        Ok(if good {
            Item::Words(words)
        } else {
            Item::Wrong("a list with more than texts in it")
        })
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<Self::Value, A::Error> {
        while map.next_entry::<IgnoredAny, IgnoredAny>()?.is_some() {}
        Ok(Item::Wrong("an object"))
    }
}
