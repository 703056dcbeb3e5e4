//! A report that contradicts the other reports of its object.
//!
//! ## Why it matters
//! Where three or more agree on where something is, or on how it moves, the one that does not has a slip in its position,
//! its equinox or its time.
//!
//! ## What is asked
//! Against at least three other reports of the same object in the run: whether the position is within three of its own steps,
//! and within three times their scatter, of the steady motion of at most 5° a day (none, as a rule) that the others keep.
//! Catalogued objects and planets are left to `object-elsewhere`.
//!
//! ## Formula
//! Motion on a great circle, r(t) = u cos ωt + v sin ωt, through the pair of reports with the least median distance of the
//! others, then least squares over those that fit, each weighted by its step.
//!
//! ## Source
//! Rousseeuw 1984, J. Am. Stat. Assoc. 79, 871 (least median of squares).
//!
//! ## Example
//! ```report
//! Object: Suspect 1568
//! RA 21 24 26.90 Dec -75 00 00.0 (J2000.0)
//! Date: 2000-09-09 07:13 UT
//!
//! Object: Suspect 1568
//! RA 21 24 26.91 Dec -75 00 00.0 (J2000.0)
//! Date: 2000-09-10 09:40 UT
//!
//! Object: Suspect 1568
//! RA 21 24 26.90 Dec -75 00 00.0 (J2000.0)
//! Date: 2000-09-09 11:54 UT
//!
//! Object: Suspect 1568
//! RA 21 19 55.68 Dec -74 48 32.8 (J2000.0)
//! #  ^^^^^^^^^^^^^^^^^^^^^^^^^^^ 20′ from the others
//! Date: 2000-09-12 08:06 UT
//! ```
//!
//! ## What to do
//! Ask for the original. To let it pass: `[stet report-outlying: reason]`.

use super::{Case, Findings, Rule};
use crate::report::Weight;

pub(super) const RULE: Rule = Rule {
    name: "report-outlying",
    weight: Weight::Query,
    of_place_or_time: true,
    gives_way_to: &[],
    source: include_str!("report_outlying.rs"),
    check,
};

/// One report alone cannot be an outlier: the reports are seen together in `common/sisters.rs`.
fn check(_: &Case, _: &mut Findings) {}
