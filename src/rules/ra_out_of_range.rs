//! A right ascension below 0 or at or above 24 hours (360°).
//!
//! ## Why it matters
//! There is no such right ascension. Often degrees were labelled as hours, or a digit is wrong, and nothing that follows
//! from the position can be judged.
//!
//! ## What is asked
//! Whether the right ascension lies from 0 up to, not including, 24 hours or 360°; an hour angle within ±24 hours; an
//! azimuth within 0 to 360°.
//!
//! ## Formula
//! 0 h ≤ α < 24 h, 0° ≤ α < 360°.
//!
//! ## Source
//! Explanatory Supplement to the Astronomical Almanac (1992), 1.2 (from memory).
//!
//! ## Example
//! ```report
//! Object: Suspect 25
//! RA 30:47:06.8 Dec -22:23:14.3 (J2000.0)
//! #  ^^^^^^^^^^ past 24 hours
//! Date: 2024-03-14 03:39 UT
//! ```
//!
//! ## What to do
//! Ask for the original. To let it pass: `[stet ra-out-of-range: reason]`.

use super::common::angles::{first_unit, has_sixty, positions};
use super::common::words;
use super::{Case, Findings, Rule};
use crate::report::{AngleUnit, PositionKind, Sign, Weight};

pub(super) const RULE: Rule = Rule {
    name: "ra-out-of-range",
    weight: Weight::Reject,
    of_place_or_time: true,
    gives_way_to: &[],
    source: include_str!("ra_out_of_range.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    for position in positions(case.report) {
        let (Some(angle), Some(unit)) = (position.first, first_unit(position)) else {
            continue;
        };
        let (circle, unit_name) = match unit {
            AngleUnit::Hours => (24.0, "hours"),
            AngleUnit::Degrees => (360.0, "°"),
        };
        let value = angle.value();
        let negative = match position.kind {
            PositionKind::Equatorial => {
                // +/- where a sign belongs says nothing of the value
                value < 0.0
                    || angle.sign.is_some_and(|s| {
                        s.value == Sign::Minus && value == 0.0 && angle.is_negative()
                    })
            }
            PositionKind::HourAngle => value <= -circle,
            PositionKind::Horizontal => value < -180.0,
        };
        // 23h 75m is a fault of its minutes, not of its hours
        let beyond =
            value >= circle && (angle.parts()[0].number.value() >= circle || !has_sixty(&angle));
        if !negative && !beyond && position.kind != PositionKind::Equatorial && value.abs() > circle
        {
            continue;
        }
        let what = match position.kind {
            PositionKind::Equatorial => "right ascension",
            PositionKind::HourAngle => "hour angle",
            PositionKind::Horizontal => "azimuth",
        };
        if negative {
            out.add(
                angle.span,
                format!(
                    "{} is negative; a {what} counts from 0 to {circle:.0} {unit_name}.",
                    case.quote(angle.span)
                ),
                format!(
                    "Ask for the original; if it was counted backwards, it is {}.",
                    words::hours(value.rem_euclid(circle) * 360.0 / circle)
                ),
            );
        } else if beyond {
            let advice = if unit == AngleUnit::Hours && value < 360.0 {
                format!(
                    "If the figures are degrees, the {what} is {}; otherwise ask for the original.",
                    words::hours(value)
                )
            } else {
                "Ask for the original.".to_string()
            };
            out.add(
                angle.span,
                format!(
                    "{} is at or beyond {circle:.0} {unit_name}, where a {what} begins again at 0.",
                    case.quote(angle.span)
                )
                .replace(" °", "°"),
                advice,
            );
        }
    }
}
