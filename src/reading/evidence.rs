//! Evidence that two bare numbers are a position, or are not: the words, tags and brackets around them.

use super::equinox::{Tagged, equinox_year};
use super::position::{Finder, Found};
use super::run::Run;
use super::scan::Kind;
use super::text::Text;
use super::words::Word;
use crate::report::{Angle, Position};
use crate::span::Spanned;

impl Finder<'_, '_> {
    /// A word in the same clause says that what follows is no position.
    pub(super) fn blocked(&self, i: usize) -> bool {
        let mut words = 0;
        for k in (0..i).rev() {
            let atom = &self.atoms[k];
            match &atom.kind {
                Kind::LineEnd | Kind::Mark(';' | '.' | ',') => return false,
                Kind::Word(p)
                    if [Word::NotAPosition, Word::Galactic, Word::Ecliptic]
                        .iter()
                        .any(|w| p.means(*w)) =>
                {
                    // "Sun" and "set" are other words too; a weekday or a verb blocks nothing
                    let other = p
                        .meanings()
                        .any(|w| matches!(w, Word::Weekday(_) | Word::Month(_)));
                    return !other || self.atoms.get(k + 1).is_some_and(|a| a.is_mark(':'));
                }
                // coordinates of a site
                Kind::Word(p)
                    if p.means(Word::Site)
                        && self
                            .atoms
                            .get(k + 1)
                            .is_some_and(|a| a.is_mark(':') || a.is_mark('=')) =>
                {
                    return true;
                }
                Kind::Word(_) | Kind::Plain => {
                    words += 1;
                    if words > 5 {
                        return false;
                    }
                }
                _ => {}
            }
        }
        false
    }

    /// "at", "position", "found" close before it on the line, or closing the line above with a colon.
    pub(super) fn word_before(&self, i: usize) -> bool {
        const LEADING: [Word; 8] = [
            Word::Position,
            Word::At,
            Word::Found,
            Word::RoleReference,
            Word::RolePointing,
            Word::RoleCatalogued,
            Word::RoleRegion,
            Word::RoleMeasured,
        ];
        for k in (i.saturating_sub(8)..i).rev() {
            let atom = &self.atoms[k];
            match &atom.kind {
                Kind::LineEnd if k > 0 && k + 1 == i && self.atoms[k - 1].is_mark(':') => {}
                Kind::LineEnd | Kind::Mark(';' | '.') => return false,
                Kind::Word(p) if LEADING.iter().any(|w| p.means(*w)) => return true,
                Kind::Word(_) | Kind::Plain | Kind::Mark(_) | Kind::Equinox(_) => {}
                _ => return false,
            }
        }
        false
    }

    /// Galactic or ecliptic coordinates are named right before it.
    pub(super) fn other_coordinates(&self, i: usize) -> bool {
        (i.saturating_sub(7)..i)
            .rev()
            .take_while(|&k| !matches!(self.atoms[k].kind, Kind::LineEnd | Kind::Mark(';')))
            .any(|k| self.atoms[k].means(Word::Galactic) || self.atoms[k].means(Word::Ecliptic))
    }

    /// A month's word right before it: the first number is its day.
    pub(super) fn month_right_before(&self, i: usize) -> bool {
        let k = match i.checked_sub(1) {
            Some(k) if self.atoms[k].is_mark('.') && k > 0 => k - 1,
            Some(k) => k,
            None => return false,
        };
        matches!(&self.atoms[k].kind, Kind::Word(p) if p.meanings().any(|w| matches!(w, Word::Month(_))) && !p.means(Word::Declination) && !p.means(Word::Magnitude))
    }

    /// A name's word right before it.
    pub(super) fn name_right_before(&self, i: usize) -> bool {
        i > 0
            && match &self.atoms[i - 1].kind {
                Kind::Plain => true,
                Kind::Word(p) => p.means(Word::New) || p.means(Word::Object),
                _ => false,
            }
    }

