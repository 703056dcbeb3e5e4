//! The user's own objects: CSV with the columns name, ra, dec and, where wanted, equinox and radius.

use super::KnownObject;
use super::mistake::nearest;
use crate::report::{Equinox, Frame, System};
use std::path::Path;

/// What is wrong with an object list, and what was expected.
#[derive(Clone, PartialEq, Debug)]
pub struct ListProblem {
    /// What is wrong, with line and word.
    pub what: String,
    /// What was expected.
    pub expected: String,
}

fn problem<T>(what: impl Into<String>, expected: impl Into<String>) -> Result<T, ListProblem> {
    Err(ListProblem {
        what: what.into(),
        expected: expected.into(),
    })
}

/// The columns a list may have.
const COLUMNS: &[&str] = &["name", "ra", "dec", "equinox", "radius"];

/// Reads an object list.
pub fn load(path: &Path) -> Result<Vec<KnownObject>, ListProblem> {
    let mut reader = match csv::ReaderBuilder::new()
        .trim(csv::Trim::All)
        .flexible(true)
        .comment(Some(b'#'))
        .from_path(path)
    {
        Ok(reader) => reader,
        Err(e) => {
            return problem(
                format!("cannot be read: {e}"),
                "the path counts from the folder of the house file",
            );
        }
    };
    let head = match reader.headers() {
        Ok(head) => head.clone(),
        Err(e) => {
            return problem(
                format!("is no CSV text: {e}"),
                "UTF-8 text with a header row",
            );
        }
    };
    let mut at = [None; 5];
    for (i, name) in head.iter().enumerate() {
        let lower = name.trim_start_matches('\u{feff}').trim().to_lowercase();
        let known = match lower.as_str() {
            "r.a." | "ra_deg" => "ra",
            "decl" | "decl." | "dec." | "dec_deg" => "dec",
            "radius_arcsec" => "radius",
            other => other,
        };
        match COLUMNS.iter().position(|c| *c == known) {
            Some(column) => at[column] = Some(i),
            None => {
                let near = nearest(&lower, COLUMNS.iter().copied())
                    .map_or(String::new(), |n| format!("did you mean `{n}`? "));
                return problem(
                    format!("line 1: unknown column `{name}`"),
                    format!("{near}a list has the columns {}", COLUMNS.join(", ")),
                );
            }
        }
    }
    let [Some(name), Some(ra), Some(dec), equinox, radius] = at else {
        return problem(
            "line 1: the columns name, ra and dec are not all there",
            format!("a header row with {}", COLUMNS.join(", ")),
        );
    };
    let mut objects = Vec::new();
    for row in reader.records() {
        let row = match row {
            Ok(row) => row,
            Err(e) => return problem(format!("is no CSV text: {e}"), "UTF-8 text"),
        };
        let line = row.position().map_or(0, csv::Position::line);
        let cell = |i: usize| row.get(i).unwrap_or("");
        if row.iter().all(str::is_empty) {
            continue;
        }
        let wrong = |column: &str, i: usize, expected: &str| {
            problem(
                format!("line {line}: {column} `{}` cannot be read", cell(i)),
                expected,
            )
        };
        let Some(ra_deg) = ra_deg(cell(ra)) else {
            return wrong("ra", ra, "hours 05 34 31.9 or 5:34.5, or degrees 83.633");
        };
        let Some(dec_deg) = sexagesimal(cell(dec)).filter(|d| d.abs() <= 90.0) else {
            return wrong("dec", dec, "degrees +22 00 52 or 22.0145");
        };
        let frame = match equinox.map(cell).filter(|e| !e.is_empty()) {
            None => None,
            Some(word) => match super::frame::frame_named(word) {
                Ok(frame) => Some(frame),
                Err(what) => {
                    return problem(format!("line {line}: {what}"), super::frame::EXPECTED);
                }
            },
        };
        let radius_arcsec = match radius.map(cell).filter(|r| !r.is_empty()) {
            None => 0.0,
            Some(word) => match word.trim_end_matches(['"', '″']).parse::<f64>() {
                Ok(r) if (0.0..=100_000.0).contains(&r) => r,
                _ => return wrong("radius", radius.unwrap_or(0), "arcseconds"),
            },
        };
        let Some((ra_deg, dec_deg)) = icrs(ra_deg, dec_deg, frame) else {
            return problem(
                format!(
                    "line {line}: the equinox of `{}` cannot be used in a list",
                    cell(name)
                ),
                "J2000.0 (ICRS) or B1950.0",
            );
        };
        objects.push(KnownObject {
            name: cell(name).to_owned(),
            ra_deg,
            dec_deg,
            radius_arcsec,
        });
    }
    Ok(objects)
}

/// ICRS from the frames a list may be in.
fn icrs(ra_deg: f64, dec_deg: f64, frame: Option<Frame>) -> Option<(f64, f64)> {
    let (system, equinox) = frame.map_or((System::Icrs, Equinox::Julian(2000.0)), |f| {
        (f.system, f.equinox)
    });
    match (system, equinox) {
        (System::Icrs | System::Fk5, _) => Some((ra_deg, dec_deg)),
        (System::Fk4, Equinox::Besselian(1950.0)) => {
            let (ra, dec) = sofars::star::fk45z(ra_deg.to_radians(), dec_deg.to_radians(), 1950.0);
            let (ra, dec) = sofars::star::fk5hz(ra, dec, 2_451_545.0, 0.0);
            Some((ra.to_degrees().rem_euclid(360.0), dec.to_degrees()))
        }
        _ => None,
    }
}

/// Right ascension in degrees: one number is degrees, two or three are hours.
fn ra_deg(word: &str) -> Option<f64> {
    let value = sexagesimal(word)?;
    let hours = word.contains(['h', ':']) || word.trim().contains(' ');
    let degrees = if hours { value * 15.0 } else { value };
    (!word.trim().starts_with(['-', '−']) && (0.0..360.0).contains(&degrees)).then_some(degrees)
}

/// One to three numbers with a sign before them, in the unit of the first.
fn sexagesimal(word: &str) -> Option<f64> {
    let word = word.trim().replace('−', "-");
    let body = word.trim_start_matches(['+', '-']);
    if body.len() + 1 < word.len() {
        return None;
    }
    let marks = |c: char| c.is_whitespace() || ":hdms°′″'\"".contains(c);
    let parts: Vec<&str> = body.split(marks).filter(|p| !p.is_empty()).collect();
    if parts.is_empty() || parts.len() > 3 {
        return None;
    }
    let mut value = 0.0;
    for (i, part) in parts.iter().enumerate() {
        let plain = part.chars().all(|c| c.is_ascii_digit() || c == '.') && part.len() <= 18;
        let n: f64 = part.parse().ok().filter(|_| plain)?;
        if i > 0 && n >= 60.0 || i + 1 < parts.len() && part.contains('.') {
            return None;
        }
        value += n / [1.0, 60.0, 3600.0][i];
    }
    Some(if word.starts_with('-') { -value } else { value })
}
