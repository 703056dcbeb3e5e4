//! Instants: dates, clock times, zones, Julian dates, as they are written.

use super::number::{Parsed, digits, integer, is_dash, no, number};
use super::text::Text;
use super::words::{Word, says, word};
use crate::report::{Clock, DateWritten, InstantWritten, JulianCount, Number, Zone};
use crate::span::Spanned;
use nom::Parser;
use nom::branch::alt;

/// A date, a clock time with its zone, or both, in either order; a Julian date.
pub fn instant(input: Text<'_>) -> Parsed<'_, InstantWritten> {
    alt((julian_instant, dated, clock_then_date)).parse(input)
}

/// `2012 Sep 25 09:13 UT`, `2010 Aug 27.2250 UT`, `Tue, 5 March 2024, 22:31 CET`, `2019-10-22T04:53:00Z`, `5.3.2024`.
fn dated(input: Text<'_>) -> Parsed<'_, InstantWritten> {
    // "Mar." is a Tuesday in four languages and March in three: a weekday has its date after it
    let (rest, weekday) = match weekday(input) {
        Ok((rest, day)) if date_may_follow(skip_comma(rest)) => (skip_comma(rest), Some(day)),
        _ => (input, None),
    };
    // "UT 2012 Sep 25 09:13": the scale may stand first
    let (rest, first_zone) = match universal(rest) {
        Ok((r, z)) if date(r.skip_blanks()).is_ok() => (r.skip_blanks(), Some(z)),
        _ => (rest, None),
    };
    let at = rest;
    let (rest, written) = date(rest)?;
    let mut end = rest;
    let mut found = InstantWritten {
        date: Some(Spanned::new(written, at.span_to(rest))),
        clock: None,
        zone: first_zone,
        until: None,
        plus_s: None,
        weekday,
        span: input.span_to(rest),
    };
    let decimals = matches!(written, DateWritten::Calendar { day, .. } if day.places > 0);
    if !decimals && let Some((r, c)) = clock_after_date(rest) {
        (end, found.clock) = (r, Some(c));
        if let Some((r, until)) = until(end) {
            (end, found.until) = (r, Some(until));
        }
    }
    if found.clock.is_some() || decimals || found.zone.is_none() {
        if let Ok((r, z)) = zone(end) {
            let z_ok = found.clock.is_some() || decimals || matches!(z.value, Zone::Universal);
            if z_ok && found.zone.is_none() {
                (end, found.zone) = (r, Some(z));
            }
        }
        // "2012 Sep 25 UT 09:13"
        if found.clock.is_none()
            && found.zone.is_some()
            && !decimals
            && let Some((r, c)) = clock_after_date(end)
        {
            (end, found.clock) = (r, Some(c));
        }
    }
    found.span = input.span_to(end);
    Ok((end, found))
}

/// A date, or a scale and a date.
fn date_may_follow(input: Text<'_>) -> bool {
    let after = universal(input).map_or(input, |(r, _)| r.skip_blanks());
    date(input).is_ok() || date(after).is_ok()
}

/// `22:31 UT on 2024 March 5`, `09:13 UT`, `10:40 pm EST, 8/14/27`.
fn clock_then_date(input: Text<'_>) -> Parsed<'_, InstantWritten> {
    let (rest, c) = clock(input).or_else(|_| loose_clock(input))?;
    let mut end = rest;
    let mut found = InstantWritten {
        date: None,
        clock: Some(c),
        zone: None,
        until: None,
        plus_s: None,
        weekday: None,
        span: input.span_to(rest),
    };
    if let Some((r, u)) = until(end) {
        (end, found.until) = (r, Some(u));
    }
    match zone(end) {
        Ok((r, z)) => (end, found.zone) = (r, Some(z)),
        Err(_) if c.pm.is_some() => {}
        Err(_) => return no(input),
    }
    let mut next = skip_comma(end);
    if let Some(after) =
        says(next, Word::Date).or_else(|| next.as_str().starts_with("on ").then(|| next.skip(2)))
    {
        next = after.skip_blanks();
    }
    if let Ok((r, day)) = weekday(next)
        && date(skip_comma(r)).is_ok()
    {
        found.weekday = Some(day);
        next = skip_comma(r);
    }
    if let Ok((r, d)) = date(next) {
        found.date = Some(Spanned::new(d, next.span_to(r)));
        end = r;
    }
    found.span = input.span_to(end);
    Ok((end, found))
}

/// `JD 2453246.2569`, `MJD 61234.4417`, `HJD = 2455682.9139`, and a bare `2453246.2569`.
fn julian_instant(input: Text<'_>) -> Parsed<'_, InstantWritten> {
    let (rest, d) = julian(input)?;
    let mut end = rest;
    let mut zone_found = None;
    if let Ok((r, z)) = zone(rest) {
        (end, zone_found) = (r, Some(z));
    }
    Ok((
        end,
        InstantWritten {
            date: Some(Spanned::new(d, input.span_to(rest))),
            clock: None,
            zone: zone_found,
            until: None,
            plus_s: None,
            weekday: None,
            span: input.span_to(end),
        },
    ))
}

/// A Julian date by its label, or a bare number that can be nothing else.
pub fn julian(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let label = word(input, |w| match w {
        Word::Julian => Some(JulianCount::Jd),
        Word::ModifiedJulian => Some(JulianCount::Mjd),
        Word::HeliocentricJulian => Some(JulianCount::Hjd),
        Word::BarycentricJulian => Some(JulianCount::Bjd),
        _ => None,
    });
    let Some((rest, count)) = label else {
        let (rest, value) = number(input)?;
        let whole = value.mantissa / 10u64.pow(u32::from(value.places));
        if value.whole_digits != 7
            || value.places == 0
            || !(2_300_000..2_600_000).contains(&whole)
            || rest.peek().is_some_and(char::is_alphanumeric)
        {
            return no(input);
        }
        return Ok((
            rest,
            DateWritten::Julian {
                number: value,
                count: JulianCount::Jd,
            },
        ));
    };
    let mut rest = rest.skip_blanks();
    // JD(UT), JD (TT): the scale is the caller's to read; only the mark before the number goes
    while rest.peek().is_some_and(|c| matches!(c, '=' | ':' | '.')) {
        rest = rest.skip(1).skip_blanks();
    }
    let (after, value) = number(rest)?;
    let whole = value.mantissa / 10u64.pow(u32::from(value.places));
    let count = match (count, whole) {
        (JulianCount::Mjd, 10_000..100_000) => JulianCount::Mjd,
        (JulianCount::Jd, 10_000..100_000) => JulianCount::Reduced,
        (c @ (JulianCount::Jd | JulianCount::Hjd | JulianCount::Bjd), 2_000_000..3_000_000) => c,
        _ => return no(input),
    };
    if after.peek().is_some_and(char::is_alphanumeric) {
        no(input)
    } else {
        Ok((
            after,
            DateWritten::Julian {
                number: value,
                count,
            },
        ))
    }
}

// ---------------------------------------------------------------------------------------------- dates

/// A date in any of its forms.
pub fn date(input: Text<'_>) -> Parsed<'_, DateWritten> {
    alt((
        date_year_first,
        date_day_first,
        date_month_first,
        date_numeric,
        date_compact,
    ))
    .parse(input)
}

/// `2024-03-05`, `2024/3/5`, `2024.03.05`, `2024 Mar 5.44`, `2024 March 5/6`, `2024-Mar-05`.
fn date_year_first(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, year) = year4(input)?;
    if let Some(sep) = rest.peek()
        && (is_dash(sep) || sep == '/' || sep == '.' || sep == ' ')
        && let Ok((r, month)) = integer(rest.skip(sep.len_utf8()))
        && month.whole_digits <= 2
        && r.peek() == Some(sep)
        && (sep != ' ' || month.whole_digits == 2)
        && let Ok((r, (day, to_day))) = day(r.skip(sep.len_utf8()))
        && (sep != ' ' || day.whole_digits == 2)
        && (1..=31).contains(&(day.mantissa / 10u64.pow(u32::from(day.places))))
        && (1..=12).contains(&month.mantissa)
    {
        return done(input, r, year, 4, month.mantissa as u32, day, to_day, false);
    }
    let rest = rest.skip_blanks();
    let rest = skip_dash(rest);
    let (rest, month) = month(rest)?;
    let rest = skip_dash(rest.skip_blanks());
    let (rest, (day, to_day)) = day(rest)?;
    done(input, rest, year, 4, month, day, to_day, false)
}

/// `5 March 2024`, `5. März 2024`, `5/6 March 2024`, `05-Mar-2024`, `5 de marzo de 2024`, `28 Mar.` (the year carried).
fn date_day_first(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, (day, to_day)) = day(input)?;
    let rest = if rest.peek() == Some('.') {
        rest.skip(1)
    } else {
        rest
    };
    let rest = ["st", "nd", "rd", "th", "er", "º", "ª"]
        .iter()
        .find(|o| rest.as_str().starts_with(**o))
        .map_or(rest, |o| rest.skip(o.len()));
    let rest = joint(rest);
    let (rest, month) = month(rest)?;
    let year_at = joint(rest);
    match year4(year_at) {
        Ok((r, year)) => done(input, r, year, 4, month, day, to_day, false),
        Err(_) if day.places == 0 && rest.peek().is_some_and(is_dash) => {
            // 05-Mar-24
            let (r, two) = digits(year_at)?;
            if two.as_str().len() != 2 {
                return no(input);
            }
            done(
                input,
                r,
                two_digit_year(two.as_str()),
                2,
                month,
                day,
                to_day,
                false,
            )
        }
        Err(_) => done(input, rest, 0, 0, month, day, to_day, false),
    }
}

/// `March 5, 2024`, `Mar. 5/6, 2024`, `Mar. 28.4410` (the year carried).
fn date_month_first(input: Text<'_>) -> Parsed<'_, DateWritten> {
    let (rest, month) = month(input)?;
    let rest = rest.skip_blanks();
    let (rest, (day, to_day)) = day(rest)?;
    let rest = ["st", "nd", "rd", "th"]
        .iter()
        .find(|o| rest.as_str().starts_with(**o))
        .map_or(rest, |o| rest.skip(o.len()));
    let year_at = skip_comma(rest);
    match year4(year_at) {
        Ok((r, year)) if year_at.at() > rest.at() => {
            done(input, r, year, 4, month, day, to_day, false)
        }
        _ => done(input, rest, 0, 0, month, day, to_day, false),
    }
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
    done(
        input,
        after,
        value,
        year_digits as u8,
        month,
        day,
        None,
        unclear,
    )
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
    done(
        input,
        rest,
        year,
        4,
        month,
        Number {
            mantissa: day,
            places: 0,
            whole_digits: 2,
        },
        None,
        false,
    )
}

#[allow(clippy::too_many_arguments)]
fn done<'a>(
    input: Text<'a>,
    rest: Text<'a>,
    year: i32,
    year_digits: u8,
    month: u32,
    day: Number,
    to_day: Option<u32>,
    order_unclear: bool,
) -> Parsed<'a, DateWritten> {
    if rest.peek().is_some_and(|c| c.is_alphabetic() && c != 'T') {
        return no(input);
    }
    Ok((
        rest,
        DateWritten::Calendar {
            year,
            year_digits,
            month,
            day,
            to_day,
            order_unclear,
        },
    ))
}

/// A day of the month, perhaps with decimals, perhaps double (`5/6`, `5-6`).
fn day(input: Text<'_>) -> Parsed<'_, (Number, Option<u32>)> {
    let (rest, day) = number(input)?;
    if day.whole_digits > 2
        || input.as_str()[usize::from(day.whole_digits)..].starts_with(',') && day.places > 0
    {
        // "5,2024" is no decimal day
        let (rest, day) = integer(input)?;
        return if day.whole_digits > 2 {
            no(input)
        } else {
            Ok((rest, (day, None)))
        };
    }
    let sep = rest.peek();
    if day.places == 0
        && sep.is_some_and(|c| c == '/' || is_dash(c))
        && let Ok((r, second)) = integer(rest.skip(sep.map_or(1, char::len_utf8)))
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

fn year4(input: Text<'_>) -> Parsed<'_, i32> {
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

fn weekday(input: Text<'_>) -> Parsed<'_, Spanned<u8>> {
    match word(input, |w| match w {
        Word::Weekday(d) => Some(d),
        _ => None,
    }) {
        Some((rest, d)) => Ok((rest, Spanned::new(d, input.span_to(rest)))),
        None => no(input),
    }
}

/// Blanks, a hyphen, a comma, or "of", "de", "di" between the parts of a date.
fn joint(input: Text<'_>) -> Text<'_> {
    let mut rest = input.skip_blanks();
    if rest.peek().is_some_and(|c| is_dash(c) || c == ',') {
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

fn skip_comma(input: Text<'_>) -> Text<'_> {
    let rest = input.skip_blanks();
    if rest.peek().is_some_and(|c| c == ',' || c == ';') {
        rest.skip(1).skip_blanks()
    } else {
        rest
    }
}

// ---------------------------------------------------------------------------------------------- clock times

/// `09:13`, `22:31:05.3`, `22h31m05s`, `10:40 pm`.
pub fn clock(input: Text<'_>) -> Parsed<'_, Clock> {
    let (rest, hour) = integer(input)?;
    if hour.whole_digits > 2 {
        return no(input);
    }
    let mark = rest.peek();
    let (rest, minute, second) = match mark {
        Some(':') => {
            let (rest, minute) = number(rest.skip(1))?;
            match rest.peek() {
                Some(':')
                    if minute.places == 0
                        && rest.skip(1).peek().is_some_and(|c| c.is_ascii_digit()) =>
                {
                    let (rest, second) = number(rest.skip(1))?;
                    (rest, minute, Some(second))
                }
                _ => (rest, minute, None),
            }
        }
        Some('h' | 'H' | 'ʰ') => {
            let (rest, minute) = number(rest.skip(mark.map_or(1, char::len_utf8)).skip_blanks())?;
            let rest = strip_mark(rest, &["min", "m", "ᵐ", "'"]);
            match number(rest.skip_blanks()) {
                Ok((r, second))
                    if second.whole_digits <= 2
                        && minute.places == 0
                        && ["s", "ˢ", "\""].iter().any(|m| r.as_str().starts_with(m)) =>
                {
                    (strip_mark(r, &["s", "ˢ", "\""]), minute, Some(second))
                }
                _ => (rest, minute, None),
            }
        }
        _ => return no(input),
    };
    if minute.whole_digits != 2 || second.is_some_and(|s| s.whole_digits != 2) {
        return no(input);
    }
    finish_clock(input, rest, hour, Some(minute), second)
}

/// `0441`, `22h`, `22.31 Uhr`, `22` before a zone: only where a zone or the word for o'clock follows.
fn loose_clock(input: Text<'_>) -> Parsed<'_, Clock> {
    let (rest, d) = digits(input)?;
    let s = d.as_str();
    let part = |t: &str| Number {
        mantissa: t.parse().unwrap_or(0),
        places: 0,
        whole_digits: t.len() as u8,
    };
    let (rest, hour, minute) = match s.len() {
        4 => (rest, part(&s[..2]), Some(part(&s[2..]))),
        1 | 2 => match rest.peek() {
            Some('h' | 'H') => (rest.skip(1), part(s), None),
            Some('.') => {
                let (r, m) = digits(rest.skip(1))?;
                if m.as_str().len() != 2 || says(r.skip_blanks(), Word::Time).is_none() {
                    return no(input);
                }
                (r, part(s), Some(part(m.as_str())))
            }
            _ => (rest, part(s), None),
        },
        _ => return no(input),
    };
    if hour.mantissa > 24 || minute.is_some_and(|m| m.mantissa > 59) {
        return no(input);
    }
    let (rest, clock) = finish_clock(input, rest, hour, minute, None)?;
    match zone(rest) {
        Ok((_, z))
            if matches!(
                z.value,
                Zone::Universal | Zone::Abbreviation(_) | Zone::Local
            ) =>
        {
            Ok((rest, clock))
        }
        _ if clock.pm.is_some() => Ok((rest, clock)),
        _ => no(input),
    }
}

fn finish_clock<'a>(
    input: Text<'a>,
    rest: Text<'a>,
    hour: Number,
    minute: Option<Number>,
    second: Option<Number>,
) -> Parsed<'a, Clock> {
    let next = rest.skip_blanks();
    let half = word(next, |w| match w {
        Word::Am => Some(false),
        Word::Pm => Some(true),
        _ => None,
    });
    let (mut rest, pm) = match half {
        Some((r, pm)) => (r, Some(pm)),
        None => (rest, None),
    };
    let span = input.span_to(rest);
    // "22:31 Uhr", "22:31 h"
    if let Some(r) =
        says(rest.skip_blanks(), Word::Time).or_else(|| says(rest.skip_blanks(), Word::Hours))
    {
        if r.at() > rest.skip_blanks().at() {
            rest = r;
        }
    }
    if rest.peek().is_some_and(|c| c.is_alphanumeric() && c != 'Z')
        || rest.peek() == Some(':') && rest.skip(1).peek().is_some_and(|c| c.is_ascii_digit())
    {
        return no(input);
    }
    Ok((
        rest,
        Clock {
            hour,
            minute,
            second,
            pm,
            span,
        },
    ))
}

fn strip_mark<'a>(input: Text<'a>, marks: &[&str]) -> Text<'a> {
    marks
        .iter()
        .find(|m| input.as_str().starts_with(**m))
        .map_or(input, |m| input.skip(m.len()))
}

/// A clock time after a date: `T`, blanks, a comma, "at" may stand between. Not a right ascension that happens to follow.
fn clock_after_date(input: Text<'_>) -> Option<(Text<'_>, Clock)> {
    let mut rest = input;
    if rest.peek() == Some('T') {
        rest = rest.skip(1);
        // 20240305T223100Z
        if let Ok((r, d)) = digits(rest)
            && matches!(d.as_str().len(), 4 | 6)
        {
            let s = d.as_str();
            let part = |t: &str| Number {
                mantissa: t.parse().unwrap_or(0),
                places: 0,
                whole_digits: 2,
            };
            let second = s.get(4..6).map(part);
            return Some((
                r,
                Clock {
                    hour: part(&s[..2]),
                    minute: Some(part(&s[2..4])),
                    second,
                    pm: None,
                    span: rest.span_to(r),
                },
            ));
        }
    } else {
        rest = skip_comma(rest);
        if rest.peek() == Some('(') {
            return None;
        }
        while let Some(r) = says(rest, Word::At).or_else(|| says(rest, Word::Time)) {
            rest = r.skip_blanks();
            if rest.peek().is_some_and(|c| c == ':' || c == '=') {
                rest = rest.skip(1).skip_blanks();
            }
        }
    }
    if rest.at() == input.at() {
        return None;
    }
    match clock(rest) {
        Ok((r, c)) => {
            // a declination after it: then it is a right ascension
            let next = r.skip_blanks();
            let signed = next.peek().is_some_and(|c| c == '+' || is_dash(c))
                && next
                    .skip(next.peek().map_or(1, char::len_utf8))
                    .peek()
                    .is_some_and(|c| c.is_ascii_digit());
            let written = &rest.as_str()[..c.span.end - rest.at()];
            if signed && offset(r).is_err() && until(r).is_none()
                || c.pm.is_none()
                    && zone(r).is_err()
                    && written.contains(['h', 'H'])
                    && c.second.is_some()
            {
                return None;
            }
            Some((r, c))
        }
        Err(_) => loose_clock(rest).ok(),
    }
}

/// The end of a range: `-22:35`, ` to 22:35`, `–22:35`.
fn until(input: Text<'_>) -> Option<(Text<'_>, Clock)> {
    let rest = input.skip_blanks();
    let after = match rest.peek() {
        Some(c) if is_dash(c) => rest.skip(c.len_utf8()),
        _ => [
            "to ", "bis ", "until ", "till ", "à ", "a ", "tot ", "até ", "do ", "hasta ", "alle ",
        ]
        .iter()
        .find(|w| rest.as_str().starts_with(**w))
        .map(|w| rest.skip(w.len()))?,
    };
    let (r, c) = clock(after.skip_blanks()).ok()?;
    // 22:31-02:00 with whole quarters may be an offset from UTC: only hours below 15 and glued
    let glued_offset = rest.at() == input.at() && offset(input).is_ok() && zone(r).is_err();
    if glued_offset { None } else { Some((r, c)) }
}

// ---------------------------------------------------------------------------------------------- zones

/// `UT`, `(UTC)`, `Z`, `+02:00`, `UTC-5`, `CET`, `Europe/London`, "local time", `TT`.
pub fn zone(input: Text<'_>) -> Parsed<'_, Spanned<Zone>> {
    let rest = input.skip_blanks();
    let (rest, bracket) = match rest.peek() {
        Some('(' | '[') => (rest.skip(1).skip_blanks(), true),
        _ => (rest, false),
    };
    let at = rest;
    let (rest, z) = zone_word(rest)?;
    let span = at.span_to(rest);
    if bracket {
        let close = rest.skip_blanks();
        return if matches!(close.peek(), Some(')' | ']')) {
            Ok((close.skip(1), Spanned::new(z, span)))
        } else {
            no(input)
        };
    }
    Ok((rest, Spanned::new(z, span)))
}

fn universal(input: Text<'_>) -> Parsed<'_, Spanned<Zone>> {
    match says(input, Word::Universal) {
        Some(rest) => Ok((rest, Spanned::new(Zone::Universal, input.span_to(rest)))),
        None => no(input),
    }
}

fn zone_word(input: Text<'_>) -> Parsed<'_, Zone> {
    if let Ok((rest, minutes)) = offset(input) {
        return Ok((rest, Zone::Offset(minutes)));
    }
    if let Ok((rest, name)) = zone_name(input) {
        return Ok((rest, Zone::Named(name.to_string())));
    }
    let found = word(input, |w| match w {
        Word::Universal => Some(Zone::Universal),
        Word::Ut1 => Some(Zone::Ut1),
        Word::Terrestrial => Some(Zone::Terrestrial),
        Word::Barycentric => Some(Zone::Barycentric),
        Word::Atomic => Some(Zone::Atomic),
        Word::LocalTime => Some(Zone::Local),
        Word::ZoneAbbreviation => Some(Zone::Abbreviation(String::new())),
        _ => None,
    });
    let Some((rest, z)) = found else {
        return no(input);
    };
    if rest.peek().is_some_and(|c| c.is_ascii_digit()) {
        return no(input);
    }
    let words = &input.as_str()[..rest.at() - input.at()];
    match z {
        // UTC+2, UT-05:00, GMT+1
        Zone::Universal => match offset(rest) {
            Ok((r, minutes)) => Ok((r, Zone::Offset(minutes))),
            Err(_) => match short_offset(rest) {
                Ok((r, minutes)) => Ok((r, Zone::Offset(minutes))),
                Err(_) => Ok((rest, Zone::Universal)),
            },
        },
        Zone::Abbreviation(_) => Ok((
            rest,
            Zone::Abbreviation(words.trim_end_matches('.').to_uppercase()),
        )),
        z => Ok((rest, z)),
    }
}

/// `+02:00`, `-0530`, `+05:45`: minutes east.
fn offset(input: Text<'_>) -> Parsed<'_, i32> {
    let rest = input.skip_blanks();
    let negative = match rest.peek() {
        Some('+') => false,
        Some(c) if is_dash(c) => true,
        _ => return no(input),
    };
    let rest = rest.skip(rest.peek().map_or(1, char::len_utf8));
    let (after, d) = digits(rest)?;
    let (after, h, m) = match d.as_str().len() {
        2 if after.peek() == Some(':') => {
            let (r, m) = digits(after.skip(1))?;
            if m.as_str().len() != 2 {
                return no(input);
            }
            (r, d.as_str(), m.as_str())
        }
        4 => (after, &d.as_str()[..2], &d.as_str()[2..]),
        _ => return no(input),
    };
    let (h, m): (i32, i32) = (h.parse().unwrap_or(99), m.parse().unwrap_or(99));
    if h > 14
        || m > 59
        || m % 15 != 0
        || after
            .peek()
            .is_some_and(|c| c.is_alphanumeric() || c == ':' || c == '.')
    {
        return no(input);
    }
    Ok((after, if negative { -(h * 60 + m) } else { h * 60 + m }))
}

/// After UTC: `+2`, `-5`.
fn short_offset(input: Text<'_>) -> Parsed<'_, i32> {
    let rest = input.skip_blanks();
    let negative = match rest.peek() {
        Some('+') => false,
        Some(c) if is_dash(c) => true,
        _ => return no(input),
    };
    let (after, h) = integer(rest.skip(rest.peek().map_or(1, char::len_utf8)))?;
    let after = if after.peek() == Some('h') {
        after.skip(1)
    } else {
        after
    };
    if h.mantissa > 14 || after.peek().is_some_and(|c| c.is_alphanumeric()) {
        return no(input);
    }
    let h = h.mantissa as i32 * 60;
    Ok((after, if negative { -h } else { h }))
}

/// An IANA name: `Europe/London`, `America/Argentina/Buenos_Aires`.
fn zone_name(input: Text<'_>) -> Parsed<'_, &str> {
    let s = input.as_str();
    let length = s
        .find(|c: char| !(c.is_ascii_alphanumeric() || matches!(c, '/' | '_' | '-' | '+')))
        .unwrap_or(s.len());
    let name = &s[..length];
    let area = name.split('/').next().unwrap_or("");
    let known = [
        "Africa",
        "America",
        "Antarctica",
        "Arctic",
        "Asia",
        "Atlantic",
        "Australia",
        "Europe",
        "Indian",
        "Pacific",
        "Etc",
    ];
    if known.contains(&area) && name.len() > area.len() + 2 {
        Ok((input.skip(length), name))
    } else {
        no(input)
    }
}
