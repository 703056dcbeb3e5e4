//! The governing instant of a report: date, clock and zone as written, brought to UTC at its beginning as written.

pub mod zones;

use crate::house::House;
use crate::report::{
    Clock, DateWritten, InstantMeant, InstantTrouble, InstantWritten, JulianCount, MONTHS, Number,
    Report, SiteMeant, Zone,
};
use crate::sky::time;
use jiff::civil::DateTime;
use jiff::tz::TimeZone;
use zones::{InZone, Local};

/// Offsets beyond this do not exist, minutes.
const LARGEST_OFFSET_MIN: i32 = 14 * 60;
/// Before this year the tables of merged zones have lost what was in force.
const ZONES_KNOWN_FROM: i32 = 1970;
const DAY_S: f64 = 86_400.0;

type Resolved = Result<InstantMeant, InstantTrouble>;

/// The governing instant of a report. No instant comes with a trouble: nothing is taken in silence.
pub fn resolve(
    report: &Report,
    _house: &House,
    site: Option<&SiteMeant>,
) -> (Option<InstantMeant>, Option<InstantTrouble>) {
    let Some((written, _)) = report.instants.first() else {
        return (None, None);
    };
    let beside = report
        .site
        .as_ref()
        .and_then(|(s, _)| s.zone.as_ref())
        .map(|z| &z.value);
    match of(written, site, beside) {
        Ok(meant) => (Some(meant), None),
        Err(trouble) => (None, Some(trouble)),
    }
}

/// One instant as meant, seen from a site; `beside` is a zone written beside the site.
pub fn of(written: &InstantWritten, site: Option<&SiteMeant>, beside: Option<&Zone>) -> Resolved {
    let Some(date) = &written.date else {
        return Err(InstantTrouble::DateMissing);
    };
    if let Some(unread) = written.clock_unread {
        // the day alone would be taken for midnight
        return Err(InstantTrouble::ClockUnread(unread));
    }
    let place = Place { site, beside };
    match date.value {
        DateWritten::Calendar { year_digits: 0, .. } => Err(InstantTrouble::YearMissing),
        DateWritten::Julian { number, count } => julian(number, count, written),
        DateWritten::Calendar {
            year,
            year_digits,
            month,
            day,
            to_day,
            ..
        } => {
            let date = Date {
                year: full_year(year, year_digits),
                month,
                day,
                to_day,
            };
            calendar(date, written, place)
        }
    }
}

/// Two digits of a year are 19xx from 50 on, else 20xx.
fn full_year(year: i32, digits: u8) -> i32 {
    match (digits, year) {
        (2, 50..=99) => 1900 + year,
        (2, 0..=49) => 2000 + year,
        _ => year,
    }
}

fn impossible<T>(why: impl Into<String>) -> Result<T, InstantTrouble> {
    Err(InstantTrouble::Impossible(why.into()))
}

fn doubtful<T>(why: impl Into<String>) -> Result<T, InstantTrouble> {
    Err(InstantTrouble::ZoneDoubtful { why: why.into() })
}

// ---------------------------------------------------------------------------------------------- Julian dates

fn julian(number: Number, count: JulianCount, written: &InstantWritten) -> Resolved {
    let scale = 10u64
        .checked_pow(u32::from(number.places))
        .unwrap_or(u64::MAX);
    let whole = (number.mantissa / scale) as f64;
    let part = (number.mantissa % scale) as f64 / scale as f64;
    if count == JulianCount::Short
        || count == JulianCount::Jd && (10_000.0..100_000.0).contains(&whole)
    {
        return doubtful(format!(
            "JD {} can be reduced (JD - 2400000) or modified (MJD), and the two begin 12 hours apart",
            number.value()
        ));
    }
    let jd = match count {
        JulianCount::Jd | JulianCount::Short | JulianCount::Hjd | JulianCount::Bjd => (whole, part),
        // HJD and BJD are often written without their first digits as well
        JulianCount::Reduced => (whole + 2_400_000.0, part),
        JulianCount::Mjd => (whole + time::MJD_ZERO, part),
    };
    let jd = match count {
        JulianCount::Hjd | JulianCount::Bjd if whole < 100_000.0 => (whole + 2_400_000.0, part),
        _ => jd,
    };
    let years = || {
        InstantTrouble::Impossible(format!(
            "the Julian date {} lies outside the years {} to {}",
            jd.0 + jd.1,
            time::YEARS.start(),
            time::YEARS.end()
        ))
    };
    // the range is checked first: the scales know no limits
    let plain = time::jd_to_utc(jd.0, jd.1).map_err(|_| years())?;
    let utc = match written.zone.as_ref().map(|z| &z.value) {
        Some(Zone::Terrestrial) => time::utc_from_tt(jd),
        Some(Zone::Barycentric) => time::utc_from_tdb(jd),
        Some(Zone::Atomic) => time::utc_from_tai(jd),
        _ => plain,
    };
    Ok(InstantMeant {
        utc,
        step_s: DAY_S / scale as f64,
        heliocentric: matches!(count, JulianCount::Hjd | JulianCount::Bjd),
    })
}

