//! The pieces a position is put together from: the number after a label, the label after a number, units and compass letters.

use super::position::{Axis, Finder, Gathered};
use super::run::Run;
use super::scan::Kind;
use super::text::Text;
use super::words::Word;
use crate::report::{Angle, AngleUnit, Compass, Mark, Position, PositionKind, Sign};
use crate::span::{Span, Spanned};
use nom::Parser;
use nom::branch::alt;

impl Finder<'_, '_> {
    /// The next atom that holds a number, over what may stand between a label and its value.
    pub(super) fn to_number(&self, from: usize, g: &mut Gathered, lines: bool) -> Option<usize> {
        let mut line_ends = 0;
        let mut i = from;
        while i < self.atoms.len().min(from + 18) {
            let atom = &self.atoms[i];
            if let Some((after, unit)) = self.form_bracket(i) {
                g.unit = unit.or(g.unit);
                i = after;
                continue;
            }
            match &atom.kind {
                Kind::Angle(_) | Kind::Run(_) | Kind::Joined(_) => {
                    // "-.04": a number that begins with its point is not read
                    let before = i.checked_sub(1).map(|k| &self.atoms[k]);
                    if before.is_some_and(|a| {
                        a.is_mark('.') && a.span.end == atom.span.start && i > from
                    }) {
                        let attached = i >= 2
                            && self.atoms[i - 2].span.end == self.atoms[i - 1].span.start
                            && matches!(self.atoms[i - 2].kind, Kind::Word(_));
                        if !attached {
                            return None;
                        }
                    }
                    // a minus left at the end of the line before
                    if i >= from + 2
                        && matches!(self.atoms[i - 1].kind, Kind::LineEnd)
                        && matches!(self.atoms[i - 2].kind, Kind::Mark(c) if super::number::is_dash(c))
                    {
                        g.minus = Some(Spanned::new(Sign::Minus, self.atoms[i - 2].span));
                    }
                    return Some(i);
                }
                Kind::Equinox(t) => g.tags.push(Spanned::new(*t, atom.span)),
                Kind::Uncertainty(_) => {}
                Kind::LineEnd if lines && line_ends == 0 => line_ends += 1,
                Kind::Mark(c) if super::number::is_dash(*c) => {}
                Kind::Mark(c) if "=:,;/|()[]{}~.-–&≈<>*_`$\\\"".contains(*c) => {}
                Kind::Word(p) => {
                    if p.means(Word::Degrees) {
                        g.unit = Some(AngleUnit::Degrees);
                    } else if p.means(Word::Hours) {
                        g.unit = Some(AngleUnit::Hours);
                    } else if self.axis(i).is_some()
                        || ![
                            Word::Filler,
                            Word::And,
                            Word::At,
                            Word::Position,
                            Word::Equinox,
                            Word::ThatIs,
                        ]
                        .iter()
                        .any(|w| p.means(*w))
                    {
                        return None;
                    }
                }
                Kind::Plain => {
                    let w = atom.span.of(self.text);
                    if w == "d" || w == "°" {
                        g.unit = Some(AngleUnit::Degrees);
                    } else if w == "h" {
                        g.unit = Some(AngleUnit::Hours);
                    } else {
                        return None;
                    }
                }
                _ => return None,
            }
            i += 1;
        }
        None
    }

    /// `(h m s)`, `(hh:mm:ss)`, `(deg)`: how a number is written, in brackets after its label; the atom after it, and the unit it names.
    fn form_bracket(&self, i: usize) -> Option<(usize, Option<AngleUnit>)> {
        if !self.atoms[i].is_mark('(') && !self.atoms[i].is_mark('[') {
            return None;
        }
        let mut unit = None;
        for k in i + 1..self.atoms.len().min(i + 9) {
            let atom = &self.atoms[k];
            let words = atom.span.of(self.text);
            match &atom.kind {
                Kind::Mark(')' | ']') => return (k > i + 1).then_some((k + 1, unit)),
                Kind::Mark('°') => unit = unit.or(Some(AngleUnit::Degrees)),
                Kind::Word(p) if p.means(Word::Degrees) => unit = unit.or(Some(AngleUnit::Degrees)),
                Kind::Word(p) if p.means(Word::Hours) => unit = unit.or(Some(AngleUnit::Hours)),
                Kind::Mark(_) | Kind::Word(_) | Kind::Plain if words.len() <= 4 => {
                    if matches!(words, "h" | "hh") {
                        unit = unit.or(Some(AngleUnit::Hours));
                    }
                }
                _ => return None,
            }
        }
        None
    }

