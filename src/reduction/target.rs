//! The frame that `--to` and the house rules ask for, from its written form.

use super::frame::of_year;
use super::to::EQUINOX_YEARS;
use crate::report::{Equinox, Frame, System, SystemWord, YearLetter};

const FORMS: &str = "J2000.0, ICRS, B1950.0, FK4 B1900, FK5 J1975.0, of-date, apparent";

/// The frame of `J2000.0`, `ICRS`, `B1950.0`, `FK4 B1900`, `FK5 J1975.0`, `mean J2030`, `of-date`, `apparent` and the
/// like, in any case. The error says what was expected.
pub fn parse_target(written: &str) -> Result<Frame, String> {
    let expected = || {
        format!(
            "`{}` is no equinox: expected one like {FORMS}",
            written.trim().escape_debug()
        )
    };
    let text = written
        .trim()
        .to_ascii_lowercase()
        .replace(['-', '_', ',', '(', ')'], " ");
    let words: Vec<&str> = text.split_ascii_whitespace().collect();
    let frame = |system, equinox| Ok(Frame { system, equinox });
    let standard = |system: SystemWord| match system {
        SystemWord::Icrs => frame(System::Icrs, Equinox::Julian(2000.0)),
        SystemWord::Fk5 => frame(System::Fk5, Equinox::Julian(2000.0)),
        SystemWord::Fk4 => frame(System::Fk4, Equinox::Besselian(1950.0)),
    };
    match words.as_slice() {
        ["apparent"] | ["apparent", "of", "date"] | ["true", "of", "date"] => {
            frame(System::Apparent, Equinox::OfDate)
        }
        ["of", "date"] | ["ofdate"] | ["mean", "of", "date"] => {
            frame(System::Mean, Equinox::OfDate)
        }
        ["fk4", "of", "date"] => frame(System::Fk4, Equinox::OfDate),
        ["mean", year] => {
            let (letter, year) = letter_and_year(year).ok_or_else(expected)?;
            let besselian = letter.map_or(year < 1984.0, |l| l == YearLetter::Besselian);
            let equinox = if besselian {
                Equinox::Besselian(year)
            } else {
                Equinox::Julian(year)
            };
            within(frame(System::Mean, equinox)?)
        }
        [word] => match system(word) {
            Some(word) => standard(word),
            None => {
                let (letter, year) = letter_and_year(word).ok_or_else(expected)?;
                within(of_year(None, letter, year).ok_or_else(expected)?)
            }
        },
        [word, year] => {
            let word = system(word).ok_or_else(expected)?;
            let (letter, year) = letter_and_year(year).ok_or_else(expected)?;
            let asked = of_year(Some(word), letter, year)
                .ok_or_else(|| "the ICRS has one equinox, J2000.0".to_string())?;
            let agrees = matches!(
                (word, asked.system),
                (SystemWord::Icrs, System::Icrs)
                    | (SystemWord::Fk5, System::Fk5)
                    | (SystemWord::Fk4, System::Fk4)
            );
            if !agrees {
                return Err(format!(
                    "`{}`: FK4 goes with Besselian equinoxes (B1950.0), FK5 with Julian ones (J2000.0)",
                    written.trim().escape_debug()
                ));
            }
            within(asked)
        }
        _ => Err(expected()),
    }
}

fn system(word: &str) -> Option<SystemWord> {
    match word {
        "icrs" => Some(SystemWord::Icrs),
        "fk5" => Some(SystemWord::Fk5),
        "fk4" => Some(SystemWord::Fk4),
        _ => None,
    }
}

fn letter_and_year(word: &str) -> Option<(Option<YearLetter>, f64)> {
    let (letter, digits) = match word.strip_prefix('j') {
        Some(rest) => (Some(YearLetter::Julian), rest),
        None => match word.strip_prefix('b') {
            Some(rest) => (Some(YearLetter::Besselian), rest),
            None => (None, word),
        },
    };
    // std would take "inf", "1e3" and "+2000" too
    let plain = digits.len() <= 12 && digits.starts_with(|c: char| c.is_ascii_digit());
    let plain = plain && digits.bytes().all(|b| b.is_ascii_digit() || b == b'.');
    let year = plain.then(|| digits.parse::<f64>().ok()).flatten()?;
    Some((letter, year))
}

fn within(frame: Frame) -> Result<Frame, String> {
    match frame.equinox {
        Equinox::Julian(year) | Equinox::Besselian(year) if !EQUINOX_YEARS.contains(&year) => {
            Err(format!(
                "equinox {} is out of reach: 1600 to 2100 can be had",
                frame.equinox
            ))
        }
        _ => Ok(frame),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The forms of issue 4 and DESIGN section 4.
    #[test]
    fn every_form_of_a_target() {
        for (written, expected) in [
            ("J2000.0", "ICRS J2000.0"),
            ("2000", "ICRS J2000.0"),
            ("icrs", "ICRS J2000.0"),
            ("B1950.0", "FK4 B1950.0"),
            ("1950", "FK4 B1950.0"),
            ("FK4 B1900", "FK4 B1900.0"),
            ("FK5 J1975.0", "FK5 J1975.0"),
            ("FK5", "FK5 J2000.0"),
            ("of-date", "mean of date"),
            ("apparent", "apparent of date"),
            ("J2034.5", "mean J2034.5"),
            ("mean B1900", "mean B1900.0"),
        ] {
            let frame = parse_target(written).unwrap();
            assert_eq!(
                format!("{} {}", frame.system.name(), frame.equinox),
                expected
            );
        }
        for wrong in [
            "",
            "J",
            "Jinf",
            "J1e3",
            "B195O",
            "FK4 J2000",
            "ICRS J1950",
            "J1500",
            "J9999",
            "FK6",
            "\u{1b}[2J",
        ] {
            let error = parse_target(wrong).unwrap_err();
            assert!(!error.contains('\u{1b}'));
        }
    }
}
