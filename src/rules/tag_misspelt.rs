//! An equinox tag that is misspelt.
//!
//! ## Why it matters
//! `J200` is most likely J2000.0, but a guess about the equinox is a guess of half a degree. It is offered, and never taken.
//!
//! ## What is asked
//! Whether the tag that governs the position is well formed: a letter J or B or none, four digits, perhaps decimals.
//!
//! ## Formula
//! None.
//!
//! ## Source
//! The owner's count (WRITING 2d and 3c): 2 of 492 circulars.
//!
//! ## Example
//! ```report
//! Object: Suspect 74
//! RA 23 53 30.6 Dec +33 35 28 (J200)
//! #                           ^^^^^^ likely J2000.0
//! Date: 2007-10-08 11:59 UT
//! ```
//!
//! ## What to do
//! Write the tag in full. To let it pass: `[stet tag-misspelt: reason]`.

use super::common::words;
use super::{Case, Findings, Rule};
use crate::report::Weight;

pub(super) const RULE: Rule = Rule {
    name: "tag-misspelt",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("tag_misspelt.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let right = case
        .report
        .equinoxes
        .iter()
        .filter(|(tag, _)| !tag.value.misspelt)
        .map(|(_, near)| *near)
        .min();
    for (tag, near) in &case.report.equinoxes {
        if !tag.value.misspelt || right.is_some_and(|right| right < *near) {
            continue;
        }
        let likely = words::tag(&tag.value);
        let advice = if likely.is_empty() {
            "Write the equinox in full.".to_string()
        } else {
            format!("It is likely {likely}, but was not taken for it: write it in full.")
        };
        out.add(
            tag.span,
            format!("{} is no equinox.", case.quote(tag.span)),
            advice,
        );
        return;
    }
}
