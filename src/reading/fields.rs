//! Lists of reports by their own field names: YAML and JSON lists, JSON Lines, a mapping with such a list inside.
//!
//! A scanner finds where each value stands; numbers are then read from the text, digit for digit, by the same code as a table's cells.

use super::head::{Column, ColumnHead, Head};
use super::row::{self, Row};
use super::table::Layout;
use crate::sheet::{Block, Sheet};
use crate::span::Span;

/// A block to be read as words, or the items of a list.
pub(super) enum Piece {
    Words(Block),
    Items(Head, Vec<Row>, Block),
}

/// Parts the blocks of a sheet into words and lists of reports.
pub(super) fn pieces(sheet: &Sheet, blocks: Vec<Block>) -> Vec<Piece> {
    let mut out = Vec::with_capacity(blocks.len());
    let mut done = 0;
    for block in blocks {
        let mut rest = from_line(sheet, block, done);
        while let Some(block) = rest {
            let Some((begin, end, lists)) = list_in(sheet, block) else {
                out.push(Piece::Words(block));
                break;
            };
            if begin > block.first {
                out.push(Piece::Words(Block {
                    first: block.first,
                    end: begin,
                    span: Span::new(block.span.start, sheet.lines()[begin - 1].whole.end),
                }));
            }
            out.extend(lists);
            done = end.max(begin + 1);
            rest = from_line(sheet, block, done);
        }
    }
    out
}

/// What of a block stands from a line on.
fn from_line(sheet: &Sheet, block: Block, line: usize) -> Option<Block> {
    if line <= block.first {
        return Some(block);
    }
    (line < block.end).then(|| Block {
        first: line,
        span: Span::new(sheet.lines()[line].body.start, block.span.end),
        ..block
    })
}

/// A value at the end of its path: `site`, `latitude` and where it stands.
#[derive(Clone, Debug)]
struct Field {
    path: Vec<Span>,
    value: Span,
}

/// One mapping: where it begins and ends, and its values.
#[derive(Clone, Debug, Default)]
struct Item {
    span: Span,
    fields: Vec<Field>,
}

/// The list that begins in this block: its first line, the line after it, its items.
fn list_in(sheet: &Sheet, block: Block) -> Option<(usize, usize, Vec<Piece>)> {
    let text = &sheet.text;
    let begin = (block.first..block.end).find(|l| begins(sheet.lines()[*l].body.of(text)))?;
    let opening = sheet.lines()[begin].body;
    let words = opening.of(text);
    let (items, stop) = if words.starts_with(['{', '[']) {
        json(text, opening.start)?
    } else {
        yaml(sheet, begin)?
    };
    let mut pieces = Vec::new();
    for item in &items {
        let line = sheet.line_at(item.span.start);
        let (head, pairs) = columns(text, item, line);
        let Some(row) = row::part(text, &head, line, item.span, &pairs) else {
            continue;
        };
        let place = Block {
            first: line,
            end: sheet.line_at(item.span.end.max(item.span.start + 1) - 1) + 1,
            span: item.span,
        };
        pieces.push(Piece::Items(head, vec![row], place));
    }
    (!pieces.is_empty()).then_some((begin, stop_line(sheet, stop), pieces))
}

fn stop_line(sheet: &Sheet, stop: usize) -> usize {
    let line = sheet.line_at(stop);
    // a stop inside a line's blanks or at its end has used it up
    if stop > sheet.lines()[line].body.start || sheet.lines()[line].body.is_empty() {
        line + 1
    } else {
        line
    }
}

fn begins(words: &str) -> bool {
    let opens = |rest: &str| rest.is_empty() || rest.starts_with(['{', '[', '"', '#']);
    words
        .strip_prefix('[')
        .is_some_and(|r| opens(r.trim_start()))
        || words
            .strip_prefix('{')
            .is_some_and(|r| opens(r.trim_start()) || r.contains(':'))
        || words
            .strip_prefix("- ")
            .is_some_and(|rest| key_end(rest).is_some() || rest.trim_start().starts_with('{'))
}

