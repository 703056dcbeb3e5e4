//! A house file read: `colure.yaml`, every key and value checked, every mistake at its own words.
//!
//! serde_yaml tells no places on success, but it lends plain and quoted words out of the text itself, so that a word's
//! place is the difference of two addresses. Mistakes are gathered and told together; only broken YAML, or a list where
//! a mapping belongs, ends the reading at once.

use super::angle::{self, Axis};
use super::frame::{self, frame_named};
use super::mistake::{HouseError, Mistake, io_words, nearest};
use super::{House, Observer, RegisteredSite, WhenMissing, objects, plain};
use crate::report::Weight;
use crate::span::Span;
use serde::de::{self, DeserializeSeed, IgnoredAny, MapAccess, SeqAccess, Visitor};
use std::borrow::Cow;
use std::collections::HashMap;
use std::fmt;
use std::path::{Path, PathBuf};

/// A longer file is not read: its aliases could unfold to more than the memory holds.
pub const LONGEST_BYTES: usize = 64 * 1024;
/// More words than this come only of aliases unfolding.
const MOST_WORDS: usize = 100_000;

/// Reads a house file and the object lists it names. `rules` are the names that `weights` may hold.
pub fn load(path: &Path, rules: &[&str]) -> Result<House, HouseError> {
    let whole = |what: String, expected: &str| HouseError::whole(path.to_owned(), what, expected);
    let size = std::fs::metadata(path).map_err(|e| {
        whole(
            io_words(&e),
            "name an existing house file with --house, or leave the option out",
        )
    })?;
    if size.is_dir() {
        return Err(whole(
            "it is a folder".to_owned(),
            "name the house file in it, usually colure.yaml",
        ));
    }
    if size.len() > LONGEST_BYTES as u64 {
        return Err(whole(
            format!("it is {} KiB long", size.len() / 1024),
            "house rules are at most 64 KiB: put long lists of objects into CSV files and name them under known-objects",
        ));
    }
    let bytes = std::fs::read(path).map_err(|e| whole(io_words(&e), "check its permissions"))?;
    let text = String::from_utf8(bytes).map_err(|e| {
        let at = e.utf8_error().valid_up_to();
        let line = e.as_bytes()[..at].iter().filter(|b| **b == b'\n').count() + 1;
        whole(
            format!("it is not UTF-8 text: the first byte that is not stands in line {line}"),
            "save it as UTF-8",
        )
    })?;
    // a byte order mark would shift every place by three
    let text = text
        .strip_prefix('\u{feff}')
        .map_or(text.clone(), str::to_owned);
    let folder = path.parent().unwrap_or(Path::new(""));
    let (mut house, mut mistakes, lists) = parse(&text, rules);
    mistakes.sort_by_key(|m| m.span.map_or(0, |s| s.start));
    let mut broken_lists = Vec::new();
    for (name, span) in lists {
        let file = folder.join(&name);
        house.object_lists.extend(absolute(&file));
        match objects::load(&file) {
            Ok(mut list) => {
                house.known_objects.append(&mut list.objects);
                if !list.mistakes.is_empty() {
                    mistakes.extend(list.mistakes.into_iter().map(|m| Mistake {
                        list: Some(file.clone()),
                        ..m
                    }));
                    broken_lists.push((file, list.text));
                }
            }
            Err((what, expected)) => mistakes.push(Mistake {
                list: None,
                span,
                what: format!("known-objects: {name}: {what}"),
                expected: expected.to_owned(),
            }),
        }
    }
    if mistakes.is_empty() {
        Ok(house)
    } else {
        Err(HouseError {
            path: path.to_owned(),
            text,
            lists: broken_lists,
            mistakes,
        })
    }
}

/// The object lists a house file names, absolute paths; none where it cannot be read.
pub fn object_lists(path: &Path) -> Vec<PathBuf> {
    let text = std::fs::read_to_string(path).unwrap_or_default();
    if text.len() > LONGEST_BYTES {
        return Vec::new();
    }
    let folder = path.parent().unwrap_or(Path::new(""));
    let (_, _, lists) = parse(&text, &[]);
    lists
        .iter()
        .filter_map(|(list, _)| absolute(&folder.join(list)))
        .collect()
}

