//! What every position at one instant (and one site) shares, computed once.

use super::grid::{self, Slow};
use super::icrs::Motion;
use super::{Direction, Ground, earth, time};
use sofars::astro::{IauAstrom, apcs, atciq, atciqz, aticq, atioq, atoiq, pvtob, refco};
use sofars::erst::era00;
use sofars::pnp::sp00;
use sofars::vm::trxpv;

/// An instant as the sky needs it: scales, bias-precession-nutation (IAU 2006/2000A), the Earth's motion, sidereal time.
#[derive(Clone, Copy, Debug)]
pub struct Moment {
    /// UTC, two-part quasi Julian date.
    pub utc: (f64, f64),
    /// TT, two-part Julian date.
    pub tt: (f64, f64),
    /// UT1, two-part Julian date.
    pub ut1: (f64, f64),
    /// Equation of the origins (ERA − Greenwich apparent sidereal time), radians.
    pub equation_of_origins_rad: f64,
    /// Greenwich apparent sidereal time, radians.
    pub sidereal_time_rad: f64,
    /// The Earth.
    pub earth: earth::Earth,
    /// Star-independent parameters; `bpn` is equinox based, so that right ascensions count from the true equinox.
    astrom: IauAstrom,
}

/// First and last Julian date that is computed with.
const FIRST_JD: f64 = 2_086_308.0;
const LAST_JD: f64 = 2_816_787.0;

impl Moment {
    /// UT1 taken as UTC.
    pub fn new(utc: (f64, f64)) -> Moment {
        Moment::with_ut1(utc, 0.0)
    }

    /// True for a finite instant of the years 1000 to 3000; others are taken at the nearer end (not finite: J2000.0).
    pub fn is_computable(utc: (f64, f64)) -> bool {
        (FIRST_JD..=LAST_JD).contains(&(utc.0 + utc.1))
    }

    /// From the grid that a whole run shares (`grid.rs`), within 0.5 µas of [`Moment::new`]; UT1 taken as UTC.
    pub fn shared(utc: (f64, f64)) -> Moment {
        Moment::made(utc, 0.0, |tt| {
            grid::at(tt).unwrap_or_else(|| grid::direct(tt))
        })
    }

    /// With UT1 − UTC, seconds.
    pub fn with_ut1(utc: (f64, f64), ut1_minus_utc_s: f64) -> Moment {
        Moment::made(utc, ut1_minus_utc_s, grid::direct)
    }

    /// For trying many instants: an apparent place within 0.1″, the Sun within 5″ (within 400 years of J2000.0), at a
    /// fortieth of the cost of [`Moment::new`].
    pub fn quick(utc: (f64, f64)) -> Moment {
        Moment::made(utc, 0.0, grid::quick)
    }

    fn made(utc: (f64, f64), ut1_minus_utc_s: f64, slow: fn((f64, f64)) -> Slow) -> Moment {
        let jd = utc.0 + utc.1;
        let utc = if !jd.is_finite() || !utc.0.is_finite() || !utc.1.is_finite() {
            (time::J2000, 0.0)
        } else if !Moment::is_computable(utc) {
            (jd.clamp(FIRST_JD, LAST_JD), 0.0)
        } else {
            utc
        };
        let dut1 = if ut1_minus_utc_s.is_finite() {
            ut1_minus_utc_s
        } else {
            0.0
        };
        let tt = time::tt_from_utc(utc);
        let ut1 = time::ut1_from_utc(utc, dut1);
        let Slow {
            matrix,
            equation_of_origins_rad,
            earth,
        } = slow(tt);
        let mut astrom = IauAstrom::default();
        let centre = [[0.0; 3]; 2];
        apcs(
            tt.0,
            tt.1,
            &centre,
            &earth.barycentric,
            &earth.heliocentric[0],
            &mut astrom,
        );
        astrom.bpn = matrix;
        Moment {
            utc,
            tt,
            ut1,
            equation_of_origins_rad,
            sidereal_time_rad: era00(ut1.0, ut1.1) - equation_of_origins_rad,
            earth,
            astrom,
        }
    }

