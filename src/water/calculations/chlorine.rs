//! Chlorine and chloramine.

use super::common::VOLUME_L;
use super::{Calculation, Failure, Inputs, Key, Subject};
use crate::water::chlorine::{self, Ascorbate, Product, Sulfite, Thiosulfate};
use crate::water::units::table as units;

const ARITHMETIC: &str = "molar masses";
const GUIDE: &str =
    "AWWA field guide on the disinfection of pipelines and storage facilities, Table 7-2";

const RESIDUAL: Key = Key::number(
    "residual_chlorine",
    units::MG_PER_L,
    chlorine::RESIDUAL,
    "total residual chlorine",
);
const THIOSULFATE: Key = Key::word(
    "form",
    &["pentahydrate", "anhydrous"],
    "crystals with water, or dry",
)
.or_word("pentahydrate");
const PRODUCT: Key = Key::word(
    "product",
    &["tetrathionate", "sulfate", "field-mix-ph7"],
    "what it ends as",
)
.or_word("tetrathionate");
const ASCORBATE: Key = Key::word("form", &["acid", "sodium-salt"], "acid or salt");
const SULFITE: Key = Key::word(
    "form",
    &["bisulfite", "sulfite", "metabisulfite"],
    "which sulfite",
);

fn thiosulfate(i: &Inputs) -> Result<f64, Failure> {
    let form = match i.word("form")? {
        "anhydrous" => Thiosulfate::Anhydrous,
        _ => Thiosulfate::Pentahydrate,
    };
    let product = match i.word("product")? {
        "sulfate" => Product::Sulfate,
        "field-mix-ph7" => Product::FieldMixPh7,
        _ => Product::Tetrathionate,
    };
    Ok(chlorine::thiosulfate(form, product))
}

fn ascorbate(i: &Inputs) -> Result<f64, Failure> {
    Ok(chlorine::ascorbate(match i.word("form")? {
        "acid" => Ascorbate::Acid,
        _ => Ascorbate::SodiumSalt,
    }))
}

fn dose(i: &Inputs, per_chlorine: f64) -> Result<f64, Failure> {
    let (residual, volume) = (i.num("residual_chlorine")?, i.num("volume_l")?);
    Ok(chlorine::dose(residual, volume, per_chlorine)?)
}

pub static SUBJECT: Subject = Subject {
    title: "Chlorine and chloramine",
    listed: true,
    calculations: &[
        Calculation {
            name: "thiosulfate-per-chlorine",
            help: "sodium thiosulfate for each chlorine",
            unit: "mg/mg",
            keys: &[THIOSULFATE, PRODUCT],
            source: &[ARITHMETIC, GUIDE],
            compute: thiosulfate,
        },
        Calculation {
            name: "thiosulfate-dose",
            help: "sodium thiosulfate that takes a residual out of a volume",
            unit: "g",
            keys: &[RESIDUAL, VOLUME_L, THIOSULFATE, PRODUCT],
            source: &[ARITHMETIC, GUIDE],
            compute: |i| dose(i, thiosulfate(i)?),
        },
        Calculation {
            name: "ascorbic-acid-per-chlorine",
            help: "ascorbic acid or sodium ascorbate for each chlorine",
            unit: "mg/mg",
            keys: &[ASCORBATE],
            source: &[ARITHMETIC, GUIDE],
            compute: ascorbate,
        },
        Calculation {
            name: "ascorbic-acid-dose",
            help: "ascorbic acid or sodium ascorbate that takes a residual out",
            unit: "g",
            keys: &[RESIDUAL, VOLUME_L, ASCORBATE.or_word("sodium-salt")],
            source: &[ARITHMETIC, GUIDE],
            compute: |i| dose(i, ascorbate(i)?),
        },
        Calculation {
            name: "sulfite-per-chlorine",
            help: "a sulfite for each chlorine; sulfites strip oxygen too",
            unit: "mg/mg",
            keys: &[SULFITE],
            source: &[ARITHMETIC, GUIDE],
            compute: |i| {
                Ok(chlorine::sulfite(match i.word("form")? {
                    "bisulfite" => Sulfite::Bisulfite,
                    "metabisulfite" => Sulfite::Metabisulfite,
                    _ => Sulfite::Sulfite,
                }))
            },
        },
        Calculation {
            name: "ammonia-from-chloramine",
            help: "ammonia nitrogen that each chlorine of chloramine leaves",
            unit: "mg N/mg Cl2",
            keys: &[],
            source: &[ARITHMETIC],
            compute: |_| Ok(chlorine::AMMONIA_FROM_CHLORAMINE),
        },
        Calculation {
            name: "total-ammonia-from-chloramine",
            help: "total ammonia that a chloramine residual leaves",
            unit: "mg/L as N",
            keys: &[RESIDUAL],
            source: &[ARITHMETIC],
            compute: |i| Ok(chlorine::ammonia_left(i.num("residual_chlorine")?)?),
        },
        Calculation {
            name: "hypochlorous-fraction",
            help: "share of free chlorine that is hypochlorous acid, near 25 C",
            unit: "fraction",
            keys: &[Key::number(
                "ph",
                units::PH,
                crate::water::range::Range::new("ph", 3.0, 11.0, "pH"),
                "pH",
            )],
            source: &["Morris 1966 (from memory)"],
            compute: |i| Ok(chlorine::hypochlorous_fraction(i.num("ph")?)?),
        },
    ],
};