/// An absolute path without `.` and `..`, without asking the disk.
pub fn absolute(path: &Path) -> Option<PathBuf> {
    let mut plain = PathBuf::new();
    for part in std::path::absolute(path).ok()?.components() {
        match part {
            std::path::Component::ParentDir => {
                plain.pop();
            }
            other => plain.push(other),
        }
    }
    Some(plain)
}

/// The nearest `colure.yaml` in a folder or above it.
pub fn nearest_house(folder: &Path) -> Option<PathBuf> {
    let start = std::path::absolute(folder).ok()?;
    start
        .ancestors()
        .map(|dir| dir.join(super::FILE_NAME))
        .find(|file| file.is_file())
}

/// An object list named by the house, and where it is named.
type Lists = Vec<(String, Option<Span>)>;

/// The house a text describes, its mistakes, and the object lists it names.
pub fn parse(text: &str, rules: &[&str]) -> (House, Vec<Mistake>, Lists) {
    let mut reading = Reading {
        base: text.as_ptr() as usize,
        length: text.len(),
        rules,
        words: 0,
        mistakes: Vec::new(),
        lists: Vec::new(),
    };
    let mut draft = Draft::default();
    let only_comments = text
        .lines()
        .all(|l| l.trim().is_empty() || l.trim_start().starts_with('#') || l.trim() == "---");
    if !only_comments {
        let seed = Entries {
            section: &mut draft,
            reading: &mut reading,
        };
        if let Err(error) = seed.deserialize(serde_yaml::Deserializer::from_str(text)) {
            reading.mistakes.push(yaml_mistake(&error, text));
        }
    }
    draft.check(&mut reading);
    (draft.house, reading.mistakes, reading.lists)
}

/// serde_yaml's own error as a mistake. It counts lines and columns from 1; 1:1 may mean that it does not know.
fn yaml_mistake(error: &serde_yaml::Error, text: &str) -> Mistake {
    let span = error
        .location()
        .filter(|l| (l.line(), l.column()) != (1, 1))
        .map(|l| {
            let start = text
                .split_inclusive('\n')
                .take(l.line().saturating_sub(1))
                .map(str::len)
                .sum::<usize>();
            let line = text[start..].lines().next().unwrap_or("");
            let column = line
                .chars()
                .take(l.column().saturating_sub(1))
                .map(char::len_utf8);
            let from = column.sum::<usize>();
            let word = line[from..]
                .split(|c: char| c.is_whitespace() || ",}]".contains(c))
                .next()
                .unwrap_or("");
            Span::new(start + from, start + from + word.len())
        });
    let full = error.to_string();
    let said = match full.find(" at line ") {
        Some(end) => &full[..end],
        None => &full,
    };
    let (what, expected) = in_words(said, span, text);
    Mistake {
        list: None,
        span,
        what,
        expected: expected.to_owned(),
    }
}

/// What the YAML reader says, in words for somebody who has never heard of it, and what to do.
fn in_words(said: &str, span: Option<Span>, text: &str) -> (String, &'static str) {
    let at = span.map_or(0, |s| s.start.min(text.len()));
    let line_start = text[..at].rfind('\n').map_or(0, |i| i + 1);
    let line = text[line_start..].lines().next().unwrap_or("");
    let number = text[..line_start].matches('\n').count() + 1;
    let indent = &line[..line.len() - line.trim_start().len()];
    if indent.contains('\t') {
        return (
            format!("line {number} is indented with a tab"),
            "use spaces: YAML takes no tabs there",
        );
    }
    if let Some((_, wrong)) = said.split_once("invalid type: ") {
        let (found, wanted) = wrong
            .split_once(", expected ")
            .unwrap_or((wrong, "something else"));
        let found = match found {
            "sequence" => "a list".to_owned(),
            "map" => "a group of `key: value` pairs".to_owned(),
            "unit value" => "nothing".to_owned(),
            other => other
                .split_once(' ')
                .map_or(other, |(_, word)| word)
                .replace('"', "`"),
        };
        return (
            format!("{found} stands where {wanted} belongs"),
            "write it as the README shows under “House rules and the site register”",
        );
    }
    if said.contains("cannot start any token") {
        return (
            format!("line {number}: a value cannot begin with this character"),
            "put the value in quotes: \"…\"",
        );
    }
    if said.contains("mapping values are not allowed") {
        return (
            format!(
                "line {number} has a colon too many, or its indentation fits no line before it"
            ),
            "quote text that holds “: ”, and give keys of one level the same indentation",
        );
    }
    if said.contains("did not find expected ',' or") {
        return (
            format!("line {number}: a comma or the closing bracket is missing before this"),
            "close every { with } and every [ with ], with commas between",
        );
    }
    if said.contains("did not find expected") || said.contains("could not find expected") {
        return (
            format!("line {number} does not fit what stands before it"),
            "check the indentation (spaces, the same for keys of one level), colons, quotes and brackets",
        );
    }
    if said.contains("recursion limit") {
        return (
            "the brackets are nested too deep".to_owned(),
            "house rules are at most four levels deep",
        );
    }
    (
        format!("this is not the YAML of house rules: {said}"),
        "check indentation, colons and brackets, and quote text that holds “: ” or “#”",
    )
}

