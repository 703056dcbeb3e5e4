//! Where a direction stands over a site's horizon, and when it is up.

use super::bodies::{Body, roughly};
use super::moment::{Air, Moment, Station};
use super::{Direction, Ground, half_turn_deg, time, turn_deg};

/// Topocentric airless place.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct AltAz {
    /// Airless altitude, degrees.
    pub altitude_deg: f64,
    /// Azimuth from north through east, degrees.
    pub azimuth_deg: f64,
    /// Hour angle, hours, west positive, (-12, 12].
    pub hour_angle_h: f64,
}

/// Topocentric airless altitude, azimuth and hour angle of an ICRS direction.
pub fn place(icrs: Direction, utc: (f64, f64), ground: Ground) -> AltAz {
    place_at(icrs, &Moment::new(utc).station(ground))
}

/// The same with what the instant and the site share computed before.
pub fn place_at(icrs: Direction, station: &Station) -> AltAz {
    let seen = station.observed(icrs, false);
    AltAz {
        altitude_deg: seen.altitude_deg,
        azimuth_deg: seen.azimuth_deg,
        hour_angle_h: seen.hour_angle_deg / 15.0,
    }
}

/// A direction's way over a site within a day or two of an instant, to 5″ a day (15″ more across a leap second): what
/// changes slowly (precession, nutation, aberration) is held, and the Earth turns.
#[derive(Clone, Copy, Debug)]
pub struct Course {
    /// Apparent place at the instant, degrees, and its changes over the span: linear and quadratic.
    ra_deg: [f64; 3],
    dec_deg: [f64; 3],
    span_s: f64,
    sidereal_deg: f64,
    sin_phi: f64,
    cos_phi: f64,
    parallax_deg: f64,
}

impl Course {
    /// Of an ICRS direction that does not move.
    pub fn of_star(icrs: Direction, station: &Station) -> Course {
        let apparent = station.moment.apparent(icrs);
        Course::through([apparent; 3], 1.0, 0.0, station)
    }

    /// Of the Sun, to 10″ within a span of at most two days before and after the instant.
    pub fn of_sun(station: &Station, span_s: f64) -> Course {
        let sun = |seconds: f64| {
            let moment = Moment::quick(time::add_seconds(station.moment.utc, seconds));
            moment.apparent(roughly(Body::Sun, &moment))
        };
        // 8.794″ at the mean distance
        let parallax_deg = 8.794 / 3600.0;
        Course::through(
            [sun(-span_s), sun(0.0), sun(span_s)],
            span_s,
            parallax_deg,
            station,
        )
    }

    /// Through three apparent places, a span before, at, and a span after the instant.
    fn through(
        [before, at, after]: [Direction; 3],
        span_s: f64,
        parallax_deg: f64,
        station: &Station,
    ) -> Course {
        let curve = |before: f64, after: f64| [(after - before) / 2.0, (after + before) / 2.0];
        let turn = |other: Direction| half_turn_deg(other.ra_deg - at.ra_deg);
        let [ra_1, ra_2] = curve(turn(before), turn(after));
        let [dec_1, dec_2] = curve(before.dec_deg - at.dec_deg, after.dec_deg - at.dec_deg);
        let (sin_phi, cos_phi) = station.ground.latitude_deg.to_radians().sin_cos();
        Course {
            ra_deg: [at.ra_deg, ra_1, ra_2],
            dec_deg: [at.dec_deg, dec_1, dec_2],
            span_s,
            sidereal_deg: station.sidereal_time_rad.to_degrees(),
            sin_phi,
            cos_phi,
            parallax_deg,
        }
    }

    /// Airless altitude, azimuth and hour angle some seconds after the instant.
    pub fn after(&self, seconds: f64) -> AltAz {
        let x = seconds / self.span_s;
        let along = |[at, linear, quadratic]: [f64; 3]| at + (linear + quadratic * x) * x;
        let sidereal_deg = self.sidereal_deg + seconds * TURN_DEG_PER_S;
        let hour_angle_deg = half_turn_deg(sidereal_deg - along(self.ra_deg));
        let (sin_h, cos_h) = hour_angle_deg.to_radians().sin_cos();
        let (sin_dec, cos_dec) = along(self.dec_deg).to_radians().sin_cos();
        let up = self.sin_phi * sin_dec + self.cos_phi * cos_dec * cos_h;
        let north = self.cos_phi * sin_dec - self.sin_phi * cos_dec * cos_h;
        let west = cos_dec * sin_h;
        let altitude = up.atan2(north.hypot(west));
        AltAz {
            altitude_deg: altitude.to_degrees() - self.parallax_deg * altitude.cos(),
            azimuth_deg: turn_deg((-west).atan2(north).to_degrees()),
            hour_angle_h: hour_angle_deg / 15.0,
        }
    }
}

