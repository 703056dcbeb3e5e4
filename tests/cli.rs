//! The command as a whole: exit statuses, channels, and a clear word for everything that cannot be done.

use std::io::Write;
use std::path::Path;
use std::process::{Command, Output, Stdio};

const NOW: [&str; 2] = ["--now", "2026-11-01T00:00:00Z"];

const GOOD: &str = "Object: Suspect 12
RA 05 34 31.9 Dec +22 00 52 (J2000.0)
Date: 2024-01-05 22:31 UT
Site: 54.31 N 3.02 W, 240 m
";
const BAD: &str = "Object: Suspect 13
RA 05 34 31.9 Dec -82 00 52 (J2000.0)
Date: 2024-01-05 22:31 UT
Site: 54.31 N 3.02 W, 240 m
";
const ASKED: &str = "Object: Suspect 14
RA 05 34 31.9 Dec +22 00 52
Date: 2024-01-05 22:31 UT
Site: 54.31 N 3.02 W, 240 m
";

struct Told {
    status: i32,
    out: String,
    err: String,
}

fn told(output: Output) -> Told {
    Told {
        status: output.status.code().expect("no signal"),
        out: String::from_utf8(output.stdout).unwrap(),
        err: String::from_utf8(output.stderr).unwrap(),
    }
}

fn command(folder: &Path) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_colure"));
    command
        .current_dir(folder)
        .env_remove("NO_COLOR")
        .stdin(Stdio::null());
    command
}

fn colure(folder: &Path, arguments: &[&str]) -> Told {
    told(command(folder).args(arguments).output().unwrap())
}

fn with_input(folder: &Path, arguments: &[&str], input: &[u8]) -> Told {
    let mut child = command(folder)
        .args(arguments)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    let mut pipe = child.stdin.take().unwrap();
    let input = input.to_owned();
    let writer = std::thread::spawn(move || pipe.write_all(&input));
    let told = told(child.wait_with_output().unwrap());
    let _ = writer.join();
    told
}

/// A folder with some files in it.
fn folder(files: &[(&str, &[u8])]) -> tempfile::TempDir {
    let dir = tempfile::tempdir().unwrap();
    for (name, bytes) in files {
        let path = dir.path().join(name);
        std::fs::create_dir_all(path.parent().unwrap()).unwrap();
        std::fs::write(path, bytes).unwrap();
    }
    dir
}

#[test]
fn exit_statuses_are_those_of_the_design() {
    // DESIGN, section 2
    let dir = folder(&[
        ("good.txt", GOOD.as_bytes()),
        ("bad.txt", BAD.as_bytes()),
        ("asked.txt", ASKED.as_bytes()),
    ]);
    let status = |arguments: &[&str]| {
        let all = [&["screen"], &NOW[..], arguments].concat();
        colure(dir.path(), &all).status
    };
    assert_eq!(status(&["good.txt"]), 0);
    assert_eq!(status(&["asked.txt"]), 0);
    assert_eq!(status(&["asked.txt", "--stop-at", "query"]), 1);
    assert_eq!(status(&["bad.txt"]), 1);
    assert_eq!(status(&["bad.txt", "--stop-at", "never"]), 0);
    assert_eq!(
        status(&["bad.txt", "--except", "never-rises,below-horizon"]),
        0
    );
    assert_eq!(status(&["good.txt", "gone.txt"]), 2);
    assert_eq!(status(&["--as", "nothing", "good.txt"]), 2);
    assert_eq!(status(&["--to", "J200", "good.txt"]), 2);
    assert_eq!(status(&["--now", "yesterday", "good.txt"]), 2);
    assert_eq!(colure(dir.path(), &["--help"]).status, 0);
    assert_eq!(colure(dir.path(), &["fly"]).status, 2);
}

#[test]
fn what_counts_as_now_is_read_as_people_write_it() {
    let dir = folder(&[("good.txt", GOOD.as_bytes())]);
    let at = |now: &str| colure(dir.path(), &["screen", "--now", now, "good.txt"]);
    for now in ["2026-11-01 12:00 UT", "2026-11-01", "2026-11-01T12:00:00Z"] {
        assert_eq!(at(now).status, 0, "{now}: {}", at(now).err);
    }
    let told = at("2026-02-30");
    assert!(
        told.status == 2 && told.err.contains("February 2026 has 28 days"),
        "{}",
        told.err
    );
}

