//! The embedded catalogue: bright stars and Messier's objects, by name and by place.
//!
//! Bright Star Catalogue, 5th ed. (FK5 J2000.0, brought to the ICRS), IAU star names, Messier's list: credits in
//! `src/sky/data/README.md`. Names are matched without regard to case, accents, blanks and marks.

use super::icrs::{Motion, moved};
use super::{Direction, constellations, fk5, separation_deg, time};
use std::collections::{HashMap, HashSet};
use std::fmt::Write;
use std::sync::LazyLock;

/// One object of the catalogue.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Entry {
    /// The name to print.
    pub name: &'static str,
    /// ICRS at J2000.0, degrees.
    pub icrs: Direction,
    /// Proper motion in RA × cos δ, arcsec a year.
    pub pm_ra_arcsec: f64,
    /// Proper motion in Dec, arcsec a year.
    pub pm_dec_arcsec: f64,
    /// Visual magnitude.
    pub v_mag: Option<f64>,
    /// Its own radius, arcsec; 0 for a star.
    pub radius_arcsec: f64,
    /// What the catalogue's place may be off, arcsec.
    pub error_arcsec: f64,
}

impl Entry {
    /// Its ICRS direction at a Julian epoch.
    pub fn at_epoch(&self, julian_year: f64) -> Direction {
        if self.pm_ra_arcsec == 0.0 && self.pm_dec_arcsec == 0.0 {
            return self.icrs;
        }
        let motion = Motion {
            ra_arcsec: self.pm_ra_arcsec,
            dec_arcsec: self.pm_dec_arcsec,
            ..Motion::default()
        };
        moved(self.icrs, motion, 2000.0, julian_year)
    }
}

/// An object by any designation people use: IAU name, Bayer (Greek letter, Latin name, abbreviation), Flamsteed, HR, HD,
/// SAO, HIP, Messier. A name that is none of these is told without opening the table of stars.
pub fn find(name: &str) -> Option<Entry> {
    let words = words(name);
    let designation = designation(&words);
    let joined = words.concat();
    if designation.is_none() && !NAMES.contains(joined.as_str()) {
        return None;
    }
    let all = &*CATALOGUE;
    let index = match all.by_name.get(joined.as_str()) {
        Some(&index) => index as usize,
        None => all.position(designation?)?,
    };
    all.entries.get(index).copied()
}

/// Objects within a radius of a direction (at J2000.0), nearest first, each with its distance in degrees.
pub fn near(icrs: Direction, radius_deg: f64) -> Vec<(Entry, f64)> {
    let all = &CATALOGUE.by_dec;
    let from = all.partition_point(|e| e.icrs.dec_deg < icrs.dec_deg - radius_deg);
    let mut found: Vec<(Entry, f64)> = all[from..]
        .iter()
        .take_while(|e| e.icrs.dec_deg <= icrs.dec_deg + radius_deg)
        .map(|e| (*e, separation_deg(e.icrs, icrs)))
        .filter(|&(_, apart)| apart <= radius_deg)
        .collect();
    found.sort_by(|a, b| a.1.total_cmp(&b.1));
    found
}

/// All entries, in the order of the sources.
pub fn entries() -> &'static [Entry] {
    &CATALOGUE.entries
}

/// Makes the catalogue ready now instead of at its first use.
pub fn prepare() {
    LazyLock::force(&CATALOGUE);
}

// ---------------------------------------------------------------------------------------------- names

/// Greek letters: the letter, its name, the abbreviations in use.
const GREEK: [(char, &str, &[&str]); 24] = [
    ('α', "alpha", &["alp", "alf"]),
    ('β', "beta", &["bet"]),
    ('γ', "gamma", &["gam"]),
    ('δ', "delta", &["del"]),
    ('ε', "epsilon", &["eps"]),
    ('ζ', "zeta", &["zet"]),
    ('η', "eta", &[]),
    ('θ', "theta", &["the", "tet"]),
    ('ι', "iota", &["iot"]),
    ('κ', "kappa", &["kap"]),
    ('λ', "lambda", &["lam"]),
    ('μ', "mu", &[]),
    ('ν', "nu", &[]),
    ('ξ', "xi", &["ksi"]),
    ('ο', "omicron", &["omi"]),
    ('π', "pi", &[]),
    ('ρ', "rho", &[]),
    ('σ', "sigma", &["sig"]),
    ('τ', "tau", &[]),
    ('υ', "upsilon", &["ups"]),
    ('φ', "phi", &[]),
    ('χ', "chi", &[]),
    ('ψ', "psi", &[]),
    ('ω', "omega", &["ome"]),
];

