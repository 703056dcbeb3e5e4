//! An observation in daylight or bright twilight.
//!
//! ## Why it matters
//! Faint objects are not seen with the Sun up. The time is often local time written as UT, or twelve hours off.
//!
//! ## What is asked
//! Whether the Sun was below the house's limit (`horizon: darkness`, −6° unless set) at any moment that the time as written
//! allows. The Sun, the Moon and objects bright enough by the house's rules pass.
//!
//! ## Formula
//! The Sun's topocentric airless altitude; −6° is the end of civil twilight.
//!
//! ## Source
//! Explanatory Supplement to the Astronomical Almanac (1992), 9.33 (from memory).
//!
//! ## Example
//! ```report
//! Object: Suspect 145
//! RA 06 30 00 Dec +20 00 00 (J2000.0)
//! Date: 2018-02-11 16:00 UT
//! #                ^^^^^ the Sun is up
//! Site: 52.00 N 2.00 W, 50 m
//! ```
//!
//! ## What to do
//! Ask for the time and its zone. To let it pass: `[stet daylight: reason]`.

use super::common::identity::is_body;
use super::common::sight::sun_altitudes;
use super::common::words::{instant, rough};
use super::{Case, Findings, Rule};
use crate::report::Weight;
use crate::sky::bodies::Body;

pub(super) const RULE: Rule = Rule {
    name: "daylight",
    weight: Weight::Query,
    of_place_or_time: true,
    gives_way_to: &[
        "below-horizon",
        "never-rises",
        "ra-unit-unclear",
        "zone-missing",
        "zone-doubtful",
        "date-order-unclear",
    ],
    source: include_str!("daylight.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let limit = case.house.darkness_deg;
    let (Some(sun), Some(meant)) = (sun_altitudes(case), case.meant.instant) else {
        return;
    };
    if sun.lowest_deg <= limit
        || is_body(case, Body::Sun)
        || is_body(case, Body::Moon)
        || is_bright(case)
    {
        return;
    }
    let words = if sun.nominal_deg >= 0.0 {
        format!("the Sun stood {} high", rough(sun.nominal_deg))
    } else {
        format!(
            "the Sun was only {} below the horizon",
            rough(-sun.nominal_deg)
        )
    };
    let finding = out.add(
        case.when_span(),
        format!("At {} {words} at the site.", instant(meant.utc)),
        format!(
            "It should be below {}: ask for the time and its zone.",
            rough(limit)
        ),
    );
    if let Some(span) = case.site_span() {
        finding.related.push((span, "the site".to_string()));
    }
}

/// Bright enough by the house's rules, by the magnitude stated or that of the object named.
fn is_bright(case: &Case) -> bool {
    let Some(limit) = case.house.daylight_magnitude else {
        return false;
    };
    let stated = case.report.magnitude.as_ref().map(|m| m.value);
    stated
        .or_else(|| case.named.and_then(|known| known.magnitude()))
        .is_some_and(|magnitude| magnitude <= limit)
}
