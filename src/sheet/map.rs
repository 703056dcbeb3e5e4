//! The way back: from offsets in a sheet's text to the bytes on disk that carry the words.

use crate::span::Span;

/// From offsets in the text to offsets on disk: stretches in which both advance at one rate, character by character.
#[derive(Clone, Debug, Default)]
pub(super) struct Map {
    stretches: Vec<Stretch>,
}

#[derive(Clone, Copy, Debug)]
struct Stretch {
    text: usize,
    disk: usize,
    text_step: usize,
    disk_step: usize,
}

impl Stretch {
    fn at(&self, text: usize) -> usize {
        self.disk + (text - self.text) / self.text_step * self.disk_step
    }
}

impl Map {
    /// A text that lies on disk as it is, `by` bytes after its beginning.
    pub fn shifted(by: usize) -> Map {
        Map {
            stretches: vec![Stretch {
                text: 0,
                disk: by,
                text_step: 1,
                disk_step: 1,
            }],
        }
    }

    /// The next character: `text_step` bytes of text at `text`, carried by `disk_step` bytes at `disk`.
    pub fn push(&mut self, text: usize, disk: usize, text_step: usize, disk_step: usize) {
        // equal lengths advance byte by byte
        let (text_step, disk_step) = if text_step == disk_step {
            (1, 1)
        } else {
            (text_step, disk_step)
        };
        match self.stretches.last() {
            Some(s)
                if s.text_step == text_step && s.disk_step == disk_step && s.at(text) == disk => {}
            _ => self.stretches.push(Stretch {
                text,
                disk,
                text_step,
                disk_step,
            }),
        }
    }

    fn stretch(&self, text: usize) -> Option<&Stretch> {
        let i = self.stretches.partition_point(|s| s.text <= text);
        i.checked_sub(1).and_then(|i| self.stretches.get(i))
    }

    /// The offset on disk of the first byte of the character at a text offset.
    pub fn on_disk(&self, text: usize) -> usize {
        self.stretch(text).map_or(text, |s| s.at(text))
    }

    /// The offset on disk one past the last byte of the character that ends at a text offset: what was dropped after it is no part of it.
    fn end_on_disk(&self, text: usize) -> usize {
        let Some(before) = text.checked_sub(1) else {
            return self.on_disk(text);
        };
        self.stretch(before)
            .map_or(text, |s| s.at(before) + s.disk_step)
    }

    /// The bytes on disk that carry a span.
    pub fn span_on_disk(&self, span: Span) -> Span {
        let start = self.on_disk(span.start);
        if span.is_empty() {
            Span::new(start, start)
        } else {
            Span::new(start, self.end_on_disk(span.end).max(start))
        }
    }

    /// The offset in the text of the first character that lies at or after an offset on disk; `len` where there is none.
    pub fn in_text(&self, disk: usize, len: usize) -> usize {
        let i = self.stretches.partition_point(|s| s.disk <= disk);
        let next = self.stretches.get(i).map_or(len, |s| s.text);
        let Some(s) = i.checked_sub(1).and_then(|i| self.stretches.get(i)) else {
            return next.min(self.stretches.first().map_or(0, |s| s.text));
        };
        let steps = if s.disk_step == 0 {
            0
        } else {
            (disk - s.disk).div_ceil(s.disk_step)
        };
        (s.text + steps * s.text_step).min(next).min(len)
    }
}

/// One character of a text and the bytes on disk that carry it.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(super) struct Glyph {
    /// The character.
    pub c: char,
    /// The first byte on disk.
    pub disk: usize,
    /// How many bytes on disk.
    pub len: usize,
}

/// A text being put together from pieces of a sheet.
#[derive(Default)]
pub(super) struct Woven {
    /// The text so far.
    pub text: String,
    /// Its way back.
    pub map: Map,
}

impl Woven {
    /// Adds one character.
    pub fn push(&mut self, g: Glyph) {
        self.map
            .push(self.text.len(), g.disk, g.c.len_utf8(), g.len);
        self.text.push(g.c);
    }
}

/// The characters of a span of a text, each with its bytes on disk.
pub(super) fn glyphs<'a>(
    text: &'a str,
    map: &'a Map,
    span: Span,
) -> impl Iterator<Item = Glyph> + 'a {
    span.of(text).char_indices().map(move |(i, c)| {
        let here = Span::new(span.start + i, span.start + i + c.len_utf8());
        let disk = map.span_on_disk(here);
        Glyph {
            c,
            disk: disk.start,
            len: disk.len(),
        }
    })
}
