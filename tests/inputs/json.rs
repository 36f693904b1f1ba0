//! JSON lines: the same keys, the same rules.

use super::words::{id, problems, read, seconds, series, vocabulary};

#[test]
fn the_same_rows_as_a_table() {
    let table = read(
        "time,place,temperature (F),nitrite,event,sign,note,by\n\
         2026-03-02 07:30,tank 1,86,<0.05,base-added;power-cut,fish-off-feed;!fish-gasping,all well,Ana\n",
    )
    .unwrap();
    let lines = read(
        r#"{"time":"2026-03-02 07:30","place":"tank 1","temperature (F)":86,"nitrite":"<0.05","event":["base-added","power-cut"],"sign":"fish-off-feed;!fish-gasping","note":"all well","by":"Ana"}"#,
    )
    .unwrap();
    let mut rows = table.rows.clone();
    rows[0].line = 1;
    assert_eq!(lines.rows, rows);
    assert_eq!(lines.assumed_as_n, [id("nitrite")]);
    assert_eq!(problems(&lines), ["1:66 nitrite assumed-as-n"]);
}

#[test]
fn nothing_and_empty_are_not_measured() {
    let log = read(
        "{\"time\":\"2026-03-02T07:30:00Z\",\"ph\":null,\"temperature\":\"\",\"redox\":\"-5.5\"}\n\n{\"ph\":7,\"time\":\"2026-03-02T08:30:00Z\",\"place\":3}\n",
    )
    .unwrap();
    assert_eq!(problems(&log), Vec::<String>::new());
    assert_eq!(series(&log, "ph"), [None, Some(7.0)]);
    assert_eq!(series(&log, "temperature"), [None, None]);
    assert_eq!(series(&log, "redox"), [Some(-5.5), None]);
    assert_eq!(log.places, ["3"]);
    assert_eq!(log.rows[1].time, seconds("2026-03-02T08:30:00Z"));
}

#[test]
fn an_unknown_key_is_told_once() {
    let row = |minute: u8| format!("{{\"time\":\"2026-03-02 07:{minute:02}\",\"phh\":7}}\n");
    let log = read((10..40).map(row).collect::<String>()).unwrap();
    assert_eq!(problems(&log), ["1:28 phh unknown-column"]);
    assert_eq!(log.rows_used, 30);
}

#[test]
fn a_whole_table_of_words_is_understood() {
    let vocabulary = vocabulary();
    for reading in vocabulary.readings.iter().filter(|r| !r.derived) {
        let log = read(format!(
            "{{\"time\":\"2026-03-02 07:30\",\"{}\":5}}",
            reading.id
        ))
        .unwrap();
        assert_eq!(series(&log, &reading.id), [Some(5.0)]);
    }
}

#[test]
fn too_many_keys_and_too_many_places() {
    let row = |i: usize| format!("{{\"time\":\"2026-03-02 07:30\",\"key-{i}\":7}}\n");
    let log = read((0..300).map(row).collect::<String>()).unwrap();
    // 256 keys, `time` among them; each of the others costs its row.
    assert_eq!((log.rows_used, log.rows_refused), (255, 45));
    let row = |i: usize| format!("{{\"time\":\"2026-03-02 07:30\",\"place\":\"p{i}\"}}\n");
    let log = read((0..1200).map(row).collect::<String>()).unwrap();
    assert_eq!((log.rows_used, log.rows_refused), (1000, 200));
    assert_eq!(log.places.len(), 1000);
    assert!(log.problems.iter().all(|p| p.code == "too-many-places"));
}
