//! Reads the one plain form of the rule pages and practice sheets into reports, so that rules are tested without the reader.
//!
//! One statement a line (`Object:`, a position, `Date:`, `Site:`, `Constellation`, `Altitude`, `Equinox`, a stet, another
//! form in brackets), a blank line between reports. It knows no other form and is no model for the reader.

use colure::report::*;
use colure::span::{Span, Spanned};

/// All reports of a sheet.
pub fn reports(text: &str) -> Vec<Report> {
    let mut out = Vec::new();
    let mut start = 0;
    let mut pieces = Vec::new();
    let mut at = 0;
    for line in text.split_inclusive('\n') {
        if line.trim().is_empty() {
            pieces.push((start, at));
            start = at + line.len();
        }
        at += line.len();
    }
    pieces.push((start, at));
    for (start, end) in pieces {
        if let Some(mut report) = report(text, start, end) {
            report.ordinal = out.len() + 1;
            out.push(report);
        }
    }
    out
}

/// The only report of a text.
pub fn one(text: &str) -> Report {
    let mut all = reports(text);
    assert_eq!(all.len(), 1, "one report in {text}");
    all.remove(0)
}

fn report(text: &str, start: usize, end: usize) -> Option<Report> {
    let block = Span::new(start, end);
    let mut report: Option<Report> = None;
    let (mut object, mut claims_new) = (None, None);
    let mut at = start;
    // a first pass for the position, so that lines above it have somewhere to go
    for line in text[start..end].split_inclusive('\n') {
        let body = line.trim_end();
        if report.is_none()
            && let Some((position, tag)) = position_line(text, at, body)
        {
            report = Some(Report {
                ordinal: 1,
                position,
                other_forms: Vec::new(),
                object: None,
                observer: None,
                role: Role::Measured,
                equinoxes: tag.map(|t| (t, Nearness::Own)).into_iter().collect(),
                epoch_of_place: None,
                instants: Vec::new(),
                site: None,
                stated_horizon: Vec::new(),
                stated_other: Vec::new(),
                constellation: None,
                magnitude: None,
                uncertainty_arcsec: None,
                claims_new: None,
                mentions: Vec::new(),
                stets: Vec::new(),
                block,
            });
        }
        at += line.len();
    }
    let mut report = report?;
    at = start;
    for line in text[start..end].split_inclusive('\n') {
        let body = line.trim_end();
        let here = |word: &str| {
            body.strip_prefix(word)
                .map(|rest| at + body.len() - rest.len() + (rest.len() - rest.trim_start().len()))
        };
        let to = at + body.len();
        if let Some(from) = here("Object:") {
            let name = &text[from..to];
            object = Some(Spanned::new(name.to_string(), Span::new(from, to)));
            let lower = name.to_lowercase();
            for word in [
                "nova",
                "suspect",
                "unknown",
                "candidate",
                "transient",
                "new",
            ] {
                if let Some(k) = lower.find(word) {
                    claims_new.get_or_insert(Span::new(from + k, from + k + word.len()));
                }
            }
        } else if body.starts_with("New ") {
            claims_new.get_or_insert(Span::new(at, at + 3));
        } else if let Some(from) = here("Date:") {
            report.instants.extend(instants(text, from, to));
        } else if let Some(from) = here("Site:") {
            report.site = site(text, from, to).map(|s| (s, Nearness::Own));
        } else if let Some(from) = here("Constellation:").or(here("Constellation")) {
            report.constellation =
                constellation(&text[from..to]).map(|c| Spanned::new(c, Span::new(from, to)));
        } else if let Some(from) = here("Altitude") {
            let (angle, _) = angle(text, from, to)?;
            report.stated_horizon.push(StatedHorizon {
                quantity: HorizonQuantity::Altitude,
                angle,
            });
        } else if let Some(from) = here("Azimuth") {
            let (angle, _) = angle(text, from, to)?;
            report.stated_horizon.push(StatedHorizon {
                quantity: HorizonQuantity::Azimuth,
                angle,
            });
        } else if let Some(from) = here("Equinox") {
            report
                .equinoxes
                .extend(tag(text, from, to).map(|t| (t, Nearness::Block)));
        } else if let Some(from) = here("Observer:") {
            report.observer = Some(Spanned::new(
                text[from..to].to_string(),
                Span::new(from, to),
            ));
        } else if let Some(from) = here("Magnitude") {
            report.magnitude = text[from..to]
                .parse()
                .ok()
                .map(|m| Spanned::new(m, Span::new(from, to)));
        } else if body.starts_with("[stet ") {
            report.stets.push(stet(text, at, to));
        } else if let Some(from) = here("(that is") {
            let (form, _) = position(text, from, to)?;
            report.other_forms.push((form, None));
        } else if let Some(from) = here("(galactic") {
            let (longitude, next) = angle(text, from, to)?;
            let next =
                next + text[next..to].find(|c: char| c.is_ascii_digit() || "+-−".contains(c))?;
            let (latitude, next) = angle(text, next, to)?;
            report.stated_other.push(StatedOther {
                galactic: true,
                longitude,
                latitude,
                span: Span::new(from, next),
            });
        }
        at += line.len();
    }
    report.object = object;
    report.claims_new = claims_new;
    Some(report)
}

