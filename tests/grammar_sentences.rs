//! Sentences made from the grammar's own shapes, whose meaning is known by construction, asked of the reader: same value to the
//! last digit, same step, same span, same equinox and instant. Mutated ones must never yield the old value.

use colure::reading::read;
use colure::report::{AngleUnit, DateWritten, EquinoxYear, Report, YearLetter};
use colure::sheet::Sheet;
use std::collections::BTreeMap;

/// Sentences in one run. `COLURE_SEED` sets another seed.
const SENTENCES: u64 = 100_000;

/// (style, label form, what it gets wrong): shapes the reader is known to misread, each told to whoever mends it. Left out below.
const KNOWN_GAPS: &[(&str, &str, &str)] = &[
    // RA/Dec: 08:18.5 +07:30 is taken for a clock time with an offset from UTC (the order of trials in scan.rs)
    ("F11", "RA/Dec:", "reports"),
];

#[test]
fn sentences_mean_what_they_were_made_of() {
    let seed = seed();
    println!("seed {seed}");
    let halves: Vec<_> = (0..2u64)
        .map(|half| {
            std::thread::spawn(move || {
                let mut wrong: BTreeMap<(&str, &str, &str), (u64, String)> = BTreeMap::new();
                for n in (half..SENTENCES).step_by(2) {
                    let s = Sentence::made(&mut Dice(seed ^ n.wrapping_mul(0x9e37_79b9_7f4a_7c15)));
                    let mut note = |what: &'static str, found: String| {
                        let entry = wrong.entry((s.style, s.label, what)).or_insert((0, found));
                        entry.0 += 1;
                    };
                    if let Some((what, found)) = s.disagreement() {
                        note(what, format!("{:?}: {found}", s.text));
                    }
                    if n % 4 < 2
                        && let Some(found) = s.mutation_kept(&mut Dice(seed ^ n))
                    {
                        note("old value kept", found);
                    }
                }
                wrong
            })
        })
        .collect();
    let mut wrong: BTreeMap<_, (u64, String)> = BTreeMap::new();
    for half in halves {
        for (k, (n, example)) in half.join().expect("a half") {
            wrong.entry(k).or_insert((0, example)).0 += n;
        }
    }
    wrong.retain(|k, _| !KNOWN_GAPS.contains(k));
    let mut lines: Vec<_> = wrong
        .iter()
        .map(|(k, (n, e))| (*n, format!("{n} {k:?} {e}")))
        .collect();
    lines.sort_by_key(|(n, _)| std::cmp::Reverse(*n));
    for (_, line) in &lines {
        println!("{line}");
    }
    assert!(
        wrong.is_empty(),
        "{} kinds of sentence, seed {seed}",
        wrong.len()
    );
}

fn seed() -> u64 {
    std::env::var("COLURE_SEED")
        .ok()
        .and_then(|s| s.parse().ok())
        .unwrap_or(20_261_201)
}

/// A small generator (splitmix64), so that a seed means the same everywhere.
struct Dice(u64);

impl Dice {
    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }
    fn below(&mut self, n: u64) -> u64 {
        self.next() % n
    }
    fn one<T: Copy>(&mut self, of: &[T]) -> T {
        of[self.below(of.len() as u64) as usize]
    }
}

/// Label forms: before the first angle, between the two, after the second.
const LABELS: &[(&str, &str, &str)] = &[
    ("RA ", " Dec ", ""),
    ("RA = ", ", Dec = ", ""),
    ("RA: ", "; Dec: ", ""),
    ("R.A. ", ", Decl. ", ""),
    ("R.A. = ", " , Decl. = ", ""),
    ("R.A.: ", "\nDEC: ", ""),
    ("RA = ", "\nDec = ", ""),
    ("right ascension ", ", declination ", ""),
    ("α = ", ", δ = ", ""),
    ("Rektaszension ", ", Deklination ", ""),
    ("ascension droite ", ", déclinaison ", ""),
    ("ascensión recta ", ", declinación ", ""),
    ("ascensione retta ", ", declinazione ", ""),
    ("rechte klimming ", ", declinatie ", ""),
    ("ascensão reta ", ", declinação ", ""),
    ("rektascensja ", ", deklinacja ", ""),
    ("RA, Dec = ", ", ", ""),
    ("(R.A., Dec) = (", ", ", ")"),
    ("RA/Dec: ", " ", ""),
    ("", " ", ""),
    ("", ", ", ""),
    ("at ", ", ", ""),
    ("at ", " ", ""),
];

