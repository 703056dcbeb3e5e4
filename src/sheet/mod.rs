//! A sheet: one file, mail or standard input, decoded, with every byte's line and column. It never loses its text.
//!
//! What is not here: what the words mean.

mod aside;
mod decode;
mod html;
mod lines;
mod mail;
mod map;
mod transfer;

pub use decode::SheetError;
pub use lines::{Block, Line};
pub use mail::Turn;

use crate::span::Span;

/// One sheet of reports.
#[derive(Clone, Debug)]
pub struct Sheet {
    /// The name it was given by, as given.
    pub name: String,
    /// Its text, decoded. Spans are offsets into this.
    pub text: String,
    lines: Vec<Line>,
    /// The lines on disk, as far as the text has their words, where they are not those of the text.
    disk_lines: Option<Vec<Span>>,
    turns: Vec<Turn>,
    notes: Vec<String>,
    map: map::Map,
}

impl Sheet {
    /// Decodes a sheet: byte-order mark, else valid UTF-8, else UTF-16 by its zeros, else Windows-1252 with a note.
    ///
    /// # Errors
    /// Where the bytes are no text at all.
    pub fn decode(name: String, bytes: &[u8]) -> Result<Sheet, SheetError> {
        let decoded = decode::decode(bytes)?;
        let mail = mail::read(&decoded, bytes);
        let is_mail = mail.is_some();
        let mut notes = decoded.notes;
        let (woven, asides, mut turns) = match mail {
            Some(mail) => {
                if !mail.notes.is_empty() {
                    notes = mail.notes;
                }
                (Some(mail.woven), mail.asides, mail.turns)
            }
            None if html::is_page(&decoded.text) => {
                let all = Span::new(0, decoded.text.len());
                let page: Vec<_> = map::glyphs(&decoded.text, &decoded.map, all).collect();
                let mut woven = map::Woven::default();
                for glyph in html::plain(&page) {
                    woven.push(glyph);
                }
                (Some(woven), Vec::new(), Vec::new())
            }
            None => (None, Vec::new(), Vec::new()),
        };
        let disk_lines = woven
            .as_ref()
            .filter(|w| w.text != decoded.text)
            .map(|w| disk_lines(&decoded.text, &decoded.map, w));
        let (mut text, map) = match woven {
            Some(woven) => (woven.text, woven.map),
            None => (decoded.text, decoded.map),
        };
        html::blank_remains(&mut text);
        let mut lines = lines::lines(&text);
        let mut set = asides.iter().peekable();
        for line in &mut lines {
            while set.peek().is_some_and(|a| a.end <= line.whole.start) {
                set.next();
            }
            line.aside = set.peek().is_some_and(|a| a.start <= line.whole.start);
        }
        aside::mark(&text, &mut lines, &mut turns, is_mail);
        Ok(Sheet {
            name,
            text,
            lines,
            disk_lines,
            turns,
            notes,
            map,
        })
    }

    /// The offsets on disk of the bytes that carry a span's words.
    pub fn on_disk(&self, span: Span) -> Span {
        self.map.span_on_disk(span)
    }

    /// Line and column on disk of an offset, both from 1, the column in characters.
    pub fn line_column(&self, offset: usize) -> (usize, usize) {
        let (i, start) = match &self.disk_lines {
            Some(on_disk) => {
                let i = on_disk
                    .partition_point(|l| l.start <= offset)
                    .saturating_sub(1);
                (i, on_disk.get(i).map_or(0, |l| l.start))
            }
            None => {
                let i = self.line_at(offset);
                (i, self.lines.get(i).map_or(0, |l| l.whole.start))
            }
        };
        let column = self
            .text
            .get(start..offset.min(self.text.len()))
            .map_or(0, |s| s.chars().count());
        (i + 1, column + 1)
    }

    /// The lines of the text: what a mail broke for its journey is whole again here.
    pub fn lines(&self) -> &[Line] {
        &self.lines
    }

    /// Index (from 0) of the line that holds an offset.
    pub fn line_at(&self, offset: usize) -> usize {
        self.lines
            .partition_point(|l| l.whole.start <= offset)
            .saturating_sub(1)
    }

    /// The span of a line on disk (numbered from 1) without its line end; empty where there is none.
    pub fn line_span(&self, line: usize) -> Span {
        let i = line.checked_sub(1);
        match &self.disk_lines {
            Some(on_disk) => i.and_then(|i| on_disk.get(i)).copied(),
            None => i.and_then(|i| self.lines.get(i)).map(|l| l.whole),
        }
        .unwrap_or_default()
    }

    /// Where another person begins to speak: the heads of mails, forwarded and quoted messages.
    pub fn turns(&self) -> &[Turn] {
        &self.turns
    }

    /// The blocks: lines up to a blank line.
    pub fn blocks(&self) -> Vec<Block> {
        lines::blocks(&self.text, &self.lines)
    }

    /// What was noted while decoding.
    pub fn notes(&self) -> &[String] {
        &self.notes
    }
}

/// The lines on disk, each with the span of its words in the woven text.
fn disk_lines(source: &str, source_map: &map::Map, woven: &map::Woven) -> Vec<Span> {
    let len = woven.text.len();
    let place = |offset: usize| woven.map.in_text(source_map.on_disk(offset), len);
    lines::lines(source)
        .iter()
        .map(|l| {
            let start = place(l.whole.start);
            let end = place(l.whole.end).max(start);
            let words = woven.text.get(start..end).unwrap_or("");
            Span::new(start, start + words.trim_end_matches(['\n', '\r']).len())
        })
        .collect()
}
