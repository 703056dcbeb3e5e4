//! Angles: hours or degrees with their minutes and seconds, in every notation, digit for digit.

use super::marks::{
    broken_mark, degree_mark, double_prime, hour_mark, minute_letter, prime, second_letter,
};
use super::number::{
    Parsed, decimals_after_mark, digits, integer, is_dash, no, number, part_gap, sign,
};
use super::text::Text;
use super::words::{Word, word};
use crate::report::{Angle, Compass, Mark, Number, Part, Sign};
use crate::span::{Span, Spanned};
use nom::Parser;
use nom::branch::alt;
use nom::combinator::opt;

/// Any angle: marked hours, marked degrees, a lost degree mark, colons, or one with a broken mark.
///
/// Bare numbers parted by blanks are not here: see [`angle_blanks`] and [`super::run`].
pub fn angle(input: Text<'_>) -> Parsed<'_, Angle> {
    alt((angle_hours, angle_degrees, angle_lost_degree, angle_colons)).parse(input)
}

/// `5h34m31.2s`, `05h 34m 31s.2`, `20h 11m.4`, `5h 34 31`, `8h`, `5.56h`, a sign before it or W, E after it (hour angles).
pub fn angle_hours(input: Text<'_>) -> Parsed<'_, Angle> {
    let (rest, s) = opt(sign).parse(input)?;
    let (mut rest, hours) = marked(rest, hour_mark)?;
    let mut parts = vec![hours];
    if hours.number.places == 0 {
        if let Ok((r, minutes)) = marked(next_part(rest), alt((minute_letter, prime, broken_mark)))
        {
            rest = r;
            parts.push(minutes);
            if minutes.number.places == 0
                && let Ok((r, seconds)) = marked(
                    next_part(rest),
                    alt((second_letter, double_prime, broken_mark)),
                )
                .or_else(|_| unmarked(rest))
            {
                rest = r;
                parts.push(seconds);
            }
        } else if let Ok((r, minutes)) = unmarked(rest) {
            rest = r;
            parts.push(minutes);
            if minutes.number.places == 0
                && let Ok((r, seconds)) =
                    marked(rest.skip_blanks(), alt((second_letter, double_prime)))
                        .or_else(|_| unmarked(rest))
            {
                rest = r;
                parts.push(seconds);
            }
        }
    }
    // a north or south after hours belongs to the declination that follows
    let toward = compass(rest.skip_blanks());
    if toward.is_ok_and(|(_, c)| matches!(c, Compass::North | Compass::South)) {
        return match Angle::new(s, &parts, None, input.span_to(rest)) {
            Some(a) => Ok((rest, a)),
            None => no(input),
        };
    }
    finish(input, rest, s, &parts)
}

/// `-41°07′26.5″`, `-26d 51m 03.8s`, `38°.5`, `-31 deg`, `45° 16′ N`, `S 12° 30′`.
pub fn angle_degrees(input: Text<'_>) -> Parsed<'_, Angle> {
    let (start, before) = opt(compass_before).parse(input)?;
    let (rest, s) = opt(sign).parse(start)?;
    let (mut rest, degrees) = marked(rest, alt((degree_mark, broken_mark)))?;
    // a broken mark alone proves nothing: it must be followed by minutes
    let mut parts = vec![degrees];
    if degrees.number.places == 0 {
        if let Ok((r, minutes)) = marked(next_part(rest), alt((prime, minute_letter, broken_mark)))
        {
            rest = r;
            parts.push(minutes);
            if minutes.number.places == 0
                && let Ok((r, seconds)) = marked(
                    next_part(rest),
                    alt((double_prime, second_letter, prime, broken_mark)),
                )
                .or_else(|_| unmarked(rest))
            {
                rest = r;
                parts.push(seconds);
            }
        } else if let Ok((r, minutes)) = unmarked(rest)
            && minutes.number.places == 0
            && minutes.number.whole_digits == 2
        {
            rest = r;
            parts.push(minutes);
            if let Ok((r, seconds)) = marked(rest.skip_blanks(), alt((double_prime, second_letter)))
                .or_else(|_| unmarked(rest))
                && seconds.number.whole_digits == 2
            {
                rest = r;
                parts.push(seconds);
            }
        } else if marked(rest.skip_blanks(), double_prime).is_ok() {
            // 67° 32″ 40′: the primes exchanged; 67° alone would be a misreading
            return no(input);
        }
    }
    if degrees.mark == Mark::Broken && parts.len() == 1 {
        return no(input);
    }
    finish_compass(input, rest, s, &parts, before)
}

/// A degree mark lost: `-41 07'26".5`, `41 07′`.
pub fn angle_lost_degree(input: Text<'_>) -> Parsed<'_, Angle> {
    let (start, before) = opt(compass_before).parse(input)?;
    let (rest, s) = opt(sign).parse(start)?;
    let at = rest;
    let (rest, degrees) = integer(rest)?;
    if degrees.whole_digits > 3 {
        return no(input);
    }
    let first = Part {
        number: degrees,
        mark: Mark::Blank,
        span: at.span_to(rest),
    };
    let (rest, ()) = part_gap(rest)?;
    let (mut rest, minutes) = marked(rest, prime)?;
    let mut parts = vec![first, minutes];
    if minutes.number.places == 0
        && let Ok((r, seconds)) =
            marked(rest.skip_blanks(), alt((double_prime, broken_mark))).or_else(|_| unmarked(rest))
    {
        rest = r;
        parts.push(seconds);
    }
    finish_compass(input, rest, s, &parts, before)
}

/// `7:58:26.77`, `-30:5:38`, `+14:02.5`; a blank may follow a colon.
pub fn angle_colons(input: Text<'_>) -> Parsed<'_, Angle> {
    let (start, before) = opt(compass_before).parse(input)?;
    let (rest, s) = opt(sign).parse(start)?;
    let at = rest;
    let (rest, first) = integer(rest)?;
    if first.whole_digits > 3 || rest.peek() != Some(':') {
        return no(input);
    }
    let mut parts = vec![Part {
        number: first,
        mark: Mark::Colon,
        span: at.span_to(rest),
    }];
    let mut rest = rest.skip(1);
    // "10: 08: 10.5": blanks after the colons, after both; "Suspect 143: 17 49" is a name and a number
    if rest.as_str().starts_with(' ') {
        let second = integer(rest.skip(1))
            .ok()
            .and_then(|(r, _)| r.as_str().strip_prefix(": "));
        if !second.is_some_and(|s| s.starts_with(|c: char| c.is_ascii_digit())) {
            return no(input);
        }
    }
    for field in 0..2 {
        let here = if rest.as_str().starts_with(' ') {
            rest.skip(1)
        } else {
            rest
        };
        let Ok((after, value)) = number(here) else {
            break;
        };
        if value.whole_digits > 2 {
            return no(input);
        }
        let more = field == 0
            && value.places == 0
            && after.peek() == Some(':')
            && after
                .skip(1)
                .as_str()
                .trim_start_matches(' ')
                .starts_with(|c: char| c.is_ascii_digit())
            && !after.as_str().starts_with(":  ");
        parts.push(Part {
            number: value,
            mark: if more { Mark::Colon } else { Mark::None },
            span: here.span_to(after),
        });
        rest = after;
        if !more {
            break;
        }
        rest = rest.skip(1);
    }
    // a fourth field, or a letter glued to it, makes it something else
    if parts.len() < 2
        || rest.peek() == Some(':')
            && rest
                .skip(1)
                .skip_blanks()
                .peek()
                .is_some_and(|c| c.is_ascii_digit())
    {
        return no(input);
    }
    // a mark after the seconds says nothing that the colons have not said
    let rest = match alt((second_letter, double_prime)).parse(rest) {
        Ok((r, _)) if parts.len() == 3 && !point_glued(rest) => r,
        _ => rest,
    };
    if rest.peek().is_some_and(|c| c.is_alphabetic()) && !point_glued(rest) {
        return no(input);
    }
    finish_compass(input, rest, s, &parts, before)
}

/// Two or three bare numbers parted by single blanks, or one alone: `-07 12 50`, `17 40.2`, `+9.0812`. For fields and labels.
pub fn angle_blanks(input: Text<'_>) -> Parsed<'_, Angle> {
    let (start, before) = opt(compass_before).parse(input)?;
    let (rest, s) = opt(sign).parse(start)?;
    let at = rest;
    let (mut rest, first) = number(rest)?;
    let mut parts = vec![Part {
        number: first,
        mark: Mark::None,
        span: at.span_to(rest),
    }];
    while parts.len() < 3
        && parts
            .last()
            .is_some_and(|p| p.number.places == 0 && p.number.whole_digits <= 3)
    {
        let Ok((here, ())) = part_gap(rest) else {
            break;
        };
        let Ok((after, value)) = number(here) else {
            break;
        };
        if value.whole_digits > 2 || !field_ends(after, parts.len() == 2) {
            break;
        }
        if let Some(p) = parts.last_mut() {
            p.mark = Mark::Blank;
        }
        parts.push(Part {
            number: value,
            mark: Mark::None,
            span: here.span_to(after),
        });
        rest = after;
    }
    let ends = match parts.len() {
        1 => point_glued(rest) || !glued(rest),
        n => field_ends(rest, n == 3),
    };
    if !ends {
        return no(input);
    }
    let last = if parts.len() == 3 {
        alt((second_letter, double_prime)).parse(rest)
    } else {
        alt((minute_letter, prime)).parse(rest)
    };
    if parts.len() > 1
        && !point_glued(rest)
        && let Ok((r, mark)) = last
    {
        let n = parts.len();
        let (r, value) = decimals_after_mark(parts[n - 1].number, r);
        parts[n - 1].mark = mark;
        parts[n - 1].number = value;
        rest = r;
    }
    finish_compass(input, rest, s, &parts, before)
}

/// A compass letter directly after the digits: `54 18 36S` is south, and no seconds' mark.
fn point_glued(rest: Text<'_>) -> bool {
    compass(rest).is_ok_and(|(r, _)| !r.peek().is_some_and(char::is_alphanumeric))
}

/// Nothing glued to the digits but a compass letter or the mark that belongs there.
fn field_ends(rest: Text<'_>, seconds: bool) -> bool {
    let mark = if seconds {
        alt((second_letter, double_prime)).parse(rest)
    } else {
        alt((minute_letter, prime)).parse(rest)
    };
    !glued(rest) || point_glued(rest) || mark.is_ok_and(|(r, _)| !glued(r))
}

/// No separators at all, under a label or in a compact pair: `053431.2`, `-2200.5`, `0534`.
pub fn angle_joined(input: Text<'_>) -> Parsed<'_, Angle> {
    let (rest, s) = opt(sign).parse(input)?;
    let at = rest;
    let (after, whole) = digits(rest)?;
    let count = whole.as_str().len();
    let lead = match count {
        4 | 6 => 2,
        5 | 7 => 3,
        _ => return no(input),
    };
    let (after, last_places) = match after.peek() {
        Some('.') => match digits(after.skip(1)) {
            Ok((r, p)) => (r, p.as_str()),
            Err(_) => (after, ""),
        },
        _ => (after, ""),
    };
    if glued(after) || last_places.len() > 9 {
        return no(input);
    }
    let base = at.at();
    let text = whole.as_str();
    let mut parts = Vec::new();
    let cuts: &[(usize, usize)] = if count - lead == 4 {
        &[(0, lead), (lead, lead + 2), (lead + 2, lead + 4)]
    } else {
        &[(0, lead), (lead, lead + 2)]
    };
    for (i, &(a, b)) in cuts.iter().enumerate() {
        let last = i + 1 == cuts.len();
        let places = if last { last_places } else { "" };
        let mantissa = format!("{}{}", &text[a..b], places).parse().unwrap_or(0);
        let number = Number {
            mantissa,
            places: places.len() as u8,
            whole_digits: (b - a) as u8,
        };
        let end = if last && !places.is_empty() {
            base + b + 1 + places.len()
        } else {
            base + b
        };
        parts.push(Part {
            number,
            mark: if last { Mark::None } else { Mark::Joined },
            span: Span::new(base + a, end),
        });
    }
    finish(input, after, s, &parts)
}

/// `N`, `S`, `E`, `W` or the word, before an angle.
pub fn compass_before(input: Text<'_>) -> Parsed<'_, Spanned<Compass>> {
    let (rest, point) = compass(input)?;
    let span = input.span_to(rest);
    let after = rest.skip_blanks();
    match after.peek() {
        Some(c)
            if c.is_ascii_digit()
                || (is_dash(c) || c == '+')
                    && after
                        .skip(c.len_utf8())
                        .peek()
                        .is_some_and(|d| d.is_ascii_digit()) =>
        {
            Ok((after, Spanned::new(point, span)))
        }
        _ => no(input),
    }
}

/// A compass letter (upper case) or word in any of the languages.
pub fn compass(input: Text<'_>) -> Parsed<'_, Compass> {
    let found = word(input, |w| match w {
        Word::Compass(c) => Some(c),
        _ => None,
    });
    match found {
        Some((rest, point)) => {
            let words = &input.as_str()[..rest.at() - input.at()];
            let single = words.chars().filter(|c| c.is_alphabetic()).count() == 1;
            if single && words.starts_with(char::is_lowercase) {
                no(input)
            } else {
                Ok((rest, point))
            }
        }
        None => no(input),
    }
}

/// A number and the mark after it (one blank may stand between), with decimals after the mark put in their place.
fn marked<'a>(
    input: Text<'a>,
    mut mark: impl Parser<Text<'a>, Output = Mark, Error = nom::error::Error<Text<'a>>>,
) -> Parsed<'a, Part> {
    let (rest, value) = number(input)?;
    let end = rest;
    let (rest, m) = mark
        .parse(rest)
        .or_else(|_| mark.parse(rest.skip_blanks()))?;
    let (after, with) = decimals_after_mark(value, rest);
    let end = if with == value { end } else { after };
    Ok((
        after,
        Part {
            number: with,
            mark: m,
            span: input.span_to(end),
        },
    ))
}

/// A number whose mark was left off: one blank before it, two digits at most, and nothing after it that gives it another meaning.
fn unmarked(input: Text<'_>) -> Parsed<'_, Part> {
    let rest = match input.peek() {
        Some(c) if c.is_ascii_digit() => input,
        _ => part_gap(input)?.0,
    };
    let (after, value) = number(rest)?;
    let next = after.skip_blanks();
    let other = hour_mark(next).is_ok()
        || degree_mark(next).is_ok()
        || prime(next).is_ok()
        || double_prime(next).is_ok()
        || minute_letter(next).is_ok()
        || after.peek() == Some(':')
        || after.peek() == Some('/')
        || after.peek().is_some_and(is_dash)
        || glued(after);
    if value.whole_digits > 2 || other {
        no(input)
    } else {
        Ok((
            after,
            Part {
                number: value,
                mark: Mark::None,
                span: rest.span_to(after),
            },
        ))
    }
}

/// From a mark to the next marked number: blanks, a comma, "and" (`10 hours, 5 minutes and 22 seconds`).
fn next_part(input: Text<'_>) -> Text<'_> {
    let mut rest = input.skip_blanks();
    if rest.as_str().starts_with(", ") {
        rest = rest.skip(1).skip_blanks();
    }
    let and = ["and ", "und ", "et ", "y ", "e ", "en ", "i "];
    if let Some(w) = and.iter().find(|w| rest.as_str().starts_with(**w)) {
        rest = rest.skip(w.len()).skip_blanks();
    }
    rest
}

/// A letter, digit or underscore directly after: the number is part of something else.
pub(super) fn glued(rest: Text<'_>) -> bool {
    match rest.peek() {
        Some(c) if c.is_alphanumeric() || c == '_' => true,
        // 22-00-52, 12.34.56, 24~18, 24*18: an unknown mark between digits
        Some(c) if is_dash(c) || ".:~*#^?!%=$@°º˚∘·\u{fffd}".contains(c) => rest
            .skip(c.len_utf8())
            .peek()
            .is_some_and(|d| d.is_ascii_digit()),
        _ => false,
    }
}

fn finish<'a>(
    input: Text<'a>,
    rest: Text<'a>,
    sign: Option<Spanned<Sign>>,
    parts: &[Part],
) -> Parsed<'a, Angle> {
    finish_compass(input, rest, sign, parts, None)
}

fn finish_compass<'a>(
    input: Text<'a>,
    rest: Text<'a>,
    sign: Option<Spanned<Sign>>,
    parts: &[Part],
    before: Option<Spanned<Compass>>,
) -> Parsed<'a, Angle> {
    let mut rest = rest;
    let mut point = before;
    if point.is_none() {
        let here = rest.skip_blanks();
        if let Ok((after, c)) = compass(here)
            && !after.peek().is_some_and(|c| c.is_alphanumeric())
        {
            // "12 30 S of the core": a direction of something, not of this angle
            point = Some(Spanned::new(c, here.span_to(after)));
            let letter_only = here.as_str()[..after.at() - here.at()]
                .trim_end_matches('.')
                .len();
            rest = if letter_only == 1 {
                here.skip(1)
            } else {
                after
            };
        }
    }
    match Angle::new(sign, parts, point, input.span_to(rest)) {
        Some(a) => Ok((rest, a)),
        None => no(input),
    }
}
