//! A site's name that the register does not have.
//!
//! ## Why it matters
//! Without coordinates neither the horizon nor the zone of the clock can be asked.
//!
//! ## What is asked
//! Whether a site named without coordinates stands in the house's register, under its name or an alias.
//!
//! ## Formula
//! Names are compared without regard to case, blanks and accents; the nearest by spelling are offered.
//!
//! ## Source
//! Common practice, no source.
//!
//! ## Example
//! ```report
//! Object: Suspect 110
//! RA 05 31 29.2 Dec +21 59 18 (J2000.0)
//! Date: 2019-01-04 21:15 UT
//! Site: Skarn Haed
//! #     ^^^^^^^^^^ not in the register
//! ```
//!
//! ## What to do
//! Ask for the site's coordinates, or add it to the register. To let it pass: `[stet site-unknown: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{SiteTrouble, Weight};

pub(super) const RULE: Rule = Rule {
    name: "site-unknown",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("site_unknown.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some(SiteTrouble::Unknown {
        nearest,
        have_register,
    }) = &case.meant.site_trouble
    else {
        return;
    };
    let span = match &case.report.site {
        Some((site, _)) => site.name.as_ref().map_or(site.span, |name| name.span),
        None => case.report.position.span,
    };
    let words = case.quote(span);
    if *have_register {
        let advice = match nearest.as_slice() {
            [] => "Ask for its coordinates, or add it to the register.".to_string(),
            [one] => format!("Is it {one}? If not, ask for its coordinates."),
            [all @ .., last] => format!(
                "Is it {} or {last}? If not, ask for its coordinates.",
                all.join(", ")
            ),
        };
        out.add(
            span,
            format!("The site {words} is not in the register."),
            advice,
        );
    } else {
        out.add_as(
            Weight::Note,
            span,
            format!(
                "The site {words} has no coordinates, and this house has no register of sites."
            ),
            "Give its latitude and longitude, or start a register in colure.yaml.",
        );
    }
}
