//! A line cut into atoms: the statements and words on it, in order, none lost.

use super::angle::{angle, angle_joined};
use super::equinox::{Tagged, equinox_tag, equinox_year};
use super::instant::instant;
use super::run::{Run, run};
use super::site::{elevation, site_coordinates};
use super::stet::stet;
use super::text::{Text, is_blank};
use super::uncertainty::{Uncertainty, uncertainty};
use super::words::{Phrase, Word, meanings, phrase};
use crate::report::{Angle, DateWritten, InstantWritten, SiteWritten, Stet};
use crate::span::{Span, Spanned};

/// One thing on a line.
#[derive(Clone, Debug)]
pub enum Kind<'a> {
    /// A word of the language files, with its meanings.
    Word(Phrase<'a>),
    /// Any other word.
    Plain,
    /// A marked or colon angle.
    Angle(Box<Angle>),
    /// Digits without separators after a label or in a compact pair.
    Joined(Box<Angle>),
    /// Bare numbers.
    Run(Run),
    /// A date, a clock time with its zone, a Julian date.
    Instant(Box<InstantWritten>),
    /// An equinox tag.
    Equinox(Tagged),
    /// Coordinates of a site.
    Site(Box<SiteWritten>),
    /// An elevation with its unit.
    Elevation(Spanned<f64>),
    /// An uncertainty.
    Uncertainty(Uncertainty),
    /// An editor's word.
    Stet(Stet),
    /// A mark of punctuation.
    Mark(char),
    /// The end of a line.
    LineEnd,
}

/// An atom and its place.
#[derive(Clone, Debug)]
pub struct Atom<'a> {
    /// What it is.
    pub kind: Kind<'a>,
    /// Where.
    pub span: Span,
    /// The number of its line in the sheet, from 0.
    pub line: usize,
}

impl Atom<'_> {
    /// True where it can mean `word`.
    pub fn means(&self, word: Word) -> bool {
        matches!(&self.kind, Kind::Word(p) if p.means(word))
    }
    /// True for this mark of punctuation.
    pub fn is_mark(&self, mark: char) -> bool {
        matches!(self.kind, Kind::Mark(c) if c == mark)
    }
}

/// The atoms of one line.
///
/// `awaiting` is true while a right ascension has been named and its declination not yet: then "Dec" is no December.
pub fn atoms<'a>(line: Text<'a>, number: usize, awaiting: &mut bool, out: &mut Vec<Atom<'a>>) {
    let mut rest = line;
    let mut after_label = false;
    loop {
        rest = rest.skip_blanks();
        let Some(c) = rest.peek() else { break };
        // a dash between blanks is a sign only after a number or a label; else it parts, or opens an item
        let parting = super::number::is_dash(c)
            && rest.skip(c.len_utf8()).peek().is_none_or(is_blank)
            && !out.last().is_some_and(|a: &Atom| {
                a.line == number
                    && (matches!(
                        a.kind,
                        Kind::Run(_)
                            | Kind::Angle(_)
                            | Kind::Joined(_)
                            | Kind::Mark('=' | ':' | ',' | '/' | '|' | ')')
                    ) || a.means(Word::Declination)
                        || a.means(Word::Both))
            });
        let (next, kind) = if parting {
            (rest.skip(c.len_utf8()), Kind::Mark(c))
        } else {
            atom(rest, c, after_label, *awaiting)
        };
        let next = if next.at() <= rest.at() {
            rest.skip(c.len_utf8())
        } else {
            next
        };
        after_label = match &kind {
            Kind::Word(p) => [Word::RightAscension, Word::Declination, Word::Both]
                .iter()
                .any(|w| p.means(*w)),
            Kind::Mark('(' | '[' | '=' | ':' | '_') => after_label,
            _ => false,
        };
        if let Kind::Word(p) = &kind {
            if p.means(Word::RightAscension) || p.means(Word::HourAngle) {
                *awaiting = true;
            } else if p.means(Word::Declination) {
                *awaiting = false;
            }
        }
        out.push(Atom {
            kind,
            span: rest.span_to(next),
            line: number,
        });
        rest = next;
    }
}

