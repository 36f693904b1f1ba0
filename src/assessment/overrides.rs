//! What a farm has changed in the limits that are shipped: its own comfort bands.

use super::Override;
use crate::engine::Limits;
use crate::knowledge::{Knowledge, Side};
use crate::site::Site;

/// The site's own targets where they differ from what would hold without them.
pub(super) fn overrides(knowledge: &Knowledge, site: &Site) -> Vec<Override> {
    let plain = Site {
        targets: std::collections::BTreeMap::new(),
        ..site.clone()
    };
    let shipped = Limits::new(knowledge, &plain);
    let mut list = Vec::new();
    for (reading, band) in &site.targets {
        let about = &knowledge.vocabulary[*reading];
        for (side, word, own) in [
            (Side::Low, "low", band.low),
            (Side::High, "high", band.high),
        ] {
            let (Some(own), before) = (own, shipped.target(*reading, side)) else {
                continue;
            };
            if before == Some(own) {
                continue;
            }
            let number = |value: f64| format!("{value} {}", about.unit);
            list.push(Override {
                id: format!("target.{}.{word}", about.id),
                from: before.map_or_else(|| "none".to_owned(), number),
                to: number(own),
                loosens: before.is_some_and(|b| match side {
                    Side::Low => own < b,
                    Side::High => own > b,
                }),
            });
        }
    }
    list
}

/// What is odd about the site file: an area that its media do not bear out.
pub(super) fn site_notes(knowledge: &Knowledge, site: &Site) -> Vec<String> {
    let area = site.biofilter_area(|kind| knowledge.media_m2_per_m3(kind));
    area.and_then(|area| Some((area.m2, area.disagrees_with_media?)))
        .map(|(stated, media)| {
            format!(
                "The biofilter area is given as {stated:.0} m2, but the media would have {media:.0} m2. The given area \
                 is used; check both."
            )
        })
        .into_iter()
        .collect()
}
