//! Zones of the clock: the abbreviations people write, what each can mean, and local time by the zone tables.

use jiff::civil::DateTime;
use jiff::tz::{AmbiguousOffset, Offset, TimeZone};

/// One meaning of an abbreviation.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Meaning {
    /// What it is called in full.
    pub name: &'static str,
    /// Minutes east of UTC.
    pub offset_min: i32,
    /// Zones whose clocks keep it. The first is the one whose seasons count where nothing better is known.
    pub zones: &'static [&'static str],
    /// Where it is written, degrees: latitude from, to, longitude from, to; `None` where it has no rival.
    pub area: Option<[i16; 4]>,
}

const fn m(name: &'static str, offset_min: i32, zones: &'static [&'static str]) -> Meaning {
    Meaning {
        name,
        offset_min,
        zones,
        area: None,
    }
}

/// A meaning with rivals: it counts only within its area.
const fn a(
    name: &'static str,
    offset_min: i32,
    zones: &'static [&'static str],
    area: [i16; 4],
) -> Meaning {
    Meaning {
        name,
        offset_min,
        zones,
        area: Some(area),
    }
}

impl Meaning {
    /// True where somebody at that latitude and longitude (degrees) can mean it.
    pub fn fits(&self, latitude_deg: f64, longitude_deg: f64) -> bool {
        self.area.is_none_or(|[south, north, west, east]| {
            (f64::from(south)..=f64::from(north)).contains(&latitude_deg)
                && (f64::from(west)..=f64::from(east)).contains(&longitude_deg)
        })
    }
}

