//! `gillside water`: arguments in, one calculation, a page or JSON out.

mod page;

use std::fmt;
use std::io::{self, Write};

use clap::{Args, ValueEnum};
use serde_json::{Map, Value as Json, json};

use crate::water::calculations::{self, Answer, Failure, Origin, SiteValues, Value};

/// Makes one calculation about water: ammonia, oxygen, carbon dioxide, doses, dilution and more.
///
/// Alone it lists the calculations there are. A value may carry a unit: `temperature=86F`, `alkalinity=3dKH`. What is not
/// given is filled from the site where it can be.
#[derive(Debug, Args)]
pub struct WaterArgs {
    /// The calculation, such as un-ionized-ammonia; without it they are listed
    pub name: Option<String>,
    /// What is known, as key=value, such as temperature=24 ph=7.2
    #[arg(value_name = "KEY=VALUE")]
    pub inputs: Vec<String>,
    /// How to print the answer
    #[arg(long, value_enum, default_value_t = WaterFormat::Text)]
    pub format: WaterFormat,
}

/// How an answer is printed.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, ValueEnum)]
pub enum WaterFormat {
    /// For a person
    #[default]
    Text,
    /// For a program
    Json,
}

/// Why there is no answer.
#[derive(Debug)]
pub enum WaterError {
    /// The calculation gave none.
    Failure(Failure),
    /// It could not be written.
    Io(io::Error),
}

impl WaterError {
    /// Exit status of the contract: 1 could not be written, 2 wrong usage, 3 a value that can't be used.
    pub fn exit_status(&self) -> u8 {
        match self {
            Self::Failure(failure) => failure.exit_status(),
            Self::Io(_) => 1,
        }
    }
}

impl fmt::Display for WaterError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Failure(failure) => failure.fmt(f),
            Self::Io(error) => write!(f, "the answer can't be written: {error}"),
        }
    }
}

impl std::error::Error for WaterError {}

impl From<Failure> for WaterError {
    fn from(failure: Failure) -> Self {
        Self::Failure(failure)
    }
}

impl From<io::Error> for WaterError {
    fn from(error: io::Error) -> Self {
        Self::Io(error)
    }
}

/// Lists the calculations, or makes the one that was asked for; `site` fills what is not given.
///
/// # Errors
/// [`WaterError`], with its exit status.
pub fn run(args: &WaterArgs, site: &SiteValues, out: &mut dyn Write) -> Result<(), WaterError> {
    let text = match (&args.name, args.format) {
        (None, WaterFormat::Text) => page::list(),
        (None, WaterFormat::Json) => format!("{}\n", list_json()),
        (Some(name), format) => {
            let answer = calculations::evaluate(name, &args.inputs, site)?;
            match format {
                WaterFormat::Text => page::answer(&answer),
                WaterFormat::Json => format!("{}\n", answer_json(&answer)),
            }
        }
    };
    out.write_all(text.as_bytes())?;
    Ok(())
}

/// The answer as the contract writes it, and where each input that was not given comes from.
fn answer_json(answer: &Answer) -> Json {
    let mut inputs = Map::new();
    let mut filled = Map::new();
    for input in &answer.inputs.0 {
        let value = match input.value {
            Value::Number(number) => json!(number),
            Value::Word(word) => json!(word),
        };
        inputs.insert(input.key.name.to_owned(), value);
        let from = match input.origin {
            Origin::Given => continue,
            Origin::Site => "site",
            Origin::Default => "default",
        };
        filled.insert(input.key.name.to_owned(), json!(from));
    }
    json!({
        "schema": 1,
        "name": answer.calculation.name,
        "value": answer.value,
        "unit": answer.calculation.unit,
        "inputs": inputs,
        "filled": filled,
        "source": answer.calculation.source,
    })
}

/// The calculations there are, for a program.
fn list_json() -> Json {
    let all: Vec<Json> = calculations::listed()
        .map(|c| {
            let keys: Vec<Json> = c
                .keys
                .iter()
                .map(|k| json!({"name": k.name, "help": k.help, "takes": k.takes(), "required": k.required()}))
                .collect();
            json!({"name": c.name, "help": c.help, "unit": c.unit, "keys": keys, "source": c.source})
        })
        .collect();
    json!({"schema": 1, "calculations": all})
}

#[cfg(test)]
mod tests {
    use super::*;

    fn out_of(
        words: &[&str],
        format: WaterFormat,
        site: &SiteValues,
    ) -> Result<String, (u8, String)> {
        let args = WaterArgs {
            name: words.first().map(|w| (*w).to_owned()),
            inputs: words.iter().skip(1).map(|w| (*w).to_owned()).collect(),
            format,
        };
        let mut out = Vec::new();
        run(&args, site, &mut out).map_err(|e| (e.exit_status(), e.to_string()))?;
        Ok(String::from_utf8_lossy(&out).into_owned())
    }

    fn text(words: &[&str]) -> Result<String, (u8, String)> {
        out_of(words, WaterFormat::Text, &SiteValues::default())
    }

