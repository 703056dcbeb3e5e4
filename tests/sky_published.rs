//! Published values: every row of `tests/published/worked_examples.csv` that the crate reaches, with its source in the row.
//!
//! A row's own tolerance stands beside its computation, with why where it is wider than the published digits. The
//! rows that nothing here reaches are printed by name and counted, so that none is left out unseen.

#![allow(
    clippy::inconsistent_digit_grouping,
    clippy::approx_constant,
    clippy::excessive_precision
)] // digits as published

use colure::report::{Angle, Mark, Number, Part};
use colure::sky::bodies::{self, Body};
use colure::sky::icrs::Motion;
use colure::sky::moment::{Air, Moment, Station};
use colure::sky::*;
use colure::span::Span;
use std::collections::BTreeMap;

/// Degrees from sexagesimal parts; the sign is that of the first.
fn dms(d: f64, m: f64, s: f64) -> f64 {
    (d.abs() + m / 60.0 + s / 3600.0).copysign(d)
}

fn hms(h: f64, m: f64, s: f64) -> f64 {
    15.0 * dms(h, m, s)
}

fn rad(ra: f64, dec: f64) -> Direction {
    Direction::new(ra.to_degrees(), dec.to_degrees())
}

/// UTC of a TT calendar date with a decimal day.
fn tt(year: i32, month: u32, day: f64) -> (f64, f64) {
    let mjd = time::mjd_of(year, month, day.floor() as u32) as f64;
    time::utc_from_tt((2_400_000.5 + mjd, day.fract()))
}

fn utc(year: i32, month: u32, day: u32, hour: u32, minute: u32, second: f64) -> (f64, f64) {
    time::utc_from_civil(year, month, day, hour, minute, second).unwrap()
}

/// FK5 J2000.0 moved by a linear proper motion (seconds of time and arcsec a year) and precessed (IAU 1976).
fn precessed(place: Direction, pm_s: f64, pm_arcsec: f64, to_year: f64) -> Direction {
    let years = to_year - 2000.0;
    let moved = Direction::new(
        place.ra_deg + pm_s * years * 15.0 / 3600.0,
        place.dec_deg + pm_arcsec * years / 3600.0,
    );
    fk5::from_j2000(moved, to_year)
}

fn ground(latitude_deg: f64, longitude_deg: f64, elevation_m: f64) -> Ground {
    Ground {
        latitude_deg,
        longitude_deg,
        elevation_m,
    }
}

fn angle(parts: &[(u64, u8)]) -> Angle {
    let parts: Vec<Part> = parts
        .iter()
        .map(|&(mantissa, places)| Part {
            number: Number {
                mantissa,
                places,
                whole_digits: 2,
            },
            mark: Mark::None,
            span: Span::default(),
        })
        .collect();
    Angle::new(None, &parts, None, Span::default()).unwrap()
}

/// The declination from which a star never sets below an altitude, found by asking when it is up.
fn never_sets(latitude_deg: f64, altitude_deg: f64) -> f64 {
    let station = Moment::new((2_451_545.0, 0.0)).station(ground(latitude_deg, 0.0, 0.0));
    let (mut sets, mut stays) = (0.0, 90f64.copysign(latitude_deg));
    for _ in 0..60 {
        let middle = (sets + stays) / 2.0;
        let icrs = hour_angle::to_icrs(0.0, middle, &station);
        if horizon::up_at(icrs, &station, altitude_deg) == horizon::Up::Always {
            stays = middle;
        } else {
            sets = middle;
        }
    }
    stays
}

fn constellation(ra_h: f64, dec_deg: f64) -> &'static str {
    let b1950 = time::jd_of_besselian_epoch(1950.0);
    constellations::at(fk4_fk5::to_icrs(
        Direction::new(ra_h * 15.0, dec_deg),
        1950.0,
        b1950,
    ))
}

