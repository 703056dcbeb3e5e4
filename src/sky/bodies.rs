//! The Sun, the Moon and the planets.
//!
//! Sun: ERFA `epv00`; Moon: `moon98` (Meeus 1998); planets: `plan94` (Simon et al. 1994). What they may be off is in
//! [`Body::theory_arcsec`]: the worst seen at 200 instants from 1900 to 2050 against JPL DE421.

use super::moment::{Moment, Station};
use super::{Direction, Ground, separation_deg};
use sofars::eph::{moon98, plan94};

/// A body of the solar system.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
#[allow(missing_docs)]
pub enum Body {
    Sun,
    Moon,
    Mercury,
    Venus,
    Mars,
    Jupiter,
    Saturn,
    Uranus,
    Neptune,
}

impl Body {
    /// All of them.
    pub const ALL: [Body; 9] = [
        Body::Sun,
        Body::Moon,
        Body::Mercury,
        Body::Venus,
        Body::Mars,
        Body::Jupiter,
        Body::Saturn,
        Body::Uranus,
        Body::Neptune,
    ];

    /// What its theory may be off at worst, arcsec (src/sky/data/README.md).
    pub fn theory_arcsec(self) -> f64 {
        match self {
            Body::Sun => 0.02,
            Body::Moon => 17.0,
            Body::Mercury => 1.9,
            Body::Venus => 11.0,
            Body::Mars => 63.0,
            Body::Jupiter => 81.0,
            Body::Saturn => 97.0,
            Body::Uranus => 91.0,
            Body::Neptune => 10.2,
        }
    }

    /// Its equatorial radius, km: IAU Working Group on Cartographic Coordinates 2015 (Archinal et al. 2018); the Sun by
    /// IAU 2015 resolution B3.
    pub fn radius_km(self) -> f64 {
        match self {
            Body::Sun => 695_700.0,
            Body::Moon => 1737.4,
            Body::Mercury => 2440.53,
            Body::Venus => 6051.8,
            Body::Mars => 3396.19,
            Body::Jupiter => 71_492.0,
            Body::Saturn => 60_268.0,
            Body::Uranus => 25_559.0,
            Body::Neptune => 24_764.0,
        }
    }

    /// Its number in `plan94`.
    fn plan94(self) -> Option<i32> {
        match self {
            Body::Sun | Body::Moon => None,
            Body::Mercury => Some(1),
            Body::Venus => Some(2),
            Body::Mars => Some(4),
            Body::Jupiter => Some(5),
            Body::Saturn => Some(6),
            Body::Uranus => Some(7),
            Body::Neptune => Some(8),
        }
    }
}

/// Where a body is.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct BodyPlace {
    /// Astrometric ICRS place (light-time taken, no aberration), geocentric or from the ground given.
    pub icrs: Direction,
    /// Distance, au.
    pub distance_au: f64,
    /// Radius of its disc, degrees.
    pub semidiameter_deg: f64,
    /// Motion on the sky, arcsec an hour.
    pub motion_arcsec_per_h: f64,
    /// Largest parallax it can have from the ground, arcsec.
    pub parallax_arcsec: f64,
    /// What its theory may be off at worst, arcsec.
    pub theory_arcsec: f64,
}

const AU_KM: f64 = 149_597_870.7;
const EARTH_RADIUS_KM: f64 = 6378.137;
/// Light time for one astronomical unit, days (IAU 2012: 149597870700 m / 299792458 m/s).
const LIGHT_DAYS_PER_AU: f64 = 499.004_783_836_156_4 / 86_400.0;

/// The astrometric place of a body, as seen from the ground given, else from the Earth's centre.
pub fn place(body: Body, utc: (f64, f64), ground: Option<Ground>) -> BodyPlace {
    let moment = Moment::new(utc);
    let station = ground.map(|g| moment.station(g));
    place_at(body, &moment, station.as_ref())
}

/// The same with what the instant and the site share computed before.
pub fn place_at(body: Body, moment: &Moment, station: Option<&Station>) -> BodyPlace {
    let observer = station.map_or([0.0; 3], |s| s.from_centre_au);
    let vector = astrometric(body, moment, observer);
    let distance_au = norm(vector);
    let icrs = Direction::of_vector(vector);
    let ratio = |km: f64| (km / AU_KM / distance_au).min(1.0).asin().to_degrees();
    BodyPlace {
        icrs,
        distance_au,
        semidiameter_deg: ratio(body.radius_km()),
        motion_arcsec_per_h: motion(body, moment),
        parallax_arcsec: ratio(EARTH_RADIUS_KM) * 3600.0,
        theory_arcsec: body.theory_arcsec(),
    }
}

/// Only the astrometric direction, and the distance in au: the cheap part of [`place_at`].
pub fn direction_at(body: Body, moment: &Moment, station: Option<&Station>) -> (Direction, f64) {
    let observer = station.map_or([0.0; 3], |s| s.from_centre_au);
    let vector = astrometric(body, moment, observer);
    (Direction::of_vector(vector), norm(vector))
}

