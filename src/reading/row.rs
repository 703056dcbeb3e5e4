//! One row of a table, read by the table's head: its cells become a position and the statements beside it.

use super::angle::{angle, angle_blanks, angle_joined};
use super::equinox::{Tagged, equinox_tag, equinox_year};
use super::head::{Column, ColumnHead, Head};
use super::instant::{clock, instant, zone};
use super::position::{Found, positions};
use super::scan::{Atom, Kind, atoms};
use super::site::{elevation, site_coordinates};
use super::statements::{Statements, gather};
use super::table::{Layout, by_column, cells};
use super::text::Text;
use super::words::{Word, word};
use crate::report::{
    Angle, AngleUnit, Clock, Compass, DateWritten, HorizonQuantity, InstantWritten, Mark, Number,
    Part, Position, PositionKind, Sign, SiteWritten, StatedHorizon, Zone,
};
use crate::sheet::Sheet;
use crate::span::{Span, Spanned};
use nom::Parser;
use nom::branch::alt;

/// One row, or one object's part of it.
#[derive(Clone, Debug)]
pub struct Row {
    /// Its line, from 0.
    pub line: usize,
    /// Its words.
    pub span: Span,
    /// Its position.
    pub found: Found,
    /// What else it says.
    pub said: Statements,
    /// A day alone, whose month and year stand in a row above.
    pub day_only: Option<(Number, Span)>,
}

/// The reports of one line read by a head: one for each object that the line names; none where it is no row.
pub fn read(sheet: &Sheet, head: &Head, line: usize) -> Vec<Row> {
    let text = &sheet.text;
    let body = sheet.lines()[line].body;
    let mut split = cells(text, body, head.layout);
    if split.len() < 2 {
        return Vec::new();
    }
    if matches!(head.layout, Layout::Aligned) && split.len() != head.columns.len() {
        match by_column(sheet, head, line) {
            Some(by) => split = by,
            None => return Vec::new(),
        }
    }
    let pairs: Vec<(ColumnHead, Span)> = head.columns.iter().copied().zip(split).collect();
    // two objects in one row: each with its own columns, after those they share
    let objects: Vec<usize> = (0..pairs.len())
        .filter(|&i| pairs[i].0.column == Column::Object)
        .collect();
    let places = pairs
        .iter()
        .filter(|p| matches!(p.0.column, Column::Ra | Column::Both))
        .count();
    if objects.len() > 1 && places >= objects.len() {
        let shared = &pairs[..objects[0]];
        return objects
            .iter()
            .enumerate()
            .filter_map(|(n, &from)| {
                let to = objects.get(n + 1).copied().unwrap_or(pairs.len());
                let own: Vec<_> = shared.iter().chain(&pairs[from..to]).copied().collect();
                part(text, head, line, body, &own)
            })
            .collect();
    }
    part(text, head, line, body, &pairs).into_iter().collect()
}

/// One column's part of a shared coordinate: which, its number, its sign, its place.
type SharedPart = (char, Number, Option<Sign>, Span);

/// What was gathered from the cells of one object.
#[derive(Default)]
struct Cells {
    ra: Vec<(Angle, ColumnHead)>,
    dec: Vec<(Angle, ColumnHead)>,
    hour_angle: Option<Angle>,
    altitude: Option<Angle>,
    azimuth: Option<Angle>,
    whole: Option<Found>,
    date: Option<InstantWritten>,
    time: Option<(Clock, Option<Spanned<Zone>>)>,
    site: SiteWritten,
    tags: Vec<Spanned<Tagged>>,
    said: Statements,
    /// Coordinates in columns of their own for degrees, minutes and seconds: of RA, Dec, latitude, longitude.
    split: [Vec<SharedPart>; 4],
    sign: Option<Spanned<Sign>>,
    /// The time read stands in a column of universal time.
    universal: bool,
    /// The column before.
    after: Option<Column>,
    /// A cell for the time holds something else.
    unread_time: bool,
    day_only: Option<(Number, Span)>,
    /// A coordinate's cell that holds something else than a coordinate.
    unread: Option<Span>,
}

