//! The input nom parsers run on: a window of the sheet's text that knows where it stands, so that every span is exact.

use crate::span::Span;
use nom::{Compare, CompareResult, Input, Needed, Offset};
use std::str::{CharIndices, Chars};

/// A window `[start, end)` of a sheet's text.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Text<'a> {
    whole: &'a str,
    start: usize,
    end: usize,
}

impl<'a> Text<'a> {
    /// All of a text.
    pub fn new(whole: &'a str) -> Text<'a> {
        Text {
            whole,
            start: 0,
            end: whole.len(),
        }
    }

    /// The window that a span covers; empty at its start where the span does not fall on character edges.
    pub fn window(whole: &'a str, span: Span) -> Text<'a> {
        if whole.get(span.start..span.end).is_some() {
            Text {
                whole,
                start: span.start,
                end: span.end,
            }
        } else {
            let at = span.start.min(whole.len());
            Text {
                whole,
                start: at,
                end: at,
            }
        }
    }

    /// The characters of the window.
    pub fn as_str(self) -> &'a str {
        self.whole.get(self.start..self.end).unwrap_or("")
    }

    /// Where the window begins in the sheet.
    pub fn at(self) -> usize {
        self.start
    }

    /// The window's own span.
    pub fn span(self) -> Span {
        Span::new(self.start, self.end)
    }

    /// From here up to the beginning of `rest`.
    pub fn span_to(self, rest: Text<'a>) -> Span {
        Span::new(self.start, rest.start)
    }

    /// True where nothing is left.
    pub fn is_empty(self) -> bool {
        self.start >= self.end
    }

    /// The next character.
    pub fn peek(self) -> Option<char> {
        self.as_str().chars().next()
    }

    /// The character before the window, if any.
    pub fn before(self) -> Option<char> {
        self.whole.get(..self.start)?.chars().next_back()
    }

    /// The text right before the window: its last two dozen bytes at most.
    pub fn behind(self) -> &'a str {
        let from = self
            .whole
            .floor_char_boundary(self.start.saturating_sub(24));
        self.whole.get(from..self.start).unwrap_or("")
    }

    /// The window without its first `bytes` bytes.
    pub fn skip(self, bytes: usize) -> Text<'a> {
        Text {
            start: (self.start + bytes).min(self.end),
            ..self
        }
    }

    /// The window without leading blanks (of any kind, but no line ends).
    pub fn skip_blanks(self) -> Text<'a> {
        let s = self.as_str();
        let blank = s.find(|c| !is_blank(c)).unwrap_or(s.len());
        self.skip(blank)
    }
}

/// A blank within a line; a line end inside a window of wrapped prose is one too.
pub fn is_blank(c: char) -> bool {
    matches!(
        c,
        ' ' | '\n'
            | '\r'
            | '\t'
            | '\u{a0}'
            | '\u{2009}'
            | '\u{202f}'
            | '\u{2007}'
            | '\u{2002}'
            | '\u{2003}'
            | '\u{200a}'
            | '\u{2006}'
            | '\u{2005}'
            | '\u{2004}'
    )
}

impl<'a> Input for Text<'a> {
    type Item = char;
    type Iter = Chars<'a>;
    type IterIndices = CharIndices<'a>;

    fn input_len(&self) -> usize {
        self.end - self.start
    }
    fn take(&self, index: usize) -> Self {
        Text {
            end: (self.start + index).min(self.end),
            ..*self
        }
    }
    fn take_from(&self, index: usize) -> Self {
        self.skip(index)
    }
    fn take_split(&self, index: usize) -> (Self, Self) {
        (self.take_from(index), self.take(index))
    }
    fn position<P: Fn(Self::Item) -> bool>(&self, predicate: P) -> Option<usize> {
        self.as_str().find(predicate)
    }
    fn iter_elements(&self) -> Self::Iter {
        self.as_str().chars()
    }
    fn iter_indices(&self) -> Self::IterIndices {
        self.as_str().char_indices()
    }
    fn slice_index(&self, count: usize) -> Result<usize, Needed> {
        let mut left = count;
        for (i, _) in self.as_str().char_indices() {
            if left == 0 {
                return Ok(i);
            }
            left -= 1;
        }
        if left == 0 {
            Ok(self.input_len())
        } else {
            Err(Needed::Unknown)
        }
    }
}

impl<'a, 'b> Compare<&'b str> for Text<'a> {
    fn compare(&self, t: &'b str) -> CompareResult {
        self.as_str().compare(t)
    }
    fn compare_no_case(&self, t: &'b str) -> CompareResult {
        self.as_str().compare_no_case(t)
    }
}

impl Offset for Text<'_> {
    fn offset(&self, second: &Self) -> usize {
        second.start - self.start
    }
}
