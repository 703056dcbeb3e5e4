//! Where a direction stands over a site's horizon, and when it is up.

use super::moment::{Air, Moment, Station};
use super::{Direction, Ground, half_turn_deg, time};

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
