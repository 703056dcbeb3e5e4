//! A site, and no time.
//!
//! ## Why it matters
//! Without a time the horizon cannot be asked, and that is the best check there is on a position.
//!
//! ## What is asked
//! Whether a report with a site has a date and a time.
//!
//! ## Formula
//! None.
//!
//! ## Source
//! Common practice, no source.
//!
//! ## Example
//! ```report
//! Object: Suspect 102
//! RA 06 05 57 Dec +54 15 18 (J2000.0)
//! Site: 14.89 N 145.79 E, 15 m
//! #     ^^^^^^^^^^^^^^^^^^^^^^ and when?
//! ```
//!
//! ## What to do
//! Ask for the date and time. To let it pass: `[stet instant-missing: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{InstantTrouble, Weight};

pub(super) const RULE: Rule = Rule {
    name: "instant-missing",
    weight: Weight::Note,
    of_place_or_time: false,
    gives_way_to: &["of-date-undated"],
    source: include_str!("instant_missing.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    if case.meant.instant_trouble == Some(InstantTrouble::DateMissing) {
        let span = case.when_span();
        out.add(
            span,
            format!("The time {} has no date.", case.quote(span)),
            "Ask for the date.",
        );
    } else if case.meant.instant_trouble == Some(InstantTrouble::YearMissing) {
        let span = case.when_span();
        out.add(
            span,
            format!("The date {} has no year.", case.quote(span)),
            "Ask for the year.",
        );
    } else if case.report.instants.is_empty()
        && let Some(span) = case.site_span()
    {
        out.add(
            span,
            "The report has a site and no time, so the horizon cannot be asked.",
            "Ask for the date and time.",
        );
    }
}