    /// Few words after it on its line: the row of a list, not the middle of a sentence.
    pub(super) fn short_tail(&self, end: usize) -> bool {
        let mut words = 0;
        for atom in self.atoms.iter().skip(end).take(60) {
            match &atom.kind {
                Kind::LineEnd => break,
                Kind::Mark(';' | '.') => break,
                Kind::Word(p) if p.means(Word::NotAPosition) && !p.means(Word::At) => return false,
                Kind::Word(p)
                    if [
                        Word::Equinox,
                        Word::Epoch,
                        Word::From,
                        Word::At,
                        Word::Magnitude,
                        Word::Universal,
                        Word::Site,
                    ]
                    .iter()
                    .any(|w| p.means(*w)) => {}
                Kind::Word(_) | Kind::Plain => words += 1,
                Kind::Instant(_) | Kind::Site(_) => words = 0,
                _ => {}
            }
        }
        words <= 4
    }

    /// A number with a sign right after, over blanks alone.
    pub(super) fn signed_after(&self, end: usize) -> bool {
        let Some(atom) = self.atoms.get(end) else {
            return false;
        };
        let gap = end > 0 && atom.span.start > self.atoms[end - 1].span.end;
        gap && match &atom.kind {
            Kind::Run(r) => {
                r.sign.is_some() && (r.numbers.len() > 1 || r.numbers[0].0.whole_digits == 2)
            }
            Kind::Angle(a) => a.sign.is_some(),
            _ => false,
        }
    }

    /// "that is" or an equals sign stands between the last position and this one.
    pub(super) fn says_form(&self, i: usize, from: usize) -> bool {
        self.atoms[from.min(i)..i]
            .iter()
            .any(|a| a.means(Word::ThatIs) || a.is_mark('='))
    }

    /// Within two degrees of the position found last.
    pub(super) fn close_to_last(&self, p: &Position) -> bool {
        self.last
            .as_ref()
            .and_then(|l| super::forms::apart_deg(l, p))
            .is_some_and(|d| d < 2.0)
    }

    /// "that is", "=" or a bracket opened right after a position: another form of it follows.
    pub(super) fn form_led(&self, i: usize, from: usize) -> bool {
        if from == 0 {
            return false;
        }
        for k in (from..i).rev().take(3) {
            match &self.atoms[k].kind {
                Kind::Word(p) if p.means(Word::ThatIs) => return true,
                Kind::Mark('=' | '≡') => return true,
                Kind::Mark(_) | Kind::LineEnd => {}
                Kind::Word(p) if p.means(Word::Filler) => {}
                _ => return false,
            }
        }
        i.saturating_sub(from) <= 2
    }

    /// First on its line, or after a name and perhaps a colon or a date: the row of a list.
    pub(super) fn named_line(&self, i: usize, from: usize) -> bool {
        let mut words = 0;
        // a row's head is short: no more than forty words are looked at
        for k in (from.max(i.saturating_sub(40))..i).rev() {
            match &self.atoms[k].kind {
                Kind::LineEnd => break,
                Kind::Plain | Kind::Word(_) => words += 1,
                Kind::Mark(
                    ':' | '-' | '–' | '=' | ',' | '#' | '*' | '|' | '.' | '(' | ')' | ';',
                )
                | Kind::Run(_)
                | Kind::Instant(_)
                | Kind::Equinox(_) => {}
                // a clock time at the head of a row
                Kind::Angle(a) if a.sign.is_none() && a.parts().len() <= 3 && words == 0 => {}
                _ => return false,
            }
        }
        words <= 5
    }

    pub(super) fn bracketed(&self, i: usize) -> bool {
        i > 0 && self.atoms[i - 1].is_mark('(')
            || self.atoms.get(i + 1).is_some_and(|a| a.is_mark(')'))
    }

    pub(super) fn tag_right_before(&self, i: usize, from: usize) -> bool {
        self.tag_before(i, from).is_some()
    }

