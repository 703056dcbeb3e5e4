//! "Of date", and no date.
//!
//! ## Why it matters
//! The equinox of date moves by 50″ a year. Without the date of observation the position has no equinox; an hour angle or an
//! altitude and azimuth without a time has no place on the sky at all.
//!
//! ## What is asked
//! Whether a position of date, an hour angle or an altitude and azimuth has an instant.
//!
//! ## Formula
//! General precession: 5028.8″ a century along the ecliptic.
//!
//! ## Source
//! Capitaine, Wallace & Chapront 2003, A&A 412, 567.
//!
//! ## Example
//! ```report
//! Object: Suspect 88
//! RA 06h05m57s Dec +54°15′18″ (mean equinox of date)
//! #                           ^^^^^^^^^^^^^^^^^^^^^^ of which date?
//! Site: 14.89 N 145.79 E, 15 m
//! ```
//!
//! ## What to do
//! Ask for the date of observation. To let it pass: `[stet of-date-undated: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{EquinoxYear, PositionKind, Weight};

pub(super) const RULE: Rule = Rule {
    name: "of-date-undated",
    weight: Weight::Reject,
    of_place_or_time: false,
    gives_way_to: &["date-impossible"],
    source: include_str!("of_date_undated.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let report = case.report;
    if case.meant.instant.is_some() {
        return;
    }
    match report.position.kind {
        PositionKind::Equatorial => {
            let governing = report.equinoxes.iter().map(|(tag, _)| tag).find(|tag| {
                !tag.value.misspelt && (tag.value.year.is_some() || tag.value.place.is_some())
            });
            let Some(tag) = governing.filter(|tag| {
                tag.value.year == Some(EquinoxYear::OfDate)
                    || (tag.value.year.is_none() && tag.value.place.is_some())
            }) else {
                return;
            };
            out.add(
                tag.span,
                format!(
                    "{} needs a date, and the report has none that can be used.",
                    case.quote(tag.span)
                ),
                "Ask for the date of observation.",
            );
        }
        PositionKind::HourAngle | PositionKind::Horizontal => {
            let what = match report.position.kind {
                PositionKind::HourAngle => "An hour angle",
                _ => "An altitude and azimuth",
            };
            out.add(
                report.position.span,
                format!("{what} is of its moment, and the report has no instant that can be used."),
                "Ask for the date and time.",
            );
        }
    }
}
