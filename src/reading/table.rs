//! Tables: a head that names its columns, and rows read by it (CSV, TSV, pipes, Markdown, aligned columns).

use super::angle::{angle, angle_blanks, angle_joined};
use super::equinox::{Tagged, equinox_tag, equinox_year};
use super::instant::{clock, instant, zone};
use super::position::{Found, positions};
use super::scan::{Atom, Kind, atoms};
use super::site::{elevation, site_coordinates};
use super::statements::{Statements, gather};
use super::text::Text;
use super::words::Word;
use crate::report::{
    Angle, AngleUnit, DateWritten, HorizonQuantity, InstantWritten, JulianCount, Position,
    PositionKind, SiteWritten, StatedHorizon, Zone,
};
use crate::sheet::{Block, Sheet};
use crate::span::{Span, Spanned};
use nom::Parser;
use nom::branch::alt;

/// How cells are parted.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
enum Layout {
    Delimited(char),
    Aligned,
}

/// What a column holds.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
enum Column {
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
    Note,
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
    layout: Layout,
    columns: Vec<(Column, Span)>,
    ra_unit: Option<AngleUnit>,
    feet: bool,
}

/// One row read by its head.
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
}

/// The head of a table at `line`, if that is one: it names a right ascension and a declination (or a position) in two or more cells.
pub fn head(sheet: &Sheet, line: usize, end: usize) -> Option<Head> {
    let body = sheet.lines().get(line)?.body;
    let words = body.of(&sheet.text);
    if words.len() > 2000 || line + 1 >= end + 2 {
        return None;
    }
    let layouts: &[Layout] = if words.contains('|') {
        &[Layout::Delimited('|')]
    } else if words.contains('\t') {
        &[Layout::Delimited('\t')]
    } else if words.contains(';') {
        &[Layout::Delimited(';'), Layout::Delimited(',')]
    } else if words.contains(',') {
        &[Layout::Delimited(','), Layout::Aligned]
    } else {
        &[Layout::Aligned]
    };
    layouts.iter().find_map(|l| head_in(sheet, line, *l))
}

fn head_in(sheet: &Sheet, line: usize, layout: Layout) -> Option<Head> {
    let body = sheet.lines()[line].body;
    let cells = cells(&sheet.text, body, layout);
    if cells.len() < 2 {
        return None;
    }
    let mut head = Head {
        line,
        tag: None,
        zone: None,
        layout,
        columns: Vec::new(),
        ra_unit: None,
        feet: false,
    };
    for &cell in &cells {
        let column = head.column(&sheet.text, cell)?;
        head.columns.push((column, cell));
    }
    let has = |c: Column| head.columns.iter().any(|(k, _)| *k == c);
    let names_position = has(Column::Ra) && has(Column::Dec)
        || has(Column::Both)
        || has(Column::HourAngle) && has(Column::Dec)
        || has(Column::Altitude) && has(Column::Azimuth);
    let known = head
        .columns
        .iter()
        .filter(|(c, _)| *c != Column::Note)
        .count();
    (names_position && known * 2 >= cells.len()).then_some(head)
}

/// The rows of a head, up to `end` or the first line that is none.
pub fn rows(sheet: &Sheet, head: &Head, end: usize) -> Vec<Row> {
    rows_from(sheet, head, head.line + 1, end)
}

/// The rows of a head from a later line on.
pub fn rows_from(sheet: &Sheet, head: &Head, from: usize, end: usize) -> Vec<Row> {
    let mut found = Vec::new();
    let mut misses = 0;
    for line in from..end {
        let body = sheet.lines()[line].body;
        let words = body.of(&sheet.text);
        if words.chars().all(|c| {
            matches!(
                c,
                '-' | '=' | '|' | ':' | '+' | ' ' | '\t' | '_' | '─' | '┼'
            )
        }) {
            continue;
        }
        // the head repeated, or another one
        if self::head(sheet, line, end).is_some() {
            break;
        }
        match row(sheet, head, line) {
            Some(r) => {
                found.push(r);
                misses = 0;
            }
            None => {
                misses += 1;
                if misses > 1 && matches!(head.layout, Layout::Aligned) {
                    break;
                }
            }
        }
    }
    found
}

