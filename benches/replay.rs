//! Rows per second in replay, beside what the csv crate alone takes to read the same bytes and parse their numbers.
//!
//! `cargo bench --bench replay` prints both and their ratio. `ROWS` sets the length of the log (default 100,000).

#![allow(clippy::unwrap_used, clippy::expect_used, missing_docs)]

use std::fmt::Write as _;
use std::hint::black_box;
use std::time::{Duration, Instant};

use gillside::assessment::Assessor;
use gillside::diagnosis::Occasion;
use gillside::engine::Engine;
use gillside::history::log::{Input, Row, Stream};
use gillside::knowledge;
use gillside::site::Site;
use jiff::tz::TimeZone;

/// A log of minute rows: a probe's readings every minute, kit readings once a day, events and signs now and then.
fn log(rows: usize) -> String {
    let mut text = String::from(
        "time,temperature,ph,dissolved-oxygen,total-ammonia,nitrite,nitrate,alkalinity,chloride,conductivity,event,sign,note\n",
    );
    let start = jiff::civil::date(2024, 1, 1).at(0, 0, 0, 0);
    let mut seed: u64 = 1;
    let mut noise = || {
        seed = seed
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        f64::from(u32::try_from(seed >> 40).unwrap_or(0)) / f64::from(1 << 24) - 0.5
    };
    for row in 0..rows {
        let minute = i64::try_from(row).unwrap();
        let time = start
            .checked_add(jiff::Span::new().minutes(minute))
            .unwrap();
        let day = (row % 1440) as f64 / 1440.0 * std::f64::consts::TAU;
        let (t, ph, oxygen) = (
            25.0 - day.cos() + 0.1 * noise(),
            6.8 + 0.05 * noise(),
            6.6 - 0.4 * day.sin() + 0.1 * noise(),
        );
        let _ = write!(
            text,
            "{},{t:.1},{ph:.2},{oxygen:.1}",
            time.strftime("%Y-%m-%d %H:%M")
        );
        if row % 1440 == 450 {
            let _ = write!(
                text,
                ",{:.2},0.05,{:.0},{:.0},40,{:.0}",
                0.25 + 0.1 * noise(),
                40.0 + 3.0 * noise(),
                50.0 + 6.0 * noise(),
                800.0 + 10.0 * noise()
            );
            text.push_str(if row % 10_080 == 450 {
                ",base-added,!fish-gasping;!fish-off-feed,"
            } else {
                ",,,"
            });
        } else {
            text.push_str(",,,,,,,,,");
        }
        text.push('\n');
    }
    text
}

fn plain(text: &str) -> Duration {
    let begun = Instant::now();
    let mut reader = csv::ReaderBuilder::new().from_reader(text.as_bytes());
    let mut record = csv::ByteRecord::new();
    let mut sum = 0.0;
    while reader.read_byte_record(&mut record).unwrap() {
        for field in record.iter().skip(1) {
            if let Some(value) = std::str::from_utf8(field)
                .ok()
                .and_then(|s| s.parse::<f64>().ok())
            {
                sum += value;
            }
        }
    }
    black_box(sum);
    begun.elapsed()
}

fn replay(text: &str) -> (Duration, usize) {
    let begun = Instant::now();
    let knowledge = knowledge::shipped().unwrap();
    let site = Site {
        timezone: TimeZone::get("Europe/Lisbon").unwrap(),
        species: vec!["nile-tilapia".to_owned()],
        volume_l: Some(12_000.0),
        biomass_kg: Some(320.0),
        feed_kg_per_day: Some(4.5),
        ..Site::default()
    };
    let assessor = Assessor::new(&knowledge, &site, Occasion::Review);
    let mut engine = Engine::new(&knowledge, &site);
    engine.tell(gillside::history::memory::Memory::keeps_events);
    let input = Input::text("bench.csv", text.as_bytes());
    let mut stream = Stream::open(vec![input], &knowledge.vocabulary, &site, None).unwrap();
    let mut row = Row::default();
    let mut version = u64::MAX;
    let mut rows = 0;
    while stream.next_row(&mut row).unwrap() {
        engine.observe(&row);
        rows += 1;
        if engine.version() != version {
            version = engine.version();
            black_box(assessor.review(&engine));
        }
    }
    (begun.elapsed(), rows)
}

fn main() {
    let rows: usize = std::env::var("ROWS")
        .ok()
        .and_then(|r| r.parse().ok())
        .unwrap_or(100_000);
    let text = log(rows);
    let alone = (0..3).map(|_| plain(&text)).min().unwrap();
    let (whole, read) = replay(&text);
    let per_second = |d: Duration| rows as f64 / d.as_secs_f64();
    println!("{read} rows, {:.1} MB", text.len() as f64 / 1e6);
    println!("csv alone   {:>12.0} rows/s", per_second(alone));
    println!(
        "replay      {:>12.0} rows/s, {:.1} times the time of csv alone",
        per_second(whole),
        whole.as_secs_f64() / alone.as_secs_f64()
    );
}
