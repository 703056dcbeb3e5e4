//! A declination that never rises at the site.
//!
//! ## Why it matters
//! Whatever the hour, the object is below that horizon. The sign of the declination or of the latitude, a digit, or the site is wrong.
//!
//! ## What is asked
//! Whether the declination of date is above φ − 90° (north) or below φ + 90° (south), with allowances for refraction (34′), the
//! dip of the horizon by the site's height, and the last digits of position and site.
//!
//! ## Formula
//! Greatest altitude = 90° − |φ − δ|.
//!
//! ## Source
//! Meeus, Astronomical Algorithms (2nd ed. 1998), chapter 15; refraction at the horizon 34′: Explanatory Supplement (1992), 9.33.
//!
//! ## Example
//! ```report
//! Object: Suspect 124
//! RA 02 30 37.8 Dec -78 51 10 (J2000.0)
//! #                 ^^^^^^^^^ 27° below at its best
//! Date: 2016-08-22 21:11 UT
//! Site: 38.93 N 27.52 W, 240 m
//! ```
//!
//! ## What to do
//! Ask for the declination and the site. To let it pass: `[stet never-rises: reason]`.

use super::common::sight::{declination_of_date_deg, horizon_allowance_deg, written_slack_deg};
use super::common::words::rough;
use super::{Case, Findings, Rule};
use crate::report::Weight;

pub(super) const RULE: Rule = Rule {
    name: "never-rises",
    weight: Weight::Reject,
    of_place_or_time: true,
    gives_way_to: &["ra-unit-unclear"],
    source: include_str!("never_rises.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let (Some(reduced), Some(site)) = (case.meant.reduced, &case.meant.site) else {
        return;
    };
    // without an instant the declination of date is not known: precession moves it by up to 20″ a year, half a degree in 90 years
    let (declination, precession) = match case.meant.horizon {
        Some(h) => (
            declination_of_date_deg(h.altitude_deg, h.azimuth_deg, site.latitude_deg),
            0.0,
        ),
        None => (reduced.icrs_dec_deg, 0.5),
    };
    let best = 90.0 - (site.latitude_deg - declination).abs();
    let allowed = horizon_allowance_deg(case) + written_slack_deg(case) + precession;
    if best >= -allowed {
        return;
    }
    let limit = if site.latitude_deg >= 0.0 {
        format!("below {}", rough(site.latitude_deg - 90.0))
    } else {
        format!("above {}", rough(site.latitude_deg + 90.0))
    };
    let finding = out.add(
        case.dec_span(),
        format!(
            "At latitude {} a declination of {} never rises: at best it stands {} below the horizon.",
            rough(site.latitude_deg),
            rough(declination),
            rough(-best)
        ),
        format!("Nothing {limit} is seen from there: ask for the declination's sign and figures and for the site."),
    );
    if let Some(span) = case.site_span() {
        finding.related.push((span, "the site".to_string()));
    }
}
