//! Mail (RFC 5322, MIME): messages and mailboxes become one text of what was written; heads, boundaries and parts that are not read
//! stay in it, marked as aside.

use super::decode::Decoded;
use super::html;
use super::map::{Glyph, Woven, glyphs};
use super::transfer::{Transfer, characters, header_words, undo, unflowed};
use crate::span::{Span, Spanned};

/// Where another person begins to speak.
#[derive(Clone, PartialEq, Debug)]
pub struct Turn {
    /// From this offset in the text on.
    pub at: usize,
    /// A new message begins: nothing said before it stands any longer.
    pub fresh: bool,
    /// Who speaks, where that is said.
    pub observer: Option<Spanned<String>>,
}

/// A mail as one text.
pub(super) struct Mail {
    pub woven: Woven,
    /// What is no part of the reports.
    pub asides: Vec<Span>,
    pub turns: Vec<Turn>,
    pub notes: Vec<String>,
}

/// One field of a head.
#[derive(Debug)]
struct Field {
    name: String,
    value: String,
    /// Where the value stands.
    span: Span,
}

/// The mail that a text is, or `None`. `bytes` are those on disk.
pub(super) fn read(source: &Decoded, bytes: &[u8]) -> Option<Mail> {
    let text = &source.text;
    let start = text.len() - text.trim_start_matches(['\r', '\n', ' ', '\t']).len();
    let first = text[start..].lines().next()?;
    let boxed = envelope(first);
    if !boxed
        && !first
            .split_once(':')
            .is_some_and(|(n, _)| known(n) || n.starts_with("X-"))
    {
        return None;
    }
    let mut reader = Reader {
        source,
        bytes,
        out: Mail {
            woven: Woven::default(),
            asides: Vec::new(),
            turns: Vec::new(),
            notes: Vec::new(),
        },
    };
    let messages = messages(text, start, boxed);
    let (a, b) = *messages.first()?;
    if !is_mail(&head(text, a, b).0) {
        return None;
    }
    reader.aside(Span::new(0, messages[0].0));
    let mut done = messages[0].0;
    for (a, b) in messages {
        reader.aside(Span::new(done, a));
        reader.message(Span::new(a, b), true, 0);
        done = b;
    }
    reader.aside(Span::new(done, text.len()));
    Some(reader.out)
}

/// `From quill@section.example Tue Mar  5 22:31:00 2024`: the line before each message of a mailbox (RFC 4155).
fn envelope(line: &str) -> bool {
    let Some(rest) = line.strip_prefix("From ") else {
        return false;
    };
    let fields: Vec<&str> = rest.split_whitespace().collect();
    let clock = |f: &&str| f.len() == 8 && f.matches(':').count() == 2;
    let year = |f: &&str| f.len() == 4 && f.bytes().all(|b| b.is_ascii_digit());
    !rest.ends_with(':') && fields.len() >= 5 && fields.iter().any(clock) && fields.iter().any(year)
}

/// The messages of a mailbox, without their envelope lines; one message where it is none.
fn messages(text: &str, start: usize, boxed: bool) -> Vec<(usize, usize)> {
    if !boxed {
        return vec![(start, text.len())];
    }
    let mut found: Vec<(usize, usize)> = Vec::new();
    let mut blank = true;
    for (a, b, next) in line_ranges(text, start, text.len()) {
        let line = &text[a..b];
        if blank && envelope(line) {
            if let Some(last) = found.last_mut() {
                last.1 = a;
            }
            found.push((next, text.len()));
        }
        blank = line.trim().is_empty();
    }
    found
}

/// Lines of a stretch: beginning, end without its line end, beginning of the next.
fn line_ranges(
    text: &str,
    start: usize,
    end: usize,
) -> impl Iterator<Item = (usize, usize, usize)> + '_ {
    let mut at = start;
    std::iter::from_fn(move || {
        if at >= end {
            return None;
        }
        let rest = &text.as_bytes()[at..end];
        let (stop, next) = match memchr::memchr2(b'\n', b'\r', rest) {
            Some(i) if rest[i] == b'\r' && rest.get(i + 1) == Some(&b'\n') => (at + i, at + i + 2),
            Some(i) => (at + i, at + i + 1),
            None => (end, end),
        };
        let line = (at, stop, next);
        at = next;
        Some(line)
    })
}