#[test]
fn rules_chosen_are_named_and_none_left_is_an_error() {
    let dir = folder(&[("good.txt", GOOD.as_bytes())]);
    let only = colure(
        dir.path(),
        &["screen", NOW[0], NOW[1], "--only", "daylight", "good.txt"],
    );
    assert!(only.out.contains("Asked only: daylight."), "{}", only.out);
    let none = colure(
        dir.path(),
        &[
            "screen", "--only", "daylight", "--except", "daylight", "good.txt",
        ],
    );
    assert_eq!((none.status, none.out.as_str()), (2, ""));
    assert!(none.err.contains("no rule is left"), "{}", none.err);
}

#[test]
fn a_sheet_named_twice_is_done_once() {
    let dir = folder(&[("in/good.txt", GOOD.as_bytes())]);
    let twice = colure(
        dir.path(),
        &[
            "reduce",
            "--as",
            "jsonl",
            NOW[0],
            NOW[1],
            "in",
            "in/good.txt",
            "./in/good.txt",
        ],
    );
    assert_eq!(twice.out.lines().count(), 1, "{}", twice.out);
    assert_eq!(
        twice.err.matches("is named twice").count(),
        2,
        "{}",
        twice.err
    );
}

#[test]
fn a_sheet_without_a_position_is_named_on_every_channel() {
    let dir = folder(&[
        ("good.txt", GOOD.as_bytes()),
        ("talk.txt", b"Clear skies to all.\n"),
    ]);
    let screen = colure(
        dir.path(),
        &["screen", NOW[0], NOW[1], "talk.txt", "good.txt"],
    );
    assert!(screen.out.contains("talk.txt\n"), "{}", screen.out);
    assert_eq!(
        screen.out.matches("no position found").count(),
        1,
        "{}",
        screen.out
    );
    for form in ["text", "csv", "jsonl"] {
        let told = colure(
            dir.path(),
            &[
                "reduce", "--as", form, NOW[0], NOW[1], "talk.txt", "good.txt",
            ],
        );
        assert!(
            told.err.contains("talk.txt: no position found"),
            "{form}: {}",
            told.err
        );
    }
}

#[test]
fn a_narrow_screen_is_kept_to() {
    let dir = folder(&[("bad.txt", BAD.as_bytes())]);
    for arguments in [
        &["screen", NOW[0], NOW[1], "bad.txt"][..],
        &["rulebook", "below-horizon"],
        &["rulebook"],
    ] {
        let mut narrow = command(dir.path());
        let told = told(
            narrow
                .env("COLUMNS", "60")
                .args(arguments)
                .output()
                .unwrap(),
        );
        for line in told.out.lines() {
            // a formula or an example stays as it is, and a word is never broken
            let words = line.split_whitespace().count();
            let free =
                line.starts_with("line ") || words < 4 || arguments[0] == "rulebook" && words < 14;
            assert!(line.chars().count() <= 60 || free, "{line}");
        }
    }
}

#[test]
fn the_sun_is_cautioned_of_in_one_wording() {
    let rule = colure::rules::find("near-sun").unwrap();
    assert!(rule.source.contains(colure::output::summary::SUN_CAUTION));
}

#[test]
fn data_goes_to_standard_output_and_words_beside_it() {
    let dir = folder(&[("bad.txt", BAD.as_bytes())]);
    let json = colure(
        dir.path(),
        &["reduce", "--as", "jsonl", NOW[0], NOW[1], "bad.txt"],
    );
    for line in json.out.lines() {
        let record: serde_json::Value = serde_json::from_str(line).unwrap();
        assert_eq!(record["sheet"], "bad.txt");
    }
    assert_eq!(json.out.lines().count(), 1);
    assert!(json.err.contains("1 to reject"), "{}", json.err);
    let table = colure(dir.path(), &["reduce", NOW[0], NOW[1], "bad.txt"]);
    assert!(table.out.starts_with("Object"), "{}", table.out);
    assert!(
        table.err.contains("bad.txt, line 2:") && table.err.contains("reject"),
        "{}",
        table.err
    );
    let text = colure(dir.path(), &["screen", NOW[0], NOW[1], "bad.txt"]);
    assert!(
        text.out.contains("1 to reject") && text.err.is_empty(),
        "{}",
        text.err
    );
    assert!(!text.out.contains('\u{1b}'), "colours in a pipe");
    let at_1950 = colure(
        dir.path(),
        &["reduce", "--to", "B1950.0", "--as", "jsonl", "bad.txt"],
    );
    assert!(at_1950.out.contains("\"B1950.0\""), "{}", at_1950.out);
}

