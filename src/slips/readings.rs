//! The alternative readings: for each of the fourteen slips, the report as it may have been meant.

use super::digits;
use super::priors::priors;
use crate::report::{
    Angle, AngleUnit, DateWritten, EquinoxYear, Mark, Nearness, Position, PositionKind, Report,
    Zone,
};
use crate::rules::words::{self, civil, day_number};
use crate::rules::{Case, angles};
use crate::span::Spanned;

/// What a reading changes.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Changes {
    /// The position or its equinox.
    Place,
    /// The instant.
    Time,
    /// The site.
    Site,
}

/// The report as it may have been meant.
#[derive(Clone, Debug)]
pub struct Reading {
    /// The slip's name.
    pub kind: &'static str,
    /// How likely it is among all readings of all kinds, before the facts are asked.
    pub prior: f64,
    /// What it changes.
    pub changes: Changes,
    /// The changed report.
    pub report: Report,
    /// `05h31m29s read as 05h13m29s`.
    pub words: String,
}

/// All single readings of position and equinox; of changed digits those that pass a quick look.
pub fn of_place(case: &Case, passes: impl Fn(&Position) -> bool) -> Vec<Reading> {
    let mut list = Vec::new();
    dec_sign(case.report, &mut list);
    ra_unit(case.report, &mut list);
    ra_dec_exchanged(case.report, &mut list);
    equinox_other(case, &mut list);
    hour_angle_for_ra(case.report, &mut list);
    changed_digits(case.report, "digits-exchanged", &passes, &mut list);
    changed_digits(case.report, "digit-miskeyed", &passes, &mut list);
    list
}

/// All single readings of the instant.
pub fn of_time(case: &Case) -> Vec<Reading> {
    let mut list = Vec::new();
    zones(case, &mut list);
    day_off(case.report, &mut list);
    am_for_pm(case.report, &mut list);
    month_misread(case.report, &mut list);
    list
}

/// All single readings of the site.
pub fn of_site(case: &Case) -> Vec<Reading> {
    let mut list = Vec::new();
    for kind in ["east-for-west", "north-for-south"] {
        let mut report = case.report.clone();
        let Some((site, _)) = report.site.as_mut() else {
            continue;
        };
        let angle = if kind == "east-for-west" {
            &mut site.longitude
        } else {
            &mut site.latitude
        };
        let Some(angle) = angle.as_mut() else {
            continue;
        };
        let before = case.quote(angle.span);
        *angle = angles::negated(angle);
        let side = match (kind, angle.is_negative()) {
            ("east-for-west", true) => "W",
            ("east-for-west", false) => "E",
            (_, true) => "S",
            (_, false) => "N",
        };
        // "west positive" turns the letters round
        let side = match (site.west_positive, side) {
            (true, "W") => "E",
            (true, "E") => "W",
            (_, side) => side,
        };
        let value = format!("{:.*}° {side}", 2, site_value(site, kind).abs());
        list.push(Reading {
            kind,
            prior: priors().of(kind),
            changes: Changes::Site,
            words: format!("{before} read as {value}"),
            report,
        });
    }
    list
}

fn site_value(site: &crate::report::SiteWritten, kind: &str) -> f64 {
    let angle = if kind == "east-for-west" {
        site.longitude
    } else {
        site.latitude
    };
    angle.map_or(0.0, |a| a.value())
}

/// Makes the priors of the readings of one kind add up to that kind's own.
fn share(readings: &mut [Reading]) {
    let sum: f64 = readings.iter().map(|r| r.prior).sum();
    for reading in readings {
        reading.prior *= priors().of(reading.kind) / sum.max(1e-12);
    }
}

fn place(kind: &'static str, prior: f64, report: Report, words: String) -> Reading {
    Reading {
        kind,
        prior,
        changes: Changes::Place,
        report,
        words,
    }
}

/// A position's two angles in words.
fn written(position: &Position) -> String {
    let hours = position.kind != PositionKind::Horizontal
        && angles::first_unit(position) == Some(AngleUnit::Hours);
    let first = position
        .first
        .map_or(String::new(), |a| words::angle(&a, hours));
    let second = position
        .second
        .map_or(String::new(), |a| words::angle(&a, false));
    format!("{first} {second}")
}

