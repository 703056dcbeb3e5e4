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
//! system as in the Hipparcos Catalogue. Ecliptic: mean ecliptic and equinox of J2000.0, of B1950.0 or of date, IAU 2006.
//!
//! ## Source
//! ESA SP-1200 (1997), vol. 1, 1.5.3 for the galactic pole; Capitaine et al. 2003, A&A 412, 567 for the ecliptic.
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
use crate::sky::{Direction, ecliptic, galactic, separation_deg};
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
        ("galactic", vec![galactic::from_icrs(icrs)])
    } else {
        // of J2000.0, of B1950.0 or of date: which is seldom said, so the nearest counts
        let date = case.meant.instant.map_or((2_451_545.0, 0.0), |i| i.utc);
        let equinoxes = [(2_451_545.0, 0.0), (2_433_282.5, 0.0), date];
        let places = equinoxes.map(|equinox| ecliptic::from_icrs(icrs, equinox));
        ("ecliptic", places.to_vec())
    };
    let own = (stated.longitude.step() * latitude.to_radians().cos().abs())
        .max(stated.latitude.step())
        * 3600.0;
    let Some(distance) = places
        .iter()
        .map(|(l, b)| separation_deg(Direction::new(*l, *b), said) * 3600.0)
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
