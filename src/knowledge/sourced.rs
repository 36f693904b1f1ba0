//! Everything in the rule base that holds a number, with its sources.

use super::Knowledge;

/// One table of the rule base that names sources.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Sourced<'k> {
    /// What it is: `cause`, `effect`, `finding`, `step` and so on.
    pub kind: &'static str,
    /// The id of the entry it belongs to.
    pub id: &'k str,
    /// Keys of its sources.
    pub source: &'k [String],
}

/// Everything that names sources, in the order of the rule base.
pub fn sourced(knowledge: &Knowledge) -> Vec<Sourced<'_>> {
    let k = knowledge;
    let mut all = Vec::new();
    let mut add = |kind, id, source| all.push(Sourced { kind, id, source });
    for r in &k.vocabulary.readings {
        add("reading", r.id.as_str(), r.source.as_slice());
    }
    for s in &k.vocabulary.signs {
        add("sign", &s.id, &s.source);
    }
    for e in &k.vocabulary.events {
        add("event", &e.id, &e.source);
    }
    for f in &k.findings {
        add("finding", &f.id, &f.source);
    }
    for c in &k.causes {
        add("cause", &c.id, &c.source);
        for t in &c.triggers {
            add("trigger of", &c.id, &t.source);
        }
        for e in &c.effects {
            add("effect of", &c.id, &e.source);
        }
    }
    for s in &k.steps {
        add("step", &s.id, &s.source);
    }
    for c in &k.cautions {
        add("caution", &c.id, &c.source);
    }
    for r in &k.rounds {
        add("round", &r.id, &r.source);
    }
    for s in &k.species {
        for source in s.sources.values() {
            add("limits of", &s.id, source);
        }
    }
    for m in &k.media {
        add("media", &m.id, &m.source);
    }
    all
}

/// One source, and what rests on it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SourceUse<'k> {
    /// Its key.
    pub key: String,
    /// What rests on it, also in part.
    pub entries: Vec<Sourced<'k>>,
}

/// How well the rule base is sourced.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Coverage<'k> {
    /// Tables that name sources.
    pub entries: usize,
    /// Those that rest on a publication, also in part.
    pub published: usize,
    /// Those that rest on nothing but memory.
    pub from_memory_only: usize,
    /// Every source, the most used first; those that nothing rests on last.
    pub uses: Vec<SourceUse<'k>>,
}

/// Counts what rests on what.
pub fn coverage(knowledge: &Knowledge) -> Coverage<'_> {
    let all = sourced(knowledge);
    let published = |s: &Sourced<'_>| {
        s.source
            .iter()
            .any(|key| knowledge.references.iter().any(|r| r.key == *key))
    };
    let mut keys: Vec<String> = knowledge.references.iter().map(|r| r.key.clone()).collect();
    keys.extend(all.iter().flat_map(|s| s.source).cloned());
    keys.sort_unstable();
    keys.dedup();
    let mut uses: Vec<SourceUse<'_>> = keys
        .into_iter()
        .map(|key| SourceUse {
            entries: all
                .iter()
                .filter(|s| s.source.contains(&key))
                .cloned()
                .collect(),
            key,
        })
        .collect();
    uses.sort_by_key(|u| std::cmp::Reverse(u.entries.len()));
    Coverage {
        entries: all.len(),
        published: all.iter().filter(|s| published(s)).count(),
        from_memory_only: all
            .iter()
            .filter(|s| s.source.iter().all(|key| key == "from-memory"))
            .count(),
        uses,
    }
}
