//! Numbers as people say them, with no more digits than deserved, and the words a finding points at.

use crate::report::{Angle, EquinoxTag, EquinoxYear, MONTHS, PlaceWord, SystemWord, YearLetter};
use crate::rules::Case;
use crate::span::Span;

impl Case<'_> {
    /// The words of a span in quotation marks, cut to what fits in a sentence.
    pub fn quote(&self, span: Span) -> String {
        let words: Vec<&str> = span.of(self.text).split_whitespace().collect();
        let words = words.join(" ");
        if words.is_empty() {
            return "this".to_string();
        }
        match words.char_indices().nth(48) {
            Some((at, _)) => format!("“{}…”", words[..at].trim_end()),
            None => format!("“{words}”"),
        }
    }

    /// The words that say when: the clock time, else the date, where they stand in the report's own block; else the position.
    pub fn when_span(&self) -> Span {
        let block = self.report.block;
        match self.report.instants.first() {
            Some((instant, _)) => {
                let words = instant
                    .clock
                    .map(|c| c.span)
                    .or(instant.date.map(|d| d.span))
                    .unwrap_or(instant.span);
                if block.is_empty() || block.contains(words) {
                    words
                } else {
                    self.report.position.span
                }
            }
            None => self.report.position.span,
        }
    }

    /// The words that say where from; `None` where the site is the observer's by house rule.
    pub fn site_span(&self) -> Option<Span> {
        self.report.site.as_ref().map(|(site, _)| site.span)
    }

    /// The words of the declination or altitude, else of the whole position.
    pub fn dec_span(&self) -> Span {
        let position = &self.report.position;
        position.second.map_or(position.span, |angle| angle.span)
    }

    /// The words of the right ascension, hour angle or azimuth, else of the whole position.
    pub fn ra_span(&self) -> Span {
        let position = &self.report.position;
        position.first.map_or(position.span, |angle| angle.span)
    }

    /// The words of the object's name, else of the position.
    pub fn object_span(&self) -> Span {
        let report = self.report;
        report
            .object
            .as_ref()
            .map_or(report.position.span, |name| name.span)
    }
}

/// An angle on the sky in the unit that suits its size: `12″`, `3.4′`, `17°`.
pub fn apart(arcsec: f64) -> String {
    match arcsec {
        a if a < 9.95 => format!("{a:.1}″"),
        a if a < 99.5 => format!("{a:.0}″"),
        a if a < 570.0 => format!("{:.1}′", a / 60.0),
        a if a < 5970.0 => format!("{:.0}′", a / 60.0),
        a if a < 35_700.0 => format!("{:.1}°", a / 3600.0),
        a => format!("{:.0}°", a / 3600.0),
    }
}

/// A signed angle to a tenth of a degree: `-3.2°`, with a true minus.
pub fn degrees(deg: f64) -> String {
    let rounded = (deg * 10.0).round() / 10.0;
    if rounded < 0.0 {
        format!("−{:.1}°", -rounded)
    } else {
        format!("{:.1}°", rounded.abs())
    }
}

/// A signed angle to a whole degree, or a tenth below 10°.
pub fn rough(deg: f64) -> String {
    if deg.abs() < 9.95 {
        degrees(deg)
    } else if deg < 0.0 {
        format!("−{:.0}°", -deg)
    } else {
        format!("{deg:.0}°")
    }
}

/// A right ascension in hours and minutes.
pub fn hours(ra_deg: f64) -> String {
    let minutes = (ra_deg.rem_euclid(360.0) * 4.0).round() as u32 % 1440;
    format!("{}h{:02}m", minutes / 60, minutes % 60)
}

/// A position to a minute of time and a tenth of a degree: `5h34m +22.0°`.
pub fn place(ra_deg: f64, dec_deg: f64) -> String {
    let sign = if dec_deg < 0.0 { "−" } else { "+" };
    format!("{} {sign}{:.1}°", hours(ra_deg), dec_deg.abs())
}

/// Year, month, day of a day count from 1970 January 1 (Gregorian), after Hinnant's `civil_from_days`.
pub fn civil(days: i64) -> (i64, u32, u32) {
    let z = days + 719_468;
    let era = z.div_euclid(146_097);
    let doe = z.rem_euclid(146_097);
    let yoe = (doe - doe / 1460 + doe / 36_524 - doe / 146_096) / 365;
    let doy = doe - (365 * yoe + yoe / 4 - yoe / 100);
    let mp = (5 * doy + 2) / 153;
    let day = (doy - (153 * mp + 2) / 5 + 1) as u32;
    let month = if mp < 10 { mp + 3 } else { mp - 9 } as u32;
    (yoe + era * 400 + i64::from(month <= 2), month, day)
}

