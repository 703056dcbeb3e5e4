//! Instants: a date, a clock time and a zone put together, in either order; Julian dates.

use super::clock::{Around, clock_after_date, clock_unread, loose_clock, until};
use super::date::{skip_comma, year4};
use super::number::{Parsed, digits, no, number};
use super::text::Text;
use super::words::{Word, says, word};
use super::zone::{hours_alone, universal};
use crate::report::{DateWritten, InstantWritten, JulianCount, Number, Zone};
use crate::span::Spanned;
use nom::Parser;
use nom::branch::alt;

pub use super::clock::clock;
pub use super::date::date;
pub use super::zone::zone;

/// A date, a clock time with its zone, or both, in either order; a Julian date.
pub fn instant(input: Text<'_>) -> Parsed<'_, InstantWritten> {
    alt((julian_instant, dated, clock_then_date)).parse(input)
}

const NOTHING: InstantWritten = InstantWritten {
    date: None,
    clock: None,
    clock_unread: None,
    zone: None,
    until: None,
    plus_s: None,
    weekday: None,
    span: crate::span::Span::new(0, 0),
};

/// `2012 Sep 25 09:13 UT`, `2010 Aug 27.2250 UT`, `Tue, 5 March 2024, 22:31 CET`, `2019-10-22T04:53:00Z`, `5.3.2024`.
fn dated(input: Text<'_>) -> Parsed<'_, InstantWritten> {
    // "Mar." is a Tuesday in four languages and March in three: a weekday has its date after it
    let (rest, weekday) = match weekday(input) {
        Some((rest, day)) if date_may_follow(skip_comma(rest)) => (skip_comma(rest), Some(day)),
        _ => (input, None),
    };
    // "UT 2012 Sep 25 09:13": the scale may stand first
    let (rest, first_zone) = match universal(rest) {
        Some((r, z)) if date(r.skip_blanks()).is_ok() => (r.skip_blanks(), Some(z)),
        _ => (rest, None),
    };
    let at = rest;
    let (rest, mut written) = date(rest)?;
    let mut end = rest;
    let mut found = InstantWritten {
        zone: first_zone,
        weekday,
        ..NOTHING
    };
    let decimals = matches!(written, DateWritten::Calendar { day, .. } if day.places > 0);
    let iso = rest.peek() == Some('T');
    if !decimals && let Some((r, c)) = clock_after_date(rest, found.zone.is_some()) {
        (end, found.clock) = (r, Some(c));
        (end, found.until, found.zone) = range_and_zone(end, found.zone.take(), iso);
    } else if decimals || found.zone.is_none() {
        if let Ok((r, z)) = zone(end).or_else(|e| scale_before_clock(end).ok_or(e))
            && (decimals || matches!(z.value, Zone::Universal))
            && found.zone.is_none()
        {
            (end, found.zone) = (r, Some(z));
        }
        // "2012 Sep 25 UT 09:13"
        if found.zone.is_some()
            && !decimals
            && let Some((r, c)) = clock_after_date(end, true)
        {
            (end, found.clock) = (r, Some(c));
            (end, found.until, found.zone) = range_and_zone(end, found.zone.take(), false);
        }
    }
    if !decimals
        && found.clock.is_none()
        && let Some((r, span)) = clock_unread(end)
    {
        (end, found.clock_unread) = (r, Some(span));
    }
    let date_end = rest;
    if let DateWritten::Calendar {
        year, year_digits, ..
    } = &mut written
        && *year_digits == 0
        && let Some((r, y)) = year_later(end)
    {
        (end, *year, *year_digits) = (r, y, 4);
    }
    found.date = Some(Spanned::new(written, at.span_to(date_end)));
    found.span = input.span_to(end);
    Ok((end, found))
}

type RangeAndZone<'a> = (
    Text<'a>,
    Option<crate::report::Clock>,
    Option<Spanned<Zone>>,
);

/// After a clock time: the end of a range and the zone, which may stand after each of the two.
fn range_and_zone(input: Text<'_>, known: Option<Spanned<Zone>>, iso: bool) -> RangeAndZone<'_> {
    let (mut end, mut known, mut last) = (input, known, None);
    if let Some((r, u)) = until(end) {
        (end, last) = (r, Some(u));
    }
    let here = if iso && last.is_none() {
        hours_alone(end)
    } else {
        None
    };
    if let Some((r, z)) = here.or_else(|| zone(end).ok()) {
        if known.is_none() {
            (end, known) = (r, Some(z));
        }
        if last.is_none()
            && let Some((r, u)) = until(r)
        {
            (end, last) = (r, Some(u));
            if let Ok((r, z)) = zone(r)
                && known.as_ref().is_some_and(|k| k.value == z.value)
            {
                end = r;
            }
        }
    }
    (end, last, known)
}

/// ", UT 22:31", ", UT = 22:31": the scale before its clock.
fn scale_before_clock(input: Text<'_>) -> Option<(Text<'_>, Spanned<Zone>)> {
    let (r, z) = universal(skip_comma(input))?;
    clock_after_date(r, true).map(|_| (r, z))
}

/// The year after the clock or the zone: `Dec. 24.938 UT, 2023`. Not the year of an equinox.
fn year_later(input: Text<'_>) -> Option<(Text<'_>, i32)> {
    let at = skip_comma(input);
    let (rest, year) = year4(at).ok()?;
    let goes_on = match rest.peek() {
        Some(c) if c.is_alphanumeric() => true,
        Some(c) if ".:/+-−–".contains(c) => rest
            .skip(c.len_utf8())
            .peek()
            .is_some_and(|d| d.is_ascii_digit()),
        _ => false,
    };
    let of_equinox = matches!(year, 1855 | 1875 | 1900 | 1950 | 2000);
    let other_date = date(at).is_ok();
    (at.at() > input.at() && !goes_on && !of_equinox && !other_date).then_some((rest, year))
}

/// A date, or a scale and a date.
fn date_may_follow(input: Text<'_>) -> bool {
    let after = universal(input).map_or(input, |(r, _)| r.skip_blanks());
    date(input).is_ok() || date(after).is_ok()
}

/// `22:31 UT on 2024 March 5`, `09:13 UT`, `10:40 pm EST, 8/14/27`.
fn clock_then_date(input: Text<'_>) -> Parsed<'_, InstantWritten> {
    let (rest, c) = match clock(input) {
        Ok(found) => found,
        Err(e) => loose_clock(input, Around::default()).ok_or(e)?,
    };
    let mut found = InstantWritten {
        clock: Some(c),
        ..NOTHING
    };
    let mut end;
    (end, found.until, found.zone) = range_and_zone(rest, None, false);
    if found.zone.is_none() && c.pm.is_none() {
        return no(input);
    }
    let mut next = skip_comma(end);
    if let Some(after) =
        says(next, Word::Date).or_else(|| next.as_str().starts_with("on ").then(|| next.skip(2)))
    {
        next = after.skip_blanks();
    }
    if let Some((r, day)) = weekday(next)
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

fn weekday(input: Text<'_>) -> Option<(Text<'_>, Spanned<u8>)> {
    let (rest, d) = word(input, |w| match w {
        Word::Weekday(d) => Some(d),
        _ => None,
    })?;
    Some((rest, Spanned::new(d, input.span_to(rest))))
}

// ---------------------------------------------------------------------------------------------- Julian dates

/// `JD 2453246.2569`, `MJD 61234.4417`, `HJD = 2455682.9139`, `JD(TT) 2460375.4382`, and a bare `2453246.2569`.
fn julian_instant(input: Text<'_>) -> Parsed<'_, InstantWritten> {
    let Some((rest, d, scale)) = julian_scaled(input) else {
        return no(input);
    };
    let mut end = rest;
    let mut found = InstantWritten {
        date: Some(Spanned::new(d, input.span_to(rest))),
        zone: scale,
        ..NOTHING
    };
    if found.zone.is_none()
        && let Ok((r, z)) = zone(rest)
    {
        (end, found.zone) = (r, Some(z));
    }
    found.span = input.span_to(end);
    Ok((end, found))
}

/// A Julian date by its label, or a bare number that can be nothing else.
pub fn julian(input: Text<'_>) -> Parsed<'_, DateWritten> {
    match julian_scaled(input) {
        Some((rest, d, _)) => Ok((rest, d)),
        None => no(input),
    }
}

type Julian<'a> = (Text<'a>, DateWritten, Option<Spanned<Zone>>);

fn julian_scaled(input: Text<'_>) -> Option<Julian<'_>> {
    let label = word(input, |w| match w {
        Word::Julian => Some(JulianCount::Jd),
        Word::ModifiedJulian => Some(JulianCount::Mjd),
        Word::HeliocentricJulian => Some(JulianCount::Hjd),
        Word::BarycentricJulian => Some(JulianCount::Bjd),
        _ => None,
    });
    let Some((after_label, count)) = label else {
        let (rest, value) = number(input).ok()?;
        let whole = value.mantissa / 10u64.pow(u32::from(value.places));
        let bare = value.whole_digits == 7
            && value.places > 0
            && (2_300_000..2_600_000).contains(&whole)
            && !rest.peek().is_some_and(char::is_alphanumeric);
        let date = DateWritten::Julian {
            number: value,
            count: JulianCount::Jd,
        };
        return bare.then_some((rest, date, None));
    };
    // JDE is reckoned in TT; JD(TT), JD (UT), JD TDB, JD_TT
    let label_span = input.span_to(after_label);
    let mut scale = input
        .as_str()
        .starts_with("JDE")
        .then(|| Spanned::new(Zone::Terrestrial, label_span));
    let mut rest = after_label.skip_blanks();
    if rest.peek() == Some('_') {
        rest = rest.skip(1);
    }
    if let Ok((r, z)) = zone(rest)
        && !matches!(
            z.value,
            Zone::Offset(_) | Zone::Abbreviation(_) | Zone::Local
        )
    {
        (rest, scale) = (r.skip_blanks(), Some(z));
    }
    while rest.peek().is_some_and(|c| matches!(c, '=' | ':' | '.')) {
        rest = rest.skip(1).skip_blanks();
    }
    let (after, value) = julian_number(rest)?;
    let whole = value.mantissa / 10u64.pow(u32::from(value.places));
    let count = match (count, whole) {
        (JulianCount::Mjd, 10_000..100_000) => JulianCount::Mjd,
        (JulianCount::Jd, 10_000..100_000) => JulianCount::Short,
        (c @ (JulianCount::Jd | JulianCount::Hjd | JulianCount::Bjd), 2_000_000..3_000_000) => c,
        _ => return None,
    };
    let date = DateWritten::Julian {
        number: value,
        count,
    };
    (!after.peek().is_some_and(char::is_alphanumeric)).then_some((after, date, scale))
}

/// `2460375.4382`, `2 460 375.4382`, `2460000+375.4382`.
fn julian_number(input: Text<'_>) -> Option<(Text<'_>, Number)> {
    let (rest, first) = number(input).ok()?;
    let joined = |whole: u64, tail: Number| {
        let scale = 10u64.checked_pow(u32::from(tail.places))?;
        Some(Number {
            mantissa: whole.checked_mul(scale)?.checked_add(tail.mantissa)?,
            places: tail.places,
            whole_digits: 7,
        })
    };
    if first.places == 0 && first.whole_digits == 1 && first.mantissa == 2 {
        // thousands
        let (r, second) = digits(thousands_gap(rest)?).ok()?;
        let (r, third) = number(thousands_gap(r)?).ok()?;
        if second.as_str().len() != 3 || third.whole_digits != 3 {
            return None;
        }
        let whole = 2_000_000 + second.as_str().parse::<u64>().ok()? * 1000;
        return Some((r, joined(whole, third)?));
    }
    if first.places == 0 && first.whole_digits == 7 && first.mantissa % 10 == 0 {
        let plus = rest.skip_blanks();
        if plus.peek() == Some('+')
            && let Ok((r, tail)) = number(plus.skip(1).skip_blanks())
            && tail.whole_digits <= 5
        {
            return Some((r, joined(first.mantissa, tail)?));
        }
    }
    Some((rest, first))
}

fn thousands_gap(input: Text<'_>) -> Option<Text<'_>> {
    let blank = input.peek().filter(|c| super::text::is_blank(*c))?;
    Some(input.skip(blank.len_utf8()))
}
