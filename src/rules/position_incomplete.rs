//! A right ascension without a declination, or the reverse.
//!
//! ## Why it matters
//! Half a position is none: nothing can be reduced or checked.
//!
//! ## What is asked
//! Whether both coordinates of the pair are written.
//!
//! ## Formula
//! None.
//!
//! ## Source
//! Common practice, no source.
//!
//! ## Example
//! ```report
//! Object: Suspect 52
//! RA 05 31 29.2 (J2000.0)
//! #  ^^^^^^^^^^ and the declination?
//! Date: 2019-01-04 21:15 UT
//! ```
//!
//! ## What to do
//! Ask for the other coordinate. To let it pass: `[stet position-incomplete: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{PositionKind, Weight};

pub(super) const RULE: Rule = Rule {
    name: "position-incomplete",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("position_incomplete.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let position = &case.report.position;
    let (first, second) = match position.kind {
        PositionKind::Equatorial => ("right ascension", "declination"),
        PositionKind::HourAngle => ("hour angle", "declination"),
        PositionKind::Horizontal => ("azimuth", "altitude"),
    };
    let (has, lacks, span) = match (position.first, position.second) {
        (Some(angle), None) => (first, second, angle.span),
        (None, Some(angle)) => (second, first, angle.span),
        _ => return,
    };
    out.add(
        span,
        format!("The {has} {} stands without a {lacks}.", case.quote(span)),
        format!("Ask for the {lacks}."),
    );
}