// ---------------------------------------------------------------------------------------------- words and sections

/// What goes along with the reading.
struct Reading<'r> {
    base: usize,
    length: usize,
    rules: &'r [&'r str],
    words: usize,
    mistakes: Vec<Mistake>,
    lists: Lists,
}

impl Reading<'_> {
    fn mistake(&mut self, at: &Word, what: impl Into<String>, expected: impl Into<String>) {
        let span = at.span(self);
        self.mistakes.push(Mistake {
            list: None,
            span,
            what: what.into(),
            expected: expected.into(),
        });
    }

    /// A key that is none of those expected.
    fn unknown(&mut self, key: &Word, place: &str, right: &[&str]) {
        let offered = match nearest(key.text(), right.iter().copied()) {
            Some(near) => format!("did you mean `{near}`? "),
            None => String::new(),
        };
        let expected = format!("{offered}{place} may hold: {}", right.join(", "));
        self.mistake(
            key,
            format!("unknown key `{}` in {place}", key.text()),
            expected,
        );
    }

    fn number(&mut self, word: &Word, what: &str, low: f64, high: f64) -> Option<f64> {
        let body = word.text().trim().trim_end_matches(['°']).trim_end();
        let body = body
            .strip_suffix("deg")
            .unwrap_or(body)
            .trim_end()
            .replace('−', "-");
        let digits = body.trim_start_matches(['+', '-']);
        let well_formed = digits.starts_with(|c: char| c.is_ascii_digit())
            && digits.len() <= 20
            && digits.chars().all(|c| c.is_ascii_digit() || c == '.');
        match body.parse::<f64>() {
            Ok(value) if well_formed && (low..=high).contains(&value) => Some(value),
            value => {
                let what = match value {
                    Ok(value) if well_formed && value < low => {
                        format!("{} is too low for the {what}", word.text())
                    }
                    Ok(_) if well_formed => format!("{} is too high for the {what}", word.text()),
                    _ => format!("`{}` is no {what}", word.text()),
                };
                let low = low.to_string().replace('-', "−");
                self.mistake(
                    word,
                    what,
                    format!("expected a number from {low} to {high}"),
                );
                None
            }
        }
    }
}

/// A scalar as written; lent by the text wherever the YAML reader can.
#[derive(Clone, Debug)]
struct Word<'de> {
    text: Cow<'de, str>,
    /// The place of its key, for a word whose own place the YAML reader does not tell (escapes, several lines).
    near: Option<Span>,
}

impl Word<'_> {
    fn text(&self) -> &str {
        &self.text
    }

    fn span(&self, reading: &Reading) -> Option<Span> {
        let Cow::Borrowed(text) = self.text else {
            return self.near;
        };
        let start = (text.as_ptr() as usize).checked_sub(reading.base)?;
        (start + text.len() <= reading.length).then(|| Span::new(start, start + text.len()))
    }
}

struct WordSeed<'a, 'r>(&'a mut Reading<'r>);

impl<'de> DeserializeSeed<'de> for WordSeed<'_, '_> {
    type Value = Word<'de>;

