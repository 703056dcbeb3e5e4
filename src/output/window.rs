//! A window on a sheet: the few lines a finding is about, as miette is to draw them.
//!
//! miette's own way with a source goes through the whole sheet for every label, joins labels far apart, cannot take a
//! column beyond 65,535 and lets escape bytes through. This source holds only the lines wanted, cut and made harmless,
//! with their own line numbers and columns.

use super::plain::stand_in;
use crate::sheet::Sheet;
use crate::span::Span;
use miette::{LabeledSpan, MietteError, MietteSpanContents, SourceCode, SourceSpan, SpanContents};
use std::collections::BTreeMap;

/// Lines shown before and after the words.
const AROUND: usize = 1;
/// Columns of the screen that the numbers of lines and the room before them take.
const MARGIN: usize = 14;
/// Characters of a line shown at most, and at least.
const WIDEST: (usize, usize) = (30, 110);
/// Characters shown at most before the words where a line is cut.
const LEAD: usize = 40;
/// Lines of one span that are underlined at most.
const TALLEST: usize = 4;

/// One line of the window.
struct Line {
    /// Its number in the sheet, from 1.
    number: usize,
    /// Where it stands in the window's own text.
    shown: Span,
    /// Bytes of the window's line that the sheet's line does not have (the mark of a cut).
    lead: usize,
    /// What of the sheet it shows.
    source: Span,
}

/// The lines around some spans of a sheet.
pub struct Window {
    name: String,
    text: String,
    lines: Vec<Line>,
    labels: Vec<LabeledSpan>,
    /// Characters of a line that are shown at most.
    widest: usize,
}

impl Window {
    /// The window on a primary span and related ones, each with a word or none, for a screen of `width` columns.
    pub fn on(
        sheet: &Sheet,
        name: &str,
        primary: Span,
        related: &[(Span, String)],
        width: usize,
    ) -> Window {
        let mut pieces = pieces(sheet, primary, None, true);
        for (span, word) in related {
            pieces.extend(pieces_of_related(sheet, *span, word));
        }
        let mut wanted: BTreeMap<usize, Option<usize>> = BTreeMap::new();
        let (last_line, _) = sheet.line_column(sheet.text.len());
        for piece in &pieces {
            for number in
                piece.line.saturating_sub(AROUND).max(1)..=(piece.line + AROUND).min(last_line)
            {
                wanted.entry(number).or_default();
            }
            // the first piece of a line decides where a long line is cut
            wanted.entry(piece.line).and_modify(|focus| {
                focus.get_or_insert(piece.span.start);
            });
        }
        let mut window = Window {
            name: super::plain::one_line(name, 200),
            text: String::new(),
            lines: Vec::new(),
            labels: Vec::new(),
            widest: width.saturating_sub(MARGIN).clamp(WIDEST.0, WIDEST.1),
        };
        for (number, focus) in wanted {
            window.add_line(sheet, number, focus);
        }
        for piece in pieces {
            window.add_label(piece);
        }
        window
    }

    fn add_line(&mut self, sheet: &Sheet, number: usize, focus: Option<usize>) {
        let whole = sheet.line_span(number);
        let text = whole.of(&sheet.text);
        let lead_most = (self.widest / 3).min(LEAD);
        let start = match focus {
            Some(at)
                if text[..at.saturating_sub(whole.start).min(text.len())]
                    .chars()
                    .nth(self.widest - lead_most)
                    .is_some() =>
            {
                back(text, at - whole.start, lead_most)
            }
            _ => 0,
        };
        let end = forth(text, start, self.widest);
        let shown_start = self.text.len();
        let lead = if start > 0 { '…'.len_utf8() } else { 0 };
        if start > 0 {
            self.text.push('…');
        }
        self.text
            .extend(text[start..end].chars().map(|c| stand_in(c).unwrap_or(c)));
        if end < text.len() {
            self.text.push('…');
        }
        // room to underline a place at the end of a line, or on an empty one
        self.text.push(' ');
        self.lines.push(Line {
            number,
            shown: Span::new(shown_start, self.text.len()),
            lead,
            source: Span::new(whole.start + start, whole.start + end),
        });
        self.text.push('\n');
    }

