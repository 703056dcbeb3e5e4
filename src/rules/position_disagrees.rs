//! Two forms of one position that are further apart than their steps.
//!
//! ## Why it matters
//! Somebody who writes a position twice gives it a free check. Where the two differ, one of them is wrong, and often one
//! digit mends it.
//!
//! ## What is asked
//! Whether every other form (decimal beside sexagesimal, one equinox beside another, galactic or ecliptic coordinates)
//! agrees with the position to the sum of their last digits on each axis.
//!
//! ## Formula
//! Both forms are brought to the ICRS; |Δα cos δ| and |Δδ| are held to the sums of the steps. Galactic: the IAU 1958
//! system as in the Hipparcos Catalogue. Ecliptic: mean obliquity of J2000.0, IAU 2006, or of the date.
//!
//! ## Source
//! ESA SP-1200 (1997), vol. 1, 1.5.3 for the galactic pole; Capitaine et al. 2003, A&A 412, 567 for the obliquity.
//!
//! ## Example
//! ```report
//! Object: candidate 587
//! RA 6h 05m 57.4s Dec -62° 32' 04" (J2000.0)
//! #  ^^^^^^^^^^^^^^^^^^^^^^^^^^^^^ 4° from the other form
//! Date: 2023-09-11 23:03 UT
//! (that is 95.4892°, -62.5344°)
//! ```
//!
//! ## What to do
//! Ask which form is right; the finding says which one digit would mend it. To let it pass: `[stet position-disagrees: reason]`.

use super::common::angles::{first_unit, gap, with_form};
use super::common::identity::here;
use super::common::words::{self, apart};
use super::{Case, Findings, Rule};
use crate::report::{Angle, AngleUnit, Position, PositionKind, Report, StatedOther, Weight};
use crate::sky::{Direction, separation_deg};
use crate::slips::digits;

