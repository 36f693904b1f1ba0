//! Nitrite against chloride, and salt.

use super::common::{SALT, VOLUME_M3, salt};
use super::key::Also;
use super::{Calculation, Failure, Key, Subject};
use crate::water::nitrite::{self, Use};
use crate::water::range::Range;
use crate::water::units::table as units;

const SRAC: &str = "Durborow, Crosby & Brunson 1997, SRAC 462";
const ARITHMETIC: &str = "molar masses";

const CHLORIDE: Key = Key::number("chloride", units::MG_PER_L, nitrite::CHLORIDE, "chloride");
const NITRITE: Key = Key::number(
    "nitrite",
    units::NITRITE,
    Range::positive("nitrite", "mg/L as N"),
    "nitrite",
);
const RATIO: Key = Key::number(
    "ratio_cl_to_no2",
    units::CHLORIDE_PER_NITRITE,
    nitrite::RATIO,
    "chloride wanted for each nitrite ion",
);

const AS_NITRITE: &[Also] = &[Also {
    name: "nitrite",
    units: units::NITRITE,
    scale: 1.0,
}];
const NITRITE_N: Key =
    Key::number("nitrite_n", units::NITRITE, nitrite::NITRITE, "nitrite").also(AS_NITRITE);

pub static SUBJECT: Subject = Subject {
    title: "Nitrite and chloride (ratios are to nitrite ion unless they say nitrogen)",
    listed: true,
    calculations: &[
        Calculation {
            name: "chloride-per-nitrite",
            help: "chloride that a water has for each nitrite ion",
            unit: "mg Cl per mg NO2",
            keys: &[CHLORIDE, NITRITE],
            source: &[ARITHMETIC],
            compute: |i| Ok(nitrite::ratio(i.num("chloride")?, i.num("nitrite")?)?),
        },
        Calculation {
            name: "chloride-per-nitrite-nitrogen",
            help: "chloride that a water has for each nitrite-nitrogen",
            unit: "mg Cl per mg N",
            keys: &[CHLORIDE, NITRITE],
            source: &[ARITHMETIC],
            compute: |i| {
                Ok(nitrite::ratio_to_nitrogen(
                    i.num("chloride")?,
                    i.num("nitrite")?,
                )?)
            },
        },
        Calculation {
            name: "chloride-to-nitrite-ratio",
            help: "chloride to have for each nitrite ion, by whom it is to protect",
            unit: "mg Cl per mg NO2",
            keys: &[Key::word(
                "use",
                &["catfish", "sensitive", "least"],
                "whom it protects; sensitive: salmonids, ill fish",
            )],
            source: &[SRAC, "sensitive and least: from memory"],
            compute: |i| {
                Ok(nitrite::wanted_ratio(match i.word("use")? {
                    "catfish" => Use::Catfish,
                    "sensitive" => Use::Sensitive,
                    _ => Use::Least,
                }))
            },
        },
        Calculation {
            name: "chloride-wanted",
            help: "chloride to have at this nitrite",
            unit: "mg/L",
            keys: &[NITRITE_N, RATIO.or(10.0)],
            source: &[SRAC],
            compute: |i| {
                let (nitrite, ratio) = (i.num("nitrite_n")?, i.num("ratio_cl_to_no2")?);
                Ok(nitrite::chloride_wanted(nitrite, ratio)?)
            },
        },
        Calculation {
            name: "salt-for-nitrite",
            help: "salt that brings chloride to what this nitrite calls for",
            unit: "g",
            keys: &[
                NITRITE_N,
                CHLORIDE,
                RATIO.or(10.0),
                VOLUME_M3,
                SALT.or_word("NaCl"),
            ],
            source: &[SRAC, ARITHMETIC],
            compute: |i| {
                let (nitrite, chloride) = (i.num("nitrite_n")?, i.num("chloride")?);
                let (ratio, volume) = (i.num("ratio_cl_to_no2")?, i.num("volume_m3")?);
                Ok(nitrite::salt_needed(
                    nitrite,
                    chloride,
                    ratio,
                    volume,
                    salt(i)?,
                )?)
            },
        },
        Calculation {
            name: "salt-per-acre-foot",
            help: "salt that lifts chloride by so much in an acre-foot",
            unit: "lb",
            keys: &[CHLORIDE, SALT],
            source: &[ARITHMETIC],
            compute: |i| Ok(nitrite::pounds_per_acre_foot(i.num("chloride")?, salt(i)?)?),
        },
        Calculation {
            name: "chloride-in-salt",
            help: "chloride in a gram of a salt",
            unit: "g/g",
            keys: &[SALT],
            source: &[ARITHMETIC],
            compute: |i| Ok(salt(i)?.chloride()),
        },
        Calculation {
            name: "cation-added-per-chloride",
            help: "sodium, potassium, calcium or magnesium that comes with each chloride",
            unit: "g/g",
            keys: &[
                SALT,
                Key::word("cation", nitrite::CATIONS, "the salt's cation").optional(),
            ],
            source: &[ARITHMETIC],
            compute: |i| {
                let salt = salt(i)?;
                match i.word("cation") {
                    Ok(asked) if asked != salt.cation => Err(Failure::NotAWord {
                        key: "cation",
                        text: asked.to_owned(),
                        takes: nitrite::cation_of(salt),
                    }),
                    _ => Ok(salt.cation_per_chloride()),
                }
            },
        },
    ],
};
