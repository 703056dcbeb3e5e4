//! Each slip planted in reports with different evidence, with truth from ERFA (`erfars`): a table slip × evidence, whether
//! the shares mean what they say, and how many right reports are bothered.

#[path = "rules/sheet.rs"]
#[allow(dead_code)]
mod sheet;

use colure::house::House;
use colure::report::{Becomes, Examined, Verdict};
use colure::rules::{self, Run, Selection, TABLE};
use colure::sky::{Direction, catalogue, constellations, separation_deg};
use std::collections::BTreeMap;
use std::f64::consts::{PI, TAU};

const NOW: (f64, f64) = (2_461_345.5, 0.0);
const KINDS: [&str; 14] = [
    "local-for-universal",
    "universal-for-local",
    "day-off",
    "am-for-pm",
    "month-misread",
    "east-for-west",
    "north-for-south",
    "dec-sign",
    "ra-unit",
    "ra-dec-exchanged",
    "equinox-other",
    "hour-angle-for-ra",
    "digits-exchanged",
    "digit-miskeyed",
];
const EVIDENCE: [&str; 5] = ["horizon", "constellation", "altitude", "star", "sisters"];
const SITES: [(&str, f64, f64); 9] = [
    ("Europe/London", 52.0, -2.0),
    ("Europe/Madrid", 40.0, -4.0),
    ("America/New_York", 41.0, -75.0),
    ("America/Los_Angeles", 36.0, -119.0),
    ("America/Santiago", -31.0, -70.0),
    ("Africa/Johannesburg", -30.0, 26.0),
    ("Asia/Kolkata", 20.0, 77.0),
    ("Asia/Tokyo", 35.0, 138.0),
    ("Australia/Sydney", -32.0, 149.0),
];

/// xorshift64* (Vigna 2016): the same sheets every time.
struct Dice(u64);

impl Dice {
    fn unit(&mut self) -> f64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        (self.0.wrapping_mul(0x2545_F491_4F6C_DD1D) >> 11) as f64 / (1u64 << 53) as f64
    }
    fn below(&mut self, n: usize) -> usize {
        (self.unit() * n as f64) as usize % n
    }
}

/// What is written, in the figures that are written.
#[derive(Clone, Debug)]
struct Scene {
    name: String,
    zone: &'static str,
    latitude: f64,
    longitude: f64,
    /// Minutes from 1970, UTC.
    minute: i64,
    local: bool,
    /// Tenths of a second of time; arcseconds.
    ra: i64,
    dec: i64,
    altitude: Option<i64>,
    constellation: Option<&'static str>,
    sisters: Vec<(i64, i64, i64)>,
}

fn jd(minute: i64) -> (f64, f64) {
    (
        2_440_587.5 + minute.div_euclid(1440) as f64,
        minute.rem_euclid(1440) as f64 / 1440.0,
    )
}

/// Airless altitude, hour angle and declination of date, by ERFA, radians.
fn observed(ra: f64, dec: f64, minute: i64, latitude: f64, longitude: f64) -> (f64, f64, f64) {
    let (a, b) = jd(minute);
    let ((_, zenith, hour_angle, dec, _, _), _) = erfars::astrometry::Atco13(
        ra,
        dec,
        0.0,
        0.0,
        0.0,
        0.0,
        a,
        b,
        0.0,
        longitude.to_radians(),
        latitude.to_radians(),
        100.0,
        0.0,
        0.0,
        0.0,
        0.0,
        0.0,
        0.55,
    )
    .unwrap();
    (PI / 2.0 - zenith, hour_angle, dec)
}

fn sun(minute: i64) -> (f64, f64) {
    let (a, b) = jd(minute);
    let ((earth, _), _) = erfars::ephemerides::Epv00(a, b).unwrap();
    let [x, y, z] = [-earth[0], -earth[1], -earth[2]];
    (y.atan2(x).rem_euclid(TAU), z.atan2(x.hypot(y)))
}

