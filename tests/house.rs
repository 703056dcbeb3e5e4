//! House rules read and misread; names, zones and instants as a house makes of them.

use colure::house::{self, House, angle};
use colure::output::printed;
use colure::reading::instant::instant as read_instant;
use colure::reading::site::site_coordinates;
use colure::reading::text::Text;
use colure::reduction::{instant, site};
use colure::report::{
    Equinox, InstantMeant, InstantTrouble, Nearness, Position, PositionKind, Report, SiteMeant,
    SiteTrouble, SiteWritten, System, Weight, Zone,
};
use colure::span::{Span, Spanned};
use std::path::Path;

/// The register of the practice sheets' own house (an invented section).
const REGISTER: &str = "
sites:
  Skarn Head: { latitude: 54°18.6′ N, longitude: 3°1.2′ W, elevation: 240 m, zone: Europe/London, aliases: [ The Skarn, Skårn Hėad ] }
  Colle Ventoso: { latitude: 43°36.6′ N, longitude: 11°16.2′ E, elevation: 2000 ft, zone: Europe/Rome }
  Fernhill Ridge: { latitude: 41 52 48 N, longitude: -74.35, elevation: 520, zone: america/new_york }
  Wirrabeen: { latitude: S 33:10.2, longitude: 149.08 E, zone: Australia/Sydney }
observers:
  R. Quill: { site: Skarn Head, letters-to: quill@section.example }
  J. Marlowe-Pike: { site: Wirrabeen }
";

fn rule_names() -> Vec<&'static str> {
    colure::rules::TABLE.iter().map(|r| r.name).collect()
}

fn house(text: &str) -> House {
    let (house, mistakes, _) = house::parse(text, &rule_names());
    assert_eq!(mistakes, []);
    house
}

/// The mistakes of a house text as (word, what, expected).
fn mistakes(text: &str) -> Vec<(String, String, String)> {
    let (_, mistakes, _) = house::parse(text, &rule_names());
    mistakes
        .into_iter()
        .map(|m| {
            let word = m.span.map_or("", |s| s.of(text)).to_owned();
            (word, m.what, m.expected)
        })
        .collect()
}

// ---------------------------------------------------------------------------------------------- the file

#[test]
fn the_illustration_of_the_design_is_read() {
    // DESIGN, section 7
    let house = house(
        "equinox: { canonical: J2000.0, when-missing: query }      # or: B1950.0, J2000.0 …
horizon: { lowest: 5, darkness: -6 }
weights: { dec-sign-missing: query, near-moon: off }
sites:
  Skarn Head: { latitude: 54°18.6′ N, longitude: 3°01′ W, elevation: 240 m, zone: Europe/London }
observers:
  R. Quill: { site: Skarn Head, letters-to: quill@section.example }
",
    );
    assert_eq!(house.canonical.system, System::Icrs);
    assert_eq!(house.weights["dec-sign-missing"], Some(Weight::Query));
    assert_eq!(house.weights["near-moon"], None);
    assert_eq!((house.lowest_altitude_deg, house.darkness_deg), (5.0, -6.0));
    let site = &house.sites[0];
    assert!((site.latitude_deg - 54.31).abs() < 1e-12);
    assert!((site.longitude_deg + 3.0 + 1.0 / 60.0).abs() < 1e-12);
    assert_eq!(site.step_deg, 1.0 / 60.0);
    assert_eq!(site.elevation_m, Some(240.0));
    assert_eq!(site.zone.as_deref(), Some("Europe/London"));
    assert_eq!(
        house.observers[0].letters_to.as_deref(),
        Some("quill@section.example")
    );
}

#[test]
fn coordinates_are_read_in_every_common_style() {
    use angle::{Axis, read};
    // 54° 18′ 36″ = 54.31°, 3° 1′ 12″ = 3.02°: arithmetic
    for word in [
        "54°18.6′ N",
        "54°18'36\" N",
        "54 18 36 N",
        "54:18:36",
        "N 54°18.6′",
        "+54.31",
        "54.31",
        "54d18m36s",
        "54.31° north",
        "54° 18.6' N",
    ] {
        let value = read(word, Axis::Latitude)
            .unwrap_or_else(|e| panic!("{word}: {e}"))
            .value;
        assert!((value - 54.31).abs() < 1e-9, "{word} read as {value}");
    }
    for word in [
        "3°1.2′ W",
        "-3.02",
        "−3.02",
        "W 3 01 12",
        "3.02 W",
        "356.98",
        "356°58.8′ E",
        "3.02°W",
    ] {
        let value = read(word, Axis::Longitude)
            .unwrap_or_else(|e| panic!("{word}: {e}"))
            .value;
        assert!((value + 3.02).abs() < 1e-9, "{word} read as {value}");
    }
    for word in [
        "",
        "N",
        "54°60′ N",
        "91",
        "abc",
        "1e3",
        "54.3.1",
        "3 W",
        "-54.31 N",
        "54.5 18",
        "nan",
        "--5",
        "5 1 1 1",
    ] {
        assert!(read(word, Axis::Latitude).is_err(), "{word} was read");
    }
    assert!(read("361", Axis::Longitude).is_err());
    assert_eq!(read("-180", Axis::Longitude).map(|d| d.value), Ok(180.0));
}

