//! Builds the reader's word table from `grammar/words/*.yaml`, and the list of constellations; refuses a word file with a mistake in it.

use std::collections::BTreeMap;
use std::fmt::Write as _;
use std::path::Path;
use std::{env, fs};

#[path = "../src/reading/fold.rs"]
mod fold;
#[path = "../src/sky/data/tables.rs"]
mod sky_tables;

/// Keys whose value is a plain list of words, with the meaning each gives.
const PLAIN: &[(&str, &str)] = &[
    ("right-ascension", "RightAscension"),
    ("declination", "Declination"),
    ("both", "Both"),
    ("position", "Position"),
    ("hour-angle", "HourAngle"),
    ("altitude", "Altitude"),
    ("azimuth", "Azimuth"),
    ("zenith-distance", "ZenithDistance"),
    ("polar-distance", "PolarDistance"),
    ("airmass", "Airmass"),
    ("galactic", "Galactic"),
    ("ecliptic", "Ecliptic"),
    ("latitude", "Latitude"),
    ("longitude", "Longitude"),
    ("geographic-pair", "GeographicPair"),
    ("elevation", "Elevation"),
    ("site", "Site"),
    ("observer", "Observer"),
    ("object", "Object"),
    ("date", "Date"),
    ("night", "Night"),
    ("time", "Time"),
    ("zone", "Zone"),
    ("equinox", "Equinox"),
    ("epoch", "Epoch"),
    ("of-date", "OfDate"),
    ("mean", "Mean"),
    ("apparent", "Apparent"),
    ("icrs", "Icrs"),
    ("fk5", "Fk5"),
    ("fk4", "Fk4"),
    ("universal", "Universal"),
    ("ut1", "Ut1"),
    ("terrestrial", "Terrestrial"),
    ("barycentric", "Barycentric"),
    ("atomic", "Atomic"),
    ("zone-abbreviation", "ZoneAbbreviation"),
    ("local-time", "LocalTime"),
    ("am", "Am"),
    ("pm", "Pm"),
    ("julian", "Julian"),
    ("modified-julian", "ModifiedJulian"),
    ("heliocentric-julian", "HeliocentricJulian"),
    ("barycentric-julian", "BarycentricJulian"),
    ("magnitude", "Magnitude"),
    ("uncertainty", "Uncertainty"),
    ("constellation", "Constellation"),
    ("role-reference", "RoleReference"),
    ("role-pointing", "RolePointing"),
    ("role-catalogued", "RoleCatalogued"),
    ("role-region", "RoleRegion"),
    ("role-measured", "RoleMeasured"),
    ("new", "New"),
    ("that-is", "ThatIs"),
    ("not-a-position", "NotAPosition"),
    ("at", "At"),
    ("from", "From"),
    ("filler", "Filler"),
    ("and", "And"),
    ("lead-in", "LeadIn"),
    ("found", "Found"),
    ("airless", "Airless"),
    ("all", "All"),
    ("hours", "Hours"),
    ("degrees", "Degrees"),
    ("minutes", "Minutes"),
    ("seconds", "Seconds"),
    ("arcminutes", "Arcminutes"),
    ("arcseconds", "Arcseconds"),
    ("metres", "Metres"),
    ("feet", "Feet"),
    ("from-south", "FromSouth"),
    ("west-positive", "WestPositive"),
    ("minus", "Minus"),
    ("plus", "Plus"),
];

/// The word table: (folded phrase, exact words or "", final dot may be left out, meaning, language).
type Table = Vec<(String, String, bool, String, String)>;

