//! Good site files.

use super::words::{good_site, id, site};
use gillside::site::{AreaFrom, Band, Chlorination, Crop, PlaceKind, Site, Units};
use jiff::civil::{date, time};

const FULL: &str = r#"
name = "Hillfoot greenhouse 2"
log = "log.csv"
incidents = "incidents"
timezone = "Europe/Lisbon"
units = "us"
species = ["nile-tilapia", "channel-catfish"]
crops = ["leafy-greens", "herbs"]
started = 2025-03-01
elevation_m = 120
volume_l = 12000
biomass_kg = 320
feed_kg_per_day = 4.5
feed_protein_percent = 32
biofilter_area_m2 = 2600
plant_area_m2 = 90
aeration_kg_o2_per_day = 9.0
heated = true
covered_media = false

[makeup]
chlorination = "none"
ph = 7.6
alkalinity = 140
chloride = 20
temperature = 14

[targets]
ph = { low = 6.2, high = 7.0 }
nitrate = { high = 150 }

[columns]
"Probe 1 pH" = "ph"

[[media]]
kind = "pea-gravel"
volume_l = 3000

[[shift]]
name = "early"
start = "06:00"
end = "14:00"

[[shift]]
name = "night"
start = 22:00:00
end = "06:00"

[[place]]
name = "tank 1"
kind = "tank"

[[place]]
name = "corner"

[[phone]]
who = "fish vet"
number = "+000 000 000"

[equipment]
solids_filter = true
substances = ["KHCO3", "Ca(OH)2"]
"#;

#[test]
fn every_key_is_read() {
    let site = good_site(FULL);
    assert_eq!(site.name.as_deref(), Some("Hillfoot greenhouse 2"));
    assert_eq!(site.log.as_deref(), Some("log.csv".as_ref()));
    assert_eq!(site.incidents.as_deref(), Some("incidents".as_ref()));
    assert_eq!(site.timezone.iana_name(), Some("Europe/Lisbon"));
    assert_eq!(site.units, Units::Us);
    assert_eq!(site.species, ["nile-tilapia", "channel-catfish"]);
    assert_eq!(site.crops, [Crop::LeafyGreens, Crop::Herbs]);
    assert_eq!(site.started, Some(date(2025, 3, 1)));
    let numbers = [
        site.elevation_m,
        site.volume_l,
        site.biomass_kg,
        site.feed_kg_per_day,
        site.feed_protein_percent,
        site.biofilter_area_m2,
        site.plant_area_m2,
        site.aeration_kg_o2_per_day,
    ];
    let expected = [120.0, 12000.0, 320.0, 4.5, 32.0, 2600.0, 90.0, 9.0];
    assert_eq!(numbers, expected.map(Some));
    assert_eq!((site.heated, site.covered_media), (Some(true), Some(false)));
    assert_eq!(site.makeup.chlorination, Some(Chlorination::None));
    let makeup = [
        site.makeup.ph,
        site.makeup.alkalinity,
        site.makeup.chloride,
        site.makeup.temperature,
    ];
    assert_eq!(makeup, [7.6, 140.0, 20.0, 14.0].map(Some));
    let band = |low, high| Some(&Band { low, high }).copied();
    assert_eq!(
        site.targets.get(&id("ph")).copied(),
        band(Some(6.2), Some(7.0))
    );
    assert_eq!(
        site.targets.get(&id("nitrate")).copied(),
        band(None, Some(150.0))
    );
    assert_eq!(site.columns[0].heading, "Probe 1 pH");
    assert_eq!(
        (site.place[0].kind, site.place[1].kind),
        (Some(PlaceKind::Tank), None)
    );
    assert_eq!(site.phone[0].number, "+000 000 000");
    assert_eq!(site.equipment.solids_filter, Some(true));
    assert_eq!(site.equipment.backup_power, None);
    assert_eq!(
        site.equipment.substances.as_deref().map(<[String]>::len),
        Some(2)
    );
    let area = site.biofilter_area(|_| Some(280.0)).unwrap();
    assert_eq!(
        (area.m2, area.from, area.disagrees_with_media),
        (2600.0, AreaFrom::Stated, Some(840.0))
    );
}

#[test]
fn shifts_may_cross_midnight() {
    let site = good_site(FULL);
    let [early, night] = &site.shift[..] else {
        panic!("two shifts")
    };
    assert!(!early.crosses_midnight() && night.crosses_midnight());
    for (hour, in_early, in_night) in [
        (5, false, true),
        (6, true, false),
        (14, false, false),
        (23, false, true),
    ] {
        let now = time(hour, 0, 0, 0);
        assert_eq!(
            (early.covers(now), night.covers(now)),
            (in_early, in_night),
            "{hour}"
        );
    }
}

#[test]
fn what_is_absent_is_unknown() {
    let site = good_site("name = \"x\"\n");
    let nothing = Site {
        name: Some("x".to_owned()),
        ..Site::default()
    };
    assert_eq!(site, nothing);
    assert_eq!(site.volume_l, None);
    assert_eq!(site.units, Units::Metric);
    assert_eq!(site.timezone, jiff::tz::TimeZone::UTC);
}

#[test]
fn all_faults_come_in_one_run() {
    let (_, faults) =
        site("nmae = \"x\"\nvolume_l = -5\nspecies = \"tilapia\"\n[makeup]\nph = \"low\"\n");
    let shown: Vec<String> = faults
        .iter()
        .map(|f| {
            let place = f.place.as_ref().unwrap();
            format!("{}:{} {}", place.line, place.column, f.code)
        })
        .collect();
    assert_eq!(
        shown,
        [
            "1:1 missing-key",
            "1:1 unknown-key",
            "2:12 out-of-range",
            "3:11 unknown-id",
            "5:6 wrong-kind"
        ]
    );
}
