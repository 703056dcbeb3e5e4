//! Heads of tables: what each column holds, in which unit, for which equinox, by which clock.

use super::equinox::{Tagged, equinox_year};
use super::instant::zone;
use super::scan::{Kind, atoms};
use super::table::Layout;
use super::text::Text;
use super::words::Word;
use crate::report::{AngleUnit, Compass, DateWritten, JulianCount, Number, Zone};
use crate::span::{Span, Spanned};

/// What a column holds.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(super) enum Column {
    Ra,
    Dec,
    Both,
    HourAngle,
    Altitude,
    Azimuth,
    Object,
    Observer,
    Instant,
    Date,
    Clock,
    Julian(JulianCount),
    Equinox,
    Site,
    Latitude,
    Longitude,
    Elevation,
    Magnitude,
    Constellation,
    Uncertainty,
    /// The sign of a declination, or N and S.
    Sign,
    /// Latitude and longitude in one cell.
    Geographic,
    Note,
}

/// One column's head.
#[derive(Clone, Copy, Debug)]
pub(super) struct ColumnHead {
    pub column: Column,
    pub span: Span,
    pub tag: Option<Spanned<Tagged>>,
    pub unit: Option<AngleUnit>,
    /// One of several columns that share a coordinate: `h`, `d`, `m`, `s` for its hours, degrees, minutes, seconds.
    pub part: Option<char>,
    /// The hemisphere that the head names.
    pub compass: Option<Compass>,
    /// What is to be added to a Julian date: `JD 2460000+`.
    pub base: Option<Number>,
}

/// A table's head.
#[derive(Clone, Debug)]
pub struct Head {
    /// Its line, from 0.
    pub line: usize,
    /// A tag that stands over all columns (or over the right ascension).
    pub tag: Option<Spanned<Tagged>>,
    /// The zone its time column names.
    pub zone: Option<Spanned<Zone>>,
    pub(super) layout: Layout,
    pub(super) columns: Vec<ColumnHead>,
    pub(super) feet: bool,
    /// The year that the date's column names.
    pub(super) year: Option<i32>,
}

impl Head {
    /// An empty head.
    pub fn new(line: usize, layout: Layout) -> Head {
        Head {
            line,
            tag: None,
            zone: None,
            layout,
            columns: Vec::new(),
            feet: false,
            year: None,
        }
    }

    /// Settles the columns that share a coordinate: parts only where minutes have a column of their own.
    pub fn settle(&mut self) {
        for axis in [Column::Ra, Column::Dec, Column::Latitude, Column::Longitude] {
            let split = self
                .columns
                .iter()
                .any(|c| c.column == axis && c.part == Some('m'));
            for c in self
                .columns
                .iter_mut()
                .filter(|c| c.column == axis && !split)
            {
                match c.part.take() {
                    Some('h') => c.unit = Some(AngleUnit::Hours),
                    Some('d') => c.unit = Some(AngleUnit::Degrees),
                    // lat_s: the hemisphere
                    Some('s') if axis == Column::Latitude => c.compass = Some(Compass::South),
                    _ => {}
                }
            }
        }
    }

