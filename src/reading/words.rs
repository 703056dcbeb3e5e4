//! The observers' words in eight languages, from `grammar/words/*.yaml` by way of the build script.

use super::fold::fold;
use super::text::Text;
use crate::report::Compass;

/// What a word or phrase says.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
#[allow(missing_docs)] // the names are the keys of grammar/words/*.yaml
pub enum Word {
    RightAscension,
    Declination,
    Both,
    Position,
    HourAngle,
    Altitude,
    Azimuth,
    ZenithDistance,
    PolarDistance,
    Airmass,
    Galactic,
    Ecliptic,
    Latitude,
    Longitude,
    GeographicPair,
    Elevation,
    Site,
    Observer,
    Object,
    Date,
    Night,
    Time,
    Zone,
    Equinox,
    Epoch,
    OfDate,
    Mean,
    Apparent,
    Icrs,
    Fk5,
    Fk4,
    Month(u8),
    Weekday(u8),
    Compass(Compass),
    Universal,
    Ut1,
    Terrestrial,
    Barycentric,
    Atomic,
    ZoneAbbreviation,
    LocalTime,
    Am,
    Pm,
    Julian,
    ModifiedJulian,
    HeliocentricJulian,
    BarycentricJulian,
    Magnitude,
    Uncertainty,
    Constellation,
    ConstellationName(&'static str),
    RoleReference,
    RolePointing,
    RoleCatalogued,
    RoleRegion,
    RoleMeasured,
    New,
    ThatIs,
    NotAPosition,
    At,
    From,
    Filler,
    And,
    LeadIn,
    Found,
    Airless,
    All,
    Hours,
    Degrees,
    Minutes,
    Seconds,
    Arcminutes,
    Arcseconds,
    Metres,
    Feet,
    FromSouth,
    WestPositive,
    Minus,
    Plus,
}

/// One line of the word table.
pub(super) struct Entry {
    folded: &'static str,
    exact: &'static str,
    dot: bool,
    word: Word,
    language: &'static str,
}

mod table {
    use super::{Compass, Entry, Word};
    include!(concat!(env!("OUT_DIR"), "/words.rs"));
}

/// What was matched at a place: the longest phrase there, with every meaning it has.
#[derive(Clone, Copy, Debug)]
pub struct Phrase<'a> {
    /// The words.
    pub text: Text<'a>,
    first: usize,
    last: usize,
}

impl Phrase<'_> {
    /// Its meanings.
    pub fn meanings(&self) -> impl Iterator<Item = Word> + use<> {
        let text: &'static [Entry] = &table::WORDS[self.first..=self.last];
        let head = text[0].folded;
        text.iter()
            .filter(move |e| e.folded == head)
            .map(|e| e.word)
    }

    /// True where it can mean `word`.
    pub fn means(&self, word: Word) -> bool {
        self.meanings().any(|w| w == word)
    }
}

/// The phrases that stand at the beginning of `input`, longest first; each with what is left after it.
///
/// A phrase ends at a word's end; a digit may follow it directly (`RA2000`, `α1950`).
pub fn phrases<'a>(input: Text<'a>) -> impl Iterator<Item = (Text<'a>, Phrase<'a>)> {
    let s = input.as_str();
    bucket(s).filter_map(move |i| {
        let entry = &table::WORDS[i];
        let length = matches(s, entry)?;
        Some((
            input.skip(length),
            Phrase {
                text: Text::window_of(input, length),
                first: i,
                last: i,
            },
        ))
    })
}

/// The meanings of every phrase at the beginning of `input`.
pub fn meanings(input: Text<'_>) -> impl Iterator<Item = Word> {
    phrases(input).map(|(_, p)| table::WORDS[p.first].word)
}

/// The longest phrase at the beginning of `input`, with all the meanings it has.
pub fn phrase<'a>(input: Text<'a>) -> Option<(Text<'a>, Phrase<'a>)> {
    let mut found: Option<(Text<'a>, Phrase<'a>)> = None;
    for (rest, p) in phrases(input) {
        match &mut found {
            None => found = Some((rest, p)),
            Some((r, f))
                if r.at() == rest.at()
                    && table::WORDS[p.first].folded == table::WORDS[f.first].folded =>
            {
                f.last = p.first
            }
            Some((r, f)) if rest.at() > r.at() => {
                *f = p;
                *r = rest;
            }
            _ => {}
        }
    }
    found
}

