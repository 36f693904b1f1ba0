#![allow(clippy::unwrap_used)]
use gillside::{
    assessment::Assessor, diagnosis::Occasion, engine::Engine, history::log::Input, knowledge, site,
};
#[test]
fn peek() {
    let Ok(dir) = std::env::var("PEEK") else {
        return;
    };
    let upto: usize = std::env::var("LINE")
        .unwrap_or("999999".into())
        .parse()
        .unwrap();
    let k = knowledge::load(&knowledge::embedded(), &[]).unwrap();
    let species: Vec<String> = k.species.iter().map(|s| s.id.clone()).collect();
    let media: Vec<String> = k.media.iter().map(|s| s.id.clone()).collect();
    let known = site::Known {
        vocabulary: &k.vocabulary,
        species: &species,
        media: &media,
    };
    let (s, f) = site::load(std::path::Path::new(&format!("{dir}/site.toml")), &known);
    assert!(f.is_empty());
    let log = gillside::history::log::read(
        vec![Input::named(&format!("{dir}/log.csv"))],
        &k.vocabulary,
        &s,
        None,
    )
    .unwrap();
    let mut e = Engine::new(&k, &s);
    e.tell(gillside::history::memory::Memory::keeps_events);
    for r in &log.rows {
        if r.line > upto {
            break;
        }
        e.observe(r);
    }
    let a = Assessor::new(&k, &s, Occasion::Review).assess(&e, &[], None);
    println!(
        "{} none {:.2} dangers {:?}",
        a.verdict.word(),
        a.nothing_wrong,
        a.dangers
    );
    for c in a.causes.iter().take(3) {
        println!("  {:.3} {}", c.probability, c.id);
        for p in c.evidence_for.iter().chain(&c.evidence_against) {
            println!(
                "      {:+.2} {}{} {:?}",
                p.weight,
                if p.absent { "NOT " } else { "" },
                p.clause,
                p.saw.as_ref().map(|(r, s)| (&k.vocabulary[*r].id, s))
            );
        }
    }
}