/// The Moon's direction within 0.5° (from 1900 to 2100), and its mean distance in au: the low-precision formula of the Astronomical Almanac
/// (page D46, from memory), mean equinox of date brought to the ICRS.
pub(crate) fn moon_to_half_a_degree(
    moment: &Moment,
    station: Option<&Station>,
) -> (Direction, f64) {
    const MEAN_AU: f64 = 384_400.0 / AU_KM;
    let t = ((moment.tt.0 - super::time::J2000) + moment.tt.1) / 36_525.0;
    let sine = |at: f64, rate: f64| (at + rate * t).to_radians().sin();
    let longitude = 218.32 + 481_267.881 * t + 6.29 * sine(135.0, 477_198.87)
        - 1.27 * sine(259.3, -413_335.36)
        + 0.66 * sine(235.7, 890_534.22)
        + 0.21 * sine(269.9, 954_397.74)
        - 0.19 * sine(357.5, 35_999.05)
        - 0.11 * sine(186.5, 966_404.03);
    let latitude = 5.13 * sine(93.3, 483_202.02) + 0.28 * sine(228.2, 960_400.89)
        - 0.28 * sine(318.3, 6003.15)
        - 0.17 * sine(217.6, -407_332.21);
    // the obliquity of J2000.0, and precession in longitude alone: good enough for half a degree
    let (sin_l, cos_l) = (longitude - 1.397 * t).to_radians().sin_cos();
    let (sin_b, cos_b) = latitude.to_radians().sin_cos();
    let (sin_e, cos_e) = 23.4393_f64.to_radians().sin_cos();
    let geocentric = [
        cos_b * cos_l,
        cos_e * cos_b * sin_l - sin_e * sin_b,
        sin_e * cos_b * sin_l + cos_e * sin_b,
    ];
    let observer = station.map_or([0.0; 3], |s| s.from_centre_au);
    let vector: [f64; 3] = std::array::from_fn(|i| MEAN_AU * geocentric[i] - observer[i]);
    (Direction::of_vector(vector), MEAN_AU)
}

/// Where a body is to 2′, light-time and the observer left out (the Moon: to 1.6°), for telling that it is far off.
pub fn roughly(body: Body, moment: &Moment) -> Direction {
    match body {
        Body::Moon => moon_to_half_a_degree(moment, None).0,
        _ => {
            let (earth, there) = (moment.earth.barycentric[0], barycentric(body, moment, 0.0));
            Direction::of_vector(std::array::from_fn(|i| there[i] - earth[i]))
        }
    }
}

/// How much of the Moon's disc is lit, 0 to 1, and whether it is waxing (Meeus 1998, ch. 48, geocentric).
pub fn moon_phase(moment: &Moment) -> (f64, bool) {
    let (moon, moon_au) = direction_at(Body::Moon, moment, None);
    let (sun, sun_au) = direction_at(Body::Sun, moment, None);
    let elongation = separation_deg(moon, sun).to_radians();
    let phase_angle = (sun_au * elongation.sin()).atan2(moon_au - sun_au * elongation.cos());
    let (moon_l, _) = super::ecliptic::from_icrs(moon, moment.tt);
    let (sun_l, _) = super::ecliptic::from_icrs(sun, moment.tt);
    (
        (1.0 + phase_angle.cos()) / 2.0,
        super::turn_deg(moon_l - sun_l) < 180.0,
    )
}

/// From the observer (given from the Earth's centre, au) to where the body was when its light left, au.
fn astrometric(body: Body, moment: &Moment, observer: [f64; 3]) -> [f64; 3] {
    let earth = moment.earth.barycentric;
    let eye: [f64; 3] = std::array::from_fn(|i| earth[0][i] + observer[i]);
    // the Moon's light is 1.28 s on its way, give or take 0.08: 0.04″ of its motion
    let (mut days, rounds) = match body {
        Body::Moon => (0.002_57 * LIGHT_DAYS_PER_AU, 1),
        Body::Sun => (0.0, 1), // it moves 0.0001″ in the eight minutes
        _ => (0.0, 3),
    };
    let mut vector = [0.0; 3];
    for _ in 0..rounds {
        let then = barycentric(body, moment, days);
        vector = std::array::from_fn(|i| then[i] - eye[i]);
        days = norm(vector) * LIGHT_DAYS_PER_AU;
    }
    vector
}

/// The body from the barycentre some days before the moment, au.
fn barycentric(body: Body, moment: &Moment, days_before: f64) -> [f64; 3] {
    let (a, b) = (moment.tt.0, moment.tt.1 - days_before);
    let moved = |pv: [[f64; 3]; 2]| -> [f64; 3] {
        std::array::from_fn(|i| pv[0][i] - pv[1][i] * days_before)
    };
    let (centre, from_centre) = match body.plan94() {
        Some(number) => {
            let planet = plan94(a, b, number).map_or([[0.0; 3]; 2], |p| p.0);
            (moved(moment.earth.sun()), planet[0])
        }
        None if body == Body::Moon => (moved(moment.earth.barycentric), moon98(a, b)[0]),
        None => (moved(moment.earth.sun()), [0.0; 3]),
    };
    std::array::from_fn(|i| centre[i] + from_centre[i])
}

/// Geocentric motion on the sky over the half hour after, arcsec an hour.
fn motion(body: Body, moment: &Moment) -> f64 {
    const HOURS: f64 = 0.5;
    let mut later = *moment;
    later.tt.1 += HOURS / 24.0;
    let step = |[place, speed]: &mut [[f64; 3]; 2]| {
        for (x, v) in place.iter_mut().zip(speed) {
            *x += *v * HOURS / 24.0;
        }
    };
    step(&mut later.earth.barycentric);
    step(&mut later.earth.heliocentric);
    let (now, _) = direction_at(body, moment, None);
    let (then, _) = direction_at(body, &later, None);
    separation_deg(now, then) * 3600.0 / HOURS
}

fn norm(v: [f64; 3]) -> f64 {
    (v[0] * v[0] + v[1] * v[1] + v[2] * v[2]).sqrt()
}
