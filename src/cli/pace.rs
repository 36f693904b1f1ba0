//! `gillside pace`: a wish in, one correction in safe steps out.

use std::fmt;
use std::io::{self, Write};
use std::path::PathBuf;

use clap::{Args, ValueEnum};

use crate::assessment::Assessor;
use crate::course::plan::{Ground, Kind, Trouble, Wish, doubts, plan};
use crate::course::projection::Readings;
use crate::diagnosis::Occasion;
use crate::engine::{Engine, Limits};
use crate::fault::{Fault, did_you_mean};
use crate::history::log::{self, Input};
use crate::knowledge::Knowledge;
use crate::render::plan::{PlanPage, plan_json, plan_markdown, plan_text};
use crate::site::Site;
use crate::water::units;

/// Plans one correction in safe steps: how much, when, what to expect, when to stop.
///
/// Readings come from the log, or from --given. Every plan is simulated before it is shown; one that would pass a limit is
/// made slower, or refused with the reason.
#[derive(Debug, Args)]
pub struct PaceArgs {
    /// What is put right
    #[arg(value_enum)]
    pub kind: PaceKind,
    /// Where to, in the unit the reading is kept in (a unit may be written behind it, such as 75F)
    #[arg(long, value_name = "VALUE")]
    pub to: Option<String>,
    /// Logs of the farm [default: the log that the site file names]
    #[arg(long, value_name = "LOG")]
    pub log: Vec<String>,
    /// A reading taken just now, or a number of the site file, such as ph=6.4, temperature=72F, volume_l=12000
    #[arg(long, value_name = "ID=VALUE")]
    pub given: Vec<String>,
    /// What is dosed, by formula: KHCO3, CaCl2*2H2O, HCl
    #[arg(long, value_name = "NAME")]
    pub substance: Option<String>,
    /// How pure it is, percent by mass
    #[arg(long, value_name = "PERCENT", default_value_t = 100.0)]
    pub purity: f64,
    /// The reading that an exchange or a supplement is about
    #[arg(long, value_name = "ID")]
    pub reading: Option<String>,
    /// That reading in the new water, for an exchange
    #[arg(long, value_name = "VALUE")]
    pub in_makeup: Option<f64>,
    /// Liters to treat, where it is not the whole water
    #[arg(long, value_name = "LITERS")]
    pub liters: Option<f64>,
    /// The new water's total chlorine was measured, and there is none
    #[arg(long)]
    pub dechlorinated: bool,
    /// Start a filter with fish in the water
    #[arg(long)]
    pub with_fish: bool,
    /// The starting readings were confirmed by a second method
    #[arg(long)]
    pub confirmed: bool,
}

/// A kind of correction.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum PaceKind {
    /// pH, up or down
    Ph,
    /// Alkalinity, up
    Alkalinity,
    /// Temperature, up or down
    Temperature,
    /// Any reading, by water exchange
    Exchange,
    /// Chloride, against nitrite
    Chloride,
    /// Feed, cut and restarted
    Feed,
    /// Chlorine or chloramine, taken out
    Dechlorinate,
    /// Oxygen, at once
    Oxygen,
    /// A new or dead filter
    StartUp,
    /// Iron, potassium, calcium or magnesium for plants
    Supplement,
}

impl PaceKind {
    fn kind(self) -> Kind {
        match self {
            Self::Ph => Kind::Ph,
            Self::Alkalinity => Kind::Alkalinity,
            Self::Temperature => Kind::Temperature,
            Self::Exchange => Kind::Exchange,
            Self::Chloride => Kind::Chloride,
            Self::Feed => Kind::Feed,
            Self::Dechlorinate => Kind::Dechlorinate,
            Self::Oxygen => Kind::Oxygen,
            Self::StartUp => Kind::StartUp,
            Self::Supplement => Kind::Supplement,
        }
    }
}

/// How a plan is written.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum PaceFormat {
    /// For a person at the tank.
    Text,
    /// For a program.
    Json,
    /// For a document.
    Markdown,
}

/// What the command starts from.
#[derive(Debug)]
pub struct PaceWorld<'a> {
    /// The rule base.
    pub knowledge: &'a Knowledge,
    /// The site; `Site::default()` without a site file.
    pub site: &'a Site,
    /// The log the site file names, beside the site file.
    pub site_log: Option<PathBuf>,
    /// Unix seconds taken for now.
    pub now: i64,
    /// How the plan is written.
    pub format: PaceFormat,
    /// Columns of a page.
    pub width: usize,
}

