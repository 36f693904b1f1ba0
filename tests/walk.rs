//! Simulated attendants over all cases, who answer only what the case knows.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

use std::path::{Path, PathBuf};

use gillside::assessment::Assessor;
use gillside::engine::Engine;
use gillside::fault::Source;
use gillside::history::answers;
use gillside::knowledge::{self, Knowledge};
use gillside::site::{self, Known, Site};
use gillside::diagnosis::Occasion;
use gillside::walk::{Answer, Attendant, Next, Stage, Stop, Turn, Walk};

fn rule_base() -> Knowledge {
    let mut k = knowledge::load(&knowledge::embedded(), &[]).unwrap_or_else(|f| panic!("{f:?}"));
    let set = |name: &str, slot: &mut f64| {
        if let Ok(v) = std::env::var(name) { *slot = v.parse().unwrap(); }
    };
    set("ASKING", &mut k.walk.asking);
    set("STANDS", &mut k.walk.stands_out);
    set("LEAST", &mut k.walk.least_bits);
    set("TOGETHER", &mut k.walk.together);
    set("SAME", &mut k.walk.same_steps);
    let mut most = k.walk.most as f64;
    set("MOST", &mut most);
    k.walk.most = most as usize;
    let mut lines = k.walk.lines as f64;
    set("LINES", &mut lines);
    k.walk.lines = lines as usize;
    let mut told = k.walk.told as f64;
    set("TELLS", &mut told);
    k.walk.told = told as usize;
    k
}

struct Case {
    id: String,
    folder: PathBuf,
    truth: Vec<String>,
    acceptable: Vec<String>,
    urgency: String,
    negative: bool,
}

fn texts(table: &toml::Table, key: &str) -> Vec<String> {
    table.get(key).and_then(|v| v.as_array()).map_or_else(Vec::new, |a| {
        a.iter().filter_map(|v| v.as_str().map(str::to_owned)).collect()
    })
}

fn cases(half: &str) -> Vec<Case> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/cases").join(half);
    let mut folders: Vec<PathBuf> = std::fs::read_dir(root).unwrap().map(|e| e.unwrap().path()).collect();
    folders.sort();
    folders
        .into_iter()
        .map(|folder| {
            let table: toml::Table = std::fs::read_to_string(folder.join("case.toml")).unwrap().parse().unwrap();
            Case {
                id: table["id"].as_str().unwrap().to_owned(),
                truth: texts(&table, "truth"),
                acceptable: texts(&table, "acceptable"),
                urgency: table["urgency"].as_str().unwrap().to_owned(),
                negative: table.get("negative").and_then(|v| v.as_bool()).unwrap_or(false),
                folder,
            }
        })
        .collect()
}

fn read_site(knowledge: &Knowledge, folder: &Path) -> Site {
    let species: Vec<String> = knowledge.species.iter().map(|s| s.id.clone()).collect();
    let media: Vec<String> = knowledge.media.iter().map(|s| s.id.clone()).collect();
    let known = Known { vocabulary: &knowledge.vocabulary, species: &species, media: &media };
    let (site, faults) = site::load(&folder.join("site.toml"), &known);
    assert!(faults.is_empty(), "{}: {faults:?}", folder.display());
    site
}

struct Walked {
    asked: usize,
    led_after: Option<usize>,
    led: bool,
    top3: bool,
    all_led: bool,
    all_top3: bool,
    aid_after: Option<usize>,
    stop: Stop,
    slowest: std::time::Duration,
    trace: String,
}

