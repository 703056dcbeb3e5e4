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

use super::common::identity::{Known, body_name, ground, here, julian_year, middle_s};
use super::common::words::{apart, later};
use super::{Case, Findings, Rule};
use crate::report::{Role, Weight};
use crate::sky::bodies::{Body, roughly};
use crate::sky::moment::Moment;
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
    let near = near_bodies(case, icrs)?;
    Body::ALL
        .into_iter()
        .filter(|body| *body != Body::Sun && near(*body))
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

/// Which bodies are near enough for a closer look; `None` where none can be.
///
/// Far from the ecliptic there is none: Venus, the furthest from it, is at most 0.728 sin 3.39° = 0.043 au off its plane and
/// at least 0.983 − 0.728 = 0.255 au away, so 9.7° (Mars 8.5°, Mercury 6.3°), the Moon 5.3° and 1.0° of parallax; a degree
/// is left for the ecliptic's own motion over ten centuries (`tests/sky_bodies.rs`). Elsewhere a rough place tells.
fn near_bodies(case: &Case, icrs: Direction) -> Option<impl Fn(Body) -> bool> {
    let instant = case.meant.instant?;
    // no planet moves faster than Mercury's 2.2° a day; besides motion 10′ of the rule, parallax, theory and a rough place's 2′
    let motion_arcsec = 400.0 * (instant.step_s + 500.0) / 3600.0;
    let reach_deg = (motion_arcsec + 600.0 + 300.0) / 3600.0;
    let (sin_e, cos_e) = 23.4393_f64.to_radians().sin_cos();
    let (ra, dec) = icrs.radians();
    let sin_latitude = dec.sin() * cos_e - dec.cos() * sin_e * ra.sin();
    if sin_latitude.abs() > (10.7 + reach_deg).min(90.0).to_radians().sin() {
        return None;
    }
    let moment = Moment::quick(later(instant.utc, middle_s(&instant)));
    Some(move |body| {
        // the Moon's rough place has half a degree of theory and a degree of parallax more
        let more = if body == Body::Moon { 1.6 } else { 0.0 };
        separation_deg(icrs, roughly(body, &moment)) <= reach_deg + more
    })
}

/// A star to V 6.5, a Messier object or one of the house's own within its reach, the nearest first.
fn fixed_here(case: &Case, icrs: Direction, step: f64) -> Option<(String, f64)> {
    let reach = |radius: f64| radius.max(60.0).max((3.0 * step).min(600.0));
    let year = case.meant.instant.map_or(2000.0, |i| julian_year(i.utc));
    let from_catalogue = catalogue::near(icrs, 2.0)
        .into_iter()
        .filter_map(|(entry, apart)| {
            let bright = entry.radius_arcsec > 0.0 || entry.v_mag.is_some_and(|v| v <= 6.5);
            let reach = reach(entry.radius_arcsec);
            // most are too far off however they move
            let motion =
                (entry.pm_ra_arcsec.abs() + entry.pm_dec_arcsec.abs()) * (year - 2000.0).abs();
            if !bright || apart * 3600.0 > reach + motion + 1.0 {
                return None;
            }
            let distance = separation_deg(icrs, entry.at_epoch(year)).min(apart) * 3600.0;
            (distance <= reach).then(|| (entry.name.to_string(), distance))
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