/// One object's cells, each with the head of its column, as a row.
pub(super) fn part(
    text: &str,
    head: &Head,
    line: usize,
    body: Span,
    pairs: &[(ColumnHead, Span)],
) -> Option<Row> {
    let mut c = Cells::default();
    for &(column, cell) in pairs {
        let words = cell.of(text);
        let sign = column.column == Column::Sign;
        if sign || !(words.is_empty() || matches!(words, "-" | "--" | "—" | "–" | "…" | "..."))
        {
            c.cell(text, head, line, column, cell);
        }
    }
    c.put_together();
    let found = c.position(head)?;
    let span = Span::new(body.start, body.end);
    let day_only = c.day_only;
    Some(Row {
        line,
        span,
        said: c.finish(text, line, body),
        found,
        day_only,
    })
}

impl Cells {
    fn cell(&mut self, text: &str, head: &Head, line: usize, column: ColumnHead, cell: Span) {
        let words = cell.of(text);
        let input = Text::window(text, cell);
        if column.column != Column::Sign {
            self.after = Some(column.column);
        }
        if let Some(part) = column.part {
            self.split_cell(input, column.column, part);
            return;
        }
        match column.column {
            Column::Sign => {
                let point = match words {
                    "N" | "n" => Some(Compass::North),
                    "S" | "s" => Some(Compass::South),
                    "E" | "e" => Some(Compass::East),
                    "W" | "w" => Some(Compass::West),
                    _ => None,
                };
                // beside a latitude or longitude it is theirs
                let of_site = match self.after {
                    Some(Column::Latitude) => self.site.latitude.as_mut(),
                    Some(Column::Longitude) => self.site.longitude.as_mut(),
                    _ => None,
                };
                if let (Some(point), Some(angle)) = (point, of_site) {
                    angle.compass = Some(Spanned::new(point, cell));
                    return;
                }
                let sign = match words {
                    "-" | "−" | "–" | "S" | "s" => Some(Sign::Minus),
                    "+" | "N" | "n" => Some(Sign::Plus),
                    _ => None,
                };
                self.sign = sign.map(|s| Spanned::new(s, cell));
            }
            Column::Geographic => {
                if let Some((latitude, longitude)) = pair(input) {
                    self.site.latitude = Some(latitude);
                    self.site.longitude = Some(longitude);
                }
            }
            Column::Ra => match coordinate(input, true) {
                Some(a) => self.ra.push((a, column)),
                None => self.unread = Some(cell),
            },
            Column::Dec => match coordinate(input, true) {
                Some(a) => self.dec.push((toward(a, column), column)),
                None => self.unread = Some(cell),
            },
            Column::HourAngle => self.hour_angle = coordinate(input, true),
            Column::Altitude => self.altitude = coordinate(input, false),
            Column::Azimuth => self.azimuth = coordinate(input, false),
            Column::Both => {
                let inner = inside(input, line);
                self.whole = positions(text, &inner)
                    .into_iter()
                    .next()
                    .or_else(|| forced_pair(&inner, column));
                if self.whole.is_none() {
                    self.unread = Some(cell);
                }
            }
            Column::Object => self
                .said
                .objects
                .push(Spanned::new(words.to_string(), cell)),
            Column::Observer => self
                .said
                .observers
                .push(Spanned::new(words.to_string(), cell)),
            Column::Instant | Column::Date | Column::Clock => {
                // universal time before any other date of the row
                let other = self
                    .date
                    .as_ref()
                    .is_some_and(|d| d.clock.is_some() || column.column == Column::Instant);
                if column.universal
                    && !self.universal
                    && other
                    && instant(input).is_ok_and(|(_, i)| i.date.is_some())
                {
                    self.date = None;
                }
                self.universal |= column.universal;
                self.when(input);
            }
            Column::Julian(count) => {
                if let Ok((rest, number)) = super::number::number(input)
                    && rest.is_empty()
                {
                    let number = match column.base {
                        Some(base) => Number {
                            mantissa: number.mantissa
                                + base.mantissa * 10u64.pow(u32::from(number.places)),
                            whole_digits: 7,
                            ..number
                        },
                        None => number,
                    };
                    let d = Spanned::new(DateWritten::Julian { number, count }, cell);
                    let i = InstantWritten {
                        date: Some(d),
                        clock: None,
                        clock_unread: None,
                        zone: None,
                        until: None,
                        plus_s: None,
                        weekday: None,
                        span: cell,
                    };
                    match self.date {
                        None => self.date = Some(i),
                        Some(_) => self.said.instants.push(i),
                    }
                }
            }
            Column::Equinox => {
                if let Ok((_, t)) = equinox_tag(input).or_else(|_| equinox_year(input)) {
                    self.tags
                        .push(Spanned::new(Tagged { weak: false, ..t }, cell));
                }
            }
            Column::Site => self.site_cell(text, input, line, cell),
            Column::Latitude => {
                self.site.latitude = coordinate(input, false).map(|a| toward(a, column))
            }
            Column::Longitude => {
                self.site.longitude = coordinate(input, false).map(|a| toward(a, column))
            }
            Column::Elevation => self.site.elevation_m = height(input, head.feet),
            Column::Magnitude => {
                self.said.magnitude = super::number::number(input)
                    .ok()
                    .map(|(_, n)| Spanned::new(n.value(), cell));
            }
            Column::Constellation => {
                self.said.constellation = word(input, |w| match w {
                    Word::ConstellationName(c) => Some(c),
                    _ => None,
                })
                .map(|(_, c)| Spanned::new(c, cell));
            }
            Column::Uncertainty | Column::Note => {
                // a column of instants whose head says nothing
                if self.date.is_none()
                    && let Ok((rest, i)) = instant(input)
                    && rest.skip_blanks().is_empty()
                    && i.date.is_some()
                    && i.clock.is_some()
                {
                    self.date = Some(i);
                    return;
                }
                let note = gather(text, &inside(input, line), &[]);
                self.said.stets.extend(note.stets);
                self.said.roles.extend(note.roles);
                self.said.claims_new = self.said.claims_new.or(note.claims_new);
            }
        }
    }

