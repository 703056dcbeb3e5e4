//! The practice sheets (../shared/practice, truth by pyerfa and astropy), read but not reduced: every value, step, line and object.
use colure::report::{AngleUnit, PositionKind};
use colure::{reading, sheet::Sheet};
use std::collections::BTreeMap;

#[test]
fn every_practice_sheet_is_read() {
    let root = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("../shared/practice");
    let Ok(truth) = std::fs::read_to_string(root.join("truth.jsonl")) else {
        println!("no practice sheets here: skipped");
        return;
    };
    let mut by: BTreeMap<String, Vec<serde_json::Value>> = BTreeMap::new();
    for line in truth.lines() {
        let v: serde_json::Value = serde_json::from_str(line).unwrap();
        by.entry(v["sheet"].as_str().unwrap().to_string())
            .or_default()
            .push(v);
    }
    let mut wrong = Vec::new();
    for (name, rows) in &by {
        let sheet = Sheet::decode(name.clone(), &std::fs::read(root.join(name)).unwrap()).unwrap();
        let reports = reading::read(&sheet);
        let kind = |k: &str| rows.iter().filter(|t| t["kind"] == k).count();
        let sisters = name.starts_with("slips/") || name.starts_with("together/");
        if kind("none") == 1 && !reports.is_empty() {
            wrong.push(format!(
                "{name}: invented {:?}",
                reports
                    .iter()
                    .map(|r| r.position.span.of(&sheet.text))
                    .collect::<Vec<_>>()
            ));
        }
        if kind("none") == 0 && !sisters && reports.len() != rows.len() {
            wrong.push(format!(
                "{name}: {} reports, not {}",
                reports.len(),
                rows.len()
            ));
        }
        for (n, t) in rows.iter().enumerate().filter(|(_, t)| t["kind"] != "none") {
            let found = match t["line"].as_u64() {
                Some(line) => reports
                    .iter()
                    .find(|r| sheet.line_column(r.position.span.start).0 as u64 == line),
                None => reports.get(n),
            };
            let Some(r) = found else {
                wrong.push(format!("{name}:{} unread", t["line"]));
                continue;
            };
            let p = &r.position;
            if t["kind"] == "reading" && p.kind == PositionKind::Equatorial && t["ra_deg"].is_f64()
            {
                let scale = if p.first_unit == Some(AngleUnit::Degrees) {
                    1.0
                } else {
                    15.0
                };
                let ra = p.first.map_or(-1.0, |a| a.value() * scale);
                let dec = p.second.map_or(-99.0, |a| a.value());
                let (ra_step, dec_step) = (
                    p.first.map_or(0.0, |a| a.step() * scale * 3600.0),
                    p.second.map_or(0.0, |a| a.step() * 3600.0),
                );
                let near =
                    |a: f64, b: &serde_json::Value, e: f64| (a - b.as_f64().unwrap()).abs() <= e;
                if !near(ra, &t["ra_deg"], 1e-9)
                    || !near(dec, &t["dec_deg"], 1e-9)
                    || !near(ra_step, &t["ra_step"], 1e-6)
                    || !near(dec_step, &t["dec_step"], 1e-6)
                {
                    wrong.push(format!(
                        "{name}:{} {} read as {ra} {dec} steps {ra_step} {dec_step}: {:?}",
                        t["line"],
                        t["style"],
                        p.span.of(&sheet.text)
                    ));
                }
                if r.equinoxes.is_empty() {
                    wrong.push(format!("{name}:{} no equinox", t["line"]));
                }
                if t["utc"].is_string() && r.instants.is_empty() {
                    wrong.push(format!("{name}:{} no instant", t["line"]));
                }
                if t["lat"].is_f64() && r.site.is_none() && r.observer.is_none() {
                    wrong.push(format!("{name}:{} no site", t["line"]));
                }
                if let Some(o) = t["object"].as_str()
                    && r.object.as_ref().is_none_or(|x| x.value != o)
                {
                    wrong.push(format!(
                        "{name}:{} object {:?} not {o}",
                        t["line"],
                        r.object.as_ref().map(|o| &o.value)
                    ));
                }
            }
            if t["kind"] == "role"
                && format!("{:?}", r.role).to_lowercase() != t["role"].as_str().unwrap()
            {
                wrong.push(format!(
                    "{name}:{} role {:?} not {}",
                    t["line"], r.role, t["role"]
                ));
            }
        }
    }
    for w in wrong.iter().take(60) {
        println!("{w}");
    }
    assert!(wrong.is_empty(), "{} things read wrong", wrong.len());
}
