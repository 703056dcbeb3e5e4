//! Topocentric hour angle and declination, true equator of date, airless.

use super::Direction;
use super::moment::Station;

/// ICRS astrometric direction of an hour angle (degrees, west positive) and a declination.
pub fn to_icrs(hour_angle_deg: f64, dec_deg: f64, station: &Station) -> Direction {
    station.from_hour_angle(hour_angle_deg, dec_deg)
}

/// Hour angle (degrees, west positive, (-180, 180]) and declination of an ICRS astrometric direction.
pub fn from_icrs(icrs: Direction, station: &Station) -> (f64, f64) {
    let seen = station.observed(icrs, false);
    (seen.hour_angle_deg, seen.dec_deg)
}