pub(super) const RULE: Rule = Rule {
    name: "position-disagrees",
    weight: Weight::Query,
    of_place_or_time: true,
    gives_way_to: &["ra-unit-unclear"],
    source: include_str!("position_disagrees.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let report = case.report;
    for (index, (form, _)) in report.other_forms.iter().enumerate() {
        if form.first.is_none() || form.second.is_none() {
            continue;
        }
        let other = with_form(report, index);
        let Some(gap) = gap(case.meant, &case.mean(&other)) else {
            continue;
        };
        if !gap.beyond_steps {
            continue;
        }
        let advice =
            mend(report, form).unwrap_or_else(|| "Ask which of the two is right.".to_string());
        out.add(
            report.position.span,
            format!(
                "The two forms of the position, {} and {}, are {} apart, more than their last digits allow.",
                case.quote(report.position.span),
                case.quote(form.span),
                apart(gap.arcsec)
            ),
            advice,
        )
        .related
        .push((form.span, "the other form".to_string()));
    }
    for stated in &report.stated_other {
        other_system(case, stated, out);
    }
}

/// The one digit, sign or exchange of neighbours that makes the two forms agree, where they are of one equinox.
fn mend(report: &Report, form: &Position) -> Option<String> {
    if report.other_forms.iter().any(|(_, tag)| tag.is_some()) {
        return None;
    }
    let written = &report.position;
    if form.kind != PositionKind::Equatorial || written.kind != PositionKind::Equatorial {
        return None;
    }
    let (a, b) = (axes(written)?, axes(form)?);
    let apart = |k: usize| {
        let mut d = (a[k].0 - b[k].0).abs();
        if k == 0 {
            d = d.min(360.0 - d);
        }
        d > a[k].1 + b[k].1 + 1e-9
    };
    let wrong: Vec<usize> = (0..2).filter(|k| apart(*k)).collect();
    let [axis] = wrong.as_slice() else {
        return None;
    };
    let pick = |p: &Position| if *axis == 0 { p.first } else { p.second };
    let unit = |p: &Position| *axis == 0 && first_unit(p) == Some(AngleUnit::Hours);
    // an editor looks at the other form first: it is the one written in passing
    for (this, that) in [(form, written), (written, form)] {
        let angle = pick(this)?;
        let goal = axes(that)?[*axis];
        let agrees = |changed: &Angle| {
            let scale = if unit(this) { 15.0 } else { 1.0 };
            let mut d = (changed.value() * scale - goal.0).abs();
            if *axis == 0 {
                d = d.min(360.0 - d);
            }
            d <= changed.step() * scale + goal.1 + 1e-9
        };
        if *axis == 1 && agrees(&super::common::angles::negated(&angle)) {
            return Some(format!(
                "With the other sign, {} would agree with the other form.",
                words::angle(&angle, false)
            ));
        }
        for changed in digits::exchanged(&angle).chain(digits::miskeyed(&angle)) {
            if agrees(&changed.angle) {
                return Some(format!(
                    "One digit would mend it: {} read as {}.",
                    words::angle(&angle, unit(this)),
                    words::angle(&changed.angle, unit(this))
                ));
            }
        }
    }
    None
}

/// Value and step of both axes, degrees.
fn axes(position: &Position) -> Option<[(f64, f64); 2]> {
    let (first, second) = (position.first?, position.second?);
    let scale = match first_unit(position)? {
        AngleUnit::Hours => 15.0,
        AngleUnit::Degrees => 1.0,
    };
    Some([
        (first.value() * scale, first.step() * scale),
        (second.value(), second.step()),
    ])
}

/// Galactic or ecliptic coordinates beside the position.
fn other_system(case: &Case, stated: &StatedOther, out: &mut Findings) {
    let Some(icrs) = here(case.meant) else { return };
    let step = case.meant.reduced.map_or(0.0, |r| r.step_arcsec);
    let (longitude, latitude) = (stated.longitude.value(), stated.latitude.value());
    let said = Direction {
        ra_deg: longitude,
        dec_deg: latitude,
    };
    let (name, places) = if stated.galactic {
        ("galactic", vec![galactic(icrs)])
    } else {
        // of J2000.0, of B1950.0 or of date: which is seldom said, so the nearest counts
        let now = case
            .meant
            .instant
            .map_or(0.0, |i| ((i.utc.0 - 2_451_545.0) + i.utc.1) / 36_525.0);
        (
            "ecliptic",
            [0.0, -0.5, now].map(|t| ecliptic(icrs, t)).to_vec(),
        )
    };
    let own = (stated.longitude.step() * latitude.to_radians().cos().abs())
        .max(stated.latitude.step())
        * 3600.0;
    let Some(distance) = places
        .iter()
        .map(|place| separation_deg(*place, said) * 3600.0)
        .min_by(f64::total_cmp)
    else {
        return;
    };
    if distance > 1.5 * (own + step) + 1.0 {
        out.add(
            case.report.position.span,
            format!(
                "The {name} coordinates {} are {} from the position {}.",
                case.quote(stated.span),
                apart(distance),
                case.quote(case.report.position.span)
            ),
            "Ask which of the two is right.",
        )
        .related
        .push((stated.span, "the other form".to_string()));
    }
}

/// Galactic longitude and latitude of an ICRS direction (ESA SP-1200, vol. 1, 1.5.3: pole 192.85948°, 27.12825°, node 32.93192°).
fn galactic(icrs: Direction) -> Direction {
    let (pole_ra, pole_dec, node) = (192.859_48_f64, 27.128_25_f64.to_radians(), 32.931_92);
    let (d, a) = (
        icrs.dec_deg.to_radians(),
        (icrs.ra_deg - pole_ra).to_radians(),
    );
    let sin_b = d.sin() * pole_dec.sin() + d.cos() * pole_dec.cos() * a.cos();
    let y = d.sin() * pole_dec.cos() - d.cos() * pole_dec.sin() * a.cos();
    let x = d.cos() * a.sin();
    Direction {
        ra_deg: (node + y.atan2(x).to_degrees()).rem_euclid(360.0),
        dec_deg: sin_b.clamp(-1.0, 1.0).asin().to_degrees(),
    }
}

/// Ecliptic longitude and latitude, mean ecliptic, with the equinox `t` Julian centuries from J2000.0: obliquity 84381.406″ −
/// 46.836769″ t, general precession 5028.796195″ t (Capitaine et al. 2003); good to a few arcseconds within two centuries.
fn ecliptic(icrs: Direction, t: f64) -> Direction {
    let epsilon = (84_381.406_f64 / 3600.0).to_radians();
    let (d, a) = (icrs.dec_deg.to_radians(), icrs.ra_deg.to_radians());
    let y = a.sin() * d.cos() * epsilon.cos() + d.sin() * epsilon.sin();
    let z = d.sin() * epsilon.cos() - a.sin() * d.cos() * epsilon.sin();
    let x = a.cos() * d.cos();
    Direction {
        ra_deg: (y.atan2(x).to_degrees() + 5028.796_195 * t / 3600.0).rem_euclid(360.0),
        dec_deg: z.clamp(-1.0, 1.0).asin().to_degrees(),
    }
}
