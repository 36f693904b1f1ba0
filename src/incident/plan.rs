//! The steps of a paced correction, from the JSON that `gillside pace --format json` writes (data contract, section 9).

use jiff::tz::TimeZone;
use serde_json::Value;

use super::model::PlanStep;
use crate::fault::{Fault, shown};
use crate::history::log::read_time;

/// The steps of a plan.
///
/// # Errors
/// The text is no plan, or a plan that was refused.
pub fn plan_of(text: &str) -> Result<Vec<PlanStep>, Fault> {
    let wrong = |reason: String| {
        Fault::whole(
            "not-a-plan",
            reason,
            "give what `gillside pace … --format json` writes",
        )
    };
    let plan: Value = serde_json::from_str(text).map_err(|e| wrong(format!("not JSON: {e}")))?;
    if let Some(reason) = plan["refused"]["reason"].as_str() {
        return Err(Fault::whole(
            "plan-refused",
            format!("the plan was refused: {}", shown(reason)),
            plan["refused"]["instead"]
                .as_str()
                .unwrap_or("ask for another plan"),
        ));
    }
    let steps = plan["steps"]
        .as_array()
        .filter(|steps| !steps.is_empty())
        .ok_or_else(|| wrong("the plan has no steps".to_owned()))?;
    steps
        .iter()
        .map(|step| {
            let at = step["at"].as_str().unwrap_or_default();
            let at = read_time(at, &TimeZone::UTC).map_err(|f| wrong(f.reason))?;
            Ok(PlanStep {
                at,
                text: words(step),
                go_on_if: texts(&step["go_on_if"]),
                stop_if: texts(&step["stop_if"]),
                done: None,
                by: None,
            })
        })
        .collect()
}

fn texts(value: &Value) -> Vec<String> {
    let list = value.as_array().into_iter().flatten();
    list.filter_map(|v| v.as_str().map(str::to_owned)).collect()
}

/// What to do: the plan's own sentence, else its amounts.
fn words(step: &Value) -> String {
    let mut parts: Vec<String> = step["text"]
        .as_str()
        .map(str::to_owned)
        .into_iter()
        .collect();
    if parts.is_empty() {
        for amount in step["amounts"].as_array().into_iter().flatten() {
            if let (Some(substance), Some(grams)) =
                (amount["substance"].as_str(), amount["grams"].as_f64())
            {
                parts.push(format!("add {grams} g {substance}"));
            }
        }
        if let Some(liters) = step["liters"].as_f64() {
            parts.push(format!("exchange {liters} L"));
        }
        if let Some(feed) = step["feed_kg"].as_f64() {
            parts.push(format!("feed {feed} kg a day"));
        }
    }
    if let Some(expected) = step["expect"].as_object().filter(|e| !e.is_empty()) {
        let each: Vec<String> = expected
            .iter()
            .filter_map(|(id, range)| {
                let (low, high) = (range[0].as_f64()?, range[1].as_f64()?);
                Some(format!("{id} {low} to {high}"))
            })
            .collect();
        parts.push(format!("expect {}", each.join(", ")));
    }
    parts.join("; ")
}

#[cfg(test)]
mod tests {
    use super::plan_of;

    #[test]
    fn a_plan_becomes_steps() {
        let text = r#"{"steps": [{"at": "2026-03-04T08:00:00Z", "amounts": [{"substance": "KHCO3", "grams": 240.0}],
            "liters": null, "feed_kg": null, "expect": {"ph": [6.4, 6.7]}, "go_on_if": ["pH is below 6.7"],
            "stop_if": ["fish gasp"]}]}"#;
        let steps = plan_of(text).unwrap_or_default();
        assert_eq!(steps.len(), 1);
        assert_eq!(steps[0].at, 1_772_611_200);
        assert_eq!(steps[0].text, "add 240 g KHCO3; expect ph 6.4 to 6.7");
        assert_eq!(steps[0].stop_if, ["fish gasp"]);
    }

    #[test]
    fn what_is_no_plan_is_said() {
        for (text, code) in [
            ("", "not-a-plan"),
            ("{}", "not-a-plan"),
            (r#"{"steps": []}"#, "not-a-plan"),
            (r#"{"steps": [{"at": "soon"}]}"#, "not-a-plan"),
            (
                r#"{"steps": [], "refused": {"reason": "too fast"}}"#,
                "plan-refused",
            ),
        ] {
            assert_eq!(plan_of(text).err().map(|f| f.code), Some(code), "{text}");
        }
    }
}