/// The columns that an item's field names stand for.
fn columns(text: &str, item: &Item, line: usize) -> (Head, Vec<(ColumnHead, Span)>) {
    let mut head = Head::new(line, Layout::Aligned);
    let mut pairs = Vec::new();
    for field in &item.fields {
        let Some(&key) = field.path.last() else {
            continue;
        };
        let Some(mut column) = head.column(text, key) else {
            continue;
        };
        // {site: {name: …, altitude: …}}, {observer: {name: …}}, {position: {ra: …}}
        let outer = field
            .path
            .len()
            .checked_sub(2)
            .and_then(|i| field.path.get(i))
            .and_then(|k| head.column(text, *k))
            .map(|c| c.column);
        let name = key.of(text).eq_ignore_ascii_case("name");
        column.column = match (outer, column.column) {
            (Some(Column::Site), _) if name => Column::Site,
            (Some(Column::Site), Column::Altitude) => Column::Elevation,
            (Some(Column::Observer), _) if name => Column::Observer,
            (_, c) => c,
        };
        pairs.push((column, field.value));
    }
    (head, pairs)
}

// ---------------------------------------------------------------------------------------------- JSON, and flow mappings of YAML

/// The mappings of a JSON value (or of several, one a line) that begins at `at`, and where they end.
fn json(text: &str, at: usize) -> Option<(Vec<Item>, usize)> {
    let mut flow = Flow {
        text,
        at,
        depth: 0,
        items: Vec::new(),
    };
    let mut end = at;
    loop {
        flow.skip();
        let opens = matches!(flow.peek(), Some('{' | '['));
        if !opens {
            break;
        }
        let before = flow.items.len();
        if flow.value(&[], &mut None).is_none() || flow.items.len() == before {
            flow.items.truncate(before);
            break;
        }
        end = flow.at;
        // JSON Lines: another value on the next line
    }
    let any = flow.items.iter().any(|i| places(text, i));
    any.then_some((flow.items, end))
}

struct Flow<'t> {
    text: &'t str,
    at: usize,
    depth: usize,
    items: Vec<Item>,
}

impl Flow<'_> {
    fn peek(&self) -> Option<char> {
        self.text.get(self.at..)?.chars().next()
    }

    /// Over blanks, line ends and comments.
    fn skip(&mut self) {
        while let Some(c) = self.peek() {
            if c == '#' {
                let rest = &self.text[self.at..];
                self.at += rest.find('\n').unwrap_or(rest.len());
            } else if c.is_whitespace() || c == '\u{feff}' {
                self.at += c.len_utf8();
            } else {
                break;
            }
        }
    }

    /// A value; its scalars go to `item`. A mapping outside any item that names a position is an item.
    fn value(&mut self, path: &[Span], item: &mut Option<Item>) -> Option<()> {
        self.depth += 1;
        if self.depth > 40 {
            return None;
        }
        self.skip();
        match self.peek()? {
            '{' => self.mapping(path, item)?,
            '[' => {
                self.at += 1;
                let start = self.at;
                let mut scalars = true;
                loop {
                    self.skip();
                    match self.peek()? {
                        ']' => {
                            self.at += 1;
                            break;
                        }
                        ',' => self.at += 1,
                        // each mapping of a list is a report of its own
                        '{' => {
                            scalars = false;
                            self.value(path, &mut None)?;
                        }
                        '[' => {
                            scalars = false;
                            self.value(path, item)?;
                        }
                        _ => {
                            self.scalar()?;
                        }
                    }
                }
                // [83.6, 22.0]
                if let Some(item) = item
                    && scalars
                {
                    let words = &self.text[start..self.at - 1];
                    let from = start + words.len() - words.trim_start().len();
                    item.fields.push(Field {
                        path: path.to_vec(),
                        value: Span::new(from, (start + words.trim_end().len()).max(from)),
                    });
                }
            }
            _ => {
                let value = self.scalar()?;
                if let Some(item) = item {
                    item.fields.push(Field {
                        path: path.to_vec(),
                        value,
                    });
                }
            }
        }
        self.depth -= 1;
        Some(())
    }

    fn mapping(&mut self, path: &[Span], outer: &mut Option<Item>) -> Option<()> {
        let start = self.at;
        self.at += 1;
        let before = self.items.len();
        let mut own = Some(Item::default());
        loop {
            self.skip();
            match self.peek()? {
                '}' => {
                    self.at += 1;
                    break;
                }
                ',' => {
                    self.at += 1;
                    continue;
                }
                _ => {}
            }
            let key = self.scalar()?;
            self.skip();
            if self.peek()? != ':' {
                return None;
            }
            self.at += 1;
            let mut inner = path.to_vec();
            inner.push(key);
            self.value(&inner, &mut own)?;
        }
        let mut own = own?;
        own.span = Span::new(start, self.at);
        match outer {
            // a mapping inside an item belongs to it
            Some(item) if self.items.len() == before => item.fields.append(&mut own.fields),
            _ if self.items.len() == before => {
                if names_place(self.text, &own) {
                    self.items.push(own);
                }
            }
            // what is said around a list stands for each of its items, unless an item says it itself
            _ => {
                for item in &mut self.items[before..] {
                    inherit(self.text, item, &own.fields);
                }
            }
        }
        Some(())
    }

    fn scalar(&mut self) -> Option<Span> {
        let quote = self.peek()?;
        if quote == '"' || quote == '\'' {
            self.at += 1;
            let start = self.at;
            while let Some(c) = self.peek() {
                match c {
                    '\\' if quote == '"' => {
                        self.at += 1;
                        self.at += self.peek()?.len_utf8();
                    }
                    c if c == quote => {
                        let span = Span::new(start, self.at);
                        self.at += 1;
                        return Some(span);
                    }
                    c => self.at += c.len_utf8(),
                }
            }
            return None;
        }
        let start = self.at;
        let rest = &self.text[start..];
        let mut end = 0;
        for (i, c) in rest.char_indices() {
            let parts = match c {
                ',' | '}' | ']' | '{' | '[' | '\n' | '\r' => true,
                // a colon inside a clock time or an angle parts nothing
                ':' => rest[i + 1..].starts_with([' ', '\n', '\r', '{', '[', '"']),
                _ => false,
            };
            if parts {
                break;
            }
            end = i + c.len_utf8();
        }
        self.at += end;
        let words = rest[..end].trim_end();
        (!words.is_empty()).then(|| Span::new(start, start + words.len()))
    }
}

