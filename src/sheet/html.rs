//! HTML: a page or a mail's HTML part as plain lines, and what is left of HTML in a text blanked, so that a tag is never a word.

use super::map::Glyph;

/// Tags that part words; all others stand inside them.
const PARTING: &[&str] = &[
    "p",
    "br",
    "div",
    "table",
    "tbody",
    "thead",
    "tfoot",
    "tr",
    "td",
    "th",
    "ul",
    "ol",
    "li",
    "dl",
    "dt",
    "dd",
    "h1",
    "h2",
    "h3",
    "h4",
    "h5",
    "h6",
    "hr",
    "pre",
    "blockquote",
    "body",
    "html",
    "head",
    "section",
    "article",
    "center",
    "caption",
];

/// Tags inside a line.
const INLINE: &[&str] = &[
    "a", "b", "i", "u", "em", "strong", "span", "font", "small", "big", "tt", "code", "sup", "sub",
    "abbr", "time", "s", "mark",
];

/// True where a whole text is a page.
pub(super) fn is_page(text: &str) -> bool {
    let start = text.trim_start();
    let head: String = start.chars().take(16).collect::<String>().to_lowercase();
    ["<!doctype html", "<html", "<head", "<body", "<table"]
        .iter()
        .any(|t| head.starts_with(t))
}

/// Blanks comments and tags in a text, byte for byte, line ends kept: offsets and lines stay what they were.
pub(super) fn blank_remains(text: &mut String) {
    let mut blanks: Vec<(usize, usize)> = Vec::new();
    let mut from = 0;
    let mut open = false;
    while let Some(at) = memchr::memchr(b'<', &text.as_bytes()[from..]).map(|i| from + i) {
        let rest = &text[at..];
        let end = if rest.starts_with("<!--") && !open {
            let end = rest.find("-->").map(|e| at + e + 3);
            open = end.is_none();
            end
        } else {
            tag(rest).and_then(|t| {
                // marks of hours and minutes are read as they are
                let mark = matches!(t.name.as_str(), "sup" | "sub");
                let known = PARTING.contains(&&*t.name) || INLINE.contains(&&*t.name);
                (known && !mark).then_some(at + t.len)
            })
        };
        match end {
            Some(end) => {
                blanks.push((at, end));
                from = end;
            }
            None => from = at + 1,
        }
    }
    if blanks.is_empty() {
        return;
    }
    let mut out = String::with_capacity(text.len());
    let mut done = 0;
    for (a, b) in blanks {
        out.push_str(&text[done..a]);
        for c in text[a..b].chars() {
            if c == '\n' || c == '\r' {
                out.push(c);
            } else {
                // one blank a character and as many bytes, so that columns stay too
                out.push_str([" ", "\u{a0}", "\u{2003}", "\u{2003} "][c.len_utf8() - 1]);
            }
        }
        done = b;
    }
    out.push_str(&text[done..]);
    *text = out;
}

struct Tag {
    name: String,
    closing: bool,
    len: usize,
}

/// `<name …>` or `</name>` at the beginning of a text.
fn tag(text: &str) -> Option<Tag> {
    let inner = text.strip_prefix('<')?;
    let closing = inner.starts_with('/');
    let inner = inner.strip_prefix('/').unwrap_or(inner);
    let name: String = inner
        .chars()
        .take(12)
        .take_while(char::is_ascii_alphanumeric)
        .collect::<String>()
        .to_ascii_lowercase();
    let after = inner.get(name.len()..)?;
    if !name.starts_with(|c: char| c.is_ascii_lowercase())
        || !after.starts_with(['>', ' ', '/', '\n', '\r', '\t'])
    {
        return None;
    }
    let mut quote = None;
    for (i, c) in after.char_indices().take(2000) {
        match (quote, c) {
            (Some(q), c) if q == c => quote = None,
            (None, '"' | '\'') => quote = Some(c),
            (None, '>') => {
                let len = text.len() - after.len() + i + 1;
                return Some(Tag { name, closing, len });
            }
            (None, '<') => return None,
            _ => {}
        }
    }
    None
}

