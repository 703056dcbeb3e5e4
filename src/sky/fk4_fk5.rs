//! Between FK4 and FK5 (and so the ICRS): a source without proper motion in an inertial frame.
//!
//! Aoki et al. 1983 (A&A 128, 263) and Smith et al. 1989, as ERFA `fk45z` and `fk54z` have them: the FK4's own spin shows
//! as a fictitious proper motion, so the crossing depends on the epoch at which the place was observed.

use super::icrs::Motion;
use super::{Direction, fk4, fk5, time};
use sofars::star::{fk45z, fk54z, fk425, fk524};

/// FK5 J2000.0 of an FK4 place of a Besselian equinox, observed at a Besselian epoch.
pub fn to_fk5(place: Direction, equinox: f64, epoch: f64) -> Direction {
    let (ra, dec) = fk4::precess(place, equinox, 1950.0).radians();
    Direction::from_radians(fk45z(ra, dec, epoch))
}

/// FK4 place of a Besselian equinox, at a Besselian epoch, of an FK5 J2000.0 place.
pub fn from_fk5(place: Direction, equinox: f64, epoch: f64) -> Direction {
    let (ra, dec) = place.radians();
    let (ra, dec, _, _) = fk54z(ra, dec, epoch);
    fk4::precess(Direction::from_radians((ra, dec)), 1950.0, equinox)
}

/// ICRS of an FK4 place observed at a TT instant.
pub fn to_icrs(place: Direction, equinox: f64, at_tt: (f64, f64)) -> Direction {
    let j2000 = to_fk5(place, equinox, time::besselian_epoch(at_tt));
    fk5::to_icrs(j2000, 2000.0, at_tt)
}

/// FK4 place of a Besselian equinox, as observed at a TT instant, of an ICRS direction.
pub fn from_icrs(icrs: Direction, equinox: f64, at_tt: (f64, f64)) -> Direction {
    let j2000 = fk5::from_icrs(icrs, 2000.0, at_tt);
    from_fk5(j2000, equinox, time::besselian_epoch(at_tt))
}

/// FK5 J2000.0 place and motion of a star with a known motion in FK4 B1950.0 (per tropical year there, per Julian year
/// here): ERFA `fk425`, epoch B1950.0 to J2000.0.
pub fn star_to_fk5(place: Direction, motion: Motion) -> (Direction, Motion) {
    star(fk425, place, motion)
}

/// FK4 B1950.0 place and motion of a star with a known motion in FK5 J2000.0: ERFA `fk524`.
pub fn star_from_fk5(place: Direction, motion: Motion) -> (Direction, Motion) {
    star(fk524, place, motion)
}

type Six = (f64, f64, f64, f64, f64, f64);

fn star(
    crossing: fn(f64, f64, f64, f64, f64, f64) -> Six,
    place: Direction,
    motion: Motion,
) -> (Direction, Motion) {
    let (ra, dec) = place.radians();
    let (per_ra, per_dec) = (
        (motion.ra_arcsec / 3600.0).to_radians(),
        (motion.dec_arcsec / 3600.0).to_radians(),
    );
    let cos = |dec: f64| dec.cos().max(1e-9);
    let (ra, dec, per_ra, per_dec, parallax, radial) = crossing(
        ra,
        dec,
        per_ra / cos(dec),
        per_dec,
        motion.parallax_arcsec,
        motion.radial_km_s,
    );
    (
        Direction::from_radians((ra, dec)),
        Motion {
            ra_arcsec: per_ra.to_degrees() * 3600.0 * cos(dec),
            dec_arcsec: per_dec.to_degrees() * 3600.0,
            parallax_arcsec: parallax,
            radial_km_s: radial,
        },
    )
}