/// The words of a name: lower case, no accents, digits apart from letters, Greek letters written out, marks dropped.
fn words(name: &str) -> Vec<String> {
    let mut words: Vec<String> = Vec::new();
    let mut last = ' ';
    for c in name.chars().flat_map(char::to_lowercase) {
        let c = plain(c);
        if let Some(letter) = greek(c) {
            words.push(letter.to_string());
            last = ' ';
        } else if c.is_ascii_alphanumeric() {
            let joins = last.is_ascii_alphanumeric() && last.is_ascii_digit() == c.is_ascii_digit();
            match words.last_mut() {
                Some(word) if joins => word.push(c),
                _ => words.push(c.to_string()),
            }
            last = c;
        } else if !matches!(c, '\'' | '’' | '´' | '`' | '\u{300}'..='\u{36f}') {
            last = ' ';
        }
    }
    words
}

fn greek(c: char) -> Option<&'static str> {
    let c = match c {
        'ς' => 'σ',
        'ϑ' => 'θ',
        'ϕ' => 'φ',
        'ϵ' => 'ε',
        'µ' => 'μ',
        _ => c,
    };
    GREEK.iter().find(|g| g.0 == c).map(|g| g.1)
}

/// A letter without its accent; superscript digits as digits.
fn plain(c: char) -> char {
    match c {
        'à'..='å' | 'ā' | 'ă' | 'ą' => 'a',
        'ç' | 'ć' | 'č' => 'c',
        'è'..='ë' | 'ē' | 'ė' | 'ę' | 'ě' => 'e',
        'ğ' => 'g',
        'ḥ' | 'ħ' => 'h',
        'ì'..='ï' | 'ī' | 'ı' => 'i',
        'ł' => 'l',
        'ñ' | 'ń' | 'ň' => 'n',
        'ò'..='ö' | 'ø' | 'ō' | 'ő' => 'o',
        'ř' => 'r',
        'ś' | 'š' | 'ş' | 'ș' | 'ṣ' => 's',
        'ť' | 'ţ' | 'ț' | 'ṭ' => 't',
        'ù'..='ü' | 'ū' | 'ů' | 'ű' => 'u',
        'ý' | 'ÿ' => 'y',
        'ź' | 'ż' | 'ž' => 'z',
        '¹' => '1',
        '²' => '2',
        '³' => '3',
        '⁴' => '4',
        '⁵' => '5',
        '⁶' => '6',
        '⁷' => '7',
        '⁸' => '8',
        '⁹' => '9',
        _ => c,
    }
}

/// A designation by number or letter.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
enum Designation {
    Number(Kind, u32),
    Flamsteed(u32, u8),
    /// The letter's place in the alphabet, its index (0 for none) and the constellation's place in its table.
    Bayer(u8, u32, u8),
}

/// Which list a number is of; the first four are columns of the table of stars.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
enum Kind {
    Hr,
    Hd,
    Sao,
    Hip,
    Messier,
}

/// The designation that words make, if they make one.
fn designation(words: &[String]) -> Option<Designation> {
    let number = |w: &String| w.parse::<u32>().ok();
    match words {
        [prefix, n] if number(n).is_some() => {
            let kind = match prefix.as_str() {
                "bs" | "hr" => Kind::Hr,
                "hd" => Kind::Hd,
                "sao" => Kind::Sao,
                "hip" => Kind::Hip,
                "m" | "messier" => Kind::Messier,
                _ => return None,
            };
            Some(Designation::Number(kind, number(n)?))
        }
        [n, rest @ ..] if number(n).is_some() => Some(Designation::Flamsteed(
            number(n)?,
            constellation(&rest.concat())?,
        )),
        [letter, n, rest @ ..] if number(n).is_some() => {
            let place = constellation(&rest.concat())?;
            Some(Designation::Bayer(bayer(letter)?, number(n)?, place))
        }
        [letter, rest @ ..] if !rest.is_empty() => Some(Designation::Bayer(
            bayer(letter)?,
            0,
            constellation(&rest.concat())?,
        )),
        _ => None,
    }
}

/// The place of a Greek letter in the alphabet, by name or abbreviation.
fn bayer(word: &str) -> Option<u8> {
    let found = GREEK
        .iter()
        .position(|g| g.1 == word || g.2.contains(&word))?;
    u8::try_from(found).ok()
}