/// Abbreviations and their meanings. Common practice, no source; the offsets are those of the IANA tables.
const TABLE: &[(&str, &[Meaning])] = &[
    (
        "WET",
        &[m(
            "Western European Time",
            0,
            &["Europe/Lisbon", "Atlantic/Canary"],
        )],
    ),
    (
        "WEST",
        &[m(
            "Western European Summer Time",
            60,
            &["Europe/Lisbon", "Atlantic/Canary"],
        )],
    ),
    (
        "CET",
        &[m(
            "Central European Time",
            60,
            &["Europe/Paris", "Europe/Berlin", "Africa/Algiers"],
        )],
    ),
    (
        "MEZ",
        &[m("mitteleuropäische Zeit", 60, &["Europe/Berlin"])],
    ),
    (
        "CEST",
        &[m(
            "Central European Summer Time",
            120,
            &["Europe/Paris", "Europe/Berlin"],
        )],
    ),
    (
        "MESZ",
        &[m("mitteleuropäische Sommerzeit", 120, &["Europe/Berlin"])],
    ),
    (
        "EET",
        &[m(
            "Eastern European Time",
            120,
            &["Europe/Athens", "Africa/Cairo"],
        )],
    ),
    (
        "EEST",
        &[m(
            "Eastern European Summer Time",
            180,
            &["Europe/Athens", "Africa/Cairo"],
        )],
    ),
    ("MSK", &[m("Moscow Time", 180, &["Europe/Moscow"])]),
    ("MSD", &[m("Moscow Summer Time", 240, &["Europe/Moscow"])]),
    (
        "BST",
        &[
            a(
                "British Summer Time",
                60,
                &["Europe/London"],
                [49, 61, -9, 3],
            ),
            a(
                "Bangladesh Standard Time",
                360,
                &["Asia/Dhaka"],
                [20, 27, 88, 93],
            ),
            a(
                "Bougainville Standard Time",
                660,
                &["Pacific/Bougainville"],
                [-8, -4, 153, 157],
            ),
        ],
    ),
    (
        "IST",
        &[
            a(
                "Irish Standard Time",
                60,
                &["Europe/Dublin"],
                [51, 56, -11, -5],
            ),
            a(
                "Israel Standard Time",
                120,
                &["Asia/Jerusalem"],
                [29, 34, 34, 37],
            ),
            a(
                "India Standard Time",
                330,
                &["Asia/Kolkata"],
                [6, 37, 68, 98],
            ),
        ],
    ),
    (
        "IDT",
        &[m("Israel Daylight Time", 180, &["Asia/Jerusalem"])],
    ),
    (
        "PKT",
        &[m("Pakistan Standard Time", 300, &["Asia/Karachi"])],
    ),
    ("NPT", &[m("Nepal Time", 345, &["Asia/Kathmandu"])]),
    ("ICT", &[m("Indochina Time", 420, &["Asia/Bangkok"])]),
    (
        "WIB",
        &[m("Western Indonesia Time", 420, &["Asia/Jakarta"])],
    ),
    ("SGT", &[m("Singapore Time", 480, &["Asia/Singapore"])]),
    ("HKT", &[m("Hong Kong Time", 480, &["Asia/Hong_Kong"])]),
    ("PHT", &[m("Philippine Time", 480, &["Asia/Manila"])]),
    ("JST", &[m("Japan Standard Time", 540, &["Asia/Tokyo"])]),
    ("KST", &[m("Korea Standard Time", 540, &["Asia/Seoul"])]),
    (
        "AWST",
        &[m(
            "Australian Western Standard Time",
            480,
            &["Australia/Perth"],
        )],
    ),
    (
        "AWDT",
        &[m(
            "Australian Western Daylight Time",
            540,
            &["Australia/Perth"],
        )],
    ),
    (
        "ACST",
        &[m(
            "Australian Central Standard Time",
            570,
            &["Australia/Adelaide", "Australia/Darwin"],
        )],
    ),
    (
        "ACDT",
        &[m(
            "Australian Central Daylight Time",
            630,
            &["Australia/Adelaide"],
        )],
    ),
    (
        "AEST",
        &[m(
            "Australian Eastern Standard Time",
            600,
            &["Australia/Sydney", "Australia/Brisbane"],
        )],
    ),
    (
        "AEDT",
        &[m(
            "Australian Eastern Daylight Time",
            660,
            &["Australia/Sydney"],
        )],
    ),
    (
        "NZST",
        &[m("New Zealand Standard Time", 720, &["Pacific/Auckland"])],
    ),
    (
        "NZDT",
        &[m("New Zealand Daylight Time", 780, &["Pacific/Auckland"])],
    ),
    (
        "SAST",
        &[m(
            "South Africa Standard Time",
            120,
            &["Africa/Johannesburg"],
        )],
    ),
    ("CAT", &[m("Central Africa Time", 120, &["Africa/Maputo"])]),
    ("EAT", &[m("East Africa Time", 180, &["Africa/Nairobi"])]),
    ("WAT", &[m("West Africa Time", 60, &["Africa/Lagos"])]),
    ("BRT", &[m("Brasília Time", -180, &["America/Sao_Paulo"])]),
    (
        "ART",
        &[m(
            "Argentina Time",
            -180,
            &["America/Argentina/Buenos_Aires"],
        )],
    ),
    (
        "CLT",
        &[m("Chile Standard Time", -240, &["America/Santiago"])],
    ),
    (
        "CLST",
        &[m("Chile Summer Time", -180, &["America/Santiago"])],
    ),
    (
        "NST",
        &[m("Newfoundland Standard Time", -210, &["America/St_Johns"])],
    ),
    (
        "NDT",
        &[m("Newfoundland Daylight Time", -150, &["America/St_Johns"])],
    ),
    (
        "AST",
        &[
            a(
                "Atlantic Standard Time",
                -240,
                &["America/Halifax", "America/Puerto_Rico"],
                [10, 65, -72, -55],
            ),
            a(
                "Arabia Standard Time",
                180,
                &["Asia/Riyadh"],
                [12, 38, 34, 60],
            ),
        ],
    ),
    (
        "ADT",
        &[m("Atlantic Daylight Time", -180, &["America/Halifax"])],
    ),
    (
        "EST",
        &[
            a(
                "Eastern Standard Time (North America)",
                -300,
                &["America/New_York", "America/Panama"],
                [5, 65, -95, -60],
            ),
            a(
                "Eastern Standard Time (Australia)",
                600,
                &["Australia/Sydney", "Australia/Brisbane"],
                [-45, -8, 135, 160],
            ),
        ],
    ),
    (
        "EDT",
        &[
            a(
                "Eastern Daylight Time (North America)",
                -240,
                &["America/New_York"],
                [5, 65, -95, -60],
            ),
            a(
                "Eastern Daylight Time (Australia)",
                660,
                &["Australia/Sydney"],
                [-45, -8, 135, 160],
            ),
        ],
    ),
    (
        "CST",
        &[
            a(
                "Central Standard Time (North America)",
                -360,
                &["America/Chicago", "America/Regina"],
                [7, 72, -115, -86],
            ),
            a(
                "China Standard Time",
                480,
                &["Asia/Shanghai", "Asia/Taipei"],
                [18, 54, 73, 135],
            ),
            a(
                "Cuba Standard Time",
                -300,
                &["America/Havana"],
                [19, 24, -85, -74],
            ),
            a(
                "Central Standard Time (Australia)",
                570,
                &["Australia/Adelaide", "Australia/Darwin"],
                [-40, -10, 128, 142],
            ),
        ],
    ),
    (
        "CDT",
        &[
            a(
                "Central Daylight Time (North America)",
                -300,
                &["America/Chicago"],
                [7, 72, -115, -86],
            ),
            a(
                "Cuba Daylight Time",
                -240,
                &["America/Havana"],
                [19, 24, -85, -74],
            ),
        ],
    ),
    (
        "MST",
        &[m(
            "Mountain Standard Time",
            -420,
            &["America/Denver", "America/Phoenix"],
        )],
    ),
    (
        "MDT",
        &[m("Mountain Daylight Time", -360, &["America/Denver"])],
    ),
    (
        "PST",
        &[m("Pacific Standard Time", -480, &["America/Los_Angeles"])],
    ),
    (
        "PDT",
        &[m("Pacific Daylight Time", -420, &["America/Los_Angeles"])],
    ),
    (
        "AKST",
        &[m("Alaska Standard Time", -540, &["America/Anchorage"])],
    ),
    (
        "AKDT",
        &[m("Alaska Daylight Time", -480, &["America/Anchorage"])],
    ),
    (
        "HST",
        &[m("Hawaii Standard Time", -600, &["Pacific/Honolulu"])],
    ),
];

