//! Carbon dioxide, inorganic carbon and pH.

use super::common::{
    ALKALINITY, CARBONATE_PH, CARBONATE_TEMPERATURE, CO2_PPM, CONDUCTIVITY, IONIC_STRENGTH,
    PHOSPHORUS, SALINITY_FOR_IONS, ionic_strength, sample,
};
use super::site_values::SiteKey;
use super::{Calculation, Key, Subject};
use crate::water::carbonate::{Sample, gas, limestone, mixture, sample as samples};
use crate::water::range::Range;
use crate::water::units::table as units;

const CONSTANTS: &str = "constants: Plummer & Busenberg 1982, Geochim. Cosmochim. Acta 46:1011";
const DAVIES: &str = "activity: Davies 1962 (from memory)";

/// The inputs of a water of which pH and alkalinity were measured.
const MEASURED: &[Key] = &[
    CARBONATE_TEMPERATURE,
    CARBONATE_PH,
    ALKALINITY,
    IONIC_STRENGTH,
    CONDUCTIVITY,
    SALINITY_FOR_IONS,
    PHOSPHORUS,
];

const CARBON_DIOXIDE: Key = Key::number(
    "carbon_dioxide",
    units::MG_PER_L,
    Range::positive("carbon_dioxide", "mg/L"),
    "dissolved carbon dioxide",
);

/// A key of one of two waters.
const fn ph_of(name: &'static str, help: &'static str) -> Key {
    Key::number(name, units::PH, crate::water::carbonate::state::PH, help)
}

const fn alkalinity_of(name: &'static str, help: &'static str) -> Key {
    Key::number(name, units::ALKALINITY, samples::ALKALINITY, help)
}