fn main() {
    let root = env::var("CARGO_MANIFEST_DIR").expect("cargo sets it");
    let words = Path::new(&root).join("grammar/words");
    println!("cargo:rerun-if-changed=grammar/words");
    println!("cargo:rerun-if-changed=grammar/constellations.csv");
    println!("cargo:rerun-if-changed=grammar/build.rs");
    println!("cargo:rerun-if-changed=src/reading/fold.rs");

    // (folded phrase, exact words or "", final dot may be left out, meaning, language)
    let mut table: Table = Vec::new();
    let mut files: Vec<_> = fs::read_dir(&words)
        .expect("grammar/words")
        .map(|e| e.expect("entry").path())
        .collect();
    files.sort();
    for file in files {
        let text = fs::read_to_string(&file).expect("readable word file");
        let entries: BTreeMap<String, serde_yaml::Value> =
            serde_yaml::from_str(&text).unwrap_or_else(|e| panic!("{}: {e}", file.display()));
        let language = file
            .file_stem()
            .map_or(String::new(), |s| s.to_string_lossy().into_owned());
        for (key, value) in entries {
            let refuse = |what: &str| -> ! { panic!("{}: key `{key}`: {what}", file.display()) };
            if key == "language" {
                continue;
            }
            let groups: Vec<(String, Vec<String>)> = match (&*key, &value) {
                ("months", serde_yaml::Value::Mapping(map)) => map
                    .iter()
                    .map(|(n, list)| match n.as_u64() {
                        Some(n @ 1..=12) => (
                            format!("Month({n})"),
                            strings(list).unwrap_or_else(|| refuse("a list of words")),
                        ),
                        _ => refuse("months are numbered 1 to 12"),
                    })
                    .collect(),
                ("weekdays", serde_yaml::Value::Mapping(map)) => map
                    .iter()
                    .map(|(n, list)| match n.as_u64() {
                        Some(n @ 1..=7) => (
                            format!("Weekday({})", n - 1),
                            strings(list).unwrap_or_else(|| refuse("a list of words")),
                        ),
                        _ => refuse("weekdays are numbered 1 (Monday) to 7"),
                    })
                    .collect(),
                ("compass", serde_yaml::Value::Mapping(map)) => map
                    .iter()
                    .map(|(n, list)| {
                        let point = match n.as_str() {
                            Some("north") => "North",
                            Some("east") => "East",
                            Some("south") => "South",
                            Some("west") => "West",
                            _ => refuse("north, east, south or west"),
                        };
                        (
                            format!("Compass(Compass::{point})"),
                            strings(list).unwrap_or_else(|| refuse("a list of words")),
                        )
                    })
                    .collect(),
                _ => match PLAIN.iter().find(|(k, _)| *k == key) {
                    Some((_, meaning)) => vec![(
                        meaning.to_string(),
                        strings(&value).unwrap_or_else(|| refuse("a list of words")),
                    )],
                    None => refuse("no such key; the keys are listed in grammar/build.rs"),
                },
            };
            for (meaning, list) in groups {
                for word in list {
                    let (word, exact) = match word.strip_prefix('=') {
                        Some(rest) if !rest.is_empty() => (rest.to_string(), rest.to_string()),
                        _ => (word, String::new()),
                    };
                    let (word, dot) = match word.strip_suffix('.') {
                        Some(rest) if !rest.is_empty() && exact.is_empty() => {
                            (rest.to_string(), true)
                        }
                        _ => (word, false),
                    };
                    let folded: String = word.chars().map(fold::fold).collect();
                    table.push((
                        folded,
                        exact,
                        dot,
                        format!("Word::{meaning}"),
                        language.clone(),
                    ));
                }
            }
        }
    }
    constellations(&root, &mut table);
    // by their first two letters, then longest first, so that the first match is the longest
    table.sort_by(|a, b| {
        slot(&a.0)
            .cmp(&slot(&b.0))
            .then(b.0.chars().count().cmp(&a.0.chars().count()))
            .then(a.cmp(b))
    });
    table.dedup();
    let mut code = format!("pub(super) static WORDS: [Entry; {}] = [\n", table.len());
    for (folded, exact, dot, meaning, language) in &table {
        writeln!(
            code,
            "Entry {{ folded: {folded:?}, exact: {exact:?}, dot: {dot}, word: {meaning}, language: {language:?} }},"
        )
        .expect("to a string");
    }
    code.push_str("];\n");
    let starts: Vec<usize> = (0..=SLOTS)
        .map(|n| table.partition_point(|e| slot(&e.0) < n))
        .collect();
    writeln!(
        code,
        "pub(super) static STARTS: [u16; {}] = {starts:?};",
        SLOTS + 1
    )
    .expect("to a string");
    let out = env::var("OUT_DIR").expect("cargo sets it");
    let out = Path::new(&out);
    fs::write(out.join("words.rs"), code).expect("writable OUT_DIR");
    sky_tables::lay_out(Path::new(&root), out);
}

/// Slots of the table: 27 for each first letter (by the second letter, or 0 for none), then one for all else.
/// The reader's `words.rs` reckons them the same way.
const SLOTS: usize = 26 * 27 + 1;

fn slot(folded: &str) -> usize {
    let mut c = folded.chars();
    let letter = |c: Option<char>| {
        c.filter(char::is_ascii_lowercase)
            .map(|c| c as usize - 'a' as usize)
    };
    match letter(c.next()) {
        Some(first) => first * 27 + letter(c.next()).map_or(0, |second| second + 1),
        None => SLOTS - 1,
    }
}

fn strings(value: &serde_yaml::Value) -> Option<Vec<String>> {
    value
        .as_sequence()?
        .iter()
        .map(|v| v.as_str().map(str::to_string))
        .collect()
}

/// The constellations' names (abbreviation, nominative, genitive) become words too.
fn constellations(root: &str, table: &mut Table) {
    let text = fs::read_to_string(Path::new(root).join("grammar/constellations.csv"))
        .expect("grammar/constellations.csv");
    for line in text.lines().skip(1) {
        let fields: Vec<&str> = line.split(',').collect();
        let abbreviation = fields[0].trim();
        for name in fields.iter().map(|f| f.trim()).filter(|f| !f.is_empty()) {
            let folded: String = name.chars().map(fold::fold).collect();
            table.push((
                folded,
                String::new(),
                false,
                format!("Word::ConstellationName({abbreviation:?})"),
                String::new(),
            ));
        }
    }
}
