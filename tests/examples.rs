//! The whole program on the examples: what it makes of them, its record against the schema, the README's commands, exit statuses and bad inputs.
//!
//! The README is brought up to date with `UPDATE_README=1 cargo test --test examples`.

use serde_json::Value;
use std::collections::BTreeMap;
use std::fs;
use std::io::Write;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

/// Later than the examples, so that they are no news from the future on a clock that is wrong.
const NOW: &str = "2026-11-01T00:00:00Z";

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

/// A folder of its own with a copy of the examples, where a command may do what it likes.
fn copy_of_the_examples() -> tempfile::TempDir {
    fn copy(from: &Path, to: &Path) {
        fs::create_dir(to).unwrap();
        for entry in fs::read_dir(from).unwrap().map(Result::unwrap) {
            let target = to.join(entry.file_name());
            if entry.file_type().unwrap().is_dir() {
                copy(&entry.path(), &target);
            } else {
                fs::copy(entry.path(), target).unwrap();
            }
        }
    }
    let folder = tempfile::tempdir().unwrap();
    copy(&root().join("examples"), &folder.path().join("examples"));
    folder
}

fn colure_in(folder: &Path, arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_colure"))
        .args(arguments)
        .current_dir(folder)
        .env_remove("COLUMNS")
        .stdin(Stdio::null())
        .output()
        .unwrap()
}

fn colure(arguments: &[&str]) -> Output {
    colure_in(root(), arguments)
}

fn status(output: &Output) -> i32 {
    output.status.code().expect("no signal")
}

fn out(output: &Output) -> String {
    String::from_utf8(output.stdout.clone()).unwrap()
}

fn err(output: &Output) -> String {
    String::from_utf8(output.stderr.clone()).unwrap()
}

/// The records of a run over the examples.
fn records() -> Vec<Value> {
    let output = colure(&["reduce", "examples", "--as", "jsonl", "--now", NOW]);
    assert_eq!(status(&output), 1, "{}", err(&output));
    out(&output)
        .lines()
        .map(|line| serde_json::from_str(line).unwrap())
        .collect()
}

// ------------------------------------------------------------------------------------------------------- the examples

/// What a report means by astropy and pyerfa, which never saw Colure.
#[derive(serde::Deserialize)]
struct Truth {
    sheet: String,
    ordinal: u64,
    faults: String,
    ra_icrs_deg: Option<f64>,
    dec_icrs_deg: Option<f64>,
    within_arcsec: Option<f64>,
    utc: Option<String>,
    altitude_deg: Option<f64>,
    within_deg: Option<f64>,
    slip: String,
}

#[test]
fn every_example_is_understood_and_only_the_planted_faults_are_found() {
    let truths: Vec<Truth> = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_path(root().join("tests/examples_truth.csv"))
        .unwrap()
        .deserialize()
        .map(Result::unwrap)
        .collect();
    let mut records: BTreeMap<(String, u64), Value> = records()
        .into_iter()
        .map(|r| {
            let sheet = r["sheet"].as_str().unwrap();
            let sheet = sheet.rsplit('/').next().unwrap().to_owned();
            ((sheet, r["ordinal"].as_u64().unwrap()), r)
        })
        .collect();
    let mut wrong = Vec::new();
    for truth in &truths {
        let name = format!("{} {}", truth.sheet, truth.ordinal);
        let Some(record) = records.remove(&(truth.sheet.clone(), truth.ordinal)) else {
            wrong.push(format!("{name}: not read"));
            continue;
        };
        let mut found: Vec<&str> = record["findings"]
            .as_array()
            .unwrap()
            .iter()
            .filter(|f| f["weight"] != "note")
            .map(|f| f["rule"].as_str().unwrap())
            .collect();
        found.sort_unstable();
        let mut planted: Vec<&str> = truth.faults.split_whitespace().collect();
        planted.sort_unstable();
        if found != planted {
            wrong.push(format!("{name}: found {found:?}, planted {planted:?}"));
        }
        if (record["verdict"] == "accept") != planted.is_empty() {
            wrong.push(format!("{name}: verdict {}", record["verdict"]));
        }
        // the slip that was made must be among those offered
        let slips = record["slips"].as_array().unwrap();
        if !truth.slip.is_empty() && slips.iter().all(|s| s["slip"] != truth.slip.as_str()) {
            wrong.push(format!("{name}: {} is not offered", truth.slip));
        }
        if let (Some(ra), Some(dec), Some(within)) =
            (truth.ra_icrs_deg, truth.dec_icrs_deg, truth.within_arcsec)
        {
            let off = match (
                record["reduced"]["ra_deg"].as_f64(),
                record["reduced"]["dec_deg"].as_f64(),
            ) {
                (Some(r), Some(d)) => ((r - ra) * dec.to_radians().cos()).hypot(d - dec) * 3600.0,
                _ => f64::INFINITY,
            };
            if off > within {
                wrong.push(format!("{name}: {off:.1}″ off"));
            }
        }
        if truth.utc.as_deref() != record["instant"]["utc"].as_str() {
            wrong.push(format!("{name}: instant {}", record["instant"]["utc"]));
        }
        if let (Some(altitude), Some(within)) = (truth.altitude_deg, truth.within_deg) {
            let off = record["horizon"]["altitude_deg"]
                .as_f64()
                .map_or(f64::INFINITY, |a| (a - altitude).abs());
            if off > within {
                wrong.push(format!("{name}: altitude {off:.3}° off"));
            }
        }
    }
    wrong.extend(records.keys().map(|k| format!("{k:?}: invented")));
    assert!(wrong.is_empty(), "\n{}", wrong.join("\n"));
    assert!(truths.len() >= 45);
}

