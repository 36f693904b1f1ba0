//! What a biofilter can turn over, and its surface.

use super::common::{
    DISSOLVED_OXYGEN, FEED, PROTEIN, TOTAL_AMMONIA, VOLUME_M3, YES_NO, temperature,
};
use super::key::Fallback;
use super::site_values::SiteKey;
use super::{Calculation, Failure, Inputs, Key, Subject};
use crate::water::biofilter::{self, Conditions};
use crate::water::carbonate::sample;
use crate::water::feed;
use crate::water::media;
use crate::water::range::Range;
use crate::water::units::table as units;

const CAPACITY: &[&str] = &[
    "level: common practice, set between Eding et al. 2006 and Rakocy et al. (both from memory)",
    "temperature: Metcalf & Eddy 2014, Table 8-14 (from memory); Hoang et al. 2014",
    "pH: EPA 1975, and Villaverde et al. 1997 when adapted (both from memory)",
    "oxygen: EPA 1975/1993 (from memory)",
    "ammonia: first order below 1 mg/L, Malone & Pfeiffer 2006, Ling & Chen 2005",
];

const AREA: Key = Key::number(
    "biofilter_area_m2",
    units::AREA,
    Range::positive("biofilter_area_m2", "m2"),
    "wetted surface that bacteria can live on",
)
.site(SiteKey::BiofilterArea);

/// The water around a film.
const WATER: [Key; 6] = [
    temperature(biofilter::TEMPERATURE),
    Key::number("ph", units::PH, biofilter::PH, "pH"),
    DISSOLVED_OXYGEN,
    TOTAL_AMMONIA.or(1.0),
    Key::number(
        "alkalinity",
        units::ALKALINITY,
        sample::ALKALINITY,
        "total alkalinity",
    )
    .optional(),
    Key::word("adapted", YES_NO, "weeks at about this pH").or_word("yes"),
];

fn water(i: &Inputs) -> Result<Conditions, Failure> {
    Ok(Conditions {
        temperature: i.num("temperature")?,
        ph: i.num("ph")?,
        dissolved_oxygen: i.num("dissolved_oxygen")?,
        total_ammonia: i.num("total_ammonia")?,
        alkalinity: i.opt("alkalinity"),
        adapted: i.yes("adapted")?,
    })
}

const KIND: Key = Key::word("kind", media::KINDS, "kind of media");

fn surface(i: &Inputs) -> Result<f64, Failure> {
    let medium = media::by_kind(i.word("kind")?);
    Ok(medium.ok_or(Failure::Undeclared { key: "kind" })?.typical)
}

pub static SUBJECT: Subject = Subject {
    title: "Biofilter",
    listed: true,
    calculations: &[
        Calculation {
            name: "nitrification-rate",
            help: "nitrogen that a square meter of film turns over, to a factor of two",
            unit: "g N/m2/day",
            keys: &WATER,
            source: CAPACITY,
            compute: |i| Ok(biofilter::areal_rate(&water(i)?)?),
        },
        Calculation {
            name: "nitrification-capacity",
            help: "nitrogen that the whole filter turns over, to a factor of two",
            unit: "g N/day",
            keys: &[
                AREA, WATER[0], WATER[1], WATER[2], WATER[3], WATER[4], WATER[5],
            ],
            source: CAPACITY,
            compute: |i| {
                Ok(biofilter::capacity(
                    i.num("biofilter_area_m2")?,
                    &water(i)?,
                )?)
            },
        },
        Calculation {
            name: "areal-tan-load",
            help: "total ammonia of the feed for each square meter of film",
            unit: "g N/m2/day",
            keys: &[FEED, PROTEIN, AREA],
            source: &["Timmons & Ebeling, Recirculating Aquaculture (from memory)"],
            compute: |i| {
                let nitrogen = feed::ammonia(i.num("feed_kg_per_day")?, i.num("protein_percent")?)?;
                Ok(nitrogen / i.num("biofilter_area_m2")?)
            },
        },
        Calculation {
            name: "media-surface",
            help: "surface of a kind of media in bulk",
            unit: "m2/m3",
            keys: &[KIND],
            source: &["a table of print and practice: `water::media`"],
            compute: surface,
        },
        Calculation {
            name: "media-area",
            help: "wetted area of a volume of media",
            unit: "m2",
            keys: &[
                KIND,
                Key {
                    site: None,
                    fallback: Fallback::Required,
                    help: "volume of the media",
                    ..VOLUME_M3
                },
            ],
            source: &["a table of print and practice: `water::media`"],
            compute: |i| Ok(media::wetted_area(i.num("volume_m3")?, surface(i)?)?),
        },
        Calculation {
            name: "grain-surface",
            help: "surface of smooth grains of one size",
            unit: "m2/m3",
            keys: &[
                Key::number(
                    "grain_mm",
                    units::MILLIMETERS,
                    Range::positive("grain_mm", "mm"),
                    "diameter of a grain",
                ),
                Key::number(
                    "voids",
                    units::FRACTION,
                    Range::new("voids", 0.0, 1.0, ""),
                    "share of empty space",
                )
                .or(0.4),
            ],
            source: &["geometry of spheres"],
            compute: |i| Ok(media::of_spheres(i.num("grain_mm")?, i.num("voids")?)?),
        },
    ],
};
