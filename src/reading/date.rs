//! Dates, as they are written: day, month and year in any order, in figures and words, double nights, years left out.

use super::clock::clock_after_date;
use super::number::{Parsed, digits, integer, is_dash, no, number};
use super::text::Text;
use super::words::{Word, word};
use super::zone::zone;
use crate::report::{DateWritten, Number, Zone};
use nom::Parser;
use nom::branch::alt;

/// A date in any of its forms.
pub fn date(input: Text<'_>) -> Parsed<'_, DateWritten> {
    alt((
        date_year_first,
        date_iso_other,
        date_across_months,
        date_day_first,
        date_roman,
        date_month_first,
        date_numeric,
        date_compact,
    ))
    .parse(input)
}

/// `2024-03-05`, `2024/3/5`, `2024.03.05`, `2024. 3. 5.`, `2024 Mar 5.44`, `2024 March 5/6`, `2024-Mar-05`, `2024 Nov 30/Dec 1`.
fn date_year_first(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, year) = year4(input)?;
    if let Some(sep) = rest.peek()
        && (is_dash(sep) || sep == '/' || sep == '.' || sep == ' ')
        && let Ok((r, month)) = integer(apart(rest.skip(sep.len_utf8()), sep))
        && month.whole_digits <= 2
        && r.peek() == Some(sep)
        && let Ok((r, (day, to_day))) = day(apart(r.skip(sep.len_utf8()), sep))
        && (sep != ' '
            || month.whole_digits == 2 && day.whole_digits == 2
            || clock_after_date(r, false).is_some_and(|(r, _)| zone(r).is_ok()))
        && (1..=31).contains(&(day.mantissa / 10u64.pow(u32::from(day.places))))
        && (1..=12).contains(&month.mantissa)
    {
        // the point after the day of "2024. 3. 5."
        let spaced = sep == '.' && rest.as_str().starts_with(". ");
        let r = if spaced && r.peek() == Some('.') {
            r.skip(1)
        } else {
            r
        };
        return Written::new(year, 4, month.mantissa as u32, day)
            .to(to_day)
            .ends(input, r);
    }
    let comma = rest.skip_blanks().peek() == Some(',');
    let at = skip_dash(rest.skip_blanks());
    let (rest, month) = month(at)?;
    // "trail 2015, Jun 13, 2011": the comma parts a name from a date
    if comma && date_month_first(at).is_ok_and(|(_, d)| has_year(&d)) {
        return no(input);
    }
    let rest = skip_dash(rest.skip_blanks());
    let (rest, (day, mut to_day)) = day(rest)?;
    let mut end = rest;
    if to_day.is_none()
        && let Some((r, to)) = next_month(rest, month, day)
    {
        (end, to_day) = (r, Some(to));
    }
    Written::new(year, 4, month, day)
        .to(to_day)
        .ends(input, end)
}

/// Blanks after the point of "2024. 3. 5."
fn apart(input: Text<'_>, sep: char) -> Text<'_> {
    if sep == '.' {
        input.skip_blanks()
    } else {
        input
    }
}

/// The ordinal and the week dates of ISO 8601 before a clock time: `2024-065T22:31Z`, `2024-W10-2T22:31Z`.
fn date_iso_other(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, year) = year4(input)?;
    let leap = |y: i32| y % 4 == 0 && (y % 100 != 0 || y % 400 == 0);
    let (rest, of_year) = if rest.as_str().starts_with("-W") {
        let (rest, week) = integer(rest.skip(2))?;
        if week.whole_digits != 2 || rest.peek() != Some('-') {
            return no(input);
        }
        let (rest, weekday) = integer(rest.skip(1))?;
        if weekday.whole_digits != 1 || !(1..=7).contains(&weekday.mantissa) || week.mantissa > 53 {
            return no(input);
        }
        // 4 January is in week 1; Monday 0
        let y = year - 1;
        let fourth = (y + y / 4 - y / 100 + y / 400 + 4 + 6).rem_euclid(7);
        let day = 4 - fourth + (week.mantissa as i32 - 1) * 7 + weekday.mantissa as i32 - 1;
        (rest, day)
    } else {
        if rest.peek() != Some('-') {
            return no(input);
        }
        let (rest, day) = integer(rest.skip(1))?;
        if day.whole_digits != 3 {
            return no(input);
        }
        (rest, day.mantissa as i32)
    };
    let clock =
        rest.as_str().starts_with('T') && rest.skip(1).peek().is_some_and(|c| c.is_ascii_digit());
    if !clock || !(1..=365 + i32::from(leap(year))).contains(&of_year) {
        return no(input);
    }
    let february = 28 + i32::from(leap(year));
    let (mut month, mut day) = (1, of_year);
    for length in [31, february, 31, 30, 31, 30, 31, 31, 30, 31, 30] {
        if day <= length {
            break;
        }
        (month, day) = (month + 1, day - length);
    }
    let day = Number {
        mantissa: day as u64,
        places: 0,
        whole_digits: 2,
    };
    Written::new(year, 4, month, day).ends(input, rest)
}

