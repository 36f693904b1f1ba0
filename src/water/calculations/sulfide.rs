//! Hydrogen sulfide.

use super::common::temperature;
use super::{Calculation, Key, Subject};
use crate::water::sulfide;
use crate::water::units::table as units;

const HERSHEY: &str =
    "Hershey, Plese & Millero 1988, Geochim. Cosmochim. Acta 52:2047 (from memory)";
const TEMPERATURE: Key = temperature(sulfide::TEMPERATURE);
const PH: Key = Key::number("ph", units::PH, sulfide::PH, "pH");

pub static SUBJECT: Subject = Subject {
    title: "Hydrogen sulfide (any that can be measured is too much)",
    listed: true,
    calculations: &[
        Calculation {
            name: "hydrogen-sulfide-fraction",
            help: "share of total sulfide that is hydrogen sulfide",
            unit: "fraction",
            keys: &[TEMPERATURE, PH],
            source: &[HERSHEY],
            compute: |i| Ok(sulfide::fraction(i.num("temperature")?, i.num("ph")?)?),
        },
        Calculation {
            name: "un-ionized-hydrogen-sulfide",
            help: "hydrogen sulfide in a measured total sulfide",
            unit: "mg/L as S",
            keys: &[
                Key::number(
                    "hydrogen_sulfide",
                    units::SULFIDE,
                    sulfide::SULFIDE,
                    "total sulfide",
                ),
                TEMPERATURE,
                PH,
            ],
            source: &[HERSHEY],
            compute: |i| {
                let (total, t) = (i.num("hydrogen_sulfide")?, i.num("temperature")?);
                Ok(sulfide::un_ionized(total, t, i.num("ph")?)?)
            },
        },
    ],
};
