//! Equinox tags: system, year, mean or apparent, in the observers' words; and misspelt ones, for what they likely are.

use super::number::{Parsed, digits, is_dash, no, number};
use super::text::Text;
use super::words::{Word, phrase, says, word};
use crate::report::{EquinoxTag, EquinoxYear, Number, PlaceWord, SystemWord, YearLetter};
use nom::Parser;
use nom::branch::alt;

/// A tag with the word that led to it.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Tagged {
    /// The tag.
    pub tag: EquinoxTag,
    /// "Epoch" was written, not "equinox": it may be the epoch of the place.
    pub epoch_word: bool,
    /// A bare year or a misspelt tag: counts only where a tag belongs (in brackets, beside a position, in a head).
    pub weak: bool,
    /// "Epoch 2024.85": no year that coordinates are referred to, so the epoch of the place and no equinox.
    pub unlikely_equinox: bool,
}

const NOTHING: EquinoxTag = EquinoxTag {
    system: None,
    year: None,
    place: None,
    misspelt: false,
};

/// `J2000.0`, `FK4 1950`, `equinox 2000.0`, `true equinox of date`, `ICRS`, `Epoch 2000`, `in 1860 coordinates`.
pub fn equinox_tag(input: Text<'_>) -> Parsed<'_, Tagged> {
    let mut tag = NOTHING;
    let (mut rest, mut end) = (input, input);
    let (mut keyword, mut epoch_word, mut of_equinox) = (false, false, false);
    let mut says_equinox = false;
    loop {
        let here = rest;
        if let Ok((after, (letter, year))) = lettered_year(here)
            && tag.year.is_none()
        {
            tag.year = Some(EquinoxYear::Year {
                letter: Some(letter),
                year,
            });
            (rest, end) = (after, after);
        } else if let Ok((after, year)) = bare_year(here)
            && tag.year.is_none()
            && (keyword || tag.system.is_some() || of_equinox)
        {
            tag.year = Some(EquinoxYear::Year { letter: None, year });
            (rest, end) = (after, after);
        } else if let Ok((after, wrong)) = misspelt_tag(here)
            && tag.year.is_none()
            && (keyword || tag.system.is_some() || of_equinox)
        {
            tag.year = wrong.year;
            tag.misspelt = true;
            (rest, end) = (after, after);
        } else if let Some(after) = says(here, Word::OfDate)
            && tag.year.is_none()
            && !(tag == NOTHING && !keyword && !proper_of_date(here, after))
        {
            tag.year = Some(EquinoxYear::OfDate);
            (rest, end) = (after, after);
        } else if let Some((after, system)) = word(here, |w| match w {
            Word::Icrs => Some(SystemWord::Icrs),
            Word::Fk5 => Some(SystemWord::Fk5),
            Word::Fk4 => Some(SystemWord::Fk4),
            _ => None,
        }) && tag.system.is_none()
        {
            tag.system = Some(system);
            (rest, end) = (after, after);
        } else if let Some((after, place)) = word(here, |w| match w {
            Word::Mean => Some(PlaceWord::Mean),
            Word::Apparent => Some(PlaceWord::Apparent),
            _ => None,
        }) && tag.year.is_none_or(|_| end.at() > input.at())
            && tag.place.is_none_or(|p| p == place)
        {
            let words = &here.as_str()[..after.at() - here.at()];
            of_equinox |= words.contains(|c: char| c.is_whitespace());
            tag.place = Some(place);
            rest = after;
            if of_equinox || tag.year.is_some() {
                end = after;
            }
        } else if let Some(after) = says(here, Word::Equinox)
            && !(tag.year.is_some() && epoch_word)
        {
            keyword = true;
            of_equinox = true;
            says_equinox = true;
            rest = after;
        } else if let Some(after) = says(here, Word::Epoch)
            && tag.year.is_none()
            && !keyword
        {
            keyword = true;
            epoch_word = true;
            rest = after;
        } else if let Some(after) = says(here, Word::Position)
            && tag.place.is_some()
        {
            of_equinox = true;
            (rest, end) = (after, after);
        } else {
            break;
        }
        rest = between(rest);
    }
    if tag.year == Some(EquinoxYear::OfDate) && tag.place.is_none() && end.at() == input.at() {
        return no(input);
    }
    // "2000 coordinates": a bare year with a word for the frame after it
    if tag == NOTHING {
        if let Ok((after, year)) = bare_year(input)
            && let Some(done) = says(after.skip_blanks(), Word::Position).or_else(|| {
                // "KT 1975  equinox 2000.0": the name's number is no year of an equinox
                let done = says(after.skip_blanks(), Word::Equinox)?;
                let next = done.skip_blanks();
                (lettered_year(next).is_err() && bare_year(next).is_err()).then_some(done)
            })
        {
            let tag = EquinoxTag {
                year: Some(EquinoxYear::Year { letter: None, year }),
                ..NOTHING
            };
            return Ok((
                done,
                Tagged {
                    tag,
                    epoch_word: false,
                    weak: false,
                    unlikely_equinox: false,
                },
            ));
        }
        return no(input);
    }
    // mean or apparent alone is a tag only as "apparent place", "true equinox", or alone in brackets
    if tag.year.is_none() && tag.system.is_none() {
        let bracketed = input.before() == Some('(') && rest.peek() == Some(')');
        if tag.place != Some(PlaceWord::Apparent) || !(of_equinox || bracketed) {
            return no(input);
        }
        end = if bracketed { rest } else { end };
    }
    if end.at() == input.at() {
        return no(input);
    }
    Ok((
        end,
        Tagged {
            tag,
            epoch_word,
            weak: false,
            unlikely_equinox: epoch_word && !says_equinox && odd_year(&tag),
        },
    ))
}

/// A year between those that catalogues and almanacs use: 2024.85 is none, 1875.0 and 2024.5 are.
fn odd_year(tag: &EquinoxTag) -> bool {
    let Some(EquinoxYear::Year { year, .. }) = tag.year else {
        return false;
    };
    let scale = 10u64.pow(u32::from(year.places));
    let part = year.mantissa % scale;
    part != 0 && part * 2 != scale
}

/// A bare year where a tag belongs: `2000.0`, `1950`; and tags that are misspelt. Weak: the caller must know that a tag belongs there.
pub fn equinox_year(input: Text<'_>) -> Parsed<'_, Tagged> {
    alt((
        bare_year.map(|year| Tagged {
            tag: EquinoxTag {
                year: Some(EquinoxYear::Year { letter: None, year }),
                ..NOTHING
            },
            epoch_word: false,
            weak: true,
            unlikely_equinox: false,
        }),
        misspelt_tag.map(|tag| Tagged {
            tag,
            epoch_word: false,
            weak: true,
            unlikely_equinox: false,
        }),
    ))
    .parse(input)
}

/// `J2000.0`, `B 1950`: a letter, perhaps a blank, four digits.
pub fn lettered_year(input: Text<'_>) -> Parsed<'_, (YearLetter, Number)> {
    let letter = match input.peek() {
        Some('J' | 'j') => YearLetter::Julian,
        Some('B' | 'b') => YearLetter::Besselian,
        _ => return no(input),
    };
    let mut rest = input.skip(1);
    if rest.as_str().starts_with(['.', ' ', '_']) && input.peek().is_some_and(char::is_uppercase) {
        rest = rest.skip(1);
    }
    let (rest, year) = year_number(rest)?;
    Ok((rest, (letter, year)))
}

/// Four digits that can be the year of an equinox, perhaps with decimals, and no part of a date.
pub fn bare_year(input: Text<'_>) -> Parsed<'_, Number> {
    let (rest, year) = year_number(input)?;
    let whole = year.mantissa / 10u64.pow(u32::from(year.places));
    let next = rest.skip_blanks();
    let month = word(next, |w| matches!(w, Word::Month(_)).then_some(())).is_some()
        && next.at() > rest.at();
    if !(1500..=2300).contains(&whole) || month {
        no(input)
    } else {
        Ok((rest, year))
    }
}

fn year_number(input: Text<'_>) -> Parsed<'_, Number> {
    let (_, whole) = digits(input)?;
    if whole.as_str().len() != 4 || !whole.as_str().starts_with(['1', '2']) {
        return no(input);
    }
    let (rest, year) = number(input)?;
    // a comma after it parts it from what follows
    let (rest, year) = if input.as_str()[4..].starts_with(',') {
        (
            input.skip(4),
            Number {
                mantissa: whole.as_str().parse().unwrap_or(0),
                places: 0,
                whole_digits: 4,
            },
        )
    } else {
        (rest, year)
    };
    match rest.peek() {
        Some(c) if c.is_alphanumeric() => no(input),
        Some(c)
            if (is_dash(c) || matches!(c, '+' | '/' | '.' | ':'))
                && rest
                    .skip(c.len_utf8())
                    .peek()
                    .is_some_and(|d| d.is_ascii_digit()) =>
        {
            no(input)
        }
        _ => Ok((rest, year)),
    }
}

/// What looks like a tag and is none: `J200`, `B195O`, `J2OOO.0`, `J20000`; the year is what it likely is.
pub fn misspelt_tag(input: Text<'_>) -> Parsed<'_, EquinoxTag> {
    let letter = match input.peek() {
        Some('J' | 'j') => Some(YearLetter::Julian),
        Some('B' | 'b') => Some(YearLetter::Besselian),
        _ => None,
    };
    let start = if letter.is_some() {
        input.skip(1)
    } else {
        input
    };
    let start = if letter.is_some() && start.as_str().starts_with([' ', '.']) {
        start.skip(1)
    } else {
        start
    };
    let s = start.as_str();
    let length = s
        .find(|c: char| !(c.is_ascii_digit() || "OoIlSZ".contains(c)))
        .unwrap_or(s.len());
    let body = &s[..length];
    let mut rest = start.skip(length);
    if s[length..].starts_with('.') {
        let tail = s[length + 1..]
            .find(|c: char| !(c.is_ascii_digit() || c == 'O' || c == 'o'))
            .unwrap_or(s.len() - length - 1);
        if tail > 0 {
            rest = start.skip(length + 1 + tail);
        }
    }
    let read: String = body
        .chars()
        .map(|c| match c {
            'O' | 'o' => '0',
            'I' | 'l' => '1',
            'S' => '5',
            'Z' => '2',
            c => c,
        })
        .collect();
    let mended = body.chars().any(|c| !c.is_ascii_digit())
        || rest.span().start > start.at() + length
            && s[length..rest.at() - start.at()].contains(['O', 'o']);
    let digits_written = body.chars().filter(char::is_ascii_digit).count();
    let year: Option<u64> = match read.len() {
        3 if letter.is_some() => format!("{read}0").parse().ok(),
        4 if mended => read.parse().ok(),
        5 if letter.is_some() => read[..4].parse().ok(),
        _ => None,
    };
    let glue = rest
        .peek()
        .is_some_and(|c| c.is_alphanumeric() || is_dash(c) || c == '+');
    match year {
        Some(year) if (1500..=2300).contains(&year) && digits_written >= 1 && !glue => {
            let year = Number {
                mantissa: year * 10,
                places: 1,
                whole_digits: 4,
            };
            Ok((
                rest,
                EquinoxTag {
                    year: Some(EquinoxYear::Year { letter, year }),
                    misspelt: true,
                    ..NOTHING
                },
            ))
        }
        _ => no(input),
    }
}

/// What may stand between the words of one tag.
fn between(input: Text<'_>) -> Text<'_> {
    let mut rest = input.skip_blanks();
    if rest
        .peek()
        .is_some_and(|c| matches!(c, ',' | ':' | '=' | '('))
    {
        rest = rest.skip(1).skip_blanks();
    }
    while let Some((after, p)) = phrase(rest)
        && p.means(Word::Filler)
        && !p.means(Word::OfDate)
    {
        rest = after.skip_blanks();
    }
    if rest.as_str().starts_with("and ") || rest.as_str().starts_with("und ") {
        rest = rest.skip(4).skip_blanks();
    }
    rest
}

/// "of date" alone is a tag in English; in other languages only with the word for equinox.
fn proper_of_date(here: Text<'_>, after: Text<'_>) -> bool {
    let words = here.as_str()[..after.at() - here.at()].to_lowercase();
    matches!(
        &*words,
        "of date" | "equinox of date" | "eod" | "jnow" | "epoch of date"
    ) || words.contains("quino")
}