impl Scene {
    fn ra_rad(&self) -> f64 {
        self.ra as f64 / 36_000.0 * 15.0_f64.to_radians()
    }
    fn dec_rad(&self) -> f64 {
        (self.dec as f64 / 3600.0).to_radians()
    }
    fn icrs(&self) -> Direction {
        Direction {
            ra_deg: self.ra_rad().to_degrees(),
            dec_deg: self.dec_rad().to_degrees(),
        }
    }

    /// A right report: up by 15° and more in a dark sky.
    fn right(dice: &mut Dice, evidence: &str, near_zero_hours: bool, northern: bool) -> Scene {
        loop {
            let (zone, latitude, longitude) = SITES[dice.below(SITES.len())];
            let latitude = ((latitude + dice.unit()) * 100.0).round() / 100.0;
            let longitude = ((longitude + dice.unit()) * 100.0).round() / 100.0;
            let minute = 10_957 * 1440 + (dice.unit() * 20.0 * 365.25 * 1440.0) as i64;
            let star = catalogue::entries()
                .nth(dice.below(catalogue::entries().len()))
                .expect("one of them");
            let (mut ra, mut dec) = if evidence == "star" {
                (
                    star.icrs.ra_deg.to_radians(),
                    star.icrs.dec_deg.to_radians(),
                )
            } else {
                (dice.unit() * TAU, (dice.unit() * 2.0 - 1.0).asin())
            };
            if evidence != "star" && near_zero_hours {
                ra *= 24.0 / 360.0;
            }
            if evidence != "star" && northern {
                dec = (1.0 + dice.unit() * 22.0).to_radians();
            }
            let in_range = ra.to_degrees() < 24.0 || !near_zero_hours;
            let north = (1.0..23.9).contains(&dec.to_degrees()) || !northern;
            if evidence == "star"
                && (star.radius_arcsec > 0.0 || catalogue::find(star.name).is_none())
                || !in_range
                || !north
            {
                continue;
            }
            let (sun_ra, sun_dec) = sun(minute);
            if observed(sun_ra, sun_dec, minute, latitude, longitude).0 > -14f64.to_radians() {
                continue;
            }
            let altitude = observed(ra, dec, minute, latitude, longitude)
                .0
                .to_degrees();
            if altitude < 15.0 || dec.abs() > 1.5 {
                continue;
            }
            (ra, dec) = (ra.to_degrees() / 15.0 * 36_000.0, dec.to_degrees() * 3600.0);
            let mut scene = Scene {
                name: if evidence == "star" {
                    star.name.to_string()
                } else {
                    format!("trail {}", dice.below(9000))
                },
                zone,
                latitude,
                longitude,
                minute,
                local: false,
                ra: ra.round() as i64 % 864_000,
                dec: dec.round() as i64,
                altitude: (evidence == "altitude").then(|| altitude.round() as i64),
                constellation: None,
                sisters: Vec::new(),
            };
            if matches!(evidence, "constellation" | "altitude") {
                scene.constellation = Some(constellations::at(scene.icrs()));
            }
            if evidence == "sisters" {
                scene.sisters = [9, 18, 27]
                    .map(|m| (scene.ra, scene.dec, minute + m))
                    .to_vec();
            }
            return scene;
        }
    }

    fn text(&self) -> String {
        let mut text = String::new();
        for (ra, dec, minute) in &self.sisters {
            text += &format!(
                "Object: {}\nRA {} Dec {} (J2000.0)\nDate: {} UT\n\n",
                self.name,
                ra_words(*ra),
                dec_words(*dec),
                date(*minute)
            );
        }
        text += &format!(
            "Object: {}\nRA {} Dec {} (J2000.0)\n",
            self.name,
            ra_words(self.ra),
            dec_words(self.dec)
        );
        if let Some(c) = self.constellation {
            text += &format!("Constellation: {c}\n");
        }
        if let Some(a) = self.altitude {
            text += &format!("Altitude {a}°\n");
        }
        let (ns, ew) = (
            if self.latitude < 0.0 { 'S' } else { 'N' },
            if self.longitude < 0.0 { 'W' } else { 'E' },
        );
        text + &format!(
            "Date: {} {}\nSite: {:.2} {ns} {:.2} {ew}, 100 m (time zone {})\n",
            date(self.minute),
            if self.local { "local time" } else { "UT" },
            self.latitude.abs(),
            self.longitude.abs(),
            self.zone
        )
    }