    fn when(&mut self, input: Text<'_>) {
        if let Ok((_, i)) = instant(input) {
            match &mut self.date {
                Some(d) if d.clock.is_none() && i.date.is_none() => {
                    d.clock = i.clock;
                    d.zone = i.zone.or(d.zone.take());
                    d.span = d.span.cover(i.span);
                }
                Some(_) => {}
                None => self.date = Some(i),
            }
        } else if let Ok((rest, c)) = clock(input) {
            self.time = Some((c, zone(rest).ok().map(|(_, z)| z)));
        } else if let Some(c) = bare_clock(input) {
            self.time = Some((c, None));
        } else if let Ok((rest, day)) = super::number::number(input)
            && rest.is_empty()
            && day.whole_digits <= 2
            && (1.0..32.0).contains(&day.value())
        {
            self.day_only = Some((day, input.span()));
        } else {
            // a time that cannot be read must not become midnight
            self.unread_time = true;
        }
    }

    fn site_cell(&mut self, text: &str, input: Text<'_>, line: usize, cell: Span) {
        if let Ok((_, s)) = site_coordinates(input) {
            self.said.sites.push(s);
            return;
        }
        if let Some((latitude, longitude)) = pair(input) {
            self.said.sites.push(SiteWritten {
                latitude: Some(latitude),
                longitude: Some(longitude),
                signed_field: true,
                span: cell,
                ..SiteWritten::default()
            });
            return;
        }
        let named = |span: Span| {
            let words = span
                .of(text)
                .trim()
                .trim_end_matches([',', ';', '(', ':'])
                .trim();
            let span = Span::new(span.start, span.start + words.len());
            (!words.is_empty()).then(|| Spanned::new(words.to_string(), span))
        };
        let written = inside(input, line).into_iter().find_map(|a| match a.kind {
            Kind::Site(s) => Some(*s),
            _ => None,
        });
        self.said.sites.push(match written {
            Some(s) => SiteWritten {
                name: named(Span::new(cell.start, s.span.start)),
                span: cell,
                ..s
            },
            None => SiteWritten {
                name: named(cell),
                span: cell,
                ..SiteWritten::default()
            },
        });
    }

