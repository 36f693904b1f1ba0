//! The pages of `gillside water`, for a person at 80 columns.

use textwrap::Options;

use crate::water::calculations::key::{Fallback, Key};
use crate::water::calculations::{Answer, Calculation, Input, Origin, SUBJECTS, Value};

const WIDTH: usize = 80;

/// The calculations there are.
pub fn list() -> String {
    let mut page = wrapped(
        "Single calculations about water: `gillside water NAME key=value ...`. Keys in [brackets] may be left out; a star \
         marks those that a site file fills. A value may carry a unit (temperature=86F, alkalinity=3dKH), and a name alone \
         says which values it takes.",
        "",
    );
    for subject in SUBJECTS.iter().filter(|s| s.listed) {
        page.push_str(&format!("\n{}\n", subject.title));
        for calculation in subject.calculations {
            page.push_str(&entry(calculation));
        }
    }
    page
}

fn entry(calculation: &Calculation) -> String {
    let unit = match calculation.unit {
        "" => String::new(),
        unit => format!(" ({unit})"),
    };
    let mut entry = format!("  {}\n", calculation.name);
    entry.push_str(&wrapped(&format!("{}{unit}", calculation.help), "      "));
    let keys: Vec<String> = calculation.keys.iter().map(key_name).collect();
    if !keys.is_empty() {
        entry.push_str(&wrapped(&keys.join(" "), "      "));
    }
    entry
}

/// A key as the list shows it.
fn key_name(key: &Key) -> String {
    let star = if key.site.is_some() { "*" } else { "" };
    match key.fallback {
        Fallback::Required => format!("{}{star}", key.name),
        _ => format!("[{}{star}]", key.name),
    }
}

/// One answer, and what it was worked out from.
pub fn answer(answer: &Answer) -> String {
    let calculation = answer.calculation;
    let value = measured(answer.value, calculation.unit);
    let mut page = format!("{} = {value}\n", calculation.name);
    page.push_str(&wrapped(calculation.help, ""));
    let inputs = &answer.inputs.0;
    let width = inputs.iter().map(|i| i.key.name.len()).max().unwrap_or(0);
    if !inputs.is_empty() {
        page.push('\n');
    }
    for input in inputs {
        page.push_str(&format!("  {:width$}  {}\n", input.key.name, given(input)));
    }
    let sources = format!("Source: {}", calculation.source.join("; "));
    page.push_str(&format!("\n{}", wrapped(&sources, "")));
    page
}

/// The value of an input, and where it comes from when nobody gave it.
fn given(input: &Input) -> String {
    let value = match input.value {
        Value::Number(number) => measured(number, input.key.unit()),
        Value::Word(word) => word.to_owned(),
    };
    let remark = match (input.origin, input.assumes) {
        (Origin::Given, None) => String::new(),
        (Origin::Given, Some(what)) => format!(" (read {what})"),
        (Origin::Site, _) => " (from the site)".to_owned(),
        (Origin::Default, _) => " (not given, taken as this)".to_owned(),
    };
    format!("{value}{remark}")
}

/// A number with its unit; pH and bare numbers have none to show.
fn measured(value: f64, unit: &str) -> String {
    match unit {
        "" | "pH" | "pK" | "fraction" | "count" | "ratio" | "log10" | "as given" => number(value),
        unit => format!("{} {unit}", number(value)),
    }
}

/// A number to four digits that count, without zeros that say nothing.
fn number(value: f64) -> String {
    if value == 0.0 {
        return "0".to_owned();
    }
    let magnitude = value.abs().log10().floor();
    if !(-6.0..15.0).contains(&magnitude) {
        return format!("{value:.3e}");
    }
    // Between -6 and 14, so the cast is exact and the difference small.
    let decimals = (3 - magnitude as i32).max(0) as usize;
    let text = format!("{value:.decimals$}");
    if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

fn wrapped(text: &str, indent: &str) -> String {
    let options = Options::new(WIDTH)
        .initial_indent(indent)
        .subsequent_indent(indent)
        .word_splitter(textwrap::WordSplitter::NoHyphenation);
    format!("{}\n", textwrap::fill(text, options))
}

#[cfg(test)]
mod tests {
    use super::number;

    #[test]
    fn numbers_keep_four_digits_that_count() {
        for (value, text) in [
            (0.0, "0"),
            (0.002_386_8, "0.002387"),
            (0.73, "0.73"),
            (9.092_1, "9.092"),
            (132.48, "132.5"),
            (20_000.0, "20000"),
            (-1.25, "-1.25"),
            (3.2e-9, "3.200e-9"),
        ] {
            assert_eq!(number(value), text);
        }
    }
}
