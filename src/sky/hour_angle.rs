//! Hour angle and declination, true equator of date: right ascension = local apparent sidereal time − hour angle.
//!
//! The place is the geocentric apparent one: the observer's own motion (diurnal aberration, at most 0.32″) is not in it,
//! as a circle's reading is reduced by sidereal time alone. [`super::moment::Station::observed`] has it with that.

use super::moment::Station;
use super::{Direction, half_turn_deg};

/// ICRS astrometric direction of an hour angle (degrees, west positive) and a declination.
pub fn to_icrs(hour_angle_deg: f64, dec_deg: f64, station: &Station) -> Direction {
    let sidereal = station.sidereal_time_rad.to_degrees();
    let apparent = Direction::new(sidereal - hour_angle_deg, dec_deg);
    station.moment.astrometric(apparent)
}

/// Hour angle (degrees, west positive, (-180, 180]) and declination of an ICRS astrometric direction.
pub fn from_icrs(icrs: Direction, station: &Station) -> (f64, f64) {
    let apparent = station.moment.apparent(icrs);
    let sidereal = station.sidereal_time_rad.to_degrees();
    (half_turn_deg(sidereal - apparent.ra_deg), apparent.dec_deg)
}