    /// The scene with a slip; `None` where this scene cannot have it.
    fn with(&self, kind: &str, dice: &mut Dice) -> Option<Scene> {
        let mut s = self.clone();
        let zone = jiff::tz::TimeZone::get(self.zone).unwrap();
        let offset = i64::from(
            zone.to_offset(jiff::Timestamp::from_second(self.minute * 60).unwrap())
                .seconds(),
        ) / 60;
        match kind {
            "local-for-universal" => s.minute += offset,
            "universal-for-local" => s.local = true,
            "day-off" => s.minute += if dice.unit() < 0.67 { -1440 } else { 1440 },
            "am-for-pm" => {
                s.minute += if self.minute.rem_euclid(1440) < 720 {
                    720
                } else {
                    -720
                }
            }
            "month-misread" => {
                let at = chrono::DateTime::from_timestamp(self.minute * 60, 0)?;
                use chrono::Datelike;
                let (day, month) = (at.day(), at.month());
                let turned = if day <= 12 {
                    at.with_day(1)?.with_month(day)?.with_day(month)?
                } else {
                    at.with_month(month % 12 + 1)?
                };
                s.minute = turned.timestamp() / 60;
            }
            "east-for-west" => s.longitude = -s.longitude,
            "north-for-south" => s.latitude = -s.latitude,
            "dec-sign" => s.dec = -s.dec,
            "ra-unit" => s.ra = ((self.ra_rad().to_degrees() * 36_000.0).round()) as i64,
            "ra-dec-exchanged" => {
                s.ra = self.dec * 10;
                s.dec = self.ra / 10;
                if self.dec < 0 {
                    return None;
                }
            }
            "equinox-other" => {
                let (ra, dec, _, _) =
                    erfars::starcatalogs::Fk54z(self.ra_rad(), self.dec_rad(), 2000.0);
                s.ra = (ra.to_degrees() / 15.0 * 36_000.0).round() as i64 % 864_000;
                s.dec = (dec.to_degrees() * 3600.0).round() as i64;
            }
            "hour-angle-for-ra" => {
                let (_, hour_angle, dec) = observed(
                    self.ra_rad(),
                    self.dec_rad(),
                    self.minute,
                    self.latitude,
                    self.longitude,
                );
                s.ra = (hour_angle.rem_euclid(TAU).to_degrees() / 15.0 * 36_000.0).round() as i64
                    % 864_000;
                s.dec = (dec.to_degrees() * 3600.0).round() as i64;
            }
            _ => {
                let (ra, dec) = (ra_words(self.ra), dec_words(self.dec));
                let mut row: Vec<u8> = format!("{ra}|{dec}").into_bytes();
                let digits: Vec<usize> = (0..row.len())
                    .filter(|k| row[*k].is_ascii_digit())
                    .collect();
                // seconds are seldom seen in the sky: hours, minutes and degrees are what is mended
                let k = dice.below(digits.len() - 1);
                if kind == "digits-exchanged" {
                    if row[digits[k]..digits[k + 1]].contains(&b'|') {
                        return None;
                    }
                    row.swap(digits[k], digits[k + 1]);
                } else {
                    row[digits[k]] = b'0' + dice.below(10) as u8;
                }
                let words = String::from_utf8(row).ok()?;
                let (ra, dec) = words.split_once('|')?;
                s.ra = figures(ra, 36_000.0)?;
                s.dec = figures(dec, 3600.0)?;
                if s.ra >= 864_000 || s.dec.abs() > 324_000 {
                    return None;
                }
            }
        }
        (s.ra != self.ra
            || s.dec != self.dec
            || s.minute != self.minute
            || s.local
            || s.longitude != self.longitude
            || s.latitude != self.latitude)
            .then_some(s)
    }
}

