//! A date whose day and month could be exchanged.
//!
//! ## Why it matters
//! 03/04/2024 is 3 April to some and March 4 to others: a month apart on the Sun's and the Moon's way, two hours of sidereal time.
//!
//! ## What is asked
//! Whether anything in the sheet decides: another date with a day above 12, a month in words, an ISO date, a weekday.
//!
//! ## Formula
//! Both orders are held to the rest of the report.
//!
//! ## Source
//! Common practice, no source; ISO 8601-1:2019 exists to avoid it.
//!
//! ## Example
//! ```report
//! Object: candidate 623
//! RA 01:09:36.94 Dec -82:44:17.8 (J2000.0)
//! Date: 04/08/2013 17:08 UT
//! #     ^^^^^^^^^^ 4 August or April 8?
//! ```
//!
//! ## What to do
//! Write the month in words or year first. To let it pass: `[stet date-order-unclear: reason]`.

use super::common::words::month;
use super::{Case, Findings, Rule};
use crate::report::{DateWritten, Number, Report, Weight};

pub(super) const RULE: Rule = Rule {
    name: "date-order-unclear",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &["date-impossible"],
    source: include_str!("date_order_unclear.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some((instant, _)) = case.report.instants.first() else {
        return;
    };
    let Some(date) = instant.date else { return };
    let DateWritten::Calendar {
        year,
        month: written_month,
        day,
        order_unclear: true,
        ..
    } = date.value
    else {
        return;
    };
    let written_day = day.value().floor() as u32;
    let favoured = match exchanged(case.report) {
        Some(other) => match (case.broken_by(case.report), case.broken_by(&other)) {
            (0, 1..) => " The rest of the report fits the first only.",
            (1.., 0) => " The rest of the report fits the second only.",
            _ => "",
        },
        None => "",
    };
    out.add(
        date.span,
        format!(
            "{} is {written_day} {} {year} with the day first and {written_month} {} {year} with the month first.",
            case.quote(date.span),
            month(written_month),
            month(written_day)
        ),
        format!("It was read with the day first.{favoured} Write the month in words or the year first."),
    );
}

/// The report with day and month of its governing date exchanged, where that is a date too.
pub(crate) fn exchanged(report: &Report) -> Option<Report> {
    let mut other = report.clone();
    let date = other.instants.first_mut()?.0.date.as_mut()?;
    let DateWritten::Calendar {
        month, day, to_day, ..
    } = &mut date.value
    else {
        return None;
    };
    if day.places > 0
        || *day == Number::whole(u64::from(*month))
        || !(1..=12).contains(&day.mantissa)
        || to_day.is_some()
    {
        return None;
    }
    let old = *month;
    *month = day.mantissa as u32;
    day.mantissa = u64::from(old);
    Some(other)
}
