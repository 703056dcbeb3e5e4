//! Planted faults and slips against independent truth: the practice sheets, whose truth pyerfa 2.0.1.5 and astropy computed.
//!
//! The sheets stand beside the repository (`../shared/practice`, or where `COLURE_PRACTICE` says); without them this is silent.

#[path = "rules/sheet.rs"]
#[allow(dead_code)]
mod sheet;

use colure::house::House;
use colure::report::{Becomes, Examined, Verdict, Weight};
use colure::rules::{self, Run, Selection};
use colure::sky::{Direction, separation_deg};
use serde_json::Value;
use std::collections::BTreeMap;
use std::path::PathBuf;

const NOW: (f64, f64) = (2_461_345.5, 0.0);

fn practice() -> Option<PathBuf> {
    let dir = std::env::var_os("COLURE_PRACTICE").map_or_else(
        || PathBuf::from(concat!(env!("CARGO_MANIFEST_DIR"), "/../shared/practice")),
        PathBuf::from,
    );
    dir.join("truth.jsonl").exists().then_some(dir)
}

fn truth(dir: &std::path::Path, kind: &str) -> BTreeMap<String, Vec<Value>> {
    let mut sheets: BTreeMap<String, Vec<Value>> = BTreeMap::new();
    for line in std::fs::read_to_string(dir.join("truth.jsonl"))
        .unwrap()
        .lines()
    {
        let value: Value = serde_json::from_str(line).unwrap();
        if value["kind"] == kind {
            sheets
                .entry(value["sheet"].as_str().unwrap().to_string())
                .or_default()
                .push(value);
        }
    }
    sheets
}

/// Examines a sheet as a run of its own: reports by the line of their position.
fn examine(text: &str) -> BTreeMap<u64, Examined> {
    let house = House::default();
    let selection = Selection::default();
    let mut examined: Vec<Examined> = sheet::reports(text)
        .into_iter()
        .map(|report| {
            let meant = colure::reduction::mean(&report, &house, house.canonical);
            rules::examine(
                report,
                meant,
                &house,
                house.canonical,
                NOW,
                text,
                &selection,
            )
        })
        .collect();
    let mut runs = [Run {
        sheet: "sheet",
        text,
        house: &house,
        examined: &mut examined,
    }];
    rules::together(&mut runs, house.canonical, NOW, &selection);
    examined
        .into_iter()
        .map(|e| {
            (
                text[..e.report.position.span.start].matches('\n').count() as u64 + 1,
                e,
            )
        })
        .collect()
}