#[test]
fn every_record_keeps_to_the_schema_that_is_kept() {
    let kept = fs::read(root().join("src/output/record.schema.json")).unwrap();
    let schema = jsonschema::validator_for(&serde_json::from_slice(&kept).unwrap()).unwrap();
    let mut records = records();
    for record in &records {
        let mistakes: Vec<String> = schema.iter_errors(record).map(|e| e.to_string()).collect();
        assert!(mistakes.is_empty(), "{mistakes:?} in {record}");
    }
    // and the schema can say no
    records[0]["ordinal"] = Value::from("first");
    assert!(!schema.is_valid(&records[0]));
}

#[test]
fn the_csv_has_a_row_a_report_and_all_rows_are_as_wide_as_their_head() {
    let output = colure(&["reduce", "examples", "--as", "csv", "--now", NOW]);
    // a row of another width is an error of the reader
    let mut reader = csv::Reader::from_reader(&output.stdout[..]);
    let rows: Vec<csv::StringRecord> = reader.records().map(Result::unwrap).collect();
    assert_eq!(rows.len(), records().len());
}

// --------------------------------------------------------------------------------------------------------- the README

/// A line that stands for any number of lines left out.
const CUT: &str = "…";

/// Runs a command of the README, both streams in one, as a terminal shows them.
fn shown(command: &str, folder: &Path) -> String {
    let binary = PathBuf::from(env!("CARGO_BIN_EXE_colure"));
    let mut paths = vec![binary.parent().unwrap().to_owned()];
    paths.extend(std::env::split_paths(&std::env::var_os("PATH").unwrap()));
    let command = command.replace("cargo run --release --", "colure");
    let output = Command::new("sh")
        .args(["-c", &format!("exec 2>&1\n{command}")])
        .current_dir(folder)
        .env("PATH", std::env::join_paths(paths).unwrap())
        .env_remove("COLUMNS")
        .stdin(Stdio::null())
        .output()
        .unwrap();
    String::from_utf8(output.stdout).unwrap()
}

/// True where the lines shown are the real ones but for those cut.
fn agrees(shown: &[&str], real: &[&str]) -> bool {
    let Some(cut) = shown.iter().position(|l| l.trim() == CUT) else {
        return shown == real;
    };
    let (head, tail) = (&shown[..cut], &shown[cut + 1..]);
    real.len() >= head.len() + tail.len() && real.starts_with(head) && real.ends_with(tail)
}