fn dec_sign(report: &Report, list: &mut Vec<Reading>) {
    let Some(angle) = report.position.second else {
        return;
    };
    if report.position.kind == PositionKind::Horizontal
        || report.position.polar_distance
        || angle.value() == 0.0
    {
        return;
    }
    let mut other = report.clone();
    let turned = angles::negated(&angle);
    other.position.second = Some(turned);
    let words = format!(
        "{} read as {}",
        words::angle(&angle, false),
        words::angle(&turned, false)
    );
    list.push(place("dec-sign", priors().of("dec-sign"), other, words));
}

fn ra_unit(report: &Report, list: &mut Vec<Reading>) {
    let position = &report.position;
    let (Some(angle), Some(unit)) = (position.first, angles::first_unit(position)) else {
        return;
    };
    if position.kind != PositionKind::Equatorial {
        return;
    }
    let other_unit = match unit {
        AngleUnit::Hours => AngleUnit::Degrees,
        AngleUnit::Degrees if angle.value() < 24.0 => AngleUnit::Hours,
        AngleUnit::Degrees => return,
    };
    let mut other = report.clone();
    other.position = angles::in_unit(position, other_unit);
    let words = format!(
        "{} read as {}",
        words::angle(&angle, unit == AngleUnit::Hours),
        words::angle(&angle, other_unit == AngleUnit::Hours).trim_start_matches('+')
    );
    list.push(place("ra-unit", priors().of("ra-unit"), other, words));
}

fn ra_dec_exchanged(report: &Report, list: &mut Vec<Reading>) {
    let position = &report.position;
    let (Some(first), Some(second)) = (position.first, position.second) else {
        return;
    };
    if position.kind != PositionKind::Equatorial || position.polar_distance {
        return;
    }
    // the figures change places, the marks stay where they are
    let with_marks = |figures: &Angle, marks: &Angle| {
        let mut angle = *figures;
        let own: Vec<Mark> = marks.parts().iter().map(|p| p.mark).collect();
        for (k, part) in angle.parts_mut().iter_mut().enumerate() {
            part.mark = own.get(k).copied().unwrap_or(part.mark);
        }
        angle
    };
    let mut ra = with_marks(&second, &first);
    let mut dec = with_marks(&first, &second);
    (ra.sign, ra.compass) = (None, None);
    dec.compass = None;
    dec.sign = first.sign.or(second.sign);
    let mut other = report.clone();
    other.position.first = Some(ra);
    other.position.second = Some(dec);
    if position.first_unit.is_none() && first.parts().len() > 1 {
        other.position.first_unit = Some(AngleUnit::Hours);
    }
    let words = format!("{} read as {}", written(position), written(&other.position));
    list.push(place(
        "ra-dec-exchanged",
        priors().of("ra-dec-exchanged"),
        other,
        words,
    ));
}

fn equinox_other(case: &Case, list: &mut Vec<Reading>) {
    let report = case.report;
    if report.position.kind != PositionKind::Equatorial {
        return;
    }
    let current = case.meant.read.and_then(|r| r.frame);
    let before = current.map_or("no equinox".to_string(), |f| f.equinox.to_string());
    let at = list.len();
    for (name, tag) in crate::rules::usual_equinoxes() {
        let same = current.is_some_and(|f| match (f.equinox, tag.year) {
            (crate::report::Equinox::OfDate, Some(EquinoxYear::OfDate)) => true,
            (e, Some(EquinoxYear::Year { .. })) => e.to_string() == name,
            _ => false,
        });
        if same {
            continue;
        }
        let factor = match name {
            "J2000.0" | "B1950.0" => 1.0,
            "the equinox of date" => priors().directions.equinox_of_date,
            _ => priors().directions.rare_equinox,
        };
        let mut other = report.clone();
        other.equinoxes = vec![(Spanned::new(tag, report.position.span), Nearness::Own)];
        list.push(place(
            "equinox-other",
            factor,
            other,
            format!("{name} in place of {before}"),
        ));
    }
    share(&mut list[at..]);
}

fn hour_angle_for_ra(report: &Report, list: &mut Vec<Reading>) {
    let position = &report.position;
    let Some(angle) = position.first else { return };
    if position.kind != PositionKind::Equatorial
        || angles::first_unit(position) != Some(AngleUnit::Hours)
    {
        return;
    }
    let mut other = report.clone();
    other.position.kind = PositionKind::HourAngle;
    other.position.first_unit = Some(AngleUnit::Hours);
    other.equinoxes.clear();
    let words = format!("{} read as an hour angle", words::angle(&angle, true));
    list.push(place(
        "hour-angle-for-ra",
        priors().of("hour-angle-for-ra"),
        other,
        words,
    ));
}

