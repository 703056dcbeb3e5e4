//! A sheet: one file, mail or standard input, decoded, with every byte's line and column. It never loses its text.
//!
//! What is not here: what the words mean.

mod decode;
mod lines;

pub use decode::SheetError;
pub use lines::{Block, Line};

use crate::span::Span;

/// One sheet of reports.
#[derive(Clone, Debug)]
pub struct Sheet {
    /// The name it was given by, as given.
    pub name: String,
    /// Its text, decoded. Spans are offsets into this.
    pub text: String,
    lines: Vec<Line>,
    notes: Vec<String>,
    map: decode::Map,
}

impl Sheet {
    /// Decodes a sheet: byte-order mark, else valid UTF-8, else UTF-16 by its zeros, else Windows-1252 with a note.
    ///
    /// # Errors
    /// Where the bytes are no text at all.
    pub fn decode(name: String, bytes: &[u8]) -> Result<Sheet, SheetError> {
        let decoded = decode::decode(bytes)?;
        let lines = lines::lines(&decoded.text);
        Ok(Sheet { name, text: decoded.text, lines, notes: decoded.notes, map: decoded.map })
    }

    /// The offsets on disk of the bytes that carry a span's words.
    pub fn on_disk(&self, span: Span) -> Span {
        Span::new(self.map.on_disk(span.start), self.map.on_disk(span.end))
    }

    /// Line and column of an offset, both from 1, the column in characters.
    pub fn line_column(&self, offset: usize) -> (usize, usize) {
        let i = self.line_at(offset);
        let start = self.lines.get(i).map_or(0, |l| l.whole.start);
        let column = self.text.get(start..offset.min(self.text.len())).map_or(0, |s| s.chars().count());
        (i + 1, column + 1)
    }

    /// The lines.
    pub fn lines(&self) -> &[Line] {
        &self.lines
    }

    /// Index (from 0) of the line that holds an offset.
    pub fn line_at(&self, offset: usize) -> usize {
        self.lines.partition_point(|l| l.whole.start <= offset).saturating_sub(1)
    }

    /// The span of a line (numbered from 1) without its line end; empty where there is none.
    pub fn line_span(&self, line: usize) -> Span {
        line.checked_sub(1).and_then(|i| self.lines.get(i)).map_or(Span::default(), |l| l.whole)
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
