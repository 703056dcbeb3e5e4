//! The same observation reported twice in one run.
//!
//! ## Why it matters
//! A report that arrived twice counts twice in every mean and every chart.
//!
//! ## What is asked
//! Whether another report of the run has the same object, the same instant and the same place, within their last digits, and
//! no other observer or site.
//!
//! ## Formula
//! Names are compared without regard to case, blanks, hyphens and leading zeros.
//!
//! ## Source
//! Common practice, no source.
//!
//! ## Example
//! ```report
//! Object: candidate 1574
//! RA 03 27 18.78 Dec +04 02 02.5 (J2000.0)
//! Date: 1994-09-30 23:03 UT
//!
//! Object: candidate 1574
//! RA 03 27 18.78 Dec +04 02 02.5 (J2000.0)
//! #  ^^^^^^^^^^^^^^^^^^^^^^^^^^^ as above
//! Date: 1994-09-30 23:03 UT
//! ```
//!
//! ## What to do
//! Drop one of them. To let it pass: `[stet report-repeated: reason]`.

use super::{Case, Findings, Rule};
use crate::report::Weight;

pub(super) const RULE: Rule = Rule {
    name: "report-repeated",
    weight: Weight::Note,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("report_repeated.rs"),
    check,
};

/// One report alone cannot be a repetition: the reports are seen together in `common/sisters.rs`.
fn check(_: &Case, _: &mut Findings) {}