    /// A cell of a coordinate that is spread over several columns.
    fn split_cell(&mut self, input: Text<'_>, axis: Column, part: char) {
        let slot = match axis {
            Column::Ra => 0,
            Column::Dec => 1,
            Column::Latitude => 2,
            _ => 3,
        };
        let (rest, sign) = match super::number::sign(input) {
            Ok((rest, s)) => (rest, Some(s.value)),
            Err(_) => (input, None),
        };
        match super::number::number(rest) {
            Ok((after, n)) if after.skip_blanks().is_empty() => {
                self.split[slot].push((part, n, sign, input.span()))
            }
            _ => self.unread = Some(input.span()),
        }
    }

    /// Coordinates from their columns, signs from theirs.
    fn put_together(&mut self) {
        for slot in 0..4 {
            let pieces = std::mem::take(&mut self.split[slot]);
            let whole = pieces.first().is_some_and(|p| matches!(p.0, 'h' | 'd'));
            let span = pieces.iter().map(|p| p.3).reduce(Span::cover);
            let (true, Some(span)) = (whole, span) else {
                continue;
            };
            let parts: Vec<Part> = pieces
                .iter()
                .map(|p| Part {
                    number: p.1,
                    mark: Mark::Blank,
                    span: p.3,
                })
                .collect();
            let sign = pieces[0]
                .2
                .map(|s| Spanned::new(s, Span::new(pieces[0].3.start, pieces[0].3.start + 1)));
            let Some(a) = Angle::new(sign, &parts, None, span) else {
                continue;
            };
            let unit = if pieces[0].0 == 'h' {
                AngleUnit::Hours
            } else {
                AngleUnit::Degrees
            };
            let column = ColumnHead {
                column: Column::Ra,
                span,
                tag: None,
                unit: Some(unit),
                universal: true,
                part: None,
                compass: None,
                base: None,
            };
            match slot {
                0 => self.ra.push((a, column)),
                1 => self.dec.push((a, column)),
                2 => self.site.latitude = Some(a),
                _ => self.site.longitude = Some(a),
            }
        }
        if let (Some(sign), Some((dec, _))) = (self.sign, self.dec.first_mut())
            && dec.sign.is_none()
        {
            dec.sign = Some(sign);
            dec.span = dec.span.cover(sign.span);
        }
    }

    /// The position of the row: the first pair of its columns; further pairs are other forms of it.
    fn position(&mut self, head: &Head) -> Option<Found> {
        if let Some(mut f) = self.whole.take() {
            f.tags.append(&mut self.tags);
            return Some(f);
        }
        let first_ra = self.ra.first().copied();
        let first_dec = self.dec.first().copied();
        let dec = first_dec.map(|d| d.0);
        let mut found = match (first_ra, self.hour_angle, self.altitude, self.azimuth) {
            (Some((ra, column)), ..) => found(PositionKind::Equatorial, Some(ra), dec, column.unit),
            (None, Some(h), ..) if dec.is_some() => {
                found(PositionKind::HourAngle, Some(h), dec, None)
            }
            (None, _, Some(alt), Some(az)) => {
                found(PositionKind::Horizontal, Some(az), Some(alt), None)
            }
            _ if dec.is_some()
                && (self.date.is_some()
                    || !self.said.objects.is_empty()
                    || self.unread.is_some()) =>
            {
                found(PositionKind::Equatorial, None, dec, None)
            }
            // a head asks for a position, and the cells hold something that is none: said to be unread
            _ => {
                let span = self
                    .unread
                    .filter(|_| self.date.is_some() && !self.said.objects.is_empty())?;
                let mut f = found(PositionKind::Equatorial, None, None, None);
                f.position.span = span;
                f
            }
        };
        found.tags.append(&mut self.tags);
        let column_tag = first_ra
            .and_then(|(_, c)| c.tag)
            .or(first_dec.and_then(|(_, c)| c.tag))
            .or(head.tag);
        if found.tags.is_empty() {
            self.said.tags.extend(column_tag);
        }
        for (n, &(ra, column)) in self.ra.iter().enumerate().skip(1) {
            if let Some(&(dec, dec_column)) = self.dec.get(n) {
                let form = self::found(PositionKind::Equatorial, Some(ra), Some(dec), column.unit)
                    .position;
                found
                    .other_forms
                    .push((form, column.tag.or(dec_column.tag).or(column_tag)));
            }
        }
        Some(found)
    }

