//! A site file in the making: each answer is read by the reader of site files before it is taken.

use toml_edit::{ArrayOfTables, DocumentMut, Item, Table, value};

use super::questions::{Form, QUESTIONS, Question, ROWS, Rows};
use crate::cli::stop::Stop;
use crate::fault::Fault;
use crate::site::{Chlorination, Crop, PlaceKind, Site, Units};

/// What is asked at the terminal.
#[derive(Debug, Clone)]
pub(super) struct Asked {
    pub prompt: String,
    pub usual: Option<String>,
}

/// Who answers.
pub(super) trait Answers {
    /// Says something.
    fn say(&mut self, text: &str) -> Result<(), Stop>;
    /// Asks; an empty answer is "don't know".
    fn ask(&mut self, asked: &Asked) -> Result<String, Stop>;
    /// What is wrong with a site file's text.
    fn faults(&self, text: &str) -> Vec<Fault>;
    /// The words of a list of the rule base.
    fn listed(&self, what: &str) -> Vec<String>;
}

/// Asks everything, and gives the text of the file.
pub(super) fn ask_all(answers: &mut dyn Answers) -> Result<String, Stop> {
    let mut doc = DocumentMut::new();
    doc.decor_mut()
        .set_prefix("# A farm. `gillside site check` reads it through.\n");
    for question in &QUESTIONS {
        one(&mut doc, question, answers)?;
    }
    for rows in &ROWS {
        answers.say(&format!("\n{} ({})", rows.lead, rows.why))?;
        while row(&mut doc, rows, answers)? {}
    }
    Ok(doc.to_string())
}

/// Asks until the answer is good or there is none.
fn one(doc: &mut DocumentMut, question: &Question, answers: &mut dyn Answers) -> Result<(), Stop> {
    answers.say(&format!("\n{}: {}.", question.key, question.why))?;
    let must = question.key == "name";
    loop {
        let answer = answers.ask(&Asked {
            prompt: prompt(question.ask, question.form, answers),
            usual: (!question.usual.is_empty()).then(|| question.usual.to_owned()),
        })?;
        let answer = answer.trim();
        if answer.is_empty() && !must {
            return Ok(());
        }
        let before = doc.clone();
        if let Some(item) = item(answer, question.form) {
            put(doc, question.key, item);
            let faults = answers.faults(&doc.to_string());
            if faults.is_empty() {
                return Ok(());
            }
            told(&faults, answers)?;
        } else {
            answers.say("Answer yes or no, or nothing when you don't know.")?;
        }
        *doc = before;
    }
}

/// Asks for a row of a list; `false` when there are no more.
fn row(doc: &mut DocumentMut, rows: &Rows, answers: &mut dyn Answers) -> Result<bool, Stop> {
    let before = doc.clone();
    let mut table = Table::new();
    for (key, ask, form, usual) in rows.columns {
        let answer = answers.ask(&Asked {
            prompt: prompt(ask, *form, answers),
            usual: (!usual.is_empty()).then(|| (*usual).to_owned()),
        })?;
        let answer = answer.trim();
        if answer.is_empty() {
            if table.is_empty() {
                return Ok(false);
            }
            continue;
        }
        if let Some(item) = item(answer, *form) {
            table[*key] = item;
        }
    }
    let list = doc
        .as_table_mut()
        .entry(rows.key)
        .or_insert_with(|| Item::ArrayOfTables(ArrayOfTables::new()));
    if let Some(list) = list.as_array_of_tables_mut() {
        list.push(table);
    }
    let faults = answers.faults(&doc.to_string());
    if !faults.is_empty() {
        told(&faults, answers)?;
        answers.say("Once more:")?;
        *doc = before;
    }
    Ok(true)
}

fn told(faults: &[Fault], answers: &mut dyn Answers) -> Result<(), Stop> {
    for fault in faults {
        answers.say(&format!("That can't be: {}. {}.", fault.reason, fault.cure))?;
    }
    Ok(())
}

fn prompt(ask: &str, form: Form, answers: &dyn Answers) -> String {
    let words = |list: &[&str]| list.join(", ");
    let listed = match form {
        Form::Listed("units") => words(Units::WORDS),
        Form::Listed("crops") => words(Crop::WORDS),
        Form::Listed("chlorination") => words(Chlorination::WORDS),
        Form::Listed("kind") => words(PlaceKind::WORDS),
        Form::Listed(what) => answers.listed(what).join(", "),
        _ => String::new(),
    };
    if listed.is_empty() || ask.contains(", ") {
        ask.to_owned()
    } else {
        format!("{ask} ({listed})")
    }
}

/// The answer as it stands in the file; `None`: neither yes nor no.
fn item(answer: &str, form: Form) -> Option<Item> {
    Some(match form {
        Form::Flag => value(match answer.to_ascii_lowercase().as_str() {
            "y" | "yes" | "true" => true,
            "n" | "no" | "false" => false,
            _ => return None,
        }),
        // What is no number goes in as it is, and the reader says what is wrong with it.
        Form::Number => match (answer.parse::<i64>(), answer.parse::<f64>()) {
            (Ok(whole), _) => value(whole),
            (_, Ok(number)) => value(number),
            _ => value(answer),
        },
        Form::Date => match answer.parse::<toml_edit::Datetime>() {
            Ok(date) => value(date),
            Err(_) => value(answer),
        },
        Form::Listed("species" | "crops") if answer.contains([',', ' ']) => {
            let each = answer.split([',', ' ']).map(str::trim);
            let list: toml_edit::Array = each.filter(|w| !w.is_empty()).collect();
            value(list)
        }
        Form::Text | Form::Listed(_) => value(answer),
    })
}