fn ra_words(tenths: i64) -> String {
    format!(
        "{:02} {:02} {:02}.{}",
        tenths / 36_000,
        tenths / 600 % 60,
        tenths / 10 % 60,
        tenths % 10
    )
}

fn dec_words(arcsec: i64) -> String {
    let a = arcsec.abs();
    format!(
        "{}{:02} {:02} {:02}",
        if arcsec < 0 { '-' } else { '+' },
        a / 3600,
        a / 60 % 60,
        a % 60
    )
}

/// A sexagesimal's value in its last figures; `None` with minutes or seconds of 60.
fn figures(words: &str, scale: f64) -> Option<i64> {
    let negative = words.starts_with('-');
    let parts: Vec<f64> = words
        .trim_start_matches(['-', '+'])
        .split(' ')
        .map(|p| p.parse().unwrap())
        .collect();
    if parts[1] >= 60.0 || parts[2] >= 60.0 {
        return None;
    }
    let value = ((parts[0] + parts[1] / 60.0 + parts[2] / 3600.0) * scale).round() as i64;
    Some(if negative { -value } else { value })
}

fn date(minute: i64) -> String {
    chrono::DateTime::from_timestamp(minute * 60, 0)
        .unwrap()
        .format("%Y-%m-%d %H:%M")
        .to_string()
}

/// The last report of a sheet, examined with the others.
fn examine(text: &str) -> Examined {
    let house = House::default();
    let selection = Selection::default();
    let mut examined: Vec<Examined> = sheet::reports(text)
        .into_iter()
        .map(|report| {
            let meant = colure::reduction::mean(&report, &house, house.canonical);
            rules::examine(
                report,
                meant,
                &house,
                house.canonical,
                NOW,
                text,
                &selection,
            )
        })
        .collect();
    let mut runs = [Run {
        sheet: "sheet",
        text,
        house: &house,
        examined: &mut examined,
    }];
    rules::together(&mut runs, house.canonical, NOW, &selection);
    examined.pop().unwrap()
}

/// Does what a slip becomes equal the truth?
fn is_truth(becomes: &[Becomes], truth: &Scene) -> bool {
    becomes.iter().all(|b| match b {
        Becomes::Read(_, r) => {
            let here = Direction {
                ra_deg: r.icrs_ra_deg,
                dec_deg: r.icrs_dec_deg,
            };
            separation_deg(here, truth.icrs()) * 3600.0 < 15.0 // exchanged columns lose tenths of a second
        }
        Becomes::Instant(i) => {
            (((i.utc.0 - 2_440_587.5) + i.utc.1) * 1440.0 - truth.minute as f64).abs() < 0.1
        }
        Becomes::Site(s) => {
            (s.latitude_deg - truth.latitude).abs() < 1e-3
                && (s.longitude_deg - truth.longitude).abs() < 1e-3
        }
    })
}

fn times() -> usize {
    std::env::var("COLURE_TIMES")
        .ok()
        .and_then(|v| v.parse().ok())
        .unwrap_or(12)
}

#[test]
fn right_reports_are_left_alone() {
    let mut dice = Dice(0x5EED_0001);
    let mut bothered = Vec::new();
    let count = times() * 50;
    for k in 0..count {
        let scene = Scene::right(&mut dice, EVIDENCE[k % 5], false, false);
        let examined = examine(&scene.text());
        let natural = ["near-moon"];
        if examined.verdict() != Verdict::Accept
            || examined.findings.iter().any(|f| !natural.contains(&f.rule))
        {
            bothered.push(format!("{} {:?}", scene.text(), examined.findings));
        }
    }
    println!("{} of {count} right reports bothered", bothered.len());
    bothered.iter().take(5).for_each(|b| println!("{b}"));
    assert!(
        bothered.len() * 1000 <= count,
        "{} of {count}",
        bothered.len()
    );
}

