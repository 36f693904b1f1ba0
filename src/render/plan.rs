//! Plans as JSON (data contract, section 9), as text and as Markdown.

use std::fmt::Write as _;

use jiff::Timestamp;
use jiff::tz::TimeZone;
use serde_json::{Map, Value as Json, json};

use crate::course::plan::{Amount, Kept, Plan, Step};
use crate::site::Units;

/// What a page needs to know besides the plan.
#[derive(Debug, Clone)]
pub struct PlanPage<'a> {
    /// The farm.
    pub site: Option<&'a str>,
    /// The zone of its clock times.
    pub zone: &'a TimeZone,
    /// What its people see.
    pub units: Units,
    /// Names and units of readings.
    pub vocabulary: &'a crate::vocabulary::Vocabulary,
    /// Columns.
    pub width: usize,
}

/// A number as JSON, with no digits that mean nothing.
fn number(value: f64) -> Json {
    let digits = (4 - value.abs().max(1e-9).log10().floor() as i32).clamp(0, 8);
    let scale = 10f64.powi(digits);
    let rounded = (value * scale).round() / scale;
    if rounded.is_finite() {
        json!(rounded)
    } else {
        Json::Null
    }
}

fn utc(seconds: i64) -> String {
    Timestamp::from_second(seconds).map_or_else(|_| seconds.to_string(), |t| t.to_string())
}

fn readings(list: &[(String, f64)]) -> Json {
    Json::Object(
        list.iter()
            .map(|(id, v)| (id.clone(), number(*v)))
            .collect(),
    )
}

fn amount_json(amount: &Amount) -> Json {
    let mut map = Map::new();
    map.insert("substance".into(), json!(amount.substance));
    map.insert("grams".into(), number(amount.grams));
    if let Some(ml) = amount.milliliters {
        map.insert("milliliters".into(), number(ml));
    }
    Json::Object(map)
}

fn step_json(step: &Step) -> Json {
    let expect: Map<String, Json> = step
        .expect
        .iter()
        .map(|e| (e.id.clone(), json!([number(e.low), number(e.high)])))
        .collect();
    json!({
        "at": utc(step.at),
        "text": step.text,
        "amounts": step.amounts.iter().map(amount_json).collect::<Vec<_>>(),
        "liters": step.liters.map(number),
        "feed_kg": step.feed_kg.map(number),
        "temperature": step.warmth.map(|w| json!({"to": number(w.to), "per_hour": number(w.per_hour)})),
        "expect": expect,
        "go_on_if": step.go_on_if,
        "stop_if": step.stop_if,
    })
}

fn kept_json(kept: &Kept) -> Json {
    json!({
        "id": kept.id,
        "name": kept.name,
        "limit": number(kept.limit),
        "reached": number(kept.reached),
        "unit": kept.unit,
        "at_least": kept.is_floor,
        "without": kept.without.map(number),
        "set_the_pace": kept.set_the_pace,
        "published": !kept.unpublished,
        "contested": (!kept.contested.is_empty()).then_some(&kept.contested),
        "source": kept.source,
    })
}

/// The plan as the contract writes it, with fields of its own added.
pub fn plan_json(plan: &Plan) -> Json {
    let refused = plan
        .refused
        .as_ref()
        .map(|r| json!({"limit": r.limit, "reason": r.reason, "instead": r.instead}));
    json!({
        "schema": 1,
        "kind": plan.kind.word(),
        "from": readings(&plan.from),
        "to": readings(&plan.to),
        "refused": refused,
        "steps": plan.steps.iter().map(step_json).collect::<Vec<_>>(),
        "total": plan.total.iter().map(amount_json).collect::<Vec<_>>(),
        "limits": plan.limits.iter().map(kept_json).collect::<Vec<_>>(),
        "cautions": plan.cautions,
        "notes": plan.notes,
    })
}

/// How the parts of a page are set.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Set {
    Text,
    Markdown,
}

/// The plan for a person at the tank.
pub fn plan_text(plan: &Plan, page: &PlanPage<'_>) -> String {
    write(plan, page, Set::Text)
}

/// The plan for a document.
pub fn plan_markdown(plan: &Plan, page: &PlanPage<'_>) -> String {
    write(plan, page, Set::Markdown)
}

/// A page while it is written.
struct Writer<'p> {
    set: Set,
    page: &'p PlanPage<'p>,
    out: String,
}