/// The longest phrase at the beginning of `input` that can mean something `wanted` takes.
pub fn word<'a, T>(input: Text<'a>, wanted: impl Fn(Word) -> Option<T>) -> Option<(Text<'a>, T)> {
    let mut best: Option<(Text<'a>, T)> = None;
    for (rest, p) in phrases(input) {
        if let Some(value) = wanted(table::WORDS[p.first].word)
            && best.as_ref().is_none_or(|(b, _)| rest.at() > b.at())
        {
            best = Some((rest, value));
        }
    }
    best
}

/// The longest phrase at the beginning of `input` that can mean `word`: what is left after it.
pub fn says(input: Text<'_>, wanted: Word) -> Option<Text<'_>> {
    word(input, |w| (w == wanted).then_some(())).map(|(rest, ())| rest)
}

/// The language most of a text's words are of (`en`, `de`, …), where one leads clearly.
pub fn language(text: &str) -> Option<&'static str> {
    let mut votes: Vec<(&'static str, usize)> = Vec::new();
    let mut at = 0;
    for piece in text.split_inclusive(|c: char| !c.is_alphanumeric()) {
        let here = Text::window(text, crate::span::Span::new(at, text.len()));
        at += piece.len();
        // words that only one language has
        let mut of: Option<&'static str> = None;
        let mut only = true;
        for (_, p) in phrases(here) {
            let entry = &table::WORDS[p.first];
            if entry.folded.chars().count() < 3
                || entry.language == "common"
                || entry.language.is_empty()
            {
                continue;
            }
            match of {
                None => of = Some(entry.language),
                Some(l) if l != entry.language => only = false,
                _ => {}
            }
        }
        if let (Some(l), true) = (of, only) {
            match votes.iter_mut().find(|(v, _)| *v == l) {
                Some((_, n)) => *n += 1,
                None => votes.push((l, 1)),
            }
        }
    }
    votes.sort_by_key(|(_, n)| std::cmp::Reverse(*n));
    match votes[..] {
        [(l, _)] => Some(l),
        [(l, a), (_, b), ..] if a > b => Some(l),
        _ => None,
    }
}

/// The entries that can stand at the beginning of `s`: those of its first two letters (the build script's slots).
fn bucket(s: &str) -> std::ops::Range<usize> {
    let mut c = s.chars().map(fold);
    let letter = |c: Option<char>| {
        c.filter(char::is_ascii_lowercase)
            .map(|c| c as usize - 'a' as usize)
    };
    let first = c.next();
    let slot = match letter(first) {
        Some(first) => first * 27 + letter(c.next()).map_or(0, |second| second + 1),
        None if first.is_none_or(|c| c.is_ascii_digit() || c == ' ') => return 0..0,
        None => table::STARTS.len() - 2,
    };
    usize::from(table::STARTS[slot])..usize::from(table::STARTS[slot + 1])
}

/// Bytes of `s` that the entry covers, if it stands at its beginning as whole words.
fn matches(s: &str, entry: &Entry) -> Option<usize> {
    let mut at = 0;
    for wanted in entry.folded.chars() {
        if wanted == ' ' {
            let rest = &s[at..];
            let gap = rest
                .find(|c: char| fold(c) != ' ' && c != '-' && c != '_')
                .unwrap_or(rest.len());
            // a blank of the phrase is any blanks, or a hyphen or underscore
            if gap == 0 {
                return None;
            }
            at += gap;
        } else {
            let c = s[at..].chars().next()?;
            if fold(c) != wanted {
                return None;
            }
            at += c.len_utf8();
        }
    }
    if !entry.exact.is_empty() && !s.starts_with(entry.exact) {
        return None;
    }
    if entry.dot && s[at..].starts_with('.') {
        at += 1;
    }
    let ends_in_letter = s[..at].chars().next_back().is_some_and(char::is_alphabetic);
    if ends_in_letter && s[at..].chars().next().is_some_and(|c| c.is_alphabetic()) {
        return None;
    }
    Some(at)
}

impl<'a> Text<'a> {
    fn window_of(input: Text<'a>, bytes: usize) -> Text<'a> {
        use nom::Input;
        input.take(bytes)
    }
}
