//! How sharply the facts confirm a reading, and the words in which an editor can say so.

use super::readings::Reading;
use crate::report::{HorizonQuantity, Meant};
use crate::rules::Case;
use crate::rules::identity::here;
use crate::rules::words::{self, apart, rough};
use crate::sky::horizon::refraction_deg;
use crate::sky::separation_deg;

/// What the facts say of a reading with which they all agree.
pub struct Facts {
    /// How well they fit, relative to a chance fit at the edge of what is allowed.
    pub likelihood: f64,
    /// The facts in words.
    pub because: String,
}

/// Weighs a reading. A place 2″ from where it should be counts for more than one at 90″; `sister` is the distance from where
/// the other reports have it, arcsec, and how many they are.
pub fn weigh(case: &Case, sister: Option<(f64, usize)>) -> Facts {
    let mut likelihood = 1.0;
    let mut said: Vec<String> = Vec::new();
    let step = case.meant.reduced.map_or(1.0, |r| r.step_arcsec);
    if let (Some(known), Some(icrs)) = (case.named, here(case.meant))
        && let Some(expected) = known.expected(case)
    {
        let distance = separation_deg(icrs, expected.icrs) * 3600.0;
        // in a large object any place is as good as another; else the density of a bell with long tails
        let width = step
            .max(3.0)
            .max(expected.slack_arcsec / 3.0)
            .max(expected.radius_arcsec / 2.0);
        likelihood *= density(distance, width);
        said.push(format!(
            "it lies {} from {}",
            apart(distance),
            expected.name
        ));
    }
    if let Some((distance, count)) = sister {
        likelihood *= density(distance, step.max(0.5));
        said.push(format!(
            "it agrees with {count} other reports to {}",
            apart(distance)
        ));
    }
    if let Some(horizon) = case.meant.horizon {
        let mut words = format!("the object stood {} high", rough(horizon.altitude_deg));
        if horizon.sun_altitude_deg < case.house.darkness_deg {
            words += " in a dark sky";
        }
        said.push(words);
        let height = case
            .meant
            .site
            .as_ref()
            .and_then(|s| s.elevation_m)
            .unwrap_or(0.0);
        for stated in &case.report.stated_horizon {
            let altitude = match stated.quantity {
                HorizonQuantity::Altitude => stated.angle.value(),
                HorizonQuantity::ZenithDistance => 90.0 - stated.angle.value(),
                _ => continue,
            };
            let off = (altitude - horizon.altitude_deg).abs().min(
                (altitude - horizon.altitude_deg - refraction_deg(horizon.altitude_deg, height))
                    .abs(),
            );
            let width = stated.angle.step().max(0.5) / 2.0;
            likelihood *= (-0.5 * (off / width).powi(2)).exp().max(0.02);
            said.push("the stated altitude agrees".to_string());
        }
    }
    if case.report.constellation.is_some() {
        said.push("the constellation agrees".to_string());
    }
    if !case.report.other_forms.is_empty() || !case.report.stated_other.is_empty() {
        said.push("both forms of the position agree".to_string());
    }
    let because = match said.as_slice() {
        [] => "everything in the report agrees".to_string(),
        [one] => one.clone(),
        [all @ .., last] => format!("{} and {last}", all.join(", ")),
    };
    Facts {
        likelihood,
        because,
    }
}

/// A two-dimensional density with long tails, relative to one arcsecond squared.
fn density(distance: f64, width: f64) -> f64 {
    (1.0 + (distance / width).powi(2)).powi(-2) / (width * width)
}

/// Is the site's zone one that its longitude could have? Zones reach some four hours from the mean Sun at most.
pub fn zone_fits(meant: &Meant) -> bool {
    let (Some(site), Some(instant)) = (&meant.site, meant.instant) else {
        return true;
    };
    let Some(offset) = site
        .zone
        .as_deref()
        .and_then(|zone| offset_h(zone, instant.utc))
    else {
        return true;
    };
    let apart = (offset * 15.0 - site.longitude_deg + 180.0).rem_euclid(360.0) - 180.0;
    apart.abs() <= 60.0
}

/// Hours east of UTC of an IANA zone at an instant.
fn offset_h(zone: &str, utc: (f64, f64)) -> Option<f64> {
    let zone = jiff::tz::TimeZone::get(zone).ok()?;
    let at = jiff::Timestamp::from_second(words::unix_s(utc).round() as i64).ok()?;
    Some(f64::from(zone.to_offset(at).seconds()) / 3600.0)
}

/// The reading in words, with its result: `22:31 at UTC+01:00 = 21:31 UT`.
pub fn told(case: &Case, reading: &Reading, meant: &Meant) -> String {
    match (reading.kind, meant.instant) {
        ("local-for-universal", Some(instant)) => {
            let offset = case.meant.instant.map_or(0.0, |written| {
                words::seconds_between(instant.utc, written.utc)
            });
            let minutes = (offset / 60.0).round() as i64;
            let sign = if minutes < 0 { '-' } else { '+' };
            format!(
                "{} at UTC{sign}{:02}:{:02} = {}",
                reading.words,
                minutes.abs() / 60,
                minutes.abs() % 60,
                words::instant(instant.utc)
            )
        }
        ("universal-for-local", Some(instant)) => {
            format!("{} as UT = {}", reading.words, words::instant(instant.utc))
        }
        _ => reading.words.clone(),
    }
}

/// A clause for each slip, for "If …, the facts agree."
pub fn clause(kinds: &[&'static str]) -> String {
    let clauses: Vec<&str> = kinds.iter().map(|kind| one_clause(kind)).collect();
    clauses.join(" and ")
}

fn one_clause(kind: &str) -> &'static str {
    match kind {
        "local-for-universal" => "local time was written as UT",
        "universal-for-local" => "UT was written as local time",
        "day-off" => "the date is a day off",
        "am-for-pm" => "the time is twelve hours off",
        "month-misread" => "the month was misread",
        "east-for-west" => "the site's longitude has the wrong sign",
        "north-for-south" => "the site's latitude has the wrong sign",
        "dec-sign" => "the declination's sign is wrong",
        "ra-unit" => "the right ascension is in the other unit",
        "ra-dec-exchanged" => "the declination was written first",
        "equinox-other" => "the equinox is another one",
        "hour-angle-for-ra" => "the hour angle was written for the right ascension",
        "digits-exchanged" => "two neighbouring digits were exchanged",
        _ => "one digit is wrong",
    }
}