/// Names of fields that begin a mail's head.
pub(super) fn known(name: &str) -> bool {
    let name = name.trim().to_ascii_lowercase();
    [
        "from",
        "to",
        "cc",
        "bcc",
        "subject",
        "date",
        "sent",
        "sender",
        "reply-to",
        "message-id",
        "in-reply-to",
        "references",
        "mime-version",
        "received",
        "return-path",
        "delivered-to",
        "user-agent",
        "organization",
        "organisation",
        "importance",
        "priority",
        "dkim-signature",
        "authentication-results",
        "precedence",
        "comments",
        "keywords",
        "newsgroups",
        "approved",
        "lines",
        "status",
        "resent-from",
        "resent-to",
        "resent-date",
        "attachments",
    ]
    .contains(&&*name)
        || ["content-", "list-", "x-", "thread-", "arc-"]
            .iter()
            .any(|p| name.starts_with(p))
}

/// The fields of a head, and where its body begins (after the blank line, or at the first line that is no field).
fn head(text: &str, start: usize, end: usize) -> (Vec<Field>, usize) {
    let mut fields: Vec<Field> = Vec::new();
    for (a, b, next) in line_ranges(text, start, end) {
        let line = &text[a..b];
        if line.trim().is_empty() {
            return (fields, next);
        }
        if line.starts_with([' ', '\t'])
            && let Some(last) = fields.last_mut()
        {
            last.value.push(' ');
            last.value.push_str(line.trim());
            last.span.end = b;
            continue;
        }
        let named = line.split_once(':').filter(|(n, _)| {
            let one_word = !n.is_empty() && n.bytes().all(|b| b.is_ascii_graphic());
            one_word && (known(n) || n.contains('-'))
        });
        let Some((name, value)) = named else {
            return (fields, a);
        };
        let from = b - value.trim_start().len();
        fields.push(Field {
            name: name.to_ascii_lowercase(),
            value: value.trim().to_string(),
            span: Span::new(from, b),
        });
    }
    (fields, end)
}

/// A head is a mail's where it has what no list of labels has.
fn is_mail(fields: &[Field]) -> bool {
    let has = |n: &str| fields.iter().any(|f| f.name == n);
    let machine = [
        "message-id",
        "mime-version",
        "received",
        "return-path",
        "content-type",
        "content-transfer-encoding",
    ]
    .iter()
    .filter(|n| has(n))
    .count();
    let address = fields.iter().any(|f| f.value.contains('@'));
    // `Tue, 5 Mar 2024 22:31:00 +0100`
    let dated = fields
        .iter()
        .any(|f| matches!(&*f.name, "date" | "sent") && (address || posted(&f.value)));
    machine >= 2
        || machine == 1 && fields.len() > 1
        || has("from") && (has("subject") || dated || has("to") && address)
        || has("subject") && (has("to") || dated)
}

/// A date as mail programs write it: a weekday and a comma before it, or an offset of four digits after it.
fn posted(value: &str) -> bool {
    let weekday = value.find(',').is_some_and(|i| (2..=9).contains(&i));
    let offset = value.split_whitespace().any(|w| {
        w.len() == 5 && w.starts_with(['+', '-']) && w[1..].bytes().all(|b| b.is_ascii_digit())
    });
    weekday || offset
}

/// The words after `name=` in a field such as `text/plain; charset="utf-8"`.
fn parameter(value: &str, name: &str) -> Option<String> {
    value.split(';').skip(1).find_map(|p| {
        let (key, v) = p.split_once('=')?;
        (key.trim().eq_ignore_ascii_case(name)
            || key.trim().eq_ignore_ascii_case(&format!("{name}*")))
        .then(|| v.trim().trim_matches('"').to_string())
    })
}

/// The person in a `From:` field, without the address.
pub(super) fn person(value: &str) -> Option<String> {
    let value = header_words(value);
    let name = match value.find('<') {
        Some(at) if value[at..].contains('@') => &value[..at],
        _ => match (value.find('('), value.find(')')) {
            // the old form: quill@section.example (R. Quill)
            (Some(a), Some(b)) if a < b && value[..a].contains('@') => &value[a + 1..b],
            _ => &value,
        },
    };
    let name = match name.find("[mailto:") {
        Some(at) => &name[..at],
        None => name,
    };
    let name = name.trim().trim_matches(['"', '\'', '*']).trim();
    (!name.is_empty() && !name.contains('@')).then(|| name.to_string())
}

