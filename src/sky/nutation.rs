//! Precession and nutation of an instant: IAU 2006/2000A, the terms of ERFA `nut00a` summed several at once.
//!
//! Within 1e-5 µas of ERFA `pnm06a`, at a fifth of its cost (`tests/sky_series.rs`). Tables: `src/sky/data/README.md`.

// plain indices over arrays of known length: of these the compiler makes vectors
#![allow(clippy::needless_range_loop)]

use super::series::{BLOCK, sin_cos};
use super::time::J2000;
use sofars::fundargs::{
    fae03, faf03, faju03, fal03, fama03, fame03, faom03, fapa03, fasa03, faur03, fave03,
};
use sofars::pnp::{fw2m, pfw06};
use std::f64::consts::TAU;

/// The tables as the build script lays them out (`src/sky/data/tables.rs`): in blocks of terms, the multipliers of each
/// argument, then the coefficients, 0.1 µas (and 0.1 µas a century).
#[allow(clippy::approx_constant)] // figures of a table
mod table {
    include!(concat!(env!("OUT_DIR"), "/nutation.rs"));
}

use self::table::{LUNISOLAR, LUNISOLAR_BY, PLANETARY, PLANETARY_BY};

/// 0.1 µas in radians.
const UNIT_RAD: f64 = TAU / 1_296_000.0 / 1e7;

/// The bias-precession-nutation matrix, GCRS to true equator and equinox of date, at a TT instant: as ERFA `pnm06a`.
pub fn matrix(tt: (f64, f64)) -> [[f64; 3]; 3] {
    let (gamma, phi, psi, epsilon) = pfw06(tt.0, tt.1);
    let (d_psi, d_epsilon) = angles(tt);
    fw2m(gamma, phi, psi + d_psi, epsilon + d_epsilon)
}

/// Nutation in longitude and obliquity, radians, with the IAU 2006 adjustments: as ERFA `nut06a`.
pub fn angles(tt: (f64, f64)) -> (f64, f64) {
    let t = ((tt.0 - J2000) + tt.1) / 36_525.0;
    let (psi_a, epsilon_a) = lunisolar(t, LUNISOLAR.len());
    let (psi_b, epsilon_b) = planetary(t);
    let (psi, epsilon) = (psi_a + psi_b, epsilon_a + epsilon_b);
    // Wallace & Capitaine 2006, eq. 5
    let j2 = -2.7774e-6 * t;
    (psi + psi * (0.4697e-6 + j2), epsilon + epsilon * j2)
}

/// The same of its 32 largest terms, within 0.02″.
pub fn largest(tt: (f64, f64)) -> (f64, f64) {
    lunisolar(((tt.0 - J2000) + tt.1) / 36_525.0, 32 / BLOCK)
}

/// The sum of so many blocks of terms.
fn lunisolar(t: f64, blocks: usize) -> (f64, f64) {
    // MHB2000 has its own anomaly of the Sun and elongation of the Moon, arcsec
    let anomaly = 1_287_104.793_05
        + t * (129_596_581.048_1 + t * (-0.5532 + t * (0.000_136 - t * 0.000_011_49)));
    let elongation = 1_072_260.703_69
        + t * (1_602_961_601.209 + t * (-6.3706 + t * (0.006_593 - t * 0.000_031_69)));
    let arguments = [
        fal03(t) / TAU,
        anomaly % 1_296_000.0 / 1_296_000.0,
        faf03(t) / TAU,
        elongation % 1_296_000.0 / 1_296_000.0,
        faom03(t) / TAU,
    ];
    let mut sum = (0.0, 0.0);
    // the smallest terms, which are the last, first
    for (by, of) in LUNISOLAR_BY[..blocks]
        .iter()
        .zip(&LUNISOLAR[..blocks])
        .rev()
    {
        let (mut psi, mut epsilon) = ([0.0; BLOCK], [0.0; BLOCK]);
        for i in 0..BLOCK {
            let (sin, cos) = sin_cos(turns(by, &arguments, i));
            psi[i] = (of[0][i] + of[1][i] * t) * sin + of[2][i] * cos;
            epsilon[i] = (of[3][i] + of[4][i] * t) * cos + of[5][i] * sin;
        }
        sum.0 += psi.iter().sum::<f64>();
        sum.1 += epsilon.iter().sum::<f64>();
    }
    (sum.0 * UNIT_RAD, sum.1 * UNIT_RAD)
}

/// The argument of a term of a block.
#[inline(always)]
fn turns<const N: usize>(by: &[[f32; BLOCK]; N], arguments: &[f64; N], term: usize) -> f64 {
    let mut turns = 0.0;
    for k in 0..N {
        turns += f64::from(by[k][term]) * arguments[k];
    }
    turns
}

fn planetary(t: f64) -> (f64, f64) {
    // those that are not the IERS's are MHB2000's
    let arguments = [
        2.355_555_98 + 8_328.691_426_955_4 * t,
        1.627_905_234 + 8_433.466_158_131 * t,
        5.198_466_741 + 7_771.377_146_812_1 * t,
        2.182_439_20 - 33.757_045 * t,
        fame03(t),
        fave03(t),
        fae03(t),
        fama03(t),
        faju03(t),
        fasa03(t),
        faur03(t),
        5.321_159_000 + 3.812_777_400_0 * t,
        fapa03(t),
    ]
    .map(|radians| radians % TAU / TAU);
    let mut sum = (0.0, 0.0);
    for (by, of) in PLANETARY_BY.iter().zip(&PLANETARY).rev() {
        let (mut psi, mut epsilon) = ([0.0; BLOCK], [0.0; BLOCK]);
        for i in 0..BLOCK {
            let (sin, cos) = sin_cos(turns(by, &arguments, i));
            psi[i] = of[0][i] * sin + of[1][i] * cos;
            epsilon[i] = of[2][i] * sin + of[3][i] * cos;
        }
        sum.0 += psi.iter().sum::<f64>();
        sum.1 += epsilon.iter().sum::<f64>();
    }
    (sum.0 * UNIT_RAD, sum.1 * UNIT_RAD)
}
