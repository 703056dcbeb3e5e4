//! A declination (or altitude) beyond ±90°.
//!
//! ## Why it matters
//! There is nothing past the pole. A digit is wrong, or the two coordinates changed places, or a right ascension in degrees
//! stands where the declination belongs.
//!
//! ## What is asked
//! Whether the declination lies within −90° and +90°, a polar or zenith distance within 0° and 180°.
//!
//! ## Formula
//! |δ| ≤ 90°.
//!
//! ## Source
//! Explanatory Supplement to the Astronomical Almanac (1992), 1.2 (from memory).
//!
//! ## Example
//! ```report
//! Object: Suspect 7
//! RA 18 36 56.3 Dec +98 47 01 (J2000.0)
//! #                 ^^^^^^^^^ past the pole
//! Date: 2016-10-25 18:54 UT
//! ```
//!
//! ## What to do
//! Ask for the original. To let it pass: `[stet dec-out-of-range: reason]`.

use super::common::angles::{has_sixty, positions};
use super::{Case, Findings, Rule};
use crate::report::{PositionKind, Weight};

pub(super) const RULE: Rule = Rule {
    name: "dec-out-of-range",
    weight: Weight::Reject,
    of_place_or_time: true,
    gives_way_to: &[],
    source: include_str!("dec_out_of_range.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    for position in positions(case.report) {
        let Some(angle) = position.second else {
            continue;
        };
        let distance = position.polar_distance || position.zenith_distance;
        let most = if distance { 180.0 } else { 90.0 };
        let what = match (position.kind, distance) {
            (PositionKind::Horizontal, false) => "altitude",
            (PositionKind::Horizontal, true) => "zenith distance",
            (_, false) => "declination",
            (_, true) => "polar distance",
        };
        let value = angle.value();
        // 89° 75′ is a fault of its minutes, not of its degrees
        let beyond =
            value.abs() > most && (angle.parts()[0].number.value() > most || !has_sixty(&angle));
        if beyond || (distance && value < 0.0) {
            let limits = if distance {
                "from 0° to 180°"
            } else {
                "from −90° to +90°"
            };
            let advice = match value.abs() {
                v if !distance && v < 360.0 => {
                    "Ask for the original: a digit may be wrong, or a right ascension in degrees stands in its place."
                }
                _ => "Ask for the original.",
            };
            out.add(
                angle.span,
                format!(
                    "{} cannot be a {what}: it goes {limits}.",
                    case.quote(angle.span)
                ),
                advice,
            );
        }
    }
}