fn atom<'a>(rest: Text<'a>, c: char, after_label: bool, awaiting: bool) -> (Text<'a>, Kind<'a>) {
    let word_start = !rest.before().is_some_and(char::is_alphanumeric);
    if c == '['
        && let Ok((r, s)) = stet(rest)
    {
        return (r, Kind::Stet(s));
    }
    if (c == '+' || c == '±' || c == '(' || c == '&')
        && let Ok((r, u)) = uncertainty(rest)
    {
        return (r, Kind::Uncertainty(u));
    }
    // the year of a label: RA(2000), RA2000, Dec.2000, α1950
    if after_label
        && (c == '1' || c == '2' || c == 'J' || c == 'B')
        && let Ok((r, t)) = equinox_year(rest).or_else(|_| equinox_tag(rest))
    {
        let attached = rest
            .before()
            .is_some_and(|b| !is_blank(b) && b != '=' && b != ':');
        let label_goes_on = matches!(
            r.skip_blanks().peek(),
            Some(')' | ']' | ':' | '=' | ',' | '|' | '/')
        ) || r.is_empty();
        if attached
            && (label_goes_on
                || rest
                    .before()
                    .is_some_and(|b| b.is_alphanumeric() || b == '.' || b == '_'))
        {
            return (r, Kind::Equinox(t));
        }
    }
    if !word_start && !after_label {
        // "7 14 40S"
        if matches!(c, 'N' | 'S' | 'E' | 'W')
            && rest.before().is_some_and(|b| b.is_ascii_digit())
            && !rest.skip(1).peek().is_some_and(char::is_alphanumeric)
            && let Some((r, p)) = phrase(rest)
        {
            return (r, Kind::Word(p));
        }
        if c.is_alphanumeric() {
            return plain(rest);
        }
        // a dash glued to a word is a hyphen, not a sign; one between digits parts a compact pair
        let compact = rest.before().is_some_and(|b| b.is_ascii_digit());
        if (c == '+' || super::number::is_dash(c)) && !compact {
            return (rest.skip(c.len_utf8()), Kind::Mark(c));
        }
    }
    if awaiting
        && let Some((r, p)) = phrase(rest)
        && p.means(Word::Declination)
    {
        return (r, Kind::Word(p));
    }
    let numeric = c.is_ascii_digit();
    let signed = c == '+' || c == '±' || super::number::is_dash(c);
    let leads = if numeric {
        Leads::NUMBER
    } else {
        Leads::of(rest, c)
    };
    if leads.instant
        && let Ok((r, i)) = instant(rest)
        // "RA 9.5958 Dec +33": no ninth of December
        && !(awaiting && yearless(&i))
        // "RA/Dec: 08:18.5 +07:30": no clock with its offset
        && !(after_label && i.date.is_none())
    {
        return (r, Kind::Instant(Box::new(i)));
    }
    if (leads.site || signed)
        && let Ok((r, s)) = site_coordinates(rest)
    {
        return (r, Kind::Site(Box::new(s)));
    }
    if leads.equinox
        && let Ok((r, t)) = equinox_tag(rest)
    {
        return (r, Kind::Equinox(t));
    }
    if leads.elevation
        && let Ok((r, m)) = elevation(rest)
    {
        return (r, Kind::Elevation(m));
    }
    if (numeric || signed || "NSEWnsew".contains(c))
        && let Ok((r, a)) = angle(rest)
    {
        let glue = signed && rest.before().is_some_and(|b| b.is_alphanumeric());
        if !super::angle::glued(r) && !glue {
            return (r, Kind::Angle(Box::new(a)));
        }
    }
    if (numeric || signed)
        && let Ok((r, joined)) = angle_joined(rest)
    {
        let compact = signed && rest.before().is_some_and(|b| b.is_ascii_digit())
            || numeric && (r.peek() == Some('+') || r.peek().is_some_and(super::number::is_dash));
        let six =
            joined.parts().len() == 3 || joined.parts().last().is_some_and(|p| p.number.places > 0);
        if after_label && six || compact {
            return (r, Kind::Joined(Box::new(joined)));
        }
    }
    if (numeric || signed)
        && let Ok((r, found)) = run(rest)
    {
        // a date that follows ends the run: "KT 9 2013 Apr 13"
        let mut found = found;
        let line_end = rest.span().end;
        let date = (1..found.numbers.len()).find(|&k| {
            let (n, span) = found.numbers[k];
            n.whole_digits == 4
                && n.places == 0
                && dated(rest.skip(span.start - rest.at()))
                && span.start < line_end
        });
        if let Some(k) = date {
            found.numbers.truncate(k);
            found.span.end = found.numbers[k - 1].1.end;
            return (rest.skip(found.span.end - rest.at()), Kind::Run(found));
        }
        return (r, Kind::Run(found));
    }
    if (c == 'J' || c == 'B' || c == 'j' || numeric)
        && let Ok((r, t)) = equinox_year(rest)
    {
        return (r, Kind::Equinox(t));
    }
    if let Some((r, p)) = phrase(rest) {
        return (r, Kind::Word(p));
    }
    if c.is_alphanumeric() {
        return plain(rest);
    }
    (rest.skip(c.len_utf8()), Kind::Mark(c))
}

