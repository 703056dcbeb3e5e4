//! Bytes to text, with the way back: which bytes on disk carry which words.

use super::map::Map;
use std::fmt;

/// Why bytes are no sheet.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum SheetError {
    /// A picture, an archive, a program: bytes that no encoding of text explains.
    Binary,
}

impl fmt::Display for SheetError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("this is no text: it holds bytes that no encoding of text uses; give a text, CSV, TSV, Markdown or mail file")
    }
}

impl std::error::Error for SheetError {}

/// A decoded text.
pub(super) struct Decoded {
    pub text: String,
    pub notes: Vec<String>,
    pub map: Map,
}

pub(super) fn decode(bytes: &[u8]) -> Result<Decoded, SheetError> {
    match bytes {
        [0xef, 0xbb, 0xbf, rest @ ..] => match std::str::from_utf8(rest) {
            Ok(text) => checked(text.to_string(), Map::shifted(3), None),
            Err(_) => windows_1252(bytes),
        },
        [0xff, 0xfe, 0, 0, ..] => wide(bytes, 4, 4, u32_le, "UTF-32"),
        [0, 0, 0xfe, 0xff, ..] => wide(bytes, 4, 4, u32_be, "UTF-32"),
        [0xff, 0xfe, ..] => wide(bytes, 2, 2, u16_le, "UTF-16"),
        [0xfe, 0xff, ..] => wide(bytes, 2, 2, u16_be, "UTF-16"),
        _ => {
            // UTF-16 without its mark: every other byte of plain text is zero
            let sample = &bytes[..bytes.len().min(4096)];
            let zeros = |from: usize| {
                sample
                    .iter()
                    .skip(from)
                    .step_by(2)
                    .filter(|b| **b == 0)
                    .count()
            };
            let half = sample.len() / 2;
            if half > 8 && zeros(1) * 10 > half * 7 && zeros(0) * 10 < half {
                return wide(bytes, 0, 2, u16_le, "UTF-16");
            }
            if half > 8 && zeros(0) * 10 > half * 7 && zeros(1) * 10 < half {
                return wide(bytes, 0, 2, u16_be, "UTF-16");
            }
            match std::str::from_utf8(bytes) {
                Ok(text) => checked(text.to_string(), Map::shifted(0), None),
                Err(_) => windows_1252(bytes),
            }
        }
    }
}

fn windows_1252(bytes: &[u8]) -> Result<Decoded, SheetError> {
    let mut text = String::with_capacity(bytes.len() + bytes.len() / 8);
    let mut map = Map::default();
    for (i, &b) in bytes.iter().enumerate() {
        let one = [b];
        let (c, _) = encoding_rs::WINDOWS_1252.decode_without_bom_handling(&one);
        map.push(text.len(), i, c.len(), 1);
        text.push_str(&c);
    }
    checked(
        text,
        map,
        Some("not UTF-8: read as Windows-1252".to_string()),
    )
}

fn u16_le(b: &[u8]) -> u32 {
    u32::from(u16::from_le_bytes([b[0], b[1]]))
}
fn u16_be(b: &[u8]) -> u32 {
    u32::from(u16::from_be_bytes([b[0], b[1]]))
}
fn u32_le(b: &[u8]) -> u32 {
    u32::from_le_bytes([b[0], b[1], b[2], b[3]])
}
fn u32_be(b: &[u8]) -> u32 {
    u32::from_be_bytes([b[0], b[1], b[2], b[3]])
}

/// Encodings of fixed units of 2 or 4 bytes; broken surrogates become U+FFFD.
fn wide(
    bytes: &[u8],
    skip: usize,
    unit: usize,
    value: fn(&[u8]) -> u32,
    name: &str,
) -> Result<Decoded, SheetError> {
    let mut text = String::with_capacity(bytes.len() / unit);
    let mut map = Map::default();
    let mut at = skip;
    while at + unit <= bytes.len() {
        let first = value(&bytes[at..]);
        let mut used = unit;
        let mut point = first;
        if unit == 2 && (0xd800..0xdc00).contains(&first) && at + 4 <= bytes.len() {
            let second = value(&bytes[at + 2..]);
            if (0xdc00..0xe000).contains(&second) {
                point = 0x10000 + ((first - 0xd800) << 10) + (second - 0xdc00);
                used = 4;
            }
        }
        let c = char::from_u32(point).unwrap_or('\u{fffd}');
        map.push(text.len(), at, c.len_utf8(), used);
        text.push(c);
        at += used;
    }
    if text.is_empty() {
        map = Map::shifted(skip);
    }
    checked(text, map, Some(format!("read as {name}")))
}

/// Refuses what is no text: zeros, or many control characters.
fn checked(text: String, map: Map, note: Option<String>) -> Result<Decoded, SheetError> {
    let sample: Vec<char> = text.chars().take(8192).collect();
    let controls = sample
        .iter()
        .filter(|c| {
            c.is_control() && !matches!(c, '\n' | '\r' | '\t' | '\u{c}' | '\u{1b}' | '\u{b}')
        })
        .count();
    if text.contains('\0') || controls * 20 > sample.len() {
        return Err(SheetError::Binary);
    }
    Ok(Decoded {
        text,
        notes: note.into_iter().collect(),
        map,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_encoding_leads_back_to_its_bytes() {
        let text = "März: −5° 12′ 𝄞 Ω end";
        let utf16: Vec<u8> = [0xff, 0xfe]
            .into_iter()
            .chain(text.encode_utf16().flat_map(u16::to_le_bytes))
            .collect();
        let utf32: Vec<u8> = [0, 0, 0xfe, 0xff]
            .into_iter()
            .chain(text.chars().flat_map(|c| u32::from(c).to_be_bytes()))
            .collect();
        let bom: Vec<u8> = [0xef, 0xbb, 0xbf].into_iter().chain(text.bytes()).collect();
        for bytes in [utf16.clone(), utf32, bom] {
            let d = decode(&bytes).unwrap();
            assert_eq!(d.text, text);
            // the word "end" is found where its bytes are
            let at = d.text.find("end").unwrap();
            let disk = d.map.on_disk(at);
            assert_eq!(
                bytes.get(disk..).unwrap().iter().find(|b| **b != 0),
                Some(&b'e')
            );
            assert_eq!(d.map.on_disk(d.text.len()), bytes.len());
        }
        let latin = decode(b"M\xe4rz 12\xb0N x").unwrap();
        assert_eq!(latin.text, "März 12°N x");
        assert_eq!(latin.map.on_disk(latin.text.find('x').unwrap()), 10);
        assert!(decode(b"\x00\x01\x02PNG\x00\x00\x07\x08").is_err());
        // UTF-16 without its mark
        let bare = decode(&utf16[2..]).unwrap();
        assert_eq!(bare.text.chars().next(), Some('M'));
    }
}