#[test]
fn planted_faults_are_found_and_the_rest_left_alone() {
    let Some(dir) = practice() else { return };
    let (mut wrong, mut count, mut heavy_beside) = (Vec::new(), 0, Vec::new());
    for (name, truths) in truth(&dir, "fault") {
        // sites by name and local zones need the section's house
        if name.starts_with("named/") {
            continue;
        }
        let text = std::fs::read_to_string(dir.join(&name)).unwrap();
        let found = examine(&text);
        for t in truths {
            count += 1;
            let line = t["line"].as_u64().unwrap();
            let case = t["case"].as_str().unwrap();
            let Some(e) = found.get(&line) else {
                wrong.push(format!("{name}:{line} {case}: no report"));
                continue;
            };
            let said: Vec<_> = e
                .findings
                .iter()
                .map(|f| (f.rule, f.weight.name(), f.message.as_str()))
                .collect();
            let right = match t["rule"].as_str() {
                None => e.verdict() == Verdict::Accept && e.slips.is_empty(),
                Some(rule) => {
                    let also = t["also"]
                        .as_array()
                        .map_or(Vec::new(), |a| a.iter().filter_map(Value::as_str).collect());
                    let hit = e
                        .findings
                        .iter()
                        .find(|f| f.rule == rule)
                        .or(e.findings.iter().find(|f| also.contains(&f.rule)));
                    heavy_beside.extend(
                        e.findings
                            .iter()
                            .filter(|f| {
                                f.weight > Weight::Note && Some(f.rule) != hit.map(|h| h.rule)
                            })
                            .map(|f| format!("{case}: {} {}", f.rule, f.message)),
                    );
                    hit.is_some_and(|f| {
                        f.weight.name() == t["weight"].as_str().unwrap()
                            && e.report.block.contains(f.primary)
                            && t["verdict"]
                                .as_str()
                                .map_or(e.verdict() != Verdict::Accept, |v| v == e.verdict().name())
                    })
                }
            };
            if !right {
                wrong.push(format!(
                    "{name}:{line} {case}: {said:?} slips {}",
                    e.slips.len()
                ));
            }
        }
    }
    println!(
        "{} of {count} wrong; {} heavy findings beside planted ones",
        wrong.len(),
        heavy_beside.len()
    );
    heavy_beside.iter().for_each(|h| println!("  beside {h}"));
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

/// Of the slips that the stated facts decide, the true one is first in 90 of 100 and among the first three in 99 (issue 5).
#[test]
fn planted_slips_are_named() {
    let Some(dir) = practice() else { return };
    let (mut first, mut in_three, mut decided, mut open, mut open_in_three) = (0, 0, 0, 0, 0);
    let mut misses = Vec::new();
    let mut took = std::time::Duration::ZERO;
    for (name, truths) in truth(&dir, "slip") {
        let text = std::fs::read_to_string(dir.join(&name)).unwrap();
        let begun = std::time::Instant::now();
        let found = examine(&text);
        took += begun.elapsed();
        for t in truths {
            let e = &found[&t["line"].as_u64().unwrap()];
            let slip = t["slip"].as_str().unwrap();
            let kinds: Vec<String> = e.slips.iter().map(|s| s.kinds.join("+")).collect();
            let among = kinds.iter().take(3).any(|k| k == slip);
            assert!(
                e.verdict() != Verdict::Accept,
                "{name} accepted: {:?}",
                e.meant
            );
            let sum: f64 = e.slips.iter().map(|s| s.weight).sum();
            assert!(
                e.slips.is_empty() || (sum - 1.0).abs() < 1e-9,
                "{name}: shares add up to {sum}"
            );
            if t["fits"].as_array().unwrap().len() > 1 {
                open += 1;
                open_in_three += usize::from(among);
                if !among {
                    println!(
                        "open {name} {} fits {} got {kinds:?}",
                        t["evidence"], t["fits"]
                    );
                }
                continue;
            }
            decided += 1;
            in_three += usize::from(among);
            let right =
                kinds.first().is_some_and(|k| k == slip) && becomes(&t, &e.slips[0].becomes);
            first += usize::from(right);
            if !right || kinds.len() > 1 {
                let list: Vec<String> = e
                    .slips
                    .iter()
                    .map(|s| format!("{} {:.2} {}", s.kinds.join("+"), s.weight, s.reading))
                    .collect();
                misses.push(format!(
                    "{} {name} {}: {} {list:?}",
                    if right { "also" } else { "MISS" },
                    t["evidence"],
                    e.findings
                        .iter()
                        .map(|f| f.rule)
                        .collect::<Vec<_>>()
                        .join(",")
                ));
            }
        }
    }
    println!(
        "decided {decided}: first {first}, in three {in_three}; open {open}: in three {open_in_three}; {:?} in all",
        took
    );
    misses.iter().for_each(|m| println!("  {m}"));
    assert!(
        first * 100 >= decided * 90 && in_three * 100 >= decided * 99,
        "{first} and {in_three} of {decided}"
    );
}

fn becomes(t: &Value, becomes: &[Becomes]) -> bool {
    let number = |v: &Value| v.as_f64().unwrap();
    let kind = (t["slip"].as_str().unwrap(), t["evidence"].as_str().unwrap());
    let digit = matches!(
        kind.0,
        "digit-miskeyed" | "digits-exchanged" | "month-misread"
    );
    if digit && matches!(kind.1, "constellation" | "altitude") {
        return true;
    }
    becomes.iter().any(|b| match b {
        Becomes::Read(_, reduced) if t["becomes"] == "read" => {
            let icrs = Direction {
                ra_deg: number(&t["icrs"][0]),
                dec_deg: number(&t["icrs"][1]),
            };
            let here = Direction {
                ra_deg: reduced.icrs_ra_deg,
                dec_deg: reduced.icrs_dec_deg,
            };
            let limit = if digit && kind.1 == "sisters" {
                120.0
            } else {
                5.0
            };
            separation_deg(icrs, here) * 3600.0 < limit
        }
        Becomes::Instant(instant) if t["becomes"] == "instant" => {
            let at = chrono::NaiveDateTime::parse_from_str(
                t["utc"].as_str().unwrap(),
                "%Y-%m-%dT%H:%M:%S",
            )
            .unwrap();
            let at = at.and_utc().timestamp() as f64;
            (((instant.utc.0 - 2_440_587.5) + instant.utc.1) * 86_400.0 - at).abs() < 2.0
        }
        Becomes::Site(site) if t["becomes"] == "site" => {
            (site.latitude_deg - number(&t["lat"])).abs() < 1e-3
                && (site.longitude_deg - number(&t["lon"])).abs() < 1e-3
        }
        _ => false,
    })
}
