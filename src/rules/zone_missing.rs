//! A clock time with no UT and no zone.
//!
//! ## Why it matters
//! The same 22:31 is up to fourteen hours away from 22:31 UT: half a day of sky, and a planet's or the Moon's own motion besides.
//!
//! ## What is asked
//! Whether the report's own clock time says UT, a scale, an offset or a zone; "local time" needs a zone beside the site or
//! in the register. A time that cannot be read is asked for too: the day alone would be taken for its midnight.
//!
//! ## Formula
//! UT = local time − offset.
//!
//! ## Source
//! Common practice, no source; the owner's count (WRITING 2f) of local clocks.
//!
//! ## Example
//! ```report
//! Object: unknown 512
//! RA 1h 55m 27s Dec -59° 05' 23" (J2000.0)
//! Date: 2017-10-12 09:38
//! #                ^^^^^ by which clock?
//! ```
//!
//! ## What to do
//! Write UT after the time, or the zone. To let it pass: `[stet zone-missing: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{InstantTrouble, Weight};

pub(super) const RULE: Rule = Rule {
    name: "zone-missing",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &["date-impossible"],
    source: include_str!("zone_missing.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some((instant, _)) = case.report.instants.first() else {
        return;
    };
    let span = instant.clock.map_or(instant.span, |clock| clock.span);
    match case.meant.instant_trouble {
        Some(InstantTrouble::ZoneMissing) => {
            out.add(
                span,
                format!("The time {} says neither UT nor a zone.", case.quote(span)),
                "Ask by which clock it was; write UT or the zone after it.",
            );
        }
        Some(InstantTrouble::LocalWithoutZone) => {
            let span = instant.zone.as_ref().map_or(span, |zone| zone.span);
            out.add(
                span,
                format!(
                    "{} is said, and no zone is known for the site.",
                    case.quote(span)
                ),
                "Ask for UT, or give the site's zone beside it or in the register.",
            );
        }
        Some(InstantTrouble::ClockUnread(span)) => {
            out.add(
                span,
                format!("The time {} could not be read.", case.quote(span)),
                "Ask for the time in figures, hours:minutes, with UT or its zone.",
            );
        }
        _ => {}
    }
}
