//! Time scales: civil UTC, TAI, TT, TDB and UT1, leap seconds, Delta T, Julian dates and epochs.
//!
//! An instant is UTC as a two-part quasi Julian date, as ERFA has it: the Julian date of 0h, and the part of that day
//! gone, where a day that ends in a leap second is 86,401 s long. Before 1972 UTC is taken as UT1, and TT follows from
//! Delta T. UT1 is UTC (at most 0.9 s off since 1972), unless a caller has a better value.

/// Julian date of the zero of the modified Julian date.
pub const MJD_ZERO: f64 = 2_400_000.5;
/// J2000.0 (2000 January 1.5 TT) as a Julian date.
pub const J2000: f64 = 2_451_545.0;
/// TT − TAI, seconds (by definition).
pub const TT_MINUS_TAI_S: f64 = 32.184;
/// 1972 January 1, 0h, as MJD: leap seconds begin.
const LEAP_ERA: i64 = 41_317;
/// Years a civil date may have here (proleptic Gregorian).
pub const YEARS: std::ops::RangeInclusive<i32> = -4712..=9999;

/// A civil date and time, UTC (proleptic Gregorian calendar).
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Civil {
    /// Astronomical year.
    pub year: i32,
    /// 1 to 12.
    pub month: u32,
    /// 1 to 31.
    pub day: u32,
    /// 0 to 23.
    pub hour: u32,
    /// 0 to 59.
    pub minute: u32,
    /// [0, 60), or [60, 61) within a leap second. Rounded to a microsecond.
    pub second: f64,
}

/// Why a civil date and time is none.
#[derive(Clone, Copy, PartialEq, Eq, Debug, thiserror::Error)]
pub enum TimeError {
    /// Outside [`YEARS`].
    #[error("the year lies outside -4712 to 9999")]
    Year,
    /// Month not 1 to 12.
    #[error("there is no such month")]
    Month,
    /// That month has no such day.
    #[error("that month has no such day")]
    Day,
    /// Hour not 0 to 23.
    #[error("there is no such hour")]
    Hour,
    /// Minute not 0 to 59.
    #[error("there is no such minute")]
    Minute,
    /// Second below 0, at or above 61, or not a number.
    #[error("there is no such second")]
    Second,
    /// Second 60 where no leap second was.
    #[error("there was no leap second then")]
    NoLeapSecond,
    /// A number that is infinite or none.
    #[error("that is not a finite number")]
    NotFinite,
}

/// The tables as the build script lays them out (`src/sky/data/tables.rs`): `LEAPS`, the MJD from which each TAI − UTC
/// holds, whole seconds, from 1972 on; `DELTA_T`, TT − UT1 at 0h of January 1 of each year from `DELTA_T_FROM`, seconds.
#[allow(clippy::approx_constant)] // figures of a table
mod table {
    include!(concat!(env!("OUT_DIR"), "/time.rs"));
}

use self::table::{DELTA_T, DELTA_T_FROM, LEAPS};

// ---------------------------------------------------------------------------------------------- calendar

/// Days in a month of the Gregorian calendar; 0 for no month.
pub fn days_in_month(year: i32, month: u32) -> u32 {
    let leap = year % 4 == 0 && (year % 100 != 0 || year % 400 == 0);
    match month {
        2 => 28 + u32::from(leap),
        4 | 6 | 9 | 11 => 30,
        1..=12 => 31,
        _ => 0,
    }
}

/// Modified Julian day number of 0h of a Gregorian date (Fliegel & Van Flandern 1968, Comm. ACM 11, 657, in floor form).
pub fn mjd_of(year: i32, month: u32, day: u32) -> i64 {
    let (y, m, d) = (i64::from(year), i64::from(month), i64::from(day));
    let a = (14 - m) / 12;
    let (y, m) = (y + 4800 - a, m + 12 * a - 3);
    d + (153 * m + 2) / 5 + 365 * y + y.div_euclid(4) - y.div_euclid(100) + y.div_euclid(400)
        - 32_045
        - 2_400_001
}

