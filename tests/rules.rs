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

/// A near miss of each rule, and a second report that breaks it where a published fact says that it must. Source beside each.
struct Row {
    rule: &'static str,
    breaks: Option<&'static str>,
    keeps: &'static [&'static str],
    /// Where the facts are from.
    #[allow(dead_code)]
    source: &'static str,
}

const ROWS: &[Row] = &[
    Row {
        rule: "sexagesimal-out-of-range",
        breaks: Some("RA 12 59 60 Dec +42 00 00 (J2000.0)\n"),
        keeps: &["RA 12 59 59.99 Dec +42 59 59.99 (J2000.0)\n"],
        source: "ISO 80000-3:2019, 3-5",
    },
    Row {
        rule: "ra-out-of-range",
        breaks: Some("RA 24 00 00 Dec +42 00 00 (J2000.0)\n"),
        keeps: &[
            "RA 23 59 59.99 Dec +42 00 00 (J2000.0)\n",
            "RA 359.99° Dec +42.00° (J2000.0)\n",
        ],
        source: "common practice, no source",
    },
    Row {
        rule: "dec-out-of-range",
        breaks: Some("RA 12 00 00 Dec -90 00 01 (J2000.0)\n"),
        keeps: &[
            "RA 12 00 00 Dec +90 00 00 (J2000.0)\n",
            "RA 12 00 00 Dec +89 75 00 (J2000.0)\n",
        ],
        source: "common practice, no source",
    },
    Row {
        rule: "ra-unit-unclear",
        breaks: Some("RA 9° 14' 22\" Dec +42 00 00 (J2000.0)\n"),
        keeps: &[
            "RA 9.5958h Dec +33.3969 (J2000.0)\n",
            "RA 143.9370 Dec +33.3969 (J2000.0)\n",
            "RA 9.5958 Dec +33.3969 (J2000.0)\n(that is 9h 35m 44.9s, +33° 23' 49\")\n",
        ],
        source: "DESIGN section 4",
    },
    Row {
        rule: "marks-mixed",
        breaks: Some("RA 6h 11m 40s Dec +51h 20m 08s (J2000.0)\n"),
        keeps: &[
            "RA 6h 11m 40s Dec -26d 51m 03.8s (J2000.0)\n",
            "RA 06:11:40 Dec +14° 02′ 10″ (J2000.0)\n",
        ],
        source: "WRITING 2a, F3 and F5",
    },
    Row {
        rule: "dec-sign-missing",
        breaks: None,
        keeps: &["RA 12 23 06.8 Dec +43 29 19 (J2000.0)\n"],
        source: "WRITING 2c",
    },
    Row {
        rule: "position-incomplete",
        breaks: None,
        keeps: &["RA 05 31 29.2 Dec +21 59 18 (J2000.0)\n"],
        source: "common practice, no source",
    },
    Row {
        // 18h 05m 46s = 271.44167°, 26° 02′ 46″ = 26.04611° by arithmetic; the galactic pole: ESA SP-1200, vol. 1, 1.5.3
        rule: "position-disagrees",
        breaks: Some("RA 18 05 46 Dec +26 02 46 (J2000.0)\n(that is 271.4417°, +26.0561°)\n"),
        keeps: &[
            "RA 18 05 46 Dec +26 02 46 (J2000.0)\n(that is 271.4417°, +26.0461°)\n",
            "RA 192.85948° Dec +27.12825° (J2000.0)\n(galactic 0.0, +90.0)\n",
        ],
        source: "arithmetic; ESA SP-1200 (1997)",
    },
    Row {
        rule: "steps-uneven",
        breaks: None,
        keeps: &["RA 06 19 55.1 Dec -58 44 02 (J2000.0)\n"],
        source: "arithmetic: 0.1 s × 15 × cos 58.7° = 0.78″ beside 1″",
    },
    Row {
        rule: "equinox-missing",
        breaks: None,
        keeps: &[
            "RA 06 19 55.1 Dec -58 44 02 (1950.0)\n",
            "RA 06 19 55.1 Dec -58 44 02 (J200)\n",
        ],
        source: "DESIGN section 4",
    },
    Row {
        rule: "equinox-conflict",
        breaks: None,
        keeps: &["RA 06 19 55.1 Dec -58 44 02 (J2000.0)\nEquinox 2000\n"],
        source: "FITS standard 4.0, section 8.3",
    },
    Row {
        rule: "tag-misspelt",
        breaks: Some("RA 06 19 55.1 Dec -58 44 02 (J2OOO.0)\n"),
        keeps: &["RA 06 19 55.1 Dec -58 44 02 (J2000)\n"],
        source: "WRITING 3c",
    },
    Row {
        rule: "system-equinox-mismatch",
        breaks: Some("RA 06 19 55.1 Dec -58 44 02 (FK5 B1950.0)\n"),
        keeps: &[
            "RA 06 19 55.1 Dec -58 44 02 (FK5 J2000.0)\n",
            "RA 06 19 55.1 Dec -58 44 02 (FK4 1950)\n",
        ],
        source: "FITS standard 4.0, section 8.3",
    },
    Row {
        rule: "equinox-implausible",
        breaks: Some("RA 06 19 55.1 Dec -58 44 02 (J1599.9)\n"),
        keeps: &[
            "RA 06 19 55.1 Dec -58 44 02 (B1600.0)\n",
            "RA 06 19 55.1 Dec -58 44 02 (J2100.0)\n",
        ],
        source: "DESIGN section 5",
    },
    Row {
        rule: "of-date-undated",
        breaks: Some("HA 06 19 55 Dec -58 44 02\n"),
        keeps: &["RA 06 19 55.1 Dec -58 44 02 (mean equinox of date)\nDate: 2019-01-04 21:15 UT\n"],
        source: "DESIGN section 5",
    },
    Row {
        rule: "apparent-or-mean",
        breaks: None,
        keeps: &[
            "RA 06 19 55.1 Dec -58 44 02 (mean equinox of date)\nDate: 2019-01-04 21:15 UT\n",
            "RA 06h19m Dec -58°44' (equinox of date)\nDate: 2019-01-04 21:15 UT\n",
        ],
        source: "DESIGN section 4",
    },
    Row {
        // leap seconds: at the end of 2016 (Bulletin C 52), none at the end of 2017 (Bulletin C 54)
        rule: "date-impossible",
        breaks: Some("RA 06 19 55.1 Dec -58 44 02 (J2000.0)\nDate: 2017-12-31 23:59:60 UT\n"),
        keeps: &[
            "RA 06 19 55.1 Dec -58 44 02 (J2000.0)\nDate: 2016-12-31 23:59:60 UT\n",
            "RA 06 19 55.1 Dec -58 44 02 (J2000.0)\nDate: 2000-02-29 21:15 UT\n",
        ],
        source: "IERS Bulletins C 52 and C 54; the Gregorian rule",
    },
    Row {
        rule: "date-order-unclear",
        breaks: None,
        keeps: &["RA 06 19 55.1 Dec -58 44 02 (J2000.0)\nDate: 25/08/2013 17:08 UT\n"],
        source: "common practice, no source",
    },
    Row {
        rule: "zone-missing",
        breaks: Some("RA 06 19 55.1 Dec -58 44 02 (J2000.0)\nDate: 2019-01-04 21:15 local time\n"),
        keeps: &[
            "RA 06 19 55.1 Dec -58 44 02 (J2000.0)\nDate: 2019-01-04 21:15 UT\n",
            "RA 06 19 55.1 Dec -58 44 02 (J2000.0)\nDate: 2019-01-04.88 UT\n",
        ],
        source: "DESIGN section 4",
    },
    Row {
        rule: "zone-doubtful",
        breaks: None,
        keeps: &[
            "RA 18 02 10 Dec +02 30 00 (J2000.0)\nDate: 2014-01-08 23:10 EST\nSite: 41.07 N 75.69 W, 400 m (time zone America/New_York)\n",
        ],
        source: "IANA Time Zone Database: New York is on EST in January",
    },
    Row {
        rule: "instant-heliocentric",
        breaks: None,
        keeps: &["RA 12:58:40.69 Dec -46:50:36.1 (J2000.0)\nDate: JD 2455682.9139\n"],
        source: "DESIGN section 4",
    },
    Row {
        rule: "instant-missing",
        breaks: None,
        keeps: &[
            "RA 06 05 57 Dec +54 15 18 (J2000.0)\n",
            "RA 06 05 57 Dec +54 15 18 (J2000.0)\nDate: 2019-01-04 21:15 UT\nSite: 14.89 N 145.79 E, 15 m\n",
        ],
        source: "DESIGN section 5",
    },
    Row {
        rule: "instant-in-future",
        breaks: Some("RA 06 05 57 Dec +54 15 18 (J2000.0)\nDate: 2026-11-01 00:01 UT\n"),
        keeps: &["RA 06 05 57 Dec +54 15 18 (J2000.0)\nDate: 2026-10-31 23:59 UT\n"],
        source: "now is 2026 November 1, 0h",
    },
    Row {
        // 1957 October 4.81 = JD 2436116.31; 1954 June 30 was a Wednesday
        rule: "instant-disagrees",
        breaks: Some("RA 06 05 57 Dec +54 15 18 (J2000.0)\nDate: Tuesday 1954-06-30 21:00 UT\n"),
        keeps: &[
            "RA 06 05 57 Dec +54 15 18 (J2000.0)\nDate: 1957-10-04.81 UT (JD 2436116.31)\n",
            "RA 06 05 57 Dec +54 15 18 (J2000.0)\nDate: Wednesday 1954-06-30 21:00 UT\n",
            "RA 06 05 57 Dec +54 15 18 (J2000.0)\nDate: 2024-02-29/1 21:00 UT\n",
        ],
        source: "Meeus 1998, examples 7.a and 7.e",
    },
    Row {
        rule: "site-out-of-range",
        breaks: Some("RA 06 05 57 Dec +54 15 18 (J2000.0)\nSite: 90.01 S 5.00 W, 15 m\n"),
        keeps: &["RA 06 05 57 Dec +54 15 18 (J2000.0)\nSite: 90.00 S 5.00 W, 15 m\n"],
        source: "ISO 6709:2022",
    },
    Row {
        rule: "site-hemisphere-unclear",
        breaks: None,
        keeps: &[
            "RA 06 05 57 Dec +54 15 18 (J2000.0)\nSite: lat 46.28 N, long 20.07 E, 560 m\n",
            "RA 06 05 57 Dec +54 15 18 (J2000.0)\nSite: lat +46.28, long -20.07, 560 m\n",
        ],
        source: "ISO 6709:2022",
    },
    Row {
        // at latitude 52 what is south of -38 never rises; refraction brings up 34′ more
        rule: "never-rises",
        breaks: Some(
            "RA 18 00 00 Dec -39 00 00 (mean equinox of date)\nDate: 2018-07-01 23:00 UT\nSite: 52.00 N 5.00 E, 0 m\n",
        ),
        keeps: &[
            "RA 18 00 00 Dec -38 30 00 (mean equinox of date)\nDate: 2018-07-01 23:00 UT\nSite: 52.00 N 5.00 E, 0 m\n",
        ],
        source: "worked_examples.csv W169 and W171 (definition, Meeus 1998, chapter 15)",
    },
    Row {
        // a place that rises at Boston at 12h25m and sets at 2h55m UT (Venus on 1988 March 20)
        rule: "below-horizon",
        breaks: Some(
            "RA 2h 44m 30s Dec +18 15 00 (mean equinox of date)\nDate: 1988-03-20 12:00 UT\nSite: 42.33 N 71.08 W, 0 m\n",
        ),
        keeps: &[
            "RA 2h 44m 30s Dec +18 15 00 (mean equinox of date)\nDate: 1988-03-20 12:50 UT\nSite: 42.33 N 71.08 W, 0 m\n",
            "RA 2h 44m 30s Dec +18 15 00 (mean equinox of date)\nDate: 1988-03-20\nSite: 42.33 N 71.08 W, 0 m\n",
        ],
        source: "Meeus 1998, example 15.a",
    },
    Row {
        rule: "low-altitude",
        breaks: Some(
            "RA 2h 44m 30s Dec +18 15 00 (mean equinox of date)\nDate: 1988-03-20 12:35 UT\nSite: 42.33 N 71.08 W, 0 m\n",
        ),
        keeps: &[
            "RA 2h 44m 30s Dec +18 15 00 (mean equinox of date)\nDate: 1988-03-20 13:30 UT\nSite: 42.33 N 71.08 W, 0 m\n",
        ],
        source: "Meeus 1998, example 15.a: ten minutes after rising it is below 5°, an hour after above",
    },
    Row {
        // the Sun sets at six by local mean time at an equinox: 22:51 UT at Boston
        rule: "daylight",
        breaks: Some(
            "RA 2h 44m 30s Dec +18 15 00 (mean equinox of date)\nDate: 1988-03-20 22:30 UT\nSite: 42.33 N 71.08 W, 0 m\n",
        ),
        keeps: &[
            "RA 2h 44m 30s Dec +18 15 00 (mean equinox of date)\nDate: 1988-03-20 23:50 UT\nSite: 42.33 N 71.08 W, 0 m\n",
            "Object: the Moon\nRA 2h 44m 30s Dec +18 15 00 (mean equinox of date)\nDate: 1988-03-20 22:30 UT\nSite: 42.33 N 71.08 W, 0 m\n",
        ],
        source: "from memory",
    },
    Row {
        // the Sun on 1992 October 13, 0h: 13h13m31s -7°47′06″
        rule: "near-sun",
        breaks: Some(
            "RA 13 13 31 Dec +06 00 00 (mean equinox of date)\nDate: 1992-10-13 00:00 UT\n",
        ),
        keeps: &["RA 13 13 31 Dec +07 30 00 (mean equinox of date)\nDate: 1992-10-13 00:00 UT\n"],
        source: "Meeus 1998, example 25.a",
    },
    Row {
        // the Moon on 1992 April 12, 0h: 134.688°, +13.768°, 56′ of parallax at most
        rule: "near-moon",
        breaks: Some(
            "RA 134.69° Dec +15.00° (mean equinox of date)\nDate: 1992-04-12 00:00 UT\nSite: 40.00 N 10.00 W, 0 m\n",
        ),
        keeps: &[
            "RA 134.69° Dec +18.00° (mean equinox of date)\nDate: 1992-04-12 00:00 UT\nSite: 40.00 N 10.00 W, 0 m\n",
        ],
        source: "Meeus 1998, example 47.a",
    },
    Row {
        // altitude 15.1249°, azimuth 68.0337° from the south
        rule: "horizon-disagrees",
        breaks: Some(
            "RA 23 09 16.6 Dec -06 43 12 (apparent equinox of date)\nDate: 1987-04-10 19:21 UT\nSite: 38.92 N 77.07 W, 0 m\nAltitude 17.0°\n",
        ),
        keeps: &[
            "RA 23 09 16.6 Dec -06 43 12 (apparent equinox of date)\nDate: 1987-04-10 19:21 UT\nSite: 38.92 N 77.07 W, 0 m\nAltitude 15.1°\nAzimuth 248.0°\n",
        ],
        source: "Meeus 1998, example 13.b",
    },
    Row {
        rule: "constellation-disagrees",
        breaks: Some("RA 5h07m12s Dec +09°07′12″ (B1950.0)\nConstellation: Tau\n"),
        keeps: &[
            "RA 5h07m12s Dec +09°07′12″ (B1950.0)\nConstellation: Ori\n",
            "RA 19h00m00s Dec -40°00′00″ (B1950.0)\nConstellation: CrA\n",
        ],
        source: "Roman 1987, PASP 99, 695, sample of CDS VI/42 (W174, W178)",
    },
    Row {
        // the Moon as above; Alphecca in the IAU Catalog of Star Names: 233.672°, +26.715°
        rule: "object-elsewhere",
        breaks: Some(
            "Object: the Moon\nRA 8h 58m 45s Dec +15 46 06 (apparent equinox of date)\nDate: 1992-04-12 00:00 UT\n",
        ),
        keeps: &[
            "Object: the Moon\nRA 8h 58m 45s Dec +13 46 06 (apparent equinox of date)\nDate: 1992-04-12 00:00 UT\n",
            "Object: Alphecca\nRA 15 34 41.3 Dec +26 42 53 (J2000.0)\n",
        ],
        source: "Meeus 1998, example 47.a; IAU Catalog of Star Names",
    },
    Row {
        // Messier 1 at 05 34.5 +22 01, 3′ of radius
        rule: "known-object-here",
        breaks: Some("Object: nova\nRA 05 34 32 Dec +22 02 00 (J2000.0)\n"),
        keeps: &[
            "Object: nova\nRA 05 34 32 Dec +22 20 00 (J2000.0)\n",
            "Object: Messier 1\nRA 05 34 32 Dec +22 01 00 (J2000.0)\nNew measurement\n",
        ],
        source: "messier.csv",
    },
    Row {
        rule: "stet-idle",
        breaks: Some("RA 05 34 32 Dec +22 20 00 (J2000.0)\n[stet daylihgt: seen in twilight]\n"),
        keeps: &[
            "RA 05 34 32 Dec +22 20 00\n[stet equinox-missing: the observer uses a chart of 2000]\n",
        ],
        source: "DESIGN section 5",
    },
];

