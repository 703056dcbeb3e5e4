//! Clock times, as they are written: by themselves, and in the looser forms that only a date before or a zone after makes plain.

use super::date::skip_comma;
use super::number::{Parsed, digits, integer, is_dash, no, number};
use super::text::{Text, is_blank};
use super::words::{Word, says, word};
use super::zone::{offset, universal, zone};
use crate::report::{Clock, Number, Zone};
use crate::span::Span;

/// `09:13`, `22:31:05.3`, `22h31m05s`, `23u15`, `10:40 pm`.
pub fn clock(input: Text<'_>) -> Parsed<'_, Clock> {
    let (rest, hour) = integer(input)?;
    if hour.whole_digits > 2 {
        return no(input);
    }
    let mark = rest.peek();
    let (rest, minute, second) = match mark {
        Some(':') => {
            let (rest, minute) = number(rest.skip(1))?;
            match rest.peek() {
                Some(':')
                    if minute.places == 0
                        && rest.skip(1).peek().is_some_and(|c| c.is_ascii_digit()) =>
                {
                    let (rest, second) = number(rest.skip(1))?;
                    (rest, minute, Some(second))
                }
                _ => (rest, minute, None),
            }
        }
        Some('u') => {
            let (rest, minute) = number(rest.skip(1))?;
            (rest, minute, None)
        }
        Some('h' | 'H' | 'ʰ') => after_hour(rest.skip(mark.map_or(1, char::len_utf8)))?,
        _ => return no(input),
    };
    if minute.whole_digits != 2 || second.is_some_and(|s| s.whole_digits != 2) {
        return no(input);
    }
    match ended(input, rest, hour, Some(minute), second) {
        Some(found) => Ok(found),
        None => no(input),
    }
}

/// Minutes and perhaps seconds after the letter of the hour: ` 31m 05s`, `31`.
fn after_hour(
    input: Text<'_>,
) -> Result<(Text<'_>, Number, Option<Number>), nom::Err<nom::error::Error<Text<'_>>>> {
    let (rest, minute) = number(input.skip_blanks())?;
    let rest = strip_mark(rest, &["min", "m", "ᵐ", "'"]);
    match number(rest.skip_blanks()) {
        Ok((r, second))
            if second.whole_digits <= 2
                && minute.places == 0
                && ["s", "ˢ", "\""].iter().any(|m| r.as_str().starts_with(m)) =>
        {
            Ok((strip_mark(r, &["s", "ˢ", "\""]), minute, Some(second)))
        }
        _ => Ok((rest, minute, None)),
    }
}

/// What stands around a loose clock time.
#[derive(Clone, Copy, Default)]
pub(super) struct Around {
    /// A date stands before it.
    pub dated: bool,
    /// A word for time leads to it: `ore 21.15`.
    pub led: bool,
    /// Its scale stands before it: `UT 2231`.
    pub scaled: bool,
}

/// `0441 UT`, `22h UT`, `22.31 Uhr`, `22 h 15 TU`, `21.15 UT`, and after a date `22 31 05 UT`: where a zone, am or pm makes it plain.
pub(super) fn loose_clock(input: Text<'_>, around: Around) -> Option<(Text<'_>, Clock)> {
    let (rest, [hour, minute, second]) = loose_figures(input, around)?;
    let hour = hour?;
    let whole = |n: Option<Number>| n.map_or(0.0, Number::value);
    if hour.value() > 24.0 || whole(minute) >= 60.0 || whole(second) >= 61.0 {
        return None;
    }
    let (rest, clock) = ended(input, rest, hour, minute, second)?;
    let point_led = around.led && minute.is_some() && hour.places == 0;
    let zoned = match zone(rest) {
        Ok((_, z)) => match z.value {
            Zone::Universal | Zone::Abbreviation(_) | Zone::Local => true,
            // an offset of bare digits may be anything
            Zone::Offset(_) => says(rest.skip_blanks(), Word::Universal).is_some(),
            _ => around.dated,
        },
        Err(_) => false,
    };
    (zoned || clock.pm.is_some() || around.scaled || point_led).then_some((rest, clock))
}

type Figures = [Option<Number>; 3];

fn loose_figures(input: Text<'_>, around: Around) -> Option<(Text<'_>, Figures)> {
    let (rest, d) = digits(input).ok()?;
    let s = d.as_str();
    match s.len() {
        4 => Some((rest, [part(&s[..2]), part(&s[2..]), None])),
        6 if around.dated => Some((rest, [part(&s[..2]), part(&s[2..4]), part(&s[4..])])),
        1 | 2 => {
            // 22 31 05, 22 31.5
            if around.dated
                && s.len() == 2
                && let Some(found) = blank_figures(rest, part(s))
            {
                return Some(found);
            }
            if rest.peek() == Some('.')
                && let Ok((r, m)) = digits(rest.skip(1))
            {
                // 22.52 h: decimal hours
                if let Some(after) = hour_word(r) {
                    let Ok((_, value)) = number(input) else {
                        return None;
                    };
                    if says(r.skip_blanks(), Word::Time).is_none() {
                        return Some((after, [Some(value), None, None]));
                    }
                }
                return (m.as_str().len() == 2).then_some((r, [part(s), part(m.as_str()), None]));
            }
            // 22 h 15, 21 Uhr 15, 22h
            match hour_word(rest) {
                Some(r) => match after_hour(r) {
                    Ok((r, m, sec)) if m.whole_digits == 2 => {
                        let r = says(r.skip_blanks(), Word::Minutes).unwrap_or(r);
                        Some((r, [part(s), Some(m), sec]))
                    }
                    _ => Some((r, [part(s), None, None])),
                },
                None => Some((rest, [part(s), None, None])),
            }
        }
        _ => None,
    }
}

/// `h`, `H`, `u`, `Uhr`, `heures` after the hour, a blank perhaps before it.
fn hour_word(input: Text<'_>) -> Option<Text<'_>> {
    let rest = input.skip_blanks();
    if let Some(after) = says(rest, Word::Time).or_else(|| says(rest, Word::Hours)) {
        // "20 heure locale": the zone's word
        return says(rest, Word::LocalTime).is_none().then_some(after);
    }
    let c = rest.peek().filter(|c| matches!(c, 'h' | 'H' | 'ʰ' | 'u'))?;
    let after = rest.skip(c.len_utf8());
    (!after.peek().is_some_and(char::is_alphabetic)).then_some(after)
}

fn blank_figures(input: Text<'_>, hour: Option<Number>) -> Option<(Text<'_>, Figures)> {
    let (rest, minute) = number(one_blank(input)?).ok()?;
    if minute.whole_digits != 2 {
        return None;
    }
    if minute.places == 0
        && let Some(here) = one_blank(rest)
        && let Ok((r, second)) = number(here)
        && second.whole_digits == 2
    {
        return Some((r, [hour, Some(minute), Some(second)]));
    }
    Some((rest, [hour, Some(minute), None]))
}

fn one_blank(input: Text<'_>) -> Option<Text<'_>> {
    let s = input.as_str();
    (s.starts_with(' ') && !s.starts_with("  ")).then(|| input.skip(1))
}

fn part(t: &str) -> Option<Number> {
    Some(Number {
        mantissa: t.parse().ok()?,
        places: 0,
        whole_digits: t.len() as u8,
    })
}

/// The end of a clock time: am or pm, the word for o'clock, and nothing glued but Z or UT.
fn ended<'a>(
    input: Text<'a>,
    rest: Text<'a>,
    hour: Number,
    minute: Option<Number>,
    second: Option<Number>,
) -> Option<(Text<'a>, Clock)> {
    let next = rest.skip_blanks();
    let half = word(next, |w| match w {
        Word::Am => Some(false),
        Word::Pm => Some(true),
        _ => None,
    });
    let (mut rest, pm) = match half {
        Some((r, pm)) => (r, Some(pm)),
        None => (rest, None),
    };
    let span = input.span_to(rest);
    // "22:31 Uhr", "22:31 h", but not "20:00 heure locale"
    let after = rest.skip_blanks();
    if says(after, Word::LocalTime).is_none()
        && let Some(r) = says(after, Word::Time).or_else(|| says(after, Word::Hours))
    {
        rest = r;
    }
    if rest.peek().is_some_and(|c| c.is_alphanumeric() && c != 'Z') && universal(rest).is_none()
        || rest.peek() == Some(':') && rest.skip(1).peek().is_some_and(|c| c.is_ascii_digit())
    {
        return None;
    }
    Some((
        rest,
        Clock {
            hour,
            minute,
            second,
            pm,
            span,
        },
    ))
}

fn strip_mark<'a>(input: Text<'a>, marks: &[&str]) -> Text<'a> {
    marks
        .iter()
        .find(|m| input.as_str().starts_with(**m))
        .map_or(input, |m| input.skip(m.len()))
}

/// A clock time after a date: `T`, blanks, a comma, "at" may stand between. Not a right ascension that happens to follow.
pub(super) fn clock_after_date(input: Text<'_>, scaled: bool) -> Option<(Text<'_>, Clock)> {
    let mut around = Around {
        dated: true,
        led: false,
        scaled,
    };
    let mut rest = input;
    if rest.peek() == Some('T') {
        rest = rest.skip(1);
        // 20240305T223100Z
        if let Ok((r, d)) = digits(rest)
            && matches!(d.as_str().len(), 4 | 6)
        {
            let s = d.as_str();
            return Some((
                r,
                Clock {
                    hour: part(&s[..2])?,
                    minute: part(&s[2..4]),
                    second: s.get(4..6).and_then(part),
                    pm: None,
                    span: rest.span_to(r),
                },
            ));
        }
    } else {
        (rest, around.led) = clock_lead(rest, scaled)?;
    }
    if rest.at() == input.at() {
        return None;
    }
    match clock(rest) {
        Ok((r, c)) => {
            // a declination after it: then it is a right ascension
            let next = r.skip_blanks();
            let signed = next.peek().is_some_and(|c| c == '+' || is_dash(c))
                && next
                    .skip(next.peek().map_or(1, char::len_utf8))
                    .peek()
                    .is_some_and(|c| c.is_ascii_digit());
            let glued_hours = input.peek() == Some('T') && super::zone::hours_alone(r).is_some();
            let written = &rest.as_str()[..c.span.end - rest.at()];
            if signed && offset(r).is_none() && until(r).is_none() && !glued_hours
                || c.pm.is_none()
                    && !scaled
                    && zone(r).is_err()
                    && written.contains(['h', 'H'])
                    && c.second.is_some()
            {
                return None;
            }
            Some((r, c))
        }
        Err(_) => loose_clock(rest, around),
    }
}

/// What may lead from a date to its clock time: blanks, a comma, "at", "um", "ore", "from", "between". True where a word for time does.
fn clock_lead(input: Text<'_>, scaled: bool) -> Option<(Text<'_>, bool)> {
    let mut rest = skip_comma(input);
    let mut led = false;
    if rest.peek() == Some('(') {
        return None;
    }
    if scaled && rest.peek().is_some_and(|c| c == ':' || c == '=') {
        rest = rest.skip(1).skip_blanks();
    }
    loop {
        if let Some(r) = says(rest, Word::Time) {
            (rest, led) = (r.skip_blanks(), true);
        } else if let Some(r) = says(rest, Word::At) {
            rest = r.skip_blanks();
        } else if let Some(w) = RANGE_LEADS.iter().find(|w| rest.as_str().starts_with(**w)) {
            rest = rest.skip(w.len()).skip_blanks();
        } else {
            return Some((rest, led));
        }
        if rest.peek().is_some_and(|c| c == ':' || c == '=') {
            rest = rest.skip(1).skip_blanks();
        }
    }
}

/// "From" and "between" before a range of clock times.
const RANGE_LEADS: &[&str] = &[
    "from ",
    "between ",
    "von ",
    "zwischen ",
    "de ",
    "entre ",
    "desde ",
    "dalle ",
    "tra ",
    "fra ",
    "van ",
    "tussen ",
    "od ",
    "między ",
    "das ",
];

/// "To" and "and" between the ends of a range.
const RANGE_TO: &[&str] = &[
    "to ", "and ", "bis ", "und ", "until ", "till ", "à ", "a ", "et ", "y ", "e ", "tot ", "en ",
    "até ", "do ", "i ", "hasta ", "alle ", "end ", "ended ", "às ",
];

/// The end of a range: `-22:35`, ` to 22:35`, `–22:35`, `, end 22:35`.
pub(super) fn until(input: Text<'_>) -> Option<(Text<'_>, Clock)> {
    let rest = input.skip_blanks();
    let after = match rest.peek() {
        Some(c) if is_dash(c) => rest.skip(c.len_utf8()),
        _ => {
            let rest = skip_comma(input);
            RANGE_TO
                .iter()
                .find(|w| rest.as_str().starts_with(**w))
                .map(|w| rest.skip(w.len()))?
        }
    };
    let (r, c) = clock(after.skip_blanks()).ok()?;
    // 22:31-02:00 with whole quarters may be an offset from UTC: only hours below 15 and glued
    let glued_offset = rest.at() == input.at() && offset(input).is_some() && zone(r).is_err();
    (!glued_offset).then_some((r, c))
}

/// Digits after a date that a zone ends and nobody could read as a clock time: `25.31.7 UT`.
pub(super) fn clock_unread(input: Text<'_>) -> Option<(Text<'_>, Span)> {
    let (start, _) = clock_lead(input, false)?;
    let mut rest = start;
    for _ in 0..6 {
        let (r, _) = digits(rest).ok()?;
        rest = r;
        loop {
            let here = rest;
            rest = match rest.peek() {
                Some(c) if is_blank(c) || ".:'\"′″,;/-_°".contains(c) => {
                    rest.skip(c.len_utf8())
                }
                _ => [Word::Hours, Word::Minutes, Word::Seconds, Word::Time]
                    .iter()
                    .find_map(|w| says(rest, *w))
                    .filter(|_| says(rest, Word::LocalTime).is_none())
                    .or_else(|| hour_word(rest))
                    .unwrap_or_else(|| strip_mark(rest, &["min ", "m ", "s ", "m", "s"])),
            };
            let zoned = [
                Word::Universal,
                Word::Ut1,
                Word::LocalTime,
                Word::ZoneAbbreviation,
            ]
            .iter()
            .find_map(|w| says(here, *w));
            if let Some(end) = zoned {
                return Some((end, start.span_to(end)));
            }
            if rest.at() == here.at() {
                break;
            }
        }
    }
    None
}