const NAMES: [(&str, &str); 9] = [
    ("Velorum", "Vel"),
    ("Ceti", "Cet"),
    ("Circinus", "Cir"),
    ("Eridanus", "Eri"),
    ("Lepus", "Lep"),
    ("Serpens", "Ser"),
    ("Orion", "Ori"),
    ("Taurus", "Tau"),
    ("Orionis", "Ori"),
];

fn constellation(words: &str) -> Option<&'static str> {
    const ALL: &str = "And Ant Aps Aqr Aql Ara Ari Aur Boo Cae Cam Cnc CVn CMa CMi Cap Car Cas Cen Cep Cet Cha Cir Col Com CrA CrB Crv Crt Cru Cyg Del Dor Dra Equ Eri For Gem Gru Her Hor Hya Hyi Ind Lac Leo LMi Lep Lib Lup Lyn Lyr Men Mic Mon Mus Nor Oct Oph Ori Pav Peg Per Phe Pic Psc PsA Pup Pyx Ret Sge Sgr Sco Scl Sct Ser Sex Tau Tel Tri TrA Tuc UMa UMi Vel Vir Vol Vul";
    ALL.split(' ')
        .find(|c| *c == words)
        .or_else(|| NAMES.iter().find(|(n, _)| *n == words).map(|(_, c)| *c))
}

/// A line that begins with a label RA or a digit holds a position; a tag may follow in brackets.
fn position_line(
    text: &str,
    at: usize,
    body: &str,
) -> Option<(Position, Option<Spanned<EquinoxTag>>)> {
    let from = if body.starts_with("RA ") || body.starts_with("HA ") {
        at + 3
    } else if body.starts_with(|c: char| c.is_ascii_digit()) {
        at
    } else {
        return None;
    };
    let to = at + body.len();
    let (mut found, next) = position(text, from, to)?;
    if body.starts_with("HA ") {
        found.kind = PositionKind::HourAngle;
    }
    let tag = text[next..to]
        .find('(')
        .and_then(|k| tag(text, next + k, to));
    Some((found, tag))
}

fn position(text: &str, from: usize, to: usize) -> Option<(Position, usize)> {
    let (first, mut next) = angle(text, from, to)?;
    let rest = &text[next..to];
    let skip = rest.len()
        - rest
            .trim_start_matches([' ', ','])
            .trim_start_matches("Dec")
            .trim_start()
            .len();
    let second = angle(text, next + skip, to);
    if let Some((_, end)) = second {
        next = end;
    }
    let mark = first.parts()[0].mark;
    let unit = match (mark, first.parts().len()) {
        (Mark::Hour, _) => Some(AngleUnit::Hours),
        (Mark::Degree, _) => Some(AngleUnit::Degrees),
        (_, 1) => None,
        _ => Some(AngleUnit::Hours),
    };
    Some((
        Position {
            kind: PositionKind::Equatorial,
            first: Some(first),
            second: second.map(|(a, _)| a),
            first_unit: unit,
            polar_distance: false,
            zenith_distance: false,
            azimuth_from_south: false,
            airless: false,
            labelled: false,
            span: Span::new(from, next),
        },
        next,
    ))
}

