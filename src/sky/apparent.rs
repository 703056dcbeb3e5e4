//! Geocentric apparent place: true equator and equinox of date (IAU 2006/2000A), annual aberration, light deflection.

use super::Direction;
use super::moment::Moment;

/// ICRS astrometric direction of an apparent place, right ascension from the true equinox: ERFA `atic13`.
pub fn to_icrs(apparent: Direction, moment: &Moment) -> Direction {
    moment.astrometric(apparent)
}

/// Apparent place, right ascension from the true equinox, of an ICRS astrometric direction: ERFA `atci13`.
pub fn from_icrs(icrs: Direction, moment: &Moment) -> Direction {
    moment.apparent(icrs)
}

/// The same place with its right ascension counted from the true equinox, given one from the celestial intermediate origin.
pub fn from_origin_to_equinox(place: Direction, moment: &Moment) -> Direction {
    let shift = moment.equation_of_origins_rad.to_degrees();
    Direction::new(place.ra_deg - shift, place.dec_deg)
}

/// The same place with its right ascension counted from the celestial intermediate origin, given one from the true equinox.
pub fn from_equinox_to_origin(place: Direction, moment: &Moment) -> Direction {
    let shift = moment.equation_of_origins_rad.to_degrees();
    Direction::new(place.ra_deg + shift, place.dec_deg)
}