#[test]
fn a_folder_is_walked_in_order_and_standard_input_read() {
    let dir = folder(&[
        ("in/b.txt", GOOD.as_bytes()),
        ("in/a.txt", BAD.as_bytes()),
        ("in/.hidden.txt", BAD.as_bytes()),
        ("in/deep/c.txt", ASKED.as_bytes()),
        ("in/own.csv", b"name,ra,dec\nX,1 00 00,+5\n"),
        ("in/colure.yaml", b"known-objects: [ own.csv ]\n"),
    ]);
    let walked = colure(
        dir.path(),
        &["reduce", "--as", "jsonl", NOW[0], NOW[1], "in"],
    );
    let sheets: Vec<String> = walked
        .out
        .lines()
        .map(|l| {
            serde_json::from_str::<serde_json::Value>(l).unwrap()["sheet"]
                .as_str()
                .unwrap()
                .to_owned()
        })
        .collect();
    assert_eq!(
        sheets,
        ["in/a.txt", "in/b.txt", "in/deep/c.txt"],
        "{}",
        walked.err
    );
    for arguments in [
        &["reduce", "--as", "jsonl", "-"][..],
        &["reduce", "--as", "jsonl"],
    ] {
        let read = with_input(dir.path(), arguments, GOOD.as_bytes());
        assert!(read.out.contains("\"sheet\":\"-\""), "{}", read.out);
    }
}

#[test]
fn what_cannot_be_done_is_named_and_the_rest_is_done() {
    let dir = folder(&[
        ("good.txt", GOOD.as_bytes()),
        (
            "photo.bin",
            b"\x89PNG\r\n\x1a\n\0\0\0\rIHDR\0\0\x01\0\xff\xfe\0\0",
        ),
        ("empty.txt", b""),
        ("under/colure.yaml", b"horizon: { lowes: 5 }\n"),
        ("under/sheet.txt", GOOD.as_bytes()),
    ]);
    std::fs::create_dir(dir.path().join("nothing")).unwrap();
    let run = |sheet: &str| colure(dir.path(), &["screen", NOW[0], NOW[1], sheet, "good.txt"]);
    for (sheet, status, words) in [
        ("gone.txt", 2, &["gone.txt", "no such file"][..]),
        ("god.txt", 2, &["good.txt"]),
        ("nothing", 2, &["nothing", "holds no sheet"]),
        ("photo.bin", 2, &["photo.bin"]),
        ("empty.txt", 0, &["empty.txt", "empty"]),
        (
            "under/sheet.txt",
            2,
            &["colure.yaml, line 1", "lowes", "`lowest`"],
        ),
    ] {
        let told = run(sheet);
        assert_eq!(told.status, status, "{sheet}: {}", told.err);
        for word in words {
            assert!(
                told.err.contains(word),
                "{sheet}: no {word} in {}",
                told.err
            );
        }
        assert!(
            told.out.contains("Suspect 12"),
            "{sheet}: the other sheet was not done"
        );
    }
    // in a folder a picture beside the sheets is passed over
    let walked = colure(
        dir.path(),
        &["screen", NOW[0], NOW[1], ".", "--house", "under/none.yaml"],
    );
    assert_eq!(walked.status, 2);
    assert!(walked.err.contains("none.yaml"), "{}", walked.err);
    std::fs::remove_dir_all(dir.path().join("under")).unwrap();
    let walked = colure(dir.path(), &["screen", NOW[0], NOW[1], "."]);
    assert_eq!(walked.status, 0, "{}", walked.err);
    assert!(
        walked.err.contains("photo.bin: passed over"),
        "{}",
        walked.err
    );
}