#[test]
fn every_mistake_is_told_at_its_own_word() {
    let text = "equinox: { canonical: J200, when-mising: query }
horizon: { lowest: five }
weights: { dec-sign-mising: query, near-moon: of }
sites:
  Skarn Head: { latitude: 54°78.6′ N, longitude: 3°1.2′ N, elevation: 240 km, zone: Europe/Londn }
  Bare: { latitude: 12 }
  Bare: { latitude: 13 }
observers:
  R. Quill: { site: Skarn Hed, letters-to: quill }
sitez: {}
";
    let told = mistakes(text);
    let words: Vec<&str> = told.iter().map(|m| m.0.as_str()).collect();
    let in_order = [
        "J200",
        "when-mising",
        "five",
        "dec-sign-mising",
        "of",
        "54°78.6′ N",
        "3°1.2′ N",
        "240 km",
        "Europe/Londn",
        "Bare",
        "Bare",
        "quill",
        "sitez",
        "Skarn Hed",
    ];
    assert_eq!(words, in_order);
    let offered = |word: &str, right: &str| {
        let told = told.iter().find(|m| m.0 == word).expect(word);
        assert!(told.2.contains(&format!("`{right}`")), "{word}: {}", told.2);
    };
    offered("when-mising", "when-missing");
    offered("dec-sign-mising", "dec-sign-missing");
    offered("of", "off");
    offered("Europe/Londn", "Europe/London");
    offered("sitez", "sites");
}

#[test]
fn broken_yaml_is_told_with_its_place() {
    for (text, word_line) in [
        ("horizon: { lowest: 5,\nweights: ]\n", 2),
        ("sites: foo\n", 1),
        ("horizon:\n\tlowest: 5\n", 2),
        ("horizon: { lowest: [ 5 ] }\n", 1),
    ] {
        let (_, mistakes, _) = house::parse(text, &[]);
        let span = mistakes[0]
            .span
            .unwrap_or_else(|| panic!("{text:?}: no place"));
        let line = text[..span.start].matches('\n').count() + 1;
        assert_eq!(line, word_line, "{text:?}: {:?}", mistakes[0]);
    }
}

#[test]
fn files_made_to_break_a_reader_are_refused_quickly() {
    let started = std::time::Instant::now();
    let mut bomb = "a: &a [x,x,x,x,x,x,x,x,x,x]\n".to_owned();
    for (i, c) in ('b'..='z').enumerate() {
        let before = (b'a' + i as u8) as char;
        bomb.push_str(&format!(
            "{c}: &{c} [{}]\n",
            vec![format!("*{before}"); 10].join(",")
        ));
    }
    assert!(!mistakes(&bomb).is_empty());
    // aliases where the house wants lists of words
    let mut words = format!(
        "sites:\n  A: {{ latitude: 1, longitude: 1, aliases: &l [{}] }}\n",
        vec!["x"; 5000].join(",")
    );
    for i in 0..1500 {
        words.push_str(&format!(
            "  A{i}: {{ latitude: 1, longitude: 1, aliases: *l }}\n"
        ));
    }
    assert!(mistakes(&words).iter().any(|m| m.1.contains("unfold")));
    for deep in [
        "[".repeat(30_000),
        "{a: ".repeat(15_000),
        format!("sites: {}", "- ".repeat(30_000)),
    ] {
        assert!(!mistakes(&deep).is_empty());
    }
    assert!(
        started.elapsed().as_secs() < 20,
        "took {:?}",
        started.elapsed()
    );
}

