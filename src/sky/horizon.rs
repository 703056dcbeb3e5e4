//! Where a direction stands over a site's horizon, and when it is up.

use super::{Direction, Ground};

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
pub fn place(_icrs: Direction, _utc: (f64, f64), _ground: Ground) -> AltAz {
    todo!()
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

/// When `icrs` stands above `limit_deg` (airless) in the 24 hours centred on `utc`, to about a minute.
pub fn up(_icrs: Direction, _utc: (f64, f64), _ground: Ground, _limit_deg: f64) -> Up {
    todo!()
}

/// Refraction at an apparent altitude by a standard atmosphere at the site's height, degrees (0 well below the horizon).
pub fn refraction_deg(_airless_altitude_deg: f64, _elevation_m: f64) -> f64 {
    todo!()
}

/// Dip of the sea horizon for a height above it, degrees.
pub fn dip_deg(_elevation_m: f64) -> f64 {
    todo!()
}