/// What a tag says: letter and tenths of a year.
type Year = (Option<YearLetter>, u64);

const TAGS: &[(&str, Option<Year>)] = &[
    ("", None),
    (" (J2000.0)", Some((Some(YearLetter::Julian), 20_000))),
    (" (B1950.0)", Some((Some(YearLetter::Besselian), 19_500))),
    (" (2000.0)", Some((None, 20_000))),
    (" (equinox 1950.0)", Some((None, 19_500))),
    (
        ", equinox J2000.0",
        Some((Some(YearLetter::Julian), 20_000)),
    ),
    (" J2000.0", Some((Some(YearLetter::Julian), 20_000))),
    (", equinox 1875.0", Some((None, 18_750))),
];

struct Coordinate {
    text: String,
    /// The parts' values as written, with the places of the last.
    parts: Vec<(u64, u8)>,
    negative: bool,
}

impl Coordinate {
    /// Value and step in its own leading unit.
    fn value(&self) -> (f64, f64) {
        let (mut value, mut step) = (0.0, 1.0);
        for (i, &(mantissa, places)) in self.parts.iter().enumerate() {
            let scale = 60f64.powi(i as i32);
            let ten = 10f64.powi(i32::from(places));
            value += mantissa as f64 / ten / scale;
            step = 1.0 / ten / scale;
        }
        (if self.negative { -value } else { value }, step)
    }
}

/// Year, month, day, and a clock time in hours and minutes.
type Day = (i32, u32, u64, Option<(u64, u64)>);

struct Sentence {
    style: &'static str,
    label: &'static str,
    text: String,
    ra: Coordinate,
    ra_degrees: bool,
    dec: Coordinate,
    span: (usize, usize),
    year: Option<Year>,
    day: Option<Day>,
}

/// Marks after the parts of an angle; where the last is `Before`, its mark stands before the decimal point.
struct Style {
    name: &'static str,
    ra: &'static [&'static str],
    dec: &'static [&'static str],
    before_point: bool,
    degrees: bool,
    /// Does it read without a label?
    bare: bool,
}

const STYLES: &[Style] = &[
    Style {
        name: "F1",
        ra: &[":", ":", ""],
        dec: &[":", ":", ""],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F2",
        ra: &[""],
        dec: &[""],
        before_point: false,
        degrees: true,
        bare: false,
    },
    Style {
        name: "F2 deg",
        ra: &[" deg"],
        dec: &[" deg"],
        before_point: false,
        degrees: true,
        bare: false,
    },
    Style {
        name: "F3",
        ra: &["h ", "m ", "s"],
        dec: &["d ", "' ", "\""],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F4",
        ra: &["h ", "m ", "s"],
        dec: &["° ", "' ", "\""],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F4 typographic",
        ra: &["h", "m", "s"],
        dec: &["°", "′", "″"],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F4 raised",
        ra: &["ʰ", "ᵐ", "ˢ"],
        dec: &["º", "’", "”"],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F5",
        ra: &["h", "m", "s"],
        dec: &["d", "m", "s"],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F5 blanks",
        ra: &["h ", "m ", "s"],
        dec: &["d ", "m ", "s"],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F6",
        ra: &[" ", " ", ""],
        dec: &[" ", " ", ""],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F7",
        ra: &["h", "m", "s"],
        dec: &["o", "'", "\""],
        before_point: true,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F7 degree",
        ra: &["h", "m", "s"],
        dec: &["°", "'", "\""],
        before_point: true,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F7 lost degree",
        ra: &["h", "m", "s"],
        dec: &[" ", "'", "\""],
        before_point: true,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F8",
        ra: &["h ", "m"],
        dec: &["d ", "'"],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F9",
        ra: &["h ", "m"],
        dec: &["°", "'"],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F10",
        ra: &["h ", "m"],
        dec: &["°"],
        before_point: false,
        degrees: false,
        bare: true,
    },
    Style {
        name: "F11",
        ra: &[":", ""],
        dec: &[":", ""],
        before_point: false,
        degrees: false,
        bare: false,
    },
    Style {
        name: "F12",
        ra: &[" ", ""],
        dec: &[" ", ""],
        before_point: false,
        degrees: false,
        bare: false,
    },
    Style {
        name: "F14",
        ra: &["h"],
        dec: &["°"],
        before_point: false,
        degrees: false,
        bare: false,
    },
];

