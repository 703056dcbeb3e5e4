//! An object below the horizon at the instant given.
//!
//! ## Why it matters
//! It cannot have been seen. The time (local for UT, the date, twelve hours), the site or the position is wrong.
//!
//! ## What is asked
//! Whether the topocentric altitude, at any moment that the time as written allows, is above the horizon with allowances for
//! refraction (34′), the dip by the site's height, the last digits of position and site, and UT1 − UTC (0.9 s).
//!
//! ## Formula
//! sin h = sin φ sin δ + cos φ cos δ cos H, with H from the IAU 2006/2000A sidereal time.
//!
//! ## Source
//! Meeus, Astronomical Algorithms (2nd ed. 1998), (13.6); refraction at the horizon 34′: Explanatory Supplement (1992), 9.33.
//!
//! ## Example
//! ```report
//! Object: Suspect 131
//! RA 03 28 23 Dec -49 18 42 (J2000.0)
//! Date: 1992-05-30 15:37 UT
//! #                ^^^^^ set by then
//! Site: 3.35 S 113.39 E, 15 m
//! ```
//!
//! ## What to do
//! Ask for the time and its zone, then for the site. To let it pass: `[stet below-horizon: reason]`.

use super::common::identity::here;
use super::common::sight::{altitudes, horizon_allowance_deg, when_up};
use super::common::words::{instant, rough};
use super::{Case, Findings, Rule};
use crate::report::Weight;

pub(super) const RULE: Rule = Rule {
    name: "below-horizon",
    weight: Weight::Reject,
    of_place_or_time: true,
    gives_way_to: &[
        "never-rises",
        "ra-unit-unclear",
        "zone-missing",
        "zone-doubtful",
        "date-order-unclear",
    ],
    source: include_str!("below_horizon.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let (Some(altitudes), Some(meant)) = (altitudes(case), case.meant.instant) else {
        return;
    };
    if altitudes.highest_deg >= -horizon_allowance_deg(case) {
        return;
    }
    let Some(icrs) = here(case.meant) else { return };
    // a slip's trial asks only whether, and the hours cost a search
    let up = if case.text.is_empty() {
        String::new()
    } else {
        when_up(case, icrs)
    };
    let mut up = up;
    if let Some(first) = up.get_mut(0..1) {
        first.make_ascii_uppercase();
    }
    let finding = out.add(
        case.when_span(),
        format!(
            "At {} it stood {} below the horizon of the site.",
            instant(meant.utc),
            rough(-altitudes.nominal_deg)
        ),
        format!("{up}; ask for the time and its zone."),
    );
    finding
        .related
        .push((case.report.position.span, "the position".to_string()));
    if let Some(span) = case.site_span() {
        finding.related.push((span, "the site".to_string()));
    }
}