/// True where most lines of a block are rows of an earlier head.
pub fn continues(sheet: &Sheet, head: &Head, block: Block) -> bool {
    let lines = block.end - block.first;
    let rows = (block.first..block.end)
        .filter(|l| row(sheet, head, *l).is_some_and(|r| r.found.position.second.is_some()))
        .count();
    let delimited = match head.layout {
        Layout::Delimited(d) => sheet.lines()[block.first].body.of(&sheet.text).contains(d),
        Layout::Aligned => {
            cells(
                &sheet.text,
                sheet.lines()[block.first].body,
                Layout::Aligned,
            )
            .len()
                == head.columns.len()
        }
    };
    delimited && rows * 2 > lines
}

/// The cells of a line, trimmed; quotes taken off.
fn cells(text: &str, body: Span, layout: Layout) -> Vec<Span> {
    let words = body.of(text);
    let mut found = Vec::new();
    match layout {
        Layout::Delimited(d) => {
            let mut start = 0;
            let mut quoted = false;
            let push = |a: usize, b: usize, found: &mut Vec<Span>| {
                found.push(trimmed(text, Span::new(body.start + a, body.start + b)))
            };
            for (i, c) in words.char_indices() {
                if c == '"' && d != '|' && (quoted || words[start..i].trim().is_empty()) {
                    quoted = !quoted;
                } else if c == d && !quoted {
                    push(start, i, &mut found);
                    start = i + d.len_utf8();
                }
            }
            push(start, words.len(), &mut found);
            if d == '|' {
                // the bars at both ends part nothing
                if found.first().is_some_and(|s| s.is_empty()) {
                    found.remove(0);
                }
                if found.last().is_some_and(|s| s.is_empty()) {
                    found.pop();
                }
            }
        }
        Layout::Aligned => {
            let mut start = None;
            let mut blanks = 0;
            let mut end = 0;
            for (i, c) in words.char_indices() {
                if super::text::is_blank(c) {
                    blanks += if c == '\t' { 2 } else { 1 };
                } else {
                    if blanks >= 2
                        && let Some(s) = start.take()
                    {
                        found.push(Span::new(body.start + s, body.start + end));
                    }
                    blanks = 0;
                    start.get_or_insert(i);
                    end = i + c.len_utf8();
                }
            }
            if let Some(s) = start {
                found.push(Span::new(body.start + s, body.start + end));
            }
        }
    }
    found
}

fn trimmed(text: &str, span: Span) -> Span {
    let words = span.of(text);
    let inner = words.trim();
    let mut start = span.start + (words.len() - words.trim_start().len());
    let mut end = start + inner.len();
    if inner.len() >= 2 && inner.starts_with('"') && inner.ends_with('"') {
        start += 1;
        end -= 1;
    }
    Span::new(start, end)
}

