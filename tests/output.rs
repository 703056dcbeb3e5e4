//! What leaves the house: printed coordinates, the record and its schema, cells, and words under which findings stand.

use colure::house::House;
use colure::output::screen_text::{self, Style};
use colure::output::{csv, jsonl, plain, printed, record, reduce_text, summary};
use colure::report::{Equinox, Examined, Finding, Frame, Reduced, System, Weight};
use colure::rules::Selection;
use colure::run::{Run, SheetRun};
use colure::sheet::Sheet;
use colure::span::Span;
use std::sync::Arc;

/// 2026 November 1, 0h UTC.
const NOW: (f64, f64) = (2_461_345.5, 0.0);

const ICRS: Frame = Frame {
    system: System::Icrs,
    equinox: Equinox::Julian(2000.0),
};

/// An invented sheet: a report in order, one below the horizon, one without an equinox, one by hour angle, one by altitude.
const SHEET: &str = "Object: Suspect 12
RA 05 34 31.9 Dec +22 00 52 (J2000.0)
Date: 2024-01-05 22:31 UT
Site: 54.31 N 3.02 W, 240 m

Object: Suspect 13
RA 05 34 31.9 Dec -82 00 52 (B1950.0)
Date: 2024-07-05 22:31 UT
Site: 54.31 N 3.02 W, 240 m

Object: =HYPERLINK(1)
RA 10 00 00 Dec +41 00 00

Object: Suspect 15
HA 1h 10m W, Dec +12 30
Date: 2024-01-05 22:31 UT
Site: 54.31 N 3.02 W

Object: Suspect 16
Altitude 41.2°, azimuth 123.4°
Date: 2024-01-05 22:31 UT
Site: 54.31 N 3.02 W
";

fn examined(text: &str) -> Run {
    let sheet = Sheet::decode("invented.txt".to_owned(), text.as_bytes()).expect("text");
    let house = House::default();
    let examined = colure::examine_sheet(&sheet, &house, ICRS, NOW, &Selection::default());
    one(sheet, examined, Vec::new())
}

fn one(sheet: Sheet, examined: Vec<Examined>, remarks: Vec<Finding>) -> Run {
    Run {
        sheets: vec![SheetRun {
            sheet,
            house: Arc::new(House::default()),
            examined,
            remarks,
        }],
        ..Run::default()
    }
}

// ---------------------------------------------------------------------------------------------- printed coordinates

fn reduced(ra_deg: f64, dec_deg: f64, ra_step: f64, dec_step: f64) -> Reduced {
    let ra_step_on_sky_arcsec = ra_step * dec_deg.to_radians().cos();
    Reduced {
        frame: ICRS,
        ra_deg,
        dec_deg,
        icrs_ra_deg: ra_deg,
        icrs_dec_deg: dec_deg,
        step_arcsec: ra_step_on_sky_arcsec.max(dec_step),
        ra_step_on_sky_arcsec,
        dec_step_arcsec: dec_step,
    }
}

#[test]
fn coordinates_are_printed_in_the_forms_of_the_design() {
    // the forms: DESIGN, section 3; the values: arithmetic (83.62875° = 5h 34m 30.9s, 22.017250° = 22° 1′ 2.1″)
    for (ra_step, dec_step, ra, dec) in [
        (1.5, 0.1, "05h34m30.9s", "+22°01′02.1″"),
        (15.0, 1.0, "05h34m31s", "+22°01′02″"),
        (90.0, 6.0, "05h34.5m", "+22°01.0′"),
        (900.0, 60.0, "05h35m", "+22°01′"),
        (5400.0, 360.0, "05.6h", "+22.0°"),
        (54_000.0, 3600.0, "06h", "+22°"),
    ] {
        let place = reduced(83.628_75, 22.017_250, ra_step, dec_step);
        assert_eq!(printed::ra(&place), ra, "step {ra_step}");
        assert_eq!(printed::dec(&place), dec, "step {dec_step}");
    }
}

