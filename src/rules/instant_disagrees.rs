//! Date, Julian date, weekday or double date that contradict one another.
//!
//! ## Why it matters
//! Two statements of one moment are a free check. Where they differ, one of them was written or worked out wrongly, and
//! precession, horizon and planets follow the wrong one.
//!
//! ## What is asked
//! Whether a Julian date beside a calendar date is the same moment within their last digits, the weekday is that of the date,
//! and a double date joins two neighbouring days.
//!
//! ## Formula
//! JD 2440587.5 = 1970 January 1, 0h; weekday = (whole days from a Monday) mod 7.
//!
//! ## Source
//! Meeus, Astronomical Algorithms (2nd ed. 1998), chapter 7.
//!
//! ## Example
//! ```report
//! Object: field object K530
//! RA 0h 36m 53.0s Dec -71° 34' 31" (J2000.0)
//! Date: 2004-08-13 01:08 UT (JD 2453239.5472)
//! #                          ^^^^^^^^^^^^^^^ eight days later
//! ```
//!
//! ## What to do
//! Ask which is right. To let it pass: `[stet instant-disagrees: reason]`.

use super::common::words::{self, civil, day_number, lapse, seconds_between};
use super::{Case, Findings, Rule};
use crate::report::{DateWritten, InstantWritten, Nearness, Weight};

pub(super) const RULE: Rule = Rule {
    name: "instant-disagrees",
    weight: Weight::Query,
    of_place_or_time: true,
    gives_way_to: &["date-impossible"],
    source: include_str!("instant_disagrees.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some((governing, near)) = case.report.instants.first() else {
        return;
    };
    days(case, governing, out);
    for (other, other_near) in case.report.instants.iter().skip(1) {
        if *other_near <= Nearness::Block && *near <= Nearness::Block {
            moments(case, governing, other, out);
        }
    }
}

fn is_julian(instant: &InstantWritten) -> bool {
    instant
        .date
        .is_some_and(|d| matches!(d.value, DateWritten::Julian { .. }))
}

/// A Julian date beside a calendar date, or beside another Julian date.
fn moments(case: &Case, governing: &InstantWritten, other: &InstantWritten, out: &mut Findings) {
    if other.date.is_none() || !(is_julian(governing) || is_julian(other)) {
        return;
    }
    let mut read = case.report.clone();
    read.instants = vec![(other.clone(), Nearness::Own)];
    let (Some(a), Some(b)) = (case.meant.instant, case.mean(&read).instant) else {
        return;
    };
    let apart = seconds_between(a.utc, b.utc);
    let light_time = if a.heliocentric || b.heliocentric {
        500.0
    } else {
        0.0
    };
    // a date without a clock time may be that of the evening
    let night = |i: &InstantWritten| {
        if !is_julian(i) && i.clock.is_none() && a.step_s.max(b.step_s) >= 86_400.0 {
            86_400.0
        } else {
            0.0
        }
    };
    if apart.abs() <= a.step_s + b.step_s + light_time + night(governing) + night(other) + 2.0 {
        return;
    }
    out.add(
        other.span,
        format!(
            "{} is {}, {} {} than {}.",
            case.quote(other.span),
            words::instant(b.utc),
            lapse(apart),
            if apart > 0.0 { "later" } else { "earlier" },
            case.quote(governing.span)
        ),
        "Ask which of the two is right.",
    )
    .related
    .push((
        governing.span,
        "the other statement of the time".to_string(),
    ));
}

/// Weekday and double date against the calendar.
fn days(case: &Case, instant: &InstantWritten, out: &mut Findings) {
    let Some(date) = instant.date else { return };
    let DateWritten::Calendar {
        year,
        month,
        day,
        to_day,
        ..
    } = date.value
    else {
        return;
    };
    let number = day_number(i64::from(year), month, day.value().floor() as u32);
    let (_, _, next) = civil(number + 1);
    if let Some(to_day) = to_day.filter(|to_day| *to_day != next) {
        out.add(
            date.span,
            format!("{} joins two days that are no neighbours.", case.quote(date.span)),
            format!("The night that begins on the {:.0} ends on the {next}, not on the {to_day}: ask which night it was.", day.value().floor()),
        );
    }
    if let Some(weekday) = instant.weekday {
        // 1970 January 1 was a Thursday; of a double date either day may be named
        let of_day = |n: i64| (n + 3).rem_euclid(7) as u8;
        let right = of_day(number);
        let second = to_day.map(|_| of_day(number + 1));
        if weekday.value != right && Some(weekday.value) != second {
            out.add(
                weekday.span,
                format!(
                    "{day:.0} {} {year} was a {}, not a {}.",
                    words::month(month),
                    words::weekday(right),
                    words::weekday(weekday.value),
                    day = day.value().floor()
                ),
                "Ask which is right, the weekday or the date.",
            );
        }
    }
}