struct Entity {
    fields: Vec<Field>,
    head: Span,
    body: Span,
}

impl Entity {
    fn of(text: &str, span: Span) -> Entity {
        let (fields, body) = head(text, span.start, span.end);
        Entity {
            fields,
            head: Span::new(span.start, body),
            body: Span::new(body, span.end),
        }
    }

    fn field(&self, name: &str) -> &str {
        self.fields
            .iter()
            .find(|f| f.name == name)
            .map_or("", |f| &f.value)
    }

    /// Its media type, lower case; plain text where none is said.
    fn media(&self) -> String {
        let m = self.field("content-type");
        let m = m
            .split(';')
            .next()
            .unwrap_or("")
            .trim()
            .to_ascii_lowercase();
        if m.is_empty() {
            "text/plain".to_string()
        } else {
            m
        }
    }

    fn transfer(&self) -> Transfer {
        match self
            .field("content-transfer-encoding")
            .trim()
            .to_ascii_lowercase()
            .as_str()
        {
            "quoted-printable" => Transfer::QuotedPrintable,
            "base64" => Transfer::Base64,
            _ => Transfer::Plain,
        }
    }

    /// True where it is text to be read.
    fn readable(&self) -> bool {
        let media = self.media();
        let name = parameter(self.field("content-disposition"), "filename")
            .or_else(|| parameter(self.field("content-type"), "name"))
            .unwrap_or_default()
            .to_ascii_lowercase();
        let by_name = [
            ".txt", ".csv", ".tsv", ".md", ".rst", ".json", ".jsonl", ".yaml", ".yml",
        ]
        .iter()
        .any(|e| name.ends_with(e));
        match media.as_str() {
            "text/calendar" | "text/vcard" | "text/x-vcard" | "text/css" | "text/rtf" => false,
            m if m.starts_with("text/") => true,
            "application/json"
            | "application/yaml"
            | "application/x-yaml"
            | "application/jsonl"
            | "application/x-ndjson"
            | "application/csv" => true,
            _ => by_name,
        }
    }
}

struct Reader<'s> {
    source: &'s Decoded,
    bytes: &'s [u8],
    out: Mail,
}

