//! The numbers of a written position: degrees and steps, or `None` where they are no position.

use crate::report::{Angle, AngleUnit, Compass, Position, PositionKind, ReadPosition, Sign};
use crate::sky::{half_turn_deg, turn_deg};

/// The two angles of a position in degrees with their steps; `frame` is left open. `None` where a coordinate is missing,
/// out of range, or its sign cannot be read.
pub fn numbers(position: &Position) -> Option<ReadPosition> {
    let (first, second) = (position.first.as_ref()?, position.second.as_ref()?);
    if !well_formed(first) || !well_formed(second) {
        return None;
    }
    let unit = first_unit(position);
    let per_unit = if unit == AngleUnit::Hours { 15.0 } else { 1.0 };
    let size = magnitude(first) * per_unit;
    let first_deg = match position.kind {
        PositionKind::Equatorial if size >= 360.0 || (first.is_negative() && size > 0.0) => {
            return None;
        }
        PositionKind::Equatorial => size,
        PositionKind::HourAngle => hour_angle(first, size)?,
        PositionKind::Horizontal => azimuth(position, first, size)?,
    };
    let mut second_deg = if second.is_negative() {
        -magnitude(second)
    } else {
        magnitude(second)
    };
    if position.polar_distance || position.zenith_distance {
        if !(0.0..=180.0).contains(&second_deg) {
            return None;
        }
        second_deg = 90.0 - second_deg;
    }
    (second_deg.abs() <= 90.0).then_some(ReadPosition {
        frame: None,
        first_deg,
        second_deg,
        first_step_arcsec: first.step() * per_unit * 3600.0,
        second_step_arcsec: second.step() * 3600.0,
    })
}

/// The unit of the first angle: as settled by the text, by its own marks, else hours for a sexagesimal right ascension or
/// an hour angle, degrees for a lone decimal or an azimuth.
pub fn first_unit(position: &Position) -> AngleUnit {
    let Some(first) = position.first.as_ref() else {
        return AngleUnit::Degrees;
    };
    let usual = match position.kind {
        PositionKind::Horizontal => AngleUnit::Degrees,
        PositionKind::HourAngle => AngleUnit::Hours,
        PositionKind::Equatorial if first.parts().len() > 1 => AngleUnit::Hours,
        PositionKind::Equatorial => AngleUnit::Degrees,
    };
    position.first_unit.or(first.marked_unit()).unwrap_or(usual)
}

/// Minutes and seconds below 60, decimals only at the end, a sign that is one.
fn well_formed(angle: &Angle) -> bool {
    let parts = angle.parts();
    let below_sixty = parts.iter().skip(1).all(|p| p.number.value() < 60.0);
    let whole = parts.iter().rev().skip(1).all(|p| p.number.places == 0);
    below_sixty && whole && angle.sign.is_none_or(|s| s.value != Sign::Either)
}

/// The value without its sign, in its leading unit.
fn magnitude(angle: &Angle) -> f64 {
    angle.value().abs()
}

/// West is plus, east minus; a sign written counts before the compass. Within a day of the meridian.
fn hour_angle(angle: &Angle, size_deg: f64) -> Option<f64> {
    let minus = match (angle.sign, angle.compass) {
        (Some(sign), _) => sign.value == Sign::Minus,
        (None, Some(compass)) => compass.value == Compass::East,
        (None, None) => false,
    };
    let value = if minus { -size_deg } else { size_deg };
    (size_deg < 360.0).then(|| half_turn_deg(value))
}

fn azimuth(position: &Position, angle: &Angle, size_deg: f64) -> Option<f64> {
    if size_deg > 360.0 {
        return None;
    }
    let value = if angle.is_negative() {
        -size_deg
    } else {
        size_deg
    };
    let from_north = if position.azimuth_from_south {
        value + 180.0
    } else {
        value
    };
    Some(turn_deg(from_north))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::{Mark, Number, Part};
    use crate::span::{Span, Spanned};

    fn angle(sign: Option<Sign>, parts: &[(u64, u8)]) -> Angle {
        let parts: Vec<Part> = parts
            .iter()
            .map(|&(mantissa, places)| Part {
                number: Number {
                    mantissa,
                    places,
                    whole_digits: 2,
                },
                mark: Mark::Blank,
                span: Span::default(),
            })
            .collect();
        let sign = sign.map(|s| Spanned::new(s, Span::default()));
        Angle::new(sign, &parts, None, Span::default()).unwrap()
    }

    fn position(first: Angle, second: Angle) -> Position {
        Position {
            kind: PositionKind::Equatorial,
            first: Some(first),
            second: Some(second),
            first_unit: None,
            polar_distance: false,
            zenith_distance: false,
            azimuth_from_south: false,
            airless: false,
            labelled: false,
            span: Span::default(),
        }
    }

    /// By the arithmetic of the units alone.
    #[test]
    fn hours_degrees_steps_and_ranges() {
        let minus = Some(Sign::Minus);
        let read = numbers(&position(
            angle(None, &[(5, 0), (31, 0), (292, 1)]),
            angle(minus, &[(0, 0), (30, 0), (0, 0)]),
        ))
        .unwrap();
        assert!((read.first_deg - (5.0 + 31.0 / 60.0 + 29.2 / 3600.0) * 15.0).abs() < 1e-12);
        assert_eq!(read.second_deg, -0.5);
        assert!((read.first_step_arcsec - 1.5).abs() < 1e-12);
        assert_eq!(read.second_step_arcsec, 1.0);
        let lone = numbers(&position(
            angle(None, &[(836, 1)]),
            angle(None, &[(220, 1)]),
        ))
        .unwrap();
        assert_eq!(lone.first_deg, 83.6);
        for (first, second) in [
            (angle(None, &[(24, 0), (0, 0)]), angle(None, &[(1, 0)])),
            (angle(None, &[(5, 0), (60, 0)]), angle(None, &[(1, 0)])),
            (angle(minus, &[(5, 0), (10, 0)]), angle(None, &[(1, 0)])),
            (
                angle(None, &[(5, 0), (10, 0)]),
                angle(None, &[(90, 0), (1, 0)]),
            ),
            (
                angle(None, &[(5, 0), (10, 0)]),
                angle(Some(Sign::Either), &[(9, 0), (1, 0)]),
            ),
        ] {
            assert_eq!(numbers(&position(first, second)), None);
        }
        let mut polar = position(
            angle(None, &[(5, 0), (10, 0)]),
            angle(None, &[(100, 0), (0, 0)]),
        );
        polar.polar_distance = true;
        assert_eq!(numbers(&polar).unwrap().second_deg, -10.0);
    }
}