/// The place of a constellation in its table, by abbreviation, nominative or genitive (lower case, blanks taken out).
fn constellation(word: &str) -> Option<u8> {
    CONSTELLATIONS.get(word).copied()
}

static CONSTELLATIONS: LazyLock<HashMap<String, u8>> = LazyLock::new(|| {
    constellations::NAMES
        .iter()
        .zip(0u8..)
        .flat_map(|(names, i)| names.map(|n| (words(n).concat(), i)))
        .collect()
});

/// Names that are no designations: IAU names of stars, Messier's objects' other names.
static NAMES: LazyLock<HashSet<String>> = LazyLock::new(|| {
    let cells = |table: &'static str, columns: &'static [usize]| {
        table.lines().skip(1).flat_map(move |line| {
            let part: Vec<&str> = line.split(',').collect();
            columns
                .iter()
                .map(move |&i| words(part.get(i).unwrap_or(&"")).concat())
                .collect::<Vec<_>>()
        })
    };
    cells(include_str!("data/iau_star_names.csv"), &[0, 1, 2])
        .chain(cells(include_str!("data/messier.csv"), &[0, 1, 2]))
        .filter(|name| !name.is_empty())
        .collect()
});

// ---------------------------------------------------------------------------------------------- the tables

struct Catalogue {
    entries: Vec<Entry>,
    by_dec: Vec<Entry>,
    /// HR, HD, SAO and HIP numbers of the entries that have them; 0 for none.
    numbers: [Vec<u32>; 4],
    /// Flamsteed number, Bayer letter + 1, index and constellation of the entries that have them.
    letters: Vec<[u8; 4]>,
    /// Entry of M1.
    messier: usize,
    by_name: HashMap<String, u32>,
}

impl Catalogue {
    fn position(&self, designation: Designation) -> Option<usize> {
        match designation {
            Designation::Number(Kind::Messier, n @ 1..=110) => Some(self.messier + n as usize - 1),
            Designation::Number(Kind::Messier, _) | Designation::Number(_, 0) => None,
            Designation::Number(kind, n) => {
                self.numbers[kind as usize].iter().position(|&x| x == n)
            }
            Designation::Flamsteed(n, place) => {
                let n = u8::try_from(n).ok().filter(|&n| n > 0)?;
                self.letters.iter().position(|l| l[0] == n && l[3] == place)
            }
            Designation::Bayer(letter, index, place) => {
                let index = u8::try_from(index).ok()?;
                let fits = |l: &[u8; 4]| {
                    l[1] == letter + 1 && l[3] == place && (index == 0 || l[2] == index)
                };
                let magnitude = |i: usize| self.entries[i].v_mag.unwrap_or(99.0);
                let all = self
                    .letters
                    .iter()
                    .enumerate()
                    .filter(|l| fits(l.1))
                    .map(|l| l.0);
                // of several with one letter the brightest is meant
                all.min_by(|&a, &b| magnitude(a).total_cmp(&magnitude(b)))
            }
        }
    }
}

static CATALOGUE: LazyLock<Catalogue> = LazyLock::new(|| {
    let mut making = Making::default();
    making.stars();
    making.named_stars();
    making.messier();
    making.done()
});

#[derive(Default)]
struct Making {
    entries: Vec<Entry>,
    /// The names, one after another, and where each ends; leaked once at the end.
    names: String,
    ends: Vec<usize>,
    numbers: [Vec<u32>; 4],
    letters: Vec<[u8; 4]>,
    messier: usize,
    by_name: HashMap<String, u32>,
}

/// Stars that are not in the Bright Star Catalogue and move by more than 1″ a year: name, proper motion (RA × cos δ, Dec,
/// arcsec a year) and the epoch of the place in the list of names. Motions from memory.
const FAST: [(&str, f64, f64, f64); 2] = [
    ("Barnard's Star", -0.8028, 10.3625, 1991.25),
    ("Proxima Centauri", -3.7813, 0.7698, 2000.0),
];

impl Making {
    fn push(&mut self, name: std::fmt::Arguments, entry: Entry) -> u32 {
        let _ = self.names.write_fmt(name);
        self.ends.push(self.names.len());
        self.entries.push(entry);
        (self.entries.len() - 1) as u32
    }

    fn number(&mut self, numbers: [&str; 4]) {
        for (column, text) in self.numbers.iter_mut().zip(numbers) {
            column.push(text.parse().unwrap_or(0));
        }
    }