    fn deserialize<D: de::Deserializer<'de>>(self, d: D) -> Result<Word<'de>, D::Error> {
        self.0.words += 1;
        if self.0.words > MOST_WORDS {
            return Err(de::Error::custom("its aliases unfold to too many words"));
        }
        d.deserialize_str(WordVisitor)
    }
}

struct WordVisitor;

impl<'de> Visitor<'de> for WordVisitor {
    type Value = Word<'de>;

    fn expecting(&self, f: &mut fmt::Formatter) -> fmt::Result {
        f.write_str("a single word or number")
    }

    fn visit_borrowed_str<E: de::Error>(self, text: &'de str) -> Result<Word<'de>, E> {
        Ok(Word {
            text: Cow::Borrowed(text),
            near: None,
        })
    }

    fn visit_str<E: de::Error>(self, text: &str) -> Result<Word<'de>, E> {
        Ok(Word {
            text: Cow::Owned(text.to_owned()),
            near: None,
        })
    }
}

/// One word, or a list of them.
struct WordsSeed<'a, 'r>(&'a mut Reading<'r>);

impl<'de> DeserializeSeed<'de> for WordsSeed<'_, '_> {
    type Value = Vec<Word<'de>>;

    fn deserialize<D: de::Deserializer<'de>>(self, d: D) -> Result<Vec<Word<'de>>, D::Error> {
        d.deserialize_seq(self)
    }
}

impl<'de> Visitor<'de> for WordsSeed<'_, '_> {
    type Value = Vec<Word<'de>>;

    fn expecting(&self, f: &mut fmt::Formatter) -> fmt::Result {
        f.write_str("a list: [ one, two ]")
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut seq: A) -> Result<Vec<Word<'de>>, A::Error> {
        let mut words = Vec::new();
        while let Some(word) = seq.next_element_seed(WordSeed(self.0))? {
            words.push(word);
        }
        Ok(words)
    }

    // `known-objects:` with nothing after it
    fn visit_unit<E: de::Error>(self) -> Result<Vec<Word<'de>>, E> {
        Ok(Vec::new())
    }
}

/// A mapping of the house file: it says which keys it holds and takes their values.
trait Section<'de> {
    /// Its name in messages.
    fn place(&self) -> String;

    /// Takes the value of one key.
    fn entry<A: MapAccess<'de>>(
        &mut self,
        key: &Word<'de>,
        map: &mut A,
        reading: &mut Reading,
    ) -> Result<(), A::Error>;
}

struct Entries<'a, 'r, S> {
    section: &'a mut S,
    reading: &'a mut Reading<'r>,
}

impl<'de, S: Section<'de>> DeserializeSeed<'de> for Entries<'_, '_, S> {
    type Value = ();

    fn deserialize<D: de::Deserializer<'de>>(self, d: D) -> Result<(), D::Error> {
        d.deserialize_map(self)
    }
}

impl<'de, S: Section<'de>> Visitor<'de> for Entries<'_, '_, S> {
    type Value = ();

    fn expecting(&self, f: &mut fmt::Formatter) -> fmt::Result {
        write!(f, "{} as `key: value` pairs", self.section.place())
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<(), A::Error> {
        let mut seen: Vec<String> = Vec::new();
        while let Some(key) = map.next_key_seed(WordSeed(self.reading))? {
            if seen.iter().any(|s| s == key.text()) {
                let place = self.section.place();
                self.reading.mistake(
                    &key,
                    format!("`{}` stands twice in {place}", key.text()),
                    "keep one of the two",
                );
                map.next_value::<IgnoredAny>()?;
                continue;
            }
            self.section.entry(&key, &mut map, self.reading)?;
            seen.push(key.text().to_owned());
        }
        Ok(())
    }

    // `sites:` with nothing after it
    fn visit_unit<E: de::Error>(self) -> Result<(), E> {
        Ok(())
    }
}

fn word<'de, A: MapAccess<'de>>(
    key: &Word,
    map: &mut A,
    reading: &mut Reading,
) -> Result<Word<'de>, A::Error> {
    let mut word = map.next_value_seed(WordSeed(reading))?;
    word.near = key.span(reading);
    Ok(word)
}

fn section<'de, A: MapAccess<'de>, S: Section<'de>>(
    map: &mut A,
    section: &mut S,
    reading: &mut Reading,
) -> Result<(), A::Error> {
    map.next_value_seed(Entries { section, reading })
}

