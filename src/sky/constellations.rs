//! Constellations by the IAU's boundaries of 1875.

use super::Direction;

/// The IAU abbreviation (`Tau`) of the constellation that holds an ICRS direction.
pub fn at(_icrs: Direction) -> &'static str {
    todo!()
}

/// How far a direction is from the nearest boundary of the named constellation, degrees; 0 inside. For wording only: to 0.1°.
pub fn distance_deg(_icrs: Direction, _abbreviation: &str) -> f64 {
    todo!()
}
