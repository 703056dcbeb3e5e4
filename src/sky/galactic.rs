//! Galactic longitude and latitude (IAU 1958, as Hipparcos tied it to the ICRS).

use super::Direction;
use sofars::coords::{g2icrs, icrs2g};

/// ICRS of a galactic longitude and latitude, degrees: ERFA `g2icrs`.
pub fn to_icrs(longitude_deg: f64, latitude_deg: f64) -> Direction {
    let (l, b) = Direction::new(longitude_deg, latitude_deg).radians();
    Direction::from_radians(g2icrs(l, b))
}

/// Galactic longitude [0, 360) and latitude, degrees, of an ICRS direction: ERFA `icrs2g`.
pub fn from_icrs(icrs: Direction) -> (f64, f64) {
    let (ra, dec) = icrs.radians();
    let place = Direction::from_radians(icrs2g(ra, dec));
    (place.ra_deg, place.dec_deg)
}