// ---------------------------------------------------------------------------------------------- the sections

/// The whole file.
#[derive(Default)]
struct Draft<'de> {
    house: House,
    /// Sites that observers name, checked once all sites are known.
    observer_sites: Vec<Word<'de>>,
    /// Sites with mistakes of their own: not in the register, and still no unknown names.
    broken_sites: Vec<String>,
    /// The names and aliases of sites, each with the number of its site.
    site_names: Vec<(usize, Word<'de>)>,
    /// The names of observers, numbered.
    observer_names: Vec<(usize, Word<'de>)>,
}

impl<'de> Draft<'de> {
    fn check(&mut self, reading: &mut Reading) {
        named_once(&self.site_names, "site", "sites", reading);
        named_once(&self.observer_names, "observer", "observers", reading);
        for site in &self.observer_sites {
            let wanted = plain(site.text());
            let broken = self.broken_sites.iter().any(|s| plain(s) == wanted);
            if self.house.site(site.text()).is_none() && !broken {
                let names: Vec<&str> = self.house.sites.iter().map(|s| s.name.as_str()).collect();
                let broken = self.broken_sites.iter().map(String::as_str);
                let near = self.house.nearest_sites(site.text()).into_iter().next();
                let near = near.or_else(|| nearest(site.text(), broken).map(str::to_owned));
                let expected = match near {
                    Some(near) => format!("did you mean `{near}`?"),
                    None if names.is_empty() => "add it under sites".to_owned(),
                    None => format!("the register has: {}", names.join(", ")),
                };
                reading.mistake(
                    site,
                    format!("the register has no site `{}`", site.text()),
                    expected,
                );
            }
        }
    }
}

/// Tells names that differ only in case, accents or marks, at each place but the first, which is told once.
fn named_once(names: &[(usize, Word)], one: &str, many: &str, reading: &mut Reading) {
    let mut first: HashMap<String, (usize, bool)> = HashMap::new();
    let mut told: Vec<(usize, usize)> = Vec::new();
    for (k, (owner, word)) in names.iter().enumerate() {
        let before = first.entry(plain(word.text())).or_insert((k, false));
        if names[before.0].0 == *owner {
            continue;
        }
        if !before.1 {
            told.push((before.0, k));
            before.1 = true;
        }
        told.push((k, before.0));
    }
    // an alias unfolded again and again is one mistake
    told.truncate(20);
    for (here, there) in told {
        let (here, there) = (&names[here].1, &names[there].1);
        reading.mistake(
            here,
            format!(
                "`{}` and `{}` are one name for two {many}: case, accents and marks do not count",
                here.text(),
                there.text()
            ),
            format!("give each {one} a name of its own"),
        );
    }
}

const TOP_KEYS: &[&str] = &[
    "equinox",
    "horizon",
    "weights",
    "sites",
    "observers",
    "known-objects",
];

impl<'de> Section<'de> for Draft<'de> {
    fn place(&self) -> String {
        "house rules".to_owned()
    }

    fn entry<A: MapAccess<'de>>(
        &mut self,
        key: &Word<'de>,
        map: &mut A,
        reading: &mut Reading,
    ) -> Result<(), A::Error> {
        match key.text() {
            "equinox" => section(map, &mut EquinoxSection(&mut self.house), reading),
            "horizon" => section(map, &mut HorizonSection(&mut self.house), reading),
            "weights" => section(map, &mut WeightsSection(&mut self.house), reading),
            "sites" => section(map, &mut SitesSection(self), reading),
            "observers" => section(map, &mut ObserversSection(self), reading),
            "known-objects" => {
                for list in map.next_value_seed(WordsSeed(reading))? {
                    let span = list.span(reading);
                    reading.lists.push((list.text().to_owned(), span));
                }
                Ok(())
            }
            _ => {
                reading.unknown(key, "house rules", TOP_KEYS);
                map.next_value::<IgnoredAny>().map(drop)
            }
        }
    }
}

struct EquinoxSection<'a>(&'a mut House);