/// The night from one month into the next: `31 Dec/1 Jan 2025`, `30 November to 1 December 2024`.
fn date_across_months(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, day) = integer(input)?;
    if !(28..=31).contains(&day.mantissa) {
        return no(input);
    }
    let (rest, first) = month(day_mark(rest).skip_blanks())?;
    let early = year4(rest.skip_blanks());
    let at = early.as_ref().map_or(rest, |(r, _)| *r);
    let Some(at) = night_to(at) else {
        return no(input);
    };
    let (rest, to) = integer(at)?;
    let (rest, second) = month(day_mark(rest).skip_blanks())?;
    let (rest, year) = year4(joint(rest, true))?;
    if to.mantissa != 1 || second != first % 12 + 1 {
        return no(input);
    }
    let year = if first == 12 { year - 1 } else { year };
    Written::new(year, 4, first, day)
        .to(Some(1))
        .ends(input, rest)
}

/// `5 March 2024`, `5. März 2024`, `5/6 March 2024`, `05-Mar-2024`, `3 Mar '25`, `5 de marzo de 2024`, `28 Mar.` (the year carried).
fn date_day_first(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, (day, to_day)) = day(input)?;
    let rest = joint(day_mark(rest), false);
    let at = rest;
    let (rest, month) = month(rest)?;
    let written = Written::new(0, 0, month, day).to(to_day);
    let year_at = joint(rest, true);
    // "17.2 mag, 2024-03-05": the year begins a date of its own
    if let Ok((r, year)) = year4(year_at)
        && date_year_first(year_at).is_err()
    {
        return written.of(year, 4).ends(input, r);
    }
    if day.places == 0 && rest.peek().is_some_and(is_dash) {
        // 05-Mar-24
        let (r, two) = digits(year_at)?;
        if two.as_str().len() != 2 {
            return no(input);
        }
        return written.of(two_digit_year(two.as_str()), 2).ends(input, r);
    }
    if day.places == 0
        && let Some((r, year)) = short_year(rest)
    {
        return written.of(year, 2).ends(input, r);
    }
    let name = at.as_str()[..rest.at() - at.at()].trim_end_matches('.');
    let sure = zone_or_clock(rest);
    let short = name.chars().count() < 4 && name.starts_with(char::is_lowercase);
    if never_yearless(name) || (short || is_dec(name)) && !(sure || day.places > 0 && !is_dec(name))
    {
        return no(input);
    }
    written.ends(input, rest)
}

/// The month in Roman figures: `5 III 2024`, `5.III.2024`.
fn date_roman(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, (day, to_day)) = day(input)?;
    let Some(at) = roman_gap(rest) else {
        return no(input);
    };
    let s = at.as_str();
    let length = s.find(|c| !matches!(c, 'I' | 'V' | 'X')).unwrap_or(s.len());
    let months = [
        "I", "II", "III", "IV", "V", "VI", "VII", "VIII", "IX", "X", "XI", "XII",
    ];
    let Some(month) = months.iter().position(|m| *m == &s[..length]) else {
        return no(input);
    };
    let Some(year_at) = roman_gap(at.skip(length)) else {
        return no(input);
    };
    let (rest, year) = year4(year_at)?;
    Written::new(year, 4, month as u32 + 1, day)
        .to(to_day)
        .ends(input, rest)
}