    /// The next label of one of these kinds, over what may stand between a value and the next label.
    pub(super) fn label_after(
        &self,
        from: usize,
        wanted: &[Axis],
        g: &mut Gathered,
    ) -> Option<usize> {
        let mut line_ends = 0;
        for i in from..self.atoms.len().min(from + 12) {
            let atom = &self.atoms[i];
            if let Some(axis) = self.axis(i) {
                return wanted.contains(&axis).then_some(i);
            }
            match &atom.kind {
                Kind::Equinox(t) => g.tags.push(Spanned::new(*t, atom.span)),
                Kind::Uncertainty(_) => {}
                Kind::LineEnd if line_ends == 0 => line_ends += 1,
                Kind::Mark(_) => {}
                Kind::Word(p)
                    if [
                        Word::Filler,
                        Word::Degrees,
                        Word::Hours,
                        Word::At,
                        Word::Arcseconds,
                        Word::Airless,
                    ]
                    .iter()
                    .any(|w| p.means(*w)) => {}
                Kind::Word(p) if p.means(Word::And) => {}
                _ => return None,
            }
        }
        None
    }

    /// The atom after separators that may stand between RA and Dec.
    pub(super) fn after_soft(
        &self,
        from: usize,
        g: &mut Gathered,
        labelled: bool,
    ) -> Option<usize> {
        let mut line_ends = 0;
        for i in from..self.atoms.len().min(from + 8) {
            let atom = &self.atoms[i];
            match &atom.kind {
                Kind::Angle(_) | Kind::Run(_) | Kind::Joined(_) => return Some(i),
                Kind::Uncertainty(_) => {}
                Kind::Equinox(t) => g.tags.push(Spanned::new(*t, atom.span)),
                Kind::Mark(
                    ',' | ';' | '/' | '|' | '&' | '(' | ')' | '[' | ']' | '·' | '{' | '}',
                ) => {}
                Kind::LineEnd if labelled && line_ends == 0 => line_ends += 1,
                Kind::Word(p) if p.means(Word::Degrees) || p.means(Word::Hours) => {}
                Kind::Word(_) if self.axis(i) == Some(Axis::Dec) => {
                    return self.to_number(i + 1, g, false);
                }
                Kind::Word(p) if p.means(Word::And) => {}
                _ => return None,
            }
        }
        None
    }

    /// The angle that atom `i` holds, read as this axis; and the atom after it.
    pub(super) fn angle_at(
        &self,
        i: usize,
        axis: Axis,
        ra: Option<&Angle>,
    ) -> Option<(Angle, usize)> {
        match &self.atoms.get(i)?.kind {
            Kind::Angle(a) | Kind::Joined(a) => Some((**a, i + 1)),
            Kind::Run(run) => {
                let n = run.numbers.len();
                let decimal = run.numbers.iter().position(|(n, _)| n.places > 0);
                let most = match (axis, ra) {
                    // a bare declination has as many parts as its right ascension, unless that is of another notation
                    (Axis::Dec, Some(ra))
                        if ra.parts()[0].mark == Mark::Blank && ra.parts().len() == 2 =>
                    {
                        let fine = ra.parts()[1].number.places >= 2;
                        let third_is_seconds = run.numbers.get(2).is_some_and(|(x, _)| {
                            x.whole_digits == 2 && x.places == 0 && x.mantissa < 60
                        });
                        if fine && third_is_seconds { 3 } else { 2 }
                    }
                    _ => 3,
                };
                let take = decimal.map_or(n, |d| d + 1).min(most).min(n);
                run.angle(0, take).map(|a| (a, i + 1))
            }
            _ => None,
        }
    }

    /// The number goes on after a mark that is none of an angle's (`-24*18'33\"`), or a sign stands where none is read (`(-)24`, `24-`):
    /// what was read is not what was written.
    pub(super) fn cut(&self, angle: &Angle) -> bool {
        let after = self.text.get(angle.span.end..).unwrap_or("");
        let mut next = after.chars();
        let mark = next.next();
        let strange = mark.is_some_and(|c| {
            matches!(
                c,
                '*' | '^' | '\\' | '$' | '∘' | '~' | '_' | '#' | '@' | '%' | '&' | '<' | '¡' | '¢'
            )
        });
        let digit_near = after
            .chars()
            .take(12)
            .take_while(|c| !c.is_whitespace())
            .any(|c| c.is_ascii_digit());
        let trailing = mark.is_some_and(super::number::is_dash)
            && angle.sign.is_none()
            && next
                .next()
                .is_none_or(|c| c.is_whitespace() || matches!(c, ',' | ';' | ')'));
        let before = self.text.get(..angle.span.start).unwrap_or("");
        strange && digit_near || trailing || before.ends_with("(-)") || before.ends_with("(−)")
    }