impl<'de> Section<'de> for EquinoxSection<'_> {
    fn place(&self) -> String {
        "equinox".to_owned()
    }

    fn entry<A: MapAccess<'de>>(
        &mut self,
        key: &Word<'de>,
        map: &mut A,
        reading: &mut Reading,
    ) -> Result<(), A::Error> {
        match key.text() {
            "canonical" => {
                let value = word(key, map, reading)?;
                match frame_named(value.text()) {
                    Ok(frame) => self.0.canonical = frame,
                    Err(what) => reading.mistake(&value, what, frame::EXPECTED),
                }
            }
            "when-missing" => {
                let value = word(key, map, reading)?;
                if value.text() == "query" {
                    self.0.when_missing = WhenMissing::Query;
                } else {
                    match frame_named(value.text()) {
                        Ok(frame) => self.0.when_missing = WhenMissing::Assume(frame),
                        Err(what) => reading.mistake(
                            &value,
                            what,
                            "expected `query`, or the equinox to assume: J2000.0, B1950.0 …",
                        ),
                    }
                }
            }
            _ => {
                reading.unknown(key, "equinox", &["canonical", "when-missing"]);
                map.next_value::<IgnoredAny>()?;
            }
        }
        Ok(())
    }
}

struct HorizonSection<'a>(&'a mut House);

impl<'de> Section<'de> for HorizonSection<'_> {
    fn place(&self) -> String {
        "horizon".to_owned()
    }

    fn entry<A: MapAccess<'de>>(
        &mut self,
        key: &Word<'de>,
        map: &mut A,
        reading: &mut Reading,
    ) -> Result<(), A::Error> {
        match key.text() {
            "lowest" => {
                let value = word(key, map, reading)?;
                if let Some(x) = reading.number(&value, "altitude in degrees", -5.0, 90.0) {
                    self.0.lowest_altitude_deg = x;
                }
            }
            "darkness" => {
                let value = word(key, map, reading)?;
                if let Some(x) =
                    reading.number(&value, "altitude of the Sun in degrees", -90.0, 90.0)
                {
                    self.0.darkness_deg = x;
                }
            }
            "daylight-magnitude" => {
                let value = word(key, map, reading)?;
                if let Some(x) = reading.number(&value, "magnitude", -30.0, 30.0) {
                    self.0.daylight_magnitude = Some(x);
                }
            }
            _ => {
                reading.unknown(
                    key,
                    "horizon",
                    &["lowest", "darkness", "daylight-magnitude"],
                );
                map.next_value::<IgnoredAny>()?;
            }
        }
        Ok(())
    }
}

struct WeightsSection<'a>(&'a mut House);

impl<'de> Section<'de> for WeightsSection<'_> {
    fn place(&self) -> String {
        "weights".to_owned()
    }

    fn entry<A: MapAccess<'de>>(
        &mut self,
        key: &Word<'de>,
        map: &mut A,
        reading: &mut Reading,
    ) -> Result<(), A::Error> {
        let value = word(key, map, reading)?;
        let rule = key.text();
        if !reading.rules.contains(&rule) {
            let expected = match nearest(rule, reading.rules.iter().copied()) {
                Some(near) => format!("did you mean `{near}`? `colure rulebook` lists them all"),
                None => "`colure rulebook` lists the rules".to_owned(),
            };
            reading.mistake(key, format!("there is no rule `{rule}`"), expected);
            return Ok(());
        }
        let weight = match value.text() {
            "note" => Some(Weight::Note),
            "query" => Some(Weight::Query),
            "reject" => Some(Weight::Reject),
            "off" => None,
            other => {
                // words this short are all alike: a letter or two, and no more
                let lower = other.to_lowercase();
                let near = ["note", "query", "reject", "off"]
                    .into_iter()
                    .find(|w| strsim::damerau_levenshtein(&lower, w) <= w.len() / 3)
                    .map_or(String::new(), |near| format!("did you mean `{near}`? "));
                reading.mistake(
                    &value,
                    format!("`{other}` is no weight"),
                    format!("{near}A weight is note, query, reject or off"),
                );
                return Ok(());
            }
        };
        self.0.weights.insert(rule.to_owned(), weight);
        Ok(())
    }
}

struct SitesSection<'a, 'de>(&'a mut Draft<'de>);

impl<'de> Section<'de> for SitesSection<'_, 'de> {
    fn place(&self) -> String {
        "sites".to_owned()
    }