#[test]
fn printed_coordinates_carry_and_wrap() {
    // 359.99999° = 23h 59m 59.9976s; to 0.1 s that is 24h, so 0h: arithmetic
    let place = reduced(359.999_99, -0.000_01, 1.5, 1.0);
    assert_eq!(printed::ra(&place), "00h00m00.0s");
    assert_eq!(printed::dec(&place), "+00°00′00″");
    assert_eq!(printed::dec(&reduced(0.0, -0.508, 1.5, 1.0)), "-00°30′29″");
    assert_eq!(
        printed::dec(&reduced(0.0, 21.999_99, 1.5, 1.0)),
        "+22°00′00″"
    );
    assert_eq!(
        printed::dec(&reduced(0.0, -89.999_999, 1.5, 1.0)),
        "-90°00′00″"
    );
}

#[test]
fn a_place_at_the_pole_has_no_digits_of_its_own() {
    // RA 12 00 00 Dec +90 00 00: cos 90° is 0, and so is the RA step on the sky; DESIGN, section 3, gives no digits for that
    let place = reduced(180.0, 90.0, 15.0, 1.0);
    assert_eq!(printed::ra(&place), "12h");
    assert_eq!(printed::dec(&place), "+90°00′00″");
    // a number copied out of a program: no more than a microsecond
    assert_eq!(
        printed::ra(&reduced(180.0, 0.0, 1e-10, 1e-10)),
        "12h00m00.000000s"
    );
}

#[test]
fn cells_are_joined_and_namelessness_said() {
    let text = "| RA | Dec | Equinox |\n|---|---|---|\n| 22 31 55.4 | -47 05 08 | J2000.0 |\n";
    let run = examined(text);
    let mut out = Vec::new();
    screen_text::write(&run, PLAIN, &mut out).unwrap();
    let shown = String::from_utf8(out).unwrap();
    assert!(
        shown.contains("(no name): 22 31 55.4 -47 05 08 → 22h31m55.4s"),
        "{shown}"
    );
}

#[test]
fn an_instant_is_stated_without_the_full_stop_of_its_sentence() {
    let text = "Suspect 1: RA 05 34 31.9 Dec +22 00 52 (J2000.0) on 2024-01-05 at 22:31 UT.\n";
    let records = records(&examined(text));
    let stated = records[0]["stated"]["instant"].as_str().unwrap();
    assert!(stated.ends_with("22:31 UT"), "{stated}");
}

/// The value of the last unit of a printed coordinate, arcseconds; RA units count fifteenfold.
fn last_unit_arcsec(text: &str) -> f64 {
    let mark = text.chars().last().unwrap();
    let body = &text[..text.len() - mark.len_utf8()];
    let decimals = body
        .rsplit('.')
        .next()
        .filter(|d| body.contains('.') && d.chars().all(|c| c.is_ascii_digit()));
    let whole = match mark {
        'h' => 54_000.0,
        'm' => 900.0,
        's' => 15.0,
        '°' => 3600.0,
        '′' => 60.0,
        _ => 1.0,
    };
    whole / 10f64.powi(decimals.map_or(0, |d| d.len() as i32))
}

#[test]
fn printed_digits_keep_to_the_steps() {
    // DESIGN, section 3: the last unit is never finer than a third of its own step, nor coarser than ten times step_arcsec
    let mut step = 0.000_02;
    while step < 4000.0 {
        for dec_deg in [-88.0, -60.0, 0.0, 31.0, 75.0] {
            for ratio in [0.1, 1.0, 15.0] {
                let place = reduced(123.456_789, dec_deg, step * ratio, step);
                let cos = dec_deg.to_radians().cos();
                let ra = last_unit_arcsec(&printed::ra(&place)) * cos;
                let dec = last_unit_arcsec(&printed::dec(&place));
                let most = 10.0 * place.step_arcsec * (1.0 + 1e-9);
                let own = place.ra_step_on_sky_arcsec / 3.0 * (1.0 - 1e-6);
                assert!(
                    ra >= own && ra <= most,
                    "{} for {place:?}",
                    printed::ra(&place)
                );
                let own = step / 3.0 * (1.0 - 1e-6);
                assert!(
                    dec >= own && dec <= most,
                    "{} for {place:?}",
                    printed::dec(&place)
                );
            }
        }
        step *= 1.37;
    }
}