    fn add_label(&mut self, piece: Piece) {
        let Some(line) = self.lines.iter().find(|l| l.number == piece.line) else {
            return;
        };
        let inside = |at: usize| {
            line.shown.start
                + line.lead
                + (at.clamp(line.source.start, line.source.end) - line.source.start)
        };
        let (start, mut end) = (inside(piece.span.start), inside(piece.span.end));
        // words beyond the cut are not underlined
        if piece.span.start > line.source.end || piece.span.end < line.source.start {
            return;
        }
        if end <= start {
            let next = self.text[start..].chars().next().map_or(1, char::len_utf8);
            end = start + next;
        }
        let span = (start, end - start);
        self.labels.push(if piece.primary {
            LabeledSpan::new_primary_with_span(piece.word, span)
        } else {
            LabeledSpan::new_with_span(piece.word, span)
        });
    }

    /// What is to be underlined.
    pub fn labels(&self) -> impl Iterator<Item = LabeledSpan> + '_ {
        self.labels.iter().cloned()
    }

    /// The index of the line that holds a place of the window's own text.
    fn line_at(&self, at: usize) -> Option<usize> {
        let i = self
            .lines
            .partition_point(|l| l.shown.start <= at)
            .checked_sub(1)?;
        (at <= self.lines[i].shown.end).then_some(i)
    }
}

impl SourceCode for Window {
    fn read_span<'a>(
        &'a self,
        span: &SourceSpan,
        before: usize,
        after: usize,
    ) -> Result<Box<dyn SpanContents<'a> + 'a>, MietteError> {
        let out = || MietteError::OutOfBounds;
        let first = self.line_at(span.offset()).ok_or_else(out)?;
        let last = self.line_at(span.offset() + span.len()).ok_or_else(out)?;
        let follows = |i: usize| self.lines[i].number == self.lines[i - 1].number + 1;
        // no snippet reaches over lines that are not here
        if !(first + 1..=last).all(follows) {
            return Err(out());
        }
        let mut from = first;
        while first - from < before && from > 0 && follows(from) {
            from -= 1;
        }
        let mut to = last;
        while to - last < after && to + 1 < self.lines.len() && follows(to + 1) {
            to += 1;
        }
        let shown = Span::new(self.lines[from].shown.start, self.lines[to].shown.end);
        // asked without surroundings, miette wants the place of the words themselves, for the head of a snippet
        let name = format!("{}, line {}", self.name, self.lines[first].number);
        Ok(Box::new(MietteSpanContents::new_named(
            name,
            &self.text.as_bytes()[shown.start..shown.end],
            (shown.start, shown.len()).into(),
            self.lines[from].number - 1,
            0,
            to - from,
        )))
    }
}

/// The part of a span that lies on one line.
struct Piece {
    line: usize,
    span: Span,
    word: Option<String>,
    primary: bool,
}

/// A span line by line, for miette draws spans of several lines as brackets; the word stands at the last.
fn pieces(sheet: &Sheet, span: Span, word: Option<&str>, primary: bool) -> Vec<Piece> {
    let start = floor(&sheet.text, span.start.min(sheet.text.len()));
    let end = floor(&sheet.text, span.end.clamp(start, sheet.text.len()));
    let (first, _) = sheet.line_column(start);
    let (last, _) = sheet.line_column(end.saturating_sub(1).max(start));
    let mut pieces: Vec<Piece> = (first..=last.min(first + TALLEST - 1))
        .map(|line| {
            let whole = sheet.line_span(line);
            let span = Span::new(
                start.clamp(whole.start, whole.end),
                end.clamp(whole.start, whole.end),
            );
            Piece {
                line,
                span,
                word: None,
                primary,
            }
        })
        .collect();
    // a line between that holds nothing needs no mark
    if pieces.len() > 1 {
        pieces.retain(|p| !p.span.of(&sheet.text).trim().is_empty());
    }
    if let Some(piece) = pieces.last_mut() {
        piece.word = word.map(|w| super::plain::one_line(w, 120));
    }
    pieces
}

fn pieces_of_related(sheet: &Sheet, span: Span, word: &str) -> Vec<Piece> {
    pieces(sheet, span, Some(word), false)
}

/// The character boundary at or before an offset.
fn floor(text: &str, mut at: usize) -> usize {
    while !text.is_char_boundary(at) {
        at -= 1;
    }
    at
}

/// The byte offset some characters before another.
fn back(text: &str, at: usize, characters: usize) -> usize {
    let at = floor(text, at.min(text.len()));
    text[..at]
        .char_indices()
        .rev()
        .nth(characters - 1)
        .map_or(0, |(i, _)| i)
}

/// The byte offset some characters after another.
fn forth(text: &str, at: usize, characters: usize) -> usize {
    text[at..]
        .char_indices()
        .nth(characters)
        .map_or(text.len(), |(i, _)| at + i)
}
