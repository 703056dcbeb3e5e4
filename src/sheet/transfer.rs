//! Transfer encodings of mail undone (RFC 2045: quoted-printable, base64; RFC 2047: words in headers; RFC 3676: flowed lines),
//! every character with the bytes on disk that carry it.

use super::map::Glyph;
use encoding_rs::{Encoding, UTF_8, WINDOWS_1252};

/// How a part's bytes were made fit for mail.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(super) enum Transfer {
    /// 7bit, 8bit, binary, or nothing said.
    Plain,
    /// Quoted-printable.
    QuotedPrintable,
    /// Base64.
    Base64,
}

/// One byte of a part's content and the bytes on disk that carry it.
#[derive(Clone, Copy)]
pub(super) struct Carried {
    byte: u8,
    disk: usize,
    len: usize,
}

/// Undoes a transfer encoding. The glyphs are ASCII where the mail keeps to its own rules; others stand for themselves.
pub(super) fn undo(
    transfer: Transfer,
    glyphs: impl Iterator<Item = Glyph>,
    bytes: &[u8],
) -> Vec<Carried> {
    let all: Vec<Glyph> = glyphs.collect();
    match transfer {
        Transfer::Plain => all.iter().flat_map(|g| raw(g, bytes)).collect(),
        Transfer::QuotedPrintable => quoted_printable(&all, bytes),
        Transfer::Base64 => base64(&all),
    }
}

/// The bytes behind a character: itself where it is ASCII, else those on disk, one by one.
fn raw<'b>(g: &Glyph, bytes: &'b [u8]) -> impl Iterator<Item = Carried> + use<'b> {
    let Glyph { c, disk, len } = *g;
    let one = c.is_ascii().then_some(Carried {
        byte: c as u8,
        disk,
        len,
    });
    let stored = if c.is_ascii() { 0 } else { len };
    let each = bytes.get(disk..disk + stored).unwrap_or_default().iter();
    one.into_iter()
        .chain(each.enumerate().map(move |(i, &byte)| Carried {
            byte,
            disk: disk + i,
            len: 1,
        }))
}

fn quoted_printable(all: &[Glyph], bytes: &[u8]) -> Vec<Carried> {
    let mut out = Vec::with_capacity(all.len());
    let hex = |g: Option<&Glyph>| g.and_then(|g| g.c.to_digit(16));
    let mut i = 0;
    while let Some(g) = all.get(i) {
        if g.c == '=' {
            if let (Some(high), Some(low)) = (hex(all.get(i + 1)), hex(all.get(i + 2))) {
                let last = &all[i + 2];
                out.push(Carried {
                    byte: (high * 16 + low) as u8,
                    disk: g.disk,
                    len: last.disk + last.len - g.disk,
                });
                i += 3;
                continue;
            }
            // a soft line break, perhaps with blanks that a gateway added
            let mut k = i + 1;
            while all.get(k).is_some_and(|g| matches!(g.c, ' ' | '\t')) {
                k += 1;
            }
            match (all.get(k).map(|g| g.c), all.get(k + 1).map(|g| g.c)) {
                (Some('\r'), Some('\n')) => {
                    i = k + 2;
                    continue;
                }
                (Some('\r' | '\n'), _) => {
                    i = k + 1;
                    continue;
                }
                (None, _) => break,
                _ => {}
            }
        }
        out.extend(raw(g, bytes));
        i += 1;
    }
    out
}

fn base64(all: &[Glyph]) -> Vec<Carried> {
    let mut out = Vec::with_capacity(all.len() / 4 * 3);
    let mut group: Vec<(u32, &Glyph)> = Vec::with_capacity(4);
    let mut flush = |group: &mut Vec<(u32, &Glyph)>| {
        let bits = group.iter().fold(0u32, |b, (v, _)| b << 6 | v) << (6 * (4 - group.len()));
        // byte n lies in characters n and n + 1
        for n in 0..group.len().saturating_sub(1) {
            let (first, last) = (group[n].1, group[n + 1].1);
            out.push(Carried {
                byte: (bits >> (16 - 8 * n)) as u8,
                disk: first.disk,
                len: last.disk + last.len - first.disk,
            });
        }
        group.clear();
    };
    for g in all {
        let value = match g.c {
            'A'..='Z' => g.c as u32 - 65,
            'a'..='z' => g.c as u32 - 71,
            '0'..='9' => g.c as u32 + 4,
            '+' => 62,
            '/' => 63,
            '=' => {
                flush(&mut group);
                continue;
            }
            _ => continue,
        };
        group.push((value, g));
        if group.len() == 4 {
            flush(&mut group);
        }
    }
    flush(&mut group);
    out
}

