//! A site's coordinates without a sign or a compass letter.
//!
//! ## Why it matters
//! A longitude of 20 is in Europe or in the Atlantic, a latitude of 34 in California or in South Africa. The horizon of the
//! wrong one condemns a right report.
//!
//! ## What is asked
//! Whether latitude and longitude in free text have N, S, E, W or a sign. In a column of decimal degrees plain is north and east.
//!
//! ## Formula
//! None.
//!
//! ## Source
//! ISO 6709:2022 asks for the sign; common practice, no source.
//!
//! ## Example
//! ```report
//! Object: candidate 566
//! RA 07:37:41.4 Dec +10:54:24 (J2000.0)
//! Date: 2022-01-20 01:39 UT
//! Site: lat 46.28, long 20.07, 560 m
//! #     ^^^^^^^^^^^^^^^^^^^^^ which of four places?
//! ```
//!
//! ## What to do
//! Write N or S and E or W. To let it pass: `[stet site-hemisphere-unclear: reason]`.

use super::{Case, Findings, Rule};
use crate::report::{SiteTrouble, Weight};

pub(super) const RULE: Rule = Rule {
    name: "site-hemisphere-unclear",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &["site-out-of-range"],
    source: include_str!("site_hemisphere_unclear.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    if case.meant.site_trouble != Some(SiteTrouble::HemisphereUnclear) {
        return;
    }
    let Some((site, _)) = &case.report.site else {
        return;
    };
    let plain = |angle: &Option<crate::report::Angle>| {
        angle.filter(|a| a.sign.is_none() && a.compass.is_none())
    };
    let (latitude, longitude) = (plain(&site.latitude), plain(&site.longitude));
    let (span, what) = match (latitude, longitude) {
        (Some(a), Some(b)) => (a.span.cover(b.span), "north or south, east or west"),
        (Some(a), None) => (a.span, "north or south"),
        (None, Some(b)) => (b.span, "east or west"),
        (None, None) => (site.span, "in which hemisphere it is"),
    };
    out.add(
        span,
        format!("{} does not say {what}.", case.quote(span)),
        "Write N or S and E or W, or a sign.",
    );
}
