//! Marks of the other coordinate, or of two systems, on one number.
//!
//! ## Why it matters
//! `6h 11° 40s` or `51h 20′ 08″` for a declination says that figures or columns changed places, or that the writer was
//! not sure what was being written. What the figures mean is then a guess.
//!
//! ## What is asked
//! Whether the marks of each angle belong together: h m s for hours; °, ′ and ″ (or d m s) for degrees; colons alone.
//!
//! ## Formula
//! None: each mark is held to those of its own number.
//!
//! ## Source
//! Common practice, no source. Minutes and seconds of arc written m and s after degrees are usual and pass.
//!
//! ## Example
//! ```report
//! Object: Suspect 40
//! RA 6h 11° 40s Dec +14 02 10 (J2000.0)
//! #  ^^^^^^^^^^ a degree mark among hours
//! Date: 2018-02-11 20:05 UT
//! ```
//!
//! ## What to do
//! Ask which was meant. To let it pass: `[stet marks-mixed: reason]`.

use super::common::angles::positions;
use super::{Case, Findings, Rule};
use crate::report::{Angle, Mark, PositionKind, Weight};

pub(super) const RULE: Rule = Rule {
    name: "marks-mixed",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("marks_mixed.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    for position in positions(case.report) {
        let never_hours = position.kind == PositionKind::Horizontal;
        if let Some(angle) = position.first {
            say(case, &angle, trouble(&angle, !never_hours), out);
        }
        if let Some(angle) = position.second {
            say(case, &angle, trouble(&angle, false), out);
        }
    }
}

fn say(case: &Case, angle: &Angle, trouble: Option<&'static str>, out: &mut Findings) {
    if let Some(trouble) = trouble {
        out.add(
            angle.span,
            format!(
                "The marks of {} do not belong together: {trouble}.",
                case.quote(angle.span)
            ),
            "Ask which was meant: hours take h m s, degrees take ° ′ ″.",
        );
    }
}

/// What is wrong with the marks of one angle.
fn trouble(angle: &Angle, may_be_hours: bool) -> Option<&'static str> {
    let marks: Vec<Mark> = angle.parts().iter().map(|p| p.mark).collect();
    let said = |wanted: &[Mark]| marks.iter().any(|m| wanted.contains(m));
    let letters = [
        Mark::Hour,
        Mark::Degree,
        Mark::Minute,
        Mark::Second,
        Mark::Prime,
        Mark::DoublePrime,
    ];
    if said(&[Mark::Colon]) && said(&letters) {
        return Some("colons stand beside other marks");
    }
    let first = marks[0];
    if first == Mark::Hour && !may_be_hours {
        return Some("it is an angle in degrees and has the mark of hours");
    }
    if first == Mark::Hour && said(&[Mark::Degree, Mark::Prime, Mark::DoublePrime]) {
        return Some("marks of arc stand beside the mark of hours");
    }
    let rest = marks.get(1..).unwrap_or(&[]);
    if rest.iter().any(|m| matches!(m, Mark::Hour | Mark::Degree)) {
        return Some("the mark of hours or degrees stands on a later figure");
    }
    let second_first =
        matches!(marks.get(1), Some(Mark::Second | Mark::DoublePrime)) && marks.len() > 2;
    let minute_last = matches!(marks.get(2), Some(Mark::Minute | Mark::Prime));
    if second_first || minute_last {
        return Some("minutes and seconds have each other's marks");
    }
    None
}