    fn key(&mut self, key: String, index: u32) {
        if !key.is_empty() {
            self.by_name.entry(key).or_insert(index);
        }
    }

    fn stars(&mut self) {
        let j2000 = (time::J2000, 0.0);
        for line in include_str!("data/bright_stars_bsc5.csv").lines().skip(1) {
            let mut part = [""; 20];
            for (place, text) in part.iter_mut().zip(line.split(',')) {
                *place = text;
            }
            let [
                hr,
                hd,
                sao,
                hip,
                _,
                flamsteed,
                letter,
                letter_index,
                place,
                iau,
                ..,
            ] = part;
            let number = |i: usize| part[i].parse::<f64>().ok();
            let (Some(ra), Some(dec)) = (number(12), number(13)) else {
                continue;
            };
            let entry = Entry {
                name: "",
                icrs: fk5::to_icrs(Direction::new(ra, dec), 2000.0, j2000),
                pm_ra_arcsec: number(14).unwrap_or(0.0) / 1000.0,
                pm_dec_arcsec: number(15).unwrap_or(0.0) / 1000.0,
                v_mag: number(19),
                radius_arcsec: 0.0,
                // 99 % within 3.8″ of Hipparcos-2; 61 Cygni A is 15″ off in the catalogue itself
                error_arcsec: if hr == "8085" { 16.0 } else { 4.0 },
            };
            let greek = GREEK.iter().position(|g| {
                !letter.is_empty()
                    && g.1.len() >= letter.len()
                    && g.1[..letter.len()].eq_ignore_ascii_case(letter)
            });
            let index = match (greek, flamsteed) {
                _ if !iau.is_empty() => self.push(format_args!("{iau}"), entry),
                (Some(greek), _) => {
                    let (sign, raised) = (GREEK[greek].0, raised(letter_index));
                    self.push(format_args!("{sign}{raised} {place}"), entry)
                }
                (None, number) if !number.is_empty() => {
                    self.push(format_args!("{number} {place}"), entry)
                }
                _ => self.push(format_args!("HR {hr}"), entry),
            };
            self.number([hr, hd, sao, hip]);
            let constellation = constellations::NAMES.iter().position(|n| n[0] == place);
            self.letters.push([
                flamsteed.parse().unwrap_or(0),
                greek.map_or(0, |g| g as u8 + 1),
                letter_index.parse().unwrap_or(0),
                constellation.map_or(u8::MAX, |c| c as u8),
            ]);
            if !iau.is_empty() {
                self.key(words(iau).concat(), index);
            }
        }
    }

    /// IAU names of stars that the bright stars do not hold.
    fn named_stars(&mut self) {
        for line in include_str!("data/iau_star_names.csv").lines().skip(1) {
            let part: Vec<&str> = line.split(',').collect();
            let [
                ascii,
                accented,
                designation,
                _,
                _,
                _,
                _,
                magnitude,
                band,
                hip,
                hd,
                ra,
                dec,
                ..,
            ] = part[..]
            else {
                continue;
            };
            let hr = designation.strip_prefix("HR ").unwrap_or("");
            let held = [(3, hip), (1, hd), (0, hr)]
                .into_iter()
                .find_map(|(column, text)| {
                    let number: u32 = text.parse().ok()?;
                    let found = self.numbers[column].iter().position(|&n| n == number)?;
                    u32::try_from(found).ok()
                });
            let index = match held {
                Some(index) => index,
                None => {
                    let (Ok(ra), Ok(dec)) = (ra.parse(), dec.parse()) else {
                        continue;
                    };
                    let fast = FAST.iter().find(|f| f.0 == ascii);
                    let motion = fast.map_or((0.0, 0.0), |f| (f.1, f.2));
                    let place = fast.map_or(Direction::new(ra, dec), |f| {
                        let motion = Motion {
                            ra_arcsec: f.1,
                            dec_arcsec: f.2,
                            ..Motion::default()
                        };
                        moved(Direction::new(ra, dec), motion, f.3, 2000.0)
                    });
                    let entry = Entry {
                        name: "",
                        icrs: place,
                        pm_ra_arcsec: motion.0,
                        pm_dec_arcsec: motion.1,
                        v_mag: magnitude.parse().ok().filter(|_| band == "V"),
                        radius_arcsec: 0.0,
                        // no proper motion is given: room for half an arcsecond a year over a generation
                        error_arcsec: if fast.is_some() { 4.0 } else { 15.0 },
                    };
                    let index = self.push(format_args!("{accented}"), entry);
                    self.number([hr, hd, "", hip]);
                    self.key(words(designation).concat(), index);
                    index
                }
            };
            self.key(words(ascii).concat(), index);
            self.key(words(accented).concat(), index);
        }
    }

