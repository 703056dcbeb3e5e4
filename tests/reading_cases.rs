//! Ways of writing, each with its meaning told by hand in `tests/reading/*.txt`: values, steps, tags, names, instants, sites.
//!
//! The forms are those counted in real texts (common practice, no source); all values are invented. Instants in UTC were worked out by hand.

use colure::house::House;
use colure::report::{AngleUnit, Meant, PositionKind, Report};
use colure::{reading, reduction, sheet::Sheet};

struct Case {
    name: String,
    sheet: String,
    meanings: Vec<String>,
}

fn cases(text: &str) -> Vec<Case> {
    let mut found: Vec<Case> = Vec::new();
    for line in text.lines() {
        if let Some(name) = line.strip_prefix("== ") {
            found.push(Case {
                name: name.to_string(),
                sheet: String::new(),
                meanings: Vec::new(),
            });
        } else if let Some(case) = found.last_mut() {
            match line.strip_prefix("-> ") {
                Some(meaning) => case.meanings.push(meaning.to_string()),
                None => case.sheet.push_str(&format!("{line}\n")),
            }
        }
    }
    found
}

/// `h 5 34 31.9` or `d -22 00`: degrees and the value of the last digit in arcsec.
fn told(words: &str) -> (f64, f64) {
    let mut fields = words.split_whitespace();
    let scale = if fields.next() == Some("h") {
        15.0
    } else {
        1.0
    };
    let numbers: Vec<&str> = fields.collect();
    let negative = numbers[0].starts_with('-');
    let mut value = 0.0;
    for (i, n) in numbers.iter().enumerate() {
        value += n.trim_start_matches(['+', '-']).parse::<f64>().unwrap() / 60f64.powi(i as i32);
    }
    let last = numbers[numbers.len() - 1];
    let places = last.split_once('.').map_or(0, |(_, p)| p.len());
    let step = 10f64.powi(-(places as i32)) / 60f64.powi(numbers.len() as i32 - 1);
    (
        if negative { -value } else { value } * scale,
        step * scale * 3600.0,
    )
}

fn wrong_with(r: &Report, m: &Meant, meaning: &str) -> Vec<String> {
    let field: Vec<&str> = meaning.split('|').map(str::trim).collect();
    let said = |i: usize| field.get(i).copied().filter(|f| !matches!(*f, "*" | "-"));
    let mut wrong = Vec::new();
    let p = &r.position;
    let scale = if p.kind != PositionKind::Horizontal && p.first_unit != Some(AngleUnit::Degrees) {
        15.0
    } else {
        1.0
    };
    let scale = if p.first.is_some_and(|a| a.parts().len() == 1) && p.first_unit.is_none() {
        1.0
    } else {
        scale
    };
    for (axis, angle, scale) in [(0, p.first, scale), (1, p.second, 1.0)] {
        let (value, step) = told(field[axis]);
        match angle {
            None => wrong.push(format!("coordinate {axis} unread")),
            Some(mut a) => {
                // an hour angle is told west positive, whatever letter says so
                if p.kind == PositionKind::HourAngle {
                    a.compass = None;
                }
                if (a.value() * scale - value).abs() > 1e-9
                    || (a.step() * scale * 3600.0 / step - 1.0).abs() > 1e-9
                {
                    wrong.push(format!(
                        "{} ± {} for {}",
                        a.value() * scale,
                        a.step() * scale * 3600.0,
                        field[axis]
                    ));
                }
            }
        }
    }
    if let Some(e) = said(2) {
        let read = m.read.and_then(|r| r.frame).map(|f| f.equinox.to_string());
        if read.as_deref() != Some(e) {
            wrong.push(format!("equinox {read:?}, not {e}"));
        }
    }
    if let Some(o) = said(3)
        && r.object.as_ref().map(|o| &*o.value) != Some(o)
    {
        wrong.push(format!(
            "object {:?}, not {o}",
            r.object.as_ref().map(|o| &o.value)
        ));
    }
    if let Some(role) = said(4)
        && format!("{:?}", r.role).to_lowercase() != role
    {
        wrong.push(format!("role {:?}, not {role}", r.role));
    }
    if said(5) == Some("none") {
        if m.instant.is_some() || !r.instants.is_empty() {
            wrong.push(format!("instant {:?}, where none is told", r.instants));
        }
    } else if let Some(utc) = said(5) {
        let want: chrono::NaiveDateTime = utc.parse().unwrap();
        let want_jd = want.and_utc().timestamp_millis() as f64 / 86_400_000.0 + 2_440_587.5;
        match m.instant {
            None => wrong.push("no instant".to_string()),
            Some(i) if ((i.utc.0 - want_jd) + i.utc.1).abs() * 86400.0 > 0.05 => {
                wrong.push(format!("instant {:?}, not {utc}", i.utc))
            }
            Some(i) => {
                if let Some(step) = said(6)
                    && (i.step_s / step.parse::<f64>().unwrap() - 1.0).abs() > 1e-6
                {
                    wrong.push(format!("instant's step {}", i.step_s));
                }
            }
        }
    }
    if said(7) == Some("none") {
        if r.site.is_some() {
            wrong.push(format!("site {:?}, where none is told", r.site));
        }
    } else if let Some(place) = said(7) {
        let want: Vec<f64> = place
            .split_whitespace()
            .map(|n| n.parse().unwrap())
            .collect();
        match &m.site {
            Some(s)
                if (s.latitude_deg - want[0]).abs() < 1e-6
                    && (s.longitude_deg - want[1]).abs() < 1e-6 => {}
            s => wrong.push(format!("site {s:?}, not {place}")),
        }
    }
    wrong
}

fn hold(file: &str) {
    let text = std::fs::read_to_string(format!(
        "{}/tests/reading/{file}",
        env!("CARGO_MANIFEST_DIR")
    ))
    .unwrap();
    let house = House::default();
    let mut bad = 0;
    let all = cases(&text);
    assert!(all.len() > 10, "{file} holds cases");
    for case in &all {
        let sheet = Sheet::decode(case.name.clone(), case.sheet.as_bytes()).unwrap();
        let reports = reading::read(&sheet);
        let wanted: Vec<&String> = case.meanings.iter().filter(|m| *m != "none").collect();
        assert!(!case.meanings.is_empty(), "{}: no meaning told", case.name);
        let mut wrong = Vec::new();
        if reports.len() != wanted.len() {
            wrong.push(format!("{} reports, not {}", reports.len(), wanted.len()));
        }
        for (r, meaning) in reports.iter().zip(&wanted) {
            wrong.extend(wrong_with(
                r,
                &reduction::mean(r, &house, house.canonical),
                meaning,
            ));
        }
        if !wrong.is_empty() {
            bad += 1;
            println!("== {}\n   {}", case.name, wrong.join("\n   "));
        }
    }
    assert_eq!(bad, 0, "of {} cases of {file}", all.len());
}

#[test]
fn every_style_is_read_as_told() {
    hold("styles.txt");
}

#[test]
fn every_carrier_is_read_as_told() {
    hold("carriers.txt");
}

#[test]
fn every_instant_and_site_is_read_as_told() {
    hold("instants.txt");
}

#[test]
fn every_quantity_is_read_as_told() {
    hold("quantities.txt");
}
