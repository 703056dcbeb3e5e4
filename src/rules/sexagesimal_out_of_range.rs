//! Minutes or seconds of an angle at or above 60.
//!
//! ## Why it matters
//! Sixty minutes make the next hour or degree. A larger figure is a misread or exchanged digit, or a carry that was not
//! made, and the position cannot be known until somebody looks at the original.
//!
//! ## What is asked
//! Whether every minute and every second of the position, of its other forms, of the site and of stated altitudes is below 60.
//!
//! ## Formula
//! minutes < 60 and seconds < 60, each as written.
//!
//! ## Source
//! ISO 80000-3:2019, item 3-5 (degree, minute, second); common practice for hours.
//!
//! ## Example
//! ```report
//! Object: Suspect 12
//! RA 16 43 27 Dec +42 93 36 (J2000.0)
//! #                   ^^ minutes stop at 59
//! Date: 2016-10-25 18:54 UT
//! ```
//!
//! ## What to do
//! Ask for the original figure. To let it pass: `[stet sexagesimal-out-of-range: reason]`.

use super::common::angles::positions;
use super::{Case, Findings, Rule};
use crate::report::{Angle, Weight};

pub(super) const RULE: Rule = Rule {
    name: "sexagesimal-out-of-range",
    weight: Weight::Reject,
    of_place_or_time: true,
    gives_way_to: &[],
    source: include_str!("sexagesimal_out_of_range.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let report = case.report;
    let site = report
        .site
        .iter()
        .flat_map(|(s, _)| [s.latitude, s.longitude]);
    let stated = report.stated_horizon.iter().map(|s| Some(s.angle));
    positions(report)
        .flat_map(|p| [p.first, p.second])
        .chain(site)
        .chain(stated)
        .flatten()
        .for_each(|angle| one(case, &angle, out));
}

fn one(case: &Case, angle: &Angle, out: &mut Findings) {
    for (part, name) in angle.parts().iter().skip(1).zip(["minutes", "seconds"]) {
        let value = part.number.value();
        if value < 60.0 {
            continue;
        }
        let advice = match value {
            60.0 => format!(
                "If a carry was not made, the {name} are 0 and the figure before them is one more."
            ),
            _ if (60.0..100.0).contains(&value) && value % 10.0 < 6.0 => {
                let turned = (value % 10.0).floor() as u32 * 10 + (value / 10.0).floor() as u32;
                format!("Exchanged digits would give {turned:02}; ask for the original.")
            }
            _ => "Ask for the original figure.".to_string(),
        };
        out.add(
            part.span,
            format!("{} {name}: {name} stop below 60.", case.quote(part.span)),
            advice,
        );
    }
}