/// When a direction is above an altitude during the 24 hours centred on `utc`.
#[derive(Clone, PartialEq, Debug)]
pub enum Up {
    /// All the time.
    Always,
    /// Not at all.
    Never,
    /// From, to: UTC as two-part Julian dates, in order; cut at the ends of the day.
    Between(Vec<((f64, f64), (f64, f64))>),
}

/// Degrees the Earth turns in a second (ERFA `pvtob`).
const TURN_DEG_PER_S: f64 = 360.0 * 1.002_737_811_911_354_5 / 86_400.0;

/// When `icrs` stands above `limit_deg` (airless) in the 24 hours centred on `utc`, to about a second for a star:
/// cos H = (sin h − sin φ sin δ) / (cos φ cos δ).
pub fn up(icrs: Direction, utc: (f64, f64), ground: Ground, limit_deg: f64) -> Up {
    up_at(icrs, &Moment::new(utc).station(ground), limit_deg)
}

/// The same with what the instant and the site share computed before.
pub fn up_at(icrs: Direction, station: &Station, limit_deg: f64) -> Up {
    const HALF_DAY_S: f64 = 43_200.0;
    let seen = station.observed(icrs, false);
    let (sin_phi, cos_phi) = station.ground.latitude_deg.to_radians().sin_cos();
    let (sin_dec, cos_dec) = seen.dec_deg.to_radians().sin_cos();
    let over = limit_deg.to_radians().sin() - sin_phi * sin_dec;
    let reach = cos_phi * cos_dec;
    if over > reach {
        return Up::Never;
    }
    if over < -reach || reach <= 0.0 {
        return Up::Always;
    }
    let half = (over / reach).acos().to_degrees() / TURN_DEG_PER_S;
    let culmination = -half_turn_deg(seen.hour_angle_deg) / TURN_DEG_PER_S;
    let mut spans = Vec::new();
    for turn in [-1.0, 0.0, 1.0] {
        let middle = culmination + turn * 360.0 / TURN_DEG_PER_S;
        let (from, to) = (
            (middle - half).max(-HALF_DAY_S),
            (middle + half).min(HALF_DAY_S),
        );
        if from < to {
            let utc = station.moment.utc;
            spans.push((time::add_seconds(utc, from), time::add_seconds(utc, to)));
        }
    }
    if spans.is_empty() {
        Up::Never
    } else {
        Up::Between(spans)
    }
}

/// Refraction at an airless altitude by a standard atmosphere at the site's height, degrees (0 well below the horizon):
/// Sæmundsson 1986 (Sky & Telescope 72, 70; Meeus 1998, eq. 16.4), 1010 hPa and 10 °C, scaled by pressure; good to 0.1′.
pub fn refraction_deg(airless_altitude_deg: f64, elevation_m: f64) -> f64 {
    let h = airless_altitude_deg;
    if !h.is_finite() || h <= -3.0 {
        return 0.0;
    }
    // below a degree under the horizon the formula is not meant to hold: faded out
    let fade = ((h + 3.0) / 2.0).min(1.0);
    let at = h.clamp(-1.0, 90.0);
    let arcmin = 1.02 / (at + 10.3 / (at + 5.11)).to_radians().tan();
    let pressure = Air::standard(elevation_m).pressure_hpa / 1010.0;
    (arcmin * pressure * fade / 60.0).max(0.0)
}

/// Dip of the sea horizon for a height above it, degrees: 1.76′ √h, refraction included (Nautical Almanac).
pub fn dip_deg(elevation_m: f64) -> f64 {
    1.76 / 60.0 * elevation_m.max(0.0).sqrt()
}

/// The lowest declination that ever clears an altitude at a latitude, and the highest: degrees. Seen north of the first
/// and south of the second only: (φ − 90° + h, φ + 90° − h).
pub fn declinations_that_rise(latitude_deg: f64, altitude_deg: f64) -> (f64, f64) {
    (
        latitude_deg - 90.0 + altitude_deg,
        latitude_deg + 90.0 - altitude_deg,
    )
}
