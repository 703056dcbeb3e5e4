//! Runs of bare numbers parted by single blanks: what they are is settled by what stands around them.

use super::angle::glued;
use super::marks::double_prime;
use super::number::{Parsed, is_dash, no, number, part_gap, sign};
use super::text::Text;
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
    let mut numbers = Vec::new();
    let mut rest = rest;
    loop {
        let Ok((after, value)) = number(rest) else {
            break;
        };
        if glued(after) {
            if numbers.is_empty() {
                return no(input);
            }
            break;
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
