//! Tables: a head that names its columns, and rows read by it (CSV, TSV, pipes, Markdown, aligned columns).

use super::equinox::{Tagged, equinox_year};
use super::instant::zone;
use super::row::{self, Row};
use super::scan::{Kind, atoms};
use super::text::Text;
use super::words::Word;
use crate::report::{AngleUnit, JulianCount, Zone};
use crate::sheet::{Block, Sheet};
use crate::span::{Span, Spanned};

/// How cells are parted.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(super) enum Layout {
    Delimited(char),
    Aligned,
}

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
    Note,
}

/// One column's head.
#[derive(Clone, Copy, Debug)]
pub(super) struct ColumnHead {
    pub column: Column,
    pub span: Span,
    pub tag: Option<Spanned<Tagged>>,
    pub unit: Option<AngleUnit>,
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
        feet: false,
    };
    for &cell in &cells {
        let column = head.column(&sheet.text, cell)?;
        head.columns.push(column);
    }
    let has = |c: Column| head.columns.iter().any(|k| k.column == c);
    let names_position = has(Column::Ra) && has(Column::Dec)
        || has(Column::Both)
        || has(Column::HourAngle) && has(Column::Dec)
        || has(Column::Altitude) && has(Column::Azimuth);
    let known = head
        .columns
        .iter()
        .filter(|c| c.column != Column::Note)
        .count();
    (names_position && known * 2 >= cells.len()).then_some(head)
}

/// The rows of a head, up to `end` or the first line that is none.
pub fn rows(sheet: &Sheet, head: &Head, end: usize) -> Vec<Row> {
    rows_from(sheet, head, head.line + 1, end)
}

/// The rows of a head from a later line on.
pub fn rows_from(sheet: &Sheet, head: &Head, from: usize, end: usize) -> Vec<Row> {
    let mut found: Vec<Row> = Vec::new();
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
        // a comment among the rows of a file
        if matches!(head.layout, Layout::Delimited(',' | ';' | '\t'))
            && words.starts_with('#')
            && !words[1..].starts_with(|c: char| c.is_ascii_digit())
        {
            continue;
        }
        // the head repeated, or another one
        if self::head(sheet, line, end).is_some() {
            break;
        }
        let read = row::read(sheet, head, line);
        match read.is_empty() {
            false => {
                found.extend(read);
                misses = 0;
            }
            true => {
                misses += 1;
                if misses > 1 && matches!(head.layout, Layout::Aligned) {
                    break;
                }
            }
        }
    }
    padded_seconds(&mut found);
    found
}

/// A column in which every clock time ends in :00 was written by the minute and padded by its format: the seconds are no digits.
fn padded_seconds(rows: &mut [Row]) {
    let seconds = |r: &Row| {
        r.said
            .instants
            .first()
            .and_then(|i| i.clock)
            .map(|c| c.second)
    };
    let padded = rows.len() >= 4
        && rows.iter().all(|r| {
            seconds(r).is_some_and(|s| s.is_some_and(|s| s.mantissa == 0 && s.places == 0))
        });
    if padded {
        for row in rows {
            for instant in &mut row.said.instants {
                if let Some(clock) = &mut instant.clock {
                    clock.second = None;
                }
            }
        }
    }
}

/// True where most lines of a block are rows of an earlier head.
pub fn continues(sheet: &Sheet, head: &Head, block: Block) -> bool {
    let lines = block.end - block.first;
    let rows = (block.first..block.end)
        .filter(|l| {
            row::read(sheet, head, *l)
                .first()
                .is_some_and(|r| r.found.position.second.is_some())
        })
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
pub(super) fn cells(text: &str, body: Span, layout: Layout) -> Vec<Span> {
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
    pub(super) fn column(&mut self, text: &str, cell: Span) -> Option<ColumnHead> {
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
                            Word::Elevation if atom.span.len() == 1 => {
                                unit = Some(AngleUnit::Hours)
                            }
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
                            Word::Feet => {
                                self.feet = true;
                                set(Column::Elevation, 7);
                            }
                            Word::Metres => set(Column::Elevation, 7),
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
        if matches!(
            column,
            Column::Ra | Column::Dec | Column::Both | Column::Equinox | Column::Note
        ) && let Some(t) = tag_here
            && (self.tag.is_none() || column == Column::Ra)
        {
            self.tag = Some(t);
        }
        Some(ColumnHead {
            column,
            span: cell,
            tag: tag_here,
            unit,
        })
    }
}

/// Cells by where the head's words stand, where the count does not tell (an empty cell, a value that touches its neighbour).
pub(super) fn by_column(sheet: &Sheet, head: &Head, line: usize) -> Option<Vec<Span>> {
    let text = &sheet.text;
    let head_start = sheet.lines()[head.line].whole.start;
    let whole = sheet.lines()[line].whole;
    let column_of =
        |offset: usize, start: usize| text.get(start..offset).map_or(0, |s| s.chars().count());
    let starts: Vec<usize> = head
        .columns
        .iter()
        .map(|c| column_of(c.span.start, head_start))
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
