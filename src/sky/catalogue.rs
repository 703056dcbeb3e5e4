//! The embedded catalogue: bright stars and Messier's objects, by name and by place.
//!
//! Bright Star Catalogue, 5th ed. (FK5 J2000.0, brought to the ICRS), IAU star names, Messier's list: credits in
//! `src/sky/data/README.md`. Names are matched without regard to case, accents, blanks and marks. The tables are laid out
//! when the program is built (`src/sky/data/tables.rs`): nothing is parsed or sorted at run time.

mod names;

use self::names::{GREEK, words};
use super::icrs::{Motion, moved};
use super::{Direction, separation_deg};

/// The tables as the build script lays them out.
#[allow(clippy::approx_constant)] // a magnitude of 6.28 is one
mod table {
    /// One object: degrees, arcsec a year (RA × cos δ), arcsec; `v_mag` not a number for none; its name's bytes in `NAMES`.
    pub struct Row {
        pub ra_deg: f64,
        pub dec_deg: f64,
        pub pm_ra_arcsec: f64,
        pub pm_dec_arcsec: f64,
        pub v_mag: f64,
        pub radius_arcsec: f64,
        pub error_arcsec: f64,
        pub name: (u32, u32),
    }

    include!(concat!(env!("OUT_DIR"), "/catalogue.rs"));
}

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

    fn of(index: u16) -> Entry {
        let row = &table::ROWS[usize::from(index)];
        let (from, to) = row.name;
        Entry {
            name: &table::NAMES[from as usize..to as usize],
            icrs: Direction {
                ra_deg: row.ra_deg,
                dec_deg: row.dec_deg,
            },
            pm_ra_arcsec: row.pm_ra_arcsec,
            pm_dec_arcsec: row.pm_dec_arcsec,
            v_mag: Some(row.v_mag).filter(|v| !v.is_nan()),
            radius_arcsec: row.radius_arcsec,
            error_arcsec: row.error_arcsec,
        }
    }
}

/// An object by any designation people use: IAU name, Bayer (Greek letter, Latin name, abbreviation), Flamsteed, HR, HD,
/// SAO, HIP, Messier.
pub fn find(name: &str) -> Option<Entry> {
    let words = words(name);
    by_key(&words.concat())
        .or_else(|| designated(designation(&words)?))
        .map(Entry::of)
}

/// Objects within a radius of a direction (at J2000.0), nearest first, each with its distance in degrees.
pub fn near(icrs: Direction, radius_deg: f64) -> Vec<(Entry, f64)> {
    let mut found = Vec::new();
    let (ra, dec) = (icrs.ra_deg, icrs.dec_deg);
    if radius_deg.is_nan() || radius_deg < 0.0 || !ra.is_finite() || !dec.is_finite() {
        return found;
    }
    // how far in right ascension the circle reaches: sin Δα = sin r / cos δ, all round where it holds a pole
    let reach = if dec.abs() + radius_deg >= 90.0 {
        180.0
    } else {
        let sine = radius_deg.to_radians().sin() / dec.to_radians().cos();
        sine.min(1.0).asin().to_degrees() + 1e-9
    };
    let last = table::BAND_STARTS.len() - 2;
    let band = |dec: f64| (((dec + 90.0) / table::BAND_DEG).max(0.0) as usize).min(last);
    for band in band(dec - radius_deg)..=band(dec + radius_deg) {
        let [from, to] = [0, 1].map(|k| usize::from(table::BAND_STARTS[band + k]));
        let band = &table::BY_PLACE[from..to];
        // the circle may lie across 0h
        let whole = [(0.0, 360.0)];
        let parts = [-360.0, 0.0, 360.0].map(|turn| (ra + turn - reach, ra + turn + reach));
        let spans = if reach >= 180.0 { &whole[..] } else { &parts };
        for &(west, east) in spans {
            let first = band.partition_point(|&i| table::ROWS[usize::from(i)].ra_deg < west);
            for &index in &band[first..] {
                if table::ROWS[usize::from(index)].ra_deg > east {
                    break;
                }
                let entry = Entry::of(index);
                let apart = separation_deg(entry.icrs, icrs);
                if apart <= radius_deg {
                    found.push((entry, apart));
                }
            }
        }
    }
    found.sort_by(|a, b| a.1.total_cmp(&b.1));
    found
}

/// All entries, in the order of the sources.
pub fn entries() -> impl ExactSizeIterator<Item = Entry> {
    (0..table::ROWS.len()).map(|i| Entry::of(i as u16))
}

// ---------------------------------------------------------------------------------------------- names

/// A designation by number or letter.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
enum Designation {
    Number(Kind, u32),
    Flamsteed(u32, u8),
    /// The letter's place in the alphabet, its index (0 for none) and the constellation's place in its table.
    Bayer(u8, u32, u8),
}

/// Which list a number is of.
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
    let found = table::CONSTELLATIONS.binary_search_by(|(name, _)| (*name).cmp(word));
    found.ok().map(|at| table::CONSTELLATIONS[at].1)
}

/// The object whose name is no designation: an IAU name, another name of Messier's.
fn by_key(wanted: &str) -> Option<u16> {
    let found = table::BY_KEY.binary_search_by(|&(from, to, _)| {
        table::KEYS[usize::from(from)..usize::from(to)].cmp(wanted)
    });
    found.ok().map(|at| table::BY_KEY[at].2)
}

/// The object of a designation.
fn designated(designation: Designation) -> Option<u16> {
    fn of<K: Ord + Copy>(list: &[(K, u16)], key: K) -> Option<u16> {
        let found = list.binary_search_by_key(&key, |(k, _)| *k);
        found.ok().map(|at| list[at].1)
    }
    match designation {
        Designation::Number(Kind::Messier, n) => {
            let n = (1..=110).contains(&n).then_some(n)? as usize;
            u16::try_from(table::MESSIER + n - 1).ok()
        }
        Designation::Number(Kind::Hr, n) => of(&table::BY_HR, n),
        Designation::Number(Kind::Hd, n) => of(&table::BY_HD, n),
        Designation::Number(Kind::Sao, n) => of(&table::BY_SAO, n),
        Designation::Number(Kind::Hip, n) => of(&table::BY_HIP, n),
        Designation::Flamsteed(n, place) => {
            let n = u8::try_from(n).ok()?;
            of(&table::BY_FLAMSTEED, u16::from(place) << 8 | u16::from(n))
        }
        Designation::Bayer(letter, index, place) => {
            let index = u8::try_from(index).ok()?;
            let key = u32::from(letter) << 16 | u32::from(index) << 8 | u32::from(place);
            of(&table::BY_BAYER, key)
        }
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
                .filter(|e| separation_deg(e.icrs, here) <= radius)
                .count();
            let found = near(here, radius);
            assert!(found.windows(2).all(|w| w[0].1 <= w[1].1));
            all -= found.len();
            assert_eq!(all, 0);
        }
    }
}
