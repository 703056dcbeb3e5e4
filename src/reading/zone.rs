//! Zones and time scales, as they are written beside a clock time.

use super::number::{Parsed, digits, integer, is_dash, no};
use super::text::Text;
use super::words::{Word, says, word};
use crate::report::Zone;
use crate::span::Spanned;

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

pub(super) fn universal(input: Text<'_>) -> Option<(Text<'_>, Spanned<Zone>)> {
    let rest = says(input, Word::Universal)?;
    Some((rest, Spanned::new(Zone::Universal, input.span_to(rest))))
}

fn zone_word(input: Text<'_>) -> Parsed<'_, Zone> {
    if let Some((rest, minutes)) = offset(input) {
        return Ok((rest, Zone::Offset(minutes)));
    }
    if let Some((rest, name)) = zone_name(input) {
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
        // UTC+2, UT-05:00, GMT+1, UTC+5:30
        Zone::Universal => match offset(rest).or_else(|| short_offset(rest)) {
            Some((r, minutes)) => Ok((r, Zone::Offset(minutes))),
            None => Ok((rest, Zone::Universal)),
        },
        Zone::Abbreviation(_) => Ok((
            rest,
            Zone::Abbreviation(words.trim_end_matches('.').to_uppercase()),
        )),
        z => Ok((rest, z)),
    }
}

/// The sign of an offset from UTC: true for minus.
fn offset_sign(input: Text<'_>) -> Option<(Text<'_>, bool)> {
    match input.peek()? {
        '+' => Some((input.skip(1), false)),
        c if is_dash(c) => Some((input.skip(c.len_utf8()), true)),
        _ => None,
    }
}

/// `+02:00`, `-0530`, `+05:45`: minutes east.
pub(super) fn offset(input: Text<'_>) -> Option<(Text<'_>, i32)> {
    let (rest, negative) = offset_sign(input.skip_blanks())?;
    let (after, d) = digits(rest).ok()?;
    let (after, h, m) = match d.as_str().len() {
        2 if after.peek() == Some(':') => {
            let (r, m) = digits(after.skip(1)).ok()?;
            if m.as_str().len() != 2 {
                return None;
            }
            (r, d.as_str(), m.as_str())
        }
        4 => (after, &d.as_str()[..2], &d.as_str()[2..]),
        _ => return None,
    };
    let (h, m): (i32, i32) = (h.parse().ok()?, m.parse().ok()?);
    let goes_on = match after.peek() {
        Some(c) if c.is_alphanumeric() => true,
        Some(':' | '.') => after.skip(1).peek().is_some_and(|c| c.is_ascii_digit()),
        _ => false,
    };
    if h > 14 || m > 59 || m % 15 != 0 || goes_on {
        return None;
    }
    Some((after, if negative { -(h * 60 + m) } else { h * 60 + m }))
}

/// After UTC: `+2`, `-5h`, `+5:30`.
fn short_offset(input: Text<'_>) -> Option<(Text<'_>, i32)> {
    let (rest, negative) = offset_sign(input.skip_blanks())?;
    let (after, h) = integer(rest).ok()?;
    let (after, m) = match after.peek() {
        Some('h') => (after.skip(1), 0),
        Some(':') => match integer(after.skip(1)) {
            Ok((r, m)) if m.whole_digits == 2 && m.mantissa < 60 && m.mantissa % 15 == 0 => {
                (r, m.mantissa as i32)
            }
            _ => (after, 0),
        },
        _ => (after, 0),
    };
    if h.mantissa > 14 || after.peek().is_some_and(|c| c.is_alphanumeric()) {
        return None;
    }
    let east = h.mantissa as i32 * 60 + m;
    Some((after, if negative { -east } else { east }))
}

/// Hours alone, glued to a clock of the ISO form: `T22:31:05-03`.
pub(super) fn hours_alone(input: Text<'_>) -> Option<(Text<'_>, Spanned<Zone>)> {
    let (rest, negative) = offset_sign(input)?;
    let (after, h) = integer(rest).ok()?;
    if h.whole_digits != 2 || h.mantissa > 14 || super::angle::glued(after) {
        return None;
    }
    let east = h.mantissa as i32 * 60;
    let z = Zone::Offset(if negative { -east } else { east });
    Some((after, Spanned::new(z, input.span_to(after))))
}

/// An IANA name: `Europe/London`, `America/Argentina/Buenos_Aires`.
fn zone_name(input: Text<'_>) -> Option<(Text<'_>, &str)> {
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
    (known.contains(&area) && name.len() > area.len() + 2).then(|| (input.skip(length), name))
}
