//! Something reported as new where something known stands.
//!
//! ## Why it matters
//! Most "new stars" are planets, bright stars or Messier objects. An editor wants to know that before a discovery goes out.
//!
//! ## What is asked
//! Where the text speaks of something new and the position is a measured one: whether a planet is within 10′ (and what its
//! theory, parallax and motion may add), the Moon's disc covers it, or a star to V 6.5, a Messier object or one of the house's
//! own lies within the larger of 60″ (or the object's own radius) and three steps (10′ at most).
//!
//! ## Formula
//! Angular separation; stars with proper motion to the date, planets for the instant and the site.
//!
//! ## Source
//! Hoffleit & Warren 1991 (CDS V/50); a list of Messier's objects (CDS); Simon et al. 1994, A&A 282, 663 for planets.
//!
//! ## Example
//! ```report
//! Object: Possible nova, suspect 62
//! RA 05 34 30 Dec +22 01 00 (J2000.0)
//! #  ^^^^^^^^^^^^^^^^^^^^^^ Messier 1
//! Date: 2009-12-02 23:58 UT
//! ```
//!
//! ## What to do
//! Ask whether the known object was told apart from the new one. To let it pass: `[stet known-object-here: reason]`.

use super::common::identity::{Known, body_name, ground, here, julian_year};
use super::common::words::apart;
use super::{Case, Findings, Rule};
use crate::report::{Role, Weight};
use crate::sky::bodies::Body;
use crate::sky::{Direction, catalogue, separation_deg};

pub(super) const RULE: Rule = Rule {
    name: "known-object-here",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &["ra-unit-unclear"],
    source: include_str!("known_object_here.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let (Some(new), Some(icrs), Some(reduced)) =
        (case.report.claims_new, here(case.meant), case.meant.reduced)
    else {
        return;
    };
    if case.report.role != Role::Measured || case.named.is_some() {
        return;
    }
    let step = reduced.step_arcsec;
    let Some((name, distance)) = body_here(case, icrs).or_else(|| fixed_here(case, icrs, step))
    else {
        return;
    };
    out.add(
        case.report.position.span,
        format!(
            "{name} stands {}; the text speaks of something new ({}).",
            if distance < 1.0 {
                "just there".to_string()
            } else {
                format!("{} from there", apart(distance))
            },
            case.quote(new)
        ),
        "Ask whether it was told apart from that.",
    )
    .related
    .push((new, "said to be new".to_string()));
}

/// A planet within 10′, or the Moon's disc, with its distance in arcsec.
fn body_here(case: &Case, icrs: Direction) -> Option<(String, f64)> {
    case.meant.instant?;
    Body::ALL
        .into_iter()
        .filter(|body| *body != Body::Sun)
        .find_map(|body| {
            let expected = Known::Body(body).expected(case)?;
            let reach = match body {
                // from the site the parallax is in the place already; without one it may be anywhere within
                Body::Moon if ground(case.meant).is_some() => expected.radius_arcsec + 60.0,
                Body::Moon => expected.radius_arcsec,
                _ => 600.0 + expected.slack_arcsec,
            };
            let distance = separation_deg(icrs, expected.icrs) * 3600.0;
            (distance <= reach).then(|| (body_name(body).to_string(), distance))
        })
        .map(|(name, distance)| {
            (
                if name == "the Moon" {
                    "The Moon".to_string()
                } else {
                    name
                },
                distance,
            )
        })
}

/// A star to V 6.5, a Messier object or one of the house's own within its reach, the nearest first.
fn fixed_here(case: &Case, icrs: Direction, step: f64) -> Option<(String, f64)> {
    let reach = |radius: f64| radius.max(60.0).max((3.0 * step).min(600.0));
    let year = case.meant.instant.map_or(2000.0, |i| julian_year(i.utc));
    let from_catalogue = catalogue::near(icrs, 2.0)
        .into_iter()
        .filter_map(|(entry, _)| {
            let bright = entry.radius_arcsec > 0.0 || entry.v_mag.is_some_and(|v| v <= 6.5);
            let distance = separation_deg(icrs, entry.at_epoch(year))
                .min(separation_deg(icrs, entry.icrs))
                * 3600.0;
            (bright && distance <= reach(entry.radius_arcsec))
                .then(|| (entry.name.to_string(), distance))
        });
    let own = case.house.known_objects.iter().filter_map(|object| {
        let at = Direction {
            ra_deg: object.ra_deg,
            dec_deg: object.dec_deg,
        };
        let distance = separation_deg(icrs, at) * 3600.0;
        (distance <= reach(object.radius_arcsec)).then(|| (object.name.clone(), distance))
    });
    from_catalogue.chain(own).min_by(|a, b| a.1.total_cmp(&b.1))
}
