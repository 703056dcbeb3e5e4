//! A right ascension that could be hours or degrees.
//!
//! ## Why it matters
//! 9.5958 is one place as hours and another, fifteen times nearer the zero, as degrees. Taken the wrong way the object is in
//! another part of the sky, and nobody notices.
//!
//! ## What is asked
//! Whether a unit, a label, a column's head or another form of the position settles it. Degree marks below 24° on a
//! sexagesimal right ascension do not settle it: hours are often given them by habit.
//!
//! ## Formula
//! α(hours) = 15 × α(degrees). Both readings are held to the rest of the report (horizon, darkness, constellation, named object).
//!
//! ## Source
//! Common practice, no source.
//!
//! ## Example
//! ```report
//! Object: Suspect 31
//! RA 9.5958 Dec +33.3969 (J2000.0)
//! #  ^^^^^^ hours or degrees?
//! Date: 1992-07-23 17:37 UT
//! ```
//!
//! ## What to do
//! Write `h` or `°` after the figure, or say it in the label. To let it pass: `[stet ra-unit-unclear: reason]`.

use super::common::angles::{first_unit, in_unit};
use super::common::words;
use super::{Case, Findings, Rule};
use crate::report::{AngleUnit, Mark, PositionKind, Weight};

pub(super) const RULE: Rule = Rule {
    name: "ra-unit-unclear",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("ra_unit_unclear.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let position = &case.report.position;
    let Some(angle) = position.first else { return };
    if position.kind != PositionKind::Equatorial || position.second.is_none() {
        return;
    }
    let value = angle.value();
    let parts = angle.parts();
    let degree_marks_on_hours = parts.len() > 1
        && parts[0].mark == Mark::Degree
        && position.first_unit != Some(AngleUnit::Hours);
    let bare = first_unit(position).is_none();
    let settled = case
        .report
        .other_forms
        .iter()
        .any(|(form, _)| first_unit(form).is_some() && form.second.is_some());
    if !(0.0..24.0).contains(&value) || !(bare || degree_marks_on_hours) || settled {
        return;
    }
    let broken = |unit| {
        let mut read = case.report.clone();
        read.position = in_unit(position, unit);
        case.broken_by(&read)
    };
    let (as_hours, as_degrees) = (broken(AngleUnit::Hours), broken(AngleUnit::Degrees));
    let favoured = match (as_hours, as_degrees) {
        (0, 1..) => "The rest of the report fits hours only.",
        (1.., 0) => "The rest of the report fits degrees only.",
        (0, 0) => "The rest of the report fits either.",
        _ => "The rest of the report fits neither.",
    };
    out.add(
        angle.span,
        format!(
            "{} could be hours ({}) or degrees ({}), and nothing in the text settles it.",
            case.quote(angle.span),
            words::hours(value * 15.0),
            words::hours(value)
        ),
        format!("{favoured} Write h or ° after the figure."),
    );
}
