//! Part of the build script: lays the sky's tables out as sorted statics, so that the program parses, sorts and hashes
//! nothing when it starts. Strings are one blob with ends: an array of `&str` would have to be relocated at every start.

use sofars::astro::pmsafe;
use sofars::star::fk5hz;
use std::collections::{BTreeMap, HashMap};
use std::fmt::{Debug, Write as _};
use std::fs;
use std::path::Path;

#[path = "../catalogue/names.rs"]
mod names;

use self::names::{GREEK, words};

const J2000: f64 = 2_451_545.0;

/// Writes `catalogue.rs`, `constellations.rs`, `nutation.rs`, `earth.rs` and `time.rs` to the output folder.
pub fn lay_out(root: &Path, out: &Path) {
    let data = root.join("src/sky/data");
    println!("cargo:rerun-if-changed=src/sky/data");
    println!("cargo:rerun-if-changed=src/sky/catalogue/names.rs");
    let read = |name: &str| -> String {
        let path = data.join(name);
        println!("cargo:rerun-if-changed={}", path.display());
        fs::read_to_string(&path).unwrap_or_else(|e| panic!("{}: {e}", path.display()))
    };
    let write = |name: &str, code: Code| {
        fs::write(out.join(name), code.0).expect("writable OUT_DIR");
    };
    let constellation_names = constellation_names(&read("constellation_names.csv"));
    let mut making = Making::new(&constellation_names);
    making.stars(&read("bright_stars_bsc5.csv"));
    making.named_stars(&read("iau_star_names.csv"));
    making.messier(&read("messier.csv"));
    write("catalogue.rs", making.done());
    write(
        "constellations.rs",
        constellations(
            &constellation_names,
            &read("constellation_bounds_b1875.csv"),
        ),
    );
    write(
        "nutation.rs",
        nutation(
            &read("nutation_lunisolar.csv"),
            &read("nutation_planetary.csv"),
        ),
    );
    write("earth.rs", earth(&read("earth_vsop2000.csv")));
    write(
        "time.rs",
        time(&read("tai_minus_utc.csv"), &read("delta_t.csv")),
    );
}

/// Rust code in the making.
#[derive(Default)]
struct Code(String);

impl Code {
    /// A static array of values whose `Debug` form is Rust.
    fn array<T: Debug>(&mut self, name: &str, kind: &str, values: &[T]) {
        writeln!(
            self.0,
            "pub(super) static {name}: [{kind}; {}] = [",
            values.len()
        )
        .expect("to a string");
        for value in values {
            writeln!(self.0, "{value:?},").expect("to a string");
        }
        self.0.push_str("];\n");
    }

    fn constant(&mut self, name: &str, kind: &str, value: impl Debug) {
        writeln!(self.0, "pub(super) const {name}: {kind} = {value:?};").expect("to a string");
    }
}

fn rows(csv: &str) -> impl Iterator<Item = Vec<&str>> {
    csv.lines()
        .skip(1)
        .map(|line| line.split(',').map(str::trim).collect())
}

// ---------------------------------------------------------------------------------------------- catalogue

/// One object.
struct Object {
    name: String,
    ra_deg: f64,
    dec_deg: f64,
    pm_ra_arcsec: f64,
    pm_dec_arcsec: f64,
    v_mag: Option<f64>,
    radius_arcsec: f64,
    error_arcsec: f64,
}

/// Stars that are not in the Bright Star Catalogue and move by more than 1″ a year: name, proper motion (RA × cos δ, Dec,
/// arcsec a year) and the epoch of the place in the list of names. Motions from memory.
const FAST: [(&str, f64, f64, f64); 2] = [
    ("Barnard's Star", -0.8028, 10.3625, 1991.25),
    ("Proxima Centauri", -3.7813, 0.7698, 2000.0),
];

/// Bands of declination, degrees wide, by which places are sorted. `catalogue.rs` has the same.
const BAND_DEG: f64 = 1.0;

struct Making<'a> {
    constellations: &'a [[String; 3]],
    objects: Vec<Object>,
    /// HR, HD, SAO and HIP numbers; 0 for none.
    numbers: Vec<[u32; 4]>,
    /// Flamsteed number, Bayer letter + 1, index, constellation; of the bright stars.
    letters: Vec<[u8; 4]>,
    messier: usize,
    by_name: BTreeMap<String, u16>,
}