    fn entry<A: MapAccess<'de>>(
        &mut self,
        key: &Word<'de>,
        map: &mut A,
        reading: &mut Reading,
    ) -> Result<(), A::Error> {
        let mut site = SiteSection::new(key.text());
        let before = reading.mistakes.len();
        section(map, &mut site, reading)?;
        let draft = &mut *self.0;
        let number = draft.site_names.len();
        let names = std::iter::once(key.clone()).chain(site.aliases);
        draft.site_names.extend(names.map(|name| (number, name)));
        match (site.latitude, site.longitude) {
            (Some(latitude), Some(longitude)) => draft.house.sites.push(RegisteredSite {
                latitude_deg: latitude.value,
                longitude_deg: longitude.value,
                step_deg: latitude.step.max(longitude.step),
                ..site.site
            }),
            written => {
                draft.broken_sites.push(site.site.name);
                draft.broken_sites.extend(site.site.aliases);
                // its own coordinates may already be complained of
                if reading.mistakes.len() == before {
                    let missing = match written {
                        (Some(_), None) => "its longitude",
                        (None, Some(_)) => "its latitude",
                        _ => "latitude and longitude",
                    };
                    reading.mistake(
                        key,
                        format!("the site `{}` needs {missing}", key.text()),
                        "write { latitude: 54°18.6′ N, longitude: 3°01′ W, elevation: 240 m, zone: Europe/London }",
                    );
                }
            }
        }
        Ok(())
    }
}

struct SiteSection<'de> {
    site: RegisteredSite,
    aliases: Vec<Word<'de>>,
    latitude: Option<angle::Degrees>,
    longitude: Option<angle::Degrees>,
}

impl<'de> SiteSection<'de> {
    fn new(name: &str) -> SiteSection<'de> {
        SiteSection {
            aliases: Vec::new(),
            site: RegisteredSite {
                name: name.to_owned(),
                aliases: Vec::new(),
                latitude_deg: 0.0,
                longitude_deg: 0.0,
                step_deg: 0.0,
                elevation_m: None,
                zone: None,
            },
            latitude: None,
            longitude: None,
        }
    }
}

const SITE_KEYS: &[&str] = &["latitude", "longitude", "elevation", "zone", "aliases"];

impl<'de> Section<'de> for SiteSection<'de> {
    fn place(&self) -> String {
        format!("the site `{}`", self.site.name)
    }

    fn entry<A: MapAccess<'de>>(
        &mut self,
        key: &Word<'de>,
        map: &mut A,
        reading: &mut Reading,
    ) -> Result<(), A::Error> {
        match key.text() {
            name @ ("latitude" | "longitude") => {
                let axis = if name == "latitude" {
                    Axis::Latitude
                } else {
                    Axis::Longitude
                };
                let value = word(key, map, reading)?;
                match angle::read(value.text(), axis) {
                    Ok(degrees) if axis == Axis::Latitude => self.latitude = Some(degrees),
                    Ok(degrees) => self.longitude = Some(degrees),
                    Err(error) => reading.mistake(
                        &value,
                        format!("{name}: {error}"),
                        format!("expected {}", axis.expected()),
                    ),
                }
            }
            "elevation" => {
                let value = word(key, map, reading)?;
                match elevation_m(value.text()) {
                    Some(metres) => self.site.elevation_m = Some(metres),
                    None => reading.mistake(
                        &value,
                        format!("`{}` is no elevation", value.text()),
                        "expected metres or feet from -500 m to 9000 m: 240 m, 800 ft",
                    ),
                }
            }
            "zone" => {
                let value = word(key, map, reading)?;
                match zone_name(value.text()) {
                    Some(zone) => self.site.zone = Some(zone),
                    None => {
                        let db = jiff::tz::db();
                        let names: Vec<String> = db.available().map(|n| n.to_string()).collect();
                        let near = nearest_zone(value.text(), &names);
                        let offered =
                            near.map_or(String::new(), |near| format!("did you mean `{near}`? "));
                        reading.mistake(
                            &value,
                            format!("there is no time zone `{}`", value.text()),
                            format!("{offered}expected a name of the IANA time zone database: Europe/London, America/New_York"),
                        );
                    }
                }
            }
            "aliases" => {
                self.aliases = map.next_value_seed(WordsSeed(reading))?;
                for alias in &mut self.aliases {
                    alias.near = key.span(reading);
                    self.site.aliases.push(alias.text().to_owned());
                }
            }
            _ => {
                let place = self.place();
                reading.unknown(key, &place, SITE_KEYS);
                map.next_value::<IgnoredAny>()?;
            }
        }
        Ok(())
    }
}

