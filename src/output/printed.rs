//! Coordinates and instants as people read them, to no more digits than were written.

use crate::report::Reduced;
use crate::sky::time;

/// The last unit a printed coordinate may have: which part, and how many decimals.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
struct LastUnit {
    /// 1 whole units, 60 minutes, 3600 seconds.
    per_whole: u64,
    decimals: u32,
}

/// Most decimals of a second ever printed: beyond a microsecond there is no position, only a number copied out of a program.
const MOST_DECIMALS: u32 = 6;
/// A step finer than this on the sky was not written: the right ascension of a place at the pole has none, arcsec.
const NO_STEP_ARCSEC: f64 = 1e-6;

/// All forms from fine to coarse: seconds, minutes, whole units, each with decimals or without.
fn forms() -> impl Iterator<Item = LastUnit> {
    let seconds = (0..=MOST_DECIMALS).rev().map(|decimals| (3600, decimals));
    let minutes = [(60, 1), (60, 0)];
    let wholes = [(1, 1), (1, 0)];
    seconds
        .chain(minutes)
        .chain(wholes)
        .map(|(per_whole, decimals)| LastUnit {
            per_whole,
            decimals,
        })
}

/// The finest form whose last unit, `whole_arcsec` (on the sky) to the whole unit, is no finer than a third of a step.
fn form_for(step_arcsec: f64, whole_arcsec: f64) -> LastUnit {
    let unit =
        |form: &LastUnit| whole_arcsec / form.per_whole as f64 / 10f64.powi(form.decimals as i32);
    let limit = step_arcsec / 3.0 * (1.0 - 1e-9);
    forms()
        .find(|form| unit(form) >= limit)
        .unwrap_or(LastUnit {
            per_whole: 1,
            decimals: 0,
        })
}

/// Whole units, minutes and seconds of a value in its last unit, with letters or marks after them.
fn sexagesimal(units: u64, form: LastUnit, marks: [&str; 3]) -> String {
    let scale = 10u64.pow(form.decimals);
    let decimals = form.decimals as usize;
    let last = |part: u64| {
        let (whole, rest) = (part / scale, part % scale);
        match decimals {
            0 => format!("{whole:02}"),
            _ => format!("{whole:02}.{rest:0decimals$}"),
        }
    };
    match form.per_whole {
        1 => format!("{}{}", last(units), marks[0]),
        60 => {
            let (whole, minutes) = (units / (60 * scale), units % (60 * scale));
            format!("{whole:02}{}{}{}", marks[0], last(minutes), marks[1])
        }
        _ => {
            let (whole, rest) = (units / (3600 * scale), units % (3600 * scale));
            let (minutes, seconds) = (rest / (60 * scale), rest % (60 * scale));
            format!(
                "{whole:02}{}{minutes:02}{}{}{}",
                marks[0],
                marks[1],
                last(seconds),
                marks[2]
            )
        }
    }
}

/// Right ascension for print: `05h34m30.9s`, `05h34m30s`, `05h34.5m`, `05h34m`, `05.6h`.
pub fn ra(reduced: &Reduced) -> String {
    // RA units shrink towards the poles; at the pole itself any form is fine enough
    let cos = reduced.dec_deg.to_radians().cos().abs().max(1e-6);
    let step = match reduced.ra_step_on_sky_arcsec {
        none if none < NO_STEP_ARCSEC => reduced.dec_step_arcsec,
        step => step,
    };
    let form = form_for(step, 54_000.0 * cos);
    let per_hour = form.per_whole * 10u64.pow(form.decimals);
    let hours = reduced.ra_deg.rem_euclid(360.0) / 15.0;
    let units = (hours * per_hour as f64).round() as u64 % (24 * per_hour);
    sexagesimal(units, form, ["h", "m", "s"])
}

/// Declination for print: `+22°01′02.1″`, `+22°01′02″`, `+22°01.4′`, `+22°01′`, `+22.0°`.
pub fn dec(reduced: &Reduced) -> String {
    let form = form_for(reduced.dec_step_arcsec, 3600.0);
    let per_degree = form.per_whole * 10u64.pow(form.decimals);
    let units = (reduced.dec_deg.abs() * per_degree as f64).round() as u64;
    let sign = if reduced.dec_deg < 0.0 && units > 0 {
        '-'
    } else {
        '+'
    };
    format!("{sign}{}", sexagesimal(units, form, ["°", "′", "″"]))
}

/// An instant for the record: `2024-07-05T22:31:00Z`, with thousandths or millionths only where there are any.
pub fn utc(utc: (f64, f64)) -> String {
    let civil = time::civil_from_utc(utc);
    let micros = (civil.second * 1e6).round() as u64;
    let (whole, rest) = (micros / 1_000_000, micros % 1_000_000);
    let fraction = match rest {
        0 => String::new(),
        _ if rest % 1000 == 0 => format!(".{:03}", rest / 1000),
        _ => format!(".{rest:06}"),
    };
    let sign = if civil.year < 0 { "-" } else { "" };
    format!(
        "{sign}{:04}-{:02}-{:02}T{:02}:{:02}:{whole:02}{fraction}Z",
        civil.year.unsigned_abs(),
        civil.month,
        civil.day,
        civil.hour,
        civil.minute,
    )
}

/// An instant for a table, to its step: `2024-07-05 22:31`, a date alone where no more is known.
pub fn ut(instant: (f64, f64), step_s: f64) -> String {
    let full = utc(instant);
    let date = full.find('T').unwrap_or(full.len());
    if step_s >= 86_400.0 {
        return full[..date].to_owned();
    }
    let clock = full[date + 1..].trim_end_matches('Z');
    let keep = if step_s >= 60.0 && clock[5..].starts_with(":00") {
        5
    } else {
        8
    };
    format!("{} {}", &full[..date], &clock[..keep.min(clock.len())])
}
