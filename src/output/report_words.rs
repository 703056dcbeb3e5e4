//! A report in words: what it is called, where no name stands; its position as written; why it was not restated.

use super::plain::one_line;
use crate::report::{EquinoxYear, Examined, PositionKind, Report, Role};

/// The object's name; where it has none, what the text says the position is.
pub fn called(report: &Report) -> String {
    match (&report.object, report.role) {
        (Some(object), _) => one_line(&object.value, 40),
        (None, Role::Measured) => "(no name)".to_owned(),
        (None, Role::Catalogued) => "(catalogue position)".to_owned(),
        (None, Role::Reference) => "(comparison star)".to_owned(),
        (None, Role::Pointing) => "(field centre)".to_owned(),
        (None, Role::Region) => "(region)".to_owned(),
    }
}

/// The position as written, on one line; cells of a table that hold its two halves are parted by a blank.
pub fn position(report: &Report, text: &str) -> String {
    let position = &report.position;
    if let (Some(first), Some(second)) = (position.first, position.second) {
        let (left, right) = if first.span.start < second.span.start {
            (first.span, second.span)
        } else {
            (second.span, first.span)
        };
        let between = text.get(left.end..right.start).unwrap_or("?");
        let of_a_table = |c: char| c.is_whitespace() || "|,;\"".contains(c);
        if between.contains(['|', ',', ';', '\t']) && between.chars().all(of_a_table) {
            return one_line(&format!("{} {}", left.of(text), right.of(text)), 60);
        }
    }
    one_line(&position.span.of(text).replace('|', " "), 60)
}

/// Why there is no restated position.
pub fn not_reduced(examined: &Examined) -> &'static str {
    let (report, meant) = (&examined.report, &examined.meant);
    let Some(read) = meant.read else {
        return "not reduced: it is no position as it stands";
    };
    match (report.position.kind, read.frame) {
        (PositionKind::HourAngle, _) => "not reduced: an hour angle needs the time and the site",
        (PositionKind::Horizontal, _) => {
            "not reduced: altitude and azimuth need the time and the site"
        }
        (PositionKind::Equatorial, None) => "not reduced: the equinox is not known",
        (PositionKind::Equatorial, Some(_)) => {
            let of_date = report.equinoxes.iter().any(|(tag, _)| {
                tag.value.year == Some(EquinoxYear::OfDate) || tag.value.place.is_some()
            });
            if of_date && meant.instant.is_none() {
                "not reduced: “of date” needs the date of observation"
            } else {
                "not reduced"
            }
        }
    }
}
