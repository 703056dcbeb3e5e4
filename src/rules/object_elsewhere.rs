//! A named object that is not at the position given.
//!
//! ## Why it matters
//! The place of a star, a Messier object, a planet, the Moon or one of the house's own objects is known. If the report has it
//! elsewhere, a figure, the equinox, the date or the name is wrong.
//!
//! ## What is asked
//! Whether the position is within 2′ of the object (or within its own radius), allowing three steps of the position, and what
//! the object's motion within the written time, its parallax and its theory allow.
//!
//! ## Formula
//! Angular separation; stars with proper motion to the date, planets for the instant and the site.
//!
//! ## Source
//! Hoffleit & Warren 1991 (CDS V/50); IAU Catalog of Star Names; Simon et al. 1994, A&A 282, 663 for planets.
//!
//! ## Example
//! ```report
//! Object: Alphecca
//! #       ^^^^^^^^ it stands at +26 42 53
//! RA 15 34 41.3 Dec -26 42 53 (J2000.0)
//! Date: 2012-04-05 06:42 UT
//! ```
//!
//! ## What to do
//! Ask which is right, the name or the position. To let it pass: `[stet object-elsewhere: reason]`.

use super::common::identity::{Expected, here};
use super::common::words::{apart, place};
use super::{Case, Findings, Rule};
use crate::report::{Role, Weight};
use crate::sky::separation_deg;

pub(super) const RULE: Rule = Rule {
    name: "object-elsewhere",
    weight: Weight::Query,
    of_place_or_time: true,
    gives_way_to: &["ra-unit-unclear"],
    source: include_str!("object_elsewhere.rs"),
    check,
};

/// How far the position may be from the object, arcsec.
pub(crate) fn limit_arcsec(case: &Case, expected: &Expected) -> f64 {
    let step = case.meant.reduced.map_or(0.0, |r| r.step_arcsec);
    let said = case
        .report
        .uncertainty_arcsec
        .as_ref()
        .map_or(0.0, |u| u.value);
    expected.radius_arcsec.max(120.0).max(3.0 * step).max(said) + expected.slack_arcsec
}

fn check(case: &Case, out: &mut Findings) {
    // a pointing, a comparison star or the corner of a box is named after an object that is somewhere near
    if !matches!(case.report.role, Role::Measured | Role::Catalogued) {
        return;
    }
    let Some(icrs) = here(case.meant) else { return };
    let Some(expected) = case.named.and_then(|known| known.expected(case)) else {
        return;
    };
    let distance = separation_deg(icrs, expected.icrs) * 3600.0;
    if distance <= limit_arcsec(case, &expected) {
        return;
    }
    let when = if case.meant.instant.is_some() {
        " then"
    } else {
        ""
    };
    out.add(
        case.object_span(),
        format!(
            "{} is {} from the position given.",
            expected.name,
            apart(distance)
        ),
        format!(
            "It stands at {} (ICRS){when}: ask which is right, the name or the position.",
            place(expected.icrs.ra_deg, expected.icrs.dec_deg)
        ),
    )
    .related
    .push((case.report.position.span, "the position".to_string()));
}