fn walk(knowledge: &Knowledge, case: &Case) -> Walked {
    use std::fmt::Write as _;
    let site = read_site(knowledge, &case.folder);
    let text = std::fs::read_to_string(case.folder.join("answers.toml")).unwrap();
    let (known, _) = answers::read(&Source::new("answers.toml", text), &knowledge.vocabulary, &site.timezone);
    let now = known.time.unwrap_or(1_700_000_000);
    let assessor = Assessor::new(knowledge, &site, Occasion::Walk);
    let mut walk = Walk::new(assessor, Engine::new(knowledge, &site), now);
    let ok = |w: &Walk<'_>| {
        let first = &knowledge[w.review().ranking.order()[0]].id;
        case.truth.contains(first) || case.acceptable.contains(first)
    };
    let three = |w: &Walk<'_>| {
        let order = w.review().ranking.order();
        let rank = order.iter().position(|c| case.truth.contains(&knowledge[*c].id)).unwrap_or(99);
        rank < 3 || (ok(w) && rank < 4)
    };
    let attendant = Attendant { answers: &known, time: now };
    let mut led_after = None;
    let mut aid_after = None;
    let mut screens = 0;
    let mut slowest = std::time::Duration::ZERO;
    let mut trace = String::new();
    let stop = loop {
        let start = std::time::Instant::now();
        let next = walk.next();
        slowest = slowest.max(start.elapsed());
        let turn = match next {
            Next::Stop(stop) => break stop,
            Next::Vital(screen) => Turn {
                stage: Stage::Vital,
                given: screen.asks.iter().map(|a| attendant.says(*a)).filter(|g| g.answer == Answer::Seen(true)).collect(),
            },
            Next::Tell => Turn { stage: Stage::Told, given: attendant.tells(&walk) },
            Next::Ask(screen) => Turn { stage: Stage::Asked, given: screen.asks.iter().map(|a| attendant.says(*a)).collect() },
        };
        screens += 1;
        for g in &turn.given { let _ = write!(trace, " {}={}", g.ask.id(&knowledge.vocabulary), match g.answer { Answer::Number(n) => n.to_string(), Answer::Seen(b) => b.to_string(), Answer::Unknown => "?".into(), a => format!("{a:?}") }); }
        walk.take(turn);
        let r = walk.review();
        let o = r.ranking.order();
        let _ = writeln!(trace, "   -> {} {:.2}, {} {:.2}", knowledge[o[0]].id, r.ranking.of(o[0]), knowledge[o[1]].id, r.ranking.of(o[1]));
        if walk.review().decision.first_aid { aid_after.get_or_insert(screens); }
        if ok(&walk) { led_after.get_or_insert(walk.given().len()); } else { led_after = None; }
    };
    let (led, top3, asked) = (ok(&walk), three(&walk), walk.given().len());
    attendant.tell_the_rest(&mut walk);
    Walked { asked, led_after, led, top3, all_led: ok(&walk), all_top3: three(&walk), aid_after, stop, slowest, trace }
}

#[test]
fn attendants_are_led_to_the_cause() {
    let knowledge = rule_base();
    for half in ["open", "frozen"] {
        let (mut n, mut led, mut top3, mut all1, mut all3) = (0, 0, 0, 0, 0);
        let mut asked = Vec::new();
        let mut until = Vec::new();
        let mut stops = std::collections::BTreeMap::new();
        let mut slow = std::time::Duration::ZERO;
        let mut late = Vec::new();
        for case in cases(half) {
            let w = walk(&knowledge, &case);
            slow = slow.max(w.slowest);
            asked.push(w.asked);
            if case.negative { continue; }
            n += 1;
            led += usize::from(w.led); top3 += usize::from(w.top3); all1 += usize::from(w.all_led); all3 += usize::from(w.all_top3);
            until.push(w.led_after.unwrap_or(99));
            *stops.entry(format!("{:?}", w.stop).chars().take(9).collect::<String>()).or_insert(0) += 1;
            if case.urgency == "minutes" && w.aid_after.is_none_or(|a| a > 2) { late.push(format!("{} {:?}", if half == "open" { &case.id } else { "" }, w.aid_after)); }
            if half == "open" && std::env::var("CASE").is_ok_and(|c| case.id.contains(&c) && (!c.is_empty() || !w.top3)) {
                println!("== {} truth {:?} asked {} led {} top3 {} all_led {} {:?}\n{}", case.id, case.truth, w.asked, w.led, w.top3, w.all_led, w.stop, w.trace);
            }
        }
        asked.sort(); until.sort();
        println!("{half}: n {n} top1 {:.1} top3 {:.1} (all {:.1} {:.1}) asked median {} max {} mean {:.1}; led-after median {} ; stops {stops:?}; slowest {slow:?}; aid late {late:?}",
            100.0*led as f64/n as f64, 100.0*top3 as f64/n as f64, 100.0*all1 as f64/n as f64, 100.0*all3 as f64/n as f64,
            asked[asked.len()/2], asked.last().unwrap(), asked.iter().sum::<usize>() as f64/asked.len() as f64, until[until.len()/2]);
    }
}