/// Digits with an optional decimal point.
fn number(text: &str, from: usize, to: usize) -> Option<(Number, usize)> {
    let (mut mantissa, mut places, mut whole_digits, mut point) = (0u64, 0u8, 0u8, false);
    let mut end = from;
    for c in text[from..to].chars() {
        match c.to_digit(10) {
            Some(d) => {
                mantissa = mantissa.checked_mul(10)?.checked_add(u64::from(d))?;
                if point {
                    places += 1
                } else {
                    whole_digits += 1
                }
            }
            None if c == '.'
                && !point
                && text[end + 1..to].starts_with(|c: char| c.is_ascii_digit()) =>
            {
                point = true
            }
            None => break,
        }
        end += c.len_utf8();
    }
    (end > from).then_some((
        Number {
            mantissa,
            places,
            whole_digits,
        },
        end,
    ))
}

/// A sign, one to three parts with their marks, perhaps a compass letter.
fn angle(text: &str, from: usize, to: usize) -> Option<(Angle, usize)> {
    let mut at = from;
    let mut sign = None;
    if let Some(c) = text[at..to].chars().next().filter(|c| "+-−".contains(*c)) {
        sign = Some(Spanned::new(
            if c == '+' { Sign::Plus } else { Sign::Minus },
            Span::new(at, at + c.len_utf8()),
        ));
        at += c.len_utf8();
    }
    let start = sign.map_or(at, |s| s.span.start);
    let mut parts: Vec<Part> = Vec::new();
    let mut end = at;
    while parts.len() < 3 {
        let Some((value, next)) = number(text, at, to) else {
            break;
        };
        let span = Span::new(at, next);
        let c = text[next..to].chars().next();
        let (mark, len) = match c {
            Some('h') => (Mark::Hour, 1),
            Some('d') => (Mark::Degree, 1),
            Some('°') => (Mark::Degree, 2),
            Some('m')
                if text[next..to].starts_with("m ")
                    || text[next + 1..to].starts_with(|c: char| c.is_ascii_digit())
                    || parts.len() == 1 =>
            {
                (Mark::Minute, 1)
            }
            Some('s') => (Mark::Second, 1),
            Some('′') => (Mark::Prime, 3),
            Some('″') => (Mark::DoublePrime, 3),
            Some('\'') => (Mark::Prime, 1),
            Some('"') => (Mark::DoublePrime, 1),
            Some(':') => (Mark::Colon, 1),
            Some(' ') => (Mark::Blank, 1),
            _ => (Mark::None, 0),
        };
        end = if matches!(mark, Mark::Blank) {
            next
        } else {
            next + len
        };
        let more = text[next + len..to].trim_start_matches(' ');
        let goes_on = more.starts_with(|c: char| c.is_ascii_digit())
            && value.places == 0
            && mark != Mark::None
            && parts.len() < 2;
        parts.push(Part {
            number: value,
            mark: if mark == Mark::Blank && !goes_on {
                Mark::None
            } else {
                mark
            },
            span,
        });
        at = to - more.len();
        if !goes_on {
            break;
        }
    }
    let mut compass = None;
    let rest = &text[end..to];
    let letter = rest.trim_start();
    if let Some(c) = letter.chars().next().filter(|c| "NSEW".contains(*c)) {
        let k = end + rest.len() - letter.len();
        let value = match c {
            'N' => Compass::North,
            'S' => Compass::South,
            'E' => Compass::East,
            _ => Compass::West,
        };
        compass = Some(Spanned::new(value, Span::new(k, k + 1)));
        end = k + 1;
    }
    Some((
        Angle::new(sign, &parts, compass, Span::new(start, end))?,
        end,
    ))
}

