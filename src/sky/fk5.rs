//! FK5: its own precession (IAU 1976), and its crossing to the ICRS by the Hipparcos orientation and spin.

use super::{Direction, rotate, rotate_back, time};
use sofars::pnp::pmat76;
use sofars::star::{fk5hz, hfk5z};

/// ICRS of an FK5 place of a Julian equinox that does not move in an inertial frame, at a TT instant: ERFA `pmat76`
/// (nothing for J2000.0) and `fk5hz`.
pub fn to_icrs(fk5: Direction, equinox: f64, at_tt: (f64, f64)) -> Direction {
    let (ra, dec) = to_j2000(fk5, equinox).radians();
    Direction::from_radians(fk5hz(ra, dec, at_tt.0, at_tt.1))
}

/// FK5 place of a Julian equinox of an ICRS direction, at a TT instant: ERFA `hfk5z` and `pmat76`.
pub fn from_icrs(icrs: Direction, equinox: f64, at_tt: (f64, f64)) -> Direction {
    let (ra, dec) = icrs.radians();
    let (ra, dec, _, _) = hfk5z(ra, dec, at_tt.0, at_tt.1);
    from_j2000(Direction::from_radians((ra, dec)), equinox)
}

/// Precession (IAU 1976) from a Julian equinox to J2000.0.
pub fn to_j2000(fk5: Direction, equinox: f64) -> Direction {
    match matrix(equinox) {
        Some(m) => Direction::of_vector(rotate_back(&m, fk5.vector())),
        None => fk5,
    }
}

/// Precession (IAU 1976) from J2000.0 to a Julian equinox.
pub fn from_j2000(fk5: Direction, equinox: f64) -> Direction {
    match matrix(equinox) {
        Some(m) => Direction::of_vector(rotate(&m, fk5.vector())),
        None => fk5,
    }
}

fn matrix(equinox: f64) -> Option<[[f64; 3]; 3]> {
    let (a, b) = time::jd_of_julian_epoch(equinox);
    (equinox != 2000.0 && equinox.is_finite()).then(|| pmat76(a, b))
}