// ---------------------------------------------------------------------------------------------- the record

const SCHEMA_FILE: &str = "src/output/record.schema.json";

#[test]
fn the_schema_kept_is_the_one_the_types_make() {
    let path = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join(SCHEMA_FILE);
    if std::env::var_os("COLURE_WRITE_SCHEMA").is_some() {
        std::fs::write(&path, record::schema()).unwrap();
    }
    let kept = std::fs::read_to_string(path).unwrap();
    assert!(
        kept == record::schema(),
        "write it anew: COLURE_WRITE_SCHEMA=1 cargo test --test output"
    );
}

fn records(run: &Run) -> Vec<serde_json::Value> {
    let mut out = Vec::new();
    jsonl::write(run, &mut out).unwrap();
    let text = String::from_utf8(out).unwrap();
    text.lines()
        .map(|l| serde_json::from_str(l).unwrap())
        .collect()
}

#[test]
fn records_hold_to_the_schema() {
    let schema: serde_json::Value = serde_json::from_str(&record::schema()).unwrap();
    let validator = jsonschema::validator_for(&schema).unwrap();
    let mut run = examined(SHEET);
    run.sheets[0].remarks.push(finding(Span::new(0, 6)));
    let records = records(&run);
    assert!(records.len() >= 5, "{} records", records.len());
    for record in &records {
        let errors: Vec<String> = validator
            .iter_errors(record)
            .map(|e| e.to_string())
            .collect();
        assert!(errors.is_empty(), "{errors:?} in {record}");
    }
    // the schema tells a record from what is none
    let mut broken = records[0].clone();
    broken.as_object_mut().unwrap().remove("verdict");
    assert!(!validator.is_valid(&broken));
}

#[test]
fn every_member_of_the_design_is_there() {
    // DESIGN, section 3
    let all = [
        "record",
        "sheet",
        "ordinal",
        "line",
        "span",
        "object",
        "observer",
        "role",
        "stated",
        "read",
        "reduced",
        "magnitude",
        "uncertainty_arcsec",
        "instant",
        "site",
        "horizon",
        "constellation",
        "verdict",
        "assumed",
        "findings",
        "slips",
    ];
    let records = records(&examined(SHEET));
    for record in &records {
        let members = record.as_object().unwrap();
        for name in all {
            assert!(members.contains_key(name), "no {name} in {record}");
        }
    }
    let first = &records[0];
    assert_eq!(first["line"], 2);
    assert_eq!(first["read"]["system"], "ICRS");
    assert_eq!(first["read"]["equinox"], "J2000.0");
    assert_eq!(first["read"]["ra_step_arcsec"], 1.5);
    assert_eq!(first["instant"]["utc"], "2024-01-05T22:31:00Z");
    // 5h 34m 31.9s × 15: arithmetic
    assert_eq!(first["read"]["ra_deg"], 83.632_916_666_7);
    assert_eq!(records[1]["verdict"], "reject");
    // no honest reduction without an equinox
    assert!(records[2]["reduced"].is_null());
    assert!(records[2]["read"]["equinox"].is_null());
}

#[test]
fn instants_are_printed_as_iso_8601() {
    assert_eq!(printed::utc((2_460_497.5, 0.0)), "2024-07-06T00:00:00Z");
    // the leap second of 2016 December 31 (IERS Bulletin C 52): 86400.5 s of a day of 86401 s
    assert_eq!(
        printed::utc((2_457_753.5, 86_400.5 / 86_401.0)),
        "2016-12-31T23:59:60.500Z"
    );
    assert_eq!(printed::ut((2_460_497.5, 0.5), 60.0), "2024-07-06 12:00");
    assert_eq!(printed::ut((2_460_497.5, 0.5), 86_400.0), "2024-07-06");
}

// ---------------------------------------------------------------------------------------------- cells and tables

