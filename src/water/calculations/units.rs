//! Units of kits and hardness.

use super::{Calculation, Subject};
use crate::water::masses;

const MASSES: &[&str] = &["IUPAC standard atomic weights 2021"];

pub static SUBJECT: Subject = Subject {
    title: "Units (any value may carry one: alkalinity=3dKH)",
    listed: true,
    calculations: &[
        Calculation {
            name: "as-nh3-per-n",
            help: "ammonia (NH3) for each nitrogen",
            unit: "g/g",
            keys: &[],
            source: MASSES,
            compute: |_| Ok(masses::NH3_PER_N),
        },
        Calculation {
            name: "as-nh4-per-n",
            help: "ammonium (NH4) for each nitrogen",
            unit: "g/g",
            keys: &[],
            source: MASSES,
            compute: |_| Ok(masses::NH4_PER_N),
        },
        Calculation {
            name: "as-no2-per-n",
            help: "nitrite ion (NO2) for each nitrogen",
            unit: "g/g",
            keys: &[],
            source: MASSES,
            compute: |_| Ok(masses::NO2_PER_N),
        },
        Calculation {
            name: "as-no3-per-n",
            help: "nitrate ion (NO3) for each nitrogen",
            unit: "g/g",
            keys: &[],
            source: MASSES,
            compute: |_| Ok(masses::NO3_PER_N),
        },
        Calculation {
            name: "caco3-per-meq",
            help: "calcium carbonate in a milliequivalent",
            unit: "mg/meq",
            keys: &[],
            source: MASSES,
            compute: |_| Ok(masses::CACO3_PER_MEQ),
        },
        Calculation {
            name: "caco3-per-dkh",
            help: "alkalinity or hardness in a German degree (dKH, dGH)",
            unit: "mg/L per dKH",
            keys: &[],
            source: MASSES,
            compute: |_| Ok(masses::CACO3_PER_DEGREE),
        },
        Calculation {
            name: "meq-per-dkh",
            help: "milliequivalents in a German degree",
            unit: "meq/L per dKH",
            keys: &[],
            source: MASSES,
            compute: |_| Ok(masses::MEQ_PER_DEGREE),
        },
        Calculation {
            name: "hco3-per-caco3",
            help: "bicarbonate with the alkalinity of a gram of CaCO3",
            unit: "g/g",
            keys: &[],
            source: MASSES,
            compute: |_| Ok(masses::HCO3_PER_CACO3),
        },
    ],
};
