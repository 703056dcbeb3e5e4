//! `--now`: an instant as a person writes it, UTC: a date alone (0h), with a clock time, or an ISO 8601 time stamp.

use super::{Now, now_at};
use crate::report::MONTHS;
use jiff::civil::{Date, Time};

const EXPECTED: &str =
    "expected a date such as 2026-11-01, with or without a time: 2026-11-01 12:00 UT";

/// Reads what counts as now.
pub(super) fn instant(word: &str) -> Result<Now, String> {
    let plain = word.trim();
    let upper = plain.to_ascii_uppercase();
    let body = ["UTC", "UT", "Z"]
        .iter()
        .find_map(|zone| upper.strip_suffix(zone))
        .unwrap_or(&upper)
        .trim_end();
    let (day, clock) = body.split_once(['T', ' ']).unwrap_or((body, ""));
    let day = date(day)?;
    let clock = clock.trim();
    let timestamp = match (clock, clock.parse::<Time>()) {
        ("", _) => jiff::tz::Offset::UTC.to_timestamp(day.at(0, 0, 0, 0)),
        // a time alone: with an offset it is read as a whole below
        (_, Ok(time)) if !clock.contains(['+', '-']) => {
            jiff::tz::Offset::UTC.to_timestamp(day.to_datetime(time))
        }
        // an offset from UTC, perhaps
        _ => plain.parse::<jiff::Timestamp>(),
    };
    let timestamp = timestamp.map_err(|_| {
        format!(
            "“{}” is no time of day; {EXPECTED}",
            clock.to_lowercase().escape_debug()
        )
    })?;
    now_at(timestamp.as_second(), timestamp.subsec_nanosecond())
        .ok_or_else(|| "that year is out of all reach".to_owned())
}

fn date(word: &str) -> Result<Date, String> {
    let parts: Vec<&str> = word.split('-').collect();
    let [year, month, day] = parts.as_slice() else {
        return Err(EXPECTED.to_owned());
    };
    let number = |part: &str| -> Result<i16, String> {
        let digits = !part.is_empty() && part.bytes().all(|b| b.is_ascii_digit());
        part.parse()
            .ok()
            .filter(|_| digits)
            .ok_or_else(|| EXPECTED.to_owned())
    };
    let (year, month, day) = (number(year)?, number(month)?, number(day)?);
    let Some(name) = usize::try_from(month - 1).ok().and_then(|m| MONTHS.get(m)) else {
        return Err(format!(
            "there is no month {month}; months go from 01 to 12"
        ));
    };
    let first = Date::new(year, month as i8, 1).map_err(|_| EXPECTED.to_owned())?;
    let days = first.days_in_month();
    i8::try_from(day)
        .ok()
        .and_then(|day| Date::new(year, month as i8, day).ok())
        .ok_or_else(|| format!("{name} {year} has {days} days"))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 2026 November 1, 0h is JD 2461345.5: the Julian day numbers of the calendar.
    #[test]
    fn dates_and_times_as_people_write_them() {
        for word in [
            "2026-11-01",
            "2026-11-01 00:00",
            "2026-11-01 00:00 UT",
            "2026-11-01T00:00:00Z",
            "2026-11-01t00:00:00 utc",
            "2026-11-01T01:00:00+01:00",
        ] {
            let Now((a, b)) = instant(word).unwrap_or_else(|e| panic!("{word}: {e}"));
            // a two-part date: the sum may differ in its last bits
            assert!((a + b - 2_461_345.5).abs() < 1e-8, "{word}: {a} + {b}");
        }
        let told = |word: &str| instant(word).err().unwrap_or_default();
        assert!(told("2026-02-30").contains("February 2026 has 28 days"));
        assert!(told("2026-13-01").contains("no month 13"));
        for word in [
            "yesterday",
            "",
            "2026",
            "2026-11-01 25:00",
            "2026--1-01",
            "99999-01-01",
            "2026-11-01 noon",
        ] {
            assert!(!told(word).is_empty(), "{word}");
        }
    }
}