// ---------------------------------------------------------------------------------------------- dates and clocks

/// A calendar date, not yet checked.
#[derive(Clone, Copy)]
struct Date {
    year: i32,
    month: u32,
    day: Number,
    to_day: Option<u32>,
}

/// Where the clock hung.
#[derive(Clone, Copy)]
struct Place<'a> {
    site: Option<&'a SiteMeant>,
    beside: Option<&'a Zone>,
}

/// The modified Julian day number of a date, or why there is no such day.
fn day_number(date: &Date, day: u64) -> Result<i64, InstantTrouble> {
    if !time::YEARS.contains(&date.year) {
        return impossible(format!("the year {} is out of all reach", date.year));
    }
    if !(1..=12).contains(&date.month) {
        return impossible(format!("there is no month {}", date.month));
    }
    let days = time::days_in_month(date.year, date.month);
    if !(1..=u64::from(days)).contains(&day) {
        let month = MONTHS[date.month as usize - 1];
        return impossible(format!(
            "{month} {} has {days} days, so there is no {month} {day}",
            date.year
        ));
    }
    Ok(time::mjd_of(date.year, date.month, day as u32))
}

fn calendar(date: Date, written: &InstantWritten, place: Place) -> Resolved {
    let scale = 10u64
        .checked_pow(u32::from(date.day.places))
        .unwrap_or(u64::MAX);
    let mjd = day_number(&date, date.day.mantissa / scale)?;
    if let Some(to) = date.to_day
        && !(1..=31).contains(&to)
    {
        return impossible(format!("there is no day {to}"));
    }
    let zone = written.zone.as_ref().map(|z| &z.value);
    let Some(clock) = &written.clock else {
        return without_clock(date, scale, mjd, zone, written.plus_s, place);
    };
    let (start, leap) = clock_seconds(clock)?;
    let mut step_s = clock_step(clock);
    let mut seconds = start;
    if let Some(until) = &written.until {
        let (end, _) = clock_seconds(until)?;
        let end = if end < start { end + DAY_S } else { end };
        seconds = (start + end) / 2.0;
        step_s = step_s.max(clock_step(until)).max((end - start) / 2.0);
    }
    let Some(zone) = zone else {
        return Err(InstantTrouble::ZoneMissing);
    };
    let mut moment = Moment { mjd, seconds };
    if date.to_day.is_some() {
        let universal = matches!(
            zone,
            Zone::Universal | Zone::Ut1 | Zone::Terrestrial | Zone::Barycentric | Zone::Atomic
        );
        let (night_of, sure) = night_between(moment, universal, place);
        moment = night_of;
        if !sure {
            step_s = step_s.max(DAY_S);
        }
    }
    let mut utc = moment.utc(zone, place)?;
    if leap {
        utc = in_leap_second(utc, clock)?;
    }
    if let Some(plus) = written.plus_s {
        utc = time::add_seconds(utc, plus.value());
        step_s = step_s.max(plus.step());
    }
    Ok(InstantMeant {
        utc,
        step_s,
        heliocentric: false,
    })
}

/// A date alone, a decimal day, or seconds of a day. Decimal days without a zone are UT: so they have always been.
fn without_clock(
    date: Date,
    scale: u64,
    mjd: i64,
    zone: Option<&Zone>,
    plus_s: Option<Number>,
    place: Place,
) -> Resolved {
    let part = (date.day.mantissa % scale) as f64 / scale as f64;
    let mut step_s = DAY_S / scale as f64;
    let mut utc = if date.day.places == 0 && plus_s.is_none() {
        // the evening's noon begins the night of a double date
        let noon = if date.to_day.is_some() { 0.5 } else { 0.0 };
        (time::MJD_ZERO + mjd as f64, noon)
    } else {
        match zone {
            // a decimal day is a part of that day, however long it was
            None | Some(Zone::Universal | Zone::Ut1) => (time::MJD_ZERO + mjd as f64, part),
            Some(zone) => Moment {
                mjd,
                seconds: part * DAY_S,
            }
            .utc(zone, place)?,
        }
    };
    if let Some(plus) = plus_s {
        if plus.value() >= DAY_S + 1.0 {
            return impossible(format!("a day has 86400 seconds, not {}", plus.value()));
        }
        utc = time::add_seconds(utc, plus.value());
        step_s = plus.step();
    }
    Ok(InstantMeant {
        utc,
        step_s,
        heliocentric: false,
    })
}