/// Why there is no answer. A refusal is an answer.
#[derive(Debug)]
pub enum PaceError {
    /// Wrong usage: exit status 2.
    Usage(String),
    /// An input can't be used: exit status 3.
    Input(Vec<Fault>),
    /// Something must be known and is not: exit status 3.
    Lacks(Trouble),
    /// It could not be written: exit status 1.
    Io(io::Error),
}

impl PaceError {
    /// Exit status of the contract.
    pub fn exit_status(&self) -> u8 {
        match self {
            Self::Usage(_) => 2,
            Self::Input(_) | Self::Lacks(_) => 3,
            Self::Io(_) => 1,
        }
    }
}

impl fmt::Display for PaceError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Usage(text) => f.write_str(text),
            Self::Input(faults) => {
                for (i, fault) in faults.iter().enumerate() {
                    if i > 0 {
                        writeln!(f)?;
                    }
                    write!(f, "{fault}")?;
                }
                Ok(())
            }
            Self::Lacks(trouble) => trouble.fmt(f),
            Self::Io(error) => write!(f, "the plan can't be written: {error}"),
        }
    }
}

impl std::error::Error for PaceError {}

impl From<io::Error> for PaceError {
    fn from(error: io::Error) -> Self {
        Self::Io(error)
    }
}

impl From<Trouble> for PaceError {
    fn from(trouble: Trouble) -> Self {
        match trouble {
            Trouble::Usage(text) => Self::Usage(text),
            lacks @ Trouble::Lacks(_) => Self::Lacks(lacks),
        }
    }
}

/// Plans what is asked for and writes the plan.
///
/// # Errors
/// [`PaceError`], with its exit status.
pub fn run(args: &PaceArgs, world: &PaceWorld<'_>, out: &mut dyn Write) -> Result<(), PaceError> {
    let knowledge = world.knowledge;
    let mut site = world.site.clone();
    let mut given = Vec::new();
    for text in &args.given {
        give(text, knowledge, &mut site, &mut given)?;
    }
    let engine = read(args, world, &site)?;
    let limits = Limits::new(knowledge, &site);
    let memory = engine.as_ref().map(Engine::memory);
    let readings = Readings::new(&knowledge.vocabulary, memory, world.now).with(given);
    let mut ground = Ground::new(knowledge, &site, &limits, readings)?;
    ground.confirmed = args.confirmed;
    if let Some(engine) = &engine {
        let assessor = Assessor::new(knowledge, &site, Occasion::Review);
        ground.doubts = doubts(knowledge, &assessor.review(engine).ranking);
    }
    let kind = args.kind.kind();
    let wish = Wish {
        kind,
        to: args
            .to
            .as_deref()
            .map(|text| aim(kind, args.reading.as_deref(), text))
            .transpose()?,
        substance: args.substance.clone(),
        purity: args.purity,
        reading: args.reading.clone(),
        in_makeup: args.in_makeup,
        liters: args.liters,
        dechlorinated: args.dechlorinated,
        with_fish: args.with_fish,
    };
    let made = plan(&ground, &wish)?;
    let page = PlanPage {
        site: site.name.as_deref(),
        zone: &site.timezone,
        units: site.units,
        vocabulary: &knowledge.vocabulary,
        width: world.width,
    };
    let text = match world.format {
        PaceFormat::Text => plan_text(&made, &page),
        PaceFormat::Markdown => plan_markdown(&made, &page),
        PaceFormat::Json => format!("{}\n", plan_json(&made)),
    };
    out.write_all(text.as_bytes())?;
    Ok(())
}

/// The facts of the log; `None` where no log is named.
fn read<'k>(
    args: &PaceArgs,
    world: &PaceWorld<'k>,
    site: &Site,
) -> Result<Option<Engine<'k>>, PaceError> {
    let knowledge = world.knowledge;
    let inputs: Vec<Input> = if args.log.is_empty() {
        let own = world.site_log.iter().filter(|path| path.exists());
        own.map(|path| Input::named(&path.display().to_string()))
            .collect()
    } else {
        args.log.iter().map(|path| Input::named(path)).collect()
    };
    if inputs.is_empty() {
        return Ok(None);
    }
    let log = log::read(inputs, &knowledge.vocabulary, site, Some(world.now))
        .map_err(PaceError::Input)?;
    let mut engine = Engine::new(knowledge, site);
    if log.rows.iter().any(|r| !r.events.is_empty()) {
        engine.tell(crate::history::memory::Memory::keeps_events);
    }
    for row in &log.rows {
        engine.observe(row);
    }
    engine.advance(world.now);
    Ok(Some(engine))
}

