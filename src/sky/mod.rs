//! Numerical astronomy over plain numbers: systems, time scales, horizon, bodies, constellations, catalogue.
//!
//! What is not here: text, spans, house rules, judgement. Angles are degrees at this door, times two-part Julian dates.

pub mod bodies;
pub mod catalogue;
pub mod constellations;
pub mod horizon;
pub mod time;

/// A direction: ICRS right ascension and declination unless said otherwise, degrees.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Direction {
    /// Right ascension, [0, 360).
    pub ra_deg: f64,
    /// Declination.
    pub dec_deg: f64,
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

/// Angle between two directions, degrees.
pub fn separation_deg(a: Direction, b: Direction) -> f64 {
    let (d1, d2) = (a.dec_deg.to_radians(), b.dec_deg.to_radians());
    let half = ((a.ra_deg - b.ra_deg).to_radians() / 2.0).sin();
    let x = ((d1 - d2) / 2.0).sin().powi(2) + d1.cos() * d2.cos() * half * half;
    (2.0 * x.sqrt().min(1.0).asin()).to_degrees()
}