/// The lines to show: as many before and after the cut as were shown.
fn renewed<'a>(shown: &[&'a str], real: &[&'a str]) -> Vec<&'a str> {
    match shown.iter().position(|l| l.trim() == CUT) {
        Some(cut) if real.len() > shown.len() => {
            let tail = shown.len() - cut - 1;
            let (head, tail) = (&real[..cut], &real[real.len() - tail..]);
            [head, &[CUT], tail].concat()
        }
        _ => real.to_vec(),
    }
}

#[test]
fn the_readme_shows_what_the_program_prints() {
    let path = root().join("README.md");
    let readme = fs::read_to_string(&path).unwrap();
    let update = std::env::var_os("UPDATE_README").is_some();
    let folder = copy_of_the_examples();
    let (mut fresh, mut wrong, mut commands) = (String::new(), Vec::new(), 0);
    let mut rest = readme.as_str();
    while let Some(start) = rest.find("```console\n") {
        let body = start + "```console\n".len();
        let end = body + rest[body..].find("```").expect("a block ends");
        fresh.push_str(&rest[..body]);
        let mut lines = rest[body..end].lines().peekable();
        while let Some(line) = lines.next() {
            let command = line
                .strip_prefix("$ ")
                .unwrap_or_else(|| panic!("no command before: {line}"));
            let mut said = Vec::new();
            while let Some(line) = lines.next_if(|l| !l.starts_with("$ ")) {
                said.push(line);
            }
            commands += 1;
            let real = shown(command, folder.path());
            let real: Vec<&str> = real.trim_end().lines().map(str::trim_end).collect();
            if !agrees(&said, &real) {
                wrong.push(format!("$ {command}\n{}", real.join("\n")));
            }
            fresh.push_str(&format!("{line}\n"));
            for line in renewed(&said, &real) {
                fresh.push_str(&format!("{line}\n"));
            }
        }
        fresh.push_str("```");
        rest = &rest[end + "```".len()..];
    }
    fresh.push_str(rest);
    if update {
        fs::write(&path, fresh).unwrap();
        return;
    }
    assert!(commands >= 12, "only {commands} commands found");
    assert!(
        wrong.is_empty(),
        "the README differs from what these print; if that is right, UPDATE_README=1 brings it up to date\n{}",
        wrong.join("\n\n")
    );
}

#[test]
fn the_readme_quotes_the_house_rules_of_the_examples() {
    let readme = fs::read_to_string(root().join("README.md")).unwrap();
    let house = fs::read_to_string(root().join("examples/colure.yaml")).unwrap();
    let quoted = readme.split("```yaml\n").nth(1).expect("a block");
    for line in quoted.split("```").next().unwrap().lines() {
        assert!(house.lines().any(|l| l == line), "{line}");
    }
}

#[test]
fn the_cut_stands_for_lines_and_for_nothing_else() {
    assert!(agrees(&["a", "…", "d"], &["a", "b", "c", "d"]));
    assert!(agrees(&["a", "b"], &["a", "b"]));
    assert!(!agrees(&["a", "…", "x"], &["a", "b", "c", "d"]));
    assert!(!agrees(&["a"], &["a", "b"]));
}

// -------------------------------------------------------------------------------------------------------- exit status

#[test]
fn the_exit_status_says_what_was_found() {
    let well = "examples/inbox/zarebina-field.txt";
    let query = "examples/inbox/ostermoor-bericht.txt";
    let reject = "examples/inbox/quill-october.eml";
    for (sheet, stop_at, expected) in [
        (well, "query", 0),
        (well, "reject", 0),
        (query, "query", 1),
        (query, "reject", 0),
        (query, "never", 0),
        (reject, "query", 1),
        (reject, "reject", 1),
        (reject, "never", 0),
    ] {
        for command in ["screen", "reduce"] {
            let output = colure(&[command, sheet, "--stop-at", stop_at, "--now", NOW]);
            assert_eq!(status(&output), expected, "{command} {sheet} {stop_at}");
        }
    }
    // rejects stop a run unless something else is said
    assert_eq!(status(&colure(&["screen", reject, "--now", NOW])), 1);
    assert_eq!(status(&colure(&["screen", query, "--now", NOW])), 0);
}

#[test]
fn a_wrong_command_is_not_done() {
    for arguments in [
        &["observe"][..],
        &["screen", "--as", "parchment", "examples"],
        &["screen", "--only", "no-such-rule", "examples"],
        &["screen", "--to", "J20000", "examples"],
        &["screen", "--now", "yesterday", "examples"],
        &["rulebook", "no-such-rule"],
    ] {
        let output = colure(arguments);
        assert_eq!(status(&output), 2, "{arguments:?}");
        assert!(!output.stderr.is_empty(), "{arguments:?}");
        assert!(output.stdout.is_empty(), "{arguments:?}");
    }
}

// --------------------------------------------------------------------------------------------------------- bad inputs

const GOOD: &str = "Suspect 1: 05 31 29.2 +21 59 18 (J2000.0), 2024-02-05 21:31 UT\n";

#[test]
fn a_missing_file_is_named_and_the_others_are_done() {
    let folder = tempfile::tempdir().unwrap();
    fs::write(folder.path().join("july.txt"), GOOD).unwrap();
    let output = colure_in(folder.path(), &["screen", "jully.txt", "july.txt"]);
    assert_eq!(status(&output), 2);
    assert!(err(&output).contains("jully.txt"), "{}", err(&output));
    assert!(err(&output).contains("july.txt?"), "{}", err(&output));
    assert!(out(&output).contains("Suspect 1"), "{}", out(&output));
}

#[test]
fn an_empty_folder_is_not_done() {
    let folder = tempfile::tempdir().unwrap();
    fs::create_dir(folder.path().join("inbox")).unwrap();
    let output = colure_in(folder.path(), &["screen", "inbox"]);
    assert_eq!(status(&output), 2);
    assert!(err(&output).contains("inbox"), "{}", err(&output));
}

#[test]
fn a_binary_file_is_named_and_the_others_are_done() {
    let folder = tempfile::tempdir().unwrap();
    // the first bytes of a PNG file, W3C PNG specification, 5.2
    let mut png = b"\x89PNG\r\n\x1a\n\0\0\0\rIHDR".to_vec();
    png.extend((0..2000u32).map(|i| (i * 7919 % 256) as u8));
    fs::write(folder.path().join("chart.png"), png).unwrap();
    fs::write(folder.path().join("july.txt"), GOOD).unwrap();
    let named = colure_in(folder.path(), &["screen", "chart.png", "july.txt"]);
    assert_eq!(status(&named), 2);
    assert!(err(&named).contains("chart.png"), "{}", err(&named));
    assert!(out(&named).contains("Suspect 1"));
    // in a folder it is passed over with a word, since pictures lie among sheets
    let walked = colure_in(folder.path(), &["screen", "."]);
    assert_eq!(status(&walked), 0, "{}", err(&walked));
    assert!(err(&walked).contains("chart.png"), "{}", err(&walked));
    assert!(out(&walked).contains("Suspect 1"));
}

#[test]
fn an_empty_sheet_is_said_to_be_empty() {
    let folder = tempfile::tempdir().unwrap();
    for text in ["", " \n\r\n\t\n"] {
        fs::write(folder.path().join("july.txt"), text).unwrap();
        let output = colure_in(folder.path(), &["screen", "july.txt"]);
        assert_eq!(status(&output), 0);
        assert!(err(&output).contains("july.txt"), "{}", err(&output));
        assert!(err(&output).contains("empty"), "{}", err(&output));
    }
}

#[test]
fn a_line_of_ten_megabytes_is_read_and_named() {
    let folder = tempfile::tempdir().unwrap();
    let mut line = "0 1 2 : ° ′ + - word ".repeat(500_000);
    assert!(line.len() >= 10_000_000);
    line.push('\n');
    fs::write(folder.path().join("long.txt"), line + "\n" + GOOD).unwrap();
    let output = colure_in(folder.path(), &["screen", "long.txt", "--stop-at", "never"]);
    assert_eq!(status(&output), 0, "{}", err(&output));
    assert!(err(&output).contains("long.txt"), "{}", err(&output));
    assert!(err(&output).contains("line 1"), "{}", err(&output));
    assert!(out(&output).contains("Suspect 1"));
}

#[test]
fn broken_house_rules_are_told_once_with_line_and_word_and_the_other_sheets_are_done() {
    let folder = tempfile::tempdir().unwrap();
    for (name, house) in [("a", "horizon: { lowst: 5 }\n"), ("b", "sites: [\n")] {
        let under = folder.path().join(name);
        fs::create_dir(&under).unwrap();
        fs::write(under.join("colure.yaml"), house).unwrap();
        fs::write(under.join("1.txt"), GOOD).unwrap();
        fs::write(under.join("2.txt"), GOOD).unwrap();
    }
    fs::write(folder.path().join("july.txt"), GOOD).unwrap();
    let output = colure_in(folder.path(), &["screen", "a", "b", "july.txt"]);
    assert_eq!(status(&output), 2);
    let said = err(&output);
    assert_eq!(said.matches("unknown key `lowst`").count(), 1, "{said}");
    assert!(said.contains("did you mean `lowest`?"), "{said}");
    assert!(said.contains("a/colure.yaml, line 1"), "{said}");
    assert!(said.contains("b/colure.yaml"), "{said}");
    assert!(out(&output).contains("july.txt"), "{}", out(&output));
}

#[test]
fn standard_input_is_a_sheet_and_a_closed_pipe_no_complaint() {
    let mut child = Command::new(env!("CARGO_BIN_EXE_colure"))
        .args(["reduce", "-", "--as", "jsonl"])
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    let mut input = child.stdin.take().unwrap();
    input.write_all(GOOD.as_bytes()).unwrap();
    drop(input);
    let output = child.wait_with_output().unwrap();
    assert_eq!(status(&output), 0, "{}", err(&output));
    let record: Value = serde_json::from_slice(&output.stdout).unwrap();
    assert_eq!(record["sheet"], "-");
    assert_eq!(record["object"], "Suspect 1");

    let folder = tempfile::tempdir().unwrap();
    fs::write(folder.path().join("many.txt"), GOOD.repeat(5000)).unwrap();
    let piped = shown(
        "colure reduce many.txt --as jsonl --stop-at never | head -n 1",
        folder.path(),
    );
    assert!(piped.starts_with("{\"record\":\"report\""), "{piped}");
    assert!(
        !piped.contains("not done") && !piped.contains("panic"),
        "{piped}"
    );
}