#[test]
fn a_file_too_long_or_not_text_is_refused() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("colure.yaml");
    std::fs::write(&path, "#".repeat(70_000)).unwrap();
    let long = house::load(&path, &[]).unwrap_err();
    assert!(long.mistakes[0].expected.contains("64 KiB"));
    std::fs::write(&path, b"sites:\n  K\xf6nig: {}\n").unwrap();
    assert!(
        house::load(&path, &[])
            .unwrap_err()
            .to_string()
            .contains("line 2")
    );
    std::fs::write(&path, "\u{feff}horizon: { lowest: x }\n").unwrap();
    let marked = house::load(&path, &[]).unwrap_err();
    assert_eq!(marked.mistakes[0].span.unwrap().of(&marked.text), "x");
    std::fs::write(&path, "# nothing yet\n").unwrap();
    assert_eq!(house::load(&path, &[]), Ok(House::default()));
    assert!(house::load(dir.path(), &[]).is_err());
    assert!(house::load(Path::new("not/there.yaml"), &[]).is_err());
}

#[test]
fn own_objects_are_read_from_csv() {
    let dir = tempfile::tempdir().unwrap();
    let list = dir.path().join("own.csv");
    std::fs::write(
        &list,
        "name,ra,dec,equinox,radius\nA,05 34 31.9,+22 00 52,,120\nB,83.5,-05 30,J2000.0,\n",
    )
    .unwrap();
    let path = dir.path().join("colure.yaml");
    std::fs::write(&path, "known-objects: [ own.csv ]\n").unwrap();
    let house = house::load(&path, &[]).unwrap();
    assert_eq!(house.known_objects.len(), 2);
    // 5h 34m 31.9s × 15, arithmetic
    assert!((house.known_objects[0].ra_deg - 83.632_916_666).abs() < 1e-8);
    assert_eq!(house.known_objects[0].radius_arcsec, 120.0);
    assert!((house.known_objects[1].dec_deg + 5.5).abs() < 1e-12);
    assert_eq!(house.object_lists, std::slice::from_ref(&list));
    // the words of the list, or the whole line
    for (text, words, told) in [
        ("name,ra,decl.x\n", "decl.x", "unknown column"),
        (
            "# ours\n\nname,ra,dec\n# x\nA,25 00 00,1\n",
            "25 00 00",
            "ra `25 00 00`",
        ),
        ("name,ra,dec\nA,1 00 00,91\n", "91", "dec `91`"),
        ("name,ra,dec\nA,1 00 00,\n", "A,1 00 00,", "dec is missing"),
        ("name,dec\n", "name,dec", "columns"),
        ("name;ra;dec\nA;1 00 00;5\n", "name;ra;dec", "semicolons"),
        ("name,ra,dec,radius\nA,1 00 00,5,2'\n", "2'", "radius"),
        (
            "name,ra,dec,equinox\nA,1 00 00,5,J200\n",
            "J200",
            "equinox 200",
        ),
    ] {
        std::fs::write(&list, text).unwrap();
        let error = house::load(&path, &[]).unwrap_err();
        let mistake = &error.mistakes[0];
        assert!(mistake.what.contains(told), "{text}: {}", mistake.what);
        assert_eq!(mistake.list.as_ref(), Some(&error.lists[0].0));
        assert_eq!(mistake.span.unwrap().of(&error.lists[0].1), words);
    }
    // a list that is not there is a mistake of the house file
    std::fs::remove_file(&list).unwrap();
    let error = house::load(&path, &[]).unwrap_err();
    assert_eq!(error.mistakes[0].span.unwrap().of(&error.text), "own.csv");
    assert!(
        error.mistakes[0].what.ends_with("there is no such file"),
        "{}",
        error.mistakes[0].what
    );
}

#[test]
fn one_mistake_is_told_once_and_in_plain_words() {
    // a site's own mistake makes none at its observers
    let told = mistakes(
        "sites:\n  Skarn Head: { latitude: 95, longitude: 3 W }\nobservers:\n  R. Quill: { site: Skarn Head }\n",
    );
    assert_eq!(told.len(), 1, "{told:?}");
    // one name in two writings, told at both
    let told = mistakes(
        "sites:\n  Cabeço: { latitude: 1, longitude: 1 }\n  CABECO: { latitude: 2, longitude: 2 }\n",
    );
    let words: Vec<&str> = told.iter().map(|m| m.0.as_str()).collect();
    assert_eq!(words, ["Cabeço", "CABECO"]);
    let told = mistakes(
        "sites:\n  A: { latitude: 1, longitude: 1, aliases: [ Hill ] }\n  hill: { latitude: 2, longitude: 2 }\n",
    );
    assert_eq!(told.len(), 2, "{told:?}");
    let told = mistakes("horizon: { lowest: 95 }\n");
    assert!(
        told[0].1.contains("95 is too high") && told[0].2.contains("−5 to 90"),
        "{told:?}"
    );
    let told = mistakes("weights: { daylight: quiet }\n");
    assert!(!told[0].2.contains("did you mean"), "{told:?}");
    for (text, what) in [
        ("horizon:\n\tlowest: 5\n", "line 2 is indented with a tab"),
        ("horizon: { lowest: [ 5 ] }\n", "a list stands where"),
        (
            "horizon: { lowest: @5 }\n",
            "cannot begin with this character",
        ),
    ] {
        let told = mistakes(text);
        assert!(told[0].1.contains(what), "{told:?}");
    }
}

