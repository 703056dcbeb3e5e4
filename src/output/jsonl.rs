//! `--as jsonl`: one record a line, in the order of the sheets.

use super::record::{Record, RemarkRecord, ReportRecord};
use crate::run::Run;
use std::io::{self, Write};

/// Writes the records of a run.
pub fn write(run: &Run, out: &mut impl Write) -> io::Result<()> {
    for sheet_run in &run.sheets {
        let sheet = &sheet_run.sheet;
        for examined in &sheet_run.examined {
            line(
                out,
                &Record::Report(Box::new(ReportRecord::of(sheet, examined))),
            )?;
        }
        if !sheet_run.remarks.is_empty() {
            line(
                out,
                &Record::Remark(RemarkRecord::of(sheet, &sheet_run.remarks)),
            )?;
        }
    }
    Ok(())
}

fn line(out: &mut impl Write, record: &Record) -> io::Result<()> {
    serde_json::to_writer(&mut *out, record)?;
    out.write_all(b"\n")
}