/// Gregorian year, month and day of a modified Julian day number (the inverse of [`mjd_of`]).
pub fn date_of(mjd: i64) -> (i32, u32, u32) {
    let a = mjd + 2_400_001 + 32_044;
    let b = (4 * a + 3).div_euclid(146_097);
    let c = a - (146_097 * b).div_euclid(4);
    let d = (4 * c + 3).div_euclid(1461);
    let e = c - (1461 * d).div_euclid(4);
    let m = (5 * e + 2).div_euclid(153);
    let day = e - (153 * m + 2).div_euclid(5) + 1;
    let month = m + 3 - 12 * m.div_euclid(10);
    let year = 100 * b + d - 4800 + m.div_euclid(10);
    (year as i32, month as u32, day as u32)
}

/// TAI − UTC on a day, whole seconds; `None` before 1972.
pub fn tai_minus_utc(mjd: i64) -> Option<f64> {
    LEAPS.iter().rev().find(|r| r.0 <= mjd).map(|r| r.1)
}

/// Seconds in a UTC day: 86,401 where it ends in a leap second.
pub fn day_length_s(mjd: i64) -> f64 {
    let leap = mjd >= LEAP_ERA && LEAPS.iter().any(|r| r.0 == mjd + 1);
    86_400.0 + f64::from(u8::from(leap))
}

// ---------------------------------------------------------------------------------------------- civil time

/// UTC from a civil date and time. A second 60 is right only where a leap second was.
pub fn utc_from_civil(
    year: i32,
    month: u32,
    day: u32,
    hour: u32,
    minute: u32,
    second: f64,
) -> Result<(f64, f64), TimeError> {
    if !YEARS.contains(&year) {
        return Err(TimeError::Year);
    }
    if !(1..=12).contains(&month) {
        return Err(TimeError::Month);
    }
    if !(1..=days_in_month(year, month)).contains(&day) {
        return Err(TimeError::Day);
    }
    if hour > 23 {
        return Err(TimeError::Hour);
    }
    if minute > 59 {
        return Err(TimeError::Minute);
    }
    if !(0.0..61.0).contains(&second) {
        return Err(TimeError::Second);
    }
    let mjd = mjd_of(year, month, day);
    let length = day_length_s(mjd);
    if second >= 60.0 && (length == 86_400.0 || hour != 23 || minute != 59) {
        return Err(TimeError::NoLeapSecond);
    }
    let seconds = f64::from(hour * 3600 + minute * 60) + second;
    Ok((MJD_ZERO + mjd as f64, seconds / length))
}

/// The civil date and time of a UTC instant, to a microsecond.
pub fn civil_from_utc(utc: (f64, f64)) -> Civil {
    let (mut mjd, seconds) = day_and_seconds(utc);
    let mut micros = (seconds * 1e6).round() as i64;
    let length = day_length_s(mjd) as i64 * 1_000_000;
    if micros >= length {
        micros -= length;
        mjd += 1;
    }
    let (year, month, day) = date_of(mjd);
    let minutes = (micros / 60_000_000).min(1439);
    Civil {
        year,
        month,
        day,
        hour: (minutes / 60) as u32,
        minute: (minutes % 60) as u32,
        second: (micros - minutes * 60_000_000) as f64 / 1e6,
    }
}

/// The MJD of the UTC day and the seconds gone of it, [0, length of the day).
pub fn day_and_seconds(utc: (f64, f64)) -> (i64, f64) {
    let (day, part) = whole_and_part(utc);
    (day, part * day_length_s(day))
}

/// A two-part Julian date as MJD, whole days and the rest, [0, 1). Dates a million years away count as that.
fn whole_and_part((a, b): (f64, f64)) -> (i64, f64) {
    const FAR_D: f64 = 365.25e6;
    if !(a + b - MJD_ZERO).abs().le(&FAR_D) {
        let sign = if a + b < 0.0 { -1.0 } else { 1.0 };
        return ((sign * FAR_D) as i64, 0.0);
    }
    // the larger part first, so that nothing of the smaller is lost
    let (a, b) = if a.abs() >= b.abs() { (a, b) } else { (b, a) };
    let big = a - MJD_ZERO;
    let whole = big.floor();
    let mut part = (big - whole) + b;
    let carry = part.floor();
    part -= carry;
    let mut day = (whole + carry) as i64;
    if part >= 1.0 {
        part = 0.0;
        day += 1;
    }
    (day, part)
}

