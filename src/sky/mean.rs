//! Mean equator and equinox of any instant: IAU 2006 precession with frame bias.

use super::{Direction, rotate, rotate_back};
use sofars::pnp::pmat06;

/// ICRS of a mean place of the equinox at a TT instant: ERFA `pmat06`, transposed. Good for 1000 to 3000 (some arcsec
/// at the ends, mas within two centuries of J2000.0).
pub fn to_icrs(mean: Direction, equinox_tt: (f64, f64)) -> Direction {
    Direction::of_vector(rotate_back(&matrix(equinox_tt), mean.vector()))
}

/// Mean place of the equinox at a TT instant of an ICRS direction: ERFA `pmat06`.
pub fn from_icrs(icrs: Direction, equinox_tt: (f64, f64)) -> Direction {
    Direction::of_vector(rotate(&matrix(equinox_tt), icrs.vector()))
}

fn matrix((a, b): (f64, f64)) -> [[f64; 3]; 3] {
    if a.is_finite() && b.is_finite() {
        pmat06(a, b)
    } else {
        pmat06(super::time::J2000, 0.0)
    }
}
