//! An equinox before 1600 or after 2100.
//!
//! ## Why it matters
//! No catalogue or atlas uses one. It is a slip of the pen, and precession over centuries would carry the position degrees away.
//!
//! ## What is asked
//! Whether the year of a well-formed tag lies from 1600 to 2100.
//!
//! ## Formula
//! 1600 ≤ year ≤ 2100.
//!
//! ## Source
//! The owner's design, section 5.
//!
//! ## Example
//! ```report
//! Object: Suspect 84
//! RA 14h 56m 25.3s Dec -28° 00' 13" (equinox J2205.0)
//! #                                          ^^^^^^^ 2005? 2025?
//! Date: 2017-05-08 03:04 UT
//! ```
//!
//! ## What to do
//! Ask for the equinox. To let it pass: `[stet equinox-implausible: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{EquinoxYear, Weight};

pub(super) const RULE: Rule = Rule {
    name: "equinox-implausible",
    weight: Weight::Reject,
    of_place_or_time: false,
    gives_way_to: &["tag-misspelt"],
    source: include_str!("equinox_implausible.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let own = case.report.equinoxes.iter().map(|(tag, _)| tag);
    let of_forms = case
        .report
        .other_forms
        .iter()
        .filter_map(|(_, tag)| tag.as_ref());
    for tag in own.chain(of_forms) {
        let Some(EquinoxYear::Year { year, .. }) = tag.value.year else {
            continue;
        };
        let year = year.value();
        if !tag.value.misspelt && !(1600.0..=2100.0).contains(&year) {
            out.add(
                tag.span,
                format!("Nobody uses an equinox of {year:.0}."),
                "Ask for it; it should lie between 1600 and 2100.",
            );
        }
    }
}
