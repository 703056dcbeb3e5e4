//! Wrapped prose: physical lines that are one line of thought, so that a date, a site or a position broken over a line end is whole.

use crate::sheet::Sheet;
use crate::span::Span;

/// The lines given, with wrapped ones joined: the first physical line of each, and its words.
pub(super) fn logical_lines(sheet: &Sheet, lines: &[usize]) -> Vec<(usize, Span)> {
    let width = lines.iter().map(|&i| length(sheet, i)).max().unwrap_or(0);
    let mut found: Vec<(usize, Span)> = Vec::new();
    for (n, &i) in lines.iter().enumerate() {
        let body = sheet.lines()[i].body;
        if n > 0
            && lines[n - 1] + 1 == i
            && wrapped(sheet, lines[n - 1], i, width)
            && let Some(last) = found.last_mut()
        {
            last.1.end = body.end;
            continue;
        }
        found.push((i, body));
    }
    found
}

fn length(sheet: &Sheet, line: usize) -> usize {
    sheet.lines()[line].body.of(&sheet.text).chars().count()
}

/// True where `line` was broken because its next word did not fit, in running text.
fn wrapped(sheet: &Sheet, line: usize, next: usize, width: usize) -> bool {
    let this = sheet.lines()[line];
    let that = sheet.lines()[next];
    let (words, after) = (this.body.of(&sheet.text), that.body.of(&sheet.text));
    if this.depth > 0
        || that.depth > 0
        || words.contains(['|', '\t'])
        || words.contains("   ")
        || after.contains(['|', '\t'])
    {
        return false;
    }
    // the next word would have made the line the longest
    let first = after.split_whitespace().next().unwrap_or("");
    let fits = length(sheet, line) + 1 + first.chars().count() < width;
    if fits || width < 30 {
        return false;
    }
    // a line of prose: words enough, and no label or bullet opens the next
    let spoken = |s: &str| {
        s.split(|c: char| !c.is_alphabetic())
            .filter(|w| w.chars().count() > 1)
            .count()
    };
    let labelled = after.split_once(':').is_some_and(|(head, _)| {
        head.len() < 24
            && head.split_whitespace().count() <= 2
            && !head.contains(|c: char| c.is_ascii_digit())
    });
    let bullet = first.chars().count() == 1 && first.starts_with(['-', '*', '•', '#', '[', '+']);
    let numbered = first.len() <= 4
        && first.ends_with(['.', ')'])
        && first.starts_with(|c: char| c.is_ascii_digit())
        && spoken(words) < 6;
    // a bracket left open is closed on the next line
    let open = words.rfind('(').is_some_and(|o| !words[o..].contains(')')) && after.contains(')');
    if spoken(words) < 5 && !(open && spoken(words) > 1) || labelled || bullet || numbered {
        return false;
    }
    // what ends a thought needs no joining, but "Mar." and "R.A." end none
    let last = words.split_whitespace().next_back().unwrap_or("");
    let ends =
        last.ends_with([':', ';', '!', '?']) || last.ends_with('.') && last.chars().count() > 5;
    !ends
}