    /// The Julian epoch (TT), for proper motions.
    pub fn julian_epoch(&self) -> f64 {
        time::julian_epoch(self.tt)
    }

    /// The bias-precession-nutation matrix, GCRS to true equator and equinox of date.
    pub fn matrix(&self) -> &[[f64; 3]; 3] {
        &self.astrom.bpn
    }

    /// Geocentric apparent place (true equator and equinox of date) of an ICRS astrometric direction: ERFA `atciqz`.
    pub fn apparent(&self, icrs: Direction) -> Direction {
        let (ra, dec) = icrs.radians();
        Direction::from_radians(atciqz(ra, dec, &mut { self.astrom }))
    }

    /// Geocentric apparent place of a star from its ICRS place at J2000.0 and its motion: ERFA `atciq`.
    pub fn apparent_of_star(&self, icrs: Direction, motion: Motion) -> Direction {
        let (ra, dec) = icrs.radians();
        let arcsec = |x: f64| (x / 3600.0).to_radians();
        Direction::from_radians(atciq(
            ra,
            dec,
            arcsec(motion.ra_arcsec) / dec.cos().max(1e-9),
            arcsec(motion.dec_arcsec),
            motion.parallax_arcsec,
            motion.radial_km_s,
            &mut { self.astrom },
        ))
    }

    /// ICRS astrometric direction of a geocentric apparent place: ERFA `aticq`.
    pub fn astrometric(&self, apparent: Direction) -> Direction {
        let (ra, dec) = apparent.radians();
        Direction::from_radians(aticq(ra, dec, &mut { self.astrom }))
    }

    /// The instant seen from a place on the ground, with a standard atmosphere.
    pub fn station(&self, ground: Ground) -> Station {
        Station::new(*self, ground, Air::standard(ground.elevation_m))
    }
}

/// The air over a site, for refraction.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Air {
    /// Hectopascal at the instrument; 0 for none.
    pub pressure_hpa: f64,
    /// Degrees Celsius.
    pub temperature_c: f64,
    /// Relative humidity, 0 to 1.
    pub humidity: f64,
    /// Wavelength, micrometres.
    pub wavelength_um: f64,
}

impl Air {
    /// 1013.25 hPa × (1 − 2.25577e-5 h)^5.2559 (ICAO standard atmosphere), 10 °C, 50 %, 0.55 µm.
    pub fn standard(elevation_m: f64) -> Air {
        let height = if elevation_m.is_finite() {
            elevation_m.clamp(-500.0, 11_000.0)
        } else {
            0.0
        };
        Air {
            pressure_hpa: 1013.25 * (1.0 - 2.25577e-5 * height).powf(5.2559),
            temperature_c: 10.0,
            humidity: 0.5,
            wavelength_um: 0.55,
        }
    }
}

/// A [`Moment`] at a site: diurnal aberration and parallax, local sidereal time, refraction.
#[derive(Clone, Copy, Debug)]
pub struct Station {
    /// The instant.
    pub moment: Moment,
    /// The place.
    pub ground: Ground,
    /// Local apparent sidereal time, radians (polar motion taken as none).
    pub sidereal_time_rad: f64,
    /// The observer from the Earth's centre, au, GCRS axes.
    pub from_centre_au: [f64; 3],
    astrom: IauAstrom,
    air: Air,
}

/// Metres in an astronomical unit (IAU 2012 resolution B2).
const AU_M: f64 = 149_597_870_700.0;

