//! The JSON of a review: held to its schema, to the contract's example, and to knowing no field the schema doesn't.

use std::path::{Path, PathBuf};

use serde_json::Value;

use super::harness::{demo_review, gillside};

fn schema() -> Value {
    let came = gillside(["knowledge", "schema"]).check();
    serde_json::from_str(&came.out).unwrap()
}

/// Every field of a value stands in the schema, so that none is published by accident.
fn described(value: &Value, schema: &Value, whole: &Value, at: &str) {
    let schema = match schema["$ref"].as_str() {
        Some(name) => &whole["$defs"][name.trim_start_matches("#/$defs/")],
        None => schema,
    };
    match value {
        Value::Object(fields) => {
            for (name, inner) in fields {
                let known = &schema["properties"][name];
                if known.is_null() && !schema["additionalProperties"].is_null() {
                    continue;
                }
                assert!(!known.is_null(), "{at}.{name} is not in the schema");
                described(inner, known, whole, &format!("{at}.{name}"));
            }
        }
        Value::Array(items) => {
            for item in items {
                described(item, &schema["items"], whole, at);
            }
        }
        _ => {}
    }
}

fn hold(output: &str, validator: &jsonschema::Validator, schema: &Value, name: &str) {
    for line in output.lines() {
        let value: Value = serde_json::from_str(line).unwrap();
        let errors: Vec<String> = validator
            .iter_errors(&value)
            .map(|e| format!("{}: {e}", e.instance_path()))
            .collect();
        assert!(errors.is_empty(), "{name}: {errors:?}");
        described(&value, schema, schema, name);
    }
}

fn logs(folder: &str) -> Vec<PathBuf> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests")
        .join(folder);
    let mut found: Vec<PathBuf> = std::fs::read_dir(root)
        .unwrap()
        .map(|e| e.unwrap().path())
        .filter(|p| p.join("log.csv").is_file() && p.join("site.toml").is_file())
        .collect();
    found.sort();
    found
}

#[test]
fn many_outputs_keep_to_the_schema() {
    let schema = schema();
    let validator = jsonschema::draft202012::new(&schema).unwrap();
    let farms = logs("cases/open");
    assert!(farms.len() >= 20, "only {} logs", farms.len());
    for folder in farms {
        let (site, log) = (folder.join("site.toml"), folder.join("log.csv"));
        let came = gillside([
            "review",
            log.to_str().unwrap(),
            "--site",
            site.to_str().unwrap(),
            "--replay",
            "--format",
            "json",
        ])
        .check();
        assert!(!came.out.is_empty());
        hold(
            &came.out,
            &validator,
            &schema,
            &folder.display().to_string(),
        );
    }
}

#[test]
fn odd_logs_keep_to_the_schema() {
    let schema = schema();
    let validator = jsonschema::draft202012::new(&schema).unwrap();
    let head = "time,place,ph,dissolved-oxygen,nitrite,corrects,sign,event,note,who knows\n";
    let rows = [
        "2026-03-02 07:30,tank \u{1b}1,71,1.2,<0.05,,fish-gasping;what,nothing-known,\"a, b\",x\n",
        "2026-03-02 08:30,tank 1,7.0,-3,,,,,,\n",
        "2026-03-02 09:30,,7.1,8,,,,,,\n",
        "2026-03-02 10:30,,7.2,,0.1,2026-03-02 09:30,,,,\n",
    ];
    for upto in 1..=rows.len() {
        let came = gillside(["review", "log.csv", "--format", "json"])
            .file("log.csv", format!("{head}{}", rows[..upto].concat()))
            .check();
        let value: Value = serde_json::from_str(&came.out).unwrap();
        hold(&value.to_string(), &validator, &schema, "odd");
        assert!(value["site"].is_null());
        assert!(value["log"]["problem_count"].as_u64().unwrap() > 0);
    }
}

#[test]
fn the_schema_is_one_that_refuses() {
    let schema = schema();
    let validator = jsonschema::draft202012::new(&schema).unwrap();
    let good: Value = serde_json::from_str(&demo_review(["--format", "json"]).check().out).unwrap();
    assert!(validator.is_valid(&good));
    for (path, wrong) in [
        ("/verdict", Value::from("fine")),
        ("/as_of", Value::from("2026-03-04 07:30")),
        ("/causes/0/probability", Value::from(1.2)),
        ("/causes/0/for/0/weight", Value::from(-1.0)),
        ("/causes/0/urgency", Value::from("soon")),
        ("/steps/0/when", Value::from("later")),
        ("/log/problems", Value::from("none")),
        ("/nothing_wrong", Value::Null),
    ] {
        let mut bad = good.clone();
        *bad.pointer_mut(path).unwrap() = wrong;
        assert!(!validator.is_valid(&bad), "{path}");
    }
}

#[test]
fn the_demo_in_json_says_what_the_page_says() {
    let json: Value = serde_json::from_str(&demo_review(["--format", "json"]).check().out).unwrap();
    assert_eq!(json["schema"], 1);
    assert_eq!(json["site"], "Hillfoot greenhouse 2");
    assert_eq!(json["as_of"], "2026-03-04T07:30:00Z");
    assert_eq!(json["verdict"], "act-today");
    assert_eq!(json["causes"][0]["id"], "biofilter-cold-slowed");
    assert_eq!(json["made_by"]["house_rules"], Value::Null);
    assert_eq!(json["log"]["rows_used"], 61);
    let fields: Vec<&str> = json
        .as_object()
        .unwrap()
        .keys()
        .map(String::as_str)
        .collect();
    let contract = [
        "schema",
        "made_by",
        "site",
        "as_of",
        "last_row",
        "verdict",
        "first_aid",
        "causes",
        "nothing_wrong",
        "steps",
        "avoid",
        "missing",
        "derived",
        "projections",
        "overrides",
        "cautions",
        "log",
    ];
    let order: Vec<&str> = fields
        .iter()
        .copied()
        .filter(|f| contract.contains(f))
        .collect();
    assert_eq!(order, contract, "the contract's fields, in its order");
}