    fn messier(&mut self) {
        self.messier = self.entries.len();
        for line in include_str!("data/messier.csv").lines().skip(1) {
            let part: Vec<&str> = line.split(',').collect();
            let [name, other, common, _, magnitude, size, ra, dec, ..] = part[..] else {
                continue;
            };
            let (Ok(ra), Ok(dec)) = (ra.parse(), dec.parse()) else {
                continue;
            };
            let widest = size
                .split('x')
                .filter_map(|s| s.parse::<f64>().ok())
                .fold(0.0, f64::max);
            let index = self.push(
                format_args!("{name}"),
                Entry {
                    name: "",
                    icrs: Direction::new(ra, dec),
                    pm_ra_arcsec: 0.0,
                    pm_dec_arcsec: 0.0,
                    v_mag: magnitude.parse().ok(),
                    radius_arcsec: widest * 30.0,
                    // 99 % within 2′ of an independent list; the Pleiades 6.6′
                    error_arcsec: if name == "M45" { 400.0 } else { 120.0 },
                },
            );
            for key in [name, other, common] {
                if !key.is_empty() {
                    self.key(words(key).concat(), index);
                }
            }
        }
    }

    fn done(mut self) -> Catalogue {
        let names: &'static str = String::leak(std::mem::take(&mut self.names));
        let mut from = 0;
        for (entry, &end) in self.entries.iter_mut().zip(&self.ends) {
            entry.name = &names[from..end];
            from = end;
        }
        let mut by_dec = self.entries.clone();
        by_dec.sort_by(|a, b| a.icrs.dec_deg.total_cmp(&b.icrs.dec_deg));
        Catalogue {
            entries: self.entries,
            by_dec,
            numbers: self.numbers,
            letters: self.letters,
            messier: self.messier,
            by_name: self.by_name,
        }
    }
}

/// The index of a Bayer letter as a raised figure.
fn raised(index: &str) -> &'static str {
    match index {
        "1" => "¹",
        "2" => "²",
        "3" => "³",
        "4" => "⁴",
        "5" => "⁵",
        "6" => "⁶",
        "7" => "⁷",
        "8" => "⁸",
        "9" => "⁹",
        _ => "",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Designations of the Bright Star Catalogue, 5th ed., and the IAU Catalog of Star Names.
    #[test]
    fn every_way_of_naming_a_star() {
        for name in [
            "Sirius",
            "SIRIUS",
            "α CMa",
            "alpha Canis Majoris",
            "Alp CMa",
            "alf CMa",
            "ALPHA CMA",
            "9 CMa",
            "HR 2491",
            "HD48915",
            "SAO 151881",
        ] {
            assert_eq!(find(name).map(|e| e.name), Some("Sirius"), "{name}");
        }
        for (name, printed) in [
            ("alpha Cen", "Rigil Kentaurus"),
            ("α² Centauri", "Toliman"),
            ("alpha2 Cen", "Toliman"),
            ("61 Cygni", "61 Cyg"),
            ("µ Cephei", "μ Cep"),
            ("Barnards star", "Barnard's Star"),
            ("M 42", "M42"),
            ("Messier 42", "M42"),
            ("Orion nebula", "M42"),
            ("Zubeneschamali", "Zubeneschamali"),
            ("beta ori", "Rigel"),
            ("HIP 424", "HR 1"),
        ] {
            assert_eq!(find(name).map(|e| e.name), Some(printed), "{name}");
        }
        for name in [
            "",
            "M 200",
            "HR 99999",
            "alpha",
            "Suspect 12",
            "object Q-1703",
            "trail 41",
        ] {
            assert_eq!(find(name), None, "{name}");
        }
    }

    #[test]
    fn near_agrees_with_looking_at_all() {
        for (ra, dec, radius) in [
            (0.1, 0.0, 3.0),
            (101.0, -16.0, 1.0),
            (40.0, 89.3, 2.0),
            (200.0, -89.9, 5.0),
        ] {
            let here = Direction::new(ra, dec);
            let mut all = entries()
                .iter()
                .filter(|e| separation_deg(e.icrs, here) <= radius)
                .count();
            let found = near(here, radius);
            assert!(found.windows(2).all(|w| w[0].1 <= w[1].1));
            all -= found.len();
            assert_eq!(all, 0);
        }
    }
}
