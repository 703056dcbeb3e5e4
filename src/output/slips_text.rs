//! What could have happened to a report, in words: each slip that would make everything agree, likeliest first.

use super::plain::{harmless, wrapped};
use crate::report::{Examined, Slip};
use std::io::{self, Write};

const MISKEYED: &str = "digit-miskeyed";

/// Writes the slips offered for a report; nothing where there are none.
pub fn write(examined: &Examined, width: usize, out: &mut impl Write) -> io::Result<()> {
    let offers = joined(&examined.slips);
    let head = match offers.as_slice() {
        [] => return Ok(()),
        [_] => {
            "What could have happened, the only slip tried that explains everything (nothing is changed unasked):"
        }
        _ => "What could have happened, likeliest first (nothing is changed unasked):",
    };
    writeln!(out, "{}", wrapped(head, "  ", "  ", width))?;
    for offer in &offers {
        let share = match offer.share {
            _ if offers.len() == 1 => "",
            s if s >= 0.5 => " (more likely than all others)",
            s if s < 0.1 => " (less likely)",
            _ => "",
        };
        let text = format!(
            "{}{share}: {}. {}",
            offer.kinds,
            harmless(&offer.reading),
            harmless(&offer.because)
        );
        writeln!(out, "{}", wrapped(&text, "  - ", "    ", width))?;
    }
    writeln!(out)
}

/// One line of the list.
#[derive(Debug, PartialEq)]
struct Offer {
    kinds: String,
    reading: String,
    because: String,
    share: f64,
}

/// The slips, those that are one digit in the same place of one number told together.
fn joined(slips: &[Slip]) -> Vec<Offer> {
    let mut offers: Vec<Offer> = Vec::new();
    // index of the offer, the number as written, the place of its digit, the other numbers it could have been
    let mut digits: Vec<(usize, &str, usize, Vec<&str>)> = Vec::new();
    for slip in slips {
        let one_digit = (slip.kinds == [MISKEYED])
            .then(|| slip.reading.split_once(" read as "))
            .flatten()
            .and_then(|(from, to)| Some((from, to, changed_digit(from, to)?)));
        if let Some((from, to, place)) = one_digit {
            let same = digits
                .iter_mut()
                .find(|(_, written, at, _)| *written == from && *at == place);
            if let Some((offer, _, _, others)) = same {
                others.push(to);
                let offer = &mut offers[*offer];
                offer.share += slip.weight;
                offer.reading = format!("{from} read as {}", or(others));
                offer.because =
                    "One digit is wrong, and everything in the report agrees with each of these."
                        .to_owned();
                continue;
            }
            digits.push((offers.len(), from, place, vec![to]));
        }
        offers.push(Offer {
            kinds: slip.kinds.join(" and "),
            reading: slip.reading.clone(),
            because: slip.because.clone(),
            share: slip.weight,
        });
    }
    // joined shares may have changed the order
    offers.sort_by(|a, b| b.share.total_cmp(&a.share));
    offers
}

/// Which character differs, where exactly one does.
fn changed_digit(from: &str, to: &str) -> Option<usize> {
    if from.chars().count() != to.chars().count() {
        return None;
    }
    let mut differ = from.chars().zip(to.chars()).enumerate();
    let (at, _) = differ.find(|(_, (a, b))| a != b)?;
    differ.all(|(_, (a, b))| a == b).then_some(at)
}

/// `a, b or c`.
fn or(words: &[&str]) -> String {
    match words {
        [all @ .., last] if !all.is_empty() => format!("{} or {last}", all.join(", ")),
        _ => words.concat(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn slip(kind: &'static str, reading: &str, weight: f64) -> Slip {
        Slip {
            kinds: vec![kind],
            reading: reading.to_owned(),
            because: "If one digit is wrong, it lies 3′ from Algol.".to_owned(),
            weight,
            becomes: Vec::new(),
        }
    }

    #[test]
    fn one_digit_in_one_place_is_one_line() {
        let slips = [
            slip("dec-sign", "+40 57 20 read as -40 57 20", 0.4),
            slip("digit-miskeyed", "+40 57 20 read as +40 37 20", 0.3),
            slip("digit-miskeyed", "+40 57 20 read as +40 27 20", 0.2),
            slip("digit-miskeyed", "+40 57 20 read as +41 57 20", 0.1),
        ];
        let offers = joined(&slips);
        let lines: Vec<&str> = offers.iter().map(|o| o.reading.as_str()).collect();
        assert_eq!(
            lines,
            [
                "+40 57 20 read as +40 37 20 or +40 27 20",
                "+40 57 20 read as -40 57 20",
                "+40 57 20 read as +41 57 20"
            ]
        );
        assert_eq!(offers[0].share, 0.5);
    }
}