/// Digits of a coordinate exchanged or miskeyed, with priors by what the digit counts, that add up to the kind's own over
/// all of them, those that do not pass too: only what passes is made.
fn changed_digits(
    report: &Report,
    kind: &'static str,
    passes: &impl Fn(&Position) -> bool,
    list: &mut Vec<Reading>,
) {
    let hours = report.position.kind != PositionKind::Horizontal
        && angles::first_unit(&report.position) == Some(AngleUnit::Hours);
    let (at, mut sum) = (list.len(), 0.0);
    for axis in 0..2 {
        let Some(angle) = (if axis == 0 {
            report.position.first
        } else {
            report.position.second
        }) else {
            continue;
        };
        let in_hours = axis == 0 && hours;
        let most = match (axis, in_hours) {
            (1, _) => 90.0,
            (_, true) => 24.0,
            (_, false) => 360.0,
        };
        let mut position = report.position.clone();
        let mut look = |changed: digits::Changed| {
            let value = changed.angle.value().abs();
            if value > most || (axis == 0 && value >= most) {
                return;
            }
            let prior = likelihood(&changed, axis, in_hours);
            sum += prior;
            if axis == 0 {
                position.first = Some(changed.angle);
            } else {
                position.second = Some(changed.angle);
            }
            if !passes(&position) {
                return;
            }
            let mut other = report.clone();
            other.position = position.clone();
            let words = format!(
                "{} read as {}",
                words::angle(&angle, in_hours),
                words::angle(&changed.angle, in_hours)
            );
            list.push(place(kind, prior, other, words));
        };
        if kind == "digits-exchanged" {
            digits::exchanged(&angle).for_each(&mut look);
        } else {
            digits::miskeyed(&angle).for_each(&mut look);
        }
    }
    for reading in &mut list[at..] {
        reading.prior *= priors().of(kind) / f64::max(sum, 1e-12);
    }
}

/// How often that digit goes wrong that way.
fn likelihood(changed: &digits::Changed, axis: usize, in_hours: bool) -> f64 {
    let d = &priors().digits;
    if changed.lost {
        return d.lost;
    }
    let by_place = match (axis, in_hours, changed.part) {
        _ if changed.place < 1.0 => d.decimals,
        (0, true, 0) => d.hours,
        (0, true, 1) => d.minutes_of_time,
        (0, true, _) => d.seconds_of_time,
        (0, false, 0) => d.degrees_of_ra,
        (1, _, 0) => d.degrees,
        (_, _, 1) => d.minutes_of_arc,
        _ => d.seconds_of_arc,
    };
    by_place
        * if changed.off_by == 1 {
            priors().off_by_one
        } else {
            1.0
        }
}

fn time(kind: &'static str, prior: f64, report: Report, words: String) -> Reading {
    Reading {
        kind,
        prior,
        changes: Changes::Time,
        report,
        words,
    }
}

/// Is the governing clock time said, or taken, to be UT?
fn is_universal(zone: Option<&Zone>) -> bool {
    matches!(
        zone,
        None | Some(Zone::Universal | Zone::Ut1 | Zone::Offset(0))
    )
}

fn zones(case: &Case, list: &mut Vec<Reading>) {
    let Some((instant, _)) = case.report.instants.first() else {
        return;
    };
    let universal = is_universal(instant.zone.as_ref().map(|z| &z.value));
    let of_site = case
        .report
        .site
        .as_ref()
        .and_then(|(site, _)| site.zone.as_ref().map(|z| z.value.clone()))
        .or_else(|| {
            case.meant
                .site
                .as_ref()
                .and_then(|s| s.zone.clone())
                .map(Zone::Named)
        });
    let (kind, zone) = match (universal, of_site) {
        (true, Some(zone)) => ("local-for-universal", zone),
        (false, _) => ("universal-for-local", Zone::Universal),
        _ => return,
    };
    let clock = instant.clock.map_or(instant.span, |c| c.span);
    // a decimal day or a Julian date is never local time
    if instant.clock.is_none() {
        return;
    }
    let mut other = case.report.clone();
    let span = instant.zone.as_ref().map_or(clock, |z| z.span);
    other.instants[0].0.zone = Some(Spanned::new(zone, span));
    // the offset is told when the reading is kept
    let words = case.quote(clock).trim_matches(['“', '”']).to_string();
    list.push(time(kind, priors().of(kind), other, words));
}

