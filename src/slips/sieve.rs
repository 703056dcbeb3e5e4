//! A quick look at a changed position, so that most of the hundreds of changed digits need no full reduction.
//!
//! It works with differences from what the report as written came to, is lenient, and decides nothing: what passes is held
//! to all the facts.

use crate::report::{AngleUnit, Equinox, HorizonQuantity, Meant, Position, PositionKind, System};
use crate::rules::{Case, Sisters, angles};
use crate::sky::{Direction, separation_deg};

/// What a quick look needs.
pub struct Sieve<'a> {
    case: Case<'a>,
    sisters: Option<&'a Sisters>,
    /// Where the named object is, and how far from there is too far, degrees.
    object: Option<(Direction, f64)>,
    first_deg: f64,
    second_deg: f64,
    icrs: (f64, f64),
    hour_angle_deg: Option<f64>,
    latitude_deg: f64,
    altitudes: Vec<(f64, f64)>,
    constellation: Option<&'static str>,
    on_icrs: bool,
    useful: bool,
}

impl<'a> Sieve<'a> {
    /// Prepares the look for a report.
    pub fn new(case: &Case<'a>, sisters: Option<&'a Sisters>) -> Sieve<'a> {
        let meant = case.meant;
        let read = meant.read;
        let equatorial = case.report.position.kind == PositionKind::Equatorial;
        let frame = read.and_then(|r| r.frame);
        let on_icrs = frame.is_some_and(|f| {
            matches!(f.system, System::Icrs | System::Fk5 | System::Mean)
                && f.equinox == Equinox::Julian(2000.0)
        });
        let altitudes = case
            .report
            .stated_horizon
            .iter()
            .filter_map(|s| match s.quantity {
                HorizonQuantity::Altitude => Some((s.angle.value(), s.angle.step())),
                HorizonQuantity::ZenithDistance => Some((90.0 - s.angle.value(), s.angle.step())),
                _ => None,
            })
            .collect();
        let object = case.named.and_then(|known| known.expected(case)).map(|e| {
            let reach = e.radius_arcsec.max(120.0) + 2.0 * e.slack_arcsec + 600.0;
            let step = meant.reduced.map_or(0.0, |r| 3.0 * r.step_arcsec);
            (e.icrs, (reach + step) / 3600.0 + slack(on_icrs))
        });
        Sieve {
            case: *case,
            sisters,
            object,
            first_deg: read.map_or(0.0, |r| r.first_deg),
            second_deg: read.map_or(0.0, |r| r.second_deg),
            icrs: meant
                .reduced
                .map_or((0.0, 0.0), |r| (r.icrs_ra_deg, r.icrs_dec_deg)),
            hour_angle_deg: meant.horizon.map(|h| h.hour_angle_h * 15.0),
            latitude_deg: meant.site.as_ref().map_or(0.0, |s| s.latitude_deg),
            altitudes,
            constellation: case.report.constellation.as_ref().map(|c| c.value),
            on_icrs,
            useful: equatorial && read.is_some() && meant.reduced.is_some(),
        }
    }

    /// Could this position with a changed digit fit? Only these are looked at: there are hundreds of them.
    pub fn passes(&self, position: &Position) -> bool {
        let (true, Some(first), Some(second)) = (self.useful, position.first, position.second)
        else {
            return true;
        };
        let scale = if angles::first_unit(position) == Some(AngleUnit::Hours) {
            15.0
        } else {
            1.0
        };
        let second_deg = if position.polar_distance {
            90.0 - second.value()
        } else {
            second.value()
        };
        let (d_first, d_second) = (
            first.value() * scale - self.first_deg,
            second_deg - self.second_deg,
        );
        let place = Direction {
            ra_deg: (self.icrs.0 + d_first).rem_euclid(360.0),
            dec_deg: (self.icrs.1 + d_second).clamp(-90.0, 90.0),
        };
        if self
            .object
            .is_some_and(|(at, reach)| separation_deg(place, at) > reach)
        {
            return false;
        }
        if let (Some(sisters), Some(mut reduced)) = (self.sisters, self.case.meant.reduced) {
            (reduced.icrs_ra_deg, reduced.icrs_dec_deg) = (place.ra_deg, place.dec_deg);
            let near = Meant {
                reduced: Some(reduced),
                instant: self.case.meant.instant,
                ..Meant::default()
            };
            if let Some((false, arcsec)) = sisters.agrees(self.case.report, &near)
                && arcsec > 600.0 + slack(self.on_icrs) * 3600.0
            {
                return false;
            }
        }
        if let Some(hour_angle) = self.hour_angle_deg {
            // precession turns the axes by less than a degree within a lifetime of the equinox: two degrees are lenient
            let (h, d, phi) = (
                (hour_angle - d_first).to_radians(),
                (self.icrs.1 + d_second).clamp(-90.0, 90.0).to_radians(),
                self.latitude_deg.to_radians(),
            );
            let altitude = (phi.sin() * d.sin() + phi.cos() * d.cos() * h.cos())
                .clamp(-1.0, 1.0)
                .asin()
                .to_degrees();
            if altitude < -3.0
                || self
                    .altitudes
                    .iter()
                    .any(|(said, step)| (said - altitude).abs() > 3.0 + step)
            {
                return false;
            }
        }
        match self.constellation {
            Some(said) if self.on_icrs => {
                crate::sky::constellations::at(place) == said
                    || crate::sky::constellations::distance_deg(place, said) < 0.1
            }
            _ => true,
        }
    }
}

/// What the quick look may be off, degrees: precession turns a difference in another frame's coordinates.
fn slack(on_icrs: bool) -> f64 {
    if on_icrs { 0.0 } else { 3.0 }
}