impl Head {
    /// What a head's cell names; `None` where the line can be no head (it holds a number that is no equinox).
    fn column(&mut self, text: &str, cell: Span) -> Option<Column> {
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
        for atom in &words {
            match &atom.kind {
                Kind::Word(p) => {
                    for w in p.meanings() {
                        match w {
                            Word::RightAscension => set(Column::Ra, 9),
                            Word::Declination => set(Column::Dec, 9),
                            Word::Both => set(Column::Both, 10),
                            Word::Position => set(Column::Both, 4),
                            Word::HourAngle => set(Column::HourAngle, 8),
                            Word::Azimuth => set(Column::Azimuth, 8),
                            Word::Elevation => set(Column::Elevation, 7),
                            Word::Altitude => set(Column::Altitude, 6),
                            Word::Object => set(Column::Object, 5),
                            Word::Observer => set(Column::Observer, 6),
                            Word::Date => set(Column::Date, 6),
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
                            Word::Feet => self.feet = true,
                            _ => {}
                        }
                    }
                }
                Kind::Equinox(t) => tag_here = Some(Spanned::new(*t, atom.span)),
                Kind::Run(r) if r.numbers.len() == 1 => {
                    match equinox_year(Text::window(text, r.numbers[0].1)) {
                        Ok((rest, t)) if rest.is_empty() => {
                            tag_here = Some(Spanned::new(t, atom.span))
                        }
                        _ => return None,
                    }
                }
                Kind::Angle(_)
                | Kind::Run(_)
                | Kind::Instant(_)
                | Kind::Site(_)
                | Kind::Joined(_) => return None,
                Kind::Plain => match atom.span.of(text) {
                    "d" | "°" => unit = Some(AngleUnit::Degrees),
                    "h" | "hms" | "hh" => unit = unit.or(Some(AngleUnit::Hours)),
                    "hhmmss" => unit = Some(AngleUnit::Hours),
                    _ => {}
                },
                Kind::Mark('°') => unit = Some(AngleUnit::Degrees),
                _ => {}
            }
        }
        if matches!(
            column,
            Column::Date | Column::Clock | Column::Instant | Column::Note
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
        if column == Column::Ra && unit.is_some() {
            self.ra_unit = unit;
        }
        if matches!(
            column,
            Column::Ra | Column::Dec | Column::Both | Column::Equinox | Column::Note
        ) && let Some(t) = tag_here
            && (self.tag.is_none() || column == Column::Ra)
        {
            self.tag = Some(t);
        }
        Some(column)
    }
}

/// One line read by a head; `None` where it is no row.
fn row(sheet: &Sheet, head: &Head, line: usize) -> Option<Row> {
    let text = &sheet.text;
    let body = sheet.lines()[line].body;
    let mut split = cells(text, body, head.layout);
    if split.is_empty() || split.len() < 2 {
        return None;
    }
    if matches!(head.layout, Layout::Aligned) && split.len() != head.columns.len() {
        split = by_column(sheet, head, line)?;
    }
    let mut said = Statements::default();
    let mut site = SiteWritten {
        signed_field: true,
        span: Span::new(body.start, body.start),
        ..SiteWritten::default()
    };
    let (mut ra, mut dec, mut hour_angle, mut altitude, mut azimuth) =
        (None, None, None, None, None);
    let mut whole: Option<Found> = None;
    let mut date: Option<InstantWritten> = None;
    let mut time = None;
    let mut tags = Vec::new();
    let mut numbers = 0;
    for (&(column, _), &cell) in head.columns.iter().zip(&split) {
        let words = cell.of(text);
        if words.is_empty() || matches!(words, "-" | "--" | "—" | "–" | "…" | "...") {
            continue;
        }
        let input = Text::window(text, cell);
        match column {
            Column::Ra => ra = coordinate(input, true),
            Column::Dec => dec = coordinate(input, false),
            Column::HourAngle => hour_angle = coordinate(input, true),
            Column::Altitude => altitude = coordinate(input, false),
            Column::Azimuth => azimuth = coordinate(input, false),
            Column::Both => {
                let mut inner = Vec::new();
                atoms(input, line, &mut false, &mut inner);
                whole = positions(text, &inner)
                    .into_iter()
                    .next()
                    .or_else(|| forced_pair(text, &inner));
            }
            Column::Object => said.objects.push(Spanned::new(words.to_string(), cell)),
            Column::Observer => said.observers.push(Spanned::new(words.to_string(), cell)),
            Column::Instant | Column::Date | Column::Clock => {
                if let Ok((_, i)) = instant(input) {
                    match &mut date {
                        Some(d) if d.clock.is_none() && i.date.is_none() => {
                            d.clock = i.clock;
                            d.zone = i.zone.or(d.zone.take());
                            d.span = d.span.cover(i.span);
                        }
                        Some(_) => {}
                        None => date = Some(i),
                    }
                } else if let Ok((rest, c)) = clock(input) {
                    let z = zone(rest).ok().map(|(_, z)| z);
                    time = Some((c, z));
                }
            }
            Column::Julian(count) => {
                if let Ok((rest, number)) = super::number::number(input)
                    && rest.is_empty()
                {
                    let d = Spanned::new(DateWritten::Julian { number, count }, cell);
                    let i = InstantWritten {
                        date: Some(d),
                        clock: None,
                        zone: None,
                        until: None,
                        plus_s: None,
                        weekday: None,
                        span: cell,
                    };
                    match date {
                        None => date = Some(i),
                        Some(_) => said.instants.push(i),
                    }
                }
            }
            Column::Equinox => {
                if let Ok((_, t)) = equinox_tag(input).or_else(|_| equinox_year(input)) {
                    tags.push(Spanned::new(Tagged { weak: false, ..t }, cell));
                }
            }
            Column::Site => {
                let mut inner = Vec::new();
                atoms(input, line, &mut false, &mut inner);
                if let Ok((_, s)) = site_coordinates(input) {
                    said.sites.push(s);
                } else if let Some(k) = inner.iter().position(|a| matches!(a.kind, Kind::Site(_))) {
                    let Kind::Site(s) = &inner[k].kind else {
                        continue;
                    };
                    let name = text[cell.start..s.span.start]
                        .trim()
                        .trim_end_matches([',', ';', '(', ':'])
                        .trim();
                    let mut s = (**s).clone();
                    if !name.is_empty() {
                        s.name = Some(Spanned::new(
                            name.to_string(),
                            Span::new(cell.start, cell.start + name.len()),
                        ));
                    }
                    said.sites.push(s);
                } else {
                    said.sites.push(SiteWritten {
                        name: Some(Spanned::new(words.to_string(), cell)),
                        span: cell,
                        ..SiteWritten::default()
                    });
                }
            }
            Column::Latitude => site.latitude = coordinate(input, false),
            Column::Longitude => site.longitude = coordinate(input, false),
            Column::Elevation => {
                site.elevation_m = match elevation(input) {
                    Ok((_, m)) => Some(m),
                    Err(_) => {
                        super::number::number(input.skip(usize::from(words.starts_with('-'))))
                            .ok()
                            .map(|(_, n)| {
                                let v = n.value() * if head.feet { 0.3048 } else { 1.0 };
                                Spanned::new(if words.starts_with('-') { -v } else { v }, cell)
                            })
                    }
                };
            }
            Column::Magnitude => {
                said.magnitude = super::number::number(input)
                    .ok()
                    .map(|(_, n)| Spanned::new(n.value(), cell))
            }
            Column::Constellation => {
                said.constellation = super::words::word(input, |w| match w {
                    Word::ConstellationName(c) => Some(c),
                    _ => None,
                })
                .map(|(_, c)| Spanned::new(c, cell));
            }
            Column::Uncertainty | Column::Note => {
                let mut inner = Vec::new();
                atoms(input, line, &mut false, &mut inner);
                let note = gather(text, &inner, &[]);
                said.stets.extend(note.stets);
                said.roles.extend(note.roles);
                if said.claims_new.is_none() {
                    said.claims_new = note.claims_new;
                }
            }
        }
        numbers += usize::from(words.chars().any(|c| c.is_ascii_digit()));
    }
    if let Some((c, z)) = time {
        match &mut date {
            Some(d) if d.clock.is_none() => {
                d.clock = Some(c);
                d.zone = z.or(d.zone.take());
                d.span = d.span.cover(c.span);
            }
            Some(_) => {}
            None => {
                date = Some(InstantWritten {
                    date: None,
                    clock: Some(c),
                    zone: z,
                    until: None,
                    plus_s: None,
                    weekday: None,
                    span: c.span,
                })
            }
        }
    }
    said.instants.extend(date);
    let turn = usize::from(said.instants.len() > 1);
    said.instants.rotate_right(turn);
    if site.latitude.is_some() || site.longitude.is_some() {
        let spans = [
            site.latitude.map(|a| a.span),
            site.longitude.map(|a| a.span),
        ];
        site.span = spans
            .into_iter()
            .flatten()
            .reduce(Span::cover)
            .unwrap_or(body);
        said.sites.insert(0, site);
    } else if let (Some(m), Some(s)) = (site.elevation_m, said.sites.last_mut()) {
        s.elevation_m = s.elevation_m.or(Some(m));
    }
    for (quantity, angle) in [
        (HorizonQuantity::Altitude, altitude),
        (HorizonQuantity::Azimuth, azimuth),
        (HorizonQuantity::HourAngle, hour_angle),
    ] {
        if let Some(angle) = angle
            && ra.is_some()
        {
            said.horizon.push(StatedHorizon { quantity, angle });
        }
    }
    let mut found = match whole {
        Some(f) => f,
        None => {
            let (kind, first, second) = match (ra, hour_angle, dec, altitude, azimuth) {
                (Some(_), _, _, _, _) => (PositionKind::Equatorial, ra, dec),
                (None, Some(_), Some(_), _, _) => (PositionKind::HourAngle, hour_angle, dec),
                (None, None, None, Some(_), Some(_)) => {
                    (PositionKind::Horizontal, azimuth, altitude)
                }
                (None, None, Some(_), _, _) if numbers > 1 => (PositionKind::Equatorial, None, dec),
                _ => return None,
            };
            bare_found(head, kind, first, second)
        }
    };
    found.tags.extend(tags);
    if said.claims_new.is_none()
        && let Some(o) = said.objects.first()
    {
        let mut inner = Vec::new();
        atoms(Text::window(text, o.span), line, &mut false, &mut inner);
        said.claims_new = inner.iter().find(|a| a.means(Word::New)).map(|a| a.span);
    }
    Some(Row {
        line,
        span: Span::new(body.start, body.end),
        found,
        said,
    })
}

fn bare_found(
    head: &Head,
    kind: PositionKind,
    first: Option<Angle>,
    second: Option<Angle>,
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
        (_, Some(a)) => a.marked_unit().or({
            if a.parts().len() > 1 {
                head.ra_unit.or(Some(AngleUnit::Hours))
            } else {
                head.ra_unit
                    .or((a.value() >= 24.0).then_some(AngleUnit::Degrees))
            }
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
        uncertainties: Vec::new(),

        first: 0,
        end: 0,
    }
}

/// A cell that holds one coordinate and nothing else of weight.
fn coordinate(input: Text<'_>, joined: bool) -> Option<Angle> {
    let input = input.skip_blanks();
    if let Ok((rest, a)) = alt((angle, angle_blanks)).parse(input)
        && rest.skip_blanks().is_empty()
    {
        let six = a.parts().len() == 1 && a.parts()[0].number.whole_digits >= 6;
        if !(joined && six) {
            return Some(a);
        }
    }
    if let Ok((rest, a)) = angle_joined(input)
        && rest.skip_blanks().is_empty()
    {
        return Some(a);
    }
    // a footnote's letter or an uncertainty may follow
    match alt((angle, angle_blanks)).parse(input) {
        Ok((rest, a)) => {
            let tail = rest.skip_blanks();
            let note = tail.as_str().chars().count() <= 2
                && !tail.as_str().chars().any(|c| c.is_ascii_digit())
                || super::uncertainty::uncertainty(tail).is_ok();
            note.then_some(a)
        }
        Err(_) => None,
    }
}

/// A cell headed "position" holds a pair whatever its notation.
fn forced_pair(text: &str, inner: &[Atom]) -> Option<Found> {
    let angles: Vec<Angle> = inner
        .iter()
        .filter_map(|a| match &a.kind {
            Kind::Angle(a) | Kind::Joined(a) => Some(**a),
            Kind::Run(r) => r.angle(0, r.numbers.len().min(3)),
            _ => None,
        })
        .collect();
    let [ra, dec] = angles[..] else { return None };
    let _ = text;
    let head = Head {
        line: 0,
        tag: None,
        zone: None,
        layout: Layout::Aligned,
        columns: Vec::new(),
        ra_unit: None,
        feet: false,
    };
    Some(bare_found(
        &head,
        PositionKind::Equatorial,
        Some(ra),
        Some(dec),
    ))
}

/// Cells by where the head's words stand, where the count does not tell (an empty cell, a value that touches its neighbour).
fn by_column(sheet: &Sheet, head: &Head, line: usize) -> Option<Vec<Span>> {
    let text = &sheet.text;
    let head_start = sheet.lines()[head.line].whole.start;
    let whole = sheet.lines()[line].whole;
    let column_of =
        |offset: usize, start: usize| text.get(start..offset).map_or(0, |s| s.chars().count());
    let starts: Vec<usize> = head
        .columns
        .iter()
        .map(|(_, s)| column_of(s.start, head_start))
        .collect();
    let words = whole.of(text);
    let chars: Vec<(usize, char)> = words.char_indices().collect();
    let mut cuts = Vec::new();
    for (n, &at) in starts.iter().enumerate() {
        // the cut moves left to the nearest blank, so that no value is cut
        let mut k = if n == 0 { 0 } else { at.min(chars.len()) };
        while k > 0 && k < chars.len() && n > 0 && !super::text::is_blank(chars[k - 1].1) {
            k -= 1;
        }
        cuts.push(k);
    }
    let mut found = Vec::new();
    for (n, &cut) in cuts.iter().enumerate() {
        let from = chars.get(cut).map_or(words.len(), |c| c.0);
        let to = cuts
            .get(n + 1)
            .and_then(|c| chars.get(*c))
            .map_or(words.len(), |c| c.0)
            .max(from);
        found.push(trimmed(
            text,
            Span::new(whole.start + from, whole.start + to),
        ));
    }
    // a value cut by a column is no row of this table
    found.iter().any(|s| !s.is_empty()).then_some(found)
}