fn put(doc: &mut DocumentMut, key: &str, item: Item) {
    match key.split_once('.') {
        None => doc[key] = item,
        Some((table, key)) => {
            let table = doc
                .as_table_mut()
                .entry(table)
                .or_insert_with(|| Item::Table(Table::new()));
            if let Some(table) = table.as_table_mut() {
                table[key] = item;
            }
        }
    }
}

/// The questions that a site file leaves open.
pub(super) fn lacking(site: &Site) -> Vec<&'static Question> {
    QUESTIONS.iter().filter(|q| !known(site, q.key)).collect()
}

fn known(site: &Site, key: &str) -> bool {
    match key {
        "species" => !site.species.is_empty(),
        "started" => site.started.is_some(),
        "volume_l" => site.volume_l.is_some(),
        "biomass_kg" => site.biomass_kg.is_some(),
        "feed_kg_per_day" => site.feed_kg_per_day.is_some(),
        "feed_protein_percent" => site.feed_protein_percent.is_some(),
        "biofilter_area_m2" => site.biofilter_area_m2.is_some() || !site.media.is_empty(),
        "plant_area_m2" => site.plant_area_m2.is_some(),
        "crops" => !site.crops.is_empty() || site.plant_area_m2 == Some(0.0),
        "elevation_m" => site.elevation_m.is_some(),
        "aeration_kg_o2_per_day" => site.aeration_kg_o2_per_day.is_some(),
        "heated" => site.heated.is_some(),
        "covered_media" => site.covered_media.is_some(),
        "makeup.chlorination" => site
            .makeup
            .chlorination
            .is_some_and(|c| c != Chlorination::Unknown),
        "makeup.ph" => site.makeup.ph.is_some(),
        "makeup.alkalinity" => site.makeup.alkalinity.is_some(),
        "makeup.chloride" => site.makeup.chloride.is_some(),
        "makeup.temperature" => site.makeup.temperature.is_some(),
        "equipment.solids_filter" => site.equipment.solids_filter.is_some(),
        "equipment.standby_air" => site.equipment.standby_air.is_some(),
        "equipment.pure_oxygen" => site.equipment.pure_oxygen.is_some(),
        "equipment.backup_power" => site.equipment.backup_power.is_some(),
        "log" => site.log.is_some(),
        "incidents" => site.incidents.is_some(),
        _ => true,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::cli::site::faults;
    use crate::knowledge::{self, Knowledge};

    /// Answers by what is asked for; each answer once, then the next.
    struct Script {
        answers: Vec<(&'static str, &'static str)>,
        said: Vec<String>,
        base: Knowledge,
    }

    impl Answers for Script {
        fn say(&mut self, text: &str) -> Result<(), Stop> {
            self.said.push(text.to_owned());
            Ok(())
        }

        fn ask(&mut self, asked: &Asked) -> Result<String, Stop> {
            let at = self
                .answers
                .iter()
                .position(|(part, _)| asked.prompt.contains(part));
            Ok(at.map_or_else(String::new, |at| self.answers.remove(at).1.to_owned()))
        }

        fn faults(&self, text: &str) -> Vec<Fault> {
            faults(text, &self.base)
        }

        fn listed(&self, what: &str) -> Vec<String> {
            match what {
                "species" => self.base.species.iter().map(|s| s.id.clone()).collect(),
                _ => Vec::new(),
            }
        }
    }

    #[test]
    fn a_wrong_answer_is_asked_again_and_the_file_is_good() {
        let Ok(base) = knowledge::load(&knowledge::embedded(), &[]) else {
            unreachable!("the shipped rule base loads")
        };
        let mut script = Script {
            answers: vec![
                ("called", "Lower barn"),
                ("Time zone", "Europe/Lisbn"),
                ("Time zone", "Europe/Lisbon"),
                ("Which fish", "nile-tilapia"),
                ("Liters", "lots"),
                ("Liters", "12000"),
                ("heated", "perhaps"),
                ("heated", "y"),
                ("first fed", "2025-03-01"),
                ("Name of the shift", "early"),
                ("starts at", "06:00"),
                ("ends at", "14:00"),
                ("Name of the place", "tank 1"),
                ("What is it", "tank"),
                ("Who?", "fish vet"),
                ("Number?", "+000 000 000"),
            ],
            said: Vec::new(),
            base,
        };
        let made = ask_all(&mut script).unwrap_or_default();
        assert!(faults(&made, &script.base).is_empty(), "{made}");
        for part in [
            "name = \"Lower barn\"",
            "timezone = \"Europe/Lisbon\"",
            "volume_l = 12000",
            "heated = true",
            "started = 2025-03-01",
            "[[shift]]",
            "number = \"+000 000 000\"",
        ] {
            assert!(made.contains(part), "{part} is not in\n{made}");
        }
        let said = script.said.join("\n");
        for part in ["Europe/Lisbn", "is a text, not a number", "yes or no"] {
            assert!(said.contains(part), "{part}: {said}");
        }
        assert!(script.answers.is_empty(), "{:?}", script.answers);
    }
}
