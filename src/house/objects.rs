//! The user's own objects: CSV with the columns name, ra, dec and, where wanted, equinox and radius.

use super::KnownObject;
use super::mistake::{Mistake, io_words, nearest};
use crate::report::{Equinox, Frame, System};
use crate::span::Span;
use std::path::Path;

/// The columns a list may have.
const COLUMNS: &[&str] = &["name", "ra", "dec", "equinox", "radius"];
/// How a list begins, for messages.
const HEADER: &str =
    "a first line “name,ra,dec” (and, where wanted, “equinox” and “radius”, in arcseconds)";
/// More mistakes than this are one mistake made again and again.
const MOST_MISTAKES: usize = 10;

/// An object list read: its text, its objects, and its mistakes, which are placed in that text.
#[derive(Debug, Default)]
pub struct List {
    /// The text of the file.
    pub text: String,
    /// The objects of the lines without mistakes.
    pub objects: Vec<KnownObject>,
    /// What is wrong in it.
    pub mistakes: Vec<Mistake>,
}

impl List {
    fn wrong(&mut self, span: Option<Span>, what: impl Into<String>, expected: impl Into<String>) {
        self.mistakes.push(Mistake {
            list: None,
            span,
            what: what.into(),
            expected: expected.into(),
        });
    }
}

/// Reads an object list.
///
/// # Errors
/// Where the file cannot be read at all: what is wrong, and what was expected.
pub fn load(path: &Path) -> Result<List, (String, &'static str)> {
    let bytes = std::fs::read(path).map_err(|e| {
        (
            io_words(&e),
            "check the path: it counts from the folder of the house file",
        )
    })?;
    match String::from_utf8(bytes) {
        Ok(text) => Ok(parse(text)),
        Err(e) => {
            let bytes = e.as_bytes();
            let before = &bytes[..e.utf8_error().valid_up_to()];
            let line = before.iter().filter(|b| **b == b'\n').count() + 1;
            Err((
                format!("is not UTF-8 text (line {line})"),
                "save the list as CSV in UTF-8",
            ))
        }
    }
}

/// Reads the text of an object list.
pub fn parse(text: String) -> List {
    // a byte order mark would shift every place by three
    let text = match text.strip_prefix('\u{feff}') {
        Some(rest) => rest.to_owned(),
        None => text,
    };
    let mut list = List::default();
    rows(&text, &mut list);
    list.text = text;
    list
}

fn rows(text: &str, list: &mut List) {
    let mut reader = csv::ReaderBuilder::new()
        .trim(csv::Trim::All)
        .flexible(true)
        .has_headers(false)
        .comment(Some(b'#'))
        .from_reader(text.as_bytes());
    let mut head: Option<Columns> = None;
    for row in reader.records() {
        let row = match row {
            Ok(row) => row,
            Err(_) => return list.wrong(None, "is no CSV text", HEADER),
        };
        if row.iter().all(str::is_empty) {
            continue;
        }
        let start = row.position().map_or(0, |p| p.byte() as usize);
        let cells = Cells::of(text, start, &row);
        match &head {
            None => match Columns::of(&cells, list) {
                Some(columns) => head = Some(columns),
                None => return,
            },
            Some(columns) => {
                if let Some(object) = object(&cells, columns, list) {
                    list.objects.push(object);
                }
            }
        }
        if list.mistakes.len() >= MOST_MISTAKES {
            return;
        }
    }
    if head.is_none() {
        list.wrong(None, "holds no line", HEADER);
    }
}

/// The cells of a row, each with its place.
struct Cells<'a> {
    row: &'a csv::StringRecord,
    places: Vec<Span>,
    line: Span,
}

