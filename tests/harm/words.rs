//! No medicine is named as advice, and every line can be read aloud.

use super::rule_base;

/// Medicines, drugs and the substances of baths. They may be named under avoid, in cautions, in questions and in what
/// explains a cause; never in what to do.
const DRUGS: [&str; 37] = [
    "acriflavine",
    "anesthetic",
    "anaesthetic",
    "antibiotic",
    "antiparasitic",
    "benzalkonium",
    "bronopol",
    "chloramine-t",
    "clove oil",
    "copper sulfate",
    "copper sulphate",
    "dewormer",
    "dimetridazole",
    "emamectin",
    "enrofloxacin",
    "erythromycin",
    "florfenicol",
    "formaldehyde",
    "formalin",
    "ivermectin",
    "kanamycin",
    "levamisole",
    "malachite",
    "medicated",
    "methylene blue",
    "metronidazole",
    "nitrofuran",
    "organophosphate",
    "oxolinic",
    "oxytetracycline",
    "peracetic",
    "permanganate",
    "peroxide",
    "praziquantel",
    "salt bath",
    "sulfadi",
    "trichlorfon",
];

#[test]
fn no_medicine_is_named_as_advice() {
    let knowledge = rule_base();
    let mut wrong = Vec::new();
    for step in knowledge.steps.iter().filter(|s| !s.temptation) {
        let said = format!("{} {} {}", step.text, step.detail, step.check_first).to_lowercase();
        for drug in DRUGS.iter().filter(|d| said.contains(**d)) {
            wrong.push(format!("{}: {drug}", step.id));
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
    // The list of words can find something: what must not be given is named where it is warned against.
    let warned = |d: &&&str| {
        let mut steps = knowledge.steps.iter();
        steps.any(|s| s.avoid_text.to_lowercase().contains(**d))
    };
    assert!(DRUGS.iter().filter(warned).count() >= 2);
}

#[test]
fn steps_read_well_aloud() {
    let knowledge = rule_base();
    let mut wrong = Vec::new();
    for step in &knowledge.steps {
        let said: [(&str, &str, usize); 2] = [
            ("text", &step.text, 145),
            ("avoid_text", &step.avoid_text, 185),
        ];
        for (key, text, most) in said {
            if text.len() > most {
                wrong.push(format!("{} {key} is {} long", step.id, text.len()));
            }
            if !text.is_empty() && !text.ends_with('.') {
                wrong.push(format!("{} {key} is no sentence", step.id));
            }
            for other in knowledge.steps.iter().map(|s| &s.id) {
                if other.contains('-') && text.contains(other.as_str()) {
                    wrong.push(format!("{} {key} names the id {other}", step.id));
                }
            }
        }
        if !step.avoid_text.is_empty() && !step.avoid_text.starts_with("Do not ") {
            wrong.push(format!(
                "{} avoid_text does not say what not to do",
                step.id
            ));
        }
    }
    for caution in &knowledge.cautions {
        if caution.text.len() > 230 {
            wrong.push(format!(
                "caution {} is {} long",
                caution.id,
                caution.text.len()
            ));
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
}

#[test]
fn one_line_for_people_opens_first_aid() {
    let knowledge = rule_base();
    let lines: Vec<&str> = knowledge
        .steps
        .iter()
        .filter(|s| s.people_first)
        .map(|s| s.id.as_str())
        .collect();
    assert_eq!(lines, ["people-first"]);
    let first_about: Vec<&str> = knowledge
        .cautions
        .iter()
        .map(|c| c.about.as_str())
        .collect();
    let people = first_about.iter().rposition(|a| *a == "people").unwrap();
    let others = first_about.iter().position(|a| *a != "people").unwrap();
    assert!(
        people < others,
        "cautions for people come first: {first_about:?}"
    );
}