impl Sentence {
    fn made(dice: &mut Dice) -> Sentence {
        let style = &STYLES[dice.below(STYLES.len() as u64) as usize];
        let labels = if style.bare { LABELS.len() as u64 } else { 19 };
        let (before, between, after) = LABELS[dice.below(labels) as usize];
        let (tag, year) = dice.one(TAGS);
        let places = dice.below(4) as u8;
        let mut ra = coordinate(dice, style.ra, 24, places, style, "");
        if style.degrees {
            // beyond 24, so that nothing else is meant
            let whole = 24 + dice.below(336);
            let places = places + 1;
            let mantissa = whole * 10u64.pow(places.into()) + dice.below(10u64.pow(places.into()));
            ra = Coordinate {
                text: format!("{}{}", decimal(mantissa, places, 1), style.ra[0]),
                parts: vec![(mantissa, places)],
                negative: false,
            };
        }
        let sign = dice.one(&["+", "-", "−"]);
        let mut dec = coordinate(dice, style.dec, 90, places.saturating_sub(1), style, sign);
        if style.degrees {
            let places = places + 1;
            let mantissa = dice.below(89 * 10u64.pow(places.into()));
            dec.text = format!("{sign}{}{}", decimal(mantissa, places, 1), style.dec[0]);
            dec.parts = vec![(mantissa, places)];
        }
        dec.negative = sign != "+";
        let (y, m, d) = (
            1990 + dice.below(35) as i32,
            1 + dice.below(12) as u32,
            1 + dice.below(28),
        );
        let (hour, minute) = (dice.below(24), dice.below(60));
        const MONTHS: &[&str] = &[
            "Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec",
        ];
        let month = MONTHS[m as usize - 1];
        let (date, day) = match dice.below(4) {
            0 => (String::new(), None),
            1 => (
                format!("; {y}-{m:02}-{d:02} {hour:02}:{minute:02} UT"),
                Some((y, m, d, Some((hour, minute)))),
            ),
            2 => (
                format!("; {y} {month} {d} {hour:02}:{minute:02} UTC"),
                Some((y, m, d, Some((hour, minute)))),
            ),
            _ => (
                format!("\nDate: {d} {month} {y}, {hour:02}:{minute:02} UT"),
                Some((y, m, d, Some((hour, minute)))),
            ),
        };
        let lead = dice.one(&["Suspect 12: ", "", "Object: field object K17\n"]);
        let start = lead.len() + before.len();
        let end = start + ra.text.len() + between.len() + dec.text.len();
        let text = format!(
            "{lead}{before}{}{between}{}{after}{tag}{date}\n",
            ra.text, dec.text
        );
        let label = LABEL_NAMES
            .iter()
            .find(|(b, n, _)| *b == before && *n == between)
            .map_or("", |(_, _, name)| name);
        Sentence {
            style: style.name,
            label,
            text,
            ra,
            ra_degrees: style.degrees,
            dec,
            span: (start, end),
            year,
            day,
        }
    }

