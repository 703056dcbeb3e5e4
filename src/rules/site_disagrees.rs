//! Written coordinates of a site that differ from the register's.
//!
//! ## Why it matters
//! Either the observer was elsewhere that night, or a figure is wrong; a sign turned over puts the site on another continent.
//!
//! ## What is asked
//! Whether the coordinates written beside a registered name agree with the register, within their last digits.
//!
//! ## Formula
//! Great-circle distance, 111.2 km a degree.
//!
//! ## Source
//! Mean radius of the Earth 6371.0 km: Moritz 2000, Geodetic Reference System 1980, J. Geodesy 74, 128.
//!
//! ## Example
//! ```report
//! Object: Suspect 118
//! RA 05 31 29.2 Dec +21 59 18 (J2000.0)
//! Date: 2019-01-04 21:15 UT
//! Site: Skarn Head, 54.31 N 3.02 E
//! #                 ^^^^^^^^^^^^^^ the register has 3.02 W
//! ```
//!
//! ## What to do
//! Ask which is right. To let it pass: `[stet site-disagrees: reason]`.

use super::{Case, Findings, Rule};
use crate::report::Weight;
use crate::sky::{Direction, separation_deg};

pub(super) const RULE: Rule = Rule {
    name: "site-disagrees",
    weight: Weight::Query,
    of_place_or_time: true,
    gives_way_to: &["site-out-of-range"],
    source: include_str!("site_disagrees.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let (Some((latitude, longitude)), Some(site)) =
        (case.meant.site_register_deg, &case.meant.site)
    else {
        return;
    };
    let Some((written, _)) = &case.report.site else {
        return;
    };
    let span = match (written.latitude, written.longitude) {
        (Some(a), Some(b)) => a.span.cover(b.span),
        (Some(a), None) | (None, Some(a)) => a.span,
        (None, None) => written.span,
    };
    let value = |angle: Option<crate::report::Angle>, otherwise: f64| {
        angle.map_or(otherwise, |a| a.value())
    };
    let apart_deg = separation_deg(
        Direction {
            ra_deg: longitude,
            dec_deg: latitude,
        },
        Direction {
            ra_deg: value(written.longitude, site.longitude_deg)
                * if written.west_positive { -1.0 } else { 1.0 },
            dec_deg: value(written.latitude, site.latitude_deg),
        },
    );
    let km = apart_deg * 111.2;
    let distance = if km < 10.0 {
        format!("{km:.1} km")
    } else {
        format!("{km:.0} km")
    };
    let compass = |deg: f64, plus: &str, minus: &str| {
        format!("{:.2}° {}", deg.abs(), if deg < 0.0 { minus } else { plus })
    };
    out.add(
        span,
        format!(
            "{} is {distance} from where the register has {}.",
            case.quote(span),
            site.name.as_deref().unwrap_or("the site")
        ),
        format!(
            "The register has {}, {}; ask which is right.",
            compass(latitude, "N", "S"),
            compass(longitude, "E", "W")
        ),
    );
}