#[test]
fn frames_follow_the_year_rule() {
    use colure::house::frame::frame_named;
    // the year rule: FITS Standard 4.0 (2018), section 8.3, EQUINOX (Besselian before 1984)
    let named = |w: &str| frame_named(w).map(|f| (f.system, f.equinox.to_string()));
    let is = |w: &str, system, equinox: &str| {
        assert_eq!(named(w), Ok((system, equinox.to_owned())), "{w}")
    };
    is("J2000.0", System::Icrs, "J2000.0");
    is("2000", System::Icrs, "J2000.0");
    is("ICRS", System::Icrs, "J2000.0");
    is("1950", System::Fk4, "B1950.0");
    is("B1875.0", System::Fk4, "B1875.0");
    is("1984", System::Mean, "J1984.0");
    is("J2034.5", System::Mean, "J2034.5");
    is("FK5", System::Fk5, "J2000.0");
    is("FK4 B1950", System::Fk4, "B1950.0");
    is("of date", System::Mean, "of date");
    is("apparent", System::Apparent, "of date");
    is("of-date", System::Mean, "of date");
    is("J2000,0", System::Icrs, "J2000.0");
    is("J 2000", System::Icrs, "J2000.0");
    is("JNow", System::Mean, "of date");
    is("EOD", System::Mean, "of date");
    assert_eq!(
        frame_named("B1950").map(|f| f.equinox),
        Ok(Equinox::Besselian(1950.0))
    );
    for word in [
        "",
        "J200",
        "FK4 J2000",
        "FK5 B1950",
        "ICRS 2010",
        "J2000x",
        "nan",
        "1e3",
        "B",
        "3000",
    ] {
        assert!(frame_named(word).is_err(), "{word}");
    }
}

// ---------------------------------------------------------------------------------------------- names

#[test]
fn names_are_forgiven_their_writing() {
    // common practice, no source
    let house = house(REGISTER);
    for name in [
        "Skarn Head",
        "SKARN HEAD",
        "skarn head",
        "Skarn Head Observatory",
        "Skarn Head obs.",
        "Head, Skarn",
        "Skarn Head Station",
        "Skarn-Head",
        "skárn héad",
        "the Skarn",
        "Observatory Skarn Head",
    ] {
        assert_eq!(
            house.site(name).map(|s| s.name.as_str()),
            Some("Skarn Head"),
            "{name}"
        );
    }
    for name in ["Grauberg", "Ventoso", "Head", "", "Observatory", "Ridge"] {
        assert!(house.site(name).is_none(), "{name}");
    }
    assert_eq!(house.nearest_sites("Skarm Haed"), ["Skarn Head"]);
    assert_eq!(house.nearest_sites("Wirabeen")[0], "Wirrabeen");
    for name in [
        "R. Quill",
        "R Quill",
        "Quill, R.",
        "QUILL R.",
        "r. quill",
        "Rowan Quill",
        "Dr. R. Quill",
    ] {
        assert_eq!(
            house.observer(name).map(|o| o.name.as_str()),
            Some("R. Quill"),
            "{name}"
        );
    }
    assert!(house.observer("J. Marlowe Pike").is_some());
    for name in ["Quill", "B. Quill", "R. Quell", ""] {
        assert!(house.observer(name).is_none(), "{name}");
    }
}

// ---------------------------------------------------------------------------------------------- sites

fn report() -> Report {
    Report {
        ordinal: 1,
        position: Position {
            kind: PositionKind::Equatorial,
            first: None,
            second: None,
            first_unit: None,
            polar_distance: false,
            zenith_distance: false,
            azimuth_from_south: false,
            airless: false,
            labelled: false,
            span: Span::default(),
        },
        other_forms: Vec::new(),
        object: None,
        observer: None,
        role: Default::default(),
        equinoxes: Vec::new(),
        epoch_of_place: None,
        instants: Vec::new(),
        site: None,
        stated_horizon: Vec::new(),
        stated_other: Vec::new(),
        constellation: None,
        magnitude: None,
        uncertainty_arcsec: None,
        claims_new: None,
        mentions: Vec::new(),
        stets: Vec::new(),
        block: Span::default(),
    }
}