    /// What a head's cell names; `None` where the line can be no head (it holds a number that is no equinox).
    pub fn column(&mut self, text: &str, cell: Span) -> Option<ColumnHead> {
        if let Some(head) = shared_column(text, cell) {
            return Some(head);
        }
        let mut words = Vec::new();
        atoms(Text::window(text, cell), 0, &mut false, &mut words);
        let mut column = Column::Note;
        let mut rank = 0;
        let mut set = |c: Column, r: u8| {
            if r > rank {
                rank = r;
                column = c;
            }
        };
        let mut zone_here = None;
        let mut unit = None;
        let mut tag_here = None;
        let mut clock_word = false;
        let mut labels = 0;
        let mut compass = None;
        let mut base = None;
        let mut year = None;
        let mut part = None;
        for atom in &words {
            match &atom.kind {
                Kind::Word(p) => {
                    for w in p.meanings() {
                        match w {
                            Word::RightAscension => {
                                labels |= 1;
                                set(Column::Ra, 9);
                            }
                            Word::Declination => {
                                labels |= 2;
                                set(Column::Dec, 9);
                            }
                            Word::Both => set(Column::Both, 10),
                            Word::Position => set(Column::Both, 4),
                            Word::HourAngle => set(Column::HourAngle, 8),
                            Word::Azimuth => set(Column::Azimuth, 8),
                            Word::Elevation if atom.span.len() == 1 => {
                                unit = Some(AngleUnit::Hours)
                            }
                            Word::Elevation => set(Column::Elevation, 7),
                            Word::Altitude => set(Column::Altitude, 6),
                            Word::Object => set(Column::Object, 5),
                            Word::Observer => set(Column::Observer, 6),
                            Word::Date => set(Column::Date, 7),
                            Word::Time => {
                                set(Column::Clock, 5);
                                clock_word = true;
                            }
                            Word::Julian => set(Column::Julian(JulianCount::Jd), 7),
                            Word::ModifiedJulian => set(Column::Julian(JulianCount::Mjd), 7),
                            Word::HeliocentricJulian => set(Column::Julian(JulianCount::Hjd), 7),
                            Word::BarycentricJulian => set(Column::Julian(JulianCount::Bjd), 7),
                            Word::Universal
                            | Word::LocalTime
                            | Word::Terrestrial
                            | Word::ZoneAbbreviation
                            | Word::Atomic
                            | Word::Barycentric => {
                                zone_here =
                                    zone(Text::window(text, Span::new(atom.span.start, cell.end)))
                                        .ok()
                                        .map(|(_, z)| z);
                                set(Column::Instant, 3);
                            }
                            Word::Equinox => set(Column::Equinox, 6),
                            Word::Epoch => set(Column::Equinox, 4),
                            Word::Site => set(Column::Site, 6),
                            Word::Latitude => set(Column::Latitude, 8),
                            Word::Longitude => set(Column::Longitude, 8),
                            Word::Magnitude => set(Column::Magnitude, 5),
                            Word::Constellation | Word::ConstellationName(_) => {
                                set(Column::Constellation, 3)
                            }
                            Word::Uncertainty => set(Column::Uncertainty, 10),
                            Word::Degrees => unit = Some(AngleUnit::Degrees),
                            Word::Hours => unit = Some(AngleUnit::Hours),
                            Word::Feet => {
                                self.feet = true;
                                set(Column::Elevation, 7);
                            }
                            Word::Metres if atom.span.len() > 1 || cell.len() > 5 => {
                                set(Column::Elevation, 7)
                            }
                            Word::Compass(c) => compass = Some(c),
                            Word::GeographicPair => set(Column::Geographic, 9),
                            _ => {}
                        }
                    }
                }
                // the epoch of the places is not their equinox
                Kind::Equinox(t) if t.epoch_word && tag_here.is_some() => {}
                Kind::Equinox(t) => tag_here = Some(Spanned::new(*t, atom.span)),
                Kind::Instant(i) => match i.date.map(|d| d.value) {
                    Some(DateWritten::Julian { number, count }) => {
                        set(Column::Julian(count), 7);
                        base = Some(number);
                    }
                    _ => return None,
                },
                Kind::Run(r) if r.numbers.len() == 1 => {
                    match equinox_year(Text::window(text, r.numbers[0].1)) {
                        Ok((rest, t)) if rest.is_empty() => {
                            year = Some(r.numbers[0].0.mantissa as i32);
                            if tag_here.is_none() {
                                tag_here = Some(Spanned::new(t, atom.span));
                            }
                        }
                        _ => return None,
                    }
                }
                Kind::Angle(_) | Kind::Run(_) | Kind::Site(_) | Kind::Joined(_) => return None,
                Kind::Plain => match atom.span.of(text) {
                    seven
                        if seven.len() == 7
                            && seven.starts_with('2')
                            && seven.bytes().all(|b| b.is_ascii_digit()) =>
                    {
                        base = seven.parse().ok().map(Number::whole);
                    }
                    "s" | "S" => part = Some('s'),
                    "d" | "°" => unit = Some(AngleUnit::Degrees),
                    "h" | "hms" | "hh" => unit = unit.or(Some(AngleUnit::Hours)),
                    "hhmmss" => unit = Some(AngleUnit::Hours),
                    _ => {}
                },
                Kind::Mark('°') => unit = Some(AngleUnit::Degrees),
                _ => {}
            }
        }
        // "R.A. (2000) Decl." over two columns
        if labels == 3 {
            column = Column::Both;
        }
        if matches!(
            column,
            Column::Date | Column::Clock | Column::Instant | Column::Note | Column::Julian(_)
        ) && zone_here.is_some()
        {
            self.zone = zone_here;
            column = match column {
                Column::Date if clock_word => Column::Instant,
                Column::Note => Column::Instant,
                c => c,
            };
        }
        if column == Column::Date && clock_word {
            column = Column::Instant;
        }
        if matches!(
            column,
            Column::Ra | Column::Dec | Column::Both | Column::Equinox | Column::Note
        ) && let Some(t) = tag_here
            && (self.tag.is_none() || column == Column::Ra)
        {
            self.tag = Some(t);
        }
        if matches!(column, Column::Date | Column::Instant) {
            self.year = self.year.or(year);
            tag_here = None;
        }
        Some(ColumnHead {
            column,
            span: cell,
            tag: tag_here,
            unit,
            part,
            compass,
            base,
        })
    }
}

/// Columns that share a coordinate, by their short names: `ra_h`, `RAm`, `dec_sign`, `DE-`, `lat_d`, `N/S`.
fn shared_column(text: &str, cell: Span) -> Option<ColumnHead> {
    let words: String = cell
        .of(text)
        .to_lowercase()
        .chars()
        .filter(|c| !matches!(c, '_' | '.' | ' ' | '(' | ')' | '[' | ']'))
        .collect();
    let head = |column, part| {
        Some(ColumnHead {
            column,
            span: cell,
            tag: None,
            unit: None,
            part,
            compass: None,
            base: None,
        })
    };
    if matches!(
        &*words,
        "sign"
            | "decsign"
            | "de-"
            | "±"
            | "+/-"
            | "n/s"
            | "ns"
            | "decns"
            | "e/w"
            | "ew"
            | "signdec"
            | "decl+/-"
    ) {
        return head(Column::Sign, None);
    }
    for (name, axis) in [
        ("ra", Column::Ra),
        ("decl", Column::Dec),
        ("dec", Column::Dec),
        ("de", Column::Dec),
        ("lat", Column::Latitude),
        ("long", Column::Longitude),
        ("lon", Column::Longitude),
    ] {
        if let Some(rest) = words.strip_prefix(name) {
            let part = match (rest, axis) {
                ("h" | "hr" | "hour" | "hours", Column::Ra) => 'h',
                ("d" | "deg" | "degrees", _) => 'd',
                ("m" | "min" | "minutes" | "arcmin", _) => 'm',
                ("s" | "sec" | "seconds" | "arcsec", _) => 's',
                _ => continue,
            };
            return head(axis, Some(part));
        }
    }
    None
}
