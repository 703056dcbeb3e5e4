//! A reduced place over the site's horizon, with the Sun and the Moon.

use crate::report::Horizon;
use crate::sky::bodies::{Body, direction_at};
use crate::sky::moment::Station;
use crate::sky::{Direction, separation_deg};

/// Topocentric airless altitude and azimuth of an ICRS direction, the Sun's altitude, and the angles to Sun and Moon.
pub fn over(icrs: Direction, station: &Station) -> Horizon {
    let seen = station.observed(icrs, false);
    let (sun, _) = direction_at(Body::Sun, &station.moment, Some(station));
    let (moon, _) = direction_at(Body::Moon, &station.moment, Some(station));
    Horizon {
        altitude_deg: seen.altitude_deg,
        azimuth_deg: seen.azimuth_deg,
        hour_angle_h: seen.hour_angle_deg / 15.0,
        sun_altitude_deg: station.observed(sun, false).altitude_deg,
        sun_separation_deg: separation_deg(icrs, sun),
        moon_separation_deg: separation_deg(icrs, moon),
    }
}
