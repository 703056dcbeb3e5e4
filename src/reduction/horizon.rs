//! A reduced place over the site's horizon, with the Sun and the Moon.

use crate::report::Horizon;
use crate::sky::almanac::View;
use crate::sky::bodies::Body;
use crate::sky::{Direction, separation_deg};

/// Topocentric airless altitude and azimuth of an ICRS direction, the Sun's altitude, and the angles to Sun and Moon;
/// `None` for a view from the Earth's centre.
pub fn over(icrs: Direction, view: &View) -> Option<Horizon> {
    let station = view.station.as_ref()?;
    let seen = station.observed(icrs, false);
    let (sun, _) = view.direction(Body::Sun);
    let (moon, _) = view.direction(Body::Moon);
    Some(Horizon {
        altitude_deg: seen.altitude_deg,
        azimuth_deg: seen.azimuth_deg,
        hour_angle_h: seen.hour_angle_deg / 15.0,
        sun_altitude_deg: station.observed(sun, false).altitude_deg,
        sun_separation_deg: separation_deg(icrs, sun),
        moon_separation_deg: separation_deg(icrs, moon),
    })
}