enum Got {
    /// A number in the row's unit, and how far it may be off.
    Number(f64, f64),
    /// Words.
    Words(&'static str),
}

const ARCSEC: f64 = 1.0 / 3600.0;

fn sirius(epoch: f64) -> Direction {
    let dec = dms(-16.0, 42.0, 58.0);
    let motion = Motion {
        ra_arcsec: -0.03847 * 15.0 * dec.to_radians().cos(),
        dec_arcsec: -1.2053,
        parallax_arcsec: 1.0 / 2.64,
        radial_km_s: -7.6,
    };
    icrs::moved(
        Direction::new(hms(6.0, 45.0, 8.871), dms(-16.0, 42.0, 57.99)),
        motion,
        2000.0,
        epoch,
    )
}

/// The HD 119288, zeta Tuc, 82 Eri and Groombridge 1830 rows: B1950 hours and degrees, s/cy, "/cy, parallax, km/s.
fn star_1950(
    ra: f64,
    dec: f64,
    s_cy: f64,
    arcsec_cy: f64,
    px: f64,
    rv: f64,
) -> (Direction, Motion) {
    let motion = Motion {
        ra_arcsec: s_cy * 15.0 / 100.0 * dec.to_radians().cos(),
        dec_arcsec: arcsec_cy / 100.0,
        parallax_arcsec: px,
        radial_km_s: rv,
    };
    fk4_fk5::star_to_fk5(Direction::new(ra, dec), motion)
}

fn s_per_century((place, motion): (Direction, Motion)) -> f64 {
    motion.ra_arcsec / place.dec_deg.to_radians().cos() / 15.0 * 100.0
}

fn computed(id: u32) -> Option<Got> {
    use Got::{Number as N, Words as W};
    let day =
        |y, m, d: f64| time::MJD_ZERO + time::mjd_of(y, m, d.floor() as u32) as f64 + d.fract();
    let whole = |y, m, d| time::mjd_of(y, m, d) as f64;
    let theta_per = Direction::new(hms(2.0, 44.0, 11.986), dms(49.0, 13.0, 42.48));
    let polaris = Direction::new(hms(2.0, 31.0, 48.704), dms(89.0, 15.0, 50.72));
    let theta_year = time::julian_epoch((2_400_000.5, whole(2028, 11, 13) + 0.19));
    let b1900 = time::julian_epoch(time::jd_of_besselian_epoch(1900.0));
    let polar = |year| precessed(polaris, 0.198_77, -0.0152, year);
    let fast = Motion {
        ra_arcsec: -0.35445,
        dec_arcsec: 0.59535,
        parallax_arcsec: 0.16499,
        radial_km_s: 0.0,
    };
    let faststar = Direction::new(hms(14.0, 34.0, 16.81183), dms(-12.0, 31.0, 10.3965));
    let wallace = || Moment::with_ut1(utc(2013, 4, 2, 23, 15, 43.55), 0.155_067_5);
    let apparent_body = |body, when| {
        let moment = Moment::new(when);
        let (place, distance) = bodies::direction_at(body, &moment, None);
        (moment.apparent(place), distance)
    };
    Some(match id {
        1 => N(day(1957, 10, 4.81), 1e-8),
        2 => N(day(2000, 1, 1.5), 0.0),
        3 => N(day(1999, 1, 1.0), 0.0),
        4 => N(day(1987, 1, 27.0), 0.0),
        5 => N(day(1987, 6, 19.5), 0.0),
        6 => N(day(1988, 1, 27.0), 0.0),
        7 => N(day(1988, 6, 19.5), 0.0),
        8 => N(day(1900, 1, 1.0), 0.0),
        9 => N(day(1600, 1, 1.0), 0.0),
        10 => N(day(1600, 12, 31.0), 0.0),
        19 => N(whole(1986, 2, 9) - whole(1910, 4, 20), 0.0),
        20 => N(day(1978, 1, 1.0), 0.0),
        21 => N(
            time::jd_from_utc(utc(2006, 12, 25, 6, 25, 0.0)) - 2_400_000.0,
            1e-7,
        ),
        22 => N(whole(1978, 11, 14) - whole(1977, 12, 31), 0.0),
        23 => N(whole(1988, 4, 22) - whole(1987, 12, 31), 0.0),
        // published to 4 decimals
        24 => N(time::jd_of_besselian_epoch(1950.0).1 + time::MJD_ZERO, 6e-5),
        25 => N(time::jd_of_julian_epoch(2050.0).1 + time::MJD_ZERO, 0.0),
        26 => N(time::jd_of_besselian_epoch(1900.0).1 + time::MJD_ZERO, 6e-5),
        27 => N(time::jd_of_besselian_epoch(1875.0).1 + time::MJD_ZERO, 1e-6),
        28 => N(
            time::besselian_epoch((2_415_019.8135, 30_103.186_48)),
            1e-11,
        ),
        29 => N(time::julian_epoch((2_451_545.0, -7392.5)), 1e-11),
        30 => N(time::jd_of_besselian_epoch(1957.3).1, 1e-9),
        31 => N(time::jd_of_julian_epoch(1996.8).1, 1e-9),
        32 => N(
            time::besselian_epoch(time::jd_of_julian_epoch(2000.0)),
            1e-9,
        ),
        33 => N(
            time::julian_epoch(time::jd_of_besselian_epoch(1950.0)),
            1e-9,
        ),
        34 => N(time::besselian_epoch((2_400_000.5, 45_123.0)), 1e-9),
        35 => N(time::julian_epoch((2_400_000.5, 42_999.0)), 1e-9),
        36 => N(
            precessed(theta_per, 0.034_25, -0.0895, theta_year).ra_deg,
            0.01 * ARCSEC,
        ),
        37 => N(
            precessed(theta_per, 0.034_25, -0.0895, theta_year).dec_deg,
            0.01 * ARCSEC,
        ),
        // IAU 2006 against the IAU 1976 of the book: 0.1″
        38 => {
            let years = theta_year - 2000.0;
            let moved = Direction::new(
                theta_per.ra_deg + 0.034_25 * years / 240.0,
                theta_per.dec_deg - 0.0895 * years / 3600.0,
            );
            N(
                mean::from_icrs(moved, time::jd_of_julian_epoch(theta_year)).ra_deg,
                0.15 * ARCSEC,
            )
        }
        // at the pole 0.01 s of RA is 0.003″ of the sky: the book's last digit
        39 => N(polar(b1900).ra_deg, 0.08 * ARCSEC),
        40 => N(polar(b1900).dec_deg, 0.006 * ARCSEC),
        41 => N(polar(2050.0).ra_deg, 0.08 * ARCSEC),
        42 => N(polar(2050.0).dec_deg, 0.006 * ARCSEC),
        43 => N(polar(2100.0).ra_deg, 0.08 * ARCSEC),
        44 => N(polar(2100.0).dec_deg, 0.006 * ARCSEC),
        45 | 46 => {
            let place = Direction::new(hms(2.0, 31.0, 46.3), dms(89.0, 15.0, 50.6));
            let then = fk5::from_j2000(place, 1985.0);
            // published to 0.01 s and 0.1″
            if id == 45 {
                N(then.ra_deg, 0.08 * ARCSEC)
            } else {
                N(then.dec_deg, 0.05 * ARCSEC)
            }
        }
        47 | 48 => {
            let matrix = fk4::newcomb(1925.0, 1950.0);
            let v = rad(6.28, -1.123).vector();
            let turned = std::array::from_fn(|i| (0..3).map(|j| matrix[i][j] * v[j]).sum());
            let then = Direction::of_vector(turned);
            // the row's unit is rad, its value degrees
            N(if id == 47 { then.ra_deg } else { then.dec_deg }, 1e-9)
        }
        49 | 50 => {
            let then = fk5::from_j2000(fk5::to_j2000(rad(0.0123, 1.0987), 2050.0), 1990.0);
            N(if id == 49 { then.ra_deg } else { then.dec_deg }, 1e-8)
        }
        // the book's formula is an approximate one: 1″
        53 | 54 => {
            let place = Direction::new(hms(10.0, 8.0, 22.3), dms(11.0, 58.0, 2.0));
            let then = precessed(place, -0.0169, 0.006, 1978.0);
            N(if id == 53 { then.ra_deg } else { then.dec_deg }, ARCSEC)
        }
        // over thousands of years the star's light time and the rounding of 2.64 pc show: 0.1″
        55 => N(sirius(1000.0).ra_deg, 0.1 * ARCSEC),
        56 => N(sirius(1000.0).dec_deg, 0.1 * ARCSEC),
        57 => N(sirius(0.0).ra_deg, 0.1 * ARCSEC),
        58 => N(sirius(0.0).dec_deg, 0.1 * ARCSEC),
        59 => N(sirius(-2000.0).ra_deg, 0.15 * ARCSEC),
        60 => N(sirius(-2000.0).dec_deg, 0.15 * ARCSEC),
        63 | 64 => {
            // the numbers of t_starpm in ERFA's test suite
            let (ra, dec) = (0.016_867_56f64, -1.093_989_828f64);
            let motion = Motion {
                ra_arcsec: (-1.783_235_16e-5f64).to_degrees() * 3600.0 * dec.cos(),
                dec_arcsec: 2.336_024_047e-6f64.to_degrees() * 3600.0,
                parallax_arcsec: 0.747_23,
                radial_km_s: -21.6,
            };
            let epoch = |mjd| time::julian_epoch((2_400_000.5, mjd));
            let then = icrs::moved(rad(ra, dec), motion, epoch(50_083.0), epoch(53_736.0));
            N(if id == 63 { then.ra_deg } else { then.dec_deg }, 1e-9)
        }
        65..=68 => {
            let (ra, dec) = (0.076_268_997_538_795_87_f64, -1.137_405_378_399_605_78_f64);
            let motion = Motion {
                ra_arcsec: 1.973_749_217_849e-5f64.to_degrees() * 3600.0 * dec.cos(),
                dec_arcsec: 5.659_714_913e-6f64.to_degrees() * 3600.0,
                parallax_arcsec: 0.134,
                radial_km_s: 8.7,
            };
            let (place, motion) = fk4_fk5::star_to_fk5(rad(ra, dec), motion);
            match id {
                65 => N(place.ra_deg, 1e-9),
                66 => N(place.dec_deg, 1e-9),
                67 => N(
                    (motion.ra_arcsec / 3600.0).to_radians() / place.dec_deg.to_radians().cos(),
                    1e-15,
                ),
                _ => N((motion.dec_arcsec / 3600.0).to_radians(), 1e-15),
            }
        }
        69 | 70 => {
            let then = fk4_fk5::to_fk5(
                rad(0.016_022_849_753_829_61, -0.116_434_792_909_906_02),
                1950.0,
                1_954.677_617_625_257,
            );
            N(if id == 69 { then.ra_deg } else { then.dec_deg }, 1e-9)
        }
        71 | 72 => {
            let then = fk4_fk5::to_fk5(rad(1.2, -0.3), 1950.0, 1960.0);
            N(if id == 71 { then.ra_deg } else { then.dec_deg }, 1e-9)
        }
        73 | 74 => {
            let then = fk4_fk5::from_fk5(rad(1.2, -0.3), 1950.0, 1960.0);
            N(if id == 73 { then.ra_deg } else { then.dec_deg }, 1e-9)
        }
        77 | 78 => {
            let motion = Motion {
                ra_arcsec: (-3e-5f64).to_degrees() * 3600.0 * (-1.23f64).cos(),
                dec_arcsec: 8e-6f64.to_degrees() * 3600.0,
                parallax_arcsec: 0.29,
                radial_km_s: -35.0,
            };
            let (then, _) = fk4_fk5::star_from_fk5(rad(4.567, -1.23), motion);
            N(if id == 77 { then.ra_deg } else { then.dec_deg }, 1e-9)
        }
        79 | 80 => {
            let (then, _) = star_1950(
                hms(13.0, 39.0, 44.526),
                dms(8.0, 38.0, 28.63),
                -2.59,
                -9.3,
                0.0,
                0.0,
            );
            N(
                if id == 79 { then.ra_deg } else { then.dec_deg },
                0.01 * ARCSEC,
            )
        }
        81 | 82 => {
            let dec = dms(8.0, 23.0, 17.69);
            let motion = Motion {
                ra_arcsec: -0.0257 * 15.0 * dec.to_radians().cos(),
                dec_arcsec: -0.090,
                ..Motion::default()
            };
            let (then, _) =
                fk4_fk5::star_from_fk5(Direction::new(hms(13.0, 42.0, 12.74), dec), motion);
            N(
                if id == 81 { then.ra_deg } else { then.dec_deg },
                0.01 * ARCSEC,
            )
        }
        // the B1950 place is remembered to 0.1″ only
        83 | 84 => {
            let place = Direction::new(hms(12.0, 26.0, 33.248), dms(2.0, 19.0, 43.29));
            let then = fk4_fk5::to_fk5(place, 1950.0, 1950.0);
            N(
                if id == 83 { then.ra_deg } else { then.dec_deg },
                0.2 * ARCSEC,
            )
        }
        85..=96 => {
            let star = match id {
                85..=88 => star_1950(
                    hms(0.0, 17.0, 28.774),
                    dms(-65.0, 10.0, 6.7),
                    27.141,
                    116.74,
                    0.134,
                    8.7,
                ),
                89..=92 => star_1950(
                    hms(3.0, 17.0, 55.847),
                    dms(-43.0, 15.0, 35.74),
                    27.827,
                    74.76,
                    0.156,
                    86.8,
                ),
                _ => star_1950(
                    hms(11.0, 50.0, 6.172),
                    dms(38.0, 4.0, 39.15),
                    33.873,
                    -580.57,
                    0.116,
                    -98.3,
                ),
            };
            match (id - 85) % 4 {
                0 => N(star.0.ra_deg, 0.002 * ARCSEC),
                1 => N(star.0.dec_deg, 0.001 * ARCSEC),
                2 => N(s_per_century(star), 2e-4),
                _ => N(star.1.dec_arcsec * 100.0, 1e-3),
            }
        }
        // IAU 2006/2000A and the Hipparcos frame against the book's IAU 1976/1980: 0.2″
        97..=99 => {
            let moment = Moment::new(tt(2028, 11, 13.19));
            let motion = Motion {
                ra_arcsec: 0.034_25 * 15.0 * theta_per.dec_deg.to_radians().cos(),
                dec_arcsec: -0.0895,
                ..Motion::default()
            };
            let icrs = fk5::to_icrs(theta_per, 2000.0, (time::J2000, 0.0));
            let then = moment.apparent_of_star(icrs, motion);
            N(
                if id == 98 { then.dec_deg } else { then.ra_deg },
                0.2 * ARCSEC,
            )
        }
        102..=104 => {
            let moment = wallace();
            let place = moment.apparent_of_star(faststar, fast);
            match id {
                102 => N(
                    apparent::from_equinox_to_origin(place, &moment).ra_deg,
                    1e-8,
                ),
                103 => N(place.dec_deg, 1e-8),
                _ => N(place.ra_deg, 1e-8),
            }
        }
        // polar motion (0.4″) is taken as none here: 0.5″ on the sky, 5″ of azimuth at 80° from the zenith never
        109..=112 => {
            let moment = Moment::with_ut1((2_456_384.5, 0.969_254_051), 0.155_067_5);
            let air = Air {
                pressure_hpa: 731.0,
                temperature_c: 12.8,
                humidity: 0.59,
                wavelength_um: 0.55,
            };
            let site = ground(
                (-1.2345856f64).to_degrees(),
                (-0.527800806f64).to_degrees(),
                2738.0,
            );
            let motion = Motion {
                ra_arcsec: 1e-5f64.to_degrees() * 3600.0 * 0.174f64.cos(),
                dec_arcsec: 5e-6f64.to_degrees() * 3600.0,
                parallax_arcsec: 0.1,
                radial_km_s: 55.0,
            };
            let place = moment.astrometric(moment.apparent_of_star(rad(2.71, 0.174), motion));
            let seen = Station::new(moment, site, air).observed(place, true);
            match id {
                109 => N(seen.azimuth_deg, 0.5 * ARCSEC),
                110 => N(90.0 - seen.altitude_deg, 0.5 * ARCSEC),
                111 => N(seen.hour_angle_deg, 0.5 * ARCSEC),
                _ => N(seen.dec_deg, 0.5 * ARCSEC),
            }
        }
        // the book's VSOP87 and IAU 1980 against epv00 and IAU 2000A: 0.2″
        116 => N(
            apparent_body(Body::Sun, tt(1992, 10, 13.0)).0.ra_deg,
            0.2 * ARCSEC,
        ),
        117 => N(
            apparent_body(Body::Sun, tt(1992, 10, 13.0)).0.dec_deg,
            0.2 * ARCSEC,
        ),
        118 => N(
            apparent_body(Body::Venus, tt(1992, 12, 20.0)).0.ra_deg,
            11.0 * ARCSEC,
        ),
        119 => N(
            apparent_body(Body::Venus, tt(1992, 12, 20.0)).0.dec_deg,
            11.0 * ARCSEC,
        ),
        // moon98 is the book's own theory, with light time and IAU 2000A: 3″
        120 => N(
            apparent_body(Body::Moon, tt(1992, 4, 12.0)).0.ra_deg,
            3.0 * ARCSEC,
        ),
        121 => N(
            apparent_body(Body::Moon, tt(1992, 4, 12.0)).0.dec_deg,
            3.0 * ARCSEC,
        ),
        // the book's distance is of one instant; ours from the Earth now to the Moon when the light left: 37 km at most
        122 => N(
            apparent_body(Body::Moon, tt(1992, 4, 12.0)).1 * 149_597_870.7,
            40.0,
        ),
        123 => N(
            apparent_body(Body::Sun, tt(1982, 5, 1.0)).0.ra_deg,
            0.2 * ARCSEC,
        ),
        124 => N(
            apparent_body(Body::Sun, tt(1982, 5, 1.0)).0.dec_deg,
            0.2 * ARCSEC,
        ),
        // IAU 2006/2000A against IAU 1982/1980 of the book: 0.06″, see row W130
        129 | 130 => N(
            turn_deg(
                Moment::new(utc(1987, 4, 10, 0, 0, 0.0))
                    .sidereal_time_rad
                    .to_degrees(),
            ),
            0.08 * ARCSEC,
        ),
        // the row takes TT for UT1; 64 s of TT are 0.0001″ of precession in sidereal time
        137 => {
            let moment = Moment::new((2_400_000.5, 53_736.0));
            N(
                turn_deg(moment.sidereal_time_rad.to_degrees()),
                3e-4 * ARCSEC,
            )
        }
        138 => {
            let moment = Moment::new((2_400_000.5, 54_388.0));
            let rotation = moment.sidereal_time_rad + moment.equation_of_origins_rad;
            N(turn_deg(rotation.to_degrees()), 1e-9)
        }
        // the book goes by whole seconds of sidereal time and no diurnal aberration: 1″
        139 | 140 => {
            let moment = Moment::new(utc(1987, 4, 10, 19, 21, 0.0));
            let place = Direction::new(hms(23.0, 9.0, 16.641), dms(-6.0, 43.0, 11.61));
            let station = moment.station(ground(dms(38.0, 55.0, 17.0), dms(-77.0, 3.0, 56.0), 0.0));
            let seen = station.observed(moment.astrometric(place), false);
            if id == 139 {
                N(seen.azimuth_deg, ARCSEC)
            } else {
                N(seen.altitude_deg, ARCSEC)
            }
        }
        // 27.04 m up the standard atmosphere has the formula's 1010 hPa
        152 => N(60.0 * horizon::refraction_deg(33.246 / 60.0, 27.04), 0.001),
        159..=161 => {
            let when = time::jd_to_utc(2_460_107.25, 0.0).unwrap();
            let site = ground(dms(50.0, 31.0, 36.0), dms(6.0, 51.0, 18.0), 369.0);
            let air = Air {
                pressure_hpa: 980.0,
                temperature_c: 9.85,
                humidity: 0.0,
                wavelength_um: 0.55,
            };
            let place = Direction::new(hms(6.0, 40.0, 58.2), dms(9.0, 53.0, 44.0));
            let station = Station::new(Moment::new(when), site, air);
            match id {
                // another refraction law: 6″
                159 => N(station.observed(place, true).altitude_deg, 6.0 * ARCSEC),
                160 => N(station.observed(place, false).altitude_deg, ARCSEC),
                _ => N(station.observed(place, true).azimuth_deg, 1.5 * ARCSEC),
            }
        }
        // published to a minute
        167 | 168 => {
            let noon = utc(2010, 8, 24, 12, 0, 0.0);
            let station = Moment::new(noon).station(ground(30.0, 64.0, 0.0));
            let place = Direction::new(hms(23.0, 39.0, 20.0), dms(21.0, 42.0, 0.0));
            let icrs = station.moment.astrometric(place);
            let horizon::Up::Between(spans) = horizon::up_at(icrs, &station, -34.0 / 60.0) else {
                return Some(N(f64::NAN, 0.0));
            };
            let hour = |t: (f64, f64)| time::day_and_seconds(t).1 / 3600.0;
            if id == 167 {
                N(hour(spans[1].0), 1.0 / 60.0)
            } else {
                N(hour(spans[0].1), 1.0 / 60.0)
            }
        }
        // the observer's own motion moves a star by up to 0.3″
        169 => N(never_sets(52.0, 0.0), 0.5 * ARCSEC),
        170 => N(never_sets(-35.0, 0.0), 0.5 * ARCSEC),
        171 => N(never_sets(52.0, -34.0 / 60.0), 0.5 * ARCSEC),
        172 => W(constellation(9.0, 65.0)),
        173 => W(constellation(23.5, -20.0)),
        174 => W(constellation(5.12, 9.12)),
        175 => W(constellation(9.4555, -19.9)),
        176 => W(constellation(12.8888, 22.0)),
        177 => W(constellation(15.6687, -12.1234)),
        178 => W(constellation(19.0, -40.0)),
        179 => W(constellation(6.2222, -81.1234)),
        180 => W(constellations::at_b1875(6.241 * 3600.0, 3.0 * 3600.0)),
        181 => W(constellations::at_b1875(6.2416 * 3600.0, 3.0 * 3600.0)),
        182 => W(constellations::at_b1875(6.24166 * 3600.0, 3.0 * 3600.0)),
        183 => W(constellations::at_b1875(6.24171 * 3600.0, 3.0 * 3600.0)),
        184 => W(constellations::at_b1875(22.0 * 3600.0, 86.16 * 3600.0)),
        185 => W(constellations::at_b1875(22.0 * 3600.0, 86.1666 * 3600.0)),
        186 => W(constellations::at_b1875(22.0 * 3600.0, 86.16668 * 3600.0)),
        187 => W(constellations::at_b1875(22.0 * 3600.0, 86.1668 * 3600.0)),
        188 => N(angle(&[(182, 0), (31, 0), (27, 0)]).value(), 5e-7),
        189 => N(angle(&[(18, 0), (31, 0), (27, 0)]).value(), 5e-9),
        190 => N(
            -angle(&[(45, 0), (13, 0), (272, 1)]).value().to_radians(),
            1e-12,
        ),
        191 => N(
            angle(&[(4, 0), (58, 0), (202, 1)]).value().to_radians() * 15.0,
            1e-12,
        ),
        205 => N(
            separation_deg(
                Direction::new(hms(14.0, 15.0, 39.7), dms(19.0, 10.0, 57.0)),
                Direction::new(hms(13.0, 25.0, 11.6), dms(-11.0, 9.0, 41.0)),
            ),
            0.5 * ARCSEC,
        ),
        206 => N(
            separation_deg(
                Direction::new(hms(5.0, 13.0, 31.7), dms(-8.0, 13.0, 30.0)),
                Direction::new(hms(6.0, 44.0, 13.4), dms(-16.0, 41.0, 11.0)),
            ),
            0.01 * ARCSEC,
        ),
        // published to 0.0001°, and the book's formula leaves the E-terms (0.34″) in
        207 | 208 => {
            let place = Direction::new(hms(17.0, 48.0, 59.74), dms(-14.0, 43.0, 8.2));
            let icrs = fk4_fk5::to_icrs(place, 1950.0, time::jd_of_besselian_epoch(1950.0));
            let (l, b) = galactic::from_icrs(icrs);
            N(if id == 207 { l } else { b }, 0.6 * ARCSEC)
        }
        209 | 210 => {
            // the numbers of t_icrs2g in ERFA's test suite
            let (l, b) = galactic::from_icrs(rad(5.933_807_430_222_719, -1.178_487_061_357_994_5));
            N(if id == 209 { l } else { b }, 1e-10)
        }
        // ICRS and the equinox of J2000.0 differ by 0.025″
        211 | 212 => {
            let place = Direction::new(hms(7.0, 45.0, 18.946), dms(28.0, 1.0, 34.26));
            let (l, b) = ecliptic::from_icrs(place, (time::J2000, 0.0));
            N(if id == 211 { l } else { b }, 0.05 * ARCSEC)
        }
        213 => N(time::delta_t_s(2_443_192.5), 0.1),
        214 => N(time::tai_minus_utc(time::mjd_of(2003, 6, 1)).unwrap(), 0.0),
        215 => N(time::tai_minus_utc(time::mjd_of(2008, 1, 17)).unwrap(), 0.0),
        216 => N(time::tai_minus_utc(time::mjd_of(2017, 9, 1)).unwrap(), 0.0),
        _ => return None,
    })
}

#[test]
fn worked_examples() {
    let mut counts: BTreeMap<String, (usize, Vec<String>)> = BTreeMap::new();
    let mut wrong = Vec::new();
    let mut reader = csv::Reader::from_reader(&include_bytes!("published/worked_examples.csv")[..]);
    for row in reader.records() {
        let row = row.unwrap();
        let entry = counts.entry(row[1].to_string()).or_default();
        let id: u32 = row[0][1..].parse().unwrap();
        match computed(id) {
            None => entry.1.push(row[0].to_string()),
            Some(got) => {
                entry.0 += 1;
                let (right, said) = match got {
                    Got::Words(words) => (words == &row[4], words.to_string()),
                    Got::Number(value, tolerance) => {
                        let published: f64 = row[5].parse().unwrap();
                        // the table's own column keeps 12 digits
                        let room = tolerance + published.abs() * 1e-11;
                        ((value - published).abs() <= room, value.to_string())
                    }
                };
                if !right {
                    wrong.push(format!(
                        "{} {} ({}): published {} {}, got {said}; {}",
                        &row[0], &row[2], &row[3], &row[5], &row[6], &row[7]
                    ));
                }
            }
        }
    }
    let mut total = 0;
    for (topic, (run, left)) in &counts {
        total += run;
        println!("{topic}: {run} run; left: {}", left.join(" "));
    }
    println!("{total} published values run");
    assert!(wrong.is_empty(), "\n{}", wrong.join("\n"));
    assert!(total >= 148, "only {total} rows run");
}
