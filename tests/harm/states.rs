//! What must hold of every state.

use gillside::assessment::Assessor;
use gillside::diagnosis::{Occasion, Verdict};
use gillside::engine::Engine;
use gillside::history::log::Row;
use gillside::knowledge::{Knowledge, When};

use super::random::{self, Days, Dice};
use super::{Page, rule_base};

/// Rows that one farm sees before the next farm.
const ROWS: usize = 100;

fn wanted() -> usize {
    std::env::var("HARM_STATES")
        .ok()
        .and_then(|n| n.parse().ok())
        .unwrap_or(20_000)
}

/// What was met on the way: a property that never had a chance to fail is none.
#[derive(Debug, Default)]
struct Met {
    states: usize,
    distress: usize,
    forbidden: usize,
    avoided: usize,
    reportable: usize,
    poison: usize,
    steady: usize,
    watch: usize,
    most_cautions: usize,
}

impl Met {
    fn add(&mut self, other: &Self) {
        self.states += other.states;
        self.distress += other.distress;
        self.forbidden += other.forbidden;
        self.avoided += other.avoided;
        self.reportable += other.reportable;
        self.poison += other.poison;
        self.steady += other.steady;
        self.watch += other.watch;
        self.most_cautions = self.most_cautions.max(other.most_cautions);
    }
}

/// One farm's states; whatever is wrong is told with the state.
fn farm(knowledge: &Knowledge, seed: u64) -> Met {
    let mut dice = Dice::new(seed);
    let mut met = Met::default();
    let site = random::site(knowledge, &mut dice);
    let occasion = if dice.chance(0.5) {
        Occasion::Review
    } else {
        Occasion::Walk
    };
    let assessor = Assessor::new(knowledge, &site, occasion);
    let mut engine = Engine::new(knowledge, &site);
    let mut time = 1_700_000_000;
    let days = Days::random(&mut dice);
    for number in 0..ROWS {
        let row = random::row(knowledge, days, time, &mut dice);
        time = row.time;
        engine.observe(&row);
        let page = Page::of(&assessor, &engine);
        let wrong = judge(&page, &row, &mut met);
        assert!(
            wrong.is_empty(),
            "farm {seed}, row {number}: {wrong:#?}\n{row:?}\n{site:?}"
        );
        met.states += 1;
    }
    met
}

#[test]
fn no_state_gets_harmful_advice() {
    let knowledge = rule_base();
    let farms = wanted().div_ceil(ROWS);
    let workers = std::thread::available_parallelism().map_or(1, usize::from);
    let mut met = Met::default();
    std::thread::scope(|scope| {
        let knowledge = &knowledge;
        let running: Vec<_> = (0..workers)
            .map(|worker| {
                scope.spawn(move || {
                    let mut met = Met::default();
                    for number in (worker..farms).step_by(workers) {
                        met.add(&farm(knowledge, u64::try_from(number).unwrap()));
                    }
                    met
                })
            })
            .collect();
        for worker in running {
            met.add(&worker.join().unwrap());
        }
    });
    println!("{met:?}");
    for (what, count) in [
        ("fish in distress", met.distress),
        ("a forbidden step", met.forbidden),
        ("a step to avoid", met.avoided),
        ("suspicion of a reportable disease", met.reportable),
        ("poison", met.poison),
        ("steady", met.steady),
        ("watch", met.watch),
    ] {
        assert!(
            count * 500 > met.states,
            "hardly any state had this, so nothing was tried: {what}, {count}"
        );
    }
}

fn judge(page: &Page<'_>, row: &Row, met: &mut Met) -> Vec<String> {
    let mut wrong = Vec::new();
    let knowledge = page.knowledge;
    let advised = page.all_steps();
    let avoid = page.avoid();
    met.avoided += usize::from(!avoid.is_empty());
    for id in &advised {
        if avoid.contains(id) {
            wrong.push(format!("{id} is both advised and under avoid"));
        }
        if knowledge.steps.iter().any(|s| s.id == *id && s.temptation) {
            wrong.push(format!("{id} is a temptation and advised"));
        }
    }
    met.forbidden += usize::from(!page.forbidden.is_empty());
    for step in &page.forbidden {
        if advised.contains(&page.id(*step)) {
            wrong.push(format!("never_if of {} holds", page.id(*step)));
        }
    }
    for caution in knowledge.cautions.iter().filter(|c| c.always) {
        if !page.cautions.contains(&caution.id.as_str()) {
            wrong.push(format!("the caution {} is missing", caution.id));
        }
    }
    met.most_cautions = met.most_cautions.max(page.cautions.len());
    wrong.extend(first_aid(page, row, met));
    wrong.extend(size(page, met));
    wrong.extend(law_and_food(page, met));
    wrong
}