impl<'a> Cells<'a> {
    /// `start` is where the reader began to look for the row: comments and blank lines may stand before it.
    fn of(text: &str, mut start: usize, row: &'a csv::StringRecord) -> Cells<'a> {
        let mut line = "";
        for next in text.get(start..).unwrap_or("").split_inclusive('\n') {
            line = next.trim_end();
            if !line.trim_start().is_empty() && !line.starts_with('#') {
                break;
            }
            start += next.len();
        }
        let line_span = Span::new(start, start + line.len());
        let mut from = 0;
        let places = row
            .iter()
            .map(|cell| match line[from..].find(cell) {
                Some(at) if !cell.is_empty() => {
                    let place = Span::new(start + from + at, start + from + at + cell.len());
                    from += at + cell.len();
                    place
                }
                _ => line_span,
            })
            .collect();
        Cells {
            row,
            places,
            line: line_span,
        }
    }

    fn text(&self, i: usize) -> &str {
        self.row.get(i).unwrap_or("")
    }

    /// The place of a cell; that of the line where the cell is empty.
    fn place(&self, i: usize) -> Span {
        self.places.get(i).copied().unwrap_or(self.line)
    }
}

/// Which cell holds what.
struct Columns {
    name: usize,
    ra: usize,
    dec: usize,
    equinox: Option<usize>,
    radius: Option<usize>,
}

impl Columns {
    fn of(head: &Cells, list: &mut List) -> Option<Columns> {
        let mut at = [None; 5];
        if let [one] = head.row.iter().collect::<Vec<_>>().as_slice()
            && let Some(mark) = one.chars().find(|c| matches!(c, ';' | '\t' | '|'))
        {
            let name = match mark {
                ';' => "semicolons",
                '\t' => "tabs",
                _ => "bars",
            };
            list.wrong(
                Some(head.line),
                format!("the columns are parted by {name}"),
                format!("part them by commas, and write decimals with a point; {HEADER}"),
            );
            return None;
        }
        for (i, name) in head.row.iter().enumerate() {
            let lower = name.trim().to_lowercase();
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
                    list.wrong(
                        Some(head.place(i)),
                        format!("unknown column `{name}`"),
                        format!("{near}A list has {HEADER}"),
                    );
                    return None;
                }
            }
        }
        let [Some(name), Some(ra), Some(dec), equinox, radius] = at else {
            list.wrong(
                Some(head.line),
                "the columns name, ra and dec are not all there",
                format!("write {HEADER}"),
            );
            return None;
        };
        Some(Columns {
            name,
            ra,
            dec,
            equinox,
            radius,
        })
    }
}

fn object(cells: &Cells, columns: &Columns, list: &mut List) -> Option<KnownObject> {
    let wrong = |list: &mut List, column: &str, i: usize, expected: &str| {
        let what = match cells.text(i) {
            "" => format!("{column} is missing"),
            word => format!("{column} `{word}` cannot be read"),
        };
        list.wrong(Some(cells.place(i)), what, expected);
        None
    };
    let Some(ra_deg) = ra_deg(cells.text(columns.ra)) else {
        let expected = "write hours as 05 34 31.9 or 5:34.5, or degrees as 83.633";
        return wrong(list, "ra", columns.ra, expected);
    };
    let Some(dec_deg) = sexagesimal(cells.text(columns.dec)).filter(|d| d.abs() <= 90.0) else {
        let expected = "write degrees as +22 00 52 or 22.0145, within ±90";
        return wrong(list, "dec", columns.dec, expected);
    };
    let said = |column: Option<usize>| {
        column
            .map(|i| (i, cells.text(i)))
            .filter(|(_, word)| !word.is_empty())
    };
    let frame = match said(columns.equinox) {
        None => None,
        Some((i, word)) => match super::frame::frame_named(word) {
            Ok(frame) => Some(frame),
            Err(what) => {
                list.wrong(
                    Some(cells.place(i)),
                    what,
                    "write J2000.0 (ICRS) or B1950.0",
                );
                return None;
            }
        },
    };
    let radius_arcsec = match said(columns.radius) {
        None => 0.0,
        Some((i, word)) => match word.trim_end_matches(['"', '″']).parse::<f64>() {
            Ok(r) if (0.0..=100_000.0).contains(&r) => r,
            _ => return wrong(list, "radius", i, "write arcseconds as a bare number: 90"),
        },
    };
    let Some((ra_deg, dec_deg)) = icrs(ra_deg, dec_deg, frame) else {
        let place = columns.equinox.map_or(cells.line, |i| cells.place(i));
        list.wrong(
            Some(place),
            "this equinox cannot be used in a list",
            "write J2000.0 (ICRS) or B1950.0",
        );
        return None;
    };
    Some(KnownObject {
        name: cells.text(columns.name).to_owned(),
        ra_deg,
        dec_deg,
        radius_arcsec,
    })
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