impl<'s> Reader<'s> {
    fn text(&self) -> &'s str {
        &self.source.text
    }

    fn copy(&mut self, span: Span) {
        let source = self.source;
        for g in glyphs(&source.text, &source.map, span) {
            self.out.woven.push(g);
        }
    }

    fn aside(&mut self, span: Span) {
        if span.is_empty() {
            return;
        }
        let from = self.out.woven.text.len();
        self.copy(span);
        let to = self.out.woven.text.len();
        self.out.asides.push(Span::new(from, to));
    }

    fn message(&mut self, span: Span, fresh: bool, depth: u8) {
        let entity = Entity::of(self.text(), span);
        let from = self.out.woven.text.len();
        let observer = entity
            .fields
            .iter()
            .find(|f| f.name == "from")
            .and_then(|f| {
                let name = person(&f.value)?;
                // the name's own place, where it stands there as it is
                let words = f.span.of(self.text());
                let place = match words.find(&name) {
                    Some(at) => Span::new(f.span.start + at, f.span.start + at + name.len()),
                    None => f.span,
                };
                let shift = |o: usize| from + (o - entity.head.start);
                Some(Spanned::new(
                    name,
                    Span::new(shift(place.start), shift(place.end)),
                ))
            });
        self.out.turns.push(Turn {
            at: from,
            fresh,
            observer,
        });
        self.entity(&entity, depth);
    }

    fn entity(&mut self, entity: &Entity, depth: u8) {
        self.aside(entity.head);
        let media = entity.media();
        let attached = entity.field("content-type");
        if media.starts_with("multipart/")
            && depth < 20
            && let Some(boundary) = parameter(attached, "boundary")
        {
            return self.multipart(entity, &media, &boundary, depth);
        }
        if media == "message/rfc822" && depth < 20 && entity.transfer() == Transfer::Plain {
            return self.message(entity.body, false, depth + 1);
        }
        if entity.readable() {
            self.leaf(entity, &media);
        } else {
            self.aside(entity.body);
        }
    }

    fn multipart(&mut self, whole: &Entity, media: &str, boundary: &str, depth: u8) {
        let text = self.text();
        let opening = format!("--{boundary}");
        let closing = format!("--{boundary}--");
        // preamble, parts and epilogue
        let mut parts: Vec<(Span, Entity)> = Vec::new();
        let mut edge: Option<(usize, usize)> = None;
        let mut preamble = whole.body.end;
        let mut end = whole.body.end;
        for (a, b, next) in line_ranges(text, whole.body.start, whole.body.end) {
            let line = text[a..b].trim_end();
            if line != opening && line != closing {
                continue;
            }
            match edge {
                None => preamble = a,
                Some((from, body)) => {
                    parts.push((Span::new(from, body), Entity::of(text, Span::new(body, a))))
                }
            }
            edge = Some((a, next));
            if line == closing {
                end = a;
                edge = None;
                break;
            }
        }
        if let Some((from, body)) = edge {
            parts.push((
                Span::new(from, body),
                Entity::of(text, Span::new(body, whole.body.end)),
            ));
        }
        self.aside(Span::new(whole.body.start, preamble));
        // of alternatives one is read: the plain text, else the page
        let chosen = (media == "multipart/alternative").then(|| {
            let rank = |e: &Entity| match e.media().as_str() {
                _ if e.body.of(text).trim().is_empty() => 9,
                "text/plain" => 0,
                m if m.starts_with("multipart/") => 1,
                "text/html" => 2,
                m if m.starts_with("text/") => 3,
                _ => 8,
            };
            (0..parts.len()).min_by_key(|i| rank(&parts[*i].1))
        });
        for (n, (edge, part)) in parts.iter().enumerate() {
            self.aside(*edge);
            match chosen {
                Some(c) if c != Some(n) => self.aside(part.head.cover(part.body)),
                _ => self.entity(part, depth + 1),
            }
        }
        self.aside(Span::new(end, whole.body.end));
    }

    fn leaf(&mut self, entity: &Entity, media: &str) {
        let kind = entity.field("content-type");
        let flowed = parameter(kind, "format").is_some_and(|f| f.eq_ignore_ascii_case("flowed"));
        let transfer = entity.transfer();
        let charset = parameter(kind, "charset");
        let foreign =
            charset.is_some() && self.source.notes.iter().any(|n| n.starts_with("not UTF-8"));
        if transfer == Transfer::Plain && !flowed && !foreign && media != "text/html" {
            return self.copy(entity.body);
        }
        let source = self.source;
        let raw = glyphs(&source.text, &source.map, entity.body);
        let mut found: Vec<Glyph> = if transfer == Transfer::Plain && !foreign {
            raw.collect()
        } else {
            let carried = undo(transfer, raw, self.bytes);
            let (found, name) = characters(&carried, charset.as_deref());
            if foreign && transfer == Transfer::Plain {
                self.out
                    .notes
                    .push(format!("read as {name}, as the mail says"));
            }
            found
        };
        if media == "text/html" {
            found = html::plain(&found);
        } else if flowed {
            let drop = parameter(kind, "delsp").is_some_and(|d| d.eq_ignore_ascii_case("yes"));
            found = unflowed(&found, drop);
        }
        // what no text holds
        found.retain(|g| g.c != '\0');
        for g in &found {
            self.out.woven.push(*g);
        }
        // the next boundary begins a line of its own
        if !self.out.woven.text.ends_with(['\n', '\r']) {
            let at = source.map.on_disk(entity.body.end);
            self.out.woven.push(Glyph {
                c: '\n',
                disk: at,
                len: 0,
            });
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_person_without_the_address() {
        for (field, name) in [
            ("R. Quill <quill@section.example>", Some("R. Quill")),
            ("\"Quill, R.\" <quill@section.example>", Some("Quill, R.")),
            ("quill@section.example (R. Quill)", Some("R. Quill")),
            (
                "=?utf-8?Q?J=C3=B8rn_Vale?= <v@section.example>",
                Some("Jørn Vale"),
            ),
            ("quill@section.example", None),
        ] {
            assert_eq!(person(field).as_deref(), name, "{field}");
        }
    }

    #[test]
    fn labels_of_a_report_are_no_head() {
        for text in [
            "Date: 2024 Mar 5\nObserver: R. Quill\n\nX",
            "From: Skarn Head\nDate: 2024 Mar 5\n\nX",
            "Object: X 1\nDate: 2024 Mar 5\n",
        ] {
            assert!(!is_mail(&head(text, 0, text.len()).0), "{text}");
        }
    }
}
