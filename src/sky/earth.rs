//! Where the Earth and the Sun are, and how fast the Earth moves.
//!
//! 1900 to 2100: ERFA `epv00` (VSOP2000; 13 km and 4 mm/s at worst against DE405). Outside, where `epv00` is not given:
//! the Earth–Moon barycentre of `plan94` (Simon et al. 1994) less the Moon of `moon98`, and the Sun about the
//! barycentre from the four giant planets; the aberration computed with it is off by less than 1 mas from 1600 to 2200.

use sofars::eph::{epv00, moon98, plan94};

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
    match epv00(tdb.0, tdb.1) {
        Some((heliocentric, barycentric)) => Earth {
            heliocentric,
            barycentric,
        },
        None => outside(tdb),
    }
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