fn tag(text: &str, from: usize, to: usize) -> Option<Spanned<EquinoxTag>> {
    let span = Span::new(from, text[from..to].find(')').map_or(to, |k| from + k + 1));
    let words = span.of(text);
    let mut tag = EquinoxTag {
        system: None,
        year: None,
        place: None,
        misspelt: false,
    };
    for (word, system) in [
        ("ICRS", SystemWord::Icrs),
        ("FK5", SystemWord::Fk5),
        ("FK4", SystemWord::Fk4),
    ] {
        if words.contains(word) {
            tag.system = Some(system);
        }
    }
    for (word, place) in [("mean", PlaceWord::Mean), ("apparent", PlaceWord::Apparent)] {
        if words.contains(word) {
            tag.place = Some(place);
        }
    }
    if words.contains("of date") {
        tag.year = Some(EquinoxYear::OfDate);
    }
    for word in words.split([' ', '(', ')']) {
        let (letter, digits) = match word.strip_prefix('J') {
            Some(rest) => (Some(YearLetter::Julian), rest),
            None => match word.strip_prefix('B') {
                Some(rest) => (Some(YearLetter::Besselian), rest),
                None => (None, word),
            },
        };
        let right = digits.replace('O', "0");
        if right.starts_with(|c: char| c.is_ascii_digit())
            && let Some((year, end)) = number(&right, 0, right.len())
            && end == right.len()
        {
            let misspelt = right != digits || year.whole_digits != 4;
            let year = if misspelt {
                Number {
                    mantissa: 20000,
                    places: 1,
                    whole_digits: 4,
                }
            } else {
                year
            };
            tag.year = Some(EquinoxYear::Year { letter, year });
            tag.misspelt = misspelt;
        }
    }
    (tag.year.is_some() || tag.system.is_some()).then_some(Spanned::new(tag, span))
}

const MONTHS: [&str; 12] = [
    "Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec",
];

/// The instants of a `Date:` line: the date with its clock time, and a Julian date in brackets.
fn instants(text: &str, from: usize, to: usize) -> Vec<(InstantWritten, Nearness)> {
    let cut = text[from..to].find(" (").map_or(to, |k| from + k);
    let mut list: Vec<_> = instant(text, from, cut).into_iter().collect();
    if cut < to {
        list.extend(instant(text, cut + 2, to));
    }
    list.into_iter().map(|i| (i, Nearness::Block)).collect()
}

fn instant(text: &str, from: usize, to: usize) -> Option<InstantWritten> {
    let words = &text[from..to];
    let mut written = InstantWritten {
        date: None,
        clock: None,
        clock_unread: None,
        zone: None,
        until: None,
        plus_s: None,
        weekday: None,
        span: Span::new(from, to),
    };
    if let Some(k) = words.find("JD ") {
        let at = from + k + 3;
        let (value, end) = number(text, at, to)?;
        let count = match words.as_bytes().get(k.wrapping_sub(1)) {
            Some(b'H') => JulianCount::Hjd,
            Some(b'M') => JulianCount::Mjd,
            Some(b'B') => JulianCount::Bjd,
            _ => JulianCount::Jd,
        };
        written.span = Span::new(from, end);
        written.date = Some(Spanned::new(
            DateWritten::Julian {
                number: value,
                count,
            },
            Span::new(from, end),
        ));
        return Some(written);
    }
    let mut at = from;
    for name in [
        "Monday",
        "Tuesday",
        "Wednesday",
        "Thursday",
        "Friday",
        "Saturday",
        "Sunday",
    ]
    .iter()
    .enumerate()
    {
        if text[at..to].starts_with(name.1) {
            written.weekday = Some(Spanned::new(name.0 as u8, Span::new(at, at + name.1.len())));
            at += name.1.len() + 1;
        }
    }
    let begin = at;
    let (first, next) = number(text, at, to)?;
    let (year, month, day, unclear, end);
    match text[next..to].chars().next()? {
        '-' => {
            let (m, n) = number(text, next + 1, to)?;
            let (d, n) = number(text, n + 1, to)?;
            (year, month, day, unclear, end) = (first, m.mantissa as u32, d, false, n);
        }
        '/' => {
            let (m, n) = number(text, next + 1, to)?;
            let (y, n) = number(text, n + 1, to)?;
            (year, month, day, unclear, end) = (
                y,
                m.mantissa as u32,
                first,
                m.mantissa <= 12 && first.mantissa <= 12,
                n,
            );
        }
        _ => {
            let m = MONTHS
                .iter()
                .position(|m| text[next + 1..to].starts_with(m))?;
            let (d, n) = number(text, next + 5, to)?;
            (year, month, day, unclear, end) = (first, m as u32 + 1, d, false, n);
        }
    }
    at = end;
    let mut to_day = None;
    if !unclear && text[at..to].starts_with('/') {
        let (d, n) = number(text, at + 1, to)?;
        to_day = Some(d.mantissa as u32);
        at = n;
    }
    let date = DateWritten::Calendar {
        year: year.mantissa as i32,
        year_digits: year.whole_digits,
        month,
        day,
        to_day,
        order_unclear: unclear,
    };
    written.date = Some(Spanned::new(date, Span::new(begin, at)));
    let rest = text[at..to].trim_start_matches([' ', 'T']);
    at = to - rest.len();
    if rest.starts_with(|c: char| c.is_ascii_digit()) {
        let (hour, n) = number(text, at, to)?;
        let (minute, mut n) = number(text, n + 1, to)?;
        let mut second = None;
        if text[n..to].starts_with(':') {
            let (s, m) = number(text, n + 1, to)?;
            (second, n) = (Some(s), m);
        }
        written.clock = Some(Clock {
            hour,
            minute: Some(minute),
            second,
            pm: None,
            span: Span::new(at, n),
        });
        at = n;
    }
    let rest = text[at..to].trim_start();
    let zone = match rest.trim_end() {
        "" => None,
        "UT" | "UTC" | "Z" | "GMT" => Some(Zone::Universal),
        "local time" => Some(Zone::Local),
        other => Some(Zone::Abbreviation(other.to_string())),
    };
    written.zone = zone.map(|z| Spanned::new(z, Span::new(to - rest.len(), to)));
    Some(written)
}