/// A page as plain lines: paragraphs, rows of tables with their cells between bars, entities as characters.
pub(super) fn plain(all: &[Glyph]) -> Vec<Glyph> {
    let source: String = all.iter().map(|g| g.c).collect();
    let mut page = Page {
        out: Vec::with_capacity(all.len()),
        preformatted: false,
        cell: false,
        tables: Vec::new(),
    };
    // glyph i stands at byte `at`
    let (mut i, mut at) = (0, 0);
    while let Some(g) = all.get(i) {
        let rest = &source[at..];
        let used = if g.c == '<' {
            page.markup(rest, g)
        } else if g.c == '&' {
            entity(rest).map(|(c, len)| {
                page.word(Glyph {
                    c,
                    disk: g.disk,
                    len: all[i + len - 1].disk + all[i + len - 1].len - g.disk,
                });
                len
            })
        } else {
            None
        };
        match used {
            Some(bytes) => {
                let chars = rest[..bytes].chars().count();
                i += chars;
                at += bytes;
            }
            None => {
                page.word(*g);
                i += 1;
                at += g.c.len_utf8();
            }
        }
    }
    page.out
}

struct Page {
    out: Vec<Glyph>,
    preformatted: bool,
    cell: bool,
    /// The open tables: true where one holds data, false where it only lays out the page.
    tables: Vec<bool>,
}

impl Page {
    fn put(&mut self, c: char, at: &Glyph) {
        self.out.push(Glyph { c, ..*at });
    }

    fn word(&mut self, g: Glyph) {
        if !self.preformatted && matches!(g.c, ' ' | '\n' | '\r' | '\t') {
            if !matches!(self.out.last().map(|g| g.c), None | Some(' ' | '\n')) {
                self.out.push(Glyph { c: ' ', ..g });
            }
        } else {
            self.out.push(g);
        }
    }

    fn newline(&mut self, at: &Glyph, wanted: usize) {
        while self.out.last().is_some_and(|g| g.c == ' ') {
            self.out.pop();
        }
        let there = self.out.iter().rev().take_while(|g| g.c == '\n').count();
        if !self.out.is_empty() {
            for _ in there..wanted {
                self.put('\n', at);
            }
        }
    }

    /// Takes in a tag or a comment; how many bytes it holds.
    fn markup(&mut self, rest: &str, g: &Glyph) -> Option<usize> {
        if rest.starts_with("<!--") {
            return Some(rest.find("-->").map_or(rest.len(), |e| e + 3));
        }
        if rest.starts_with("<!") || rest.starts_with("<?") {
            return rest.find('>').map(|e| e + 1);
        }
        let tag = tag(rest)?;
        let data = self.tables.last().copied().unwrap_or(false);
        match (tag.name.as_str(), tag.closing) {
            ("script" | "style" | "head", false) => {
                let close = format!("</{}>", tag.name);
                let end = rest.to_ascii_lowercase().find(&close);
                return Some(end.map_or(tag.len, |e| e + close.len()));
            }
            ("table", false) => {
                self.newline(g, 2);
                self.tables.push(holds_data(&rest[tag.len..]));
                self.cell = false;
            }
            ("table", true) => {
                self.tables.pop();
                self.cell = false;
                self.newline(g, 2);
            }
            ("tr", false) if data => {
                self.newline(g, 1);
                self.put('|', g);
                self.cell = false;
            }
            ("td" | "th", false) if data => {
                if self.cell {
                    self.put('|', g);
                }
                self.put(' ', g);
                self.cell = true;
            }
            ("td" | "th", true) if data => {
                self.put(' ', g);
                self.put('|', g);
                self.cell = false;
            }
            ("tr", true) if data => {
                if self.cell {
                    self.put('|', g);
                }
                self.cell = false;
                self.newline(g, 1);
            }
            (name, _) if PARTING.contains(&name) && data && self.cell => {
                self.word(Glyph { c: ' ', ..*g });
            }
            ("br", _) => self.put('\n', g),
            ("pre", closing) => {
                self.newline(g, 2);
                self.preformatted = !closing;
            }
            (
                "p" | "h1" | "h2" | "h3" | "h4" | "h5" | "h6" | "hr" | "ul" | "ol" | "blockquote",
                _,
            ) => self.newline(g, 2),
            ("sup", false)
                if rest[tag.len..]
                    .starts_with(|c: char| c.is_ascii_digit() || matches!(c, '+' | '-' | '−')) =>
            {
                self.put('^', g)
            }
            (name, _) if PARTING.contains(&name) => self.newline(g, 1),
            _ => {}
        }
        Some(tag.len)
    }
}