/// Bytes to characters by the declared character set; by what they are, where the declaration is missing or cannot be right.
pub(super) fn characters(carried: &[Carried], charset: Option<&str>) -> (Vec<Glyph>, &'static str) {
    let bytes: Vec<u8> = carried.iter().map(|c| c.byte).collect();
    let declared = charset.and_then(|c| Encoding::for_label(c.as_bytes()));
    let utf8 = std::str::from_utf8(&bytes).is_ok();
    let ascii_said = charset.is_some_and(|c| c.to_ascii_lowercase().contains("ascii"));
    let encoding = match declared {
        Some(e) if e == UTF_8 && !utf8 => WINDOWS_1252,
        Some(_) if ascii_said && utf8 => UTF_8,
        Some(e) => e,
        None if utf8 => UTF_8,
        None => WINDOWS_1252,
    };
    let mut decoder = encoding.new_decoder_without_bom_handling();
    let mut out = Vec::with_capacity(carried.len());
    let mut text = String::with_capacity(16);
    let mut since: Option<&Carried> = None;
    for (i, one) in carried.iter().enumerate() {
        let first = *since.get_or_insert(one);
        text.clear();
        let last = i + 1 == carried.len();
        let (_, _, _) = decoder.decode_to_string(&[one.byte], &mut text, last);
        if !text.is_empty() {
            for c in text.chars() {
                out.push(Glyph {
                    c,
                    disk: first.disk,
                    len: one.disk + one.len - first.disk,
                });
            }
            since = None;
        }
    }
    // a mark of byte order is no word
    if out.first().is_some_and(|g| g.c == '\u{feff}') {
        out.remove(0);
    }
    (out, encoding.name())
}

/// Lines of format=flowed put together again: a line that ends in a blank goes on in the next of the same depth of quoting.
pub(super) fn unflowed(all: &[Glyph], blank_dropped: bool) -> Vec<Glyph> {
    let mut lines: Vec<&[Glyph]> = Vec::new();
    let mut start = 0;
    for (i, g) in all.iter().enumerate() {
        if g.c == '\n' {
            lines.push(&all[start..=i]);
            start = i + 1;
        }
    }
    lines.push(&all[start..]);
    let body = |line: &[Glyph]| -> (usize, usize, usize) {
        let depth = line.iter().take_while(|g| g.c == '>').count();
        let stuffed = usize::from(line.get(depth).is_some_and(|g| g.c == ' '));
        let mut end = line.len();
        while end > depth && matches!(line[end - 1].c, '\n' | '\r') {
            end -= 1;
        }
        (depth, (depth + stuffed).min(end), end)
    };
    let signature = |line: &[Glyph]| {
        let (_, from, to) = body(line);
        to == from + 3 && line[from..to].iter().map(|g| g.c).eq("-- ".chars())
    };
    let mut out = Vec::with_capacity(all.len());
    let mut joined = false;
    for (n, line) in lines.iter().enumerate() {
        let (depth, from, to) = body(line);
        let begin = if joined { from } else { 0 };
        let soft = to > from
            && line[to - 1].c == ' '
            && !signature(line)
            && lines.get(n + 1).is_some_and(|next| {
                let (d, f, t) = body(next);
                d == depth && t > f && !signature(next)
            });
        if soft {
            out.extend_from_slice(&line[begin..to - usize::from(blank_dropped)]);
        } else {
            out.extend_from_slice(&line[begin..]);
        }
        joined = soft;
    }
    out
}

/// A header's value with its encoded words (`=?utf-8?Q?...?=`) undone.
pub(super) fn header_words(value: &str) -> String {
    let mut out = String::new();
    let mut rest = value;
    let mut after_encoded = false;
    while let Some(at) = rest.find("=?") {
        let before = &rest[..at];
        match encoded_word(&rest[at..]) {
            Some((word, used)) => {
                // blanks between two encoded words are no words
                if !(after_encoded && before.trim().is_empty()) {
                    out.push_str(before);
                }
                out.push_str(&word);
                rest = &rest[at + used..];
                after_encoded = true;
            }
            None => {
                out.push_str(&rest[..at + 2]);
                rest = &rest[at + 2..];
                after_encoded = false;
            }
        }
    }
    out.push_str(rest);
    out
}

