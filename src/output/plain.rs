//! Words of a sheet made harmless for a terminal: control and bidirectional characters replaced by one of equal length;
//! and its lines broken to a width.

use unicode_width::UnicodeWidthStr;

/// The character that stands for one a terminal must not see; `None` where it may pass.
pub fn stand_in(c: char) -> Option<char> {
    let harmful = matches!(c,
        '\0'..='\x1f' | '\x7f'..='\u{9f}'
        // soft hyphen, Arabic letter mark, zero widths and marks of direction, line and paragraph separators
        | '\u{ad}' | '\u{61c}' | '\u{180e}' | '\u{200b}'..='\u{200f}' | '\u{2028}'..='\u{202e}'
        | '\u{2060}'..='\u{206f}' | '\u{feff}' | '\u{fff9}'..='\u{fffb}'
        | '\u{1d173}'..='\u{1d17a}' | '\u{e0000}'..='\u{e007f}');
    if !harmful {
        return None;
    }
    Some(match (c, c.len_utf8()) {
        ('\t', _) => ' ',
        (_, 1) => '?',
        (_, 2) => '·',
        (_, 3) => '\u{fffd}',
        _ => '\u{1fbc4}',
    })
}

/// The same text, as many bytes long, that a terminal can take.
pub fn harmless(text: &str) -> String {
    text.chars().map(|c| stand_in(c).unwrap_or(c)).collect()
}

/// One line of it: runs of white space become one blank, and what is longer than `most` characters is cut.
pub fn one_line(text: &str, most: usize) -> String {
    let joined = text.split_whitespace().collect::<Vec<_>>().join(" ");
    let mut line: String = harmless(&joined);
    if line.chars().count() > most {
        line = line.chars().take(most.saturating_sub(1)).collect();
        line.push('…');
    }
    line
}

/// A text in lines of at most `width` columns, broken at blanks: `first` stands before the first, `rest` before the others.
///
/// A word longer than a line stays whole: a path or a name must be copied in one piece.
pub fn wrapped(text: &str, first: &str, rest: &str, width: usize) -> String {
    let mut lines = String::from(first);
    let (mut column, mut fresh) = (first.width(), true);
    for word in text.split(' ').filter(|w| !w.is_empty()) {
        let wide = word.width();
        if !fresh && column + 1 + wide > width {
            lines.push('\n');
            lines.push_str(rest);
            (column, fresh) = (rest.width(), true);
        }
        if !fresh {
            lines.push(' ');
            column += 1;
        }
        lines.push_str(word);
        column += wide;
        fresh = false;
    }
    lines
}