impl<'a> Making<'a> {
    fn new(constellations: &'a [[String; 3]]) -> Making<'a> {
        Making {
            constellations,
            objects: Vec::new(),
            numbers: Vec::new(),
            letters: Vec::new(),
            messier: 0,
            by_name: BTreeMap::new(),
        }
    }

    fn push(&mut self, object: Object, numbers: [&str; 4]) -> u16 {
        self.objects.push(object);
        self.numbers.push(numbers.map(|n| n.parse().unwrap_or(0)));
        (self.objects.len() - 1)
            .try_into()
            .expect("at most 65,536 objects")
    }

    /// The first object of a name keeps it.
    fn key(&mut self, name: &str, index: u16) {
        let key = words(name).concat();
        if !key.is_empty() {
            self.by_name.entry(key).or_insert(index);
        }
    }

    fn stars(&mut self, csv: &str) {
        for part in rows(csv) {
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
            ] = part[..]
            else {
                panic!("bright_stars_bsc5.csv: a short line");
            };
            let number = |i: usize| part.get(i).and_then(|p| p.parse::<f64>().ok());
            let (Some(ra), Some(dec)) = (number(12), number(13)) else {
                continue;
            };
            let greek = GREEK.iter().position(|g| {
                !letter.is_empty()
                    && g.1.len() >= letter.len()
                    && g.1[..letter.len()].eq_ignore_ascii_case(letter)
            });
            let name = match (greek, flamsteed) {
                _ if !iau.is_empty() => iau.to_string(),
                (Some(greek), _) => format!("{}{} {place}", GREEK[greek].0, raised(letter_index)),
                (None, number) if !number.is_empty() => format!("{number} {place}"),
                _ => format!("HR {hr}"),
            };
            let (ra_deg, dec_deg) = degrees(fk5hz(ra.to_radians(), dec.to_radians(), J2000, 0.0));
            let object = Object {
                name,
                ra_deg,
                dec_deg,
                pm_ra_arcsec: number(14).unwrap_or(0.0) / 1000.0,
                pm_dec_arcsec: number(15).unwrap_or(0.0) / 1000.0,
                v_mag: number(19),
                radius_arcsec: 0.0,
                // 99 % within 3.8″ of Hipparcos-2; 61 Cygni A is 15″ off in the catalogue itself
                error_arcsec: if hr == "8085" { 16.0 } else { 4.0 },
            };
            let index = self.push(object, [hr, hd, sao, hip]);
            let constellation = self.constellations.iter().position(|n| n[0] == place);
            self.letters.push([
                flamsteed.parse().unwrap_or(0),
                greek.map_or(0, |g| g as u8 + 1),
                letter_index.parse().unwrap_or(0),
                constellation.map_or(u8::MAX, |c| c as u8),
            ]);
            self.key(iau, index);
        }
    }

