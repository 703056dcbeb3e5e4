//! The Sun, the Moon and the planets.

use super::{Direction, Ground};

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

/// The astrometric place of a body, as seen from the ground given, else from the Earth's centre.
pub fn place(_body: Body, _utc: (f64, f64), _ground: Option<Ground>) -> BodyPlace {
    todo!()
}