pub static SUBJECT: Subject = Subject {
    title: "Carbon dioxide, alkalinity and pH",
    listed: true,
    calculations: &[
        Calculation {
            name: "carbon-dioxide",
            help: "carbon dioxide from pH and alkalinity",
            unit: "mg/L",
            keys: MEASURED,
            source: &[CONSTANTS, DAVIES],
            compute: |i| Ok(sample(i)?.carbon_dioxide()?),
        },
        Calculation {
            name: "carbon-dioxide-mature-water",
            help: "carbon dioxide in old system water with its phosphate, to 12 %",
            unit: "mg/L",
            keys: &[
                CARBONATE_TEMPERATURE,
                CARBONATE_PH,
                ALKALINITY,
                IONIC_STRENGTH,
                CONDUCTIVITY,
                SALINITY_FOR_IONS,
                // 5-20 mg/L is what practice aims for in system water, and it is part of what is titrated.
                PHOSPHORUS.or(10.0),
            ],
            source: &[CONSTANTS, DAVIES, "10 mg/L of phosphorus: common practice"],
            compute: |i| Ok(sample(i)?.carbon_dioxide()?),
        },
        Calculation {
            name: "carbon-dioxide-brackish",
            help: "carbon dioxide in water with salt (NaCl) in it",
            unit: "mg/L",
            keys: &[
                CARBONATE_TEMPERATURE,
                CARBONATE_PH,
                ALKALINITY,
                Key::number(
                    "salt_g_per_l",
                    units::GRAMS_PER_LITER,
                    Range::new("salt_g_per_l", 0.0, 5.0, "g/L"),
                    "sodium chloride in it",
                ),
                Key {
                    rivals: &[],
                    ..IONIC_STRENGTH
                },
            ],
            source: &[CONSTANTS, DAVIES],
            compute: |i| {
                let salt =
                    i.num("salt_g_per_l")? / (crate::water::masses::NA + crate::water::masses::CL);
                let ions = match i.opt("ionic_strength") {
                    Some(known) => known,
                    None => salt + ionic_strength(i, i.num("alkalinity")?)?,
                };
                Ok(sample(i)?.with_ionic_strength(ions).carbon_dioxide()?)
            },
        },
        Calculation {
            name: "carbon-dioxide-zero-ionic-strength",
            help: "carbon dioxide with no correction for salts: 2 to 8 % high",
            unit: "mg/L",
            keys: &[CARBONATE_TEMPERATURE, CARBONATE_PH, ALKALINITY],
            source: &[CONSTANTS],
            compute: |i| Ok(sample(i)?.with_ionic_strength(0.0).carbon_dioxide()?),
        },
        Calculation {
            name: "carbon-dioxide-per-alkalinity",
            help: "factor that gives carbon dioxide when multiplied by alkalinity",
            unit: "mg/L CO2 per mg/L CaCO3",
            keys: &[CARBONATE_TEMPERATURE, CARBONATE_PH],
            source: &[CONSTANTS],
            compute: |i| {
                let (t, ph) = (i.num("temperature")?, i.num("ph")?);
                Ok(samples::carbon_dioxide_per_alkalinity(t, ph)?)
            },
        },
        Calculation {
            name: "inorganic-carbon",
            help: "carbon dioxide, bicarbonate and carbonate together",
            unit: "mmol/L",
            keys: MEASURED,
            source: &[CONSTANTS, DAVIES],
            compute: |i| Ok(1000.0 * sample(i)?.carbon()?),
        },
        Calculation {
            name: "ph-from-inorganic-carbon",
            help: "pH from alkalinity and inorganic carbon",
            unit: "pH",
            keys: &[
                CARBONATE_TEMPERATURE,
                ALKALINITY,
                Key::number(
                    "inorganic_carbon",
                    units::MILLIMOLES,
                    Range::not_negative("inorganic_carbon", "mmol/L"),
                    "inorganic carbon",
                ),
                IONIC_STRENGTH,
                CONDUCTIVITY,
                SALINITY_FOR_IONS,
            ],
            source: &[CONSTANTS, DAVIES],
            compute: |i| {
                let (t, alkalinity) = (i.num("temperature")?, i.num("alkalinity")?);
                let ions = ionic_strength(i, alkalinity)?;
                let carbon = i.num("inorganic_carbon")?;
                Ok(samples::ph_from_carbon(t, alkalinity, carbon, ions)?)
            },
        },
        Calculation {
            name: "ph-from-carbon-dioxide",
            help: "pH from alkalinity and measured carbon dioxide: a check on a probe",
            unit: "pH",
            keys: &[
                CARBONATE_TEMPERATURE,
                ALKALINITY,
                CARBON_DIOXIDE,
                IONIC_STRENGTH,
                CONDUCTIVITY,
                SALINITY_FOR_IONS,
            ],
            source: &[CONSTANTS, DAVIES],
            compute: |i| {
                let (t, alkalinity) = (i.num("temperature")?, i.num("alkalinity")?);
                let ions = ionic_strength(i, alkalinity)?;
                let dissolved = i.num("carbon_dioxide")?;
                Ok(gas::ph_from_carbon_dioxide(t, alkalinity, dissolved, ions)?)
            },
        },
        Calculation {
            name: "buffer-intensity",
            help: "base that lifts pH by one, by the slope at this pH, no gas exchange",
            unit: "meq/L per pH",
            keys: MEASURED,
            source: &[CONSTANTS, DAVIES],
            compute: |i| Ok(sample(i)?.buffer_intensity()?),
        },
        Calculation {
            name: "ph-in-air-equilibrium",
            help: "pH once carbon dioxide is in balance with air",
            unit: "pH",
            keys: &[
                CARBONATE_TEMPERATURE,
                ALKALINITY,
                CO2_PPM,
                IONIC_STRENGTH,
                CONDUCTIVITY,
                SALINITY_FOR_IONS,
            ],
            source: &[CONSTANTS, DAVIES],
            compute: ph_in_air,
        },
        Calculation {
            name: "ph-at-co2-partial-pressure",
            help: "pH at a carbon dioxide held by the fish, as air would hold it",
            unit: "pH",
            keys: &[
                CARBONATE_TEMPERATURE,
                ALKALINITY,
                Key {
                    fallback: super::key::Fallback::Required,
                    ..CO2_PPM
                },
                IONIC_STRENGTH,
                CONDUCTIVITY,
                SALINITY_FOR_IONS,
            ],
            source: &[CONSTANTS, DAVIES],
            compute: ph_in_air,
        },
        Calculation {
            name: "carbon-dioxide-in-air-equilibrium",
            help: "carbon dioxide in water in balance with air",
            unit: "mg/L",
            keys: &[CARBONATE_TEMPERATURE, CO2_PPM],
            source: &[CONSTANTS],
            compute: |i| {
                Ok(gas::carbon_dioxide(
                    i.num("temperature")?,
                    i.num("co2_ppm")?,
                )?)
            },
        },
        Calculation {
            name: "carbon-dioxide-as-air",
            help: "the air that a dissolved carbon dioxide is in balance with",
            unit: "ppm",
            keys: &[CARBONATE_TEMPERATURE, CARBON_DIOXIDE],
            source: &[CONSTANTS],
            compute: |i| {
                Ok(gas::as_air(
                    i.num("temperature")?,
                    i.num("carbon_dioxide")?,
                )?)
            },
        },
        Calculation {
            name: "ph-of-mixture-closed",
            help: "pH of two waters mixed, before any gas moves",
            unit: "pH",
            keys: &[
                CARBONATE_TEMPERATURE,
                ph_of("ph_a", "pH of the first water"),
                alkalinity_of("alkalinity_a", "alkalinity of the first water"),
                ph_of("ph_b", "pH of the second water, the makeup").site(SiteKey::MakeupPh),
                alkalinity_of("alkalinity_b", "alkalinity of the second water, the makeup")
                    .site(SiteKey::MakeupAlkalinity),
                Key::number(
                    "fraction_b",
                    units::FRACTION,
                    mixture::FRACTION,
                    "share of the second water",
                ),
            ],
            source: &[CONSTANTS, DAVIES],
            compute: |i| {
                let t = i.num("temperature")?;
                let a = Sample::new(t, i.num("ph_a")?, i.num("alkalinity_a")?);
                let b = Sample::new(t, i.num("ph_b")?, i.num("alkalinity_b")?);
                Ok(mixture::mix(&a, &b, i.num("fraction_b")?)?.ph)
            },
        },
        Calculation {
            name: "ph-with-limestone",
            help: "pH that limestone or shell holds",
            unit: "pH",
            keys: &[CARBONATE_TEMPERATURE, CO2_PPM],
            source: &[CONSTANTS, DAVIES],
            compute: |i| {
                let (t, ppm) = (i.num("temperature")?, i.num("co2_ppm")?);
                Ok(limestone::equilibrium(t, ppm)?.ph)
            },
        },
        Calculation {
            name: "alkalinity-with-limestone",
            help: "alkalinity that limestone or shell gives",
            unit: "mg/L as CaCO3",
            keys: &[CARBONATE_TEMPERATURE, CO2_PPM],
            source: &[CONSTANTS, DAVIES],
            compute: |i| {
                let (t, ppm) = (i.num("temperature")?, i.num("co2_ppm")?);
                Ok(limestone::equilibrium(t, ppm)?.alkalinity)
            },
        },
        Calculation {
            name: "calcite-saturation-index",
            help: "below 0 the water dissolves shell and limestone, above 0 it scales",
            unit: "log10",
            keys: &[
                CARBONATE_TEMPERATURE,
                CARBONATE_PH,
                ALKALINITY,
                Key::number(
                    "calcium",
                    units::MG_PER_L,
                    Range::positive("calcium", "mg/L"),
                    "calcium",
                ),
                IONIC_STRENGTH,
                CONDUCTIVITY,
                SALINITY_FOR_IONS,
            ],
            source: &["Langelier 1936", CONSTANTS, DAVIES],
            compute: |i| {
                let (water, calcium) = (sample(i)?, i.num("calcium")?);
                let least = limestone::least_ionic_strength(water.alkalinity, calcium)?;
                let known = i.opt("ionic_strength").or(i.opt("conductivity")).is_some();
                let ions = if known {
                    water.ionic_strength
                } else {
                    water.ionic_strength.max(least)
                };
                Ok(limestone::saturation_index(
                    &water.with_ionic_strength(ions),
                    calcium,
                )?)
            },
        },
    ],
};

fn ph_in_air(i: &super::Inputs) -> Result<f64, super::Failure> {
    let alkalinity = i.num("alkalinity")?;
    // The pH of the sample has no say in the balance with air.
    let water = Sample::new(i.num("temperature")?, 7.0, alkalinity)
        .with_ionic_strength(ionic_strength(i, alkalinity)?);
    Ok(gas::ph_in_air(&water, i.num("co2_ppm")?)?)
}
