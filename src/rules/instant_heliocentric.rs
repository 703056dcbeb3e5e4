//! A heliocentric or barycentric Julian date.
//!
//! ## Why it matters
//! HJD and BJD are times at the Sun or at the barycentre, not of the observer's clock; the two differ by the light's way.
//!
//! ## What is asked
//! Whether the instant is an HJD or BJD. It is taken as the clock's, and everything is judged within the difference.
//!
//! ## Formula
//! At most 499 s (one astronomical unit) for HJD, a little more for BJD.
//!
//! ## Source
//! Eastman, Siverd & Gaudi 2010, PASP 122, 935.
//!
//! ## Example
//! ```report
//! Object: object Q-647
//! RA 12:58:40.69 Dec -46:50:36.1 (J2000.0)
//! Date: HJD 2455682.9139
//! #     ^^^^^^^^^^^^^^^^ not the clock's time
//! ```
//!
//! ## What to do
//! Give the UTC of the observation too. To let it pass: `[stet instant-heliocentric: reason]`.

use super::{Case, Findings, Rule};
use crate::report::Weight;

pub(super) const RULE: Rule = Rule {
    name: "instant-heliocentric",
    weight: Weight::Note,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("instant_heliocentric.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    if !case.meant.instant.is_some_and(|i| i.heliocentric) {
        return;
    }
    let instant = case.report.instants.first().map(|(instant, _)| instant);
    let span = instant.map_or(case.report.position.span, |i| {
        i.date.map_or(i.span, |d| d.span)
    });
    out.add(
        span,
        format!(
            "{} is a time at the Sun or the barycentre, up to 8.3 minutes from the clock.",
            case.quote(span)
        ),
        "It was taken as the clock's; give the UTC of the observation too.",
    );
}
