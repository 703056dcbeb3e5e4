//! `reduce` as text: a table that an editor can paste, aligned by what the characters take on a screen.

use super::plain::one_line;
use super::printed;
use super::report_words::called;
use super::summary::frame_name;
use crate::report::{Examined, Role};
use crate::run::Run;
use std::io::{self, Write};
use unicode_width::UnicodeWidthStr;

const HEAD: [&str; 6] = ["Object", "RA", "Dec", "Equinox", "UT", "Verdict"];

/// Writes the table of a run.
pub fn write(run: &Run, out: &mut impl Write) -> io::Result<()> {
    let rows: Vec<[String; 6]> = run
        .sheets
        .iter()
        .flat_map(|s| &s.examined)
        .map(row)
        .collect();
    if rows.is_empty() {
        return Ok(());
    }
    let mut widths = HEAD.map(UnicodeWidthStr::width);
    for row in &rows {
        for (width, cell) in widths.iter_mut().zip(row) {
            *width = (*width).max(cell.width());
        }
    }
    line(out, &HEAD.map(str::to_owned), &widths)?;
    line(out, &widths.map(|w| "-".repeat(w)), &widths)?;
    for row in &rows {
        line(out, row, &widths)?;
    }
    Ok(())
}

fn row(examined: &Examined) -> [String; 6] {
    let (report, meant) = (&examined.report, &examined.meant);
    let dash = || "-".to_owned();
    let named = report.object.is_some() || report.role != Role::Measured;
    let reduced = meant.reduced.as_ref();
    [
        if named { called(report) } else { dash() },
        reduced.map_or_else(dash, printed::ra),
        reduced.map_or_else(dash, printed::dec),
        reduced.map_or_else(|| "not reduced".to_owned(), |r| frame_name(r.frame)),
        meant
            .instant
            .map_or_else(dash, |i| printed::ut(i.utc, i.step_s)),
        examined.verdict().name().to_owned(),
    ]
}

fn line(out: &mut impl Write, cells: &[String; 6], widths: &[usize; 6]) -> io::Result<()> {
    let mut text = String::new();
    for (cell, width) in cells.iter().zip(widths) {
        text.push_str(cell);
        text.push_str(&" ".repeat(width.saturating_sub(cell.width()) + 2));
    }
    writeln!(out, "{}", text.trim_end())
}

/// The findings in one line each, for the channel beside the table.
pub fn write_findings(run: &Run, out: &mut impl Write) -> io::Result<()> {
    for sheet_run in &run.sheets {
        let sheet = &sheet_run.sheet;
        let name = super::screen_text::shown_name(&sheet.name);
        let of_reports = sheet_run.examined.iter().flat_map(|e| &e.findings);
        for finding in of_reports.chain(&sheet_run.remarks) {
            let (line, _) = sheet.line_column(finding.primary.start);
            let place = super::plain::harmless(name);
            let message = one_line(&super::record::message(finding), 400);
            writeln!(
                out,
                "{place}, line {line}: {}: {message} ({})",
                finding.weight.name(),
                finding.rule
            )?;
        }
    }
    Ok(())
}
