//! The wetted area that nitrifying bacteria live on.

use super::Site;

/// Where an area comes from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum AreaFrom {
    /// The site file says it.
    Stated,
    /// Worked out from the volumes of media.
    Media,
}

/// A biofilter's area.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Area {
    /// Square meters.
    pub m2: f64,
    /// Where it comes from.
    pub from: AreaFrom,
    /// What the media volumes would give, when both are known and the larger is more than one and a half times the
    /// smaller. The page says so.
    pub disagrees_with_media: Option<f64>,
}

/// Two areas disagree when the larger is more than this many times the smaller (data contract, section 5: "by more
/// than half").
const DISAGREE: f64 = 1.5;

impl Site {
    /// The length of the longest shift, in seconds; `None` when there are none.
    pub fn longest_shift(&self) -> Option<i64> {
        self.shift.iter().map(super::Shift::length).max()
    }

    /// The biofilter's area: the stated one, else the sum over the media volumes. `specific` gives the square meters
    /// of one kind in a cubic meter of media. `None` when neither is known, or when a kind is not in the table (a sum
    /// with a part missing would be too small).
    pub fn biofilter_area(&self, specific: impl Fn(&str) -> Option<f64>) -> Option<Area> {
        let from_media = self
            .media
            .iter()
            .map(|m| specific(&m.kind).map(|per_m3| per_m3 * m.volume_l / 1000.0))
            .sum::<Option<f64>>()
            .filter(|_| !self.media.is_empty());
        match (self.biofilter_area_m2, from_media) {
            (Some(m2), media) => Some(Area {
                m2,
                from: AreaFrom::Stated,
                disagrees_with_media: media
                    .filter(|other| m2.max(*other) > DISAGREE * m2.min(*other)),
            }),
            (None, Some(m2)) => Some(Area {
                m2,
                from: AreaFrom::Media,
                disagrees_with_media: None,
            }),
            (None, None) => None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::site::Media;

    fn gravel(kind: &str) -> Option<f64> {
        (kind == "gravel").then_some(280.0)
    }

    fn site(area: Option<f64>, kinds: &[&str]) -> Site {
        Site {
            biofilter_area_m2: area,
            media: kinds
                .iter()
                .map(|k| Media {
                    kind: (*k).to_owned(),
                    volume_l: 500.0,
                })
                .collect(),
            ..Site::default()
        }
    }

    #[test]
    fn the_stated_area_wins_and_a_large_difference_is_told() {
        let area = site(Some(100.0), &["gravel"]).biofilter_area(gravel);
        assert_eq!(
            area.map(|a| (a.m2, a.from, a.disagrees_with_media)),
            Some((100.0, AreaFrom::Stated, None))
        );
        let area = site(Some(90.0), &["gravel"]).biofilter_area(gravel);
        assert_eq!(area.and_then(|a| a.disagrees_with_media), Some(140.0));
    }

    #[test]
    fn media_stand_in_and_unknown_stays_unknown() {
        let area = site(None, &["gravel", "gravel"]).biofilter_area(gravel);
        assert_eq!(area.map(|a| (a.m2, a.from)), Some((280.0, AreaFrom::Media)));
        assert_eq!(site(None, &[]).biofilter_area(gravel), None);
        assert_eq!(
            site(None, &["gravel", "straw"]).biofilter_area(gravel),
            None
        );
    }
}
