//! Unsigned decimal numbers and signs, digit for digit.

use super::text::{Text, is_blank};
use super::words::{Word, word};
use crate::report::{Number, Sign};
use crate::span::Spanned;
use nom::IResult;
use nom::bytes::complete::take_while1;
use nom::error::{Error, ErrorKind};

/// What every parser here returns.
pub type Parsed<'a, T> = IResult<Text<'a>, T>;

/// The parser does not apply.
pub fn no<T>(input: Text<'_>) -> Parsed<'_, T> {
    Err(nom::Err::Error(Error::new(input, ErrorKind::Verify)))
}

/// `digits = { ASCII_DIGIT+ }`, at most 15 of them.
pub fn digits(input: Text<'_>) -> Parsed<'_, Text<'_>> {
    let (rest, found) = take_while1(|c: char| c.is_ascii_digit())(input)?;
    if found.as_str().len() > 15 {
        no(input)
    } else {
        Ok((rest, found))
    }
}

/// A whole number.
pub fn integer(input: Text<'_>) -> Parsed<'_, Number> {
    let (rest, found) = digits(input)?;
    Ok((rest, of_digits(found.as_str(), "")))
}

/// A whole number, or one with a decimal point or a decimal comma between digits.
pub fn number(input: Text<'_>) -> Parsed<'_, Number> {
    let (rest, whole) = digits(input)?;
    let s = rest.as_str();
    let mark = s.chars().next();
    if matches!(mark, Some('.' | ','))
        && let Ok((after, places)) = digits(rest.skip(1))
        && whole.as_str().len() + places.as_str().len() <= 18
        // 1,2,3 is a list and 1.2.3 a version or a date
        && !(after.peek() == mark && after.as_str().chars().nth(1).is_some_and(|c| c.is_ascii_digit()))
    {
        return Ok((after, of_digits(whole.as_str(), places.as_str())));
    }
    Ok((rest, of_digits(whole.as_str(), "")))
}

/// Decimals written after a unit mark (`42s.17`): the number with them put in their place.
pub fn decimals_after_mark(number: Number, input: Text<'_>) -> (Text<'_>, Number) {
    if number.places == 0
        && matches!(input.peek(), Some('.' | ','))
        && let Ok((rest, places)) = digits(input.skip(1))
    {
        let k = places.as_str().len();
        if k + usize::from(number.whole_digits) <= 18 {
            let fraction: u64 = places.as_str().parse().unwrap_or(0);
            let mantissa = number.mantissa * 10u64.pow(k as u32) + fraction;
            return (
                rest,
                Number {
                    mantissa,
                    places: k as u8,
                    whole_digits: number.whole_digits,
                },
            );
        }
    }
    (input, number)
}

fn of_digits(whole: &str, places: &str) -> Number {
    let mut mantissa: u64 = 0;
    for c in whole.bytes().chain(places.bytes()) {
        mantissa = mantissa * 10 + u64::from(c - b'0');
    }
    Number {
        mantissa,
        places: places.len() as u8,
        whole_digits: whole.len() as u8,
    }
}

/// A sign: `+`, a hyphen or any dash that stands for it, `+/-`, `±`, "minus" and "plus" in words; blanks after it belong to it.
pub fn sign(input: Text<'_>) -> Parsed<'_, Spanned<Sign>> {
    let s = input.as_str();
    let (length, value) = if s.starts_with("+/-") || s.starts_with("+/−") {
        (if s.starts_with("+/-") { 3 } else { 5 }, Sign::Either)
    } else if s.starts_with("+-") {
        (2, Sign::Either)
    } else {
        match s.chars().next() {
            Some('+' | '＋') => (s.chars().next().map_or(1, char::len_utf8), Sign::Plus),
            Some(c) if is_dash(c) => (c.len_utf8(), Sign::Minus),
            Some('±') => ('±'.len_utf8(), Sign::Either),
            // a long dash is a minus only directly before a digit
            Some('—') if digit_at(&s['—'.len_utf8()..]) => ('—'.len_utf8(), Sign::Minus),
            _ => match written_sign(input) {
                Some(found) => found,
                None => return no(input),
            },
        }
    };
    let rest = input.skip(length);
    let span = input.span_to(rest);
    Ok((rest.skip_blanks(), Spanned::new(value, span)))
}

fn digit_at(s: &str) -> bool {
    s.starts_with(|c: char| c.is_ascii_digit())
}

/// `minus 22`, `plus 22` in any of the languages, and the minus of HTML.
fn written_sign(input: Text<'_>) -> Option<(usize, Sign)> {
    let s = input.as_str();
    if let Some(entity) = ["&minus;", "&#8722;", "&#x2212;"]
        .iter()
        .find(|e| s.starts_with(**e))
    {
        return Some((entity.len(), Sign::Minus));
    }
    if !input.peek()?.is_alphabetic() || input.before().is_some_and(char::is_alphanumeric) {
        return None;
    }
    let (rest, sign) = word(input, |w| match w {
        Word::Minus => Some(Sign::Minus),
        Word::Plus => Some(Sign::Plus),
        _ => None,
    })?;
    let after = rest.skip_blanks();
    (after.at() > rest.at() && digit_at(after.as_str())).then(|| (rest.at() - input.at(), sign))
}

/// A dash that can stand for a minus: hyphen, minus, en dash, figure dash, hyphens of other codes.
pub fn is_dash(c: char) -> bool {
    matches!(
        c,
        '-' | '\u{2212}'
            | '\u{2013}'
            | '\u{2012}'
            | '\u{2010}'
            | '\u{2011}'
            | '\u{ff0d}'
            | '\u{fe63}'
    )
}

/// One blank between the parts of a number, or two before a single digit (a right-aligned column).
pub fn part_gap(input: Text<'_>) -> Parsed<'_, ()> {
    let s = input.as_str();
    let blanks = s.chars().take_while(|&c| is_blank(c)).count();
    let rest = input.skip_blanks();
    let one_digit = || {
        let mut c = rest.as_str().chars();
        c.next().is_some_and(|c| c.is_ascii_digit())
            && !c.next().is_some_and(|c| c.is_ascii_digit())
    };
    // a line end in wrapped prose is one blank, whatever is indented after it
    if s[..s.len() - rest.as_str().len()].contains('\n') {
        return Ok((rest, ()));
    }
    if s.starts_with('\t') || blanks == 0 || blanks > 2 || (blanks == 2 && !one_digit()) {
        no(input)
    } else {
        Ok((rest, ()))
    }
}
