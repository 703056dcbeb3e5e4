//! What carries reports: the bytes on disk at a span carry its digits, lines are those on disk, and who speaks is who wrote.
//!
//! The encodings are undone here by hand as RFC 2045 tells, apart from the crate's own code; all values are invented.

use colure::reading;
use colure::report::Report;
use colure::sheet::Sheet;

fn read(bytes: &[u8]) -> (Sheet, Vec<Report>) {
    let sheet = Sheet::decode("mail".to_string(), bytes).unwrap();
    let reports = reading::read(&sheet);
    (sheet, reports)
}

/// The bytes of a span on disk.
fn on_disk<'b>(sheet: &Sheet, r: &Report, bytes: &'b [u8]) -> &'b [u8] {
    let span = sheet.on_disk(r.position.span);
    &bytes[span.start..span.end]
}

#[test]
fn quoted_printable_spans_lie_on_disk() {
    let mail = "From: R. Quill <quill@section.example>\r\nContent-Type: text/plain; charset=iso-8859-1\r\n\
        Content-Transfer-Encoding: quoted-printable\r\n\r\n\
        =E9t=E9: X 1: RA 17h40m1=\r\n2.3s, Dec -24=B018'33=22 (J=\r\n2000)\r\n\r\nX 2: RA 18 41 12.3, Dec +24 18 33 (J2000)=\r\n";
    let (sheet, reports) = read(mail.as_bytes());
    assert_eq!(reports.len(), 2);
    assert_eq!(
        on_disk(&sheet, &reports[0], mail.as_bytes()),
        b"17h40m1=\r\n2.3s, Dec -24=B018'33=22"
    );
    assert_eq!(
        on_disk(&sheet, &reports[1], mail.as_bytes()),
        b"18 41 12.3, Dec +24 18 33"
    );
    // lines are those of the file: the first position begins on the fifth, the second on the ninth
    let line = |r: &Report| sheet.line_column(r.position.span.start).0;
    assert_eq!((line(&reports[0]), line(&reports[1])), (5, 9));
    assert_eq!(
        sheet.line_span(6).of(&sheet.text),
        "2.3s, Dec -24°18'33\" (J"
    );
    assert_eq!(
        reports[0].observer.as_ref().map(|o| &*o.value),
        Some("R. Quill")
    );
    let observer = reports[0].observer.as_ref().unwrap().span;
    assert_eq!(observer.of(&sheet.text), "R. Quill");
}

/// Base64 by the alphabet of RFC 2045, table 1.
fn base64(bytes: &[u8]) -> String {
    const ALPHABET: &[u8] = b"ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/";
    let mut out = String::new();
    for group in bytes.chunks(3) {
        let bits =
            group.iter().fold(0u32, |b, x| b << 8 | u32::from(*x)) << (8 * (3 - group.len()));
        for n in 0..4 {
            out.push(if n <= group.len() {
                ALPHABET[(bits >> (18 - 6 * n)) as usize & 63] as char
            } else {
                '='
            });
        }
    }
    out
}

#[test]
fn base64_spans_lie_within_their_groups() {
    let words = "Bonjour,\r\n\r\nX 1: RA 17 40 12.3, Dec −24 18 33 (J2000)\r\n";
    let start = words.find("17 40").unwrap();
    let end = words.find(" (J").unwrap();
    let coded = base64(words.as_bytes());
    for width in [76, 20, 5] {
        let folded: Vec<&str> = coded
            .as_bytes()
            .chunks(width)
            .map(|c| std::str::from_utf8(c).unwrap())
            .collect();
        let head = "From: R. Quill <quill@section.example>\nMIME-Version: 1.0\nContent-Type: text/plain; charset=utf-8\nContent-Transfer-Encoding: base64\n\n";
        let mail = format!("{head}{}\n", folded.join("\n"));
        let (sheet, reports) = read(mail.as_bytes());
        assert_eq!(reports.len(), 1, "width {width}");
        let span = sheet.on_disk(reports[0].position.span);
        // byte n of the words lies in characters 4 n / 3 and the one after it; a line end follows each `width` of them
        let place = |c: usize| head.len() + c + c / width;
        assert_eq!(span.start, place(start / 3 * 4 + start % 3));
        let last = end - 1;
        assert_eq!(span.end, place(last / 3 * 4 + last % 3 + 1) + 1);
        let (line, _) = sheet.line_column(reports[0].position.span.start);
        assert_eq!(line, 6 + (start / 3 * 4 + start % 3) / width);
    }
}

#[test]
fn who_speaks() {
    let mail = "From: M. Vane <vane@section.example>\nTo: editor@section.example\nSubject: two suspects\n\n\
        X 1: RA 17 40 12.3, Dec -24 18 33 (J2000)\n\n\
        On Wed, 6 Mar 2024 at 08:15, R. Quill <quill@section.example> wrote:\n\
        > X 2: RA 18 41 12.3, Dec +24 18 33 (J2000)\n\n\
        X 3: RA 19 41 12.3, Dec +24 18 33 (J2000)\n";
    let (_, reports) = read(mail.as_bytes());
    let who: Vec<_> = reports
        .iter()
        .map(|r| r.observer.as_ref().map(|o| o.value.as_str()))
        .collect();
    assert_eq!(who, [Some("M. Vane"), Some("R. Quill"), Some("M. Vane")]);
}

#[test]
fn a_sheet_loses_nothing_and_keeps_its_lines() {
    // tags and comments are blanked in place
    let text = "<p>X 1: RA 17 40 12.3, Dec -24 18 33 (J2000)</p>\n<!-- é\nold -->\nX 2: RA 18 41 12.3, Dec +24 18 33 (J2000)\n";
    let (sheet, reports) = read(text.as_bytes());
    assert_eq!(sheet.text.len(), text.len());
    assert_eq!(
        on_disk(&sheet, &reports[0], text.as_bytes()),
        b"17 40 12.3, Dec -24 18 33"
    );
    assert_eq!(sheet.line_column(reports[1].position.span.start), (4, 9));
    assert_eq!(
        on_disk(&sheet, &reports[1], text.as_bytes()),
        b"18 41 12.3, Dec +24 18 33"
    );
}

#[test]
fn broken_mail_and_broken_lists_do_no_harm() {
    for text in [
        "From: a@b.example\nSubject: x\nContent-Type: multipart/mixed; boundary=b\n\n--b\n--b\n\n--b--",
        "From: a@b.example\nSubject: x\nContent-Type: multipart/mixed; boundary=\"\"\n\n----\n",
        "From: a@b.example\nSubject: =?utf-8?B?=?=\nContent-Transfer-Encoding: base64\n\n=A=B=C\n====",
        "From: a@b.example\nSubject: x\nContent-Transfer-Encoding: quoted-printable\n\n=\n=4\n=G1 =",
        "From: a@b.example\nSubject: x\nContent-Type: text/html\n\n<table><tr><td>&#99999999;&;&amp<td",
        "From a b 10:10:10 2024\n\nFrom a b c 10:10:10 2024\n",
        "[{\"ra\": \"1 2 3\", \"dec\": ",
        "{\"ra\": {\"dec\": [[[[{",
        "- ra: {dec\n- dec:\n-\n- : -",
        "- ra: \"17\n  dec: '",
        "<!-- <!-- <p <td a='",
        "-- ",
        "From:",
    ] {
        let (sheet, _) = read(text.as_bytes());
        for offset in 0..=sheet.text.len() {
            let _ = sheet.line_column(offset);
        }
    }
}
