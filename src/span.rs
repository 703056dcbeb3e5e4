//! Spans: where something stands in a sheet's text. Made by the reader, carried to the end, never searched for again.

/// A half-open range of byte offsets `[start, end)` into the decoded text of one sheet.
///
/// The offsets on disk are the sheet's to tell ([`crate::sheet::Sheet::on_disk`]).
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Debug, Default)]
pub struct Span {
    /// Offset of the first byte.
    pub start: usize,
    /// Offset one past the last byte.
    pub end: usize,
}

impl Span {
    /// The span from `start` up to, not including, `end`.
    pub const fn new(start: usize, end: usize) -> Span {
        Span { start, end }
    }

    /// The number of bytes.
    pub const fn len(self) -> usize {
        self.end.saturating_sub(self.start)
    }

    /// True where it covers nothing.
    pub const fn is_empty(self) -> bool {
        self.end <= self.start
    }

    /// The smallest span that covers both.
    pub fn cover(self, other: Span) -> Span {
        Span::new(self.start.min(other.start), self.end.max(other.end))
    }

    /// True where the two share at least one byte.
    pub const fn overlaps(self, other: Span) -> bool {
        self.start < other.end && other.start < self.end
    }

    /// True where `other` lies wholly inside.
    pub const fn contains(self, other: Span) -> bool {
        self.start <= other.start && other.end <= self.end
    }

    /// The words it covers; empty where it does not fit the text.
    pub fn of(self, text: &str) -> &str {
        text.get(self.start..self.end).unwrap_or("")
    }
}

/// A value and the words that said it. Equality counts the span.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Spanned<T> {
    /// What was said.
    pub value: T,
    /// Where.
    pub span: Span,
}

impl<T> Spanned<T> {
    /// Puts a value and its place together.
    pub const fn new(value: T, span: Span) -> Spanned<T> {
        Spanned { value, span }
    }

    /// The same place with another value.
    pub fn map<U>(self, f: impl FnOnce(T) -> U) -> Spanned<U> {
        Spanned {
            value: f(self.value),
            span: self.span,
        }
    }
}

/// A change to a sheet: the bytes of `span` become `text`.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Edit {
    /// What is replaced.
    pub span: Span,
    /// What stands there afterwards.
    pub text: String,
}