    /// IAU names of stars that the bright stars do not hold.
    fn named_stars(&mut self, csv: &str) {
        for part in rows(csv) {
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
                panic!("iau_star_names.csv: a short line");
            };
            let hr = designation.strip_prefix("HR ").unwrap_or("");
            let held = [(3, hip), (1, hd), (0, hr)]
                .into_iter()
                .find_map(|(column, text)| {
                    let number: u32 = text.parse().ok()?;
                    let found = self.numbers.iter().position(|n| n[column] == number)?;
                    u16::try_from(found).ok()
                });
            let index = match held {
                Some(index) => index,
                None => {
                    let (Ok(ra), Ok(dec)) = (ra.parse::<f64>(), dec.parse::<f64>()) else {
                        continue;
                    };
                    let fast = FAST.iter().find(|f| f.0 == ascii);
                    let (ra_deg, dec_deg) = fast.map_or((ra, dec), |f| moved(ra, dec, f));
                    let object = Object {
                        name: accented.to_string(),
                        ra_deg,
                        dec_deg,
                        pm_ra_arcsec: fast.map_or(0.0, |f| f.1),
                        pm_dec_arcsec: fast.map_or(0.0, |f| f.2),
                        v_mag: magnitude.parse().ok().filter(|_| band == "V"),
                        radius_arcsec: 0.0,
                        // no proper motion is given: room for half an arcsecond a year over a generation
                        error_arcsec: if fast.is_some() { 4.0 } else { 15.0 },
                    };
                    let index = self.push(object, [hr, hd, "", hip]);
                    self.key(designation, index);
                    index
                }
            };
            self.key(ascii, index);
            self.key(accented, index);
        }
    }

    fn messier(&mut self, csv: &str) {
        self.messier = self.objects.len();
        for part in rows(csv) {
            let [name, other, common, _, magnitude, size, ra, dec, ..] = part[..] else {
                panic!("messier.csv: a short line");
            };
            let (Ok(ra_deg), Ok(dec_deg)) = (ra.parse(), dec.parse()) else {
                panic!("messier.csv: {name} has no place");
            };
            let widest = size
                .split('x')
                .filter_map(|s| s.parse::<f64>().ok())
                .fold(0.0, f64::max);
            let object = Object {
                name: name.to_string(),
                ra_deg,
                dec_deg,
                pm_ra_arcsec: 0.0,
                pm_dec_arcsec: 0.0,
                v_mag: magnitude.parse().ok(),
                radius_arcsec: widest * 30.0,
                // 99 % within 2′ of an independent list; the Pleiades 6.6′
                error_arcsec: if name == "M45" { 400.0 } else { 120.0 },
            };
            let index = self.push(object, [""; 4]);
            for key in [name, other, common] {
                self.key(key, index);
            }
        }
    }

    /// Flamsteed numbers: (constellation × 256 + number, object), the first of each, sorted.
    fn flamsteed(&self) -> Vec<(u16, u16)> {
        let mut found = BTreeMap::new();
        for (&[number, _, _, place], index) in self.letters.iter().zip(0u16..) {
            if number > 0 && place != u8::MAX {
                found
                    .entry(u16::from(place) << 8 | u16::from(number))
                    .or_insert(index);
            }
        }
        found.into_iter().collect()
    }

    /// Bayer letters: (letter × 65,536 + index × 256 + constellation, object), sorted; of several with one letter the
    /// brightest is meant, with index 0 the brightest of any index.
    fn bayer(&self) -> Vec<(u32, u16)> {
        let magnitude = |i: u16| self.objects[usize::from(i)].v_mag.unwrap_or(99.0);
        let mut found: BTreeMap<u32, u16> = BTreeMap::new();
        for (&[_, letter, own, place], index) in self.letters.iter().zip(0u16..) {
            if letter == 0 || place == u8::MAX {
                continue;
            }
            for asked in [0, own] {
                let key = u32::from(letter - 1) << 16 | u32::from(asked) << 8 | u32::from(place);
                let best = found.entry(key).or_insert(index);
                if magnitude(index) < magnitude(*best) {
                    *best = index;
                }
            }
        }
        found.into_iter().collect()
    }

    fn done(self) -> Code {
        let mut code = Code::default();
        let (mut names, mut rows) = (String::new(), Vec::new());
        for o in &self.objects {
            let from = names.len() as u32;
            names.push_str(&o.name);
            rows.push(Raw(format!(
                "Row {{ ra_deg: {:?}, dec_deg: {:?}, pm_ra_arcsec: {:?}, pm_dec_arcsec: {:?}, v_mag: {}, \
                 radius_arcsec: {:?}, error_arcsec: {:?}, name: ({from}, {}) }}",
                o.ra_deg.rem_euclid(360.0),
                o.dec_deg,
                o.pm_ra_arcsec,
                o.pm_dec_arcsec,
                o.v_mag.map_or("f64::NAN".to_string(), |v| format!("{v:?}")),
                o.radius_arcsec,
                o.error_arcsec,
                names.len()
            )));
        }
        code.array("ROWS", "Row", &rows);
        code.constant("NAMES", "&str", names);

        // by band of declination, then right ascension; the order of the sources where these are the same
        let band = |o: &Object| ((o.dec_deg + 90.0) / BAND_DEG).floor() as usize;
        let mut by_place: Vec<u16> = (0u16..).take(self.objects.len()).collect();
        by_place.sort_by(|&a, &b| {
            let (a, b) = (&self.objects[usize::from(a)], &self.objects[usize::from(b)]);
            (band(a).cmp(&band(b))).then(a.ra_deg.total_cmp(&b.ra_deg))
        });
        let bands = (180.0 / BAND_DEG) as usize;
        let starts: Vec<usize> = (0..=bands)
            .map(|n| by_place.partition_point(|&i| band(&self.objects[usize::from(i)]) < n))
            .collect();
        code.constant("BAND_DEG", "f64", BAND_DEG);
        code.array("BAND_STARTS", "u16", &starts);
        code.array("BY_PLACE", "u16", &by_place);

        for (column, name) in ["BY_HR", "BY_HD", "BY_SAO", "BY_HIP"]
            .into_iter()
            .enumerate()
        {
            let mut list: Vec<(u32, u16)> = self
                .numbers
                .iter()
                .zip(0u16..)
                .map(|(n, index)| (n[column], index))
                .filter(|(n, _)| *n > 0)
                .collect();
            // the first of a number keeps it
            list.sort_unstable();
            list.dedup_by_key(|(n, _)| *n);
            code.array(name, "(u32, u16)", &list);
        }
        code.array("BY_FLAMSTEED", "(u16, u16)", &self.flamsteed());
        code.array("BY_BAYER", "(u32, u16)", &self.bayer());
        code.constant("MESSIER", "usize", self.messier);

        let (mut keys, mut by_key) = (String::new(), Vec::new());
        for (key, index) in &self.by_name {
            let from = keys.len();
            keys.push_str(key);
            by_key.push((from, keys.len(), *index));
        }
        code.constant("KEYS", "&str", keys);
        code.array("BY_KEY", "(u16, u16, u16)", &by_key);

        let folded: BTreeMap<String, usize> = self
            .constellations
            .iter()
            .enumerate()
            .flat_map(|(i, names)| names.each_ref().map(|n| (words(n).concat(), i)))
            .collect();
        let folded: Vec<_> = folded.into_iter().collect();
        code.array("CONSTELLATIONS", "(&str, u8)", &folded);
        code
    }
}