    /// A number broken over a line: the declination ends its line with fewer parts than the right ascension, and the next line
    /// begins with the digits that are missing. The whole angle, and the atom after it.
    pub(super) fn rejoined(
        &self,
        angle: &Angle,
        end: usize,
        parts: usize,
    ) -> Option<(Angle, usize)> {
        let next = self.atoms.get(end + 1)?;
        let broken =
            angle.parts().len() < parts && matches!(self.atoms.get(end)?.kind, Kind::LineEnd);
        let last = angle.parts().last()?;
        if !broken
            || last.number.places > 0
            || !next
                .span
                .of(self.text)
                .starts_with(|c: char| c.is_ascii_digit())
        {
            return None;
        }
        let line_end = self.atoms[end + 1..]
            .iter()
            .find(|a| matches!(a.kind, Kind::LineEnd))
            .map_or(self.text.len(), |a| a.span.start);
        let head = angle.span.of(self.text);
        let joined = format!("{head} {}", self.text.get(next.span.start..line_end)?);
        let (rest, whole) = alt((super::angle::angle, super::angle::angle_blanks))
            .parse(Text::new(&joined))
            .ok()?;
        let cut = head.len() + 1;
        if whole.parts().len() != parts
            || rest.at() <= cut
            || whole.parts()[angle.parts().len()].number.whole_digits != 2
        {
            return None;
        }
        let (start, shift) = (angle.span.start, next.span.start);
        let whole = whole.moved(|o| if o < cut { start + o } else { shift + o - cut });
        let after = self
            .atoms
            .iter()
            .position(|a| a.span.start >= whole.span.end && a.span.start >= shift)?;
        Some((whole, after))
    }

    /// A label of a declination with a number within a dozen atoms, on this line or the next.
    pub(super) fn dec_label_near(&self, from: usize) -> bool {
        let mut ends = 0;
        for i in from..self.atoms.len().min(from + 14) {
            if matches!(self.atoms[i].kind, Kind::LineEnd) {
                ends += 1;
            }
            match self.axis(i) {
                Some(Axis::Dec | Axis::PolarDistance) => {
                    return self
                        .to_number(i + 1, &mut Gathered::default(), true)
                        .is_some();
                }
                Some(Axis::Ra) => return false,
                _ => {}
            }
            if ends > 1 {
                return false;
            }
        }
        false
    }

    /// A label of a declination not far ahead, with no other right ascension before it.
    pub(super) fn dec_label_ahead(&self, from: usize) -> bool {
        for i in from..self.atoms.len().min(from + 40) {
            match self.axis(i) {
                Some(Axis::Dec | Axis::PolarDistance) => return true,
                Some(Axis::Ra) => return false,
                _ => {}
            }
        }
        false
    }

    /// Hours or degrees, by its own marks, its notation, or a word beside it.
    pub(super) fn unit_of(&self, ra: &Angle, said: Option<AngleUnit>) -> Option<AngleUnit> {
        if let Some(u) = ra.marked_unit() {
            return Some(u);
        }
        if ra.parts().len() > 1 {
            return said.or(Some(AngleUnit::Hours));
        }
        said.or_else(|| (ra.value().abs() >= 24.0).then_some(AngleUnit::Degrees))
    }

    pub(super) fn unit_after(&self, i: usize) -> Option<AngleUnit> {
        let atom = self.atoms.get(i)?;
        let atom = if matches!(atom.kind, Kind::Mark('(' | '[' | ',')) {
            self.atoms.get(i + 1)?
        } else {
            atom
        };
        if atom.means(Word::Degrees) {
            Some(AngleUnit::Degrees)
        } else if atom.means(Word::Hours) {
            Some(AngleUnit::Hours)
        } else {
            None
        }
    }

    /// A second form of the declination after the first: `= -03:15:03`, `(-3d 15')`.
    pub(super) fn second_form(&self, from: usize) -> Option<(Angle, usize)> {
        let mut i = from;
        while let Some(atom) = self.atoms.get(i) {
            match &atom.kind {
                Kind::Mark('=' | '(' | ',') => i += 1,
                Kind::Word(p)
                    if p.means(Word::Degrees) || p.means(Word::ThatIs) || p.means(Word::Filler) =>
                {
                    i += 1
                }
                Kind::Angle(_) | Kind::Run(_) => return self.angle_at(i, Axis::Dec, None),
                Kind::Uncertainty(_) => {
                    i += 1;
                }
                _ => return None,
            }
        }
        None
    }

    pub(super) fn between_is(&self, from: usize, to: usize, marks: &[char]) -> bool {
        self.atoms[from.min(to)..to]
            .iter()
            .any(|a| matches!(a.kind, Kind::Mark(c) if marks.contains(&c)) || a.means(Word::ThatIs))
    }

    /// Another notation that could be the same right ascension: unsigned, and close in value.
    pub(super) fn same_kind_of_ra(
        &self,
        ra: &Angle,
        unit: Option<AngleUnit>,
        other: &Angle,
    ) -> bool {
        if other.sign.is_some() {
            return false;
        }
        let degrees = |a: &Angle, u: Option<AngleUnit>| match u {
            Some(AngleUnit::Degrees) => a.value(),
            _ => a.value() * 15.0,
        };
        ra.parts().len() != other.parts().len()
            || (degrees(ra, unit) - degrees(other, self.unit_of(other, None))).abs() < 1.0
    }