/// UTC some (elapsed, SI) seconds later; before 1972 seconds of UT.
pub fn add_seconds(utc: (f64, f64), seconds: f64) -> (f64, f64) {
    let (day, of_day) = day_and_seconds(utc);
    match tai_minus_utc(day) {
        Some(offset) => utc_from_tai(two_part(day, of_day + offset + seconds)),
        None => two_part(day, of_day + seconds),
    }
}

/// A two-part Julian date from an MJD and seconds of 86,400 a day, carried.
fn two_part(day: i64, seconds: f64) -> (f64, f64) {
    let seconds = if seconds.is_finite() { seconds } else { 0.0 };
    let carry = (seconds / 86_400.0).floor();
    (
        MJD_ZERO + (day as f64 + carry),
        (seconds - carry * 86_400.0) / 86_400.0,
    )
}

// ---------------------------------------------------------------------------------------------- scales

/// TT of a UTC instant. Before 1972 UTC is UT1 and Delta T is added.
pub fn tt_from_utc(utc: (f64, f64)) -> (f64, f64) {
    let (day, seconds) = day_and_seconds(utc);
    match tai_minus_utc(day) {
        Some(offset) => two_part(day, seconds + offset + TT_MINUS_TAI_S),
        None => two_part(day, seconds + delta_t_s(utc.0 + utc.1)),
    }
}

/// TAI of a UTC instant: TT − 32.184 s.
pub fn tai_from_utc(utc: (f64, f64)) -> (f64, f64) {
    shift(tt_from_utc(utc), -TT_MINUS_TAI_S)
}

/// UT1 of a UTC instant, taken as equal to it (in days of 86,400 s) plus `ut1_minus_utc_s`, 0 where it is not known.
pub fn ut1_from_utc(utc: (f64, f64), ut1_minus_utc_s: f64) -> (f64, f64) {
    let (day, seconds) = day_and_seconds(utc);
    two_part(day, seconds + ut1_minus_utc_s)
}

/// How far UT1 may be from UTC where it is taken as equal, seconds: 0.9 since 1972 (by which leap seconds keep them
/// together, ITU-R TF.460), nothing before, when a time is UT itself. One second is 15″ of hour angle.
pub fn ut1_error_s(utc: (f64, f64)) -> f64 {
    let (day, _) = day_and_seconds(utc);
    if day < LEAP_ERA { 0.0 } else { 0.9 }
}

/// TDB of a UTC instant.
pub fn tdb_from_utc(utc: (f64, f64)) -> (f64, f64) {
    let tt = tt_from_utc(utc);
    shift(tt, tdb_minus_tt_s(tt.0 + tt.1))
}

/// UTC of a TAI instant.
pub fn utc_from_tai(tai: (f64, f64)) -> (f64, f64) {
    let (day, part) = whole_and_part(tai);
    let seconds = part * 86_400.0;
    // the latest step whose own second the instant has reached
    let reached = |r: &&(i64, f64)| (day - r.0) as f64 * 86_400.0 + seconds >= r.1;
    let Some(&(_, offset)) = LEAPS.iter().rev().find(reached) else {
        return ut_from_tt(shift(tai, TT_MINUS_TAI_S));
    };
    let (mut day, mut seconds) = (day, seconds - offset);
    while seconds < 0.0 {
        day -= 1;
        seconds += 86_400.0;
    }
    // within a leap second the day before is not over yet
    let before = day_length_s(day - 1);
    if before > 86_400.0 && seconds < 1.0 && tai_minus_utc(day).is_some_and(|now| now > offset) {
        day -= 1;
        seconds += 86_400.0;
    }
    (MJD_ZERO + day as f64, seconds / day_length_s(day))
}

/// UTC of a TT instant.
pub fn utc_from_tt(tt: (f64, f64)) -> (f64, f64) {
    utc_from_tai(shift(tt, -TT_MINUS_TAI_S))
}

/// UTC of a TDB instant.
pub fn utc_from_tdb(tdb: (f64, f64)) -> (f64, f64) {
    utc_from_tt(shift(tdb, -tdb_minus_tt_s(tdb.0 + tdb.1)))
}

