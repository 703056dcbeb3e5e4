//! The marks of hours, degrees, minutes and seconds, in every form they are typed, printed and broken.

use super::number::{Parsed, no};
use super::text::Text;
use super::words::{Word, says};
use crate::report::Mark;

fn any_of<'a>(input: Text<'a>, forms: &[&str]) -> Option<Text<'a>> {
    let s = input.as_str();
    forms
        .iter()
        .find(|f| s.starts_with(**f))
        .map(|f| input.skip(f.len()))
}

/// A letter or abbreviation that no other letter follows. The point of `h.` is left to decimals after it: `h.5`.
fn letters<'a>(input: Text<'a>, forms: &[&str]) -> Option<Text<'a>> {
    let s = input.as_str();
    forms.iter().find_map(|f| {
        let head = s.get(..f.len())?;
        let next = s[f.len()..].chars().next();
        let goes_on =
            |c: char| c.is_alphabetic() || c == '_' || f.ends_with('.') && c.is_ascii_digit();
        (head.eq_ignore_ascii_case(f) && !next.is_some_and(goes_on)).then(|| input.skip(f.len()))
    })
}

/// `h`, `hr`, `hrs`, `u` (Dutch), `ʰ`, `^h`, `$^{h}$`, or the word in any of the languages.
pub fn hour_mark(input: Text<'_>) -> Parsed<'_, Mark> {
    let rest = any_of(
        input,
        &["ʰ", "$^{h}$", "$^h$", "^{h}", "^h", "<sup>h</sup>"],
    )
    .or_else(|| letters(input, &["hrs.", "hrs", "hr.", "hr", "h.", "h", "u"]))
    .or_else(|| says(input, Word::Hours));
    rest.map_or_else(|| no(input), |r| Ok((r, Mark::Hour)))
}

/// `°`, `º`, `˚`, `d`, `deg`, `&deg;`, the letter `o` between digits, or the word in any of the languages.
pub fn degree_mark(input: Text<'_>) -> Parsed<'_, Mark> {
    let rest = any_of(
        input,
        &[
            "°",
            "º",
            "˚",
            "∘",
            "&deg;",
            "&#176;",
            "&#xb0;",
            "ᵈ",
            "$^\\circ$",
            "$^{\\circ}$",
            "^d",
            "^{d}",
            "^\\circ",
            "^{\\circ}",
            "ᵒ",
        ],
    )
    .or_else(|| letters(input, &["deg.", "deg", "d"]))
    .or_else(|| says(input, Word::Degrees))
    .or_else(|| {
        // the letter o or a star for °: only directly between digits
        let r = any_of(input, &["o", "*"])?;
        (input.before().is_some_and(|c| c.is_ascii_digit())
            && r.peek().is_some_and(|c| c.is_ascii_digit() || c == '.'))
        .then_some(r)
    });
    rest.map_or_else(|| no(input), |r| Ok((r, Mark::Degree)))
}

/// The letter `m`, `min`, `ᵐ`, `^m`, or the word.
pub fn minute_letter(input: Text<'_>) -> Parsed<'_, Mark> {
    let rest = any_of(
        input,
        &["ᵐ", "$^{m}$", "$^m$", "^m", "^{m}", "<sup>m</sup>"],
    )
    .or_else(|| letters(input, &["mins", "min.", "min", "m"]))
    .or_else(|| says(input, Word::Minutes));
    rest.map_or_else(|| no(input), |r| Ok((r, Mark::Minute)))
}

/// The letter `s`, `sec`, `ˢ`, `^s`, or the word.
pub fn second_letter(input: Text<'_>) -> Parsed<'_, Mark> {
    let rest = any_of(
        input,
        &["ˢ", "$^{s}$", "$^s$", "^s", "^{s}", "<sup>s</sup>"],
    )
    .or_else(|| letters(input, &["secs", "sec.", "sec", "s"]))
    .or_else(|| says(input, Word::Seconds));
    rest.map_or_else(|| no(input), |r| Ok((r, Mark::Second)))
}

/// A double prime in any form, two primes included.
pub fn double_prime(input: Text<'_>) -> Parsed<'_, Mark> {
    let rest = any_of(
        input,
        &[
            "\"\"", "\"", "″", "”", "“", "„", "''", "′′", "’’", "‘‘", "``", "´´", "&Prime;",
            "&quot;", "&#34;", "&#8243;", "&#x2033;", "&rdquo;", "ʺ", "＂",
        ],
    )
    .or_else(|| letters(input, &["arcsecs", "arcsec.", "arcsec", "asec"]))
    .or_else(|| says(input, Word::Arcseconds));
    rest.map_or_else(|| no(input), |r| Ok((r, Mark::DoublePrime)))
}

/// A single prime in any form; not half of a double one.
pub fn prime(input: Text<'_>) -> Parsed<'_, Mark> {
    if double_prime(input).is_ok() {
        return no(input);
    }
    let rest = any_of(
        input,
        &[
            "'", "′", "’", "‘", "´", "`", "&prime;", "&#39;", "&#8242;", "&#x2032;", "&apos;",
            "&rsquo;", "ʹ", "＇",
        ],
    )
    .or_else(|| letters(input, &["arcmins", "arcmin.", "arcmin", "amin", "p"]))
    .or_else(|| says(input, Word::Arcminutes));
    rest.map_or_else(|| no(input), |r| Ok((r, Mark::Prime)))
}

/// A mark broken in transit.
pub fn broken_mark(input: Text<'_>) -> Parsed<'_, Mark> {
    let mut rest = input;
    while rest.peek() == Some('\u{fffd}') {
        rest = rest.skip('\u{fffd}'.len_utf8());
    }
    if rest.at() == input.at() {
        match any_of(input, &["Â°", "?"]) {
            Some(r)
                if input.as_str().starts_with('Â')
                    || r.peek().is_some_and(|c| c.is_ascii_digit()) =>
            {
                rest = r
            }
            _ => return no(input),
        }
    }
    Ok((rest, Mark::Broken))
}