#[test]
fn each_rule_speaks_when_it_must_and_only_then() {
    let mut wrong = Vec::new();
    for row in ROWS {
        let speaks = |text: &str| {
            examine_together(text)
                .iter()
                .flat_map(|e| e.findings.clone())
                .find(|f| f.rule == row.rule)
        };
        if let Some(text) = row.breaks
            && speaks(text).is_none()
        {
            let all: Vec<_> = examine_together(text)
                .iter()
                .flat_map(|e| e.findings.clone())
                .map(|f| f.message)
                .collect();
            wrong.push(format!("{} is silent on {text}  {all:?}", row.rule));
        }
        for text in row.keeps {
            assert!(!sheet::reports(text).is_empty(), "{text}");
            if let Some(finding) = speaks(text) {
                wrong.push(format!("{} says {} of {text}", row.rule, finding.message));
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    let tried: Vec<&str> = ROWS.iter().map(|r| r.rule).collect();
    let untried: Vec<&str> = TABLE
        .iter()
        .map(|r| r.name)
        .filter(|n| !tried.contains(n))
        .collect();
    assert_eq!(
        untried,
        [
            "site-unknown",
            "site-disagrees",
            "report-repeated",
            "report-outlying"
        ]
    );
}

const SET: &str = "Object: Suspect 131\nRA 03 28 23 Dec -49 18 42 (J2000.0)\nDate: 1992-05-30 15:37 UT\nSite: 3.35 S 113.39 E, 15 m\n";

fn rules_of(text: &str, house: &House, selection: &Selection) -> Vec<(&'static str, Weight)> {
    examine_with(text, house, selection)
        .iter()
        .flat_map(|e| &e.findings)
        .map(|f| (f.rule, f.weight))
        .collect()
}

#[test]
fn one_cause_gives_one_finding() {
    let (house, all) = (House::default(), Selection::default());
    assert_eq!(
        rules_of(SET, &house, &all),
        [("below-horizon", Weight::Reject)]
    );
    let never = "RA 03 28 23 Dec -89 18 42 (J2000.0)\nDate: 1992-05-30 15:37 UT\nSite: 53.35 N 113.39 E, 15 m\nAltitude 30°\n";
    assert_eq!(
        rules_of(never, &house, &all),
        [("never-rises", Weight::Reject)]
    );
}

#[test]
fn the_house_sets_weights_and_the_run_selects() {
    let all = Selection::default();
    let mut house = House::default();
    house
        .weights
        .insert("below-horizon".to_string(), Some(Weight::Query));
    assert_eq!(
        rules_of(SET, &house, &all),
        [("below-horizon", Weight::Query)]
    );
    house.weights.insert("below-horizon".to_string(), None);
    assert!(
        !rules_of(SET, &house, &all)
            .iter()
            .any(|(rule, _)| *rule == "below-horizon")
    );
    let only = Selection {
        only: vec!["daylight".to_string()],
        except: Vec::new(),
    };
    assert!(
        rules_of(SET, &House::default(), &only)
            .iter()
            .all(|(rule, _)| *rule == "daylight")
    );
    let except = Selection {
        only: Vec::new(),
        except: vec!["below-horizon".to_string()],
    };
    assert!(
        !rules_of(SET, &House::default(), &except)
            .iter()
            .any(|(rule, _)| *rule == "below-horizon")
    );
}

/// Switched off or let pass, the caution about the Sun stands as a note.
#[test]
fn the_caution_near_the_sun_always_stands() {
    let text = "RA 13 13 31 Dec -07 47 06 (mean equinox of date)\nDate: 1992-10-13 00:00 UT\n";
    let mut house = House::default();
    house.weights.insert("near-sun".to_string(), None);
    for (text, house) in [
        (text.to_string(), house),
        (
            format!("{text}[stet near-sun: an eclipse]\n"),
            House::default(),
        ),
    ] {
        let examined = examine_with(&text, &house, &Selection::default());
        let finding = examined[0]
            .findings
            .iter()
            .find(|f| f.rule == "near-sun")
            .unwrap();
        assert_eq!(finding.weight, Weight::Note);
        assert!(finding.advice.as_ref().unwrap().contains("Caution"));
    }
}

#[test]
fn the_editors_word_lets_pass() {
    let (house, all) = (House::default(), Selection::default());
    let with = |stet: &str| rules_of(&format!("{SET}{stet}\n"), &house, &all);
    assert_eq!(with("[stet below-horizon: clock checked]"), []);
    assert_eq!(
        with("[stet below-horizon]"),
        [
            ("below-horizon", Weight::Reject),
            ("stet-idle", Weight::Note)
        ]
    );
    assert_eq!(
        with("[stet near-moon: no matter]"),
        [
            ("below-horizon", Weight::Reject),
            ("stet-idle", Weight::Note)
        ]
    );
    assert_eq!(with("[stet below-horizon, stet-idle: clock checked]"), []);
}

#[test]
fn a_site_is_held_to_the_register() {
    let site = colure::house::RegisteredSite {
        name: "Skarn Head".to_string(),
        aliases: Vec::new(),
        latitude_deg: 54.31,
        longitude_deg: -3.02,
        step_deg: 0.01,
        elevation_m: Some(240.0),
        zone: Some("Europe/London".to_string()),
    };
    let house = House {
        sites: vec![site],
        ..House::default()
    };
    let all = Selection::default();
    let base = "RA 05 31 29.2 Dec +21 59 18 (J2000.0)\nDate: 2019-01-04 21:15 UT\n";
    for rule in ["site-unknown", "site-disagrees"] {
        let (text, marked) = rules::find(rule).unwrap().example();
        let examined = examine_with(&text, &house, &all);
        let finding = examined[0].findings.iter().find(|f| f.rule == rule);
        assert!(
            finding.is_some_and(|f| f.primary.overlaps(marked[0])),
            "{rule}: {:?}",
            examined[0].findings
        );
    }
    assert_eq!(
        rules_of(&format!("{base}Site: Skarn Head\n"), &house, &all),
        []
    );
    assert_eq!(
        rules_of(
            &format!("{base}Site: Skarn Head, 54.31 N 3.02 W\n"),
            &house,
            &all
        ),
        []
    );
    let no_register = rules_of(
        &format!("{base}Site: Skarn Head\n"),
        &House::default(),
        &all,
    );
    assert_eq!(no_register, [("site-unknown", Weight::Note)]);
}

#[test]
fn no_input_panics_a_rule() {
    let odd = "RA 99 99 99 Dec +99 99 99 (J9999.9)\nDate: 9999-99-99 99:99 UT\nSite: 999 N 999 E\nAltitude 999°\n";
    examine_together(&odd.repeat(2));
    for text in [
        "RA 0 Dec +0 (J2000.0)\n",
        "RA 0 0 0 Dec -90 (of date)\nDate: JD 99999999999.5\n",
        "RA 0 Dec +90 (B1600.0)\nDate: 0001-01-01 00:00 UT\nSite: 90 N 0 E\n",
    ] {
        examine_together(text);
    }
}
