//! The surface that bacteria find in a volume of media.

use super::range::{OutOfRange, Range};

/// m2 of surface in a m3 of media, in bulk: the range in print and a middle value.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Medium {
    /// Its id.
    pub kind: &'static str,
    /// What it is.
    pub name: &'static str,
    /// Low end, m2/m3.
    pub low: f64,
    /// What to count on, m2/m3.
    pub typical: f64,
    /// High end, m2/m3.
    pub high: f64,
    /// Where the figures come from.
    pub source: &'static str,
}

const fn medium(
    kind: &'static str,
    name: &'static str,
    [low, typical, high]: [f64; 3],
    source: &'static str,
) -> Medium {
    Medium {
        kind,
        name,
        low,
        typical,
        high,
        source,
    }
}

/// Media in use. Grain counts for more than kind: [`of_spheres`] gives the surface of grains of a known size.
pub static MEDIA: &[Medium] = &[
    medium(
        "pea-gravel",
        "rounded gravel of 6-12 mm",
        [200.0, 280.0, 400.0],
        "common practice; spheres of 9-18 mm at 40 % voids",
    ),
    medium(
        "coarse-gravel",
        "gravel of 15-25 mm",
        [100.0, 150.0, 200.0],
        "from memory: Somerville et al. 2014, FAO Technical Paper 589, Table 4.1",
    ),
    medium(
        "crushed-rock",
        "broken stone of 50-100 mm",
        [40.0, 55.0, 70.0],
        "from memory: Metcalf & Eddy, Wastewater Engineering, trickling filters",
    ),
    medium(
        "lava-rock",
        "volcanic tuff of 8-20 mm",
        [250.0, 300.0, 400.0],
        "from memory: Somerville et al. 2014, FAO Technical Paper 589, Table 4.1",
    ),
    medium(
        "expanded-clay",
        "burnt clay pebbles of 8-20 mm",
        [250.0, 270.0, 300.0],
        "from memory: Somerville et al. 2014, FAO Technical Paper 589, Table 4.1",
    ),
    medium(
        "coconut-fiber",
        "coconut fiber",
        [200.0, 300.0, 400.0],
        "from memory: Somerville et al. 2014, FAO Technical Paper 589, Table 4.1",
    ),
    medium(
        "coarse-sand",
        "still sand of 0.5-2 mm",
        [1800.0, 3600.0, 7200.0],
        "computed: spheres of 2, 1 and 0.5 mm at 40 % voids; a still bed clogs and wets less",
    ),
    medium(
        "fluidized-sand",
        "sand lifted by the flow, per volume of the reactor",
        [1000.0, 2000.0, 3500.0],
        "1000-3500 in a review of moving carriers in the journal Vatten (abstract read); the middle value is common practice",
    ),
    medium(
        "moving-bed-carrier",
        "tumbling plastic carriers, inside surface, bulk volume",
        [350.0, 500.0, 900.0],
        "from memory: Rusten et al. 2006",
    ),
    medium(
        "structured-plastic",
        "cross-flow plastic sheets",
        [90.0, 150.0, 240.0],
        "from memory: Metcalf & Eddy, Wastewater Engineering, trickling filters",
    ),
    medium(
        "random-plastic",
        "loose plastic rings and balls of 25-50 mm",
        [100.0, 200.0, 350.0],
        "common practice",
    ),
    medium(
        "plastic-beads",
        "floating beads of 3 mm",
        [1145.0, 1250.0, 1475.0],
        "from memory: Malone & Beecher 2000; spheres of 3 mm at 37 % voids give 1260",
    ),
    medium(
        "filter-mat",
        "stiff fiber matting",
        [200.0, 275.0, 400.0],
        "common practice",
    ),
];

/// Ids of the media, in the order of [`MEDIA`].
pub static KINDS: &[&str] = &[
    "pea-gravel",
    "coarse-gravel",
    "crushed-rock",
    "lava-rock",
    "expanded-clay",
    "coconut-fiber",
    "coarse-sand",
    "fluidized-sand",
    "moving-bed-carrier",
    "structured-plastic",
    "random-plastic",
    "plastic-beads",
    "filter-mat",
];

/// A medium by its id.
pub fn by_kind(kind: &str) -> Option<&'static Medium> {
    MEDIA.iter().find(|m| m.kind == kind)
}

/// Wetted area (m2) of a volume of media (m3) with this much surface (m2/m3).
///
/// # Errors
/// [`OutOfRange`].
pub fn wetted_area(volume_m3: f64, specific_surface: f64) -> Result<f64, OutOfRange> {
    const VOLUME: Range = Range::not_negative("volume_m3", "m3");
    const SURFACE: Range = Range::positive("specific_surface", "m2/m3");
    Ok(VOLUME.check(volume_m3)? * SURFACE.check(specific_surface)?)
}

/// Surface (m2/m3) of smooth grains of one size (mm) with this share of voids (0-1): 6 (1 - voids) / diameter.
///
/// # Errors
/// [`OutOfRange`].
pub fn of_spheres(grain_mm: f64, voids: f64) -> Result<f64, OutOfRange> {
    const GRAIN: Range = Range::positive("grain_mm", "mm");
    const VOIDS: Range = Range::new("voids", 0.0, 1.0, "");
    Ok(6.0 * (1.0 - VOIDS.check(voids)?) / (GRAIN.check(grain_mm)? / 1000.0))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_table_is_in_order_and_the_ids_are_its_own() {
        let kinds: Vec<_> = MEDIA.iter().map(|m| m.kind).collect();
        assert_eq!(kinds, KINDS);
        for m in MEDIA {
            assert!(m.low <= m.typical && m.typical <= m.high, "{}", m.kind);
        }
    }

    #[test]
    fn beads_are_as_the_arithmetic_says() {
        assert!(matches!(of_spheres(3.0, 0.37), Ok(s) if (s - 1260.0).abs() < 1.0));
    }
}
