//! Where the Earth and the Sun are, and how fast the Earth moves.
//!
//! 1600 to 2400: the series of ERFA `epv00` (VSOP2000; from 1900 to 2100 13 km and 4 mm/s at worst against DE405), its
//! terms summed several at once. Farther off: the Earth–Moon barycentre of `plan94` (Simon et
//! al. 1994) less the Moon of `moon98`, and the Sun about the barycentre from the four giant planets; the aberration is
//! then off by some mas.

// plain indices over arrays of known length: of these the compiler makes vectors
#![allow(clippy::needless_range_loop)]

use super::series::{BLOCK, sin_cos};
use super::time::J2000;
use sofars::eph::{moon98, plan94};
use std::f64::consts::TAU;

/// Position and velocity, au and au/day, BCRS axes.
pub type PosVel = [[f64; 3]; 2];

/// The Earth as seen from the Sun and from the barycentre of the solar system.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Earth {
    /// From the Sun.
    pub heliocentric: PosVel,
    /// From the barycentre.
    pub barycentric: PosVel,
}

impl Earth {
    /// The Sun from the barycentre.
    pub fn sun(&self) -> PosVel {
        combine(self.barycentric, self.heliocentric, -1.0)
    }
}

/// Moon's mass in that of Earth and Moon (IAU 2009: Earth/Moon 81.300568).
const MOON_SHARE: f64 = 1.0 / 82.300_568;
/// Sun's mass over those of Jupiter, Saturn, Uranus, Neptune (Simon et al. 1994, as in ERFA `plan94`).
const GIANTS: [(i32, f64); 4] = [(5, 1047.355), (6, 3498.5), (7, 22_869.0), (8, 19_314.0)];

/// The Earth at a TDB (or TT) instant.
pub fn at(tdb: (f64, f64)) -> Earth {
    let years = ((tdb.0 - J2000) + tdb.1) / 365.25;
    if years.abs() <= 400.0 {
        by_series(years, |_, _| usize::MAX)
    } else {
        outside(tdb)
    }
}

/// The Earth within 2e-5 au, 4e-6 of it its speed, at a TDB (or TT) instant: by the largest terms.
pub fn quick(tdb: (f64, f64)) -> Earth {
    let years = ((tdb.0 - J2000) + tdb.1) / 365.25;
    if years.abs() <= 400.0 {
        // blocks of the terms that do not grow and of those that grow with time
        by_series(years, |from_centre, power| match (from_centre, power) {
            (false, 0) => 32 / BLOCK,
            (_, 0) | (false, 1) => 16 / BLOCK,
            _ => 0,
        })
    } else {
        outside(tdb)
    }
}

/// The series as the build script lays them out (`src/sky/data/tables.rs`): `TERMS` in blocks of amplitudes (au), phases
/// (turns) and rates (turns a Julian year), and at which block each series begins, by origin (Sun to Earth, barycentre to
/// Sun), power of the time and axis.
#[allow(clippy::approx_constant)] // figures of a table
mod table {
    include!(concat!(env!("OUT_DIR"), "/earth.rs"));
}

/// The series of `epv00` at a time in Julian years from J2000.0; of each, by origin and power, at most so many blocks.
fn by_series(t: f64, blocks: impl Fn(bool, usize) -> usize) -> Earth {
    let [from_sun, from_centre] = [0, 1].map(|origin| {
        let mut pv: PosVel = [[0.0; 3]; 2];
        let powers = [(1.0, 0.0), (t, 1.0), (t * t, 2.0 * t)];
        for (power, (whole, less)) in powers.into_iter().enumerate() {
            for axis in 0..3 {
                let blocks = blocks(origin == 1, power);
                let (cos, sin) = sums(origin * 9 + power * 3 + axis, blocks, t);
                pv[0][axis] += whole * cos;
                pv[1][axis] += (less * cos - whole * sin) / 365.25;
            }
        }
        pv
    });
    Earth {
        heliocentric: from_sun.map(to_bcrs),
        barycentric: combine(from_sun, from_centre, 1.0).map(to_bcrs),
    }
}

/// The sums of the cosines of a series, and of its sines times their rates (a year).
fn sums(series: usize, blocks: usize, t: f64) -> (f64, f64) {
    let mut sum = (0.0, 0.0);
    let terms = &table::TERMS[table::STARTS[series]..table::STARTS[series + 1]];
    // the largest terms come first: summed from the end
    for [amplitude, phase, rate] in terms[..blocks.min(terms.len())].iter().rev() {
        let (mut cosines, mut sines) = ([0.0; BLOCK], [0.0; BLOCK]);
        for i in 0..BLOCK {
            let (sin, cos) = sin_cos(phase[i] + rate[i] * t);
            cosines[i] = amplitude[i] * cos;
            sines[i] = amplitude[i] * rate[i] * sin;
        }
        sum.0 += cosines.iter().sum::<f64>();
        sum.1 += sines.iter().sum::<f64>();
    }
    (sum.0, sum.1 * TAU)
}

/// From the ecliptic of the series to BCRS axes (the matrix of ERFA `epv00`, fitted to DE405).
fn to_bcrs([x, y, z]: [f64; 3]) -> [f64; 3] {
    [
        x + 0.000_000_211_284 * y - 0.000_000_091_603 * z,
        -0.000_000_230_286 * x + 0.917_482_137_087 * y - 0.397_776_982_902 * z,
        0.397_776_982_902 * y + 0.917_482_137_087 * z,
    ]
}

fn outside(tdb: (f64, f64)) -> Earth {
    let planet = |np: i32| plan94(tdb.0, tdb.1, np).map_or([[0.0; 3]; 2], |p| p.0);
    let heliocentric = combine(planet(3), moon98(tdb.0, tdb.1), -MOON_SHARE);
    let total: f64 = 1.0 + GIANTS.iter().map(|g| 1.0 / g.1).sum::<f64>();
    let barycentric = GIANTS.iter().fold(heliocentric, |sum, &(np, mass)| {
        combine(sum, planet(np), -1.0 / mass / total)
    });
    Earth {
        heliocentric,
        barycentric,
    }
}

/// a + factor × b.
fn combine(a: PosVel, b: PosVel, factor: f64) -> PosVel {
    std::array::from_fn(|k| std::array::from_fn(|i| a[k][i] + factor * b[k][i]))
}
