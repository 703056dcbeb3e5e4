//! ICRS: the system all others are brought to, and a star's own motion in it.

use super::Direction;
use sofars::astro::pmsafe;

/// A star's motion. Unknown parts are 0.
#[derive(Clone, Copy, PartialEq, Debug, Default)]
pub struct Motion {
    /// Proper motion in RA × cos δ, arcsec a Julian year.
    pub ra_arcsec: f64,
    /// Proper motion in Dec, arcsec a Julian year.
    pub dec_arcsec: f64,
    /// Parallax, arcsec.
    pub parallax_arcsec: f64,
    /// Radial velocity, km/s, receding positive.
    pub radial_km_s: f64,
}

/// The direction of a star at another epoch (Julian years): ERFA `pmsafe`, straight motion in space.
pub fn moved(icrs: Direction, motion: Motion, from_epoch: f64, to_epoch: f64) -> Direction {
    let (ra, dec) = icrs.radians();
    let arcsec = |x: f64| (x / 3600.0).to_radians();
    let cos = dec.cos().max(1e-9);
    let (from, to) = (
        super::time::jd_of_julian_epoch(from_epoch),
        super::time::jd_of_julian_epoch(to_epoch),
    );
    let numbers = [
        motion.ra_arcsec,
        motion.dec_arcsec,
        motion.parallax_arcsec,
        motion.radial_km_s,
        from.1,
        to.1,
    ];
    if numbers.iter().any(|x| !x.is_finite()) {
        return icrs;
    }
    pmsafe(
        ra,
        dec,
        arcsec(motion.ra_arcsec) / cos,
        arcsec(motion.dec_arcsec),
        motion.parallax_arcsec,
        motion.radial_km_s,
        from.0,
        from.1,
        to.0,
        to.1,
    )
    .map_or(icrs, |(star, _)| {
        Direction::from_radians((star[0], star[1]))
    })
}
