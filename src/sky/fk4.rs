//! FK4: E-terms of aberration of any Besselian equinox, and Newcomb's precession between Besselian equinoxes.
//!
//! Places of the FK4 carry the E-terms of their own equinox (the part of the aberration that the Earth's eccentric orbit
//! leaves constant). Precession turns the place without them. Good for equinoxes 1750 to 2000.

use super::{Direction, rotate};
use sofars::vm::{ir, ry, rz};

const ARCSEC: f64 = std::f64::consts::PI / 648_000.0;

/// The vector of the E-terms at a Besselian epoch, radians: constant of aberration 20.49552″, eccentricity, perihelion
/// and obliquity after Newcomb (Explanatory Supplement 1992, sect. 3.53; Smith et al. 1989, AJ 97, 265).
pub fn e_terms(equinox: f64) -> [f64; 3] {
    // Julian centuries from B1950.0
    let t = (equinox - 1950.0) * 1.000_021_359_03e-2;
    let eccentricity = 0.016_730_11 - (0.000_041_93 + 0.000_000_126 * t) * t;
    let obliquity = (84_404.836 - (46.8495 + (0.003_19 + 0.001_81 * t) * t) * t) * ARCSEC;
    let perihelion = (1_015_489.951 + (6190.67 + (1.65 + 0.012 * t) * t) * t) * ARCSEC;
    let k = eccentricity * 20.495_52 * ARCSEC;
    let (sin, cos) = perihelion.sin_cos();
    [
        k * sin,
        -k * cos * obliquity.cos(),
        -k * cos * obliquity.sin(),
    ]
}

/// The place without its E-terms (not normalised): r − A + (r·A) r.
fn without(r: [f64; 3], a: [f64; 3]) -> [f64; 3] {
    let w = dot(r, a);
    std::array::from_fn(|i| r[i] - a[i] + w * r[i])
}

/// The unit vector whose place without E-terms points along `p`: iterated to 1e-15.
fn with(p: [f64; 3], a: [f64; 3]) -> [f64; 3] {
    let p = unit(p);
    let mut r = p;
    for _ in 0..5 {
        let w = dot(r, a);
        let length = norm(without(r, a));
        r = unit(std::array::from_fn(|i| (p[i] * length + a[i]) / (1.0 + w)));
    }
    r
}

/// Newcomb's precession as a matrix between two Besselian equinoxes, in Kinoshita's form (Kinoshita 1975, SAO Special
/// Report 364; Andoyer's development of Newcomb's constants).
pub fn newcomb(from: f64, to: f64) -> [[f64; 3]; 3] {
    let start = (from - 1850.0) / 100.0;
    let t = (to - from) / 100.0;
    let w = 2303.5548 + (1.397_20 + 0.000_059 * start) * start;
    let zeta = (w + (0.302_42 - 0.000_269 * start + 0.017_996 * t) * t) * t * ARCSEC;
    let z = (w + (1.094_78 + 0.000_387 * start + 0.018_324 * t) * t) * t * ARCSEC;
    let theta = (2005.1125
        + (-0.852_94 - 0.000_365 * start) * start
        + (-0.426_47 - 0.000_365 * start - 0.041_802 * t) * t)
        * t
        * ARCSEC;
    let mut matrix = [[0.0; 3]; 3];
    ir(&mut matrix);
    rz(-zeta, &mut matrix);
    ry(theta, &mut matrix);
    rz(-z, &mut matrix);
    matrix
}

/// An FK4 place (with E-terms) brought from one Besselian equinox to another.
pub fn precess(fk4: Direction, from: f64, to: f64) -> Direction {
    if from == to || !from.is_finite() || !to.is_finite() {
        return fk4;
    }
    let bare = without(fk4.vector(), e_terms(from));
    Direction::of_vector(with(rotate(&newcomb(from, to), bare), e_terms(to)))
}

/// A B1950.0 FK4 place (with E-terms) as a place without them, of another Besselian equinox: what boundaries are drawn in.
pub fn bare_from_b1950(fk4: Direction, equinox: f64) -> Direction {
    let bare = without(fk4.vector(), e_terms(1950.0));
    Direction::of_vector(rotate(&newcomb(1950.0, equinox), bare))
}

fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

fn norm(a: [f64; 3]) -> f64 {
    dot(a, a).sqrt()
}

fn unit(a: [f64; 3]) -> [f64; 3] {
    let length = norm(a);
    a.map(|x| x / length)
}