/// UTC of a UT1 instant, taken as equal.
pub fn utc_from_ut1(ut1: (f64, f64)) -> (f64, f64) {
    let (day, part) = whole_and_part(ut1);
    let seconds = part * 86_400.0;
    (MJD_ZERO + day as f64, seconds / day_length_s(day))
}

/// UT of a TT instant before 1972: Delta T taken off.
fn ut_from_tt(tt: (f64, f64)) -> (f64, f64) {
    let first = delta_t_s(tt.0 + tt.1);
    let ut = shift(tt, -first);
    shift(tt, -delta_t_s(ut.0 + ut.1))
}

fn shift(jd: (f64, f64), seconds: f64) -> (f64, f64) {
    let (day, part) = whole_and_part(jd);
    two_part(day, part * 86_400.0 + seconds)
}

/// TT − UT1, seconds: the yearly table 1800 to its end, beyond it the parabola of Morrison & Stephenson 2004
/// (J. Hist. Astron. 35, 327: −20 + 32 u², u centuries from 1820), joined to the table's ends over a century.
/// Good to 1 s in the table, to some 10 s in 1600, and no better than 20 s in 2150.
pub fn delta_t_s(jd: f64) -> f64 {
    let year = 2000.0 + (jd - 2_451_544.5) / 365.25;
    let (first, table) = (f64::from(DELTA_T_FROM), &DELTA_T);
    let parabola = |y: f64| -20.0 + 32.0 * ((y - 1820.0) / 100.0).powi(2);
    let last = first + (table.len().max(1) - 1) as f64;
    let value_at = |y: f64| {
        let at = ((y - first).floor() as usize).min(table.len().saturating_sub(2));
        let part = y - first - at as f64;
        table[at] + (table[at + 1] - table[at]) * part
    };
    if table.len() < 2 || !year.is_finite() {
        return 0.0;
    }
    if (first..=last).contains(&year) {
        return value_at(year);
    }
    let (edge, beyond) = if year < first {
        (first, first - year)
    } else {
        (last, year - last)
    };
    let fade = (1.0 - beyond / 100.0).max(0.0);
    parabola(year) + (value_at(edge) - parabola(edge)) * fade
}

/// TDB − TT at the Earth's centre, seconds: USNO Circular 179 (Kaplan 2005), eq. 2.6, good to 10 µs from 1600 to 2200.
pub fn tdb_minus_tt_s(jd_tt: f64) -> f64 {
    let t = (jd_tt - J2000) / 36_525.0;
    0.001657 * (628.3076 * t + 6.2401).sin()
        + 0.000022 * (575.3385 * t + 4.2970).sin()
        + 0.000014 * (1256.6152 * t + 6.1969).sin()
        + 0.000005 * (606.9777 * t + 4.0212).sin()
        + 0.000005 * (52.9691 * t + 0.4444).sin()
        + 0.000002 * (21.3299 * t + 5.5431).sin()
        + 0.000010 * t * (628.3076 * t + 4.2490).sin()
}

// ---------------------------------------------------------------------------------------------- Julian dates, epochs

/// UTC from a plain Julian date (days of 86,400 s even where a leap second fell).
pub fn jd_to_utc(jd: f64, part: f64) -> Result<(f64, f64), TimeError> {
    if !jd.is_finite() || !part.is_finite() {
        return Err(TimeError::NotFinite);
    }
    let (day, part) = whole_and_part((jd, part));
    // JD 0 is in -4712 (proleptic Gregorian -4713 November 24); the last day is that of 9999 December 31
    if !(-2_400_000..=mjd_of(9999, 12, 31)).contains(&day) {
        return Err(TimeError::Year);
    }
    Ok((MJD_ZERO + day as f64, part * 86_400.0 / day_length_s(day)))
}

/// UTC from a modified Julian date: whole days and a part.
pub fn mjd_to_utc(mjd: f64, part: f64) -> Result<(f64, f64), TimeError> {
    if !mjd.is_finite() || !part.is_finite() {
        return Err(TimeError::NotFinite);
    }
    let whole = mjd.floor();
    jd_to_utc(MJD_ZERO + whole, (mjd - whole) + part)
}

