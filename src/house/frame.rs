//! An equinox as a person names it for `--to` or in a house file: `J2000.0`, `B1950.0`, `FK5`, `of date`.

use crate::report::{Equinox, Frame, System};

/// What may be written, for messages.
pub const EXPECTED: &str =
    "an equinox such as J2000.0, B1950.0, J2015.5, ICRS, FK5, FK4, “of date” or “apparent”";

/// Reads the name of a frame; the year rule is that of the sheets (Besselian below 1984 unless a letter is written).
pub fn frame_named(word: &str) -> Result<Frame, String> {
    let plain = word.trim().trim_matches(['(', ')']).to_lowercase();
    let plain = plain.replace(['-', '_'], " ").replace(',', ".");
    let plain = plain.strip_prefix("equinox ").unwrap_or(&plain).trim();
    let (system, rest) = match plain.split_at_checked(4) {
        Some(("icrs", rest)) => (Some(System::Icrs), rest),
        _ => match plain.split_at_checked(3) {
            Some(("fk5", rest)) => (Some(System::Fk5), rest),
            Some(("fk4", rest)) => (Some(System::Fk4), rest),
            _ => (None, plain),
        },
    };
    let rest = rest.trim_matches([' ', '.', '/']);
    let of_date = |system| {
        Ok(Frame {
            system,
            equinox: Equinox::OfDate,
        })
    };
    match (system, rest) {
        // the short names that telescope controls use for it: common practice, no source
        (None, "of date" | "date" | "mean" | "mean of date" | "eod" | "jnow" | "j now") => {
            return of_date(System::Mean);
        }
        (None, "apparent" | "true of date" | "apparent of date") => {
            return of_date(System::Apparent);
        }
        (Some(System::Fk4), "") => return Ok(standard(System::Fk4)),
        (Some(system), "") => return Ok(standard(system)),
        _ => {}
    }
    let (letter, number) = match rest.chars().next() {
        Some(c @ ('j' | 'b')) => (Some(c), rest[1..].trim_start()),
        _ => (None, rest),
    };
    let well_formed = number.starts_with(|c: char| c.is_ascii_digit())
        && number.len() <= 12
        && number.chars().all(|c| c.is_ascii_digit() || c == '.');
    let year: f64 = match number.parse() {
        Ok(year) if well_formed => year,
        _ => {
            return Err(format!(
                "“{}” names no equinox; expected {EXPECTED}",
                word.trim()
            ));
        }
    };
    if !(1600.0..=2100.0).contains(&year) {
        return Err(format!(
            "the equinox {year} lies outside the years 1600 to 2100"
        ));
    }
    let besselian = letter == Some('b') || letter.is_none() && year < 1984.0;
    let frame = if besselian {
        Frame {
            system: System::Fk4,
            equinox: Equinox::Besselian(year),
        }
    } else if year == 2000.0 && system != Some(System::Fk5) {
        standard(System::Icrs)
    } else if year == 2000.0 {
        standard(System::Fk5)
    } else {
        Frame {
            system: System::Mean,
            equinox: Equinox::Julian(year),
        }
    };
    let contradicts = match system {
        Some(System::Fk4) => !besselian,
        Some(System::Icrs) => frame.system != System::Icrs,
        Some(_) => besselian,
        None => false,
    };
    if contradicts {
        return Err(format!(
            "“{}” contradicts itself: FK4 goes with Besselian years, FK5 with Julian ones, ICRS with J2000.0 only",
            word.trim()
        ));
    }
    Ok(frame)
}

fn standard(system: System) -> Frame {
    let equinox = match system {
        System::Fk4 => Equinox::Besselian(1950.0),
        _ => Equinox::Julian(2000.0),
    };
    Frame { system, equinox }
}