    /// The other statements of the row, put together.
    fn finish(mut self, text: &str, line: usize, body: Span) -> Statements {
        if let Some((c, z)) = self.time {
            match &mut self.date {
                Some(d) if d.clock.is_none() => {
                    d.clock = Some(c);
                    d.zone = z.or(d.zone.take());
                    d.span = d.span.cover(c.span);
                }
                Some(_) => {}
                None => {
                    self.date = Some(InstantWritten {
                        date: None,
                        clock: Some(c),
                        clock_unread: None,
                        zone: z,
                        until: None,
                        plus_s: None,
                        weekday: None,
                        span: c.span,
                    });
                }
            }
        }
        let mut said = self.said;
        if self.unread_time && self.date.as_ref().is_some_and(|d| d.clock.is_none()) {
            self.date = None;
        }
        if let Some(d) = self.date {
            said.instants.insert(0, d);
        }
        let mut site = self.site;
        if site.latitude.is_some() || site.longitude.is_some() {
            site.signed_field = true;
            let spans = [
                site.latitude.map(|a| a.span),
                site.longitude.map(|a| a.span),
            ];
            site.span = spans
                .into_iter()
                .flatten()
                .reduce(Span::cover)
                .unwrap_or(body);
            if let Some(named) = said.sites.first().filter(|s| s.latitude.is_none()) {
                site.name.clone_from(&named.name);
                said.sites.clear();
            }
            said.sites.insert(0, site);
        } else if let (Some(m), Some(s)) = (site.elevation_m, said.sites.last_mut()) {
            s.elevation_m = s.elevation_m.or(Some(m));
        }
        let beside = [
            (HorizonQuantity::Altitude, self.altitude),
            (HorizonQuantity::Azimuth, self.azimuth),
            (HorizonQuantity::HourAngle, self.hour_angle),
        ];
        if !self.ra.is_empty() {
            for (quantity, angle) in beside {
                said.horizon
                    .extend(angle.map(|angle| StatedHorizon { quantity, angle }));
            }
        }
        if said.claims_new.is_none()
            && let Some(o) = said.objects.first()
        {
            let inner = inside(Text::window(text, o.span), line);
            said.claims_new = inner.iter().find(|a| a.means(Word::New)).map(|a| a.span);
        }
        said
    }
}

fn inside<'t>(input: Text<'t>, line: usize) -> Vec<Atom<'t>> {
    let mut inner = Vec::new();
    atoms(input, line, &mut false, &mut inner);
    inner
}

fn found(
    kind: PositionKind,
    first: Option<Angle>,
    second: Option<Angle>,
    said: Option<AngleUnit>,
) -> Found {
    let span = [first, second]
        .iter()
        .flatten()
        .map(|a| a.span)
        .reduce(Span::cover)
        .unwrap_or_default();
    let first_unit = match (kind, first) {
        (PositionKind::HourAngle, _) => Some(AngleUnit::Hours),
        (PositionKind::Horizontal, _) => Some(AngleUnit::Degrees),
        // hours, minutes and seconds under a head of degrees: nothing settles which
        (_, Some(a))
            if a.parts().len() > 1
                && a.marked_unit().is_none()
                && said == Some(AngleUnit::Degrees) =>
        {
            (a.value() >= 24.0).then_some(AngleUnit::Degrees)
        }
        (_, Some(a)) => a.marked_unit().or(said).or(if a.parts().len() > 1 {
            Some(AngleUnit::Hours)
        } else {
            (a.value() >= 24.0).then_some(AngleUnit::Degrees)
        }),
        _ => None,
    };
    let position = Position {
        kind,
        first,
        second,
        first_unit,
        polar_distance: false,
        zenith_distance: false,
        azimuth_from_south: false,
        airless: false,
        labelled: true,
        span,
    };
    Found {
        position,
        other_forms: Vec::new(),
        tags: Vec::new(),
        first: 0,
        end: 0,
    }
}