/// A calendar date some days on; `None` where it is a Julian date or no date.
fn days_on(date: &DateWritten, days: i64) -> Option<DateWritten> {
    match *date {
        DateWritten::Calendar {
            year,
            year_digits,
            month,
            mut day,
            to_day,
            order_unclear,
        } => {
            if !(1..=12).contains(&month) {
                return None;
            }
            let scale = 10u64.checked_pow(u32::from(day.places))?;
            let whole = (day.mantissa / scale) as u32;
            let (y, m, d) = civil(day_number(i64::from(year), month, whole) + days);
            day.mantissa = day.mantissa % scale + u64::from(d) * scale;
            let (_, _, next) = civil(day_number(i64::from(year), month, whole) + days + 1);
            Some(DateWritten::Calendar {
                year: y as i32,
                year_digits: year_digits.max(4),
                month: m,
                day,
                to_day: to_day.map(|_| next),
                order_unclear,
            })
        }
        DateWritten::Julian { mut number, count } => {
            let scale = 10u64.checked_pow(u32::from(number.places))?;
            number.mantissa = number
                .mantissa
                .checked_add_signed(days.checked_mul(i64::try_from(scale).ok()?)?)?;
            Some(DateWritten::Julian { number, count })
        }
    }
}

/// A date in words.
fn date_words(date: &DateWritten) -> String {
    match *date {
        DateWritten::Calendar {
            year, month, day, ..
        } => {
            format!(
                "{year:04}-{month:02}-{:02.*}",
                usize::from(day.places),
                day.value()
            )
        }
        DateWritten::Julian { number, .. } => {
            format!("JD {:.*}", usize::from(number.places), number.value())
        }
    }
}

fn day_off(report: &Report, list: &mut Vec<Reading>) {
    let Some(date) = report.instants.first().and_then(|(i, _)| i.date) else {
        return;
    };
    let at = list.len();
    for (days, factor) in [(1, 1.0), (-1, priors().directions.day_too_late)] {
        let Some(changed) = days_on(&date.value, days) else {
            continue;
        };
        let mut other = report.clone();
        other.instants[0].0.date = Some(Spanned::new(changed, date.span));
        list.push(time(
            "day-off",
            factor,
            other,
            format!(
                "{} read as {}",
                date_words(&date.value),
                date_words(&changed)
            ),
        ));
    }
    share(&mut list[at..]);
}

fn am_for_pm(report: &Report, list: &mut Vec<Reading>) {
    let Some(clock) = report.instants.first().and_then(|(i, _)| i.clock) else {
        return;
    };
    let hour = clock.hour.value();
    if clock.hour.places > 0 || hour >= 24.0 {
        return;
    }
    let mut other = report.clone();
    let Some(changed) = other.instants[0].0.clock.as_mut() else {
        return;
    };
    let words = match clock.pm {
        Some(pm) => {
            changed.pm = Some(!pm);
            format!(
                "{} read as {}",
                if pm { "pm" } else { "am" },
                if pm { "am" } else { "pm" }
            )
        }
        None => {
            let turned = if hour < 12.0 {
                hour + 12.0
            } else {
                hour - 12.0
            };
            changed.hour.mantissa = turned as u64;
            changed.hour.whole_digits = 2;
            let minute = clock
                .minute
                .map_or(String::new(), |m| format!(":{:02.0}", m.value().floor()));
            format!("{hour:02.0}{minute} read as {turned:02.0}{minute}")
        }
    };
    list.push(time("am-for-pm", priors().of("am-for-pm"), other, words));
}

fn month_misread(report: &Report, list: &mut Vec<Reading>) {
    let Some(date) = report.instants.first().and_then(|(i, _)| i.date) else {
        return;
    };
    let at = list.len();
    let mut push = |changed: Report, factor: f64| {
        if let Some(now) = changed.instants[0].0.date {
            let words = format!(
                "{} read as {}",
                date_words(&date.value),
                date_words(&now.value)
            );
            list.push(time("month-misread", factor, changed, words));
        }
    };
    if let Some(exchanged) = crate::rules::day_and_month_exchanged(report) {
        push(exchanged, 1.0);
    }
    for step in [-1i64, 1] {
        let mut other = report.clone();
        if let Some(written) = other.instants[0].0.date.as_mut()
            && let DateWritten::Calendar {
                year,
                month,
                to_day: None,
                ..
            } = &mut written.value
            && (1..=12).contains(month)
        {
            let next = i64::from(*month) + step;
            *year += (next - 1).div_euclid(12) as i32;
            *month = ((next - 1).rem_euclid(12) + 1) as u32;
            push(other, priors().directions.neighbouring_month);
        }
    }
    share(&mut list[at..]);
}
