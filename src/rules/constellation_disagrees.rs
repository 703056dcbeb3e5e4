//! A stated constellation that is not that of the position.
//!
//! ## Why it matters
//! The observer knew where in the sky it was. If the figures say another constellation, a figure, a sign or the equinox is wrong.
//!
//! ## What is asked
//! Whether the position, moved by its last digits, lies within the IAU boundaries of the constellation stated.
//!
//! ## Formula
//! The boundaries are lines of right ascension and declination of B1875.0.
//!
//! ## Source
//! Roman 1987, PASP 99, 695 (CDS VI/42), after Delporte 1930.
//!
//! ## Example
//! ```report
//! Object: field object K596
//! RA 3h 21m 58.7s Dec +6° 09' 01" (J2000.0)
//! Date: 2002-09-18 03:44 UT
//! Constellation: Ori
//! #              ^^^ the position is in Cetus
//! ```
//!
//! ## What to do
//! Ask which is right. To let it pass: `[stet constellation-disagrees: reason]`.

use super::common::identity::here;
use super::common::words::{apart, place};
use super::{Case, Findings, Rule};
use crate::report::Weight;
use crate::sky::{Direction, constellations};

pub(super) const RULE: Rule = Rule {
    name: "constellation-disagrees",
    weight: Weight::Query,
    of_place_or_time: true,
    gives_way_to: &["ra-unit-unclear"],
    source: include_str!("constellation_disagrees.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let (Some(stated), Some(icrs), Some(reduced)) = (
        &case.report.constellation,
        here(case.meant),
        case.meant.reduced,
    ) else {
        return;
    };
    let found = case
        .meant
        .constellation
        .unwrap_or_else(|| constellations::at(icrs));
    if found == stated.value {
        return;
    }
    // a coarse position beside a boundary may be on either side; an uncertainty stated counts as well
    let reach = reduced.step_arcsec.max(
        case.report
            .uncertainty_arcsec
            .as_ref()
            .map_or(0.0, |u| u.value),
    ) / 3600.0;
    let cos = icrs.dec_deg.to_radians().cos().max(0.01);
    let near = (0..8).any(|k| {
        let (sin, cos_k) = (f64::from(k) * std::f64::consts::FRAC_PI_4).sin_cos();
        let probe = Direction {
            ra_deg: (icrs.ra_deg + reach * cos_k / cos).rem_euclid(360.0),
            dec_deg: (icrs.dec_deg + reach * sin).clamp(-90.0, 90.0),
        };
        constellations::at(probe) == stated.value
    });
    if near {
        return;
    }
    let distance = if case.text.is_empty() {
        0.0
    } else {
        constellations::distance_deg(icrs, stated.value)
    };
    let how_far = if distance > 0.05 {
        format!(", {} outside {}", apart(distance * 3600.0), stated.value)
    } else {
        String::new()
    };
    out.add(
        stated.span,
        format!(
            "The position ({}) is in {found}{how_far}, not in {}.",
            place(icrs.ra_deg, icrs.dec_deg),
            case.quote(stated.span)
        ),
        "Ask which is right, the constellation or the position.",
    )
    .related
    .push((case.report.position.span, "the position".to_string()));
}