/// A point, a dash, a slash or blanks beside a Roman figure.
fn roman_gap(input: Text<'_>) -> Option<Text<'_>> {
    let r = input.skip_blanks();
    match r.peek() {
        Some(c) if is_dash(c) || c == '.' || c == '/' => Some(r.skip(c.len_utf8()).skip_blanks()),
        _ => (r.at() > input.at()).then_some(r),
    }
}

/// `March 5, 2024`, `Mar. 5/6, 2024`, `March 5 to 6, 2024`, `Mar. 28.4410` (the year carried).
fn date_month_first(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, month) = month(input)?;
    let name = input.as_str()[..rest.at() - input.at()].trim_end_matches('.');
    let rest = rest.skip_blanks();
    let (rest, (day, mut to_day)) = day(rest)?;
    let mut rest = ordinal(rest);
    if to_day.is_none()
        && let Some((r, to)) = next_month(rest, month, day)
    {
        (rest, to_day) = (r, Some(to));
    }
    let written = Written::new(0, 0, month, day).to(to_day);
    let year_at = skip_comma(rest);
    if let Ok((r, year)) = year4(year_at)
        && year_at.at() > rest.at()
        && date_year_first(year_at).is_err()
    {
        return written.of(year, 4).ends(input, r);
    }
    if day.places == 0
        && year_at.peek().is_some_and(|c| c == '\'' || c == '’')
        && let Some((r, year)) = short_year(year_at)
    {
        return written.of(year, 2).ends(input, r);
    }
    let capital = name.starts_with(char::is_uppercase) && name.chars().count() >= 3;
    // at the end of a field, or before the numbers of a table's row
    let ends = skip_comma(rest).peek().is_none_or(|c| c.is_ascii_digit());
    let sure = zone_or_clock(rest);
    let yearless = capital
        && !never_yearless(name)
        && if is_dec(name) {
            day.places > 0 && zone(rest).is_ok() || day.places >= 2 && begins_line(input) || sure
        } else {
            day.places > 0 || ends || sure
        };
    if yearless {
        written.ends(input, rest)
    } else {
        no(input)
    }
}

/// Words that are months in some language and something else in every sheet: magnitude, "set", "out".
fn never_yearless(name: &str) -> bool {
    ["mag", "set", "out"]
        .iter()
        .any(|w| name.eq_ignore_ascii_case(w))
}

/// December, or declination.
fn is_dec(name: &str) -> bool {
    name.eq_ignore_ascii_case("dec")
}

/// A clock time with its zone, or after decimals a zone, stands next.
fn zone_or_clock(rest: Text<'_>) -> bool {
    zone(rest).is_ok_and(|(_, z)| !matches!(z.value, Zone::Offset(_)))
        || clock_after_date(rest, false).is_some_and(|(r, _)| zone(r).is_ok())
}

fn begins_line(input: Text<'_>) -> bool {
    input.before().is_none_or(|c| c == '\n')
}

fn has_year(date: &DateWritten) -> bool {
    !matches!(date, DateWritten::Calendar { year_digits: 0, .. })
}

/// `25`, `'25` after a month, where nothing shows that it is another number.
fn short_year(input: Text<'_>) -> Option<(Text<'_>, i32)> {
    let rest = input.skip_blanks();
    let marked = rest.peek().filter(|&c| c == '\'' || c == '’');
    let (r, two) = digits(rest.skip(marked.map_or(0, char::len_utf8))).ok()?;
    if two.as_str().len() != 2 || r.peek().is_some_and(char::is_alphanumeric) {
        return None;
    }
    let next = r.skip_blanks().peek();
    let plain = next.is_none_or(|c| !c.is_ascii_digit() && !"+-−–:.°'′\"".contains(c))
        && !r.skip_blanks().as_str().starts_with(['h', 'm', 'd']);
    let clock = || clock_after_date(r, false).is_some_and(|(r, _)| zone(r).is_ok());
    (marked.is_some() || plain || clock()).then(|| (r, two_digit_year(two.as_str())))
}