fn site(text: &str, from: usize, to: usize) -> Option<SiteWritten> {
    let mut site = SiteWritten {
        span: Span::new(from, to),
        ..SiteWritten::default()
    };
    let mut at = from;
    if let Some(k) = text[at..to].find("(time zone ") {
        let start = at + k + 11;
        let end = text[start..to].find(')').map_or(to, |e| start + e);
        site.zone = Some(Spanned::new(
            Zone::Named(text[start..end].to_string()),
            Span::new(start, end),
        ));
    }
    let words = &text[at..to];
    let first = words.find(|c: char| c.is_ascii_digit() || c == '-' || c == '+');
    let Some(first) = first else {
        site.name = Some(Spanned::new(words.to_string(), Span::new(from, to)));
        return Some(site);
    };
    let name = words[..first].trim_end_matches([' ', ',']);
    if !name.is_empty() && name != "lat" {
        site.name = Some(Spanned::new(
            name.to_string(),
            Span::new(from, from + name.len()),
        ));
    }
    at += first;
    let (latitude, next) = angle(text, at, to)?;
    site.latitude = Some(latitude);
    at = next + text[next..to].find(|c: char| c.is_ascii_digit() || c == '-' || c == '+')?;
    let (longitude, next) = angle(text, at, to)?;
    site.longitude = Some(longitude);
    if let Some(k) = text[next..to].find(|c: char| c.is_ascii_digit()) {
        let (metres, end) = number(text, next + k, to)?;
        site.elevation_m = Some(Spanned::new(metres.value(), Span::new(next + k, end)));
    }
    Some(site)
}

fn stet(text: &str, from: usize, to: usize) -> Stet {
    let words = &text[from..to];
    let inner_end = from + words.find(']').unwrap_or(words.len());
    let inner = &text[from + 6..inner_end];
    let (rules, reason) = inner
        .split_once(':')
        .map_or((inner, None), |(r, w)| (r, Some(w)));
    let start = from + 6;
    Stet {
        rules: rules
            .split(',')
            .map(|r| {
                let k = start
                    + (r.as_ptr() as usize - inner.as_ptr() as usize)
                    + (r.len() - r.trim_start().len());
                Spanned::new(r.trim().to_string(), Span::new(k, k + r.trim().len()))
            })
            .collect(),
        reason: reason.map(|r| {
            Spanned::new(
                r.trim().to_string(),
                Span::new(inner_end - r.len(), inner_end),
            )
        }),
        span: Span::new(from, to),
    }
}