/// What an abbreviation can mean; empty where it is not known.
pub fn meanings(abbreviation: &str) -> &'static [Meaning] {
    TABLE
        .iter()
        .find(|(a, _)| a.eq_ignore_ascii_case(abbreviation))
        .map_or(&[], |(_, meanings)| meanings)
}

/// `UTC+05:30`, as written in messages.
pub fn offset_text(minutes_east: i32) -> String {
    let sign = if minutes_east < 0 { '-' } else { '+' };
    let m = minutes_east.unsigned_abs();
    format!("UTC{sign}{:02}:{:02}", m / 60, m % 60)
}

/// A clock time in a zone.
#[derive(Clone, PartialEq, Debug)]
pub enum Local {
    /// One offset, seconds east.
    Offset(i32),
    /// The hour ran twice: both offsets, the earlier instant first.
    Twice(i32, i32),
    /// The hour was left out: the offsets before and after.
    Skipped(i32, i32),
}

/// The offset in force in a zone at a civil time there.
pub fn local(zone: &TimeZone, civil: DateTime) -> Local {
    match zone.to_ambiguous_timestamp(civil).offset() {
        AmbiguousOffset::Unambiguous { offset } => Local::Offset(offset.seconds()),
        AmbiguousOffset::Fold { before, after } => Local::Twice(before.seconds(), after.seconds()),
        AmbiguousOffset::Gap { before, after } => Local::Skipped(before.seconds(), after.seconds()),
    }
}

/// What the zone's tables call the offset in force at a civil time there; empty where they have no letters for it.
pub fn abbreviation_in_force(zone: &TimeZone, civil: DateTime) -> String {
    let ambiguous = zone.to_ambiguous_timestamp(civil);
    match ambiguous.compatible() {
        Ok(timestamp) => {
            let text = zone.to_offset_info(timestamp).abbreviation().to_string();
            if text.chars().all(|c| c.is_ascii_alphabetic()) {
                text
            } else {
                String::new()
            }
        }
        Err(_) => String::new(),
    }
}

