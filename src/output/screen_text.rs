//! `screen` as text: each report with its verdict in words, its findings under the very words they are about.

use super::plain::{harmless, one_line};
use super::printed;
use super::window::Window;
use crate::house::HouseError;
use crate::report::{Examined, Finding, Verdict, Weight};
use crate::run::Run;
use crate::sheet::Sheet;
use miette::{
    Diagnostic, GraphicalReportHandler, GraphicalTheme, LabeledSpan, Severity, SourceCode,
};
use std::fmt;
use std::io::{self, Write};

/// How to draw.
#[derive(Clone, Copy, Debug)]
pub struct Style {
    /// With colours. Nothing depends on them.
    pub colour: bool,
    /// Characters to a line.
    pub width: usize,
}

impl Style {
    fn handler(self) -> GraphicalReportHandler {
        let theme = if self.colour {
            GraphicalTheme::unicode()
        } else {
            GraphicalTheme::unicode_nocolor()
        };
        GraphicalReportHandler::new_themed(theme)
            .with_width(self.width)
            .with_links(false)
            .with_context_lines(1)
            .without_syntax_highlighting()
    }
}

/// Writes the reports of a run with their findings.
pub fn write(run: &Run, style: Style, out: &mut impl Write) -> io::Result<()> {
    let handler = style.handler();
    for sheet_run in &run.sheets {
        let sheet = &sheet_run.sheet;
        let name = shown_name(&sheet.name);
        for examined in &sheet_run.examined {
            head(sheet, name, examined, out)?;
            findings(sheet, name, &examined.findings, &handler, out)?;
            slips(examined, out)?;
        }
        findings(sheet, name, &sheet_run.remarks, &handler, out)?;
        if sheet_run.examined.is_empty() {
            writeln!(out, "{}: no position found", harmless(name))?;
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

/// One line: verdict, place, object, position as written and as restated.
fn head(sheet: &Sheet, name: &str, examined: &Examined, out: &mut impl Write) -> io::Result<()> {
    let report = &examined.report;
    let (line, _) = sheet.line_column(report.position.span.start);
    let object = report
        .object
        .as_ref()
        .map_or(String::new(), |o| format!("  {}", one_line(&o.value, 40)));
    let written = one_line(report.position.span.of(&sheet.text), 60);
    let restated = match &examined.meant.reduced {
        Some(reduced) => format!(
            " → {} {} {}",
            printed::ra(reduced),
            printed::dec(reduced),
            super::summary::frame_name(reduced.frame)
        ),
        None => " → not reduced".to_owned(),
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
    writeln!(
        out,
        "{verdict} {}:{line}{object}  {written}{restated}{assumed}",
        harmless(name)
    )
}

fn findings(
    sheet: &Sheet,
    name: &str,
    findings: &[Finding],
    handler: &GraphicalReportHandler,
    out: &mut impl Write,
) -> io::Result<()> {
    if findings.is_empty() {
        return Ok(());
    }
    for finding in findings {
        let window = Window::on(sheet, name, finding.primary, &finding.related);
        let drawn = Drawn {
            code: format!("{}: {}", finding.weight.name(), finding.rule),
            severity: match finding.weight {
                Weight::Note => Severity::Advice,
                Weight::Query => Severity::Warning,
                Weight::Reject => Severity::Error,
            },
            message: harmless(&finding.message),
            help: finding.advice.as_deref().map(harmless),
            window: Some(window),
        };
        draw(handler, &drawn, out)?;
    }
    writeln!(out)
}

fn draw(handler: &GraphicalReportHandler, drawn: &Drawn, out: &mut impl Write) -> io::Result<()> {
    let mut text = String::new();
    if handler.render_report(&mut text, drawn).is_err() {
        // the words cannot be drawn, but they must not be lost
        text = format!("{}\n  {}\n", drawn.code, drawn.message);
    }
    for line in text.lines() {
        // the room kept at the end of each line of a window
        writeln!(out, "{}", line.trim_end())?;
    }
    Ok(())
}

/// What probably happened, best first.
fn slips(examined: &Examined, out: &mut impl Write) -> io::Result<()> {
    if examined.slips.is_empty() {
        return Ok(());
    }
    writeln!(
        out,
        "  What probably happened (nothing is changed unasked):"
    )?;
    for slip in &examined.slips {
        writeln!(
            out,
            "  {:>3.0} %  {}: {}. {}",
            slip.weight * 100.0,
            slip.kinds.join(" and "),
            harmless(&slip.reading),
            harmless(&slip.because)
        )?;
    }
    writeln!(out)
}

/// Writes the mistakes of a house file, each under its own words.
pub fn write_house_error(error: &HouseError, style: Style, out: &mut impl Write) -> io::Result<()> {
    let name = error.path.display().to_string();
    let handler = style.handler();
    let sheet = Sheet::decode(name.clone(), error.text.as_bytes()).ok();
    for mistake in &error.mistakes {
        let window = match (&sheet, mistake.span) {
            (Some(sheet), Some(span)) => Some(Window::on(sheet, &name, span, &[])),
            _ => None,
        };
        let message = match window {
            Some(_) => harmless(&mistake.what),
            None => format!("{}: {}", harmless(&name), harmless(&mistake.what)),
        };
        let drawn = Drawn {
            code: "house rules".to_owned(),
            severity: Severity::Error,
            message,
            help: Some(harmless(&mistake.expected)),
            window,
        };
        draw(&handler, &drawn, out)?;
    }
    Ok(())
}

/// A finding as miette wants it.
struct Drawn {
    code: String,
    severity: Severity,
    message: String,
    help: Option<String>,
    window: Option<Window>,
}

impl fmt::Display for Drawn {
    fn fmt(&self, f: &mut fmt::Formatter) -> fmt::Result {
        f.write_str(&self.message)
    }
}

impl fmt::Debug for Drawn {
    fn fmt(&self, f: &mut fmt::Formatter) -> fmt::Result {
        f.write_str(&self.message)
    }
}

impl std::error::Error for Drawn {}

impl Diagnostic for Drawn {
    fn code<'a>(&'a self) -> Option<Box<dyn fmt::Display + 'a>> {
        Some(Box::new(&self.code))
    }

    fn severity(&self) -> Option<Severity> {
        Some(self.severity)
    }

    fn help<'a>(&'a self) -> Option<Box<dyn fmt::Display + 'a>> {
        self.help
            .as_ref()
            .map(|h| Box::new(h) as Box<dyn fmt::Display>)
    }

    fn source_code(&self) -> Option<&dyn SourceCode> {
        self.window.as_ref().map(|w| w as &dyn SourceCode)
    }

    fn labels(&self) -> Option<Box<dyn Iterator<Item = LabeledSpan> + '_>> {
        let window = self.window.as_ref()?;
        Some(Box::new(window.labels()))
    }
}
