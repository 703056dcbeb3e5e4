//! The embedded catalogue: bright stars and Messier's objects, by name and by place.

use super::Direction;

/// One object of the catalogue.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Entry {
    /// The name to print.
    pub name: &'static str,
    /// ICRS at J2000.0, degrees.
    pub icrs: Direction,
    /// Proper motion in RA × cos δ, arcsec a year.
    pub pm_ra_arcsec: f64,
    /// Proper motion in Dec, arcsec a year.
    pub pm_dec_arcsec: f64,
    /// Visual magnitude.
    pub v_mag: Option<f64>,
    /// Its own radius, arcsec; 0 for a star.
    pub radius_arcsec: f64,
    /// What the catalogue's place may be off, arcsec.
    pub error_arcsec: f64,
}

impl Entry {
    /// Its ICRS direction at a Julian epoch.
    pub fn at_epoch(&self, julian_year: f64) -> Direction {
        let years = julian_year - 2000.0;
        let cos = self.icrs.dec_deg.to_radians().cos().max(1e-6);
        Direction {
            ra_deg: (self.icrs.ra_deg + self.pm_ra_arcsec * years / 3600.0 / cos).rem_euclid(360.0),
            dec_deg: self.icrs.dec_deg + self.pm_dec_arcsec * years / 3600.0,
        }
    }
}

/// An object by any designation people use: IAU name, Bayer (Greek letter, Latin name, abbreviation), Flamsteed, HR, HD, SAO, HIP, Messier.
pub fn find(_name: &str) -> Option<Entry> {
    todo!()
}

/// Objects within a radius of a direction (at J2000.0), nearest first.
pub fn near(_icrs: Direction, _radius_deg: f64) -> Vec<(Entry, f64)> {
    todo!()
}
