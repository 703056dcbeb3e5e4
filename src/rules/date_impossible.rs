//! A date or a time that never was.
//!
//! ## Why it matters
//! 30 February, 25:10 and 22:71 are slips of the pen; whatever was meant is not known, and nothing that hangs on the time
//! can be judged.
//!
//! ## What is asked
//! Whether the month has that day, the clock that hour, minute and second; 23:59:60 only where a leap second was inserted.
//!
//! ## Formula
//! Gregorian calendar; leap seconds by the table of UTC.
//!
//! ## Source
//! ISO 8601-1:2019; IERS Bulletin C.
//!
//! ## Example
//! ```report
//! Object: Suspect 638
//! RA 04h15m32s Dec +58°19′11″ (J2000.0)
//! Date: 2024-01-25 22:71 UT
//! #                ^^^^^ minutes stop at 59
//! ```
//!
//! ## What to do
//! Ask for the original. To let it pass: `[stet date-impossible: reason]`.

use super::common::words::{civil, day_number};
use super::{Case, Findings, Rule};
use crate::report::{DateWritten, InstantTrouble, Weight};

pub(super) const RULE: Rule = Rule {
    name: "date-impossible",
    weight: Weight::Reject,
    of_place_or_time: true,
    gives_way_to: &[],
    source: include_str!("date_impossible.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some(InstantTrouble::Impossible(why)) = &case.meant.instant_trouble else {
        return;
    };
    let instant = case.report.instants.first().map(|(instant, _)| instant);
    let date = instant.and_then(|i| i.date);
    let span = match (date, instant.and_then(|i| i.clock)) {
        (Some(date), _) if !exists(&date.value) => date.span,
        (_, Some(clock)) => clock.span,
        (Some(date), None) => date.span,
        (None, None) => instant.map_or(case.report.position.span, |i| i.span),
    };
    let why = why.trim_end_matches('.');
    out.add(
        span,
        format!("{} never was: {why}.", case.quote(span)),
        "Ask for the original date and time.",
    );
}

/// Is there such a day in the calendar?
fn exists(date: &DateWritten) -> bool {
    match *date {
        DateWritten::Calendar {
            year, month, day, ..
        } => {
            let whole = day.value().floor() as u32;
            (1..=12).contains(&month)
                && (1..=31).contains(&whole)
                && civil(day_number(i64::from(year), month, whole))
                    == (i64::from(year), month, whole)
        }
        DateWritten::Julian { .. } => true,
    }
}