#[test]
fn no_cell_becomes_a_formula() {
    for cell in [
        "=1+1",
        "+cmd|'/C calc'!A0",
        "-2+3",
        "@SUM(A1)",
        "\t=1",
        "+A1",
        "-1-1",
    ] {
        assert!(csv::guarded(cell).starts_with('\''), "{cell}");
    }
    for cell in [
        "-12.5",
        "+22°01′02″",
        "-00 30 29.1",
        "05h34m30.9s",
        "",
        "-",
        "Suspect 12",
        "+4:05:06",
    ] {
        assert_eq!(csv::guarded(cell), cell);
    }
}

#[test]
fn the_rows_of_csv_fit_their_head() {
    let mut out = Vec::new();
    csv::write(&examined(SHEET), &mut out).unwrap();
    let mut reader = ::csv::Reader::from_reader(&out[..]);
    assert_eq!(reader.headers().unwrap().len(), csv::COLUMNS.len());
    let rows: Vec<_> = reader.records().map(Result::unwrap).collect();
    assert!(rows.len() >= 5);
    for row in &rows {
        for cell in row {
            let harmless = cell.parse::<f64>().is_ok() || !cell.starts_with(['=', '@']);
            assert!(harmless, "{cell}");
        }
    }
}

#[test]
fn the_table_of_reduce_is_aligned_by_width() {
    use unicode_width::UnicodeWidthStr;
    let text = SHEET.replace("Suspect 12", "新天体 十二");
    let mut out = Vec::new();
    reduce_text::write(&examined(&text), &mut out).unwrap();
    let table = String::from_utf8(out).unwrap();
    let lines: Vec<&str> = table.lines().collect();
    let column = |line: &str, word: &str| line.find(word).map(|at| line[..at].width());
    let head = column(lines[0], "Dec").unwrap();
    let first = lines
        .iter()
        .find(|l| l.contains("新天体"))
        .expect("the row");
    assert_eq!(column(first, "+22°"), Some(head), "\n{table}");
    assert!(lines.iter().all(|l| !l.ends_with(' ')));
}

// ---------------------------------------------------------------------------------------------- words underlined

fn finding(primary: Span) -> Finding {
    Finding {
        rule: "below-horizon",
        weight: Weight::Reject,
        message: "The object stood below the horizon.".to_owned(),
        advice: Some("Ask for the time.".to_owned()),
        primary,
        related: Vec::new(),
    }
}

const PLAIN: Style = Style {
    colour: false,
    width: 100,
};

fn drawn(text: &str, findings: Vec<Finding>) -> String {
    let sheet = Sheet::decode("s.txt".to_owned(), text.as_bytes()).expect("text");
    let mut out = Vec::new();
    screen_text::write(&one(sheet, Vec::new(), findings), PLAIN, &mut out).unwrap();
    String::from_utf8(out).unwrap()
}

fn of(text: &str, word: &str) -> Span {
    let start = text.find(word).expect(word);
    Span::new(start, start + word.len())
}

#[test]
fn the_very_words_are_underlined() {
    let text = "one\nDate: 2024-07-05 22:31 UT\nthree\nfour\n";
    let shown = drawn(text, vec![finding(of(text, "22:31"))]);
    let lines: Vec<&str> = shown.lines().collect();
    let at = lines
        .iter()
        .position(|l| l.contains("Date:"))
        .expect("the line");
    let start = lines[at][..lines[at].find("22:31").unwrap()]
        .chars()
        .count();
    let marks = lines[at + 1]
        .chars()
        .skip(start)
        .take(5)
        .collect::<String>();
    assert_eq!(marks, "‾‾‾‾‾", "\n{shown}");
    assert_eq!(
        lines[at + 1].chars().filter(|c| *c == '‾').count(),
        5,
        "\n{shown}"
    );
    for part in [
        "s.txt, line 2",
        "reject: The object stood below the horizon. (below-horizon)",
        "What to do: Ask for the time",
        "three",
    ] {
        assert!(shown.contains(part), "no {part} in\n{shown}");
    }
    assert!(
        !shown.contains("four"),
        "more lines than a window:\n{shown}"
    );
}

