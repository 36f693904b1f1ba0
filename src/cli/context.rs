//! What every command starts from: the rule base, the site, and what is taken for now.

use std::path::{Path, PathBuf};

use jiff::Timestamp;

use super::args::{Common, Format};
use super::stop::Stop;
use crate::fault::{Fault, Source};
use crate::history::log;
use crate::knowledge::{self, Knowledge};
use crate::site::{self, Known, Site};
use crate::water::calculations::SiteValues;

/// The rule base, the site, the clock.
#[derive(Debug)]
pub(super) struct Context {
    pub knowledge: Knowledge,
    /// [`Site::default`] when there is no site file.
    pub site: Site,
    /// The site file, where there is one.
    pub site_file: Option<PathBuf>,
    /// What is taken for now, unix seconds.
    pub now: i64,
    /// `--clock` was given.
    pub clock_given: bool,
}

/// What a site file is called when nobody says.
const SITE_FILE: &str = "site.toml";
/// What the folder of house rules beside it is called.
const HOUSE_RULES: &str = "house-rules";

impl Context {
    /// Reads rule base, house rules, site and clock.
    pub fn load(common: &Common) -> Result<Self, Stop> {
        let site_file = site_file(common);
        let knowledge = rule_base(common, site_file.as_deref())?;
        let site = match &site_file {
            Some(path) => read_site(path, &knowledge)?,
            None => Site::default(),
        };
        let mut context = Self {
            knowledge,
            site,
            site_file,
            now: Timestamp::now().as_second(),
            clock_given: common.clock.is_some(),
        };
        if let Some(text) = &common.clock {
            context.now = context.time("--clock", text)?;
        }
        Ok(context)
    }

    /// A time given on the command line, in the site's zone where it says none.
    pub fn time(&self, option: &str, text: &str) -> Result<i64, Stop> {
        log::read_time(text, &self.site.timezone).map_err(|fault| {
            Stop::usage(Fault {
                reason: format!("`{option}`: {}", fault.reason),
                ..fault
            })
        })
    }

    /// A path that the site file names: it is meant from the site file's folder.
    pub fn beside_site(&self, path: &Path) -> PathBuf {
        match self.site_file.as_deref().and_then(Path::parent) {
            Some(folder) => folder.join(path),
            None => path.to_path_buf(),
        }
    }

    /// What the site knows, for single calculations.
    pub fn site_values(&self) -> SiteValues {
        let site = &self.site;
        let area = site.biofilter_area(|kind| self.knowledge.media_m2_per_m3(kind));
        SiteValues {
            salinity: None,
            elevation_m: site.elevation_m,
            volume_l: site.volume_l,
            biomass_kg: site.biomass_kg,
            feed_kg_per_day: site.feed_kg_per_day,
            feed_protein_percent: site.feed_protein_percent,
            biofilter_area_m2: area.map(|area| area.m2),
            plant_area_m2: site.plant_area_m2,
            makeup_ph: site.makeup.ph,
            makeup_alkalinity: site.makeup.alkalinity,
            makeup_temperature: site.makeup.temperature,
        }
    }
}

fn rule_base(common: &Common, site_file: Option<&Path>) -> Result<Knowledge, Stop> {
    let Some((folder, files)) = house_rules(common, site_file)? else {
        return knowledge::shipped().map_err(Stop::Rules);
    };
    let mut base = knowledge::load(&knowledge::embedded(), &files).map_err(Stop::Rules)?;
    base.house_rules = Some(folder);
    Ok(base)
}

/// The folder of house rules and its files, where there are any.
pub(super) fn house_rules(
    common: &Common,
    site_file: Option<&Path>,
) -> Result<Option<(String, Vec<Source>)>, Stop> {
    let folder = common.house_rules.clone().or_else(|| {
        let beside = site_file?.parent()?.join(HOUSE_RULES);
        beside.is_dir().then_some(beside)
    });
    let Some(folder) = folder else {
        return Ok(None);
    };
    let files = knowledge::folder(&folder).map_err(|fault| Stop::Rules(vec![fault]))?;
    Ok((!files.is_empty()).then(|| (folder.display().to_string(), files)))
}

/// The site file that is named, or the one that is here.
pub(super) fn site_file(common: &Common) -> Option<PathBuf> {
    common.site.clone().or_else(|| {
        let here = PathBuf::from(SITE_FILE);
        here.is_file().then_some(here)
    })
}

fn read_site(path: &Path, knowledge: &Knowledge) -> Result<Site, Stop> {
    let species: Vec<String> = knowledge.species.iter().map(|s| s.id.clone()).collect();
    let media: Vec<String> = knowledge.media.iter().map(|m| m.id.clone()).collect();
    let known = Known {
        vocabulary: &knowledge.vocabulary,
        species: &species,
        media: &media,
    };
    match site::load(path, &known) {
        (site, faults) if faults.is_empty() => Ok(site),
        (_, faults) => Err(Stop::Input(faults)),
    }
}

/// Refuses a format that a command does not have.
pub(super) fn only(format: Format, command: &str, has: &[Format]) -> Result<(), Stop> {
    if has.contains(&format) {
        return Ok(());
    }
    let names: Vec<&str> = has.iter().map(|f| f.word()).collect();
    Err(Stop::usage(Fault::whole(
        "no-such-format",
        format!("`{command}` can't be written as {}", format.word()),
        format!("use --format {}", names.join(" or ")),
    )))
}
