//! "Of date" without saying mean or apparent.
//!
//! ## Why it matters
//! The apparent place differs from the mean place of date by nutation (up to 17″ in longitude) and aberration (up to 20.5″).
//! A position written to seconds of arc hangs on which it is.
//!
//! ## What is asked
//! Whether a position of date with steps finer than an arcminute says mean or apparent. It is read as mean.
//!
//! ## Formula
//! Constant of aberration 20.49552″, of nutation 9.2025″.
//!
//! ## Source
//! IAU (1976) System of Astronomical Constants; Explanatory Supplement (1992), table 15.1 (from memory).
//!
//! ## Example
//! ```report
//! Object: candidate 560
//! RA 23:04:52.56 Dec +67:54:13.9 (equinox of date)
//! #                              ^^^^^^^^^^^^^^^^^ mean or apparent?
//! Date: 1993-09-01 19:45 UT
//! ```
//!
//! ## What to do
//! Write "mean" or "apparent". To let it pass: `[stet apparent-or-mean: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{EquinoxYear, PositionKind, Weight};

pub(super) const RULE: Rule = Rule {
    name: "apparent-or-mean",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &["of-date-undated"],
    source: include_str!("apparent_or_mean.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let report = case.report;
    let governing = report
        .equinoxes
        .iter()
        .map(|(tag, _)| tag)
        .find(|tag| !tag.value.misspelt && tag.value.year.is_some());
    let (Some(tag), Some(read)) = (governing, case.meant.read) else {
        return;
    };
    let said = tag.value.place.is_some()
        || report
            .equinoxes
            .iter()
            .any(|(t, near)| t.value.place.is_some() && *near <= crate::report::Nearness::Head);
    let finest =
        (read.first_step_arcsec * read.second_deg.to_radians().cos()).min(read.second_step_arcsec);
    if report.position.kind == PositionKind::Equatorial
        && tag.value.year == Some(EquinoxYear::OfDate)
        && !said
        && finest < 60.0
    {
        out.add(
            tag.span,
            format!(
                "{} leaves open whether the place is mean or apparent, which differ by up to half an arcminute.",
                case.quote(tag.span)
            ),
            "It was read as mean; write “mean” or “apparent”.",
        );
    }
}