    /// What the reader says otherwise, if it does.
    fn disagreement(&self) -> Option<(&'static str, String)> {
        let reports = reports(&self.text);
        let [r] = &reports[..] else {
            return Some(("reports", format!("{} reports", reports.len())));
        };
        let (Some(ra), Some(dec)) = (r.position.first, r.position.second) else {
            return Some(("incomplete", String::new()));
        };
        let close =
            |a: (f64, f64), b: (f64, f64)| (a.0 - b.0).abs() < 1e-11 && (a.1 - b.1).abs() < 1e-13;
        if !close((ra.value(), ra.step()), self.ra.value()) {
            return Some(("right ascension", format!("{} {}", ra.value(), ra.step())));
        }
        if !close((dec.value(), dec.step()), self.dec.value()) {
            return Some(("declination", format!("{} {}", dec.value(), dec.step())));
        }
        if (r.position.first_unit == Some(AngleUnit::Degrees)) != self.ra_degrees
            && r.position.first_unit.is_some()
        {
            return Some(("unit", format!("{:?}", r.position.first_unit)));
        }
        if (r.position.span.start, r.position.span.end) != self.span {
            return Some(("span", format!("{:?}", r.position.span.of(&self.text))));
        }
        let year = r.equinoxes.first().and_then(|(t, _)| match t.value.year {
            Some(EquinoxYear::Year { letter, year }) => {
                Some((letter, year.mantissa * 10 / 10u64.pow(year.places.into())))
            }
            _ => None,
        });
        if year != self.year {
            return Some(("equinox", format!("{year:?}")));
        }
        let day = r
            .instants
            .first()
            .and_then(|(i, _)| match i.date.map(|d| d.value) {
                Some(DateWritten::Calendar {
                    year, month, day, ..
                }) => {
                    let clock = i
                        .clock
                        .and_then(|c| Some((c.hour.mantissa, c.minute?.mantissa)));
                    Some((year, month, day.mantissa, clock))
                }
                _ => None,
            });
        (day != self.day).then(|| ("instant", format!("{day:?}")))
    }

    /// A mutated sentence that still yields the old position.
    fn mutation_kept(&self, dice: &mut Dice) -> Option<String> {
        let (a, b) = (self.span.0, self.span.0 + self.ra.text.len());
        let dec_at = self.span.1 - self.dec.text.len();
        let mut text = self.text.clone();
        match dice.below(4) {
            // the sign moved to the other side
            0 => {
                let sign = text[dec_at..].chars().next()?;
                text.replace_range(
                    dec_at..dec_at + sign.len_utf8(),
                    if sign == '+' { "-" } else { "+" },
                );
            }
            // hours marked as degrees
            1 if self.ra.text.contains('h') && self.ra.value().0 > 0.0 => {
                text.replace_range(a..b, &self.ra.text.replace('h', "d"))
            }
            // a digit past its range
            2 if self.ra.parts.len() > 1 => {
                let at = a + self.ra.text.find(|c: char| !c.is_ascii_digit())?;
                let at = at + text[at..b].find(|c: char| c.is_ascii_digit())?;
                if !text[at + 1..].starts_with(|c: char| c.is_ascii_digit()) {
                    return None;
                }
                text.replace_range(at..=at, "7");
            }
            // the primes exchanged for each other
            _ if self.dec.text.contains('\'') && self.dec.text.contains('"') => {
                let other = self
                    .dec
                    .text
                    .replace('\'', "\u{1}")
                    .replace('"', "'")
                    .replace('\u{1}', "\"");
                text.replace_range(dec_at..self.span.1, &other);
            }
            _ => return None,
        }
        let degrees = |ra: f64, unit: bool| if unit { ra } else { ra * 15.0 };
        let old = (
            degrees(self.ra.value().0, self.ra_degrees),
            self.dec.value().0,
        );
        for r in reports(&text) {
            let (Some(ra), Some(dec)) = (r.position.first, r.position.second) else {
                continue;
            };
            let now = (
                degrees(
                    ra.value(),
                    r.position.first_unit == Some(AngleUnit::Degrees),
                ),
                dec.value(),
            );
            // parts marked as those of another kind are what `marks-mixed` speaks of
            let flagged = dec.parts().len() > 1
                && dec.parts()[1].mark == colure::report::Mark::DoublePrime
                || ra.marked_unit() == Some(AngleUnit::Degrees)
                    && r.position.first_unit != Some(AngleUnit::Degrees);
            if (now.0 - old.0).abs() < 1e-9
                && (now.1 - old.1).abs() < 1e-9
                && !flagged
                && old != (0.0, 0.0)
                && old.1 != 0.0
            {
                return Some(format!("{text:?} still {now:?}"));
            }
        }
        None
    }
}

