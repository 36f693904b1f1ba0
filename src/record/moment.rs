//! Times as the log writes them.

use jiff::Timestamp;
use jiff::tz::TimeZone;

use crate::history::log::read_time;

/// A time as the site's clocks show it, as short as it can be read back: to the minute where the seconds are zero, with
/// its offset in an hour that the clocks show twice.
pub fn clock_text(time: i64, zone: &TimeZone) -> String {
    let Ok(stamp) = Timestamp::from_second(time) else {
        return String::new();
    };
    let form = if time.rem_euclid(60) == 0 {
        "%Y-%m-%d %H:%M"
    } else {
        "%Y-%m-%d %H:%M:%S"
    };
    let local = zone.to_datetime(stamp).strftime(form).to_string();
    match read_time(&local, zone) {
        Ok(same) if same == time => local,
        _ => {
            let seconds = zone.to_offset(stamp).seconds();
            let sign = if seconds < 0 { '-' } else { '+' };
            let minutes = seconds.abs() / 60;
            let local = zone.to_datetime(stamp).strftime("%Y-%m-%dT%H:%M:%S");
            format!("{local}{sign}{:02}:{:02}", minutes / 60, minutes % 60)
        }
    }
}

#[cfg(test)]
mod tests {
    use super::clock_text;
    use crate::history::log::read_time;
    use jiff::tz::TimeZone;
    use proptest::prelude::*;

    #[test]
    fn the_repeated_hour_has_its_offset() {
        let zone = TimeZone::get("Europe/Lisbon").unwrap_or(TimeZone::UTC);
        let first = 1_792_888_200; // 2026-10-25T00:30:00Z
        assert_eq!(clock_text(first, &zone), "2026-10-25 01:30");
        assert_eq!(clock_text(first + 3600, &zone), "2026-10-25T01:30:00+00:00");
        assert_eq!(clock_text(first + 7201, &zone), "2026-10-25 02:30:01");
    }

    proptest! {
        #[test]
        fn every_time_reads_back(
            time in 0_i64..7_000_000_000,
            zone in prop::sample::select(vec!["Europe/Lisbon", "Australia/Lord_Howe", "America/St_Johns", "UTC"]),
        ) {
            let zone = TimeZone::get(zone).unwrap_or(TimeZone::UTC);
            prop_assert_eq!(read_time(&clock_text(time, &zone), &zone).ok(), Some(time));
        }
    }
}
