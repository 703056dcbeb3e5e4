//! Uncertainties written after a number: `+/- 0.03`, `± 0.4″`, `(+1.1, -0.7)`, `[0.03]`, `(error 2 arcsec)`. Read so that they are not taken for a coordinate.

use super::marks::{degree_mark, double_prime, minute_letter, prime, second_letter};
use super::number::{Parsed, decimals_after_mark, is_dash, no, number};
use super::text::Text;
use super::words::{Word, says};
use crate::report::Mark;
use nom::Parser;
use nom::branch::alt;

/// What an uncertainty says: its size and the mark after it.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Uncertainty {
    /// Size as written (the larger of an asymmetric pair).
    pub value: f64,
    /// The mark after it.
    pub mark: Mark,
}

/// An uncertainty.
pub fn uncertainty(input: Text<'_>) -> Parsed<'_, Uncertainty> {
    alt((plus_minus, asymmetric, bracketed)).parse(input)
}

fn plus_minus(input: Text<'_>) -> Parsed<'_, Uncertainty> {
    let s = input.as_str();
    let length = ["+/-", "+/−", "+-", "±", "&plusmn;", "+ / -"]
        .iter()
        .find(|p| s.starts_with(**p))
        .map(|p| p.len());
    let Some(length) = length else {
        return no(input);
    };
    let (rest, value) = number(input.skip(length).skip_blanks())?;
    // "+/-41 07 26": a sign that says nothing, not an uncertainty
    let next = rest.skip_blanks();
    let goes_on = rest.peek() == Some(':')
        || (rest.at() < next.at()
            && value.places == 0
            && next.peek().is_some_and(|c| c.is_ascii_digit())
            && next.at() - rest.at() == 1
            && value.whole_digits == 2)
        || degree_mark(rest)
            .is_ok_and(|(r, _)| r.skip_blanks().peek().is_some_and(|c| c.is_ascii_digit()));
    if goes_on {
        return no(input);
    }
    let (rest, mark) = unit(rest);
    Ok((
        rest,
        Uncertainty {
            value: value.value(),
            mark,
        },
    ))
}

fn asymmetric(input: Text<'_>) -> Parsed<'_, Uncertainty> {
    if input.peek() != Some('(') {
        return no(input);
    }
    let rest = input.skip(1).skip_blanks();
    if rest.peek() != Some('+') && !rest.peek().is_some_and(is_dash) {
        return no(input);
    }
    let (rest, first) = number(
        rest.skip(rest.peek().map_or(1, char::len_utf8))
            .skip_blanks(),
    )?;
    let (rest, _) = unit(rest);
    let mut rest = rest.skip_blanks();
    if rest.peek().is_some_and(|c| c == ',' || c == '/') {
        rest = rest.skip(1).skip_blanks();
    }
    if rest.peek() != Some('+') && !rest.peek().is_some_and(is_dash) {
        return no(input);
    }
    let (rest, second) = number(
        rest.skip(rest.peek().map_or(1, char::len_utf8))
            .skip_blanks(),
    )?;
    let (rest, mark) = unit(rest);
    // whatever else the bracket says (90% confidence) goes with it
    let tail = rest.as_str();
    match tail.find([')', '\n']) {
        Some(i) if tail[i..].starts_with(')') && i < 40 => {
            let value = first.value().max(second.value());
            Ok((rest.skip(i + 1), Uncertainty { value, mark }))
        }
        _ => no(input),
    }
}

/// `[0.03]`, `(+/- 3")`, `(error 2 arcsec)`, `(m.e. 0s.02)`, and the last digits' own `(2)` glued to them.
fn bracketed(input: Text<'_>) -> Parsed<'_, Uncertainty> {
    let close = match input.peek() {
        Some('(') => ')',
        Some('[') => ']',
        _ => return no(input),
    };
    let inside = input.skip(1).skip_blanks();
    let end = |r: Text<'_>| r.skip_blanks().peek() == Some(close);
    if let Ok((rest, found)) = plus_minus(inside) {
        return if end(rest) {
            Ok((rest.skip_blanks().skip(1), found))
        } else {
            no(input)
        };
    }
    let glued = input.before().is_some_and(|c| c.is_ascii_digit());
    let named = says(inside, Word::Uncertainty);
    let mut rest = named.map_or(inside, |r| r.skip_blanks());
    while named.is_some() && rest.peek().is_some_and(|c| "=:±~".contains(c)) {
        rest = rest
            .skip(rest.peek().map_or(1, char::len_utf8))
            .skip_blanks();
    }
    let (after, value) = number(rest)?;
    let plain = glued && value.places == 0 && value.whole_digits <= 2
        || close == ']' && value.places > 0 && value.value() < 10.0;
    if named.is_none() && !plain {
        return no(input);
    }
    let (after, mark) = unit(after);
    let (after, value) = if mark == Mark::None {
        (after, value)
    } else {
        decimals_after_mark(value, after)
    };
    if end(after) {
        let value = value.value();
        Ok((after.skip_blanks().skip(1), Uncertainty { value, mark }))
    } else {
        no(input)
    }
}

fn unit(input: Text<'_>) -> (Text<'_>, Mark) {
    match alt((
        degree_mark,
        double_prime,
        prime,
        minute_letter,
        second_letter,
    ))
    .parse(input.skip_blanks())
    {
        Ok((rest, mark)) => (rest, mark),
        Err(_) => (input, Mark::None),
    }
}
