//! `--as csv`: one row a report, for spreadsheets; no cell of a sheet can become a formula there.

use super::printed;
use super::record::message;
use crate::report::{Examined, System};
use crate::run::Run;
use crate::sheet::Sheet;
use crate::sky::time;
use std::borrow::Cow;
use std::io::{self, Write};

/// The columns, in order.
pub const COLUMNS: [&str; 29] = [
    "sheet",
    "ordinal",
    "line",
    "object",
    "observer",
    "role",
    "position_stated",
    "equinox_stated",
    "read_system",
    "read_equinox",
    "read_first_deg",
    "read_second_deg",
    "reduced_system",
    "reduced_equinox",
    "reduced_ra",
    "reduced_dec",
    "reduced_ra_deg",
    "reduced_dec_deg",
    "reduced_step_arcsec",
    "magnitude",
    "utc",
    "jd_utc",
    "site",
    "altitude_deg",
    "azimuth_deg",
    "constellation",
    "verdict",
    "rules",
    "findings",
];

/// Writes the rows of a run under one head.
pub fn write(run: &Run, out: &mut impl Write) -> io::Result<()> {
    let mut writer = csv::Writer::from_writer(out);
    writer.write_record(COLUMNS)?;
    for sheet_run in &run.sheets {
        for examined in &sheet_run.examined {
            let row = row(&sheet_run.sheet, examined);
            writer.write_record(row.iter().map(|cell| guarded(cell).into_owned()))?;
        }
    }
    writer.flush()
}

fn row(sheet: &Sheet, examined: &Examined) -> [String; 29] {
    let (report, meant) = (&examined.report, &examined.meant);
    let words = |span: crate::span::Span| span.of(&sheet.text).to_owned();
    let fixed = |value: f64, places: usize| format!("{value:.places$}");
    let read = meant.read.as_ref();
    let reduced = meant.reduced.as_ref();
    let known = |text: Option<String>| text.unwrap_or_default();
    let frame = read.and_then(|r| r.frame);
    [
        sheet.name.clone(),
        report.ordinal.to_string(),
        sheet.line_column(report.position.span.start).0.to_string(),
        known(report.object.as_ref().map(|o| o.value.clone())),
        known(report.observer.as_ref().map(|o| o.value.clone())),
        format!("{:?}", report.role).to_lowercase(),
        words(report.position.span),
        known(report.equinoxes.first().map(|(tag, _)| words(tag.span))),
        known(frame.map(|f| f.system.name().to_owned())),
        known(frame.map(|f| f.equinox.to_string())),
        known(read.map(|r| fixed(r.first_deg, 7))),
        known(read.map(|r| fixed(r.second_deg, 7))),
        known(reduced.map(|r| System::name(r.frame.system).to_owned())),
        known(reduced.map(|r| r.frame.equinox.to_string())),
        known(reduced.map(printed::ra)),
        known(reduced.map(printed::dec)),
        known(reduced.map(|r| fixed(r.ra_deg, 7))),
        known(reduced.map(|r| fixed(r.dec_deg, 7))),
        known(reduced.map(|r| fixed(r.step_arcsec, 3))),
        known(report.magnitude.map(|m| m.value.to_string())),
        known(meant.instant.map(|i| printed::utc(i.utc))),
        known(meant.instant.map(|i| fixed(time::jd_from_utc(i.utc), 6))),
        known(meant.site.as_ref().and_then(|s| s.name.clone())),
        known(meant.horizon.map(|h| fixed(h.altitude_deg, 3))),
        known(meant.horizon.map(|h| fixed(h.azimuth_deg, 3))),
        known(meant.constellation.map(str::to_owned)),
        examined.verdict().name().to_owned(),
        join(examined.findings.iter().map(|f| f.rule.to_owned()), " "),
        join(examined.findings.iter().map(message), " | "),
    ]
}

fn join(parts: impl Iterator<Item = String>, between: &str) -> String {
    parts.collect::<Vec<_>>().join(between)
}

/// A cell that no spreadsheet takes for a formula: an apostrophe before one that begins like one.
///
/// A signed number or coordinate (digits, blanks, points, colons and marks after its sign) stays as it is, and so does
/// a dash alone.
pub fn guarded(cell: &str) -> Cow<'_, str> {
    let Some(first) = cell.chars().next() else {
        return Cow::Borrowed(cell);
    };
    let coordinate = matches!(first, '+' | '-')
        && cell[1..]
            .chars()
            .all(|c| c.is_ascii_digit() || " .:°′″'\"".contains(c))
        && (cell.len() > 1 || first == '-');
    if matches!(first, '=' | '+' | '-' | '@' | '\t' | '\r' | '\n') && !coordinate {
        Cow::Owned(format!("'{cell}"))
    } else {
        Cow::Borrowed(cell)
    }
}
