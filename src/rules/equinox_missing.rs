//! A position without an equinox.
//!
//! ## Why it matters
//! The equinoxes 1950 and 2000 differ by about 0.6° on the sky, further than most fields are wide. Without one the position
//! can be honestly restated at none.
//!
//! ## What is asked
//! Whether the position, its block, its column or a standing statement says the equinox, or a house rule supplies it
//! (`equinox: when-missing`).
//!
//! ## Formula
//! J2000.0, B1950.0, the equinox of date and the rarer ones are each tried on the rest of the report: the named object,
//! the other forms, the constellation, the stated altitude.
//!
//! ## Source
//! The owner's count (WRITING 2d): no equinox near the position in 35 % of circulars and 99 % of observing reports.
//!
//! ## Example
//! ```report
//! Object: Suspect 70
//! RA 23h 00m 36.6s Dec +42° 02' 19"
//! #  ^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^ of which equinox?
//! Date: 2013-10-02 08:25 UT
//! ```
//!
//! ## What to do
//! Write the equinox after the position, or once at the head of the sheet. To let it pass: `[stet equinox-missing: reason]`.

use super::common::identity::here;
use super::common::words::apart;
use super::{Case, Findings, Rule};
use crate::house::WhenMissing;
use crate::report::{EquinoxTag, EquinoxYear, Nearness, Number, PositionKind, Weight, YearLetter};
use crate::sky::separation_deg;
use crate::span::Spanned;

pub(super) const RULE: Rule = Rule {
    name: "equinox-missing",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &["tag-misspelt", "position-incomplete"],
    source: include_str!("equinox_missing.rs"),
    check,
};

/// The equinoxes people use, the commonest first, with what they are called.
pub(crate) fn usual() -> Vec<(&'static str, EquinoxTag)> {
    let year = |letter, year: u64| EquinoxTag {
        system: None,
        year: Some(EquinoxYear::Year {
            letter: Some(letter),
            year: Number {
                mantissa: year * 10,
                places: 1,
                whole_digits: 4,
            },
        }),
        place: None,
        misspelt: false,
    };
    let of_date = EquinoxTag {
        system: None,
        year: Some(EquinoxYear::OfDate),
        place: None,
        misspelt: false,
    };
    vec![
        ("J2000.0", year(YearLetter::Julian, 2000)),
        ("B1950.0", year(YearLetter::Besselian, 1950)),
        ("the equinox of date", of_date),
        ("B1900.0", year(YearLetter::Besselian, 1900)),
        ("B1875.0", year(YearLetter::Besselian, 1875)),
        ("B1855.0", year(YearLetter::Besselian, 1855)),
    ]
}

fn check(case: &Case, out: &mut Findings) {
    let report = case.report;
    let position = &report.position;
    let said = report.equinoxes.iter().any(|(tag, _)| {
        !tag.value.misspelt && (tag.value.year.is_some() || tag.value.system.is_some())
    });
    if position.kind != PositionKind::Equatorial
        || said
        || matches!(case.house.when_missing, WhenMissing::Assume(_))
        || case.meant.read.is_some_and(|read| read.frame.is_some())
    {
        return;
    }
    let advice = match fitting(case) {
        Some(words) => format!("{words} Ask, or write the equinox after the position."),
        None => "The rest of the report does not tell which; write the equinox after the position."
            .to_string(),
    };
    out.add(
        position.span,
        format!("The position {} has no equinox.", case.quote(position.span)),
        advice,
    );
}

/// The equinox that the rest of the report fits, in words.
fn fitting(case: &Case) -> Option<String> {
    let report = case.report;
    report.position.first?;
    report.position.second?;
    let tells = report.constellation.is_some()
        || !report.stated_horizon.is_empty()
        || !report.other_forms.is_empty()
        || !report.stated_other.is_empty();
    let known = case.named;
    if !tells && known.is_none() {
        return None;
    }
    let mut tried = Vec::new();
    for (name, tag) in usual() {
        let mut read = report.clone();
        read.equinoxes
            .insert(0, (Spanned::new(tag, report.position.span), Nearness::Own));
        let meant = case.mean(&read);
        let changed = Case {
            report: &read,
            meant: &meant,
            ..*case
        };
        let distance = known
            .and_then(|k| k.expected(&changed))
            .zip(here(&meant))
            .map(|(expected, here)| separation_deg(expected.icrs, here) * 3600.0);
        if meant.reduced.is_some() {
            tried.push((name, super::of_place_and_time(&changed).len(), distance));
        }
    }
    let fits: Vec<_> = tried.iter().filter(|(_, broken, _)| *broken == 0).collect();
    let nearest =
        |(name, _, distance): &(&str, usize, Option<f64>)| match (distance, &report.object) {
            (Some(d), Some(object)) => {
                format!("With {name} it lies {} from {}.", apart(*d), object.value)
            }
            _ => format!("Only {name} fits the rest of the report."),
        };
    match fits.as_slice() {
        [one] => Some(nearest(one)),
        [] => None,
        // several fit: only a named object tells them apart, and then by a good margin
        several => {
            let mut by_distance: Vec<_> = several.iter().filter(|t| t.2.is_some()).collect();
            by_distance.sort_by(|a, b| a.2.partial_cmp(&b.2).unwrap_or(std::cmp::Ordering::Equal));
            match by_distance.as_slice() {
                [first, second, ..] if first.2? * 3.0 < second.2? => Some(nearest(first)),
                _ => None,
            }
        }
    }
}