fn at(name: Option<&str>, coordinates: Option<&str>) -> SiteWritten {
    let mut written = match coordinates {
        Some(text) => match site_coordinates(Text::new(text)) {
            Ok((_, site)) => site,
            Err(_) => panic!("{text} is no site"),
        },
        None => SiteWritten::default(),
    };
    written.name = name.map(|n| Spanned::new(n.to_owned(), Span::default()));
    written
}

type Resolved = (Option<SiteMeant>, Option<SiteTrouble>, Option<(f64, f64)>);

fn resolved(house: &House, written: SiteWritten) -> Resolved {
    let mut report = report();
    report.site = Some((written, Nearness::Own));
    site::resolve(&report, house)
}

#[test]
fn a_site_is_looked_up_read_or_compared() {
    let house = house(REGISTER);
    let (meant, trouble, register) = resolved(&house, at(Some("fernhill ridge"), None));
    let meant = meant.unwrap();
    assert_eq!((trouble, register), (None, None));
    assert_eq!(meant.name.as_deref(), Some("Fernhill Ridge"));
    assert!((meant.latitude_deg - 41.88).abs() < 1e-12 && meant.longitude_deg == -74.35);

    let (meant, trouble, _) = resolved(&house, at(None, Some("23.48 N 80.52 W, 15 m")));
    let meant = meant.unwrap();
    assert_eq!(trouble, None);
    assert_eq!(
        (meant.latitude_deg, meant.longitude_deg, meant.elevation_m),
        (23.48, -80.52, Some(15.0))
    );
    assert!((meant.step_deg - 0.01).abs() < 1e-15);

    // the practice sheets' own cases of coordinates that are not the register's, and one that is within its steps
    for (name, coordinates, differ) in [
        ("Skarn Head", "55.51 N 3.02 W", true),
        ("Fernhill Ridge", "43.08 N 74.35 W", true),
        ("Skarn Head", "54.31 N 3.02 W", false),
        ("Skarn Head", "54.3 N 3.0 W", false),
        ("Skarn Head", "54.31 N 3.02 E", true),
    ] {
        let (meant, trouble, register) = resolved(&house, at(Some(name), Some(coordinates)));
        assert_eq!(trouble, None);
        assert_eq!(register.is_some(), differ, "{name}, {coordinates}");
        assert!(meant.unwrap().zone.is_some());
    }

    let (meant, trouble, _) = resolved(&house, at(Some("Skarn Haed"), None));
    assert_eq!(meant, None);
    let nearest = vec!["Skarn Head".to_owned()];
    assert_eq!(
        trouble,
        Some(SiteTrouble::Unknown {
            nearest,
            have_register: true
        })
    );
    let (_, trouble, _) = resolved(&House::default(), at(Some("Skarn Head"), None));
    assert_eq!(
        trouble,
        Some(SiteTrouble::Unknown {
            nearest: Vec::new(),
            have_register: false
        })
    );
}

#[test]
fn hemispheres_must_be_said_in_free_text() {
    let none = House::default();
    for (text, wanted) in [
        (
            "lat 61.98, long 54.94, 0 m",
            Err(SiteTrouble::HemisphereUnclear),
        ),
        (
            "lat 54.31 N, long 3.02",
            Err(SiteTrouble::HemisphereUnclear),
        ),
        ("lat -33.2, long 149.1", Ok((-33.2, 149.1))),
        ("lat +33.2, long -70.1", Ok((33.2, -70.1))),
        ("lat 33.2 S, long 289.9 E", Ok((-33.2, -70.1))),
        ("45.20 N 391.15 W, 15 m", Err(SiteTrouble::OutOfRange)),
        (
            "lat 97°12′N, long 12°30′E, elevation 240 m",
            Err(SiteTrouble::OutOfRange),
        ),
        ("1.20 S 154.11 E, 560 m", Ok((-1.2, 154.11))),
    ] {
        let (meant, trouble, _) = resolved(&none, at(None, Some(text)));
        match wanted {
            Ok((lat, lon)) => {
                let meant = meant.unwrap_or_else(|| panic!("{text}: {trouble:?}"));
                assert!((meant.latitude_deg - lat).abs() < 1e-9, "{text}");
                assert!(
                    (meant.longitude_deg - lon).abs() < 1e-9,
                    "{text}: {}",
                    meant.longitude_deg
                );
            }
            Err(wanted) => assert_eq!((meant, trouble), (None, Some(wanted)), "{text}"),
        }
    }
    let mut field = at(None, Some("lat 61.98, long 54.94, 0 m"));
    field.signed_field = true;
    assert_eq!(resolved(&none, field).0.unwrap().longitude_deg, 54.94);
    let mut west = at(None, Some("lat +31.09, long +71.3"));
    west.west_positive = true;
    assert_eq!(resolved(&none, west).0.unwrap().longitude_deg, -71.3);
}