fn encoded_word(text: &str) -> Option<(String, usize)> {
    let inner = text.strip_prefix("=?")?;
    let mut fields = inner.splitn(3, '?');
    let (charset, kind, rest) = (fields.next()?, fields.next()?, fields.next()?);
    let end = rest.find("?=")?;
    let payload = &rest[..end];
    if payload.contains([' ', '\n']) || charset.contains(' ') {
        return None;
    }
    let used = 2 + charset.len() + 1 + kind.len() + 1 + end + 2;
    let glyph = |(i, c): (usize, char)| Glyph {
        c,
        disk: i,
        len: c.len_utf8(),
    };
    let spaced = payload.replace('_', " ");
    let carried = match kind {
        "Q" | "q" => undo(
            Transfer::QuotedPrintable,
            spaced.char_indices().map(glyph),
            spaced.as_bytes(),
        ),
        "B" | "b" => undo(
            Transfer::Base64,
            payload.char_indices().map(glyph),
            payload.as_bytes(),
        ),
        _ => return None,
    };
    let charset = charset.split('*').next();
    let (glyphs, _) = characters(&carried, charset);
    Some((glyphs.iter().map(|g| g.c).collect(), used))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn glyphs(text: &str) -> Vec<Glyph> {
        let one = |(i, c): (usize, char)| Glyph {
            c,
            disk: i,
            len: c.len_utf8(),
        };
        text.char_indices().map(one).collect()
    }

    fn read(transfer: Transfer, text: &str, charset: &str) -> (String, Vec<Glyph>) {
        let carried = undo(transfer, glyphs(text).into_iter(), text.as_bytes());
        let (g, _) = characters(&carried, Some(charset));
        (g.iter().map(|g| g.c).collect(), g)
    }

    #[test]
    fn quoted_printable_keeps_its_bytes() {
        let source = "a=3Db=\r\n=C2=B0c=\nd";
        let (text, g) = read(Transfer::QuotedPrintable, source, "utf-8");
        assert_eq!(text, "a=b°cd");
        let degree = g[3];
        assert_eq!(
            &source[degree.disk..degree.disk + degree.len],
            "=C2=B0",
            "a character of two encoded bytes"
        );
    }

    /// The examples of RFC 4648, section 10.
    #[test]
    fn base64_of_the_standard() {
        for (plain, coded) in [
            ("f", "Zg=="),
            ("fo", "Zm8="),
            ("foo", "Zm9v"),
            ("foob", "Zm9vYg=="),
            ("fooba", "Zm9vYmE="),
            ("foobar", "Zm9vYmFy"),
        ] {
            assert_eq!(read(Transfer::Base64, coded, "us-ascii").0, plain);
        }
        let (_, g) = read(Transfer::Base64, "Zm9v\r\nYmFy", "us-ascii");
        // "b" lies in the first two characters of the second group
        assert_eq!((g[3].disk, g[3].len), (6, 2));
    }

    /// The examples of RFC 2047, sections 2 and 8.
    #[test]
    fn encoded_words_of_the_standard() {
        assert_eq!(
            header_words("=?iso-8859-1?q?this=20is=20some=20text?="),
            "this is some text"
        );
        assert_eq!(
            header_words("(=?ISO-8859-1?Q?a?= =?ISO-8859-1?Q?b?=)"),
            "(ab)"
        );
        assert_eq!(header_words("(=?ISO-8859-1?Q?a?= b)"), "(a b)");
        assert_eq!(header_words("=?ISO-8859-1?Q?a_b?="), "a b");
    }

    #[test]
    fn flowed_lines_join() {
        let g = glyphs("one \r\ntwo \r\n\r\n> a \r\n> b\r\n-- \r\nx");
        let text: String = unflowed(&g, false).iter().map(|g| g.c).collect();
        assert_eq!(text, "one two \r\n\r\n> a b\r\n-- \r\nx");
    }
}