impl Writer<'_> {
    fn line(&mut self, first: &str, rest: &str, text: &str) {
        if self.set == Set::Markdown {
            let _ = writeln!(self.out, "{first}{text}");
            return;
        }
        let options = textwrap::Options::new(self.page.width.max(30))
            .initial_indent(first)
            .subsequent_indent(rest)
            .break_words(false);
        let _ = writeln!(self.out, "{}", textwrap::fill(text, options));
    }

    fn heading(&mut self, text: &str) {
        let _ = match self.set {
            Set::Text => writeln!(self.out, "\n{text}"),
            Set::Markdown => writeln!(self.out, "\n## {text}\n"),
        };
    }

    fn item(&mut self, text: &str) {
        match self.set {
            Set::Text => self.line("  - ", "    ", text),
            Set::Markdown => self.line("- ", "", text),
        }
    }

    fn value(&self, id: &str, value: f64) -> String {
        let vocabulary = self.page.vocabulary;
        let Some(reading) = vocabulary.reading(id).map(|r| &vocabulary[r]) else {
            return format!("{value:.2}");
        };
        let digits = reading.decimals;
        match (reading.unit.as_str(), self.page.units) {
            ("C", Units::Us) => format!("{:.digits$} F", value * 1.8 + 32.0),
            ("kg/day", Units::Us) => format!("{:.digits$} lb/day", value / 0.453_592_37),
            ("pH", _) => format!("{value:.digits$}"),
            (unit, _) => format!("{value:.digits$} {unit}"),
        }
    }

    fn name(&self, id: &str) -> String {
        let vocabulary = self.page.vocabulary;
        vocabulary
            .reading(id)
            .map_or(id.to_owned(), |r| vocabulary[r].name.clone())
    }

    fn list(&self, list: &[(String, f64)]) -> String {
        let parts: Vec<String> = list
            .iter()
            .map(|(id, v)| format!("{} {}", self.name(id), self.value(id, *v)))
            .collect();
        parts.join(", ")
    }

    fn clock(&self, seconds: i64) -> String {
        Timestamp::from_second(seconds).map_or_else(
            |_| String::new(),
            |t| {
                t.to_zoned_datetime(self.page.zone.clone())
                    .strftime("%a %b %-d, %H:%M")
                    .to_string()
            },
        )
    }
}

fn write(plan: &Plan, page: &PlanPage<'_>, set: Set) -> String {
    let mut w = Writer {
        set,
        page,
        out: String::new(),
    };
    let farm = page.site.map_or(String::new(), |s| format!(", {s}"));
    let title = format!("Plan: {}{farm}", plan.kind.word());
    match set {
        Set::Text => w.line("", "", &title),
        Set::Markdown => w.line("# ", "", &title),
    }
    if !plan.from.is_empty() {
        let from = w.list(&plan.from);
        let to = w.list(&plan.to);
        if set == Set::Markdown {
            w.out.push('\n');
        }
        w.line("", "", &format!("From {from}. To {to}."));
    }
    if let Some(refused) = &plan.refused {
        w.heading("No plan");
        w.line("", "", &refused.reason);
        if set == Set::Markdown {
            w.out.push('\n');
        }
        w.line("", "", &refused.instead);
    }
    if !plan.steps.is_empty() {
        w.heading("Steps");
        for (i, step) in plan.steps.iter().enumerate() {
            step_lines(&mut w, i + 1, step);
        }
    }
    if !plan.total.is_empty() {
        w.heading("In all");
        for amount in &plan.total {
            let ml = amount
                .milliliters
                .map_or(String::new(), |m| format!(" ({m:.0} mL)"));
            let ounces = match page.units {
                Units::Us => format!(" ({:.1} oz)", amount.grams / 28.349_523_125),
                Units::Metric => String::new(),
            };
            w.item(&format!(
                "{:.0} g{ounces}{ml} of {}",
                amount.grams, amount.name
            ));
        }
    }
    if !plan.limits.is_empty() {
        w.heading("Limits it keeps");
        for kept in &plan.limits {
            limit_line(&mut w, kept);
        }
    }
    for (title, list) in [("Cautions", &plan.cautions), ("Also", &plan.notes)] {
        if !list.is_empty() {
            w.heading(title);
            for text in list {
                w.item(text);
            }
        }
    }
    w.out
}

fn step_lines(w: &mut Writer<'_>, number: usize, step: &Step) {
    let when = w.clock(step.at);
    match w.set {
        Set::Text => {
            let box_and_number = format!("{number:>2}. [ ] {when}  ");
            w.line(&box_and_number, "        ", &step.text);
        }
        Set::Markdown => w.line(&format!("{number}. [ ] **{when}**: "), "", &step.text),
    }
    let expected: Vec<String> = step
        .expect
        .iter()
        .map(|e| {
            let (low, high) = (w.value(&e.id, e.low), w.value(&e.id, e.high));
            let span = if low == high {
                low
            } else {
                format!("{} to {high}", first_word(&low))
            };
            format!("{} {span}", w.name(&e.id))
        })
        .collect();
    let indent = if w.set == Set::Text {
        "        "
    } else {
        "   - "
    };
    let deeper = if w.set == Set::Text { "          " } else { "" };
    if !expected.is_empty() {
        w.line(indent, deeper, &format!("Expect {}.", expected.join(", ")));
    }
    for text in step.go_on_if.iter().chain(&step.stop_if) {
        w.line(indent, deeper, text);
    }
}

fn first_word(text: &str) -> &str {
    text.split(' ').next().unwrap_or(text)
}

fn limit_line(w: &mut Writer<'_>, kept: &Kept) {
    let bound = if kept.is_floor { "at least" } else { "at most" };
    let short = |v: f64| {
        let text = if v.abs() >= 10.0 {
            format!("{v:.1}")
        } else {
            format!("{v:.3}")
        };
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    };
    let pace = if kept.set_the_pace {
        "; this one set the pace"
    } else {
        ""
    };
    let text = format!(
        "{}: {} of {bound} {} {} [{}]{pace}",
        kept.name,
        short(kept.reached),
        short(kept.limit),
        kept.unit,
        kept.source.join(", ")
    );
    w.item(&text);
}
