//! An object up, but very low.
//!
//! ## Why it matters
//! Few observe in the haze of the last degrees. Often the time or the site is a little wrong.
//!
//! ## What is asked
//! Whether the altitude, refraction added, is above the house's limit (`horizon: lowest`, 5° unless set), at any moment that
//! the time as written allows.
//!
//! ## Formula
//! As for `below-horizon`; refraction by a standard atmosphere at the site's height.
//!
//! ## Source
//! Meeus, Astronomical Algorithms (2nd ed. 1998), (13.6); Bennett 1982, J. Navigation 35, 255 for refraction.
//!
//! ## Example
//! ```report
//! Object: Suspect 138
//! RA 12 27 48 Dec -60 24 04 (J2000.0)
//! Date: 2017-02-16 19:49 UT
//! #                ^^^^^ 2° above the horizon
//! Site: 20.00 N 60.00 E, 15 m
//! ```
//!
//! ## What to do
//! Ask whether it was so low. To let it pass: `[stet low-altitude: reason]`.

use super::common::sight::{altitudes, horizon_allowance_deg};
use super::common::words::rough;
use super::{Case, Findings, Rule};
use crate::report::Weight;
use crate::sky::horizon::refraction_deg;

pub(super) const RULE: Rule = Rule {
    name: "low-altitude",
    weight: Weight::Query,
    of_place_or_time: true,
    gives_way_to: &[
        "below-horizon",
        "never-rises",
        "near-sun",
        "ra-unit-unclear",
        "zone-missing",
        "zone-doubtful",
        "date-order-unclear",
    ],
    source: include_str!("low_altitude.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some(altitudes) = altitudes(case) else {
        return;
    };
    let height = case
        .meant
        .site
        .as_ref()
        .and_then(|s| s.elevation_m)
        .unwrap_or(0.0);
    let lowest = case.house.lowest_altitude_deg;
    if altitudes.highest_deg < -horizon_allowance_deg(case)
        || altitudes.highest_deg + refraction_deg(altitudes.highest_deg, height) >= lowest
    {
        return;
    }
    let seen = altitudes.nominal_deg + refraction_deg(altitudes.nominal_deg, height);
    let finding = out.add(
        case.when_span(),
        format!(
            "It stood only {} high then, refraction included; the house asks below {}.",
            rough(seen),
            rough(lowest)
        ),
        "Ask whether it was seen so low, and for the time and its zone.",
    );
    finding
        .related
        .push((case.report.position.span, "the position".to_string()));
    if let Some(span) = case.site_span() {
        finding.related.push((span, "the site".to_string()));
    }
}
