//! A zone's abbreviation that does not settle the time.
//!
//! ## Why it matters
//! IST is Indian, Irish and Israeli; EST in July is what many write while their clock shows EDT. The time is then an hour or
//! more off.
//!
//! ## What is asked
//! Whether the abbreviation has one meaning for that site, and is in season there on that date.
//!
//! ## Formula
//! The zone tables' offsets for the site's zone at that date.
//!
//! ## Source
//! IANA Time Zone Database. The owner's count (WRITING 3d): 72 of 94 times marked EST fell on dates with summer time.
//!
//! ## Example
//! ```report
//! Object: Suspect 96
//! RA 18 02 10 Dec +02 30 00 (J2000.0)
//! Date: 2014-07-08 23:10 EST
//! #                      ^^^ the clock shows EDT in July
//! Site: 41.07 N 75.69 W, 400 m (time zone America/New_York)
//! ```
//!
//! ## What to do
//! Ask for UT, or for the offset. To let it pass: `[stet zone-doubtful: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{InstantTrouble, Weight};

pub(super) const RULE: Rule = Rule {
    name: "zone-doubtful",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &["date-impossible"],
    source: include_str!("zone_doubtful.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some(InstantTrouble::ZoneDoubtful { why }) = &case.meant.instant_trouble else {
        return;
    };
    let instant = case.report.instants.first().map(|(instant, _)| instant);
    let span = instant
        .and_then(|i| i.zone.as_ref().map(|zone| zone.span))
        .unwrap_or_else(|| case.when_span());
    out.add(
        span,
        format!(
            "{} does not settle the time: {}.",
            case.quote(span),
            why.trim_end_matches('.')
        ),
        "Ask for UT or for the offset from it.",
    );
}