fn first_aid(page: &Page<'_>, row: &Row, met: &mut Met) -> Vec<String> {
    let mut wrong = Vec::new();
    let seen = |id: &str| {
        let id = page.knowledge.vocabulary.sign(id).unwrap();
        row.signs.contains(&(id, true))
    };
    let aid = &page.advice.first_aid;
    if seen("fish-gasping") || seen("fish-dying-fast") {
        met.distress += 1;
        if aid.len() < 3 {
            wrong.push(format!("fish may die and first aid is {:?}", page.aid()));
        }
        let air = ["air-on-full", "splash-at-surface"];
        if !page.aid().iter().any(|id| air.contains(id)) {
            wrong.push(format!(
                "fish may die and there is no air in {:?}",
                page.aid()
            ));
        }
    }
    if aid.len() > 5 {
        wrong.push("first aid is too long".to_owned());
    }
    for (at, line) in aid.iter().enumerate() {
        let step = &page.knowledge[line.step];
        if step.people_first != (at == 0) {
            wrong.push(format!(
                "the line for people does not open {:?}",
                page.aid()
            ));
        }
        if step.effort > 20.0 {
            wrong.push(format!("{} takes too long for first aid", step.id));
        }
    }
    wrong
}

fn size(page: &Page<'_>, met: &mut Met) -> Vec<String> {
    let mut wrong = Vec::new();
    let aid = page.aid();
    for (when, most) in [
        (When::Now, 5),
        (When::Hours, 5),
        (When::Days, 4),
        (When::Recovery, 4),
    ] {
        let steps = page.steps(when);
        if steps.iter().filter(|s| !aid.contains(s)).count() > most {
            wrong.push(format!("too many steps: {steps:?}"));
        }
    }
    if page.review.decision.verdict == Verdict::Steady {
        met.steady += 1;
        if !page.all_steps().is_empty() || !page.avoid().is_empty() {
            wrong.push(format!("steady, and yet {:?}", page.all_steps()));
        }
    }
    if page.review.decision.verdict == Verdict::Watch {
        met.watch += 1;
        for advised in &page.advice.steps {
            let step = &page.knowledge[advised.step];
            let likely = step
                .helps
                .keys()
                .any(|c| page.review.ranking.of(*c) >= 0.25);
            if !step.looks && !likely {
                wrong.push(format!("{} on a watch page", step.id));
            }
        }
    }
    wrong
}

/// Water, fish and sludge stay on the farm under suspicion of a reportable disease; poison holds the harvest.
fn law_and_food(page: &Page<'_>, met: &mut Met) -> Vec<String> {
    const DISCHARGE: [&str; 14] = [
        "clean-solids-gently",
        "dilute-for-nitrate",
        "dilute-large-proven",
        "dilute-proven-hard",
        "dilute-slowly-salt",
        "dilute-small",
        "discard-first-filter-water",
        "drain-bed",
        "isolate-bench",
        "remove-sludge-slowly",
        "rewet-media",
        "rinse-roots",
        "seed-media",
        "thin-stock",
    ];
    let mut wrong = Vec::new();
    let acting = page.review.decision.verdict > Verdict::Watch;
    if acting && page.probability("reportable-disease-suspicion") >= 0.1 {
        met.reportable += 1;
        let hold = "hold-movements-call-authority";
        if !page.all_steps().contains(&hold) {
            wrong.push(format!(
                "nothing holds the movements: {:?}",
                page.all_steps()
            ));
        }
        if !page.avoid().contains(&"discharge-water") {
            wrong.push(format!("discharge is not under avoid: {:?}", page.avoid()));
        }
        if !page.cautions.contains(&"reportable-disease") {
            wrong.push("no word of the law on reportable disease".to_owned());
        }
        for id in page.all_steps() {
            if DISCHARGE.contains(&id) {
                wrong.push(format!("{id} lets something leave or move"));
            }
        }
    }
    let poison: f64 = [
        "pesticide-or-soap-contamination",
        "disinfectant-contamination",
        "metal-leaching",
    ]
    .iter()
    .map(|c| page.probability(c))
    .fold(0.0, f64::max);
    if poison >= 0.2 {
        met.poison += 1;
        if !page.cautions.contains(&"hold-the-harvest") {
            wrong.push("poison, and the harvest is not held".to_owned());
        }
    }
    wrong
}
