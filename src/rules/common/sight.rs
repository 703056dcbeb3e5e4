//! What can be seen from the site: the range of altitudes that the words allow, and the allowances of the horizon rules.

use super::identity::{ground, here, is_body};
use crate::rules::Case;
use crate::sky::Direction;
use crate::sky::almanac::View;
use crate::sky::bodies::Body;
use crate::sky::horizon::{self, Course};
use crate::sky::moment::Station;
use std::rc::Rc;

/// Horizontal refraction, degrees: 34′ (Explanatory Supplement 1992, 9.33; the almanacs' convention for rising and setting).
pub const REFRACTION_DEG: f64 = 34.0 / 60.0;
/// The most by which UT1 differs from UTC, seconds (ITU-R TF.460-6).
const UT1_S: f64 = 0.9;
/// The most by which a heliocentric or barycentric instant differs from the clock, seconds.
const LIGHT_TIME_S: f64 = 500.0;

/// The altitudes that an object may have had, given how finely the instant, the position and the site are written.
#[derive(Clone, Copy, Debug)]
pub struct Altitudes {
    /// At the instant as written, degrees, airless.
    pub nominal_deg: f64,
    /// The lowest that the words allow.
    pub lowest_deg: f64,
    /// The highest that the words allow.
    pub highest_deg: f64,
}

/// How long before and after the instant as written the true one may lie, seconds: rounding before, a whole step after.
fn reach_s(case: &Case) -> Option<(f64, f64)> {
    let instant = case.meant.instant?;
    let more = UT1_S
        + if instant.heliocentric {
            LIGHT_TIME_S
        } else {
            0.0
        };
    // a date alone, or a whole hour, begins there; a finer one may have been rounded
    let before = if instant.step_s >= 3600.0 {
        0.0
    } else {
        instant.step_s / 2.0
    };
    Some((before + more, instant.step_s + more))
}

/// The range of an altitude over the reach of the instant; its course over the site is asked for where the reach is long.
fn range(
    case: &Case,
    nominal_deg: f64,
    course: impl FnOnce(&Station, f64) -> Course,
) -> Option<(f64, f64)> {
    let (before, after) = reach_s(case)?;
    // altitude changes by at most 15° an hour: short spans need no sample
    if before + after <= 240.0 {
        let most = 15.05 / 3600.0 * after.max(before);
        return Some((nominal_deg - most, nominal_deg + most));
    }
    let view = view(case)?;
    let course = course(view.station.as_ref()?, before.max(after));
    let mut range = (nominal_deg, nominal_deg);
    // a span of ten minutes is straight enough
    let pieces = ((before + after) / 600.0).ceil().clamp(2.0, 160.0);
    for k in 0..=pieces as usize {
        let seconds = -before + (before + after) * k as f64 / pieces;
        let altitude = course.after(seconds).altitude_deg;
        range = (range.0.min(altitude), range.1.max(altitude));
    }
    Some(range)
}

/// The sky over the report's site at its instant.
pub fn view(case: &Case) -> Option<Rc<View>> {
    Some(
        case.almanac
            .view(case.meant.instant?.utc, Some(ground(case.meant)?)),
    )
}

/// The object's altitudes. `None` without a site, an instant and a reduced place.
pub fn altitudes(case: &Case) -> Option<Altitudes> {
    let nominal = case.meant.horizon?.altitude_deg;
    let icrs = here(case.meant)?;
    let (low, high) = range(case, nominal, |station, _| Course::of_star(icrs, station))?;
    let words = written_slack_deg(case);
    Some(Altitudes {
        nominal_deg: nominal,
        lowest_deg: low - words,
        highest_deg: high + words,
    })
}

/// The Sun's altitudes.
pub fn sun_altitudes(case: &Case) -> Option<Altitudes> {
    let nominal = case.meant.horizon?.sun_altitude_deg;
    let (low, high) = range(case, nominal, Course::of_sun)?;
    let site = case.meant.site.as_ref().map_or(0.0, |s| s.step_deg);
    Some(Altitudes {
        nominal_deg: nominal,
        lowest_deg: low - site,
        highest_deg: high + site,
    })
}

/// What the last digits of the position and of the site leave open, degrees.
pub fn written_slack_deg(case: &Case) -> f64 {
    let position = case.meant.reduced.map_or(0.0, |r| r.step_arcsec / 3600.0);
    let site = case.meant.site.as_ref().map_or(0.0, |s| s.step_deg);
    position + site
}

/// How far below the airless horizon something may stand and be seen: refraction, dip, and the disc and parallax of Sun and Moon.
pub fn horizon_allowance_deg(case: &Case) -> f64 {
    let height = case
        .meant
        .site
        .as_ref()
        .and_then(|s| s.elevation_m)
        .unwrap_or(0.0);
    let disc = if is_body(case, Body::Moon) {
        // horizontal parallax up to 61.5′ and half a disc of 17′: the place written may be the geocentric one
        1.3
    } else if is_body(case, Body::Sun) {
        0.27
    } else {
        0.0
    };
    REFRACTION_DEG + horizon::dip_deg(height.max(0.0)) + disc
}

/// Declination of date from altitude, azimuth and latitude, degrees.
pub fn declination_of_date_deg(altitude_deg: f64, azimuth_deg: f64, latitude_deg: f64) -> f64 {
    let (h, a, phi) = (
        altitude_deg.to_radians(),
        azimuth_deg.to_radians(),
        latitude_deg.to_radians(),
    );
    (phi.sin() * h.sin() + phi.cos() * h.cos() * a.cos())
        .clamp(-1.0, 1.0)
        .asin()
        .to_degrees()
}

/// When the object is up in the 24 hours around the instant, in words: `it is up from 22:10 to 04:35 UT`.
pub fn when_up(case: &Case, icrs: Direction) -> String {
    use super::words::clock;
    let (Some(instant), Some(view)) = (case.meant.instant, view(case)) else {
        return String::new();
    };
    let Some(station) = &view.station else {
        return String::new();
    };
    match horizon::up_at(icrs, station, -horizon_allowance_deg(case)) {
        horizon::Up::Always => "it is up all day long".to_string(),
        horizon::Up::Never => "it does not rise at all that day".to_string(),
        horizon::Up::Between(spans) if spans.is_empty() => {
            "it does not rise at all that day".to_string()
        }
        horizon::Up::Between(spans) => {
            let half = 43_200.0;
            let words: Vec<String> = spans
                .iter()
                .map(|(from, to)| {
                    let opens = super::words::seconds_between(instant.utc, *from) > -half + 90.0;
                    let closes = super::words::seconds_between(instant.utc, *to) < half - 90.0;
                    match (opens, closes) {
                        (true, true) => format!("from {} to {} UT", clock(*from), clock(*to)),
                        (true, false) => format!("from {} UT on", clock(*from)),
                        (false, true) => format!("until {} UT", clock(*to)),
                        (false, false) => "all day long".to_string(),
                    }
                })
                .collect();
            format!(
                "in the 24 hours around that time it is up {}",
                words.join(" and ")
            )
        }
    }
}
