//! A stated altitude, azimuth, hour angle or airmass that is not the computed one.
//!
//! ## Why it matters
//! An instrument's reading beside the position is a free check on time, site and position together.
//!
//! ## What is asked
//! Whether the stated quantity is within 1° and one of its own steps of the computed one, with refraction or without,
//! at any moment that the time as written allows.
//!
//! ## Formula
//! sin h = sin φ sin δ + cos φ cos δ cos H; azimuth differences count times cos h; airmass as sec z.
//!
//! ## Source
//! Meeus, Astronomical Algorithms (2nd ed. 1998), chapter 13.
//!
//! ## Example
//! ```report
//! Object: object Q-509
//! RA 05 39 35.9 Dec -11 52 53 (J2000.0)
//! Date: 2017-01-25 04:36 UT
//! Site: 13.72 N 135.39 W, 2390 m
//! Altitude 19°
//! #        ^^^ computed: about 44°
//! ```
//!
//! ## What to do
//! Ask for the time and its zone, and for the reading. To let it pass: `[stet horizon-disagrees: reason]`.

use super::common::identity::{ground, here};
use super::common::sight::view;
use super::common::words::rough;
use super::{Case, Findings, Rule};
use crate::report::{HorizonQuantity, Mark, PositionKind, StatedHorizon, Weight};
use crate::sky::horizon::{AltAz, Course, refraction_deg};

pub(super) const RULE: Rule = Rule {
    name: "horizon-disagrees",
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
    source: include_str!("horizon_disagrees.rs"),
    check,
};

/// A stated quantity in degrees: which, its value and its step.
struct Stated {
    name: &'static str,
    quantity: HorizonQuantity,
    deg: f64,
    step_deg: f64,
}

fn stated(s: &StatedHorizon) -> Option<Stated> {
    let (value, step) = (s.angle.value(), s.angle.step());
    let (name, quantity, deg, step_deg) = match s.quantity {
        HorizonQuantity::Altitude => ("altitude", HorizonQuantity::Altitude, value, step),
        HorizonQuantity::ZenithDistance => (
            "zenith distance",
            HorizonQuantity::Altitude,
            90.0 - value,
            step,
        ),
        HorizonQuantity::Azimuth => ("azimuth", HorizonQuantity::Azimuth, value, step),
        HorizonQuantity::HourAngle => {
            let degrees = s.angle.parts()[0].mark == Mark::Degree;
            let scale = if degrees { 1.0 } else { 15.0 };
            (
                "hour angle",
                HorizonQuantity::HourAngle,
                value * scale,
                step * scale,
            )
        }
        HorizonQuantity::Airmass => {
            let altitude = |x: f64| (1.0 / x.max(1.0)).asin().to_degrees();
            if value < 0.99 {
                return None;
            }
            let step_deg = altitude(value - step) - altitude(value + step);
            (
                "airmass",
                HorizonQuantity::Altitude,
                altitude(value),
                step_deg,
            )
        }
    };
    Some(Stated {
        name,
        quantity,
        deg,
        step_deg,
    })
}

fn check(case: &Case, out: &mut Findings) {
    let (Some(computed), Some(instant), Some(ground), Some(icrs)) = (
        case.meant.horizon,
        case.meant.instant,
        ground(case.meant),
        here(case.meant),
    ) else {
        return;
    };
    if case.report.stated_horizon.is_empty()
        || case.report.position.kind == PositionKind::Horizontal
        || instant.step_s > 7_200.0
    {
        return;
    }
    let nominal = AltAz {
        altitude_deg: computed.altitude_deg,
        azimuth_deg: computed.azimuth_deg,
        hour_angle_h: computed.hour_angle_h,
    };
    let reach = instant.step_s + if instant.heliocentric { 500.0 } else { 0.0 };
    let station = view(case).and_then(|view| view.station);
    let moments: Vec<AltAz> = match station {
        Some(station) if reach > 100.0 => {
            let course = Course::of_star(icrs, &station);
            (-4..=8)
                .map(|k| course.after(reach * f64::from(k) / 8.0))
                .collect()
        }
        _ => vec![nominal],
    };
    for written in &case.report.stated_horizon {
        let Some(said) = stated(written) else {
            continue;
        };
        let off = moments
            .iter()
            .flat_map(|place| {
                let refraction = refraction_deg(place.altitude_deg, ground.elevation_m);
                [
                    difference(&said, place, 0.0),
                    difference(&said, place, refraction),
                ]
            })
            .fold(f64::INFINITY, f64::min);
        if off <= 1.0 + said.step_deg {
            continue;
        }
        let is = match said.quantity {
            HorizonQuantity::Azimuth => rough(nominal.azimuth_deg),
            HorizonQuantity::HourAngle => format!("{:+.1} h", nominal.hour_angle_h),
            _ if said.name == "zenith distance" => rough(90.0 - nominal.altitude_deg),
            _ if said.name == "airmass" && nominal.altitude_deg > 1.0 => {
                format!("{:.1}", 1.0 / nominal.altitude_deg.to_radians().sin())
            }
            _ => rough(nominal.altitude_deg),
        };
        let finding = out.add(
            written.angle.span,
            format!(
                "The stated {} {} is not that of the position at that time and site: it would be {is}.",
                said.name,
                case.quote(written.angle.span)
            ),
            "Ask for the time and its zone, and for the reading.",
        );
        finding
            .related
            .push((case.when_span(), "the time".to_string()));
    }
}

/// How far a stated quantity is from a place with so much refraction, degrees on the sky.
fn difference(said: &Stated, place: &AltAz, refraction: f64) -> f64 {
    let around = |a: f64, b: f64| ((a - b + 180.0).rem_euclid(360.0) - 180.0).abs();
    match said.quantity {
        HorizonQuantity::Azimuth => {
            around(said.deg, place.azimuth_deg) * place.altitude_deg.to_radians().cos()
        }
        HorizonQuantity::HourAngle => around(said.deg, place.hour_angle_h * 15.0),
        _ => (said.deg - place.altitude_deg - refraction).abs(),
    }
}