#[test]
fn a_line_of_ten_megabytes_is_named_and_survived() {
    let dir = folder(&[]);
    let mut line = b"RA 05 34 31.9 Dec +22 00 52 (J2000.0) ".to_vec();
    line.resize(10_000_000, b'x');
    let started = std::time::Instant::now();
    let told = with_input(dir.path(), &["screen", "-"], &line);
    assert!(told.status < 2, "{}", told.err);
    assert!(
        told.err.contains("line 1") && told.err.contains("million bytes"),
        "{}",
        told.err
    );
    assert!(told.out.len() < 100_000);
    assert!(
        started.elapsed().as_secs() < 60,
        "took {:?}",
        started.elapsed()
    );
}

#[test]
fn a_closed_pipe_is_no_error() {
    let dir = folder(&[(
        "many.txt",
        BAD.repeat(400).replace("Object", "\nObject").as_bytes(),
    )]);
    let mut child = command(dir.path())
        .args(["screen", "--stop-at", "never", "many.txt"])
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    drop(child.stdout.take());
    let told = told(child.wait_with_output().unwrap());
    assert_eq!((told.status, told.err.as_str()), (0, ""));
}

#[test]
fn a_misspelt_rule_is_answered_with_the_nearest() {
    let dir = folder(&[("good.txt", GOOD.as_bytes())]);
    for arguments in [
        &["screen", "--only", "below-horizn", "good.txt"][..],
        &["screen", "--except", "below-horizn", "good.txt"],
        &["rulebook", "below-horizn"],
    ] {
        let told = colure(dir.path(), arguments);
        assert_eq!(told.status, 2);
        assert!(told.err.contains("`below-horizon`"), "{}", told.err);
    }
}

#[test]
fn the_rulebook_has_a_page_for_every_rule() {
    let dir = folder(&[]);
    let list = colure(dir.path(), &["rulebook"]);
    assert_eq!(list.status, 0);
    for rule in colure::rules::TABLE {
        assert!(list.out.contains(rule.name));
        let page = colure(dir.path(), &["rulebook", rule.name]);
        assert_eq!(page.status, 0);
        assert!(page.out.contains(&format!("[stet {}: ", rule.name)));
    }
}

#[test]
fn sites_shows_the_register_and_what_it_makes_of_words() {
    let dir = folder(&[(
        "colure.yaml",
        "sites:\n  Skarn Head: { latitude: 54°18.6′ N, longitude: 3°1.2′ W, zone: Europe/London }\n".as_bytes(),
    )]);
    let all = colure(dir.path(), &["sites"]);
    assert!(
        all.out.contains("Skarn Head: 54.3100° N, 3.0200° W"),
        "{}",
        all.out
    );
    assert_eq!(
        colure(dir.path(), &["sites", "skarn", "head", "obs."]).out,
        all.out
    );
    let pair = colure(dir.path(), &["sites", "54 18 36 N, 3 01 12 W"]);
    assert!(pair.out.contains("54.3100° N, 3.0200° W"), "{}", pair.out);
    // a hyphen before a number is a sign and no option, and the height may stand with it
    let south = colure(dir.path(), &["sites", "-27.2 -69.97 1690 m"]);
    assert!(
        south.out.contains("27.2000° S, 69.9700° W"),
        "{} {}",
        south.out,
        south.err
    );
    for (words, told) in [
        ("54 75 N, 3 01 W", "75 minutes: minutes stop below 60"),
        ("54 18 N, 3 01 O", "east in German"),
    ] {
        let wrong = colure(dir.path(), &["sites", words]);
        assert!(
            wrong.status == 1 && wrong.out.contains(told),
            "{}",
            wrong.out
        );
    }
    let unknown = colure(dir.path(), &["sites", "Skarm Head"]);
    assert_eq!(unknown.status, 1);
    assert!(
        unknown.out.contains("did you mean Skarn Head?"),
        "{}",
        unknown.out
    );
}

#[test]
fn alone_it_says_what_to_do_next() {
    let told = colure(folder(&[]).path(), &[]);
    assert_eq!(told.status, 2);
    assert!(told.err.contains("colure screen") && told.err.lines().count() <= 12);
}