/// `5.3.2024`, `05/03/2024`, `8/14/27`, `14-08-2027`. Day first with points; else unclear where both could be months.
fn date_numeric(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, first) = integer(input)?;
    let Some(sep) = rest.peek().filter(|&c| c == '.' || c == '/' || is_dash(c)) else {
        return no(input);
    };
    let mut rest = rest.skip(sep.len_utf8());
    if sep == '.' {
        rest = rest.skip_blanks();
    }
    let (rest, second) = integer(rest)?;
    if rest.peek() != Some(sep) {
        return no(input);
    }
    let mut rest = rest.skip(sep.len_utf8());
    if sep == '.' {
        rest = rest.skip_blanks();
    }
    let (after, year) = digits(rest)?;
    let year_digits = year.as_str().len();
    if first.whole_digits > 2 || second.whole_digits > 2 || !(year_digits == 4 || year_digits == 2)
    {
        return no(input);
    }
    // a fourth field, decimals or a letter make it a version, a number of a grant, or a joined figure
    if after
        .peek()
        .is_some_and(|c| c.is_alphanumeric() && c != 'T')
        || after.peek().is_some_and(|c| {
            (is_dash(c) || c == '/' || c == '.')
                && after
                    .skip(c.len_utf8())
                    .peek()
                    .is_some_and(|d| d.is_ascii_digit())
        })
    {
        return no(input);
    }
    let value = if year_digits == 4 {
        year.as_str().parse().unwrap_or(0)
    } else {
        two_digit_year(year.as_str())
    };
    if year_digits == 4 && !(1500..=2400).contains(&value) {
        return no(input);
    }
    let (a, b) = (first.mantissa as u32, second.mantissa as u32);
    if !(1..=31).contains(&a) || !(1..=31).contains(&b) || (a > 12 && b > 12) {
        return no(input);
    }
    let (day, month, unclear) = if sep == '.' || a > 12 {
        (first, b, false)
    } else if b > 12 {
        (second, a, false)
    } else {
        (first, b, a != b)
    };
    Written {
        order_unclear: unclear,
        ..Written::new(value, year_digits as u8, month, day)
    }
    .ends(input, after)
}

/// `20240305T223100Z` and `20240305`: eight digits that are a date.
fn date_compact(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, d) = digits(input)?;
    let s = d.as_str();
    let month: u32 = s.get(4..6).and_then(|m| m.parse().ok()).unwrap_or(0);
    let day: u64 = s.get(6..8).and_then(|m| m.parse().ok()).unwrap_or(0);
    let year: i32 = s.get(..4).and_then(|m| m.parse().ok()).unwrap_or(0);
    let followed = rest.peek().is_some_and(|c| {
        c.is_alphanumeric() && c != 'T'
            || c == '.'
            || c == ',' && rest.as_str()[1..].starts_with(|d: char| d.is_ascii_digit())
    });
    if s.len() != 8
        || !(1..=12).contains(&month)
        || !(1..=31).contains(&day)
        || !(1700..=2200).contains(&year)
        || followed
    {
        return no(input);
    }
    let day = Number {
        mantissa: day,
        places: 0,
        whole_digits: 2,
    };
    Written::new(year, 4, month, day).ends(input, rest)
}

/// The parts of a date on their way to a [`DateWritten`].
#[derive(Clone, Copy)]
struct Written {
    year: i32,
    year_digits: u8,
    month: u32,
    day: Number,
    to_day: Option<u32>,
    order_unclear: bool,
}

impl Written {
    fn new(year: i32, year_digits: u8, month: u32, day: Number) -> Written {
        Written {
            year,
            year_digits,
            month,
            day,
            to_day: None,
            order_unclear: false,
        }
    }

    fn of(self, year: i32, year_digits: u8) -> Written {
        Written {
            year,
            year_digits,
            ..self
        }
    }

    fn to(self, to_day: Option<u32>) -> Written {
        Written { to_day, ..self }
    }

    /// The date, unless a letter is glued to its end.
    fn ends<'a>(self, input: Text<'a>, rest: Text<'a>) -> Parsed<'a, DateWritten> {
        if rest.peek().is_some_and(|c| c.is_alphabetic() && c != 'T') {
            return no(input);
        }
        Ok((
            rest,
            DateWritten::Calendar {
                year: self.year,
                year_digits: self.year_digits,
                month: self.month,
                day: self.day,
                to_day: self.to_day,
                order_unclear: self.order_unclear,
            },
        ))
    }
}