/// Text that is Rust already.
struct Raw(String);

impl Debug for Raw {
    fn fmt(&self, f: &mut std::fmt::Formatter) -> std::fmt::Result {
        f.write_str(&self.0)
    }
}

fn degrees((ra, dec): (f64, f64)) -> (f64, f64) {
    (ra.to_degrees().rem_euclid(360.0), dec.to_degrees())
}

/// A fast star's place brought to J2000.0: ERFA `pmsafe`.
fn moved(ra: f64, dec: f64, &(_, pm_ra, pm_dec, epoch): &(&str, f64, f64, f64)) -> (f64, f64) {
    let (ra, dec) = (ra.to_radians(), dec.to_radians());
    let arcsec = |x: f64| (x / 3600.0).to_radians();
    let from = (2_400_000.5, 51_544.5 + (epoch - 2000.0) * 365.25);
    let star = pmsafe(
        ra,
        dec,
        arcsec(pm_ra) / dec.cos(),
        arcsec(pm_dec),
        0.0,
        0.0,
        from.0,
        from.1,
        2_400_000.5,
        51_544.5,
    );
    let (star, _) = star.expect("an ordinary star");
    degrees((star[0], star[1]))
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

// ---------------------------------------------------------------------------------------------- constellations

fn constellation_names(csv: &str) -> Vec<[String; 3]> {
    rows(csv)
        .map(|part| [part[0], part[1], part[2]].map(str::to_string))
        .collect()
}

/// The table, searched from the north, as cells of a few bands of declination: one constellation each.
fn constellations(names: &[[String; 3]], csv: &str) -> Code {
    let place: HashMap<&str, u8> = names.iter().map(|n| n[0].as_str()).zip(0u8..).collect();
    let octans = place["Oct"];
    // from, to (seconds of time), lower edge (arcsec), constellation
    let rows: Vec<(i32, i32, i32, u8)> = rows(csv)
        .map(|part| {
            let number = |i: usize| part[i].parse().expect("a whole number");
            (number(5), number(6), number(7), place[part[4]])
        })
        .collect();
    let mut edges: Vec<i32> = rows.iter().map(|r| r.2).collect();
    edges.push(-90 * 3600);
    edges.sort_unstable();
    edges.dedup();
    let (mut starts_of_bands, mut cells) = (Vec::new(), Vec::new());
    for &edge in &edges {
        let rows: Vec<_> = rows.iter().filter(|r| r.2 <= edge).collect();
        let mut starts: Vec<i32> = rows.iter().flat_map(|r| [r.0, r.1]).chain([0]).collect();
        starts.sort_unstable();
        starts.dedup();
        let first = cells.len();
        starts_of_bands.push(first);
        for start in starts.into_iter().filter(|&s| s < 86_400) {
            let holds = rows.iter().find(|r| r.0 <= start && start < r.1);
            let name = holds.map_or(octans, |r| r.3);
            if cells[first..]
                .last()
                .is_none_or(|c: &(i32, u8)| c.1 != name)
            {
                cells.push((start, name));
            }
        }
    }
    starts_of_bands.push(cells.len());
    edges.push(90 * 3600);
    let mut code = Code::default();
    code.array("EDGES_ARCSEC", "i32", &edges);
    code.array("BAND_STARTS", "u16", &starts_of_bands);
    code.array("CELLS", "(i32, u8)", &cells);
    code.0.push_str(&format!(
        "/// Every abbreviation, as IAU writes it, with the nominative and the genitive.\n\
         pub static NAMES: [[&str; 3]; {}] = {names:?};\n",
        names.len()
    ));
    code
}

// ---------------------------------------------------------------------------------------------- time

fn time(leaps: &str, delta_t: &str) -> Code {
    let leaps: Vec<(i64, f64)> = rows(leaps)
        .map(|r| (r[1].parse().expect("MJD"), r[2].parse().expect("seconds")))
        .filter(|&(mjd, _)| mjd >= 41_317)
        .collect();
    let mut first_year = None;
    let delta_t: Vec<f64> = rows(delta_t)
        .zip(0..)
        .map(|(r, k)| {
            let year: i32 = r[0].parse().expect("a year");
            assert_eq!(*first_year.get_or_insert(year) + k, year, "a year a line");
            r[1].parse().expect("seconds")
        })
        .collect();
    let mut code = Code::default();
    code.array("LEAPS", "(i64, f64)", &leaps);
    code.constant("DELTA_T_FROM", "i32", first_year.expect("a line"));
    code.array("DELTA_T", "f64", &delta_t);
    code
}

// ---------------------------------------------------------------------------------------------- series

/// Columns of a table of whole numbers.
fn columns(csv: &str, from: usize, to: usize) -> Vec<Vec<f64>> {
    let rows: Vec<Vec<f64>> = rows(csv)
        .map(|r| r.iter().map(|n| n.parse().expect("a number")).collect())
        .collect();
    (from..to)
        .map(|k| rows.iter().map(|r| r[k]).collect())
        .collect()
}

/// Terms that are summed together; `series.rs` has the same.
const BLOCK: usize = 16;

/// Columns cut into blocks, the last filled up with zeros: by block, column and term.
fn blocks(columns: &[Vec<f64>]) -> Vec<Vec<Vec<f64>>> {
    (0..columns[0].len().div_ceil(BLOCK))
        .map(|block| {
            let at = |column: &Vec<f64>, i: usize| column.get(block * BLOCK + i).copied();
            columns
                .iter()
                .map(|c| (0..BLOCK).map(|i| at(c, i).unwrap_or(0.0)).collect())
                .collect()
        })
        .collect()
}

fn nutation(lunisolar: &str, planetary: &str) -> Code {
    let mut code = Code::default();
    for (name, csv, arguments, coefficients) in [
        ("LUNISOLAR", lunisolar, 5, 6),
        ("PLANETARY", planetary, 13, 4),
    ] {
        let by = columns(csv, 0, arguments);
        // multipliers are small whole numbers: no bit is lost
        let kind = format!("[[f32; {BLOCK}]; {arguments}]");
        code.array(&format!("{name}_BY"), &kind, &blocks(&by));
        let of = columns(csv, arguments, arguments + coefficients);
        let kind = format!("[[f64; {BLOCK}]; {coefficients}]");
        code.array(name, &kind, &blocks(&of));
    }
    code
}

/// The series of the Earth: by origin (Sun to Earth, barycentre to Sun), power of the time and axis.
fn earth(csv: &str) -> Code {
    let mut terms: Vec<(usize, [f64; 3])> = rows(csv)
        .map(|r| {
            let &[origin, power, axis] = r[0].as_bytes() else {
                panic!("earth_vsop2000.csv: series {}", r[0]);
            };
            let origin = usize::from(origin == b's');
            let series = origin * 9 + usize::from(power - b'0') * 3 + usize::from(axis - b'x');
            (series, [1, 2, 3].map(|k| r[k].parse().expect("a number")))
        })
        .collect();
    terms.sort_by_key(|t| t.0);
    let (mut starts, mut all) = (vec![0], Vec::new());
    for series in 0..18 {
        let of: Vec<&[f64; 3]> = terms
            .iter()
            .filter(|t| t.0 == series)
            .map(|t| &t.1)
            .collect();
        let column = |k: usize, per: f64| of.iter().map(|t| t[k] / per).collect();
        let turn = std::f64::consts::TAU;
        all.extend(blocks(&[column(0, 1.0), column(1, turn), column(2, turn)]));
        starts.push(all.len());
    }
    let mut code = Code::default();
    code.array("STARTS", "usize", &starts);
    code.array("TERMS", &format!("[[f64; {BLOCK}]; 3]"), &all);
    code
}
