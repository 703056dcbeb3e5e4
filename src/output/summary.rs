//! The last lines of a run for people: how many reports, which verdicts, and the caution about the Sun.

use super::plain::{harmless, wrapped};
use super::screen_text::{Style, shown_name, write_house_error};
use crate::report::{Frame, Role, System, Verdict};
use crate::run::{Failure, Run};
use std::io::{self, Write};

/// Within this of the Sun the caution is given, degrees: that of the rule `near-sun`.
const NEAR_SUN_DEG: f64 = 15.0;

/// The usual caution, in the words of the rule `near-sun`. Local rules for solar observing come before it.
pub const SUN_CAUTION: &str = "Caution: never look at or near the Sun through a telescope, a finder or binoculars, it blinds at once; \
follow the safety rules of your site and club.";

/// How many reports came to which verdict.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub struct Tally {
    /// All reports.
    pub reports: usize,
    /// With verdict `query`.
    pub queries: usize,
    /// With verdict `reject`.
    pub rejects: usize,
}

impl Tally {
    /// Counts a run. Remarks that belong to no report count by their own weight, but as no report.
    pub fn of(run: &Run) -> Tally {
        let mut tally = Tally::default();
        for sheet in &run.sheets {
            tally.reports += sheet.examined.len();
            let verdicts = sheet.examined.iter().map(|e| e.verdict());
            for verdict in verdicts.chain([Verdict::of(&sheet.remarks)]) {
                match verdict {
                    Verdict::Accept => {}
                    Verdict::Query => tally.queries += 1,
                    Verdict::Reject => tally.rejects += 1,
                }
            }
        }
        tally
    }

    /// The heaviest verdict.
    pub fn heaviest(&self) -> Verdict {
        match (self.rejects, self.queries) {
            (0, 0) => Verdict::Accept,
            (0, _) => Verdict::Query,
            _ => Verdict::Reject,
        }
    }
}

fn counted(n: usize, one: &str, many: &str) -> String {
    format!("{n} {}", if n == 1 { one } else { many })
}

/// A frame for people: `ICRS`, `FK4 B1950.0`, `mean J2034.5`.
pub fn frame_name(frame: Frame) -> String {
    match frame.system {
        System::Icrs => "ICRS (J2000.0)".to_owned(),
        system => format!("{} {}", system.name(), frame.equinox),
    }
}

/// What could not be done, and notes: each names the thing and what to do.
pub fn write_failures(run: &Run, style: Style, out: &mut impl Write) -> io::Result<()> {
    for (name, note) in &run.notes {
        let text = format!("note: {}: {}", shown_name(name), note);
        writeln!(out, "{}", wrapped(&harmless(&text), "", "  ", style.width))?;
    }
    for failure in &run.failures {
        match failure {
            Failure::House(error) => {
                write_house_error(error, style, out)?;
                writeln!(out, "The sheets under these house rules were not read.")?;
            }
            Failure::Input { name, what, advice } => {
                let text = format!("not done: {}: {what}; {advice}", shown_name(name));
                writeln!(out, "{}", wrapped(&harmless(&text), "", "  ", style.width))?;
            }
        }
    }
    Ok(())
}

/// The sheets in which no position was found: those who read a table or data are told here.
pub fn write_unread(run: &Run, out: &mut impl Write) -> io::Result<()> {
    for sheet in run.sheets.iter().filter(|s| s.examined.is_empty()) {
        writeln!(
            out,
            "{}: no position found in it",
            harmless(shown_name(&sheet.sheet.name))
        )?;
    }
    Ok(())
}

/// The last lines: the caution where something stands near the Sun and no finding has given it, what was not asked, totals.
pub fn write(run: &Run, width: usize, out: &mut impl Write) -> io::Result<()> {
    let examined = || run.sheets.iter().flat_map(|s| &s.examined);
    let mut line = |text: &str| writeln!(out, "{}", wrapped(text, "", "  ", width));
    let uncautioned = examined().any(|e| {
        e.meant
            .horizon
            .is_some_and(|h| h.sun_separation_deg < NEAR_SUN_DEG)
            && !e.findings.iter().any(|f| f.rule == "near-sun")
    });
    if uncautioned {
        line(SUN_CAUTION)?;
    }
    match (&run.only[..], &run.except[..]) {
        ([], []) => {}
        ([], except) => line(&format!("Not asked: {}.", except.join(", ")))?,
        (only, except) => {
            let asked: Vec<&str> = only
                .iter()
                .filter(|rule| !except.contains(rule))
                .map(String::as_str)
                .collect();
            line(&format!("Asked only: {}.", asked.join(", ")))?;
        }
    }
    let unchecked = examined()
        .filter(|e| e.report.role == Role::Measured && e.meant.horizon.is_none())
        .count();
    let tally = Tally::of(run);
    let accepted = examined()
        .filter(|e| e.verdict() == Verdict::Accept)
        .count();
    let mut total = format!(
        "{} in {}: {} accepted, {} to query, {} to reject",
        counted(tally.reports, "report", "reports"),
        counted(run.sheets.len(), "sheet", "sheets"),
        accepted,
        tally.queries,
        tally.rejects
    );
    if !run.failures.is_empty() {
        total.push_str(&format!("; {} not done", run.failures.len()));
    }
    total.push('.');
    if unchecked > 0 {
        line(&format!(
            "{unchecked} could not be checked against the sky (no site, no time or no equinox)."
        ))?;
    }
    line(&total)
}