    #[test]
    fn the_contract_s_example_gives_the_contract_s_json() {
        let words = [
            "un-ionized-ammonia",
            "total-ammonia=3",
            "temperature=30",
            "ph=8.6",
        ];
        let out = out_of(&words, WaterFormat::Json, &SiteValues::default()).unwrap_or_default();
        let json: Json = serde_json::from_str(&out).unwrap_or_default();
        assert_eq!(json["schema"], 1);
        assert_eq!(json["name"], "un-ionized-ammonia");
        assert_eq!(json["unit"], "mg/L as N");
        assert!((json["value"].as_f64().unwrap_or(0.0) - 0.73).abs() < 0.006);
        assert_eq!(json["inputs"]["total_ammonia"], 3.0);
        assert!(json["source"].as_array().is_some_and(|s| !s.is_empty()));
    }

    #[test]
    fn a_page_shows_what_it_was_worked_out_from() {
        let site = SiteValues {
            elevation_m: Some(1500.0),
            ..SiteValues::default()
        };
        let out = out_of(
            &["oxygen_solubility", "temperature=68F"],
            WaterFormat::Text,
            &site,
        );
        assert_eq!(
            out.unwrap_or_default(),
            "\
oxygen-solubility = 7.553 mg/L
oxygen in water saturated with air

  temperature  20 C
  salinity     0 g/L (not given, taken as this)
  elevation_m  1500 m (from the site)

Source: Benson & Krause 1984, Limnol. Oceanogr. 29:620; Standard Methods 4500-O;
elevation: U.S. Standard Atmosphere 1976
"
        );
    }

    #[test]
    fn a_unit_that_leaves_something_open_is_said() {
        let out = text(&[
            "un-ionized-ammonia",
            "total-ammonia=3ppm",
            "temperature=30",
            "ph=8.6",
        ]);
        assert!(out.is_ok_and(|page| page.contains("3 mg/L as N (read as N)")));
    }

    #[test]
    fn the_list_fits_a_terminal_and_names_everything_listed() {
        let page = text(&[]).unwrap_or_default();
        for line in page.lines() {
            assert!(line.chars().count() <= 80, "{line}");
        }
        for c in calculations::listed() {
            assert!(page.contains(&format!("\n  {}", c.name)), "{}", c.name);
        }
        assert!(!page.contains("carbonate-pk1"));
    }

    #[test]
    fn mistakes_say_what_to_do() {
        for (words, status, reason) in [
            (
                &["un-ionised-ammonia"][..],
                2,
                "there is no calculation `un-ionised-ammonia`; did you mean `un-ionized-ammonia`?",
            ),
            (
                &["sulfide"],
                2,
                "there is no calculation `sulfide`; did you mean one of hydrogen-sulfide-fraction, \
                 un-ionized-hydrogen-sulfide?",
            ),
            (
                &[
                    "carbon-dioxide",
                    "temperature=25",
                    "ph=10.8",
                    "alkalinity=2",
                ],
                3,
                "`alkalinity` is 2, and this holds for at least 32.1956 mg/L as CaCO3 at this pH",
            ),
            (
                &["un-ionized-ammonia", "temprature=20"],
                2,
                "`un-ionized-ammonia` has no key `temprature`; did you mean `temperature`?",
            ),
            (
                &["un-ionized-ammonia", "total-ammonia=1", "ph=7"],
                2,
                "`un-ionized-ammonia` also needs\n  temperature: water temperature; C, 0 to 50 (or in F, K)",
            ),
            (
                &[
                    "un-ionized-ammonia",
                    "total-ammonia=1",
                    "ph=7",
                    "temperature=86",
                ],
                3,
                "`temperature` is 86, and this holds for 0 to 50 C",
            ),
            (
                &[
                    "un-ionized-ammonia",
                    "total-ammonia=1",
                    "ph=7,1",
                    "temperature=20",
                ],
                2,
                "`ph` is `7,1`, which is not a number; write it like `7.1`, with a point",
            ),
            (
                &["un-ionized-ammonia", "temperature=20R"],
                2,
                "`R` is not a unit of `temperature`; it takes C, F, K",
            ),
            (
                &["oxygen-saturation", "dissolved-oxygen=90%"],
                2,
                "`dissolved_oxygen` in `%` also needs the water's temperature; give it in mg/L, mL/L",
            ),
            (
                &["oxygen-solubility", "20"],
                2,
                "`20` is not key=value; write it like `temperature=24`",
            ),
            (
                &["oxygen-solubility", "temperature=20", "temperature=21"],
                2,
                "`temperature` is given twice; give it once",
            ),
            (
                &[
                    "oxygen-solubility",
                    "temperature=20",
                    "elevation=100",
                    "pressure-kpa=95",
                ],
                2,
                "`elevation_m` and `pressure_kpa` say the same thing; give one of them",
            ),
            (
                &["chloride-in-salt", "chemical=NaCI"],
                2,
                "`chemical` can't be `NaCI`; did you mean `NaCl`?",
            ),
            (
                &["batch-fraction-to-reach", "now=2", "makeup=1", "target=0.5"],
                3,
                "`target` is 0.5, and this holds for 1 to 2",
            ),
        ] {
            assert_eq!(text(words), Err((status, reason.to_owned())), "{words:?}");
        }
    }
}