impl Station {
    /// At a place under a given air.
    pub fn new(moment: Moment, ground: Ground, air: Air) -> Station {
        let finite = |x: f64, limit: f64| {
            if x.is_finite() {
                x.clamp(-limit, limit)
            } else {
                0.0
            }
        };
        let longitude = finite(ground.longitude_deg, 720.0).to_radians();
        let latitude = finite(ground.latitude_deg, 90.0).to_radians();
        let height = finite(ground.elevation_m, 1e5);
        let tio = sp00(moment.tt.0, moment.tt.1);
        let mut astrom = moment.astrom;
        // as ERFA apco, with Greenwich apparent sidereal time for the Earth rotation angle and no polar motion
        let (mut true_frame, mut pv) = ([[0.0; 3]; 2], [[0.0; 3]; 2]);
        pvtob(
            longitude,
            latitude,
            height,
            0.0,
            0.0,
            tio,
            moment.sidereal_time_rad,
            &mut true_frame,
        );
        trxpv(&moment.astrom.bpn, &true_frame, &mut pv);
        let tt = moment.tt;
        apcs(
            tt.0,
            tt.1,
            &pv,
            &moment.earth.barycentric,
            &moment.earth.heliocentric[0],
            &mut astrom,
        );
        astrom.bpn = moment.astrom.bpn;
        astrom.eral = moment.sidereal_time_rad + longitude + tio;
        astrom.along = longitude + tio;
        (astrom.sphi, astrom.cphi) = latitude.sin_cos();
        (astrom.xpl, astrom.ypl, astrom.diurab) = (0.0, 0.0, 0.0);
        (astrom.refa, astrom.refb) = (0.0, 0.0);
        Station {
            moment,
            ground,
            sidereal_time_rad: astrom.eral,
            from_centre_au: pv[0].map(|m| m / AU_M),
            astrom,
            air,
        }
    }

    /// Azimuth, altitude, hour angle and declination, degrees, of an ICRS astrometric direction; refracted or airless.
    /// The hour angle is in (-180, 180], west positive. ERFA `atciqz` and `atioq`.
    pub fn observed(&self, icrs: Direction, refracted: bool) -> Observed {
        let mut astrom = self.astrom(refracted);
        let (ra, dec) = icrs.radians();
        let (ra, dec) = atciqz(ra, dec, &mut astrom);
        let (azimuth, zenith, hour_angle, declination, _) = atioq(ra, dec, &astrom);
        Observed {
            azimuth_deg: super::turn_deg(azimuth.to_degrees()),
            altitude_deg: 90.0 - zenith.to_degrees(),
            hour_angle_deg: super::half_turn_deg(hour_angle.to_degrees()),
            dec_deg: declination.to_degrees(),
        }
    }

    /// ICRS astrometric direction of an observed azimuth and altitude: ERFA `atoiq` and `aticq`.
    pub fn icrs_of_horizontal(
        &self,
        azimuth_deg: f64,
        altitude_deg: f64,
        refracted: bool,
    ) -> Direction {
        let zenith = 90.0 - altitude_deg.clamp(-90.0, 90.0);
        self.icrs_of_observed("A", azimuth_deg, zenith, refracted)
    }

    fn icrs_of_observed(
        &self,
        kind: &str,
        first_deg: f64,
        second_deg: f64,
        refracted: bool,
    ) -> Direction {
        if !first_deg.is_finite() || !second_deg.is_finite() {
            return Direction::new(0.0, 0.0);
        }
        let mut astrom = self.astrom(refracted);
        let (ra, dec) = atoiq(
            kind,
            first_deg.to_radians(),
            second_deg.to_radians(),
            &astrom,
        );
        Direction::from_radians(aticq(ra, dec, &mut astrom))
    }

    fn astrom(&self, refracted: bool) -> IauAstrom {
        let mut astrom = self.astrom;
        if refracted {
            let air = self.air;
            (astrom.refa, astrom.refb) = refco(
                air.pressure_hpa,
                air.temperature_c,
                air.humidity,
                air.wavelength_um,
            );
        }
        astrom
    }
}

/// What an instrument on the ground would read.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Observed {
    /// From north through east, [0, 360).
    pub azimuth_deg: f64,
    /// Above the horizontal plane.
    pub altitude_deg: f64,
    /// West positive, (-180, 180].
    pub hour_angle_deg: f64,
    /// Topocentric declination, true equator of date.
    pub dec_deg: f64,
}
