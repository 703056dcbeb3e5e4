//! An object within 3° of the Moon.
//!
//! ## Why it matters
//! The Moon's light and its ghosts in the optics make faint things doubtful there, and a "new object" may be a reflection.
//!
//! ## What is asked
//! Whether the position is more than 3° from the Moon's centre as seen from the site.
//!
//! ## Formula
//! Angular separation; the Moon's topocentric place.
//!
//! ## Source
//! Meeus, Astronomical Algorithms (2nd ed. 1998), (17.1) and chapter 47; the limit: the owner's design, section 5.
//!
//! ## Example
//! ```report
//! Object: Suspect 159
//! RA 04 38 00 Dec +17 20 00 (J2000.0)
//! #  ^^^^^^^^^^^^^^^^^^^^^^ beside the Moon
//! Date: 2018-02-23 18:00 UT
//! Site: 30.00 N 10.00 E, 50 m
//! ```
//!
//! ## What to do
//! Look at the report with that in mind. To let it pass: `[stet near-moon: reason]`.

use super::common::identity::is_body;
use super::common::words::apart;
use super::{Case, Findings, Rule};
use crate::report::Weight;
use crate::sky::bodies::Body;

pub(super) const RULE: Rule = Rule {
    name: "near-moon",
    weight: Weight::Note,
    of_place_or_time: false,
    gives_way_to: &[
        "below-horizon",
        "never-rises",
        "ra-unit-unclear",
        "zone-missing",
        "zone-doubtful",
        "date-order-unclear",
    ],
    source: include_str!("near_moon.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let (Some(horizon), Some(instant)) = (case.meant.horizon, case.meant.instant) else {
        return;
    };
    // in two hours the Moon moves by its own disc twice over: a coarser time says nothing
    if instant.step_s > 7_200.0 || horizon.moon_separation_deg >= 3.0 || is_body(case, Body::Moon) {
        return;
    }
    out.add(
        case.report.position.span,
        format!(
            "The Moon was {} from there.",
            apart(horizon.moon_separation_deg * 3600.0)
        ),
        "Bear its light and its reflections in mind.",
    );
}
