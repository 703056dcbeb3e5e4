//! Constellations by the IAU's boundaries of 1875.
//!
//! Roman 1987 (PASP 99, 695; CDS VI/42) after Delporte 1930, from the exact integer forms of the table (seconds of time
//! and of arc). The table, searched from the north, is laid out when the program is built as cells of a few bands of
//! declination: one constellation each.

use super::{Direction, fk4, fk5, rotate};
use std::sync::LazyLock;

/// The tables as the build script lays them out (`src/sky/data/tables.rs`).
#[allow(clippy::approx_constant)] // figures of a table
mod table {
    include!(concat!(env!("OUT_DIR"), "/constellations.rs"));
}

pub use self::table::NAMES;

/// A band of declination: from its lower edge up to the next band's.
struct Band {
    above_arcsec: i32,
    to_arcsec: i32,
    /// Right ascension (seconds of time) from which each constellation (by its place in [`NAMES`]) holds.
    cells: &'static [(i32, u8)],
}

fn band(index: usize) -> Band {
    let [from, to] = [0, 1].map(|k| usize::from(table::BAND_STARTS[index + k]));
    Band {
        above_arcsec: table::EDGES_ARCSEC[index],
        to_arcsec: table::EDGES_ARCSEC[index + 1],
        cells: &table::CELLS[from..to],
    }
}

/// ICRS to the mean equator and equinox of B1875.0 without E-terms: to FK5 and FK4 as at B1950.0, Newcomb's precession.
static TO_B1875: LazyLock<[[f64; 3]; 3]> = LazyLock::new(|| {
    let b1950 = super::time::jd_of_besselian_epoch(1950.0);
    let image = |icrs: Direction| {
        let j2000 = fk5::from_icrs(icrs, 2000.0, b1950);
        let place = super::fk4_fk5::from_fk5(j2000, 1950.0, 1950.0);
        fk4::bare_from_b1950(place, 1875.0).vector()
    };
    // the images of two axes, made square, and their cross product
    let x = image(Direction::new(0.0, 0.0));
    let y = image(Direction::new(90.0, 0.0));
    let lean: f64 = (0..3).map(|i| x[i] * y[i]).sum();
    let x: [f64; 3] = std::array::from_fn(|i| x[i] - lean / 2.0 * y[i]);
    let y: [f64; 3] = std::array::from_fn(|i| y[i] - lean / 2.0 * x[i]);
    let z = [
        x[1] * y[2] - x[2] * y[1],
        x[2] * y[0] - x[0] * y[2],
        x[0] * y[1] - x[1] * y[0],
    ];
    std::array::from_fn(|i| [x[i], y[i], z[i]])
});

/// An ICRS direction on the mean equator and equinox of B1875.0, in which the boundaries are drawn.
pub fn at_1875(icrs: Direction) -> Direction {
    Direction::of_vector(rotate(&TO_B1875, icrs.vector()))
}

/// The IAU abbreviation (`Tau`) of the constellation that holds an ICRS direction.
pub fn at(icrs: Direction) -> &'static str {
    let place = at_1875(icrs);
    at_b1875(place.ra_deg * 240.0, place.dec_deg * 3600.0)
}

/// The constellation of a B1875.0 place: right ascension in seconds of time [0, 86400), declination in arcsec. A place on
/// a boundary belongs to the side east or north of it.
pub fn at_b1875(ra_s: f64, dec_arcsec: f64) -> &'static str {
    // the last edge is the pole, and no band begins there
    let lower = &table::EDGES_ARCSEC[..table::EDGES_ARCSEC.len() - 1];
    let at = lower.partition_point(|&edge| f64::from(edge) <= dec_arcsec);
    let cells = band(at.saturating_sub(1)).cells;
    let cell = cells.partition_point(|c| f64::from(c.0) <= ra_s);
    NAMES[usize::from(cells[cell.saturating_sub(1)].1)][0]
}

/// How far a direction is from the nearest boundary of the named constellation, degrees; 0 inside; 180 for no such name.
pub fn distance_deg(icrs: Direction, abbreviation: &str) -> f64 {
    let mut nearest: f64 = 180.0;
    let named = |names: &[&str; 3]| names[0].eq_ignore_ascii_case(abbreviation);
    let Some(wanted) = NAMES.iter().position(named) else {
        return nearest;
    };
    let place = at_1875(icrs);
    for band in (0..table::BAND_STARTS.len() - 1).map(band) {
        for (i, &(from_s, name)) in band.cells.iter().enumerate() {
            if usize::from(name) == wanted {
                let to_s = band.cells.get(i + 1).map_or(86_400, |c| c.0);
                nearest = nearest.min(to_cell(place, &band, from_s, to_s));
            }
        }
    }
    nearest
}

/// Distance of a B1875.0 place to a cell: along the meridian where it stands over or under it, else to an edge in RA.
fn to_cell(place: Direction, band: &Band, from_s: i32, to_s: i32) -> f64 {
    let (low, high) = (
        f64::from(band.above_arcsec) / 3600.0,
        f64::from(band.to_arcsec) / 3600.0,
    );
    let (from, to) = (f64::from(from_s) / 240.0, f64::from(to_s) / 240.0);
    if (from..to).contains(&place.ra_deg) {
        return (low - place.dec_deg).max(place.dec_deg - high).max(0.0);
    }
    let (sin, cos) = place.dec_deg.to_radians().sin_cos();
    [from, to]
        .into_iter()
        .map(|edge| {
            let across = (place.ra_deg - edge).to_radians().cos();
            // the declination at which the meridian comes nearest
            let foot = sin.atan2(cos * across).to_degrees();
            let dec = if foot.abs() <= 90.0 {
                foot
            } else {
                90f64.copysign(foot)
            };
            super::separation_deg(place, Direction::new(edge, dec.clamp(low, high)))
        })
        .fold(180.0, f64::min)
}