/// A cell that holds one coordinate and nothing else of weight.
fn coordinate(input: Text<'_>, joined: bool) -> Option<Angle> {
    let input = input.skip_blanks();
    let plain = alt((angle, angle_blanks)).parse(input).ok();
    if let Some((rest, a)) = plain
        && rest.skip_blanks().is_empty()
    {
        let six = a.parts().len() == 1 && a.parts()[0].number.whole_digits >= 6;
        if !(joined && six) {
            return Some(a);
        }
    }
    if let Ok((rest, a)) = angle_joined(input)
        && rest.skip_blanks().is_empty()
        && joined
    {
        return Some(a);
    }
    // a footnote's letter or an uncertainty may follow
    let (rest, a) = plain?;
    let tail = rest.skip_blanks();
    let note =
        tail.as_str().chars().count() <= 2 && !tail.as_str().contains(|c: char| c.is_ascii_digit());
    (note || super::uncertainty::uncertainty(tail).is_ok()).then_some(a)
}

fn height(input: Text<'_>, feet: bool) -> Option<Spanned<f64>> {
    if let Ok((_, m)) = elevation(input) {
        return Some(m);
    }
    let minus = input.peek() == Some('-');
    let (_, n) = super::number::number(input.skip(usize::from(minus))).ok()?;
    let metres = n.value() * if feet { 0.3048 } else { 1.0 };
    Some(Spanned::new(
        if minus { -metres } else { metres },
        input.span(),
    ))
}

/// A cell headed "position" holds a pair whatever its notation.
fn forced_pair(inner: &[Atom], column: ColumnHead) -> Option<Found> {
    let angles: Vec<Angle> = inner
        .iter()
        .filter_map(|a| match &a.kind {
            Kind::Angle(a) | Kind::Joined(a) => Some(**a),
            Kind::Run(r) => r.angle(0, r.numbers.len().min(3)),
            _ => None,
        })
        .collect();
    let [ra, dec] = angles[..] else { return None };
    Some(found(
        PositionKind::Equatorial,
        Some(ra),
        Some(dec),
        column.unit,
    ))
}

/// A coordinate with the hemisphere that its head names.
fn toward(mut a: Angle, column: ColumnHead) -> Angle {
    if a.sign.is_none() && a.compass.is_none() {
        a.compass = column.compass.map(|c| Spanned::new(c, a.span));
    }
    a
}

/// `-33.87, 151.21`: latitude and longitude of a field.
fn pair(input: Text<'_>) -> Option<(Angle, Angle)> {
    let (rest, latitude) = alt((angle, angle_blanks)).parse(input).ok()?;
    let rest = rest.skip_blanks();
    let rest = if matches!(rest.peek(), Some(',' | ';' | '/')) {
        rest.skip(1).skip_blanks()
    } else {
        rest
    };
    let (rest, longitude) = alt((angle, angle_blanks)).parse(rest).ok()?;
    let fits = rest.skip_blanks().is_empty()
        && latitude.value().abs() <= 90.0
        && longitude.value().abs() <= 360.0;
    let one = latitude.parts().len() == 1 && longitude.parts().len() == 1
        || latitude.marked_unit().is_some();
    (fits && one).then_some((latitude, longitude))
}

/// A clock time in a column for it, without colons: `22 31 05`, `2231`, `223105`.
fn bare_clock(input: Text<'_>) -> Option<Clock> {
    let words = input.as_str().trim();
    let fields: Vec<&str> = if words.contains(' ') {
        words.split_whitespace().collect()
    } else {
        match words.len() {
            4 => vec![&words[..2], &words[2..]],
            6 => vec![&words[..2], &words[2..4], &words[4..]],
            _ => return None,
        }
    };
    let fields: Option<Vec<Number>> = fields
        .iter()
        .map(|f| {
            super::number::number(Text::new(f))
                .ok()
                .filter(|(r, n)| r.is_empty() && n.whole_digits <= 2)
                .map(|(_, n)| n)
        })
        .collect();
    let fields = fields?;
    let in_range =
        (2..=3).contains(&fields.len()) && fields[0].mantissa < 24 && fields[1].mantissa < 60;
    in_range.then(|| Clock {
        hour: fields[0],
        minute: Some(fields[1]),
        second: fields.get(2).copied(),
        pm: None,
        span: input.span(),
    })
}
