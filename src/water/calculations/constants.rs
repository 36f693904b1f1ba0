//! Constants and restated rules: they answer by name, for the reference checks and whoever asks, and are not listed.

use super::common::{CARBONATE_PH, CARBONATE_TEMPERATURE, PRESSURE, temperature};
use super::key::Fallback;
use super::{Calculation, Key, Subject};
use crate::water::carbonate::{constants, sample as samples};
use crate::water::range::Range;
use crate::water::units::table as units;
use crate::water::{ammonia, chlorine, feed, oxygen, sulfide};

const PLUMMER: &[&str] = &["Plummer & Busenberg 1982, Geochim. Cosmochim. Acta 46:1011"];
const FROMM: &[&str] = &["Fromm, ionization constants of polyprotic acids"];
/// Constants that are held at one temperature.
const AT_25: Key = temperature(Range::new("temperature", 25.0, 25.0, "C")).or(25.0);
const OXYGEN_TEMPERATURE: Key = temperature(oxygen::TEMPERATURE);

pub static SUBJECT: Subject = Subject {
    title: "Constants",
    listed: false,
    calculations: &[
        Calculation {
            name: "ammonium-pka",
            help: "pKa of ammonium without salts",
            unit: "pK",
            keys: &[temperature(ammonia::TEMPERATURE)],
            source: &["Emerson et al. 1975, J. Fish. Res. Board Can. 32:2379-2383"],
            compute: |i| Ok(ammonia::pka(i.num("temperature")?)?),
        },
        Calculation {
            name: "carbonate-pk1",
            help: "first pK of carbonic acid",
            unit: "pK",
            keys: &[CARBONATE_TEMPERATURE],
            source: PLUMMER,
            compute: |i| Ok(constants::pk1(i.num("temperature")?)?),
        },
        Calculation {
            name: "carbonate-pk2",
            help: "second pK of carbonic acid",
            unit: "pK",
            keys: &[CARBONATE_TEMPERATURE],
            source: PLUMMER,
            compute: |i| Ok(constants::pk2(i.num("temperature")?)?),
        },
        Calculation {
            name: "carbon-dioxide-henry-pkh",
            help: "Henry's constant of carbon dioxide",
            unit: "-log10(mol/kg/atm)",
            keys: &[CARBONATE_TEMPERATURE],
            source: PLUMMER,
            compute: |i| Ok(constants::pkh(i.num("temperature")?)?),
        },
        Calculation {
            name: "calcite-pks",
            help: "solubility product of calcite",
            unit: "pK",
            keys: &[CARBONATE_TEMPERATURE],
            source: PLUMMER,
            compute: |i| Ok(constants::pks_calcite(i.num("temperature")?)?),
        },
        Calculation {
            name: "water-pkw",
            help: "ion product of water",
            unit: "pK",
            keys: &[CARBONATE_TEMPERATURE],
            source: &["Harned & Hamer 1933 (from memory)"],
            compute: |i| Ok(constants::pkw(i.num("temperature")?)?),
        },
        Calculation {
            name: "phosphoric-pk1",
            help: "first pK of phosphoric acid",
            unit: "pK",
            keys: &[AT_25],
            source: FROMM,
            compute: |_| Ok(constants::PHOSPHORIC[0]),
        },
        Calculation {
            name: "phosphoric-pk2",
            help: "second pK of phosphoric acid",
            unit: "pK",
            keys: &[AT_25],
            source: FROMM,
            compute: |_| Ok(constants::PHOSPHORIC[1]),
        },
        Calculation {
            name: "phosphoric-pk3",
            help: "third pK of phosphoric acid",
            unit: "pK",
            keys: &[AT_25],
            source: FROMM,
            compute: |_| Ok(constants::PHOSPHORIC[2]),
        },
        Calculation {
            name: "hypochlorous-pk",
            help: "pK of hypochlorous acid",
            unit: "pK",
            keys: &[AT_25],
            source: &["Morris 1966 (from memory)"],
            compute: |_| Ok(chlorine::HYPOCHLOROUS_PK),
        },
        Calculation {
            name: "hydrogen-sulfide-pk1",
            help: "first pK of hydrogen sulfide",
            unit: "pK",
            keys: &[temperature(sulfide::TEMPERATURE)],
            source: &["Hershey, Plese & Millero 1988 (from memory)"],
            compute: |i| Ok(sulfide::pk1(i.num("temperature")?)?),
        },
        Calculation {
            name: "oxygen-salinity-slope",
            help: "oxygen lost for each g/kg of salt, as a chord",
            unit: "mg/L per g/kg",
            keys: &[
                OXYGEN_TEMPERATURE,
                Key::number(
                    "salinity_to",
                    units::SALINITY,
                    Range::new("salinity_to", 0.1, 40.0, "g/L"),
                    "salinity that the chord goes to",
                ),
            ],
            source: &["Benson & Krause 1984"],
            compute: |i| {
                let (t, to) = (i.num("temperature")?, i.num("salinity_to")?);
                let full = |s| oxygen::solubility(t, s, oxygen::SEA_LEVEL_KPA);
                Ok((full(0.0)? - full(to)?) / to)
            },
        },
        Calculation {
            name: "oxygen-solubility-pressure",
            help: "oxygen in saturated water at a pressure",
            unit: "mg/L",
            keys: &[
                OXYGEN_TEMPERATURE,
                Key::number(
                    "salinity",
                    units::SALINITY,
                    oxygen::SALINITY,
                    "salinity of the water",
                )
                .or(0.0),
                Key {
                    rivals: &[],
                    fallback: Fallback::Required,
                    ..PRESSURE
                },
            ],
            source: &["Benson & Krause 1984, eqs 24 and 32"],
            compute: |i| {
                let (t, salinity) = (i.num("temperature")?, i.num("salinity")?);
                Ok(oxygen::solubility(t, salinity, i.num("pressure_kpa")?)?)
            },
        },
        Calculation {
            name: "oxygen-ml-to-mg",
            help: "mass of a milliliter of oxygen gas",
            unit: "mg/mL",
            keys: &[],
            source: &["USGS Office of Water Quality Technical Memorandum 2011.03"],
            compute: |_| Ok(oxygen::MG_PER_ML),
        },
        Calculation {
            name: "carbon-dioxide-from-bicarbonate-rule",
            help: "carbon dioxide by a rule of thumb near 25 C",
            unit: "mg/L",
            keys: &[
                CARBONATE_PH,
                Key::number(
                    "bicarbonate",
                    units::MG_PER_L,
                    Range::not_negative("bicarbonate", "mg/L"),
                    "bicarbonate as HCO3",
                ),
            ],
            source: &["Skougstad et al. 1979, USGS TWRI 5-A1 p. 280"],
            compute: |i| {
                Ok(samples::carbon_dioxide_rule(
                    i.num("ph")?,
                    i.num("bicarbonate")?,
                )?)
            },
        },
        Calculation {
            name: "tan-per-feed-constant",
            help: "total ammonia for each gram of protein fed",
            unit: "g N/g protein",
            keys: &[],
            source: &["Timmons & Ebeling, Recirculating Aquaculture (from memory)"],
            compute: |_| Ok(feed::AMMONIA_PER_PROTEIN),
        },
    ],
};