#[test]
fn planted_slips_by_evidence() {
    let mut dice = Dice(0x5EED_0002);
    // planted, seen, explained, first, in three, offered, alone, alone and first
    let mut table: BTreeMap<(usize, usize), [usize; 8]> = BTreeMap::new();
    let mut bins = [[0.0f64; 3]; 10];
    for (k, kind) in KINDS.iter().enumerate() {
        for (e, evidence) in EVIDENCE.iter().enumerate() {
            let row = table.entry((k, e)).or_default();
            let mut tries = 0;
            while row[1] < times() && tries < times() * 30 {
                tries += 1;
                let truth = Scene::right(
                    &mut dice,
                    evidence,
                    *kind == "ra-unit",
                    *kind == "ra-dec-exchanged",
                );
                let Some(written) = truth.with(kind, &mut dice) else {
                    continue;
                };
                row[0] += 1;
                let examined = examine(&written.text());
                let place_or_time =
                    |rule: &str| TABLE.iter().any(|r| r.name == rule && r.of_place_or_time);
                if !examined.findings.iter().any(|f| place_or_time(f.rule)) {
                    continue;
                }
                row[1] += 1;
                let right =
                    |s: &colure::report::Slip| s.kinds == [*kind] && is_truth(&s.becomes, &truth);
                row[2] += usize::from(examined.slips.iter().any(|s| s.kinds == [*kind]));
                row[3] += usize::from(examined.slips.first().is_some_and(right));
                row[4] += usize::from(examined.slips.iter().take(3).any(right));
                row[5] += examined.slips.len();
                if examined.slips.len() == 1 {
                    row[6] += 1;
                    row[7] += usize::from(right(&examined.slips[0]));
                }
                for s in &examined.slips {
                    let bin = &mut bins[((s.weight * 10.0) as usize).min(9)];
                    bin[0] += 1.0;
                    bin[1] += s.weight;
                    bin[2] += f64::from(u8::from(right(s)));
                }
                if std::env::var_os("COLURE_SHOW")
                    .is_some_and(|v| v == format!("{kind}/{evidence}").as_str())
                    && !examined.slips.first().is_some_and(right)
                {
                    println!(
                        "{}truth {truth:?}\n{:?}\n{:#?}",
                        written.text(),
                        examined.findings,
                        examined
                            .slips
                            .iter()
                            .map(|s| (&s.kinds, &s.reading, s.weight))
                            .collect::<Vec<_>>()
                    );
                }
            }
        }
    }
    println!(
        "{:22} {:14} planted seen named first three offered alone right",
        "slip", "evidence"
    );
    let (mut decided, mut first) = (0, 0);
    for ((k, e), row) in &table {
        println!(
            "{:22} {:14} {:7} {:4} {:5} {:5} {:5} {:7.1} {:5} {:5}",
            KINDS[*k],
            EVIDENCE[*e],
            row[0],
            row[1],
            row[2],
            row[3],
            row[4],
            row[5] as f64 / row[1].max(1) as f64,
            row[6],
            row[7]
        );
        decided += row[6];
        first += row[7];
    }
    println!("one reading alone fits: {first} of {decided} true");
    for (k, bin) in bins.iter().enumerate() {
        println!(
            "share {:.1} to {:.1}: {:5} offered, mean share {:.2}, true {:.2}",
            k as f64 / 10.0,
            (k + 1) as f64 / 10.0,
            bin[0],
            bin[1] / bin[0].max(1.0),
            bin[2] / bin[0].max(1.0)
        );
    }
    assert!(first * 100 >= decided * 85, "{first} of {decided}");
}
