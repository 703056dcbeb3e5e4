//! The editor's own word in a sheet: `[stet RULE: reason]`.

use super::number::{Parsed, no};
use super::text::Text;
use crate::report::Stet;
use crate::span::{Span, Spanned};

/// A stet, from `[` to `]`; several rules may be named with commas or blanks between.
pub fn stet(input: Text<'_>) -> Parsed<'_, Stet> {
    let s = input.as_str();
    let Some(head) = s.get(..5) else {
        return no(input);
    };
    if !head.eq_ignore_ascii_case("[stet")
        || !s[5..].starts_with(|c: char| c.is_whitespace() || c == ']' || c == ':')
    {
        return no(input);
    }
    let Some(close) = s.find([']', '\n']).filter(|&i| s[i..].starts_with(']')) else {
        return no(input);
    };
    let body = Span::new(input.at() + 5, input.at() + close);
    let words = &s[5..close];
    let (names, reason) = match words.find(':') {
        Some(colon) => (
            &words[..colon],
            words.get(colon + 1..).map(|r| (r, body.start + colon + 1)),
        ),
        None => (words, None),
    };
    let mut rules = Vec::new();
    let mut at = body.start;
    for piece in names.split_inclusive(|c: char| c == ',' || c.is_whitespace()) {
        let name = piece.trim_matches(|c: char| c == ',' || c.is_whitespace());
        if !name.is_empty() {
            let start = at + piece.find(name).unwrap_or(0);
            rules.push(Spanned::new(
                name.to_string(),
                Span::new(start, start + name.len()),
            ));
        }
        at += piece.len();
    }
    let reason = reason.and_then(|(r, start)| {
        let trimmed = r.trim();
        let start = start + r.find(trimmed).unwrap_or(0);
        (!trimmed.is_empty())
            .then(|| Spanned::new(trimmed.to_string(), Span::new(start, start + trimmed.len())))
    });
    let rest = input.skip(close + 1);
    Ok((
        rest,
        Stet {
            rules,
            reason,
            span: input.span_to(rest),
        },
    ))
}
