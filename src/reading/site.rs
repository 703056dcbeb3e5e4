//! Sites: latitude, longitude and elevation as written, with hemisphere letters, signs or labels.

use super::angle::{angle, angle_blanks};
use super::number::{Parsed, no, number};
use super::text::Text;
use super::words::{Word, says};
use crate::report::{Angle, Compass, SiteWritten};
use crate::span::Spanned;
use nom::Parser;
use nom::branch::alt;

/// `56.20°S, 106.61°W, 15 m`, `lat 15°02′N, long 103°22′E, elevation 2390 m`, `N 54°18.6′ W 3°01.2′`, `(34.912, -86.004)` not: that
/// needs a label of its own.
pub fn site_coordinates(input: Text<'_>) -> Parsed<'_, SiteWritten> {
    let (rest, (first, first_is)) = geographic(input)?;
    let (rest, (second, second_is)) = geographic(separator(rest)?)?;
    let (latitude, longitude) = match (first_is, second_is) {
        (Axis::Latitude, Axis::Longitude) => (first, second),
        (Axis::Longitude, Axis::Latitude) => (second, first),
        _ => return no(input),
    };
    let mut site = SiteWritten {
        latitude: Some(latitude),
        longitude: Some(longitude),
        span: input.span_to(rest),
        ..SiteWritten::default()
    };
    let mut end = rest;
    if let Ok(next) = separator(rest)
        && let Ok((r, metres)) = elevation(next)
    {
        site.elevation_m = Some(metres);
        end = r;
    }
    site.span = input.span_to(end);
    Ok((end, site))
}

/// `elevation 2390 m`, `alt: 1890m`, `h = 240 m`, `800 ft`, `15 m`: metres.
pub fn elevation(input: Text<'_>) -> Parsed<'_, Spanned<f64>> {
    let mut rest = input;
    if let Some(after) = [Word::Elevation, Word::Altitude]
        .iter()
        .filter_map(|w| says(rest, *w))
        .max_by_key(|r| r.at())
    {
        rest = after.skip_blanks();
        while rest
            .peek()
            .is_some_and(|c| matches!(c, ':' | '=' | '.' | '~'))
        {
            rest = rest.skip(1).skip_blanks();
        }
    }
    let at = rest;
    let minus = matches!(rest.peek(), Some('-' | '−')) && !rest.skip(1).is_empty();
    let rest = if minus {
        rest.skip(rest.peek().map_or(1, char::len_utf8))
    } else {
        rest
    };
    let (rest, value) = number(rest)?;
    let unit = rest.skip_blanks();
    let (rest, scale) = if let Some(r) = says(unit, Word::Metres) {
        (r, 1.0)
    } else if let Some(r) = says(unit, Word::Feet) {
        (r, 0.3048)
    } else {
        return no(input);
    };
    if rest.peek().is_some_and(|c| c.is_alphanumeric()) {
        return no(input);
    }
    // a thousands comma: 1,890 m
    let metres = if value.places == 3
        && at.as_str().as_bytes().get(usize::from(value.whole_digits)) == Some(&b',')
    {
        value.mantissa as f64
    } else {
        value.value()
    } * scale;
    Ok((
        rest,
        Spanned::new(if minus { -metres } else { metres }, at.span_to(rest)),
    ))
}

#[derive(Clone, Copy, PartialEq)]
enum Axis {
    Latitude,
    Longitude,
}

/// One coordinate, known by its label or its compass letter.
fn geographic(input: Text<'_>) -> Parsed<'_, (Angle, Axis)> {
    let label = if let Some(r) = says(input, Word::Latitude) {
        Some((r, Axis::Latitude))
    } else {
        says(input, Word::Longitude).map(|r| (r, Axis::Longitude))
    };
    let mut rest = input;
    if let Some((r, _)) = label {
        rest = r.skip_blanks();
        while rest.peek().is_some_and(|c| matches!(c, ':' | '=' | '.')) {
            rest = rest.skip(1).skip_blanks();
        }
    }
    let (rest, found) = alt((angle, angle_blanks)).parse(rest)?;
    let by_compass = match found.compass.map(|c| c.value) {
        Some(Compass::North | Compass::South) => Some(Axis::Latitude),
        Some(Compass::East | Compass::West) => Some(Axis::Longitude),
        None => None,
    };
    match (label.map(|(_, a)| a), by_compass) {
        (Some(a), None) => Ok((rest, (found, a))),
        (None, Some(b)) => Ok((rest, (found, b))),
        (Some(a), Some(b)) if a == b => Ok((rest, (found, a))),
        _ => no(input),
    }
}

/// Blanks, commas, semicolons, a slash between two coordinates.
fn separator(input: Text<'_>) -> Result<Text<'_>, nom::Err<nom::error::Error<Text<'_>>>> {
    let mut rest = input.skip_blanks();
    for _ in 0..2 {
        if rest
            .peek()
            .is_some_and(|c| matches!(c, ',' | ';' | '/' | '(' | '|'))
        {
            rest = rest.skip(1).skip_blanks();
        }
    }
    for word in ["and ", "und ", "et ", "y ", "e ", "en ", "i "] {
        if rest.as_str().starts_with(word) {
            rest = rest.skip(word.len()).skip_blanks();
            break;
        }
    }
    Ok(rest)
}
