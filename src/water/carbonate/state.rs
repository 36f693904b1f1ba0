//! Alkalinity, inorganic carbon and pH of one water: any two give the third.
//!
//! Alkalinity in eq/L, carbon and phosphorus in mol/L. Phosphate counts as a titration to about pH 4.5 counts it: one
//! equivalent for each proton that HPO4 and PO4 take up, none for H2PO4.

use super::constants::Constants;
use crate::water::range::{OutOfRange, Range};
use crate::water::roots;

/// pH for which the system is worked out.
pub const PH: Range = Range::new("ph", 3.0, 11.0, "pH");
/// The same, for a pH that is a result.
pub const PH_AFTER: Range = PH.named("resulting pH");

/// mg/L as CaCO3 in one eq/L.
pub const CACO3_PER_EQ: f64 = 1000.0 * crate::water::masses::CACO3_PER_MEQ;

/// Shares of inorganic carbon that are carbon dioxide, bicarbonate and carbonate at this pH.
pub fn carbon_shares(k: &Constants, ph: f64) -> [f64; 3] {
    let h = 10f64.powf(-ph);
    let (one, two) = (k.k1 / h, k.k1 * k.k2 / (h * h));
    let all = 1.0 + one + two;
    [1.0 / all, one / all, two / all]
}

/// Alkalinity (eq/L) that is not carbonate: hydroxide less hydrogen ion, and phosphate.
pub fn other_alkalinity(k: &Constants, ph: f64, phosphorus: f64) -> f64 {
    let h = 10f64.powf(-ph);
    let [p1, p2, p3] = k.phosphoric;
    let (none, two, three) = (h / p1, p2 / h, p2 * p3 / (h * h));
    let phosphate = (two + 2.0 * three - none) / (1.0 + none + two + three);
    k.kw / (h * k.gamma) - h / k.gamma + phosphorus * phosphate
}

/// Alkalinity (eq/L) of water with this pH and this much carbon and phosphorus.
pub fn alkalinity(k: &Constants, ph: f64, carbon: f64, phosphorus: f64) -> f64 {
    let [_, one, two] = carbon_shares(k, ph);
    carbon * (one + 2.0 * two) + other_alkalinity(k, ph, phosphorus)
}

/// Inorganic carbon (mol/L) of water with this pH (3-11) and alkalinity.
///
/// # Errors
/// [`OutOfRange`], also when pH and alkalinity can't go together because water of that pH without any carbon has more.
pub fn carbon(k: &Constants, ph: f64, alkalinity: f64, phosphorus: f64) -> Result<f64, OutOfRange> {
    let other = other_alkalinity(k, PH.check(ph)?, phosphorus);
    let carbonate = alkalinity - other;
    // Rounding alone may leave a trace below zero, in pure water.
    if carbonate < -1e-12 {
        let least = Range {
            low: other * CACO3_PER_EQ,
            ..Range::not_negative("alkalinity", "mg/L as CaCO3 at this pH")
        };
        return Err(OutOfRange {
            value: alkalinity * CACO3_PER_EQ,
            range: least,
        });
    }
    let [_, one, two] = carbon_shares(k, ph);
    Ok(carbonate.max(0.0) / (one + 2.0 * two))
}

/// pH of water with this much alkalinity, carbon and phosphorus, wherever on 0-14 it is; for use within a search.
pub(super) fn ph_anywhere(k: &Constants, wanted: f64, carbon: f64, phosphorus: f64) -> f64 {
    roots::of_rising(0.0, 14.0, |ph| {
        alkalinity(k, ph, carbon, phosphorus) - wanted
    })
}

/// pH of water with this much alkalinity (eq/L; below zero is free acid), carbon and phosphorus (mol/L).
///
/// # Errors
/// [`OutOfRange`] when it is not within 3-11.
pub fn ph(k: &Constants, alkalinity: f64, carbon: f64, phosphorus: f64) -> Result<f64, OutOfRange> {
    PH_AFTER.check(ph_anywhere(k, alkalinity, carbon, phosphorus))
}

/// Buffer intensity (eq/L per pH): the strong base that lifts pH by one, were the slope to hold, with no gas exchange.
pub fn buffer_intensity(k: &Constants, ph: f64, carbon: f64, phosphorus: f64) -> f64 {
    let h = 10f64.powf(-ph);
    let [zero, one, two] = carbon_shares(k, ph);
    let pairs = zero * one + one * two + 4.0 * zero * two;
    let [_, p2, _] = k.phosphoric;
    let phosphate = p2 * h / (p2 + h).powi(2);
    std::f64::consts::LN_10
        * (h / k.gamma + k.kw / (h * k.gamma) + carbon * pairs + phosphorus * phosphate)
}