/// A day of the month, perhaps with decimals, perhaps double (`5/6`, `5-6`, `5 to 6`, `5. auf den 6.`).
fn day(input: Text<'_>) -> Parsed<'_, (Number, Option<u32>)> {
    let (rest, day) = number(input)?;
    if day.whole_digits > 2
        || input.as_str()[usize::from(day.whole_digits)..].starts_with(',') && day.places > 0
    {
        if day.whole_digits <= 2
            && day.places >= 2
            && zone(rest).is_ok_and(|(_, z)| !matches!(z.value, Zone::Offset(_)))
        {
            return Ok((rest, (day, None)));
        }
        // "5,2024" is no decimal day
        let (rest, day) = integer(input)?;
        return if day.whole_digits > 2 {
            no(input)
        } else {
            Ok((rest, (day, None)))
        };
    }
    if day.places == 0
        && let Some(at) = night_to(rest)
        && let Ok((r, second)) = integer(at)
        && second.whole_digits <= 2
        && (second.mantissa == day.mantissa + 1 || second.mantissa == 1 && day.mantissa >= 28)
        && !r
            .peek()
            .is_some_and(|c| c == '/' || c.is_ascii_digit() || c == ':')
    {
        return Ok((r, (day, Some(second.mantissa as u32))));
    }
    Ok((rest, (day, None)))
}

/// "To" between the two days of a night.
const NIGHT_TO: &[&str] = &[
    "to the ",
    "to ",
    "auf den ",
    "auf ",
    "au ",
    "al ",
    "op ",
    "na ",
    "para o dia ",
    "para ",
];

/// After the first day of a double night: a slash, a dash, or a word.
fn night_to(input: Text<'_>) -> Option<Text<'_>> {
    if let Some(c) = input.peek().filter(|&c| c == '/' || is_dash(c)) {
        return Some(input.skip(c.len_utf8()));
    }
    let rest = day_mark(input).skip_blanks();
    NIGHT_TO
        .iter()
        .find(|w| rest.as_str().starts_with(**w))
        .map(|w| rest.skip(w.len()).skip_blanks())
}

/// `/Dec 1` after 30 November.
fn next_month(input: Text<'_>, from: u32, day: Number) -> Option<(Text<'_>, u32)> {
    if day.places > 0 || !(28..=31).contains(&day.mantissa) {
        return None;
    }
    let at = night_to(input)?.skip_blanks();
    // the second year: 2024 Dec 31/2025 Jan 1
    let at = year4(at).map_or(at, |(r, _)| r.skip_blanks());
    let (r, second) = month(at).ok()?;
    let (r, to) = integer(r.skip_blanks()).ok()?;
    (second == from % 12 + 1 && to.mantissa == 1).then_some((r, 1))
}

/// The point or the ordinal ending after a day.
fn day_mark(input: Text<'_>) -> Text<'_> {
    ordinal(if input.peek() == Some('.') {
        input.skip(1)
    } else {
        input
    })
}

fn ordinal(input: Text<'_>) -> Text<'_> {
    ["st", "nd", "rd", "th", "er", "º", "ª"]
        .iter()
        .find(|o| input.as_str().starts_with(**o))
        .map_or(input, |o| input.skip(o.len()))
}

pub(super) fn year4(input: Text<'_>) -> Parsed<'_, i32> {
    let (rest, d) = digits(input)?;
    let year: i32 = d.as_str().parse().unwrap_or(0);
    if d.as_str().len() == 4 && (1500..=2400).contains(&year) {
        Ok((rest, year))
    } else {
        no(input)
    }
}

fn two_digit_year(two: &str) -> i32 {
    let n: i32 = two.parse().unwrap_or(0);
    if n >= 50 { 1900 + n } else { 2000 + n }
}

fn month(input: Text<'_>) -> Parsed<'_, u32> {
    match word(input, |w| match w {
        Word::Month(m) => Some(u32::from(m)),
        _ => None,
    }) {
        Some((rest, m)) => Ok((rest, m)),
        None => no(input),
    }
}

/// Blanks, a hyphen, or "of", "de", "di" between the parts of a date; a comma only before the year.
fn joint(input: Text<'_>, before_year: bool) -> Text<'_> {
    let mut rest = input.skip_blanks();
    if rest
        .peek()
        .is_some_and(|c| is_dash(c) || before_year && c == ',')
    {
        rest = rest
            .skip(rest.peek().map_or(1, char::len_utf8))
            .skip_blanks();
    }
    for particle in ["of ", "de ", "di ", "do ", "del "] {
        if rest.as_str().starts_with(particle) {
            rest = rest.skip(particle.len()).skip_blanks();
        }
    }
    rest
}

/// A dash or a comma, and the blanks after it.
fn skip_dash(input: Text<'_>) -> Text<'_> {
    match input.peek() {
        Some(c) if is_dash(c) || c == ',' => input.skip(c.len_utf8()).skip_blanks(),
        _ => input,
    }
}

pub(super) fn skip_comma(input: Text<'_>) -> Text<'_> {
    let rest = input.skip_blanks();
    if rest.peek().is_some_and(|c| c == ',' || c == ';') {
        rest.skip(1).skip_blanks()
    } else {
        rest
    }
}
