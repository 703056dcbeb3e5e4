//! Right ascension and declination written a hundredfold apart in fineness.
//!
//! ## Why it matters
//! Nobody measures one coordinate to a hundredth of an arcsecond and the other to an arcminute. Figures were cut off, or
//! a column holds something else.
//!
//! ## What is asked
//! Whether the values of the last digits, on the sky, are within a factor of a hundred of each other.
//!
//! ## Formula
//! step(α) = 15 × seconds × cos δ, held to step(δ).
//!
//! ## Source
//! The owner's design, section 5; common practice, no source.
//!
//! ## Example
//! ```report
//! Object: Suspect 61
//! RA 06:19:55.123 Dec -58:44 (J2000.0)
//! #  ^^^^^^^^^^^^^^^^^^^^^^^ 0.008″ beside 60″
//! Date: 2021-07-12 06:05 UT
//! ```
//!
//! ## What to do
//! Ask whether figures were lost. To let it pass: `[stet steps-uneven: reason]`.

use super::common::words::apart;
use super::{Case, Findings, Rule};
use crate::report::Weight;

pub(super) const RULE: Rule = Rule {
    name: "steps-uneven",
    weight: Weight::Note,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("steps_uneven.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some(read) = case.meant.read else { return };
    let first = read.first_step_arcsec * read.second_deg.to_radians().cos().abs();
    let second = read.second_step_arcsec;
    if first <= 0.0 || second <= 0.0 || (first / second).max(second / first) < 100.0 {
        return;
    }
    let fine = |a: f64| {
        if a < 0.1 {
            let places = (1.0 - a.log10()).ceil().clamp(0.0, 9.0) as usize;
            format!("{a:.places$}″")
        } else {
            apart(a)
        }
    };
    out.add(
        case.report.position.span,
        format!(
            "The last digit of the first coordinate is worth {} on the sky, that of the second {}.",
            fine(first),
            fine(second)
        ),
        "Ask whether figures were cut off one of them.",
    );
}
