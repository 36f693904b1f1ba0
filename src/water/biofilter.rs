//! How much ammonia a wetted area can turn over: to about a factor of two, from how warm, acid, airy and loaded it is.

use super::range::{OutOfRange, Range};

/// Water temperatures for which the temperature factor was seen to hold (1 C to 35 C, stretched by one).
pub const TEMPERATURE: Range = Range::new("temperature", 0.0, 36.0, "C");
/// pH for which there is a pH factor.
pub const PH: Range = Range::new("ph", 5.0, 9.0, "pH");
/// Wetted area that bacteria can live on.
pub const AREA: Range = Range::not_negative("biofilter_area_m2", "m2");

/// g N/m2/day of a clean, unlimited film at 20 C. Common practice: set so that a film at 25 C, total ammonia 1.5 mg/L and
/// oxygen 6 mg/L turns over 0.5, inside the 0.2-0.55 usual on warm-water farms (Eding et al. 2006) and near the 0.56 of the
/// UVI rafts at 28 C (Rakocy et al.), both from memory.
const LARGEST_AT_20: f64 = 0.7;
/// Source: Metcalf & Eddy 2014, Table 8-14, ammonia oxidizers (from memory). A moving bed at 1 C kept 0.18 +/- 0.05 of its
/// 20 C rate (Hoang et al. 2014), where this gives 0.27; films short of oxygen hardly feel 14-27 C (Zhu & Chen 2002).
const THETA: f64 = 1.072;
/// mg/L as N. Films are first order below about 1 mg/L (Malone & Pfeiffer 2006; Ling & Chen 2005).
const HALF_AMMONIA: f64 = 1.0;
/// mg/L. Source: EPA 1975/1993 (0.3-2; from memory).
const HALF_OXYGEN: f64 = 1.3;
/// mg/L as CaCO3: half a milliequivalent (from memory).
const HALF_ALKALINITY: f64 = 25.0;
/// A film in acid water never quite stops: adapted ones were seen to work below pH 6 (from memory).
const LEAST_AT_LOW_PH: f64 = 0.1;

/// The water a film lives in.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Conditions {
    /// C (0-36).
    pub temperature: f64,
    /// 5-9.
    pub ph: f64,
    /// mg/L.
    pub dissolved_oxygen: f64,
    /// mg/L as N: a rate without it means nothing.
    pub total_ammonia: f64,
    /// mg/L as CaCO3, where known.
    pub alkalinity: Option<f64>,
    /// The film has had weeks at about this pH.
    pub adapted: bool,
}

/// Share (0-1) of the best rate at this pH.
///
/// Not adapted: 1 - 0.833 (7.2 - pH), at least 0.1 (EPA 1975, pH 6.0-7.2; from memory). Adapted: 13 % of the best per pH
/// unit, full from 7.5 (Villaverde et al. 1997, pH 5.0-8.5; from memory).
///
/// # Errors
/// [`OutOfRange`].
pub fn ph_factor(ph: f64, adapted: bool) -> Result<f64, OutOfRange> {
    let ph = PH.check(ph)?;
    let factor = if adapted {
        1.0 - 0.13 / (1.0 - 0.13) * (7.5 - ph)
    } else {
        1.0 - 0.833 * (7.2 - ph)
    };
    Ok(factor.clamp(LEAST_AT_LOW_PH, 1.0))
}

/// g N/m2/day that a film turns over.
///
/// # Errors
/// [`OutOfRange`].
pub fn areal_rate(water: &Conditions) -> Result<f64, OutOfRange> {
    let warmer = TEMPERATURE.check(water.temperature)? - 20.0;
    let share = |value: f64, half: f64, name, unit| -> Result<f64, OutOfRange> {
        let value = Range::not_negative(name, unit).check(value)?;
        Ok(value / (half + value))
    };
    let alkalinity = water.alkalinity.map_or(Ok(1.0), |alkalinity| {
        share(alkalinity, HALF_ALKALINITY, "alkalinity", "mg/L as CaCO3")
    });
    Ok(LARGEST_AT_20
        * THETA.powf(warmer)
        * ph_factor(water.ph, water.adapted)?
        * share(
            water.dissolved_oxygen,
            HALF_OXYGEN,
            "dissolved_oxygen",
            "mg/L",
        )?
        * share(
            water.total_ammonia,
            HALF_AMMONIA,
            "total_ammonia",
            "mg/L as N",
        )?
        * alkalinity?)
}

/// g N/day that this wetted area (m2) turns over.
///
/// # Errors
/// [`OutOfRange`].
pub fn capacity(area_m2: f64, water: &Conditions) -> Result<f64, OutOfRange> {
    Ok(AREA.check(area_m2)? * areal_rate(water)?)
}

#[cfg(test)]
mod tests {
    use super::*;

    const WARM: Conditions = Conditions {
        temperature: 25.0,
        ph: 7.5,
        dissolved_oxygen: 6.0,
        total_ammonia: 1.5,
        alkalinity: None,
        adapted: true,
    };

    #[test]
    fn a_warm_film_turns_over_what_it_was_set_by() {
        assert!(matches!(areal_rate(&WARM), Ok(r) if (r - 0.5).abs() < 0.02));
    }

    #[test]
    fn cold_acid_and_stale_water_slow_it() {
        let slower = [
            Conditions {
                temperature: 10.0,
                ..WARM
            },
            Conditions { ph: 6.0, ..WARM },
            Conditions {
                ph: 6.5,
                adapted: false,
                ..WARM
            },
            Conditions {
                dissolved_oxygen: 2.0,
                ..WARM
            },
            Conditions {
                alkalinity: Some(20.0),
                ..WARM
            },
        ];
        for water in slower {
            assert!(
                matches!((areal_rate(&water), areal_rate(&WARM)), (Ok(s), Ok(w)) if s < 0.9 * w)
            );
        }
    }
}
