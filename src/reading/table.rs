//! Tables: a head that names its columns, and rows read by it (CSV, TSV, pipes, Markdown, aligned columns).

use super::head::{Column, Head};
use super::row::{self, Row};
use crate::report::{DateWritten, InstantWritten};
use crate::sheet::{Block, Sheet};
use crate::span::{Span, Spanned};

/// How cells are parted.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(super) enum Layout {
    Delimited(char),
    Aligned,
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
    let mut head = Head::new(line, layout);
    for &cell in &cells {
        let column = head.column(&sheet.text, cell)?;
        head.columns.push(column);
    }
    head.settle();
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
    (names_position && (known * 2 >= cells.len() || has(Column::Ra))).then_some(head)
}

/// The rows of a head, up to `end` or the first line that is none.
pub fn rows(sheet: &Sheet, head: &Head, end: usize) -> Vec<Row> {
    rows_from(sheet, head, head.line + 1, end)
}

/// The rows of a head from a later line on.
pub fn rows_from(sheet: &Sheet, head: &Head, from: usize, end: usize) -> Vec<Row> {
    let mut found: Vec<Row> = Vec::new();
    let mut misses = 0;
    let mut head = head.clone();
    // a second line of the head may name the year: "2024   h m   o '"
    if from == head.line + 1
        && from < end
        && head.year.is_none()
        && let Some(year) = year_line(sheet, from)
    {
        head.year = Some(year);
    }
    let head = &head;
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
        // a comment is no row
        if matches!(head.layout, Layout::Delimited(_)) && words.starts_with(['#', '%']) {
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
    carried_dates(head, &mut found);
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

/// The year that opens a line of units.
fn year_line(sheet: &Sheet, line: usize) -> Option<i32> {
    let words = sheet.lines()[line].body.of(&sheet.text);
    let first = words.split_whitespace().next()?;
    let year: i32 = first.parse().ok()?;
    let units = words
        .split_whitespace()
        .skip(1)
        .all(|w| !w.contains(|c: char| c.is_ascii_digit()));
    ((1500..2300).contains(&year) && first.len() == 4 && units).then_some(year)
}

/// Dates that leave out their year or month take them from the row above, or the year from the head.
fn carried_dates(head: &Head, rows: &mut [Row]) {
    let mut last: Option<(i32, u8, u32, f64)> = head.year.map(|y| (y, 4, 1, 0.0));
    for row in rows {
        if let Some((day, span)) = row.day_only
            && let Some((mut year, digits, mut month, before)) = last
        {
            // a smaller day has passed into the next month
            if day.value() < before {
                (year, month) = if month == 12 {
                    (year + 1, 1)
                } else {
                    (year, month + 1)
                };
            }
            let written = DateWritten::Calendar {
                year,
                year_digits: digits,
                month,
                day,
                to_day: None,
                order_unclear: false,
            };
            let zone = row.said.instants.first().and_then(|i| i.zone.clone());
            let clock = row
                .said
                .instants
                .first()
                .filter(|i| i.date.is_none())
                .and_then(|i| i.clock);
            row.said.instants.retain(|i| i.date.is_some());
            row.said.instants.insert(
                0,
                InstantWritten {
                    date: Some(Spanned::new(written, span)),
                    clock,
                    zone,
                    until: None,
                    plus_s: None,
                    weekday: None,
                    clock_unread: None,
                    span,
                },
            );
        }
        let Some(date) = row.said.instants.first_mut().and_then(|i| i.date.as_mut()) else {
            continue;
        };
        if let DateWritten::Calendar {
            year,
            year_digits,
            month,
            day,
            ..
        } = &mut date.value
        {
            if *year_digits == 0
                && let Some((y, digits, m, _)) = last
            {
                *year = if *month + 6 < m { y + 1 } else { y };
                *year_digits = digits;
            }
            if *year_digits > 0 {
                last = Some((*year, *year_digits, *month, day.value()));
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

/// Cells by where the head's words stand, where the count does not tell: each goes to the column it stands under or is nearest to.
pub(super) fn by_column(sheet: &Sheet, head: &Head, line: usize) -> Option<Vec<Span>> {
    let text = &sheet.text;
    let columns_of = |span: Span, line: usize| {
        let start = sheet.lines()[line].whole.start;
        let count = |offset: usize| text.get(start..offset).map_or(0, |s| s.chars().count());
        (count(span.start), count(span.end))
    };
    let heads: Vec<(usize, usize)> = head
        .columns
        .iter()
        .map(|c| columns_of(c.span, head.line))
        .collect();
    let mut found: Vec<Option<Span>> = vec![None; heads.len()];
    for cell in cells(text, sheet.lines()[line].body, Layout::Aligned) {
        let (from, to) = columns_of(cell, line);
        let shared = |h: &(usize, usize)| to.min(h.1) as isize - from.max(h.0) as isize;
        // the one it shares most with; under none, the nearest
        let best = (0..heads.len()).max_by_key(|&i| shared(&heads[i]))?;
        found[best] = Some(found[best].map_or(cell, |s| s.cover(cell)));
    }
    let empty = Span::new(sheet.lines()[line].body.end, sheet.lines()[line].body.end);
    Some(found.into_iter().map(|s| s.unwrap_or(empty)).collect())
}
