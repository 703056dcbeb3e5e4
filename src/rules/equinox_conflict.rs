//! Two equinox tags that speak of one position and differ.
//!
//! ## Why it matters
//! A tag beside the position and another on the line below cannot both be right, and the two places are up to a degree or
//! more apart.
//!
//! ## What is asked
//! Whether the tags of the position, of its block and of its column mean the same. `J2000.0` and `2000` do; a standing
//! statement of the sheet is simply replaced by a nearer tag and does not count.
//!
//! ## Formula
//! The year rule: without a letter, Besselian below 1984, Julian from 1984.
//!
//! ## Source
//! FITS standard 4.0 (2018), section 8.3, EQUINOX.
//!
//! ## Example
//! ```report
//! Object: trail 497
//! RA 03:16:24 Dec -33:07:53 (J2000.0)
//! Equinox B1950.0
//! #       ^^^^^^^ and above J2000.0
//! Date: 2021-10-08 03:55 UT
//! ```
//!
//! ## What to do
//! Ask which is right. To let it pass: `[stet equinox-conflict: reason]`.

use super::common::words;
use super::{Case, Findings, Rule};
use crate::report::{EquinoxTag, EquinoxYear, Nearness, SystemWord, Weight};

pub(super) const RULE: Rule = Rule {
    name: "equinox-conflict",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("equinox_conflict.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let tags: Vec<_> = case
        .report
        .equinoxes
        .iter()
        .filter(|(tag, near)| *near != Nearness::Standing && !tag.value.misspelt)
        .map(|(tag, _)| tag)
        .collect();
    let Some((governing, others)) = tags.split_first() else {
        return;
    };
    let Some(other) = others
        .iter()
        .find(|other| differ(&governing.value, &other.value))
    else {
        return;
    };
    out.add(
        other.span,
        format!(
            "{} differs from {}, which speaks of the same position.",
            case.quote(other.span),
            case.quote(governing.span)
        ),
        format!(
            "Ask which is right; the position was read with {}.",
            words::tag(&governing.value)
        ),
    )
    .related
    .push((governing.span, "the other tag".to_string()));
}

/// Do two tags say different things of what both speak of?
fn differ(a: &EquinoxTag, b: &EquinoxTag) -> bool {
    let years = match (a.year, b.year) {
        (Some(EquinoxYear::OfDate), Some(EquinoxYear::OfDate)) => false,
        (
            Some(EquinoxYear::Year {
                letter: la,
                year: ya,
            }),
            Some(EquinoxYear::Year {
                letter: lb,
                year: yb,
            }),
        ) => {
            let (ya, yb) = (ya.value(), yb.value());
            (ya - yb).abs() > 1e-6 || words::is_besselian(la, ya) != words::is_besselian(lb, yb)
        }
        (Some(_), Some(_)) => true,
        _ => false,
    };
    let systems = match (a.system, b.system) {
        (Some(x), Some(y)) => x != y,
        // a bare FK4 beside 2000.0, or a bare FK5 beside 1950, is of another age
        (Some(x), None) => ages(x, b),
        (None, Some(y)) => ages(y, a),
        (None, None) => false,
    };
    let places = matches!((a.place, b.place), (Some(x), Some(y)) if x != y);
    years || systems || places
}

/// Is this system of another age than a tag's year?
fn ages(system: SystemWord, tag: &EquinoxTag) -> bool {
    match tag.year {
        Some(EquinoxYear::Year { letter, year }) => {
            words::is_besselian(letter, year.value()) != (system == SystemWord::Fk4)
        }
        _ => false,
    }
}
