//! The angles of a report: in what unit each counts, and how far apart two readings of one position are.

use crate::report::{Angle, AngleUnit, Mark, Meant, Position, PositionKind, Report};
use crate::rules::Case;

/// Every position of a report: the one that counts first, then its other forms.
pub fn positions(report: &Report) -> impl Iterator<Item = &Position> {
    std::iter::once(&report.position).chain(report.other_forms.iter().map(|(p, _)| p))
}

/// The unit in which the first angle of a position counts, as far as its words go; `None` where they leave it open.
pub fn first_unit(position: &Position) -> Option<AngleUnit> {
    let angle = position.first?;
    if position.kind == PositionKind::Horizontal {
        return Some(AngleUnit::Degrees);
    }
    position
        .first_unit
        .or_else(|| angle.marked_unit())
        .or_else(|| (angle.parts().len() > 1).then_some(AngleUnit::Hours))
        .or_else(|| (angle.value().abs() >= 24.0).then_some(AngleUnit::Degrees))
}

/// Minutes or seconds of an angle that are 60 or more.
pub fn has_sixty(angle: &Angle) -> bool {
    angle
        .parts()
        .iter()
        .skip(1)
        .any(|part| part.number.value() >= 60.0)
}

/// The report with another of its forms in the place of its position, and nothing left to compare with.
pub fn with_form(report: &Report, form: usize) -> Report {
    let mut other = report.clone();
    let (position, tag) = report.other_forms[form].clone();
    other.position = position;
    if let Some(tag) = tag {
        other
            .equinoxes
            .insert(0, (tag, crate::report::Nearness::Own));
    }
    other.other_forms.clear();
    other.stated_other.clear();
    other
}

/// A declination angle with its sign turned over, a compass letter included.
pub fn negated(angle: &Angle) -> Angle {
    use crate::report::{Compass, Sign};
    use crate::span::Spanned;
    let minus = !angle.is_negative();
    let mut turned = *angle;
    if let Some(compass) = turned.compass.as_mut() {
        compass.value = match compass.value {
            Compass::North => Compass::South,
            Compass::South => Compass::North,
            Compass::East => Compass::West,
            Compass::West => Compass::East,
        };
    }
    if turned.sign.is_some() || turned.compass.is_none() {
        let span = turned.sign.map_or(
            crate::span::Span::new(angle.span.start, angle.span.start),
            |s| s.span,
        );
        turned.sign = Some(Spanned::new(
            if minus { Sign::Minus } else { Sign::Plus },
            span,
        ));
    }
    turned
}

/// The first angle's mark made to say hours or degrees, and the unit settled.
pub fn in_unit(position: &Position, unit: AngleUnit) -> Position {
    let mut read = position.clone();
    read.first_unit = Some(unit);
    if let Some(angle) = read.first.as_mut()
        && let Some(part) = angle.parts_mut().first_mut()
        && matches!(part.mark, Mark::Hour | Mark::Degree)
    {
        part.mark = match unit {
            AngleUnit::Hours => Mark::Hour,
            AngleUnit::Degrees => Mark::Degree,
        };
    }
    read
}

/// How far two readings of one position are apart, and what their steps allow.
#[derive(Clone, Copy, Debug)]
pub struct Gap {
    /// Angle between them, arcsec.
    pub arcsec: f64,
    /// They differ by more than their steps on an axis.
    pub beyond_steps: bool,
}

/// Compares two reduced readings axis by axis: one step of each on each axis (WRITING 2a F13: two honest forms differ by up
/// to a unit of the last figure), a tenth of the other axis for the turn of the frame, and 0.1″ of rounding.
pub fn gap(a: &Meant, b: &Meant) -> Option<Gap> {
    let (a, b) = (a.reduced?, b.reduced?);
    let mut d_ra = (a.icrs_ra_deg - b.icrs_ra_deg).rem_euclid(360.0);
    if d_ra > 180.0 {
        d_ra -= 360.0;
    }
    let cos = ((a.icrs_dec_deg + b.icrs_dec_deg) / 2.0).to_radians().cos();
    let x = (d_ra * cos * 3600.0).abs();
    let y = ((a.icrs_dec_deg - b.icrs_dec_deg) * 3600.0).abs();
    let x_limit = a.ra_step_on_sky_arcsec + b.ra_step_on_sky_arcsec;
    let y_limit = a.dec_step_arcsec + b.dec_step_arcsec;
    let arcsec = crate::sky::separation_deg(
        crate::sky::Direction {
            ra_deg: a.icrs_ra_deg,
            dec_deg: a.icrs_dec_deg,
        },
        crate::sky::Direction {
            ra_deg: b.icrs_ra_deg,
            dec_deg: b.icrs_dec_deg,
        },
    ) * 3600.0;
    let beyond_steps = if a.icrs_dec_deg.abs() > 85.0 {
        arcsec > x_limit.hypot(y_limit) + 0.1
    } else {
        x > x_limit + 0.1 * y_limit + 0.1 || y > y_limit + 0.1 * x_limit + 0.1
    };
    Some(Gap {
        arcsec,
        beyond_steps,
    })
}

impl Case<'_> {
    /// What a changed report would mean under the same house rules.
    pub fn mean(&self, report: &Report) -> Meant {
        crate::reduction::mean_by(report, self.house, self.house.canonical, self.almanac)
    }

    /// How many rules of place and time a changed report would break, query or heavier.
    pub fn broken_by(&self, report: &Report) -> usize {
        let meant = self.mean(report);
        crate::rules::of_place_and_time(&Case {
            report,
            meant: &meant,
            ..*self
        })
        .len()
    }
}
