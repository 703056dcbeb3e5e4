//! Topocentric azimuth (north through east) and altitude, with or without refraction.

use super::Direction;
use super::moment::Station;

/// ICRS astrometric direction of an azimuth and an altitude, degrees: ERFA `atoc13`. With `refracted` the altitude is as
/// observed through the station's air. The refraction of `refco` is good to 1″ above 15°, not meant for below 3°.
pub fn to_icrs(
    azimuth_deg: f64,
    altitude_deg: f64,
    refracted: bool,
    station: &Station,
) -> Direction {
    station.icrs_of_horizontal(azimuth_deg, altitude_deg, refracted)
}

/// Azimuth and altitude, degrees, of an ICRS astrometric direction: ERFA `atco13`.
pub fn from_icrs(icrs: Direction, refracted: bool, station: &Station) -> (f64, f64) {
    let seen = station.observed(icrs, refracted);
    (seen.azimuth_deg, seen.altitude_deg)
}