/// A table holds data where no other table stands in it and some row has two cells.
fn holds_data(inside: &str) -> bool {
    let near = (0..=inside.len().min(1 << 18))
        .rev()
        .find(|i| inside.is_char_boundary(*i));
    let lower = inside[..near.unwrap_or(0)].to_ascii_lowercase();
    let end = lower.find("</table").unwrap_or(lower.len());
    let own = &lower[..end];
    !own.contains("<table")
        && own.split("<tr").any(|row| {
            row.matches("<td").count() + row.matches("<th>").count() + row.matches("<th ").count()
                >= 2
        })
}

/// An entity at the beginning of a text: its character and its length in bytes.
fn entity(text: &str) -> Option<(char, usize)> {
    let end = text.as_bytes().iter().take(12).position(|b| *b == b';')?;
    let name = text.get(1..end)?;
    let c = if let Some(number) = name.strip_prefix('#') {
        let point = match number.strip_prefix(['x', 'X']) {
            Some(hex) => u32::from_str_radix(hex, 16).ok()?,
            None => number.parse().ok()?,
        };
        char::from_u32(point).filter(|c| !c.is_control())?
    } else {
        NAMED.iter().find(|(n, _)| *n == name)?.1
    };
    Some((c, end + 1))
}

/// The named entities that stand in reports and in the names of people (HTML 4.01, section 24).
const NAMED: &[(&str, char)] = &[
    ("nbsp", ' '),
    ("amp", '&'),
    ("lt", '<'),
    ("gt", '>'),
    ("quot", '"'),
    ("apos", '\''),
    ("deg", '°'),
    ("ordm", 'º'),
    ("minus", '−'),
    ("ndash", '–'),
    ("mdash", '—'),
    ("plusmn", '±'),
    ("prime", '′'),
    ("Prime", '″'),
    ("alpha", 'α'),
    ("delta", 'δ'),
    ("lsquo", '‘'),
    ("rsquo", '’'),
    ("ldquo", '“'),
    ("rdquo", '”'),
    ("middot", '·'),
    ("times", '×'),
    ("hellip", '…'),
    ("thinsp", '\u{2009}'),
    ("ensp", '\u{2002}'),
    ("emsp", '\u{2003}'),
    ("asymp", '≈'),
    ("auml", 'ä'),
    ("ouml", 'ö'),
    ("uuml", 'ü'),
    ("Auml", 'Ä'),
    ("Ouml", 'Ö'),
    ("Uuml", 'Ü'),
    ("szlig", 'ß'),
    ("aacute", 'á'),
    ("eacute", 'é'),
    ("iacute", 'í'),
    ("oacute", 'ó'),
    ("uacute", 'ú'),
    ("Eacute", 'É'),
    ("agrave", 'à'),
    ("egrave", 'è'),
    ("igrave", 'ì'),
    ("ograve", 'ò'),
    ("ugrave", 'ù'),
    ("Agrave", 'À'),
    ("acirc", 'â'),
    ("ecirc", 'ê'),
    ("icirc", 'î'),
    ("ocirc", 'ô'),
    ("ucirc", 'û'),
    ("atilde", 'ã'),
    ("otilde", 'õ'),
    ("ntilde", 'ñ'),
    ("ccedil", 'ç'),
    ("euml", 'ë'),
    ("iuml", 'ï'),
    ("oslash", 'ø'),
    ("aring", 'å'),
    ("aelig", 'æ'),
];

#[cfg(test)]
mod tests {
    use super::*;

    fn read(text: &str) -> String {
        let one = |(i, c): (usize, char)| Glyph {
            c,
            disk: i,
            len: c.len_utf8(),
        };
        let all: Vec<Glyph> = text.char_indices().map(one).collect();
        plain(&all).iter().map(|g| g.c).collect()
    }

    #[test]
    fn a_page_becomes_lines() {
        assert_eq!(
            read("<html><head><title>t</title></head><body><p>a\nb<sup>h</sup>&deg;</p><!-- c --><p>d<br>e</p></body></html>").trim(),
            "a bh°\n\nd\ne"
        );
        assert_eq!(
            read(
                "<table>\n<tr><th>A</th><th>B</th></tr>\n<tr>\n<td></td>\n<td>2</td></tr></table>"
            )
            .trim(),
            "| A | B |\n|   |  2 |"
        );
    }

    #[test]
    fn remains_are_blanked_in_place() {
        let mut text = "<p>a <!-- é\n b --> < 5 <quill@x.example> <3".to_string();
        let before = text.len();
        blank_remains(&mut text);
        assert_eq!(text.len(), before);
        assert_eq!(
            text.trim(),
            "a      \u{a0}\n       < 5 <quill@x.example> <3"
        );
    }
}
