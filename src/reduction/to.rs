//! A position carried from the frame it was written in to the ICRS, and on to the wanted frame, with its step.

use super::Sky;
use crate::report::{Equinox, Frame, ReadPosition, Reduced, System};
use crate::sky::{Direction, apparent, fk4_fk5, fk5, horizontal, hour_angle, mean, time};

/// A position as written, with what its reduction depends on.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Written {
    /// The numbers and the frame.
    pub read: ReadPosition,
    /// Apparent right ascension counted from the celestial intermediate origin.
    pub from_origin: bool,
    /// "airless" is written with the altitude.
    pub airless: bool,
    /// The epoch of the place, Julian years, where the text gives one.
    pub epoch: Option<f64>,
}

/// Equinoxes are reduced from and to within these years only.
pub const EQUINOX_YEARS: std::ops::RangeInclusive<f64> = 1600.0..=2100.0;
/// Dates that places of date are reduced for, Julian epochs.
const DATES: std::ops::RangeInclusive<f64> = 1600.0..=2151.0;

/// The position in the wanted frame; `None` where no honest reduction exists (no equinox, of date and no date, an hour
/// angle or an altitude without instant and site, years out of reach).
pub fn reduce(written: &Written, wanted: Frame, sky: &Sky) -> Option<Reduced> {
    let read = &written.read;
    let frame = read.frame?;
    let icrs = to_icrs(written, frame, sky)?;
    let place = if frame == wanted && !written.from_origin {
        // as written, to the last digit
        Direction {
            ra_deg: read.first_deg,
            dec_deg: read.second_deg,
        }
    } else {
        from_icrs(icrs, wanted, written.epoch, sky)?
    };
    let cos = read.second_deg.to_radians().cos().max(0.0);
    let (along, across) = (read.first_step_arcsec * cos, read.second_step_arcsec);
    let step_arcsec = along.max(across);
    // azimuth and altitude mix in both coordinates
    let (ra_step_on_sky_arcsec, dec_step_arcsec) = match frame.system {
        System::Horizontal => (step_arcsec, step_arcsec),
        _ => (along, across),
    };
    let finite = [place.ra_deg, place.dec_deg, icrs.ra_deg, icrs.dec_deg]
        .iter()
        .all(|x| x.is_finite());
    finite.then_some(Reduced {
        frame: wanted,
        ra_deg: place.ra_deg,
        dec_deg: place.dec_deg,
        icrs_ra_deg: icrs.ra_deg,
        icrs_dec_deg: icrs.dec_deg,
        step_arcsec,
        ra_step_on_sky_arcsec,
        dec_step_arcsec,
    })
}

/// The ICRS direction of a written position.
fn to_icrs(written: &Written, frame: Frame, sky: &Sky) -> Option<Direction> {
    let (first, second) = (written.read.first_deg, written.read.second_deg);
    let place = Direction {
        ra_deg: first,
        dec_deg: second,
    };
    Some(match frame.system {
        System::Icrs => place,
        System::Fk5 => fk5::to_icrs(
            place,
            julian(frame.equinox)?,
            at(frame, written.epoch, sky)?,
        ),
        System::Fk4 => {
            let date = at(frame, written.epoch, sky)?;
            fk4_fk5::to_icrs(place, besselian(frame.equinox, sky)?, date)
        }
        System::Mean => mean::to_icrs(place, equinox_tt(frame.equinox, sky)?),
        System::Apparent => {
            dated(sky)?;
            let moment = sky.moment()?;
            let place = if written.from_origin {
                apparent::from_origin_to_equinox(place, moment)
            } else {
                place
            };
            apparent::to_icrs(place, moment)
        }
        System::HourAngle => {
            dated(sky)?;
            hour_angle::to_icrs(first, second, sky.station()?)
        }
        System::Horizontal => {
            dated(sky)?;
            horizontal::to_icrs(first, second, !written.airless, sky.station()?)
        }
    })
}

/// The place in the wanted frame of an ICRS direction.
pub fn from_icrs(
    icrs: Direction,
    wanted: Frame,
    epoch: Option<f64>,
    sky: &Sky,
) -> Option<Direction> {
    Some(match wanted.system {
        System::Icrs => icrs,
        System::Fk5 => fk5::from_icrs(icrs, julian(wanted.equinox)?, at(wanted, epoch, sky)?),
        System::Fk4 => {
            let date = at(wanted, epoch, sky)?;
            fk4_fk5::from_icrs(icrs, besselian(wanted.equinox, sky)?, date)
        }
        System::Mean => mean::from_icrs(icrs, equinox_tt(wanted.equinox, sky)?),
        System::Apparent => {
            dated(sky)?;
            apparent::from_icrs(icrs, sky.moment()?)
        }
        // no right ascension in these
        System::HourAngle | System::Horizontal => return None,
    })
}

/// The instant at which an FK4 or FK5 place holds: the date of observation, else the epoch of the place, else J2000.0 for
/// FK5 and the equinox itself for FK4.
fn at(frame: Frame, epoch: Option<f64>, sky: &Sky) -> Option<(f64, f64)> {
    if let Some(tt) = sky.tt() {
        return Some(tt);
    }
    if let Some(year) = epoch.filter(|year| EQUINOX_YEARS.contains(year)) {
        return Some(time::jd_of_julian_epoch(year));
    }
    match frame.system {
        System::Fk5 => Some((time::J2000, 0.0)),
        _ => equinox_tt(frame.equinox, sky),
    }
}

/// TT of an equinox; that of the date where it is "of date".
fn equinox_tt(equinox: Equinox, sky: &Sky) -> Option<(f64, f64)> {
    match equinox {
        Equinox::Julian(year) if EQUINOX_YEARS.contains(&year) => {
            Some(time::jd_of_julian_epoch(year))
        }
        Equinox::Besselian(year) if EQUINOX_YEARS.contains(&year) => {
            Some(time::jd_of_besselian_epoch(year))
        }
        Equinox::OfDate => dated(sky),
        _ => None,
    }
}

fn julian(equinox: Equinox) -> Option<f64> {
    match equinox {
        Equinox::Julian(year) => EQUINOX_YEARS.contains(&year).then_some(year),
        Equinox::Besselian(_) | Equinox::OfDate => None,
    }
}

fn besselian(equinox: Equinox, sky: &Sky) -> Option<f64> {
    let year = match equinox {
        Equinox::Besselian(year) => year,
        Equinox::OfDate => time::besselian_epoch(dated(sky)?),
        Equinox::Julian(_) => return None,
    };
    EQUINOX_YEARS.contains(&year).then_some(year)
}

/// The date of observation, TT, where it lies within reach.
fn dated(sky: &Sky) -> Option<(f64, f64)> {
    sky.tt()
        .filter(|&tt| DATES.contains(&time::julian_epoch(tt)))
}