/// What can begin at a place, by the words that stand there: most words of prose begin nothing.
struct Leads {
    instant: bool,
    site: bool,
    equinox: bool,
    elevation: bool,
}

impl Leads {
    /// A digit can begin anything.
    const NUMBER: Leads = Leads {
        instant: true,
        site: true,
        equinox: true,
        elevation: true,
    };

    fn of(rest: Text<'_>, c: char) -> Leads {
        let mut leads = Leads {
            instant: false,
            site: false,
            equinox: matches!(c, 'J' | 'B' | 'j' | 'b'),
            elevation: false,
        };
        for word in meanings(rest) {
            match word {
                Word::Month(_)
                | Word::Weekday(_)
                | Word::Universal
                | Word::Julian
                | Word::ModifiedJulian
                | Word::HeliocentricJulian
                | Word::BarycentricJulian => {
                    leads.instant = true;
                }
                Word::Compass(_) | Word::Latitude | Word::Longitude => leads.site = true,
                Word::Equinox
                | Word::Epoch
                | Word::OfDate
                | Word::Mean
                | Word::Apparent
                | Word::Icrs
                | Word::Fk5
                | Word::Fk4 => leads.equinox = true,
                _ => {}
            }
            leads.elevation |= matches!(word, Word::Elevation | Word::Altitude);
        }
        leads
    }
}

/// A word of no known meaning, with what is glued to it.
fn plain(rest: Text<'_>) -> (Text<'_>, Kind<'_>) {
    let s = rest.as_str();
    let mut end = 0;
    let mut chars = s.char_indices().peekable();
    while let Some((i, c)) = chars.next() {
        let inner = matches!(c, '-' | '_' | '/' | '.' | '\'' | '’' | '@' | '+')
            && chars.peek().is_some_and(|(_, n)| n.is_alphanumeric());
        if !(c.is_alphanumeric() || inner) {
            break;
        }
        end = i + c.len_utf8();
    }
    (
        rest.skip(end.max(s.chars().next().map_or(1, char::len_utf8))),
        Kind::Plain,
    )
}

/// A full date begins here.
fn dated(input: Text<'_>) -> bool {
    instant(input).is_ok_and(|(_, i)| i.date.is_some())
}

/// A date that leaves out its year and has no clock time.
fn yearless(i: &InstantWritten) -> bool {
    i.clock.is_none()
        && matches!(
            i.date,
            Some(Spanned {
                value: DateWritten::Calendar { year_digits: 0, .. },
                ..
            })
        )
}
