//! Runs of bare numbers parted by single blanks: what they are is settled by what stands around them.

use super::angle::glued;
use super::marks::double_prime;
use super::number::{Parsed, is_dash, no, number, part_gap, sign};
use super::text::{Text, is_blank};
use super::words::{Word, word};
use crate::report::{Angle, Mark, Number, Part, Sign};
use crate::span::{Span, Spanned};

/// Bare numbers in a row, the first perhaps signed: `06 44 48.1`, `-08 24 02 11.3`, `230`.
#[derive(Clone, PartialEq, Debug)]
pub struct Run {
    /// The sign before the first.
    pub sign: Option<Spanned<Sign>>,
    /// The numbers, each with its place.
    pub numbers: Vec<(Number, Span)>,
    /// All of it.
    pub span: Span,
}

/// A run of one to nine numbers.
pub fn run(input: Text<'_>) -> Parsed<'_, Run> {
    let (rest, s) = match sign(input) {
        Ok((rest, s)) => {
            // a sign glued to the word before it is a hyphen, and one between digits a dash
            let glue = input
                .before()
                .is_some_and(|c| c.is_alphanumeric() || is_dash(c) || c == '+');
            if glue {
                return no(input);
            }
            (rest, Some(s))
        }
        Err(_) => (input, None),
    };
    if after_misread_digits(input.behind()) {
        return no(input);
    }
    let mut numbers = Vec::new();
    let mut rest = rest;
    while let Ok((after, value)) = number(rest) {
        if glued(after) {
            // "7 14 40S": a letter of the compass ends it
            let point = after.as_str().starts_with(['N', 'S', 'E', 'W'])
                && !after.as_str()[1..].starts_with(char::is_alphanumeric);
            if point && !numbers.is_empty() {
                numbers.push((value, rest.span_to(after)));
                break;
            }
            if numbers.is_empty() {
                return no(input);
            }
            break;
        }
        // "1 2013 Oct 13.3": the year belongs to the date after it
        if year_of_a_date(value, after) {
            if numbers.is_empty() && s.is_some() {
                return no(input);
            }
            if !numbers.is_empty() {
                break;
            }
        }
        numbers.push((value, rest.span_to(after)));
        let Ok((next, ())) = part_gap(after) else {
            break;
        };
        if numbers.len() == 9 {
            break;
        }
        rest = next;
    }
    let Some(&(_, last)) = numbers.last() else {
        return no(input);
    };
    let end = input.skip(last.end - input.at());
    // "05 l2 13": a field that was mistyped must not be skipped
    if end.peek().is_some_and(is_blank) && misread_digits(end.skip_blanks().as_str()) {
        return no(input);
    }
    // -89 02"00': marks exchanged; -89 02 would be a misreading
    if double_prime(end).is_ok_and(|(r, _)| r.peek().is_some_and(|c| c.is_ascii_digit())) {
        return no(input);
    }
    Ok((
        end,
        Run {
            sign: s,
            numbers,
            span: Span::new(s.map_or(last_start(input), |s| s.span.start), last.end),
        },
    ))
}

/// Two characters of a field, one a digit and the other a letter typed for one: `o5`, `l2`, `O4`, `1O`.
fn misread_digits(s: &str) -> bool {
    let mut c = s.chars();
    let (Some(a), Some(b), next) = (c.next(), c.next(), c.next()) else {
        return false;
    };
    let letter = |c: char| matches!(c, 'o' | 'O' | 'l' | 'I');
    (letter(a) && b.is_ascii_digit() || a.is_ascii_digit() && letter(b))
        && !next.is_some_and(char::is_alphanumeric)
}

/// The fields before, back to one that was mistyped: what is left of "o5 12 13" is no angle.
fn after_misread_digits(behind: &str) -> bool {
    let line = behind.rsplit('\n').next().unwrap_or("");
    if !line.ends_with(' ') {
        return false;
    }
    for field in line.trim_end().rsplit(' ').take(2) {
        if misread_digits(field.trim_start_matches(['+', '-'])) {
            return true;
        }
        if field.len() > 2 || !field.bytes().all(|b| b.is_ascii_digit()) {
            return false;
        }
    }
    false
}

/// Four digits that a month in words follows.
fn year_of_a_date(value: Number, after: Text<'_>) -> bool {
    value.whole_digits == 4
        && value.places == 0
        && (1500..=2400).contains(&value.mantissa)
        && after.peek().is_some_and(is_blank)
        && word(after.skip_blanks(), |w| {
            matches!(w, Word::Month(_)).then_some(())
        })
        .is_some_and(|(r, ())| r.skip_blanks().peek().is_some_and(|c| c.is_ascii_digit()))
}

fn last_start(input: Text<'_>) -> usize {
    input.at()
}

impl Run {
    /// The numbers `from..to` as one angle; the run's sign belongs to its first number only.
    pub fn angle(&self, from: usize, to: usize) -> Option<Angle> {
        let numbers = self.numbers.get(from..to)?;
        let mut parts: Vec<Part> = numbers
            .iter()
            .map(|&(number, span)| Part {
                number,
                mark: Mark::Blank,
                span,
            })
            .collect();
        parts.last_mut()?.mark = Mark::None;
        // only the last part may have decimals, and no part more than three digits
        if parts[..parts.len() - 1].iter().any(|p| p.number.places > 0)
            || parts.len() > 1 && parts[1..].iter().any(|p| p.number.whole_digits > 2)
        {
            return None;
        }
        if parts.len() > 1 && parts[0].number.whole_digits > 3 {
            return None;
        }
        let sign = if from == 0 { self.sign } else { None };
        let start = sign.map_or(parts[0].span.start, |s| s.span.start);
        let end = parts.last()?.span.end;
        Angle::new(sign, &parts, None, Span::new(start, end))
    }

    /// True where every number from `from` on has two digits before the point.
    pub fn padded(&self, from: usize, to: usize) -> bool {
        self.numbers
            .get(from..to)
            .is_some_and(|n| n.iter().all(|(n, _)| n.whole_digits == 2))
    }
}
