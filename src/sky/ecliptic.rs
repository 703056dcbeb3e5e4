//! Ecliptic longitude and latitude, mean ecliptic and equinox of an instant (IAU 2006).

use super::{Direction, time};
use sofars::coords::{eceq06, eqec06};

/// ICRS of an ecliptic longitude and latitude, degrees, of the equinox at a TT instant: ERFA `eceq06`.
pub fn to_icrs(longitude_deg: f64, latitude_deg: f64, equinox_tt: (f64, f64)) -> Direction {
    let (l, b) = Direction::new(longitude_deg, latitude_deg).radians();
    let (a, c) = finite(equinox_tt);
    Direction::from_radians(eceq06(a, c, l, b))
}

/// Ecliptic longitude [0, 360) and latitude, degrees, of an ICRS direction: ERFA `eqec06`.
pub fn from_icrs(icrs: Direction, equinox_tt: (f64, f64)) -> (f64, f64) {
    let (ra, dec) = icrs.radians();
    let (a, c) = finite(equinox_tt);
    let place = Direction::from_radians(eqec06(a, c, ra, dec));
    (place.ra_deg, place.dec_deg)
}

fn finite(jd: (f64, f64)) -> (f64, f64) {
    if jd.0.is_finite() && jd.1.is_finite() {
        jd
    } else {
        (time::J2000, 0.0)
    }
}