/// How an abbreviation stands in a zone at a civil time there.
#[derive(Clone, PartialEq, Debug)]
pub enum InZone {
    /// It is what the clocks of the zone keep then: seconds east.
    Right(i32),
    /// The zone uses it, at another season: what is in force instead.
    OutOfSeason {
        /// The abbreviation, or offset, in force.
        in_force: String,
    },
    /// The zone never uses it.
    Foreign,
}

/// Looks an abbreviation up in a zone at a civil time there.
pub fn in_zone(zone: &TimeZone, abbreviation: &str, civil: DateTime) -> InZone {
    let offsets = match local(zone, civil) {
        Local::Offset(o) => vec![o],
        Local::Twice(a, b) | Local::Skipped(a, b) => vec![a, b],
    };
    // the abbreviation itself settles an hour that ran twice
    for &offset in &offsets {
        let named = named_as(zone, civil, offset);
        let meant = meanings(abbreviation)
            .iter()
            .any(|m| m.offset_min * 60 == offset && kept_by(m, zone, civil));
        if named.eq_ignore_ascii_case(abbreviation) || meant {
            return InZone::Right(offset);
        }
    }
    let other_season = [91_i64, 182, 273].into_iter().any(|days| {
        let there = civil.saturating_add(jiff::SignedDuration::from_hours(24 * days));
        abbreviation_in_force(zone, there).eq_ignore_ascii_case(abbreviation)
            || meanings(abbreviation).iter().any(|m| {
                matches!(local(zone, there), Local::Offset(o) if o == m.offset_min * 60)
                    && kept_by(m, zone, there)
            })
    });
    if other_season {
        let letters = abbreviation_in_force(zone, civil);
        let offset = offset_text(offsets[0] / 60);
        let in_force = if letters.is_empty() {
            offset
        } else {
            format!("{letters}, {offset}")
        };
        InZone::OutOfSeason { in_force }
    } else {
        InZone::Foreign
    }
}

/// The letters that go with one of the offsets possible at a civil time.
fn named_as(zone: &TimeZone, civil: DateTime, offset_s: i32) -> String {
    let Ok(offset) = Offset::from_seconds(offset_s) else {
        return String::new();
    };
    match offset.to_timestamp(civil) {
        Ok(timestamp) => {
            let info = zone.to_offset_info(timestamp);
            if info.offset() == offset {
                info.abbreviation().to_string()
            } else {
                String::new()
            }
        }
        Err(_) => String::new(),
    }
}

/// True where the zone keeps the same clock as one of the meaning's own zones, then and half a year on.
///
/// So that CET is Rome's as it is Berlin's, while an offset that only happens to be equal does not count.
fn kept_by(meaning: &Meaning, zone: &TimeZone, civil: DateTime) -> bool {
    let half_year_on = civil.saturating_add(jiff::SignedDuration::from_hours(24 * 182));
    meaning.zones.iter().any(|name| {
        TimeZone::get(name).is_ok_and(|own| {
            local(&own, civil) == local(zone, civil)
                && local(&own, half_year_on) == local(zone, half_year_on)
        })
    })
}

/// The meanings of an abbreviation that hold on a date, by the seasons of the first zone of each.
pub fn in_season(abbreviation: &str, civil: DateTime) -> Vec<Meaning> {
    let keeps = |meaning: &Meaning| {
        let zone = meaning
            .zones
            .first()
            .and_then(|name| TimeZone::get(name).ok());
        let wanted = meaning.offset_min * 60;
        zone.is_some_and(|zone| match local(&zone, civil) {
            Local::Offset(offset) => offset == wanted,
            Local::Twice(a, b) | Local::Skipped(a, b) => a == wanted || b == wanted,
        })
    };
    meanings(abbreviation)
        .iter()
        .filter(|m| keeps(m))
        .copied()
        .collect()
}
