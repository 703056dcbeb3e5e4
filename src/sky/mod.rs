//! Numerical astronomy over plain numbers: systems, time scales, horizon, bodies, constellations, catalogue.
//!
//! What is not here: text, spans, house rules, judgement; nothing else of the crate is used. Angles are degrees at
//! every door, times two-part Julian dates. Nothing panics: instants outside the years 1000 to 3000 are taken at the
//! nearer end of that span, numbers that are not finite at a fixed place, and [`moment::Moment::is_computable`] tells.
//!
//! A system is a file with both ways in it, `to_icrs` and `from_icrs`; a new one is a file beside these and a line here.

pub mod almanac;
pub mod apparent;
pub mod bodies;
pub mod catalogue;
pub mod constellations;
pub mod earth;
pub mod ecliptic;
pub mod fk4;
pub mod fk4_fk5;
pub mod fk5;
pub mod galactic;
pub mod grid;
pub mod horizon;
pub mod horizontal;
pub mod hour_angle;
pub mod icrs;
pub mod mean;
pub mod moment;
pub mod nutation;
mod series;
pub mod time;

use sofars::vm;

/// A direction: ICRS right ascension and declination unless said otherwise, degrees.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Direction {
    /// Right ascension, [0, 360).
    pub ra_deg: f64,
    /// Declination.
    pub dec_deg: f64,
}

impl Direction {
    /// From degrees; the right ascension is brought into [0, 360).
    pub fn new(ra_deg: f64, dec_deg: f64) -> Direction {
        Direction {
            ra_deg: turn_deg(ra_deg),
            dec_deg,
        }
    }

    /// Right ascension and declination in radians; a number that is not finite counts as 0.
    pub fn radians(self) -> (f64, f64) {
        let finite = |x: f64| if x.is_finite() { x } else { 0.0 };
        (
            finite(self.ra_deg).to_radians(),
            finite(self.dec_deg).clamp(-90.0, 90.0).to_radians(),
        )
    }

    /// From right ascension and declination in radians.
    pub fn from_radians((ra, dec): (f64, f64)) -> Direction {
        Direction::new(ra.to_degrees(), dec.to_degrees())
    }

    /// The unit vector towards it.
    pub fn vector(self) -> [f64; 3] {
        let (ra, dec) = self.radians();
        vm::s2c(ra, dec)
    }

    /// The direction of a vector of any length.
    pub fn of_vector(v: [f64; 3]) -> Direction {
        Direction::from_radians(vm::c2s(&v))
    }
}

/// A place on the Earth, geodetic (WGS84).
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Ground {
    /// North positive, degrees.
    pub latitude_deg: f64,
    /// East positive, degrees.
    pub longitude_deg: f64,
    /// Metres above the ellipsoid.
    pub elevation_m: f64,
}

/// An angle brought into [0, 360), degrees.
pub fn turn_deg(angle_deg: f64) -> f64 {
    let turned = angle_deg.rem_euclid(360.0);
    // a tiny negative angle comes out as 360 itself
    if turned >= 360.0 { 0.0 } else { turned }
}

/// An angle brought into (-180, 180], degrees.
pub fn half_turn_deg(angle_deg: f64) -> f64 {
    let turned = turn_deg(angle_deg);
    if turned > 180.0 {
        turned - 360.0
    } else {
        turned
    }
}

/// Angle between two directions, degrees (haversine: good at every distance but for some 0.002″ near 180°).
pub fn separation_deg(a: Direction, b: Direction) -> f64 {
    let (d1, d2) = (a.dec_deg.to_radians(), b.dec_deg.to_radians());
    let half = ((a.ra_deg - b.ra_deg).to_radians() / 2.0).sin();
    let x = ((d1 - d2) / 2.0).sin().powi(2) + d1.cos() * d2.cos() * half * half;
    (2.0 * x.sqrt().min(1.0).asin()).to_degrees()
}

/// A rotation matrix times a vector.
pub(crate) fn rotate(matrix: &[[f64; 3]; 3], v: [f64; 3]) -> [f64; 3] {
    std::array::from_fn(|i| (0..3).map(|j| matrix[i][j] * v[j]).sum())
}

/// The transpose (the inverse) of a rotation matrix times a vector.
pub(crate) fn rotate_back(matrix: &[[f64; 3]; 3], v: [f64; 3]) -> [f64; 3] {
    std::array::from_fn(|i| (0..3).map(|j| matrix[j][i] * v[j]).sum())
}