/// Days from 1970 January 1 of a Gregorian date; any month and day count on.
pub fn day_number(year: i64, month: u32, day: u32) -> i64 {
    let y = if month <= 2 { year - 1 } else { year };
    let era = y.div_euclid(400);
    let yoe = y.rem_euclid(400);
    let mp = (i64::from(month) + 9) % 12;
    let doy = (153 * mp + 2) / 5 + i64::from(day) - 1;
    era * 146_097 + yoe * 365 + yoe / 4 - yoe / 100 + doy - 719_468
}

/// Seconds from 1970 January 1 of a two-part Julian date, whole days of 86,400 s.
pub fn unix_s(utc: (f64, f64)) -> f64 {
    (utc.0 - 2_440_587.5) * 86_400.0 + utc.1 * 86_400.0
}

/// Adds seconds to a two-part Julian date.
pub fn later(utc: (f64, f64), seconds: f64) -> (f64, f64) {
    (utc.0, utc.1 + seconds / 86_400.0)
}

/// Seconds from `a` to `b`.
pub fn seconds_between(a: (f64, f64), b: (f64, f64)) -> f64 {
    ((b.0 - a.0) + (b.1 - a.1)) * 86_400.0
}

/// The English name of a month, 1 to 12.
pub fn month(number: u32) -> &'static str {
    MONTHS
        .get((number as usize).wrapping_sub(1))
        .copied()
        .unwrap_or("?")
}

/// The English name of a weekday, Monday 0.
pub fn weekday(number: u8) -> &'static str {
    [
        "Monday",
        "Tuesday",
        "Wednesday",
        "Thursday",
        "Friday",
        "Saturday",
        "Sunday",
    ]
    .get(usize::from(number))
    .copied()
    .unwrap_or("?")
}

/// `22:31`, to the minute.
pub fn clock(utc: (f64, f64)) -> String {
    let minutes = (unix_s(utc) / 60.0).round().rem_euclid(1440.0) as u32;
    format!("{:02}:{:02}", minutes / 60, minutes % 60)
}

/// `2024-07-05 22:31 UT`, to the minute.
pub fn instant(utc: (f64, f64)) -> String {
    let minutes = (unix_s(utc) / 60.0).round();
    let (y, m, d) = civil(minutes.div_euclid(1440.0) as i64);
    format!("{y:04}-{m:02}-{d:02} {} UT", clock(utc))
}

/// A span of time: `40 s`, `12 min`, `5.0 h`, `3 days`.
pub fn lapse(seconds: f64) -> String {
    match seconds.abs() {
        s if s < 100.0 => format!("{s:.0} s"),
        s if s < 6_000.0 => format!("{:.0} min", s / 60.0),
        s if s < 172_800.0 => format!("{:.1} h", s / 3600.0),
        s => format!("{:.0} days", s / 86_400.0),
    }
}

/// A tag in one form: `FK4 B1950.0`, `mean equinox of date`.
pub fn tag(tag: &EquinoxTag) -> String {
    let mut words = Vec::new();
    if let Some(system) = tag.system {
        words.push(
            match system {
                SystemWord::Icrs => "ICRS",
                SystemWord::Fk5 => "FK5",
                SystemWord::Fk4 => "FK4",
            }
            .to_string(),
        );
    }
    match tag.place {
        Some(PlaceWord::Mean) => words.push("mean".to_string()),
        Some(PlaceWord::Apparent) => words.push("apparent".to_string()),
        Some(PlaceWord::ApparentFromOrigin) => {
            words.push("apparent (from the intermediate origin)".to_string());
        }
        None => {}
    }
    match tag.year {
        Some(EquinoxYear::Year { letter, year }) => words.push(format!(
            "{}{:.*}",
            match is_besselian(letter, year.value()) {
                true => "B",
                false => "J",
            },
            usize::from(year.places.max(1)),
            year.value()
        )),
        Some(EquinoxYear::OfDate) => words.push("equinox of date".to_string()),
        None => {}
    }
    words.join(" ")
}

/// The year rule: B where it is written, and below 1984 where no letter is (FITS standard 4.0, section 8.3).
pub fn is_besselian(letter: Option<YearLetter>, year: f64) -> bool {
    match letter {
        Some(letter) => letter == YearLetter::Besselian,
        None => year < 1984.0,
    }
}

/// An angle's digits and marks again from its parts, for showing a changed reading: `05h31m29.2s`, `+21°59′18″`.
pub fn angle(angle: &Angle, in_hours: bool) -> String {
    let sign = if angle.is_negative() {
        "−"
    } else if in_hours {
        ""
    } else {
        "+"
    };
    let marks = if in_hours {
        ["h", "m", "s"]
    } else {
        ["°", "′", "″"]
    };
    let mut words = sign.to_string();
    for (part, mark) in angle.parts().iter().zip(marks) {
        let n = part.number;
        let width = usize::from(n.whole_digits.max(1))
            + if n.places > 0 {
                usize::from(n.places) + 1
            } else {
                0
            };
        words += &format!("{:0width$.*}{mark}", usize::from(n.places), n.value());
    }
    words
}