/// The plain Julian date of a UTC instant (days of 86,400 s), one number: good to 40 µs.
pub fn jd_from_utc(utc: (f64, f64)) -> f64 {
    let (day, seconds) = day_and_seconds(utc);
    MJD_ZERO + day as f64 + seconds.min(86_400.0) / 86_400.0
}

/// Julian epoch of a (TT) Julian date: 2000.0 + (JD − 2451545.0)/365.25.
pub fn julian_epoch(jd: (f64, f64)) -> f64 {
    2000.0 + ((jd.0 - J2000) + jd.1) / 365.25
}

/// Julian date (TT) of a Julian epoch.
pub fn jd_of_julian_epoch(year: f64) -> (f64, f64) {
    (MJD_ZERO, 51_544.5 + (year - 2000.0) * 365.25)
}

/// Length of the tropical year B1900, days, and the JD of B1900.0 (Lieske 1979, A&A 73, 282).
const TROPICAL_YEAR_D: f64 = 365.242_198_781;
const B1900: f64 = 2_415_020.313_52;

/// Besselian epoch of a (TT) Julian date.
pub fn besselian_epoch(jd: (f64, f64)) -> f64 {
    1900.0 + ((jd.0 - B1900) + jd.1) / TROPICAL_YEAR_D
}

/// Julian date (TT) of a Besselian epoch.
pub fn jd_of_besselian_epoch(year: f64) -> (f64, f64) {
    (
        MJD_ZERO,
        (B1900 - MJD_ZERO) + (year - 1900.0) * TROPICAL_YEAR_D,
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Days and dates: Meeus, Astronomical Algorithms, 2nd ed., ch. 7; leap seconds: IERS Bulletin C 52 (2016).
    #[test]
    fn civil_dates_and_leap_seconds() {
        let utc = utc_from_civil(1957, 10, 4, 0, 0, 0.0).unwrap();
        assert_eq!(utc, (2436115.5, 0.0));
        assert_eq!(utc_from_civil(2023, 2, 29, 0, 0, 0.0), Err(TimeError::Day));
        assert_eq!(
            utc_from_civil(2024, 2, 29, 25, 0, 0.0),
            Err(TimeError::Hour)
        );
        assert_eq!(
            utc_from_civil(2015, 12, 31, 23, 59, 60.0),
            Err(TimeError::NoLeapSecond)
        );
        assert_eq!(
            utc_from_civil(2016, 12, 31, 22, 59, 60.0),
            Err(TimeError::NoLeapSecond)
        );
        assert_eq!(
            utc_from_civil(2016, 12, 31, 23, 59, f64::NAN),
            Err(TimeError::Second)
        );
        let leap = utc_from_civil(2016, 12, 31, 23, 59, 60.5).unwrap();
        let civil = civil_from_utc(leap);
        assert_eq!((civil.hour, civil.minute, civil.second), (23, 59, 60.5));
        let next = civil_from_utc(add_seconds(leap, 1.0));
        assert_eq!((next.year, next.hour, next.second), (2017, 0, 0.5));
        let back = civil_from_utc(add_seconds(
            utc_from_civil(2017, 1, 1, 0, 0, 0.5).unwrap(),
            -1.0,
        ));
        assert_eq!((back.year, back.minute, back.second), (2016, 59, 60.5));
    }

    #[test]
    fn every_scale_there_and_back() {
        for mjd in (-20_000..90_000).step_by(37) {
            for part in [0.0, 0.25, 0.9999] {
                let utc = (MJD_ZERO + mjd as f64, part);
                for (there, back) in [
                    (
                        tt_from_utc(utc),
                        utc_from_tt as fn((f64, f64)) -> (f64, f64),
                    ),
                    (tai_from_utc(utc), utc_from_tai),
                    (tdb_from_utc(utc), utc_from_tdb),
                    (ut1_from_utc(utc, 0.0), utc_from_ut1),
                ] {
                    let again = back(there);
                    let off = ((again.0 - utc.0) + (again.1 - utc.1)) * 86_400.0;
                    assert!(off.abs() < 1e-6, "{mjd} {part}: {off} s");
                }
            }
            assert_eq!(mjd, {
                let (y, m, d) = date_of(mjd);
                mjd_of(y, m, d)
            });
        }
    }
}