/// The leap second that follows a 59th second of UTC, if there was one.
fn in_leap_second(utc: (f64, f64), clock: &Clock) -> Result<(f64, f64), InstantTrouble> {
    let civil = time::civil_from_utc(utc);
    let (mjd, _) = time::day_and_seconds(utc);
    if (civil.hour, civil.minute) == (23, 59)
        && civil.second >= 59.0
        && time::day_length_s(mjd) > DAY_S
    {
        Ok(time::add_seconds(utc, 1.0))
    } else {
        impossible(format!("{}: there was no leap second then", shown(clock)))
    }
}

/// Seconds of the day that a clock shows. For a 60th second those of the 59th, and true.
fn clock_seconds(clock: &Clock) -> Result<(f64, bool), InstantTrouble> {
    let hour = clock.hour.value();
    let minute = clock.minute.map_or(0.0, Number::value);
    let second = clock.second.map_or(0.0, Number::value);
    let shown = || shown(clock);
    let hour = match clock.pm {
        None => hour,
        Some(_) if !(1.0..13.0).contains(&hour) => {
            return impossible(format!(
                "{} with am or pm: such a clock goes from 1 to 12",
                shown()
            ));
        }
        Some(pm) => hour % 12.0 + if pm { 12.0 } else { 0.0 },
    };
    // 24:00 is the end of the day, and no later time has an hour 24
    if hour > 24.0 || hour == 24.0 && (minute > 0.0 || second > 0.0) {
        return impossible(format!("{}: a day ends at 24:00", shown()));
    }
    if minute >= 60.0 {
        return impossible(format!("{}: an hour has 60 minutes", shown()));
    }
    if second >= 61.0 || second >= 60.0 && minute != 59.0 {
        return impossible(format!("{}: a minute has 60 seconds", shown()));
    }
    let leap = second >= 60.0;
    let second = if leap { second - 1.0 } else { second };
    Ok((hour * 3600.0 + minute * 60.0 + second, leap))
}

fn clock_step(clock: &Clock) -> f64 {
    match (clock.minute, clock.second) {
        (_, Some(second)) => second.step(),
        (Some(minute), None) => 60.0 * minute.step(),
        (None, None) => 3600.0 * clock.hour.step(),
    }
}

/// The clock time for messages: `25:10`.
fn shown(clock: &Clock) -> String {
    let two = |n: Number| {
        let places = usize::from(n.places);
        let width = if places == 0 { 2 } else { places + 3 };
        format!("{:0width$.places$}", n.value())
    };
    let mut text = two(clock.hour);
    for part in [clock.minute, clock.second].into_iter().flatten() {
        text.push(':');
        text.push_str(&two(part));
    }
    text
}

/// The night between two local dates: which date a clock time belongs to, and whether that is sure.
///
/// By a local clock the evening's date holds until midnight. By UT the night is the day from the site's mean noon; where
/// no site is known that of Greenwich stands in, and the date is not sure.
fn night_between(moment: Moment, universal: bool, place: Place) -> (Moment, bool) {
    let longitude_deg = match (universal, place.site) {
        (false, _) => Some(0.0),
        (true, site) => site.map(|s| s.longitude_deg),
    };
    let noon_s = DAY_S / 2.0 - longitude_deg.unwrap_or(0.0) / 360.0 * DAY_S;
    // the whole day that brings the clock into [noon, noon + 24 h) of the evening's date
    let days = ((noon_s - moment.seconds) / DAY_S).ceil();
    let moment = Moment {
        mjd: moment.mjd + days as i64,
        ..moment
    };
    (moment, longitude_deg.is_some())
}

// ---------------------------------------------------------------------------------------------- zones

/// A day and the seconds its clock has gone.
#[derive(Clone, Copy, Debug)]
struct Moment {
    mjd: i64,
    seconds: f64,
}

impl Moment {
    /// UTC of this reading of a clock that keeps a zone.
    fn utc(self, zone: &Zone, place: Place) -> Result<(f64, f64), InstantTrouble> {
        let scale = || (time::MJD_ZERO + self.mjd as f64, self.seconds / DAY_S);
        match zone {
            Zone::Universal | Zone::Ut1 => self.minus(0),
            Zone::Terrestrial => Ok(time::utc_from_tt(scale())),
            Zone::Barycentric => Ok(time::utc_from_tdb(scale())),
            Zone::Atomic => Ok(time::utc_from_tai(scale())),
            Zone::Offset(minutes) if minutes.abs() > LARGEST_OFFSET_MIN => {
                doubtful(format!("no place keeps {}", zones::offset_text(*minutes)))
            }
            Zone::Offset(minutes) => self.minus(minutes * 60),
            Zone::Named(name) => self.in_named(name),
            Zone::Abbreviation(letters) => self.by_abbreviation(letters, place),
            Zone::Local => match (place.beside, place.site.and_then(|s| s.zone.as_deref())) {
                // "local" beside a site says nothing that "local" beside the time does not
                (Some(Zone::Local) | None, Some(name)) => self.in_named(name),
                (Some(Zone::Local) | None, None) => Err(InstantTrouble::LocalWithoutZone),
                (Some(beside), _) => self.utc(beside, place),
            },
        }
    }