#[test]
fn an_observer_brings_the_site_the_house_knows() {
    let house = house(REGISTER);
    let mut report = report();
    report.observer = Some(Spanned::new("Quill, R.".to_owned(), Span::default()));
    assert_eq!(
        site::resolve(&report, &house).0.unwrap().name.as_deref(),
        Some("Skarn Head")
    );
    report.observer = Some(Spanned::new("N. Obody".to_owned(), Span::default()));
    assert_eq!(site::resolve(&report, &house), (None, None, None));
}

// ---------------------------------------------------------------------------------------------- instants

fn when(text: &str, site: Option<&SiteMeant>) -> Result<InstantMeant, InstantTrouble> {
    let (rest, written) =
        read_instant(Text::new(text)).unwrap_or_else(|_| panic!("{text} is no instant"));
    assert!(rest.is_empty(), "{text} was not read to its end");
    instant::of(&written, site, None)
}

/// `utc / step`, or the trouble's kind.
fn told(text: &str, site: Option<&SiteMeant>) -> String {
    match when(text, site) {
        Ok(meant) => format!(
            "{} / {}",
            printed::utc(meant.utc),
            (meant.step_s * 1e6).round() / 1e6
        ),
        Err(InstantTrouble::Impossible(_)) => "impossible".to_owned(),
        Err(InstantTrouble::ZoneMissing) => "zone missing".to_owned(),
        Err(InstantTrouble::LocalWithoutZone) => "no local zone".to_owned(),
        Err(InstantTrouble::ZoneDoubtful { .. }) => "doubtful".to_owned(),
        Err(InstantTrouble::DateMissing) => "no date".to_owned(),
        Err(InstantTrouble::YearMissing) => "no year".to_owned(),
        Err(InstantTrouble::ClockUnread(_)) => "clock unread".to_owned(),
    }
}

fn place(zone: Option<&str>, latitude_deg: f64, longitude_deg: f64) -> SiteMeant {
    SiteMeant {
        name: None,
        latitude_deg,
        longitude_deg,
        elevation_m: None,
        zone: zone.map(str::to_owned),
        step_deg: 0.01,
    }
}

#[test]
fn an_instant_is_its_beginning_with_its_step() {
    // the rules of DESIGN, section 4; the decimal days are arithmetic (0.3403 d = 8h 10m 1.92s)
    for (text, wanted) in [
        ("2024-07-05 22:31 UT", "2024-07-05T22:31:00Z / 60"),
        ("2024-07-05 22:31:07.5 UT", "2024-07-05T22:31:07.500Z / 0.1"),
        ("2019-10-22T04:53:00Z", "2019-10-22T04:53:00Z / 1"),
        ("2018 Sep 21.3403 UT", "2018-09-21T08:10:01.920Z / 8.64"),
        ("2023 Mar 08.2708", "2023-03-08T06:29:57.120Z / 8.64"),
        ("2024-02-05", "2024-02-05T00:00:00Z / 86400"),
        ("2024-07-05 22:31", "zone missing"),
        ("2024-07-05 22:31 UTC+02:00", "2024-07-05T20:31:00Z / 60"),
        ("2024-01-01 00:30 UTC+1", "2023-12-31T23:30:00Z / 60"),
        ("2023-02-30 10:00 UT", "impossible"),
        ("2023-02-29 10:00 UT", "impossible"),
        ("2024-02-29 10:00 UT", "2024-02-29T10:00:00Z / 60"),
        ("2024-07-05 25:10 UT", "impossible"),
        ("2024-07-05 22:71 UT", "impossible"),
        ("2024-07-05 24:00 UT", "2024-07-06T00:00:00Z / 60"),
    ] {
        assert_eq!(told(text, None), wanted, "{text}");
    }
}

#[test]
fn leap_seconds_are_those_that_were() {
    // IERS Bulletin C: a leap second ended 2016 December 31; none ended 2017 June 30 or 2015 December 31
    for (text, wanted) in [
        ("2016-12-31 23:59:60 UT", "2016-12-31T23:59:60Z / 1"),
        ("2016-12-31 18:59:60 UTC-05:00", "2016-12-31T23:59:60Z / 1"),
        ("2017-06-30 23:59:60 UT", "impossible"),
        ("2016-12-31 22:59:60 UT", "impossible"),
        ("1971-12-31 23:59:60 UT", "impossible"),
    ] {
        assert_eq!(told(text, None), wanted, "{text}");
    }
}

