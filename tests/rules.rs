//! The rules: the table against the folder, every page against its rule, one report that breaks each rule and one that nearly does.

#[path = "rules/sheet.rs"]
#[allow(dead_code)]
mod sheet;

use colure::house::House;
use colure::report::{Examined, Weight};
use colure::rules::{self, HEADINGS, Selection, TABLE};

/// 2026 November 1, 0h UTC: what counts as now.
const NOW: (f64, f64) = (2_461_345.5, 0.0);

fn examine_with(text: &str, house: &House, selection: &Selection) -> Vec<Examined> {
    sheet::reports(text)
        .into_iter()
        .map(|report| {
            let meant = colure::reduction::mean(&report, house, house.canonical);
            rules::examine(report, meant, house, house.canonical, NOW, text, selection)
        })
        .collect()
}

fn examine_together(text: &str) -> Vec<Examined> {
    let house = House::default();
    let selection = Selection::default();
    let mut examined = examine_with(text, &house, &selection);
    let mut runs = [rules::Run {
        sheet: "sheet",
        text,
        house: &house,
        examined: &mut examined,
    }];
    rules::together(&mut runs, house.canonical, NOW, &selection);
    examined
}

#[test]
fn the_table_is_the_folder() {
    let mut files: Vec<String> =
        std::fs::read_dir(concat!(env!("CARGO_MANIFEST_DIR"), "/src/rules"))
            .unwrap()
            .filter_map(|entry| entry.unwrap().file_name().into_string().ok())
            .filter_map(|name| name.strip_suffix(".rs").map(|n| n.replace('_', "-")))
            .filter(|name| name != "mod")
            .collect();
    let mut names: Vec<String> = TABLE.iter().map(|rule| rule.name.to_string()).collect();
    files.sort();
    names.sort();
    assert_eq!(files, names);
}

/// Names and weights of DESIGN section 5, row by row.
#[test]
fn the_table_is_the_design() {
    let design = "sexagesimal-out-of-range reject, ra-out-of-range reject, dec-out-of-range reject, ra-unit-unclear query, \
        marks-mixed query, dec-sign-missing note, position-incomplete query, position-disagrees query, steps-uneven note, \
        equinox-missing query, equinox-conflict query, tag-misspelt query, system-equinox-mismatch query, \
        equinox-implausible reject, of-date-undated reject, apparent-or-mean query, date-impossible reject, \
        date-order-unclear query, zone-missing query, zone-doubtful query, instant-heliocentric note, instant-missing note, \
        instant-in-future reject, instant-disagrees query, site-unknown query, site-out-of-range reject, \
        site-hemisphere-unclear query, site-disagrees query, never-rises reject, below-horizon reject, low-altitude query, \
        daylight query, near-sun query, near-moon note, horizon-disagrees query, constellation-disagrees query, \
        object-elsewhere query, known-object-here query, report-repeated note, report-outlying query, stet-idle note";
    let table: Vec<String> = TABLE
        .iter()
        .map(|r| format!("{} {}", r.name, r.weight.name()))
        .collect();
    assert_eq!(design.split(", ").map(str::trim).collect::<Vec<_>>(), table);
}

#[test]
fn every_page_has_its_headings_in_order() {
    for rule in TABLE {
        let page = rule.page();
        let places: Vec<Option<usize>> = HEADINGS
            .iter()
            .map(|h| page.find(&format!("\n{h}\n")))
            .collect();
        assert!(
            places.iter().all(Option::is_some) && places.is_sorted(),
            "{}: {places:?}",
            rule.name
        );
        assert!(
            page.contains(&format!("[stet {}: reason]", rule.name)),
            "{}",
            rule.name
        );
        for other in rule.gives_way_to {
            assert!(
                rules::find(other).is_some(),
                "{} gives way to {other}",
                rule.name
            );
        }
    }
}

/// Rules that need a house of their own, a reader, or zone tables for their page's example to speak.
const ELSEWHERE: [&str; 2] = ["site-unknown", "site-disagrees"];

/// Each page's example breaks its rule at the words marked, with no heavier finding of another rule about them.
#[test]
fn every_page_has_an_example_that_breaks_its_rule() {
    let mut wrong = Vec::new();
    for rule in TABLE.iter().filter(|r| !ELSEWHERE.contains(&r.name)) {
        let (text, marked) = rule.example();
        assert_eq!(marked.len(), 1, "{}: one place is marked", rule.name);
        let all = examine_together(&text);
        let findings: Vec<_> = all.iter().flat_map(|e| &e.findings).collect();
        let hit = findings.iter().find(|f| f.rule == rule.name);
        let place = hit.is_some_and(|f| f.primary.overlaps(marked[0]));
        let others: Vec<_> = findings
            .iter()
            .filter(|f| f.rule != rule.name)
            .map(|f| (f.rule, f.weight, &f.message))
            .collect();
        if !place || others.iter().any(|(_, w, _)| *w > Weight::Note) {
            wrong.push(format!(
                "{}: {:?} at {:?} ({}); others {others:?}",
                rule.name,
                hit.map(|f| &f.message),
                hit.map(|f| f.primary),
                marked[0].of(&text)
            ));
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}