/// True where a mapping speaks of a place on the sky, if only by one coordinate.
fn names_place(text: &str, item: &Item) -> bool {
    use Column::{Altitude, Azimuth, Both, Dec, Ra};
    let (_, pairs) = columns(text, item, 0);
    let has = |c: Column| pairs.iter().any(|p| p.0.column == c);
    has(Ra) || has(Dec) || has(Both) || has(Altitude) && has(Azimuth)
}

/// True where it names a whole position.
fn places(text: &str, item: &Item) -> bool {
    use Column::{Altitude, Azimuth, Both, Dec, HourAngle, Ra};
    let (_, pairs) = columns(text, item, 0);
    let has = |c: Column| pairs.iter().any(|p| p.0.column == c);
    (has(Ra) || has(HourAngle)) && has(Dec) || has(Both) || has(Altitude) && has(Azimuth)
}

/// Gives an item what is said around the list, where it does not speak of that itself.
fn inherit(text: &str, item: &mut Item, around: &[Field]) {
    let (_, own) = columns(text, item, 0);
    let subject = |c: Column| match c {
        Column::Latitude | Column::Longitude | Column::Elevation => Column::Site,
        Column::Date | Column::Clock | Column::Julian(_) => Column::Instant,
        c => c,
    };
    for field in around {
        let one = Item {
            span: item.span,
            fields: vec![field.clone()],
        };
        let (_, pairs) = columns(text, &one, 0);
        let new = pairs.iter().all(|p| {
            p.0.column != Column::Note
                && !field
                    .path
                    .last()
                    .is_some_and(|k| k.of(text).eq_ignore_ascii_case("name"))
                && !own
                    .iter()
                    .any(|o| subject(o.0.column) == subject(p.0.column))
        });
        if new {
            item.fields.push(field.clone());
        }
    }
}

// ---------------------------------------------------------------------------------------------- YAML, block style

/// Where a plain key ends: before `: ` or a colon at the end of the line.
fn key_end(words: &str) -> Option<usize> {
    let (key, rest) = words.split_once(':')?;
    let fits = !key.is_empty()
        && key.len() <= 40
        && key
            .chars()
            .all(|c| c.is_alphanumeric() || matches!(c, '_' | '-' | ' ' | '.' | '"' | '\''));
    (fits && (rest.is_empty() || rest.starts_with([' ', '\t']))).then_some(key.len())
}