#[test]
fn julian_dates_are_utc_unless_said() {
    // JD 2451545.0 is 2000 January 1 12h, MJD = JD - 2400000.5: by definition. JD 2453246.2569 = 2004 Aug 28 18:09:56.16
    for (text, wanted) in [
        ("JD 2451545.0", "2000-01-01T12:00:00Z / 8640"),
        ("MJD 51544.5", "2000-01-01T12:00:00Z / 8640"),
        ("JD 2453246.2569", "2004-08-28T18:09:56.160Z / 8.64"),
    ] {
        assert_eq!(told(text, None), wanted, "{text}");
    }
    assert!(when("HJD 2451545.1234", None).unwrap().heliocentric);
}

#[test]
fn local_time_follows_the_zone_tables() {
    // Python 3.11.7 zoneinfo on the tables 2025b of Debian (tzdata 2025b-0+deb12u2)
    for (zone, text, wanted) in [
        (
            "Europe/London",
            "2023-03-10 21:30 local time",
            "2023-03-10T21:30:00Z",
        ),
        (
            "Europe/London",
            "2024-07-05 22:31 local time",
            "2024-07-05T21:31:00Z",
        ),
        (
            "Europe/Rome",
            "2019-02-06 05:28 local time",
            "2019-02-06T04:28:00Z",
        ),
        (
            "America/New_York",
            "2010-08-14 22:47 local time",
            "2010-08-15T02:47:00Z",
        ),
        (
            "America/New_York",
            "2022-10-13 20:34 local time",
            "2022-10-14T00:34:00Z",
        ),
        (
            "Australia/Sydney",
            "2005-04-17 22:39 local time",
            "2005-04-17T12:39:00Z",
        ),
        (
            "Australia/Sydney",
            "2022-01-10 02:05 local time",
            "2022-01-09T15:05:00Z",
        ),
        (
            "Asia/Tokyo",
            "1997-08-26 22:49 local time",
            "1997-08-26T13:49:00Z",
        ),
        (
            "Asia/Kolkata",
            "2015-05-05 03:10 local time",
            "2015-05-04T21:40:00Z",
        ),
        (
            "America/Santiago",
            "2016-08-01 01:00 local time",
            "2016-08-01T05:00:00Z",
        ),
        (
            "America/St_Johns",
            "2011-12-01 20:00 local time",
            "2011-12-01T23:30:00Z",
        ),
    ] {
        let site = place(Some(zone), 0.0, 0.0);
        assert_eq!(
            told(text, Some(&site)),
            format!("{wanted} / 60"),
            "{text} at {zone}"
        );
    }
    // the European and American changes of clocks: Directive 2000/84/EC (last Sundays of March and October, 01:00 UTC),
    // Energy Policy Act of 2005 (second Sunday of March, first of November, 2:00 local)
    let (rome, york) = (
        place(Some("Europe/Rome"), 43.6, 11.3),
        place(Some("America/New_York"), 41.9, -74.4),
    );
    assert_eq!(told("2024-10-27 02:30 local time", Some(&rome)), "doubtful");
    assert_eq!(
        told("2024-03-31 02:30 local time", Some(&rome)),
        "impossible"
    );
    assert_eq!(told("2024-11-03 01:30 local time", Some(&york)), "doubtful");
    assert_eq!(
        told("2024-10-27 02:30 CEST", Some(&rome)),
        "2024-10-27T00:30:00Z / 60"
    );
    assert_eq!(
        told("2024-10-27 02:30 CET", Some(&rome)),
        "2024-10-27T01:30:00Z / 60"
    );
    assert_eq!(told("2024-07-05 22:31 local time", None), "no local zone");
    assert_eq!(
        told(
            "2024-07-05 22:31 local time",
            Some(&place(None, 10.0, 10.0))
        ),
        "no local zone"
    );
    assert_eq!(told("1935-07-05 22:31 local time", Some(&rome)), "doubtful");
}