/// Names of the label forms, for the list of gaps.
const LABEL_NAMES: &[(&str, &str, &str)] = &[
    ("RA ", " Dec ", "RA Dec"),
    ("RA = ", ", Dec = ", "RA = Dec ="),
    ("RA: ", "; Dec: ", "RA: Dec:"),
    ("R.A. ", ", Decl. ", "R.A. Decl."),
    ("R.A. = ", " , Decl. = ", "R.A. = Decl. ="),
    ("R.A.: ", "\nDEC: ", "two lines DEC:"),
    ("RA = ", "\nDec = ", "two lines Dec ="),
    ("right ascension ", ", declination ", "English"),
    ("α = ", ", δ = ", "Greek"),
    ("Rektaszension ", ", Deklination ", "German"),
    ("ascension droite ", ", déclinaison ", "French"),
    ("ascensión recta ", ", declinación ", "Spanish"),
    ("ascensione retta ", ", declinazione ", "Italian"),
    ("rechte klimming ", ", declinatie ", "Dutch"),
    ("ascensão reta ", ", declinação ", "Portuguese"),
    ("rektascensja ", ", deklinacja ", "Polish"),
    ("RA, Dec = ", ", ", "RA, Dec ="),
    ("(R.A., Dec) = (", ", ", "(R.A., Dec) ="),
    ("RA/Dec: ", " ", "RA/Dec:"),
    ("", " ", "bare"),
    ("", ", ", "bare comma"),
    ("at ", ", ", "at comma"),
    ("at ", " ", "at"),
];

/// An angle with these marks, its last part with so many places.
fn coordinate(
    dice: &mut Dice,
    marks: &[&str],
    below: u64,
    places: u8,
    style: &Style,
    sign: &str,
) -> Coordinate {
    let mut text = sign.to_string();
    let mut parts = Vec::new();
    for (i, mark) in marks.iter().enumerate() {
        let last = i + 1 == marks.len();
        let value = dice.below(if i == 0 { below } else { 60 });
        let places = if last && marks.len() > 1 { places } else { 0 };
        let ten = 10u64.pow(places.into());
        let mantissa = value * ten + dice.below(ten);
        if last && style.before_point && places > 0 {
            text.push_str(&format!(
                "{value:02}{mark}.{:0width$}",
                mantissa % ten,
                width = places.into()
            ));
        } else {
            text.push_str(&decimal(mantissa, places, 2));
            text.push_str(mark);
        }
        parts.push((mantissa, places));
    }
    Coordinate {
        text,
        parts,
        negative: false,
    }
}

/// A decimal number with at least so many whole digits.
fn decimal(mantissa: u64, places: u8, whole: usize) -> String {
    let ten = 10u64.pow(places.into());
    if places == 0 {
        format!("{mantissa:0whole$}")
    } else {
        format!(
            "{:0whole$}.{:0width$}",
            mantissa / ten,
            mantissa % ten,
            width = places.into()
        )
    }
}

fn reports(text: &str) -> Vec<Report> {
    read(&Sheet::decode("sentence".to_string(), text.as_bytes()).expect("text"))
}