struct ObserversSection<'a, 'de>(&'a mut Draft<'de>);

impl<'de> Section<'de> for ObserversSection<'_, 'de> {
    fn place(&self) -> String {
        "observers".to_owned()
    }

    fn entry<A: MapAccess<'de>>(
        &mut self,
        key: &Word<'de>,
        map: &mut A,
        reading: &mut Reading,
    ) -> Result<(), A::Error> {
        let mut observer = ObserverSection {
            name: key.text().to_owned(),
            site: None,
            letters_to: None,
        };
        section(map, &mut observer, reading)?;
        let number = self.0.observer_names.len();
        self.0.observer_names.push((number, key.clone()));
        self.0.house.observers.push(Observer {
            name: observer.name,
            site: observer.site.as_ref().map(|s| s.text().to_owned()),
            letters_to: observer.letters_to,
        });
        self.0.observer_sites.extend(observer.site);
        Ok(())
    }
}

struct ObserverSection<'de> {
    name: String,
    site: Option<Word<'de>>,
    letters_to: Option<String>,
}

impl<'de> Section<'de> for ObserverSection<'de> {
    fn place(&self) -> String {
        format!("the observer `{}`", self.name)
    }

    fn entry<A: MapAccess<'de>>(
        &mut self,
        key: &Word<'de>,
        map: &mut A,
        reading: &mut Reading,
    ) -> Result<(), A::Error> {
        match key.text() {
            "site" => self.site = Some(word(key, map, reading)?),
            "letters-to" => {
                let value = word(key, map, reading)?;
                let address = value.text();
                let well_formed = address
                    .split_once('@')
                    .is_some_and(|(a, b)| !a.is_empty() && !b.is_empty() && !b.contains('@'));
                if well_formed && !address.contains(char::is_whitespace) {
                    self.letters_to = Some(address.to_owned());
                } else {
                    reading.mistake(
                        &value,
                        format!("`{address}` is no mail address"),
                        "expected one such as quill@section.example",
                    );
                }
            }
            _ => {
                let place = self.place();
                reading.unknown(key, &place, &["site", "letters-to"]);
                map.next_value::<IgnoredAny>()?;
            }
        }
        Ok(())
    }
}

/// An elevation in metres: `240 m`, `240`, `800 ft`.
fn elevation_m(word: &str) -> Option<f64> {
    let word = word.trim().replace('−', "-");
    let split = word
        .find(|c: char| !c.is_ascii_digit() && !"+-.".contains(c))
        .unwrap_or(word.len());
    let (number, unit) = word.split_at(split);
    // the international foot, exactly (1959)
    let metres = match unit.trim().to_lowercase().as_str() {
        "" | "m" | "metres" | "meters" | "metre" => 1.0,
        "ft" | "feet" | "foot" | "'" | "′" => 0.3048,
        _ => return None,
    };
    let value: f64 = number.parse().ok()?;
    let value = value * metres;
    (-500.0..=9000.0).contains(&value).then_some(value)
}

/// The IANA name as the database spells it.
fn zone_name(word: &str) -> Option<String> {
    let zone = jiff::tz::TimeZone::get(word.trim()).ok()?;
    zone.iana_name().map(str::to_owned)
}

fn nearest_zone<'a>(word: &str, names: &'a [String]) -> Option<&'a str> {
    let plain = word.trim().replace(' ', "_").to_lowercase();
    names
        .iter()
        .map(|name| {
            let lower = name.to_lowercase();
            let city = lower.rsplit('/').next().unwrap_or(&lower);
            let score =
                strsim::jaro_winkler(&plain, &lower).max(strsim::jaro_winkler(&plain, city));
            (score, name.as_str())
        })
        .filter(|(score, _)| *score > 0.85)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, name)| name)
}