#[test]
fn far_apart_words_are_shown_apart() {
    let mut text = "first words\n".to_owned();
    text.push_str(&"between\n".repeat(500));
    text.push_str("last words\n");
    let mut one = finding(of(&text, "last"));
    one.related
        .push((of(&text, "first"), "the twin".to_owned()));
    let shown = drawn(&text, vec![one]);
    assert!(
        shown.contains("the twin") && shown.contains("last words"),
        "{shown}"
    );
    assert!(shown.lines().count() < 20, "{shown}");
    assert!(
        shown.contains("s.txt, line 502") && shown.contains("s.txt, line 1\n"),
        "{shown}"
    );
}

#[test]
fn long_lines_are_cut_around_the_words() {
    let text = format!("{}HERE{}\n", "x".repeat(80_000), "y".repeat(10_000_000));
    let started = std::time::Instant::now();
    let shown = drawn(&text, vec![finding(of(&text, "HERE"))]);
    assert!(shown.contains("HERE") && shown.contains('…'));
    assert!(shown.lines().all(|l| l.chars().count() < 160));
    assert!(shown.contains("s.txt, line 1"), "{shown}");
    assert!(started.elapsed().as_secs() < 5);
}

#[test]
fn nothing_of_a_sheet_drives_the_terminal() {
    let text = "a\u{1b}[31m b\u{202e}c \u{7}\u{9b}2J d\u{200b}e\tEND\nAnd some lines of plain words, so that it is a text and no picture.\nOnce more.\n";
    let shown = drawn(text, vec![finding(of(text, "END"))]);
    for c in shown.chars() {
        assert!(
            c == '\n' || plain::stand_in(c).is_none(),
            "{c:?} in {shown:?}"
        );
    }
    assert!(shown.contains("END"));
    assert_eq!(plain::harmless(text).len(), text.len());
}

#[test]
fn no_span_brings_the_drawing_down() {
    let texts = [
        "",
        "\n",
        "a",
        "a\n",
        "ä\u{301}ö 東京\r\n\r\nb\rc",
        "x\n\n\n\ny",
    ];
    for text in texts {
        if text.is_empty() {
            continue;
        }
        for start in 0..text.len() + 2 {
            for end in start..text.len() + 3 {
                let mut one = finding(Span::new(start, end));
                one.related
                    .push((Span::new(end, start), "backwards".to_owned()));
                one.related
                    .push((Span::new(0, text.len()), "all".to_owned()));
                let shown = drawn(text, vec![one]);
                assert!(shown.contains("below-horizon"));
                assert!(
                    !shown.contains("Failed"),
                    "{text:?} {start}..{end}\n{shown}"
                );
            }
        }
    }
}

#[test]
fn many_findings_cost_no_more_than_their_lines() {
    let text = "at 2024-07-05 22:31 UT\n".repeat(50_000);
    let findings = (0..1000)
        .map(|i| finding(Span::new(i * 1000, i * 1000 + 5)))
        .collect();
    let shown = drawn(&text, findings);
    assert_eq!(shown.matches("(below-horizon)").count(), 1000);
}

#[test]
fn verdicts_stand_in_words_and_the_summary_counts_them() {
    let run = examined(SHEET);
    let mut out = Vec::new();
    screen_text::write(&run, PLAIN, &mut out).unwrap();
    let shown = String::from_utf8(out).unwrap();
    assert!(shown.contains("REJECT line 7, Suspect 13: "), "{shown}");
    assert!(shown.contains("query  line 12, "), "{shown}");
    assert!(!shown.contains('\u{1b}'));
    assert!(shown.starts_with("invented.txt\n"), "{shown}");
    assert!(
        shown.contains("not reduced: the equinox is not known"),
        "{shown}"
    );
    let mut out = Vec::new();
    summary::write(&run, 100, &mut out).unwrap();
    let line = String::from_utf8(out).unwrap();
    assert!(
        line.contains("in 1 sheet:") && line.contains(" to reject"),
        "{line}"
    );
    let tally = summary::Tally::of(&run);
    assert_eq!(tally.reports, run.sheets[0].examined.len());
    assert!(tally.rejects >= 1 && tally.queries >= 1);
}
