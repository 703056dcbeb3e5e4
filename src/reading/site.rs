//! Sites: latitude, longitude and elevation as written, with hemisphere letters, signs or labels.

use super::angle::{angle, angle_blanks, compass, compass_before};
use super::number::{Parsed, no, number};
use super::text::Text;
use super::words::{Word, says};
use crate::report::{Angle, Compass, Mark, Part, SiteWritten};
use crate::span::Spanned;
use nom::Parser;
use nom::branch::alt;

/// `56.20°S, 106.61°W, 15 m`, `lat 15°02′N, long 103°22′E, elevation 2390 m`, `N 54°18.6′ W 3°01.2′`, `(34.912, -86.004)` not: that
/// needs a label of its own.
pub fn site_coordinates(input: Text<'_>) -> Parsed<'_, SiteWritten> {
    let (rest, (latitude, longitude)) = match labelled_pair(input) {
        Ok(found) => found,
        Err(_) => {
            let (rest, (first, first_is)) = geographic(input)?;
            let (rest, (second, second_is)) = geographic(separator(rest)?)?;
            match (first_is, second_is) {
                (Axis::Latitude, Axis::Longitude) => (rest, (first, second)),
                (Axis::Longitude, Axis::Latitude) => (rest, (second, first)),
                _ => return no(input),
            }
        }
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

#[derive(Clone, Copy, PartialEq, Debug)]
enum Axis {
    Latitude,
    Longitude,
}

/// One coordinate, known by its label or its compass letter.
fn geographic(input: Text<'_>) -> Parsed<'_, (Angle, Axis)> {
    // "North latitude 54.3", "Long. W 3.02": the point of the compass beside the label
    let before = compass(input)
        .ok()
        .filter(|(r, _)| label(r.skip_blanks()).is_some());
    let label = label(before.map_or(input, |(r, _)| r.skip_blanks()));
    let mut point = before.map(|(r, c)| Spanned::new(c, input.span_to(r)));
    let mut rest = input;
    if let Some((r, _)) = label {
        rest = label_mark(r);
        if point.is_none()
            && let Ok((r, c)) = compass(rest)
            && compass_before(rest).is_err()
        {
            point = Some(Spanned::new(c, rest.span_to(r)));
            rest = label_mark(r);
        }
    }
    let (mut rest, mut found) = alt((hyphened, angle, angle_blanks)).parse(rest)?;
    // the full stop after a lone letter
    if found.compass.is_some_and(|c| c.span.start + 1 == rest.at()) && rest.peek() == Some('.') {
        rest = rest.skip(1);
    }
    if let Some(point) = point {
        if found.compass.is_some() {
            return no(input);
        }
        found.compass = Some(point);
    }
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

fn label(input: Text<'_>) -> Option<(Text<'_>, Axis)> {
    match says(input, Word::Latitude) {
        Some(r) => Some((r, Axis::Latitude)),
        None => says(input, Word::Longitude).map(|r| (r, Axis::Longitude)),
    }
}

fn label_mark(input: Text<'_>) -> Text<'_> {
    let mut rest = input.skip_blanks();
    while rest.peek().is_some_and(|c| matches!(c, ':' | '=' | '.')) {
        rest = rest.skip(1).skip_blanks();
    }
    rest
}

/// `54-18-36 N`, `3-01-12.5 W`: hyphens between the parts, and a point of the compass that shows what they are.
fn hyphened(input: Text<'_>) -> Parsed<'_, Angle> {
    let mut parts = Vec::new();
    let mut rest = input;
    loop {
        let (after, value) = number(rest)?;
        let more = parts.len() < 2 && value.places == 0 && after.peek() == Some('-');
        if value.whole_digits > if parts.is_empty() { 3 } else { 2 } {
            return no(input);
        }
        parts.push(Part {
            number: value,
            mark: if more { Mark::Dash } else { Mark::None },
            span: rest.span_to(after),
        });
        rest = after;
        if !more {
            break;
        }
        rest = rest.skip(1);
    }
    let at = rest.skip_blanks();
    let (after, point) = compass(at)?;
    if parts.len() < 2 || after.peek().is_some_and(char::is_alphanumeric) {
        return no(input);
    }
    let end = if after.at() - at.at() == 2 && at.as_str()[1..].starts_with('.') {
        at.skip(1)
    } else {
        after
    };
    let point = Some(Spanned::new(point, at.span_to(end)));
    match Angle::new(None, &parts, point, input.span_to(end)) {
        Some(angle) => Ok((end, angle)),
        None => no(input),
    }
}

/// `lat/lon +34.31, -3.02`, `Lat, Long: 54.31 -3.02`: one label for the two.
fn labelled_pair(input: Text<'_>) -> Parsed<'_, (Angle, Angle)> {
    let Some((r, first)) = label(input) else {
        return no(input);
    };
    let gap = r.skip_blanks();
    let gap = match gap.peek() {
        Some('/' | ',' | '&' | '-') => gap.skip(1).skip_blanks(),
        _ => gap,
    };
    let Some((r, second)) = label(gap) else {
        return no(input);
    };
    let (rest, a) = alt((angle, angle_blanks)).parse(label_mark(r))?;
    let (rest, b) = alt((angle, angle_blanks)).parse(separator(rest)?)?;
    match (first, second) {
        (Axis::Latitude, Axis::Longitude) => Ok((rest, (a, b))),
        (Axis::Longitude, Axis::Latitude) => Ok((rest, (b, a))),
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
