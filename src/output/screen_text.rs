//! `screen` as text: each report with its verdict in words, its findings under the very words they are about.

use super::drawing::Drawing;
pub use super::drawing::Style;
use super::plain::{harmless, wrapped};
use super::printed;
use super::report_words::{called, not_reduced, position};
use super::slips_text;
use super::window::Window;
use crate::house::HouseError;
use crate::report::{Examined, Finding, Verdict, Weight};
use crate::run::Run;
use crate::sheet::Sheet;
use std::io::{self, Write};

/// Writes the reports of a run with their findings, sheet by sheet.
pub fn write(run: &Run, style: Style, out: &mut impl Write) -> io::Result<()> {
    let mut screen = Screen {
        drawing: Drawing::new(style),
        style,
        out,
    };
    for sheet_run in &run.sheets {
        let sheet = &sheet_run.sheet;
        let name = shown_name(&sheet.name);
        writeln!(screen.out, "{}", harmless(name))?;
        for examined in &sheet_run.examined {
            screen.head(sheet, examined)?;
            screen.findings(sheet, name, &examined.findings)?;
            slips_text::write(examined, style.width, screen.out)?;
        }
        screen.findings(sheet, name, &sheet_run.remarks)?;
        if sheet_run.examined.is_empty() {
            writeln!(screen.out, "       no position found in it")?;
        }
        let apart = sheet_run
            .examined
            .last()
            .is_none_or(|last| last.findings.is_empty() && last.slips.is_empty());
        if apart || !sheet_run.remarks.is_empty() {
            writeln!(screen.out)?;
        }
    }
    Ok(())
}

/// The name of a sheet for people.
pub fn shown_name(name: &str) -> &str {
    if name == crate::run::STANDARD_INPUT {
        "standard input"
    } else {
        name
    }
}

/// Where a screen is written, and how.
struct Screen<'o, W> {
    drawing: Drawing,
    style: Style,
    out: &'o mut W,
}

impl<W: Write> Screen<'_, W> {
    /// Verdict, line, object, position as written and as restated.
    fn head(&mut self, sheet: &Sheet, examined: &Examined) -> io::Result<()> {
        let report = &examined.report;
        let (line, _) = sheet.line_column(report.position.span.start);
        let restated = match &examined.meant.reduced {
            Some(reduced) => format!(
                "{} {} {}",
                printed::ra(reduced),
                printed::dec(reduced),
                super::summary::frame_name(reduced.frame)
            ),
            None => not_reduced(examined).to_owned(),
        };
        let assumed = match examined.meant.assumed.as_slice() {
            [] => String::new(),
            some => format!(" (assumed: {})", some.join(", ")),
        };
        let verdict = match examined.verdict() {
            Verdict::Accept => "accept",
            Verdict::Query => "query ",
            Verdict::Reject => "REJECT",
        };
        let text = format!(
            "line {line}, {}: {} → {restated}{assumed}",
            called(report),
            position(report, &sheet.text)
        );
        let first = format!("{verdict} ");
        writeln!(
            self.out,
            "{}",
            wrapped(&text, &first, "         ", self.style.width)
        )
    }

    fn findings(&mut self, sheet: &Sheet, name: &str, findings: &[Finding]) -> io::Result<()> {
        for finding in findings {
            let weight = match finding.weight {
                Weight::Note => "note",
                Weight::Query => "query",
                Weight::Reject => "reject",
            };
            let message = harmless(finding.message.trim_end());
            let said = format!("{weight}: {message} ({})", finding.rule);
            writeln!(self.out)?;
            writeln!(
                self.out,
                "{}",
                wrapped(&said, "  ", "    ", self.style.width)
            )?;
            let window = Window::on(
                sheet,
                name,
                finding.primary,
                &finding.related,
                self.style.width,
            );
            self.drawing.write(window, "    ", self.out)?;
            if let Some(advice) = &finding.advice {
                what_to_do(advice, self.style.width, self.out)?;
            }
        }
        if findings.is_empty() {
            Ok(())
        } else {
            writeln!(self.out)
        }
    }
}

fn what_to_do(advice: &str, width: usize, out: &mut impl Write) -> io::Result<()> {
    let text = format!("What to do: {}", harmless(advice));
    writeln!(out, "{}", wrapped(&text, "    ", "      ", width))
}

/// Writes the mistakes of a house file, each under its own words.
pub fn write_house_error(error: &HouseError, style: Style, out: &mut impl Write) -> io::Result<()> {
    let house = error.path.display().to_string();
    let drawing = Drawing::new(style);
    let texts = error.lists.iter().map(|(path, text)| (path, text));
    let sheets: Vec<Sheet> = texts
        .chain([(&error.path, &error.text)])
        .filter_map(|(path, text)| Sheet::decode(path.display().to_string(), text.as_bytes()).ok())
        .collect();
    writeln!(
        out,
        "{}: these house rules cannot be used.",
        harmless(&house)
    )?;
    for mistake in &error.mistakes {
        let file = mistake.list.as_ref().unwrap_or(&error.path);
        let name = file.display().to_string();
        let sheet = sheets.iter().find(|s| s.name == name);
        let said = match (sheet, mistake.span) {
            (Some(_), Some(_)) => harmless(&mistake.what),
            _ => format!("{}: {}", harmless(&name), harmless(&mistake.what)),
        };
        writeln!(out)?;
        writeln!(out, "{}", wrapped(&said, "  ", "    ", style.width))?;
        if let (Some(sheet), Some(span)) = (sheet, mistake.span) {
            let window = Window::on(sheet, &name, span, &[], style.width);
            drawing.write(window, "    ", out)?;
        }
        let advice = match mistake.expected.strip_prefix("expected ") {
            Some(wanted) => format!("write {wanted}"),
            None => mistake.expected.clone(),
        };
        what_to_do(&advice, style.width, out)?;
    }
    writeln!(out)
}
