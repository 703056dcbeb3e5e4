//! A declination without a sign.
//!
//! ## Why it matters
//! Many write no plus, and it is read as north. But a minus that was lost looks the same, most of all at 0°.
//!
//! ## What is asked
//! Whether the declination has a sign or a compass letter, or another form of the position that settles it. It is a note,
//! and a query where only the southern reading fits the rest of the report.
//!
//! ## Formula
//! Both signs are held to the horizon, darkness, the constellation and the named object.
//!
//! ## Source
//! The owner's count of 21,375 written positions (WRITING 2c): no sign in 13 to 24 % of texts; at 0° 9 of 474.
//!
//! ## Example
//! ```report
//! Object: Suspect 44
//! RA 12 23 06.8 Dec 43 29 19 (J2000.0)
//! #                 ^^^^^^^^ north, or a lost minus?
//! Date: 1996-04-30 20:46 UT
//! ```
//!
//! ## What to do
//! Write + or −. To let it pass: `[stet dec-sign-missing: reason]`.

use super::common::angles::negated;
use super::{Case, Findings, Rule};
use crate::report::{Mark, PositionKind, Sign, Weight};

pub(super) const RULE: Rule = Rule {
    name: "dec-sign-missing",
    weight: Weight::Note,
    of_place_or_time: false,
    gives_way_to: &["dec-out-of-range"],
    source: include_str!("dec_sign_missing.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let report = case.report;
    let position = &report.position;
    let Some(angle) = position.second else { return };
    if position.kind == PositionKind::Horizontal || position.polar_distance {
        return;
    }
    let unreadable = angle.sign.is_some_and(|s| s.value == Sign::Either);
    let said = |a: &crate::report::Angle| {
        a.compass.is_some() || a.sign.is_some_and(|s| s.value != Sign::Either)
    };
    let settled = report
        .other_forms
        .iter()
        .any(|(form, _)| form.second.as_ref().is_some_and(said));
    if said(&angle) || settled {
        return;
    }
    let broken = Mark::Broken == angle.parts()[0].mark;
    let mut southern = report.clone();
    southern.position.second = Some(negated(&angle));
    let only_south = case.broken_by(report) > 0 && case.broken_by(&southern) == 0;
    let words = case.quote(angle.span);
    if only_south {
        out.add_as(
            Weight::Query,
            angle.span,
            format!("The declination {words} has no sign, and only the southern reading fits the rest of the report."),
            "Ask whether a minus was lost.",
        );
    } else if unreadable {
        out.add_as(
            Weight::Query,
            angle.span,
            format!("The declination {words} has a sign that says both plus and minus; it is read as north."),
            "Ask which it is.",
        );
    } else {
        out.add(
            angle.span,
            format!(
                "The declination {words} has no sign; it is read as north{}.",
                if broken {
                    ", through a broken mark"
                } else {
                    ""
                }
            ),
            "Write + or −.",
        );
    }
}