    pub(super) fn compass_atom(&self, i: usize, dec: &Angle) -> Option<(Spanned<Compass>, usize)> {
        if dec.compass.is_some() || dec.sign.is_some() {
            return None;
        }
        // "S", "south", "(south)", ", south"
        let bracket = self.atoms.get(i)?.is_mark('(');
        let comma = self.atoms[i].is_mark(',');
        let k = i + usize::from(bracket || comma);
        let atom = self.atoms.get(k)?;
        let Kind::Word(p) = &atom.kind else {
            return None;
        };
        let point = p.meanings().find_map(|w| match w {
            Word::Compass(c @ (Compass::North | Compass::South)) => Some(c),
            _ => None,
        })?;
        let words = atom.span.of(self.text);
        let single = words.chars().filter(|c| c.is_alphabetic()).count() == 1;
        if single && (comma || words.starts_with(char::is_lowercase))
            || bracket && !self.atoms.get(k + 1)?.is_mark(')')
        {
            return None;
        }
        Some((Spanned::new(point, atom.span), k + 1 + usize::from(bracket)))
    }

    /// `12.5 arcsec`, `-33.1 mas/yr`, `6".4`: too small a unit for a coordinate.
    pub(super) fn small_unit_after(&self, end: usize, last: &Angle) -> bool {
        let marked = last.parts().len() == 1
            && matches!(
                last.parts()[0].mark,
                Mark::Prime | Mark::DoublePrime | Mark::Second | Mark::Minute
            );
        marked
            || last.parts().len() == 1
                && self.atoms.get(end).is_some_and(|a| {
                    a.means(Word::Arcseconds)
                        || a.means(Word::Arcminutes)
                        || a.is_mark('"')
                        || a.is_mark('″')
                        || a.is_mark('′')
                        || a.span.of(self.text).starts_with("mas")
                })
    }
}

// ---------------------------------------------------------------------------------------------- small judgements on angles

pub(super) fn position(
    kind: PositionKind,
    first: Option<Angle>,
    second: Option<Angle>,
    unit: Option<AngleUnit>,
) -> Position {
    let span = match (first, second) {
        (Some(a), Some(b)) => a.span.cover(b.span),
        (Some(a), None) | (None, Some(a)) => a.span,
        (None, None) => Span::default(),
    };
    let first_unit = match kind {
        PositionKind::HourAngle => unit.or(Some(AngleUnit::Hours)),
        _ => unit,
    };
    Position {
        kind,
        first,
        second,
        first_unit,
        polar_distance: false,
        zenith_distance: false,
        azimuth_from_south: false,
        airless: false,
        labelled: false,
        span,
    }
}

/// The last numbers of a run that stands before a signed declination: a serial number or a day may lead it.
pub(super) fn ra_before(run: &Run, dec_parts: Option<usize>, named: bool) -> Option<Angle> {
    let n = run.numbers.len();
    let hour_ok = |i: usize| {
        run.numbers
            .get(i)
            .is_some_and(|(x, _)| x.places == 0 && x.mantissa <= 24)
    };
    let from = match n {
        0 => return None,
        1..=2 => 0,
        // "Suspect 5 18 12.2 -12 04": the number of a name, then hours and minutes
        3 => {
            let name_number = named && run.numbers[2].0.places > 0;
            usize::from(dec_parts == Some(2) && hour_ok(1) && (!hour_ok(0) || name_number))
        }
        _ => n - 3,
    };
    run.angle(from, n)
}

pub(super) fn sexagesimal(p: &Position) -> bool {
    p.first.is_some_and(|a| a.parts().len() > 1) && p.second.is_some_and(|a| a.parts().len() > 1)
}

pub(super) fn same_shape(ra: &Angle, dec: &Angle) -> bool {
    ra.parts().len() == dec.parts().len() && ra.parts()[0].mark == dec.parts()[0].mark
}

pub(super) fn plausible(p: &Position) -> bool {
    sexagesimal(p)
        || p.second
            .is_some_and(|d| d.sign.is_some() && d.parts()[0].number.places >= 2)
}

pub(super) fn in_range(ra: &Angle, dec: &Angle) -> bool {
    let sixty = |a: &Angle| a.parts()[1..].iter().all(|p| p.number.value() < 60.0);
    let hours = ra.parts().len() > 1 && ra.marked_unit() != Some(AngleUnit::Degrees);
    ra.value() < if hours { 24.0 } else { 360.0 }
        && dec.value().abs() <= 90.0
        && sixty(ra)
        && sixty(dec)
}