/// A number with or without a unit, in the unit that a reading is kept in.
fn in_unit(id: &str, text: &str) -> Result<f64, PaceError> {
    let text = text.trim();
    let end = text
        .find(|c: char| !(c.is_ascii_digit() || matches!(c, '.' | '-' | '+')))
        .unwrap_or(text.len());
    let (digits, unit) = text.split_at(end);
    let value: f64 = digits
        .parse()
        .ok()
        .filter(|v: &f64| v.is_finite())
        .ok_or_else(|| {
            PaceError::Usage(format!(
                "`{}` is not a number; write one such as `6.8` or `75F`",
                crate::fault::shown(text)
            ))
        })?;
    if unit.trim().is_empty() {
        return Ok(value);
    }
    units::to_canonical(id, unit, value).map_err(|e| PaceError::Usage(e.to_string()))
}

/// The aim, in the unit of the reading it is about.
fn aim(kind: Kind, reading: Option<&str>, text: &str) -> Result<f64, PaceError> {
    let id = match kind {
        Kind::Exchange | Kind::Supplement => reading.unwrap_or(""),
        Kind::StartUp => "total-ammonia",
        Kind::Oxygen => "dissolved-oxygen",
        Kind::Dechlorinate => "residual-chlorine",
        other => other.word(),
    };
    in_unit(id, text)
}

/// Takes `id=value` as a reading, or as a number of the site file.
fn give(
    text: &str,
    knowledge: &Knowledge,
    site: &mut Site,
    given: &mut Vec<(String, f64)>,
) -> Result<(), PaceError> {
    let (id, value) = text.split_once('=').ok_or_else(|| {
        PaceError::Usage(format!(
            "`{}` is not ID=VALUE; write it like ph=6.4",
            crate::fault::shown(text)
        ))
    })?;
    let id = id.trim();
    let value = in_unit(id, value)?;
    let slot = match id {
        "volume_l" => Some(&mut site.volume_l),
        "biomass_kg" => Some(&mut site.biomass_kg),
        "feed_kg_per_day" => Some(&mut site.feed_kg_per_day),
        "feed_protein_percent" => Some(&mut site.feed_protein_percent),
        "biofilter_area_m2" => Some(&mut site.biofilter_area_m2),
        "plant_area_m2" => Some(&mut site.plant_area_m2),
        "aeration_kg_o2_per_day" => Some(&mut site.aeration_kg_o2_per_day),
        "elevation_m" => Some(&mut site.elevation_m),
        "makeup.ph" => Some(&mut site.makeup.ph),
        "makeup.alkalinity" => Some(&mut site.makeup.alkalinity),
        "makeup.chloride" => Some(&mut site.makeup.chloride),
        "makeup.temperature" => Some(&mut site.makeup.temperature),
        _ => None,
    };
    if let Some(slot) = slot {
        if value < 0.0 && id != "elevation_m" || value == 0.0 && id == "volume_l" {
            return Err(PaceError::Usage(format!(
                "`{id}` can't be {value}; give a number above zero"
            )));
        }
        *slot = Some(value);
        return Ok(());
    }
    let words = &knowledge.vocabulary;
    let Some(reading) = words.reading(id).filter(|r| !words[*r].derived) else {
        let known = words
            .readings
            .iter()
            .filter(|r| !r.derived)
            .map(|r| r.id.as_str());
        return Err(PaceError::Usage(format!(
            "no reading is called `{}`; {}",
            crate::fault::shown(id),
            did_you_mean(
                id,
                known,
                "use a reading's id or a key of the site file such as volume_l"
            )
        )));
    };
    let (low, high) = words[reading].plausible;
    if !(low..=high).contains(&value) {
        return Err(PaceError::Usage(format!(
            "`{id}` can't be {value} in water; it lies between {low} and {high} {}",
            words[reading].unit
        )));
    }
    given.push((id.to_owned(), value));
    Ok(())
}
