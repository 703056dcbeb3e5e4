//! An object within 15° of the Sun.
//!
//! ## Why it matters
//! Hardly anything is seen there, so the date or the position is likely wrong. And it is dangerous: anybody who goes to look
//! for the object with a telescope or binoculars may get the Sun into the field, and that blinds at once.
//!
//! ## What is asked
//! Whether the position is more than 15° from the Sun's centre, up or not. Where the rule is switched off or let pass, the
//! caution still stands as a note.
//!
//! ## Formula
//! cos s = sin δ sin δ☉ + cos δ cos δ☉ cos(α − α☉).
//!
//! ## Source
//! Meeus, Astronomical Algorithms (2nd ed. 1998), (17.1). The caution: common practice, no source; local rules go before it.
//!
//! ## Example
//! ```report
//! Object: Suspect 152
//! RA 21 30 00 Dec -14 30 00 (J2000.0)
//! #  ^^^^^^^^^^^^^^^^^^^^^^ beside the Sun
//! Date: 2018-02-11 23:00 UT
//! ```
//!
//! ## What to do
//! Ask for date and position, and point no optics there: never look at or near the Sun through a telescope, a finder
//! or binoculars, and follow the safety rules of your site and club. To let it pass: `[stet near-sun: reason]`.

use super::common::identity::{here, is_body};
use super::common::words::apart;
use super::{Case, Findings, Rule};
use crate::report::Weight;
use crate::sky::bodies::Body;
use crate::sky::separation_deg;

pub(super) const RULE: Rule = Rule {
    name: "near-sun",
    weight: Weight::Query,
    of_place_or_time: true,
    gives_way_to: &[],
    source: include_str!("near_sun.rs"),
    check,
};

/// The caution that goes with the Sun, in every message about it.
pub(crate) const CAUTION: &str = "Caution: never look at or near the Sun through a telescope, a finder or binoculars, it blinds at once; follow the safety rules of your site and club.";

fn check(case: &Case, out: &mut Findings) {
    let (Some(icrs), Some(instant)) = (here(case.meant), case.meant.instant) else {
        return;
    };
    let separation = match case.meant.horizon {
        Some(h) => h.sun_separation_deg,
        None => {
            let (sun, _) = case.almanac.view(instant.utc, None).direction(Body::Sun);
            separation_deg(icrs, sun)
        }
    };
    if separation >= 15.0 {
        return;
    }
    if is_body(case, Body::Sun) {
        out.add_as(
            Weight::Note,
            case.report.position.span,
            "This is the Sun.",
            CAUTION,
        );
        return;
    }
    out.add(
        case.report.position.span,
        format!(
            "The position is only {} from the Sun at that date.",
            apart(separation * 3600.0)
        ),
        format!("Ask for the date and the position. {CAUTION}"),
    )
    .related
    .push((case.when_span(), "the date".to_string()));
}
