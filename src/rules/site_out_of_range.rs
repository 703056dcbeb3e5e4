//! A site with a latitude beyond 90° or a longitude beyond 360°.
//!
//! ## Why it matters
//! There is no such place, and nothing about the horizon can be judged from it.
//!
//! ## What is asked
//! Whether the latitude lies within ±90° and the longitude within ±360°.
//!
//! ## Formula
//! |φ| ≤ 90°, |λ| ≤ 360°.
//!
//! ## Source
//! ISO 6709:2022.
//!
//! ## Example
//! ```report
//! Object: unknown 665
//! RA 11 45 46.7 Dec +14 32 16 (J2000.0)
//! Date: 2002-02-14 02:53 UT
//! Site: 45.20 N 391.15 W, 0 m
//! #             ^^^^^^^^ more than once around
//! ```
//!
//! ## What to do
//! Ask for the site's coordinates. To let it pass: `[stet site-out-of-range: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{SiteTrouble, Weight};

pub(super) const RULE: Rule = Rule {
    name: "site-out-of-range",
    weight: Weight::Reject,
    of_place_or_time: true,
    gives_way_to: &["sexagesimal-out-of-range"],
    source: include_str!("site_out_of_range.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some((site, _)) = &case.report.site else {
        return;
    };
    let mut said = false;
    for (angle, most, what) in [
        (site.latitude, 90.0, "latitude"),
        (site.longitude, 360.0, "longitude"),
    ] {
        if let Some(angle) = angle.filter(|a| a.value().abs() > most) {
            said = true;
            out.add(
                angle.span,
                format!(
                    "{} cannot be a {what}: it goes to {most:.0}°.",
                    case.quote(angle.span)
                ),
                "Ask for the site's coordinates.",
            );
        }
    }
    if !said && case.meant.site_trouble == Some(SiteTrouble::OutOfRange) {
        out.add(
            site.span,
            format!("{} is no place on the Earth.", case.quote(site.span)),
            "Ask for the site's coordinates.",
        );
    }
}