/// The items of a block list whose first dash stands on `first`, and where they end.
fn yaml(sheet: &Sheet, first: usize) -> Option<(Vec<Item>, usize)> {
    let text = &sheet.text;
    let indent = |l: usize| {
        let line = sheet.lines()[l];
        line.body.start - line.whole.start
    };
    let dash = indent(first);
    let depth = sheet.lines()[first].depth;
    let mut items: Vec<Item> = Vec::new();
    // open mappings: the column of their keys, and the key that leads to them
    let mut open: Vec<(usize, Span)> = Vec::new();
    let mut l = first;
    let mut end = sheet.lines()[first].body.start;
    while let Some(line) = sheet.lines().get(l) {
        let mut words = line.body.of(text);
        if line.aside || line.depth != depth && !line.body.is_empty() {
            break;
        }
        if words.is_empty() || words.starts_with('#') {
            l += 1;
            continue;
        }
        let mut column = indent(l);
        let mut start = line.body.start;
        if column == dash && (words.starts_with("- ") || words == "-") {
            items.push(Item {
                span: Span::new(start, line.body.end),
                fields: Vec::new(),
            });
            open.clear();
            let inner = words[1..].trim_start();
            let skipped = words.len() - inner.len();
            column += skipped;
            start += skipped;
            words = inner;
        } else if column <= dash {
            break;
        }
        let item = items.last_mut()?;
        item.span.end = line.body.end;
        end = line.body.end;
        if words.starts_with('{') {
            let mut flow = Flow {
                text,
                at: start,
                depth: 0,
                items: Vec::new(),
            };
            let mut own = Some(Item::default());
            flow.value(&[], &mut own)?;
            item.fields.append(&mut own?.fields);
            item.span.end = item.span.end.max(flow.at);
            end = end.max(flow.at);
            l = sheet.line_at(flow.at.saturating_sub(1)) + 1;
            continue;
        }
        let Some(k) = key_end(words) else {
            l += 1;
            continue;
        };
        while open.last().is_some_and(|o| o.0 >= column) {
            open.pop();
        }
        let key = unquoted(text, Span::new(start, start + k));
        let after = &words[k + 1..];
        let value = after.trim_start();
        let from = start + words.len() - value.len();
        let mut path: Vec<Span> = open.iter().map(|o| o.1).collect();
        path.push(key);
        if value.is_empty() || value.starts_with('#') {
            open.push((column, key));
        } else if value.starts_with(['{', '[']) {
            let mut flow = Flow {
                text,
                at: from,
                depth: 0,
                items: Vec::new(),
            };
            let mut own = Some(Item::default());
            flow.value(&path, &mut own)?;
            item.fields.append(&mut own?.fields);
            item.span.end = item.span.end.max(flow.at);
            end = end.max(flow.at);
            l = sheet.line_at(flow.at.saturating_sub(1)) + 1;
            continue;
        } else {
            let span = unquoted(text, uncommented(text, Span::new(from, line.body.end)));
            item.fields.push(Field { path, value: span });
        }
        l += 1;
    }
    // a list of something else is words
    let any = items.iter().any(|i| places(text, i));
    items.retain(|i| names_place(text, i));
    any.then_some((items, end))
}

/// Without a comment after it.
fn uncommented(text: &str, span: Span) -> Span {
    let words = span.of(text);
    let quoted = words.starts_with(['"', '\'']);
    let end = if quoted {
        let quote = &words[..1];
        words[1..].find(quote).map_or(words.len(), |i| i + 2)
    } else {
        words.find(" #").unwrap_or(words.len())
    };
    Span::new(span.start, span.start + words[..end].trim_end().len())
}

fn unquoted(text: &str, span: Span) -> Span {
    let words = span.of(text);
    let quoted = words.len() >= 2
        && (words.starts_with('"') && words.ends_with('"')
            || words.starts_with('\'') && words.ends_with('\''));
    if quoted {
        Span::new(span.start + 1, span.end - 1)
    } else {
        span
    }
}