    /// UTC where the clock is some seconds ahead of it.
    fn minus(self, ahead_s: i32) -> Result<(f64, f64), InstantTrouble> {
        let seconds = self.seconds - f64::from(ahead_s);
        let days = (seconds / DAY_S).floor();
        let (mjd, seconds) = (self.mjd + days as i64, seconds - days * DAY_S);
        Ok((
            time::MJD_ZERO + mjd as f64,
            seconds / time::day_length_s(mjd),
        ))
    }

    /// The civil time on the clock, to the second, for the zone tables.
    fn civil(self) -> Result<DateTime, InstantTrouble> {
        let days = (self.seconds / DAY_S).floor();
        let (year, month, day) = time::date_of(self.mjd + days as i64);
        let whole = (self.seconds - days * DAY_S).floor() as i32;
        DateTime::new(
            year as i16,
            month as i8,
            day as i8,
            (whole / 3600) as i8,
            (whole / 60 % 60) as i8,
            (whole % 60) as i8,
            0,
        )
        .or_else(|_| impossible(format!("the zone tables do not reach the year {year}")))
    }

    fn in_named(self, name: &str) -> Result<(f64, f64), InstantTrouble> {
        let Ok(zone) = TimeZone::get(name) else {
            return doubtful(format!("the zone tables have no “{name}”"));
        };
        let civil = self.civil()?;
        if i32::from(civil.year()) < ZONES_KNOWN_FROM {
            return doubtful(format!(
                "what the clocks of {name} showed before {ZONES_KNOWN_FROM} is not surely known"
            ));
        }
        match zones::local(&zone, civil) {
            Local::Offset(offset) => self.minus(offset),
            Local::Twice(first, second) => doubtful(format!(
                "that hour came twice in {name}, first at {} and then at {}",
                zones::offset_text(first / 60),
                zones::offset_text(second / 60)
            )),
            Local::Skipped(before, after) => impossible(format!(
                "the clocks of {name} never showed it: they went from {} to {} then",
                zones::offset_text(before / 60),
                zones::offset_text(after / 60)
            )),
        }
    }

    /// "ET" is ephemeris time, and in North America the clock of the east as well.
    fn ephemeris_or_eastern(self, place: Place) -> Result<(f64, f64), InstantTrouble> {
        let american = |s: &SiteMeant| match &s.zone {
            Some(name) => name.starts_with("America/") || name.starts_with("US/"),
            None => {
                (24.0..60.0).contains(&s.latitude_deg) && (-100.0..-60.0).contains(&s.longitude_deg)
            }
        };
        if place.site.is_some_and(american) {
            doubtful("ET can mean ephemeris time (TT) or US Eastern Time")
        } else {
            self.utc(&Zone::Terrestrial, place)
        }
    }

    fn by_abbreviation(self, letters: &str, place: Place) -> Result<(f64, f64), InstantTrouble> {
        if letters == "ET" {
            return self.ephemeris_or_eastern(place);
        }
        let civil = self.civil()?;
        let known = zones::meanings(letters);
        let own = place.site.and_then(|s| s.zone.as_deref());
        if let Some(name) = own
            && let Ok(zone) = TimeZone::get(name)
        {
            match zones::in_zone(&zone, letters, civil) {
                InZone::Right(offset) => return self.minus(offset),
                InZone::OutOfSeason { in_force } => {
                    return doubtful(format!(
                        "{letters} was not in force in {name} on that date: {in_force} was"
                    ));
                }
                InZone::Foreign => {}
            }
        }
        if known.is_empty() {
            return doubtful(format!("{letters} is no abbreviation known here"));
        }
        let could: Vec<_> = known
            .iter()
            .filter(|m| {
                place
                    .site
                    .is_none_or(|s| m.fits(s.latitude_deg, s.longitude_deg))
            })
            .collect();
        let list = |meanings: &[&zones::Meaning]| {
            meanings
                .iter()
                .map(|m| format!("{} ({})", m.name, zones::offset_text(m.offset_min)))
                .collect::<Vec<_>>()
                .join(", ")
        };
        match could[..] {
            [one] => {
                if zones::in_season(letters, civil).contains(one) {
                    self.minus(one.offset_min * 60)
                } else {
                    doubtful(format!(
                        "{} is not in force at that time of the year",
                        list(&could)
                    ))
                }
            }
            [] => doubtful(format!(
                "{letters} means {}, none of them kept at that site",
                list(&known.iter().collect::<Vec<_>>())
            )),
            _ => doubtful(format!("{letters} can mean {}", list(&could))),
        }
    }
}
