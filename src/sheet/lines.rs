//! Lines and blocks: where each line begins and ends, what of it is quoting, and which lines belong together.

use crate::span::Span;

/// One line of a sheet.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Line {
    /// All of it, without its line end.
    pub whole: Span,
    /// Without quoting (`> `) before it and blanks around it.
    pub body: Span,
    /// How deep it is quoted.
    pub depth: u8,
    /// It is no part of the reports: a mail's head, who wrote what follows, a signature, a part that is not read.
    pub aside: bool,
}

/// Lines that belong together: up to a blank line or another depth of quoting.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Block {
    /// Index of its first line, from 0.
    pub first: usize,
    /// Index one past its last line.
    pub end: usize,
    /// Its words.
    pub span: Span,
}

/// Cuts a text at LF, CR LF and CR.
pub(super) fn lines(text: &str) -> Vec<Line> {
    let bytes = text.as_bytes();
    let mut found = Vec::new();
    let mut start = 0;
    for at in memchr::memchr2_iter(b'\n', b'\r', bytes) {
        if at < start {
            continue;
        }
        found.push(line(text, start, at));
        start = if bytes[at] == b'\r' && bytes.get(at + 1) == Some(&b'\n') {
            at + 2
        } else {
            at + 1
        };
    }
    if start < text.len() || found.is_empty() {
        found.push(line(text, start, text.len()));
    }
    found
}

fn line(text: &str, start: usize, end: usize) -> Line {
    let mut body = &text[start..end];
    let mut depth = 0u8;
    loop {
        let inner = body.trim_start();
        match inner.strip_prefix('>') {
            // "> " and ">>" quote; ">5" at the head of a line is a number's business
            Some(rest)
                if rest.is_empty()
                    || rest.starts_with([' ', '>', '\t'])
                    || depth > 0
                    || !rest.starts_with(|c: char| c.is_ascii_digit()) =>
            {
                depth = depth.saturating_add(1);
                body = rest;
            }
            _ => break,
        }
    }
    let trimmed = body.trim_start();
    let from = end - trimmed.len();
    let to = from + trimmed.trim_end().len();
    Line {
        whole: Span::new(start, end),
        body: Span::new(from, to),
        depth,
        aside: false,
    }
}

/// Groups lines into blocks.
pub(super) fn blocks(text: &str, lines: &[Line]) -> Vec<Block> {
    let mut found = Vec::new();
    let mut first = None;
    for (i, line) in lines.iter().enumerate() {
        let words = line.body.of(text);
        let rule = words.len() >= 3
            && words
                .chars()
                .all(|c| matches!(c, '-' | '=' | '*' | '_' | '~' | '#'))
            && !words.contains('|');
        let other_depth = first.is_some_and(|f: usize| lines[f].depth != line.depth);
        let none = line.body.is_empty() || line.aside;
        if (none || other_depth)
            && let Some(f) = first.take()
        {
            found.push(block(lines, f, i));
        }
        if !none && !rule && first.is_none() {
            first = Some(i);
        }
    }
    if let Some(f) = first {
        found.push(block(lines, f, lines.len()));
    }
    found
}

fn block(lines: &[Line], first: usize, end: usize) -> Block {
    Block {
        first,
        end,
        span: Span::new(
            lines[first].body.start,
            lines[end - 1].whole.end.max(lines[end - 1].body.end),
        ),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn all_line_ends_and_quoting() {
        let text = "a\r\nb\rc\n\n> > d e \n>f";
        let found = lines(text);
        let bodies: Vec<&str> = found.iter().map(|l| l.body.of(text)).collect();
        assert_eq!(bodies, ["a", "b", "c", "", "d e", "f"]);
        assert_eq!(
            found.iter().map(|l| l.depth).collect::<Vec<_>>(),
            [0, 0, 0, 0, 2, 1]
        );
        let groups = blocks(text, &found);
        assert_eq!(
            groups.iter().map(|b| (b.first, b.end)).collect::<Vec<_>>(),
            [(0, 3), (4, 5), (5, 6)]
        );
    }
}