#[test]
fn abbreviations_count_where_they_have_one_meaning() {
    let rome = place(Some("Europe/Rome"), 43.6, 11.3);
    let york = place(Some("America/New_York"), 41.9, -74.4);
    let london = place(Some("Europe/London"), 54.3, -3.0);
    let sydney = place(Some("Australia/Sydney"), -33.2, 149.1);
    let tokyo = place(Some("Asia/Tokyo"), 35.4, 138.9);
    let calcutta = place(Some("Asia/Kolkata"), 20.5, 77.3);
    let bare_kansas = place(None, 38.5, -98.0);
    let bare_italy = place(None, 43.6, 11.3);
    // common practice, no source; the offsets are those of the tables named above
    for (text, site, wanted) in [
        (
            "1996-01-23 22:45 CET",
            Some(&rome),
            "1996-01-23T21:45:00Z / 60",
        ),
        (
            "2010-08-14 22:47 EDT",
            Some(&york),
            "2010-08-15T02:47:00Z / 60",
        ),
        (
            "1996-09-28 01:19 BST",
            Some(&london),
            "1996-09-28T00:19:00Z / 60",
        ),
        (
            "2005-04-17 22:39 AEST",
            Some(&sydney),
            "2005-04-17T12:39:00Z / 60",
        ),
        (
            "2022-05-21 00:10 JST",
            Some(&tokyo),
            "2022-05-20T15:10:00Z / 60",
        ),
        (
            "2015-05-05 03:10 IST",
            Some(&calcutta),
            "2015-05-04T21:40:00Z / 60",
        ),
        (
            "2011-03-11 02:31 GMT",
            Some(&london),
            "2011-03-11T02:31:00Z / 60",
        ),
        // out of season
        ("1996-02-25 21:03 CEST", Some(&rome), "doubtful"),
        ("2016-02-22 21:35 CEST", Some(&rome), "doubtful"),
        ("2009-08-30 00:44 EST", Some(&york), "doubtful"),
        ("2024-07-05 22:31 CET", Some(&rome), "doubtful"),
        ("2024-01-05 22:31 BST", Some(&london), "doubtful"),
        ("2024-07-05 22:31 CET", Some(&bare_italy), "doubtful"),
        ("2024-07-05 22:31 CET", None, "doubtful"),
        // another place's: one meaning, several meanings, none
        (
            "2022-05-21 00:10 JST",
            Some(&rome),
            "2022-05-20T15:10:00Z / 60",
        ),
        ("2024-01-05 22:31 CST", None, "doubtful"),
        (
            "2024-01-05 22:31 CST",
            Some(&bare_kansas),
            "2024-01-06T04:31:00Z / 60",
        ),
        ("2024-01-05 22:31 IST", None, "doubtful"),
        ("2024-01-05 22:31 EST", Some(&rome), "doubtful"),
    ] {
        assert_eq!(told(text, site), wanted, "{text}");
    }
}

#[test]
fn a_double_date_is_the_night_between() {
    // DESIGN, section 4: the date on which that UT falls in the night between, by the site's longitude
    let (greenwich, japan, california) = (
        place(None, 51.0, 0.0),
        place(None, 35.0, 139.0),
        place(None, 36.0, -120.0),
    );
    for (text, site, wanted) in [
        (
            "2024 Mar 5/6 22:10 UT",
            &greenwich,
            "2024-03-05T22:10:00Z / 60",
        ),
        (
            "2024 Mar 5/6 03:10 UT",
            &greenwich,
            "2024-03-06T03:10:00Z / 60",
        ),
        // 13:10 UT is 22:26 local mean time in Japan, on the evening's date; 03:10 UT would be its noon
        ("2024 Mar 5/6 13:10 UT", &japan, "2024-03-05T13:10:00Z / 60"),
        ("2024 Mar 5/6 18:10 UT", &japan, "2024-03-05T18:10:00Z / 60"),
        // 05:10 UT is 21:10 local mean time in California on the date before
        (
            "2024 Mar 5/6 05:10 UT",
            &california,
            "2024-03-06T05:10:00Z / 60",
        ),
        (
            "2024 Mar 5/6 12:10 UT",
            &california,
            "2024-03-06T12:10:00Z / 60",
        ),
        (
            "2024 Feb 29/1 03:10 UT",
            &greenwich,
            "2024-03-01T03:10:00Z / 60",
        ),
    ] {
        assert_eq!(
            told(text, Some(site)),
            wanted,
            "{text} at {}",
            site.longitude_deg
        );
    }
}

#[test]
fn a_zone_beside_the_site_gives_local_time() {
    let mut report = report();
    let (_, written) =
        read_instant(Text::new("2024-07-05 22:31 local time")).unwrap_or_else(|_| panic!());
    report.instants.push((written, Nearness::Own));
    let mut site = at(None, Some("41.07 N 75.69 W, 400 m"));
    site.zone = Some(Spanned::new(
        Zone::Named("America/New_York".to_owned()),
        Span::default(),
    ));
    report.site = Some((site, Nearness::Own));
    let (meant, _, _) = site::resolve(&report, &House::default());
    let (instant, trouble) = instant::resolve(&report, &House::default(), meant.as_ref());
    assert_eq!(trouble, None);
    // summer time of New York: UTC-4 (tables as above)
    assert_eq!(printed::utc(instant.unwrap().utc), "2024-07-06T02:31:00Z");
}