    pub(super) fn tag_right_after(&self, end: usize) -> bool {
        self.tag_after(end).is_some()
    }

    /// The tag right before a position, over separators.
    pub(super) fn tag_before(&self, first: usize, from: usize) -> Option<(usize, Spanned<Tagged>)> {
        for k in (from..first).rev().take(4) {
            let atom = &self.atoms[k];
            match &atom.kind {
                Kind::Equinox(t) => return Some((k, Spanned::new(*t, atom.span))),
                Kind::Run(run) if run.numbers.len() == 1 && self.bracketed(k) => {
                    return self.tag_of_number(run, 0).map(|t| (k, t));
                }
                Kind::Mark('(' | ')' | ',' | ':' | '=' | '[' | ']') => {}
                Kind::Word(p)
                    if p.means(Word::Position) || p.means(Word::Filler) || p.means(Word::At) => {}
                _ => return None,
            }
        }
        None
    }

    /// The tag right after a position, over separators.
    pub(super) fn tag_after(&self, end: usize) -> Option<(usize, Spanned<Tagged>)> {
        let mut bracket = false;
        for k in end..self.atoms.len().min(end + 6) {
            let atom = &self.atoms[k];
            match &atom.kind {
                Kind::Equinox(t) => return Some((k, Spanned::new(*t, atom.span))),
                Kind::Run(run) if run.numbers.len() == 1 => {
                    let strong = bracket || run.numbers[0].0.places > 0 || self.ends_clause(k + 1);
                    return self
                        .tag_of_number(run, 0)
                        .filter(|_| strong)
                        .map(|t| (k, t));
                }
                Kind::Mark('(' | '[') => bracket = true,
                Kind::Mark(',' | ';' | ')' | ']' | '/') | Kind::Uncertainty(_) => {}
                Kind::Word(p)
                    if p.means(Word::Degrees) || p.means(Word::Filler) || p.means(Word::Hours) => {}
                Kind::Plain
                    if matches!(
                        atom.span.of(self.text),
                        "in" | "for" | "im" | "en" | "nel" | "w"
                    ) => {}
                _ => return None,
            }
        }
        None
    }

    pub(super) fn ends_clause(&self, i: usize) -> bool {
        self.atoms.get(i).is_none_or(|a| {
            matches!(a.kind, Kind::LineEnd | Kind::Mark(';' | ')' | ',' | '.'))
                || a.means(Word::From)
        })
    }

    pub(super) fn tag_of_number(&self, run: &Run, index: usize) -> Option<Spanned<Tagged>> {
        let (_, span) = run.numbers.get(index)?;
        let (rest, tag) = equinox_year(Text::window(self.text, *span)).ok()?;
        let year = run.numbers[index].0;
        // a bare year without decimals is an equinox only where it is one that people use
        let usual = year.places > 0
            || year.mantissa.is_multiple_of(25)
            || matches!(year.mantissa, 1855 | 1860);
        (rest.is_empty() && usual).then_some(Spanned::new(tag, *span))
    }

    /// A year that sticks to the declination's run: `+26 06 24.92 2000.0`.
    pub(super) fn tag_in_run(&self, i: usize, dec: &Angle) -> Option<Spanned<Tagged>> {
        let Kind::Run(run) = &self.atoms.get(i)?.kind else {
            return None;
        };
        (dec.parts().len() < run.numbers.len())
            .then(|| self.tag_of_number(run, dec.parts().len()))
            .flatten()
    }

    /// Adds the tags that stand right before and right after.
    pub(super) fn tags_around(&self, f: &mut Found, from: usize) {
        if let Some((k, t)) = self.tag_after(f.end) {
            f.tags.push(t);
            f.end = k + 1;
        } else if f.tags.is_empty()
            && let Some((k, t)) = self.tag_before(f.first, from)
        {
            f.tags.push(t);
            f.first = f.first.min(k);
        }
    }
}
