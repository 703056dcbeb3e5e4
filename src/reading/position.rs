//! Positions: the atoms of a block paired into right ascension and declination, hour angle and declination, altitude and azimuth.
//!
//! A labelled pair is taken as it stands. A bare pair must look like nothing else, or have a tag, a label or a word beside it.

use super::equinox::{Tagged, equinox_year};
use super::run::Run;
use super::scan::{Atom, Kind};
use super::text::Text;
use super::words::Word;
use crate::report::{Angle, AngleUnit, Compass, Mark, Position, PositionKind};
use crate::span::{Span, Spanned};

/// A position found in a block, with what stands on it.
#[derive(Clone, Debug)]
pub struct Found {
    /// The position.
    pub position: Position,
    /// The same in other forms, written beside it.
    pub other_forms: Vec<(Position, Option<Spanned<Tagged>>)>,
    /// Tags in its label, between its numbers, or right beside it.
    pub tags: Vec<Spanned<Tagged>>,

    /// Index of its first atom (label included).
    pub first: usize,
    /// Index one past its last atom.
    pub end: usize,
}

/// What two coordinates a label speaks of.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
enum Axis {
    Ra,
    Dec,
    HourAngle,
    PolarDistance,
    Altitude,
    Azimuth,
    ZenithDistance,
}

/// What was gathered on the way to a number.
#[derive(Default, Clone)]
struct Gathered {
    tags: Vec<Spanned<Tagged>>,
    unit: Option<AngleUnit>,
}

/// All positions of a block's atoms.
pub fn positions(text: &str, atoms: &[Atom]) -> Vec<Found> {
    let finder = Finder { text, atoms };
    let mut found: Vec<Found> = Vec::new();
    let mut i = 0;
    while i < atoms.len() {
        let from = found.last().map_or(0, |f| f.end);
        match finder.labelled(i).or_else(|| finder.bare(i, from)) {
            Some(mut f) => {
                finder.tags_around(&mut f, from);
                i = f.end.max(i + 1);
                found.push(f);
            }
            None => i += 1,
        }
    }
    finder.join_other_forms(found)
}

struct Finder<'a, 't> {
    text: &'t str,
    atoms: &'a [Atom<'t>],
}

impl<'t> Finder<'_, 't> {
    fn axis(&self, i: usize) -> Option<Axis> {
        let atom = self.atoms.get(i)?;
        let Kind::Word(p) = &atom.kind else {
            return None;
        };
        let is = |w| p.means(w);
        Some(if is(Word::RightAscension) {
            Axis::Ra
        } else if is(Word::Declination) {
            Axis::Dec
        } else if is(Word::PolarDistance) {
            Axis::PolarDistance
        } else if is(Word::HourAngle) {
            Axis::HourAngle
        } else if is(Word::Azimuth) {
            Axis::Azimuth
        } else if is(Word::ZenithDistance) {
            Axis::ZenithDistance
        } else if is(Word::Altitude) {
            Axis::Altitude
        } else {
            return None;
        })
    }

    // ------------------------------------------------------------------------------------------ labelled

    fn labelled(&self, i: usize) -> Option<Found> {
        if self.atoms[i].means(Word::Both) {
            return self.both(i);
        }
        let axis = self.axis(i)?;
        match axis {
            Axis::Ra | Axis::HourAngle => self.first_then_second(i, axis),
            Axis::Dec | Axis::PolarDistance => self.second_then_first(i, axis),
            Axis::Altitude | Axis::ZenithDistance | Axis::Azimuth => self.horizontal(i, axis),
        }
    }

    /// `RA/Dec (J2000): 6:44:48 -8:24:00`, `(R.A., Dec) = (101.2 deg, -8.4 deg)`.
    fn both(&self, i: usize) -> Option<Found> {
        let mut g = Gathered::default();
        let at = self.to_number(i + 1, &mut g, true)?;
        let unit = g.unit;
        let mut found = self.pair(at, &mut g, true, unit)?;
        if self.blocked(i) && !sexagesimal(&found.position) {
            return None;
        }
        found.first = i;
        found.position.labelled = true;
        Some(found)
    }

    /// `RA 5h34m.. Dec +22..`, `HA +01h56m36s, declination +45°33′`.
    fn first_then_second(&self, i: usize, axis: Axis) -> Option<Found> {
        // "RA and Dec" with a label that no table row knows: RA , Dec = number number
        let mut g = Gathered::default();
        let mut next = i + 1;
        if axis == Axis::Ra
            && let Some(d) = self.label_after(next, &[Axis::Dec], &mut g.clone())
            && self
                .to_number(next, &mut Gathered::default(), true)
                .is_none_or(|n| n > d)
        {
            let mut h = Gathered::default();
            self.label_after(next, &[Axis::Dec], &mut h);
            if let Some(at) = self.to_number(d + 1, &mut h, true) {
                let unit = h.unit;
                let mut found = self.pair(at, &mut h, true, unit)?;
                if self.blocked(i) && !sexagesimal(&found.position) {
                    return None;
                }
                found.first = i;
                found.position.labelled = true;
                return Some(found);
            }
        }
        let at = self.to_number(next, &mut g, true)?;
        let label_unit = g.unit;
        let greek = self.atoms[i]
            .span
            .of(self.text)
            .eq_ignore_ascii_case("alpha");
        // one run may hold both: "RA 13 08 52 22 14 39" is unlabelled in the middle
        let (ra, used) = self.angle_at(at, Axis::Ra, None)?;
        let unit = self.unit_of(&ra, g.unit.or_else(|| self.unit_after(used)));
        next = used;
        let mut other_ra: Option<(Angle, Option<AngleUnit>)> = None;
        let mut bracket = false;
        // on the way to the declination: tags, uncertainties, another form of the RA
        let dec = loop {
            let Some(atom) = self.atoms.get(next) else {
                break None;
            };
            match &atom.kind {
                Kind::Equinox(t) => {
                    if t.weak && !self.bracketed(next) && !g.tags.is_empty() {
                        break None;
                    }
                    g.tags.push(Spanned::new(*t, atom.span));
                }
                Kind::Uncertainty(_) => {}
                Kind::LineEnd
                | Kind::Mark(
                    ',' | ';' | '/' | '|' | '&' | ':' | ')' | ']' | '}' | '~' | '·' | '-' | '–',
                ) => {}
                Kind::Mark('(' | '[' | '{') => bracket = true,
                Kind::Mark('=' | '≈') => {}
                Kind::Word(_)
                    if self
                        .axis(next)
                        .is_some_and(|a| a == Axis::Dec || a == Axis::PolarDistance) =>
                {
                    let which = self.axis(next)?;
                    let mut h = Gathered::default();
                    let Some(at) = self.to_number(next + 1, &mut h, true) else {
                        break None;
                    };
                    let Some((dec, used)) = self.angle_at(at, Axis::Dec, Some(&ra)) else {
                        break None;
                    };
                    g.tags.append(&mut h.tags);
                    break Some((dec, used, which == Axis::PolarDistance));
                }
                Kind::Word(p)
                    if [
                        Word::Filler,
                        Word::ThatIs,
                        Word::Degrees,
                        Word::Hours,
                        Word::Uncertainty,
                        Word::Arcseconds,
                        Word::Seconds,
                    ]
                    .iter()
                    .any(|w| p.means(*w)) => {}
                Kind::Word(p) if p.means(Word::And) => {}
                Kind::Angle(_) | Kind::Run(_) | Kind::Joined(_) => {
                    // directly after the RA: the declination, or the RA once more in another form
                    let (candidate, after) = self.angle_at(next, Axis::Dec, Some(&ra))?;
                    let again = self.between_is(used, next, &['=', '('])
                        && self.same_kind_of_ra(&ra, unit, &candidate);
                    if again
                        && other_ra.is_none()
                        && self
                            .label_after(
                                after,
                                &[Axis::Dec, Axis::PolarDistance],
                                &mut Gathered::default(),
                            )
                            .is_some()
                    {
                        let (again, after) = self.angle_at(next, Axis::Ra, None)?;
                        let unit = self.unit_of(&again, self.unit_after(after));
                        other_ra = Some((again, unit));
                        next = after;
                        continue;
                    }
                    if candidate.sign.is_some()
                        || candidate.marked_unit() == Some(AngleUnit::Degrees)
                        || same_shape(&ra, &candidate)
                        || candidate.compass.is_some()
                    {
                        break Some((candidate, after, false));
                    }
                    break None;
                }
                _ => break None,
            }
            next += 1;
            let lines = self.atoms[used.min(next)..next.min(self.atoms.len())]
                .iter()
                .filter(|a| matches!(a.kind, Kind::LineEnd))
                .count();
            if lines > 2 || next > used + 14 {
                break None;
            }
        };
        let _ = bracket;
        let kind = if axis == Axis::HourAngle {
            PositionKind::HourAngle
        } else {
            PositionKind::Equatorial
        };
        let sexagesimal_ra = ra.parts().len() > 1 || ra.marked_unit() == Some(AngleUnit::Hours);
        match dec {
            Some((mut dec, mut end, polar_distance)) => {
                if let Some(c) = self.compass_atom(end, &dec) {
                    dec.compass = Some(c);
                    dec.span.end = c.span.end;
                    end += 1;
                }
                let mut other_forms = Vec::new();
                if let Some((again, again_unit)) = other_ra {
                    // the second form of the declination follows the first
                    if let Some((d2, after)) = self.second_form(end) {
                        let p = position(kind, Some(again), Some(d2), again_unit);
                        other_forms.push((p, None));
                        end = after;
                    }
                }
                let mut p = position(kind, Some(ra), Some(dec), unit);
                p.polar_distance = polar_distance;
                p.labelled = true;
                if self.blocked(i) && !(sexagesimal(&p) || !g.tags.is_empty())
                    || self.small_unit_after(end, &dec)
                    || greek && !plausible(&p)
                {
                    return None;
                }
                Some(Found {
                    position: p,
                    other_forms,
                    tags: g.tags,

                    first: i,
                    end,
                })
            }
            None => {
                // alone: incomplete, where it is clearly a right ascension
                if greek
                    || self.blocked(i)
                    || !(sexagesimal_ra || !g.tags.is_empty() || label_unit.is_some())
                    || self.small_unit_after(used, &ra)
                {
                    return None;
                }
                if axis == Axis::HourAngle {
                    return None;
                }
                let mut p = position(kind, Some(ra), None, unit);
                p.labelled = true;
                Some(Found {
                    position: p,
                    other_forms: Vec::new(),
                    tags: g.tags,

                    first: i,
                    end: used,
                })
            }
        }
    }

    /// `Dec +12 30, RA 5h 12m`.
    fn second_then_first(&self, i: usize, axis: Axis) -> Option<Found> {
        let mut g = Gathered::default();
        let at = self.to_number(i + 1, &mut g, true)?;
        let (dec, used) = self.angle_at(at, Axis::Dec, None)?;
        let greek = self.atoms[i]
            .span
            .of(self.text)
            .eq_ignore_ascii_case("delta");
        let ra = self
            .label_after(used, &[Axis::Ra, Axis::HourAngle], &mut g)
            .and_then(|l| {
                let at = self.to_number(l + 1, &mut g, true)?;
                let (ra, end) = self.angle_at(at, Axis::Ra, None)?;
                Some((self.axis(l)?, ra, end))
            });
        match ra {
            Some((which, ra, end)) => {
                let kind = if which == Axis::HourAngle {
                    PositionKind::HourAngle
                } else {
                    PositionKind::Equatorial
                };
                let unit = self.unit_of(&ra, self.unit_after(end));
                let mut p = position(kind, Some(ra), Some(dec), unit);
                p.polar_distance = axis == Axis::PolarDistance;
                p.labelled = true;
                if self.blocked(i) && !sexagesimal(&p) || greek && !plausible(&p) {
                    return None;
                }
                Some(Found {
                    position: p,
                    other_forms: Vec::new(),
                    tags: g.tags,

                    first: i,
                    end,
                })
            }
            None => {
                let clear =
                    dec.parts().len() > 1 && (dec.sign.is_some() || dec.marked_unit().is_some());
                if greek || !clear || self.blocked(i) || self.small_unit_after(used, &dec) {
                    return None;
                }
                let mut p = position(PositionKind::Equatorial, None, Some(dec), None);
                p.polar_distance = axis == Axis::PolarDistance;
                p.labelled = true;
                Some(Found {
                    position: p,
                    other_forms: Vec::new(),
                    tags: g.tags,

                    first: i,
                    end: used,
                })
            }
        }
    }

    /// `Alt. 26° 31', Az. 267° 53' (airless)`; one alone is only a statement.
    fn horizontal(&self, i: usize, axis: Axis) -> Option<Found> {
        let mut g = Gathered::default();
        let at = self.to_number(i + 1, &mut g, false)?;
        let (one, used) = self.angle_at(at, Axis::Dec, None)?;
        // degrees only: an altitude in metres is no altitude, and a bare number wants its partner
        let partner: &[Axis] = if axis == Axis::Azimuth {
            &[Axis::Altitude, Axis::ZenithDistance]
        } else {
            &[Axis::Azimuth]
        };
        let other = self.label_after(used, partner, &mut g).and_then(|l| {
            let at = self.to_number(l + 1, &mut g, false)?;
            let (angle, end) = self.angle_at(at, Axis::Dec, None)?;
            Some((self.axis(l)?, angle, end))
        });
        let Some((which, two, end)) = other else {
            return None;
        };
        let (azimuth, altitude, zenith) = if axis == Axis::Azimuth {
            (one, two, which == Axis::ZenithDistance)
        } else {
            (two, one, axis == Axis::ZenithDistance)
        };
        let mut p = position(
            PositionKind::Horizontal,
            Some(azimuth),
            Some(altitude),
            Some(AngleUnit::Degrees),
        );
        p.zenith_distance = zenith;
        p.labelled = true;
        let mut last = end;
        for (k, atom) in self.atoms.iter().enumerate().skip(end).take(6) {
            match &atom.kind {
                Kind::Word(w) if w.means(Word::Airless) => {
                    p.airless = true;
                    last = k + 1;
                }
                Kind::Word(w) if w.means(Word::FromSouth) => {
                    p.azimuth_from_south = true;
                    last = k + 1;
                }
                Kind::Mark(_) => {}
                _ => break,
            }
        }
        Some(Found {
            position: p,
            other_forms: Vec::new(),
            tags: Vec::new(),

            first: i,
            end: last,
        })
    }

    // ------------------------------------------------------------------------------------------ bare

    fn bare(&self, i: usize, from: usize) -> Option<Found> {
        if !matches!(
            self.atoms[i].kind,
            Kind::Angle(_) | Kind::Run(_) | Kind::Joined(_)
        ) {
            return None;
        }
        let mut g = Gathered::default();
        let found = self.pair(i, &mut g, false, None)?;
        let p = &found.position;
        let (ra, dec) = (p.first?, p.second?);
        let tag = !found.tags.is_empty()
            || self.tag_right_before(i, from)
            || self.tag_right_after(found.end);
        let marked_ra = ra.marked_unit() == Some(AngleUnit::Hours) && ra.parts().len() > 1;
        let dec_marked = dec.marked_unit() == Some(AngleUnit::Degrees)
            || dec.sign.is_some()
            || dec.compass.is_some();
        if self.blocked(i) && !tag {
            return None;
        }
        if ra.sign.is_some()
            || matches!(
                ra.compass.map(|c| c.value),
                Some(Compass::North | Compass::South)
            )
        {
            return None;
        }
        let padded = |a: &Angle| a.parts().iter().all(|p| p.number.whole_digits == 2);
        let colons = |a: &Angle| a.parts()[0].mark == Mark::Colon;
        let strong = marked_ra && (dec_marked || dec.parts().len() > 1)
            || colons(&ra) && ra.parts().len() == 3 && dec.sign.is_some() && dec.parts().len() > 1
            || ra.parts().len() == 3
                && padded(&ra)
                && dec.sign.is_some()
                && dec.parts().len() > 1
                && padded(&dec)
                && in_range(&ra, &dec);
        let named = self.word_before(i)
            || self.named_line(i)
                && ra.parts().len() > 1
                && padded(&ra)
                && (dec.sign.is_some() || dec.compass.is_some());
        let pairs_well =
            ra.parts().len() > 1 && dec.parts().len() > 1 || dec.sign.is_some() || dec_marked;
        if strong
            || tag && (pairs_well || ra.marked_unit().is_some())
            || (named || self.form_led(i, from)) && pairs_well && in_range(&ra, &dec)
        {
            Some(found)
        } else {
            None
        }
    }

    /// An RA at atom `i` and a declination right after it.
    fn pair(
        &self,
        i: usize,
        g: &mut Gathered,
        labelled: bool,
        unit: Option<AngleUnit>,
    ) -> Option<Found> {
        // one unsigned run may hold both
        if let Kind::Run(run) = &self.atoms.get(i)?.kind
            && run.sign.is_none()
            && let Some((ra, dec, tag)) = self.split_run(run, i)
        {
            let unit = self.unit_of(&ra, unit);
            let p = position(PositionKind::Equatorial, Some(ra), Some(dec), unit);
            let mut tags = std::mem::take(&mut g.tags);
            tags.extend(tag);
            return Some(Found {
                position: p,
                other_forms: Vec::new(),
                tags,

                first: i,
                end: i + 1,
            });
        }
        let next_dec = self.after_soft(i + 1, g, labelled)?;
        let dec_run = match &self.atoms[next_dec].kind {
            Kind::Run(r) => Some(r.numbers.len()),
            _ => None,
        };
        let (ra, _) = match &self.atoms[i].kind {
            Kind::Run(run) => (ra_before(run, dec_run)?, i + 1),
            _ => self.angle_at(i, Axis::Ra, None)?,
        };
        let mut h = Gathered::default();
        let between_unit = self.unit_after(i + 1);
        let (mut dec, mut end) = self.angle_at(next_dec, Axis::Dec, Some(&ra))?;
        if dec.marked_unit() == Some(AngleUnit::Hours) {
            return None;
        }
        if let Some(c) = self.compass_atom(end, &dec) {
            dec.compass = Some(c);
            dec.span.end = c.span.end;
            end += 1;
        }
        g.tags.append(&mut h.tags);
        let unit = self.unit_of(
            &ra,
            unit.or(between_unit)
                .or_else(|| if labelled { self.unit_after(end) } else { None }),
        );
        let p = position(PositionKind::Equatorial, Some(ra), Some(dec), unit);
        let mut tags = std::mem::take(&mut g.tags);
        tags.extend(self.tag_in_run(next_dec, &dec));
        if self.small_unit_after(end, &dec) {
            return None;
        }
        Some(Found {
            position: p,
            other_forms: Vec::new(),
            tags,

            first: i,
            end,
        })
    }

    /// Six, five or four unsigned numbers in one run: RA and Dec without a sign between.
    fn split_run(&self, run: &Run, i: usize) -> Option<(Angle, Angle, Option<Spanned<Tagged>>)> {
        let n = run.numbers.len();
        if n < 4 {
            return None;
        }
        // a signed number next to it is its declination instead
        if let Some(next) = self.atoms.get(i + 1)
            && matches!(&next.kind, Kind::Run(r) if r.sign.is_some())
        {
            return None;
        }
        let decimal = run.numbers.iter().position(|(n, _)| n.places > 0);
        let cut = match decimal {
            Some(d @ (1 | 2)) => d + 1,
            _ if n >= 5 => 3,
            _ => 2,
        };
        let end = (cut * 2).min(n);
        if end - cut < 2 {
            return None;
        }
        let ra = run.angle(0, cut)?;
        let dec = run.angle(cut, end)?;
        if !in_range(&ra, &dec) || !run.padded(1, end) {
            return None;
        }
        Some((ra, dec, self.tag_of_number(run, end)))
    }

    // ------------------------------------------------------------------------------------------ pieces

    /// The next atom that holds a number, over what may stand between a label and its value.
    fn to_number(&self, from: usize, g: &mut Gathered, lines: bool) -> Option<usize> {
        let mut line_ends = 0;
        for i in from..self.atoms.len().min(from + 14) {
            let atom = &self.atoms[i];
            match &atom.kind {
                Kind::Angle(_) | Kind::Run(_) | Kind::Joined(_) => return Some(i),
                Kind::Equinox(t) => g.tags.push(Spanned::new(*t, atom.span)),
                Kind::Uncertainty(_) => {}
                Kind::LineEnd if lines && line_ends == 0 => line_ends += 1,
                Kind::Mark(c) if "=:,;/|()[]{}~.-–&≈<>*_`\"".contains(*c) => {}
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
        }
        None
    }

    /// The next label of one of these kinds, over what may stand between a value and the next label.
    fn label_after(&self, from: usize, wanted: &[Axis], g: &mut Gathered) -> Option<usize> {
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
    fn after_soft(&self, from: usize, g: &mut Gathered, labelled: bool) -> Option<usize> {
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
    fn angle_at(&self, i: usize, axis: Axis, ra: Option<&Angle>) -> Option<(Angle, usize)> {
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

    /// Hours or degrees, by its own marks, its notation, or a word beside it.
    fn unit_of(&self, ra: &Angle, said: Option<AngleUnit>) -> Option<AngleUnit> {
        if let Some(u) = ra.marked_unit() {
            return Some(u);
        }
        if ra.parts().len() > 1 {
            return said.or(Some(AngleUnit::Hours));
        }
        said.or_else(|| (ra.value().abs() >= 24.0).then_some(AngleUnit::Degrees))
    }

    fn unit_after(&self, i: usize) -> Option<AngleUnit> {
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
    fn second_form(&self, from: usize) -> Option<(Angle, usize)> {
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

    fn between_is(&self, from: usize, to: usize, marks: &[char]) -> bool {
        self.atoms[from.min(to)..to]
            .iter()
            .any(|a| matches!(a.kind, Kind::Mark(c) if marks.contains(&c)) || a.means(Word::ThatIs))
    }

    /// Another notation that could be the same right ascension: unsigned, and close in value.
    fn same_kind_of_ra(&self, ra: &Angle, unit: Option<AngleUnit>, other: &Angle) -> bool {
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

    fn compass_atom(&self, i: usize, dec: &Angle) -> Option<Spanned<Compass>> {
        if dec.compass.is_some() || dec.sign.is_some() {
            return None;
        }
        let atom = self.atoms.get(i)?;
        let Kind::Word(p) = &atom.kind else {
            return None;
        };
        let point = p.meanings().find_map(|w| match w {
            Word::Compass(c @ (Compass::North | Compass::South)) => Some(c),
            _ => None,
        })?;
        let words = atom.span.of(self.text);
        let single = words.chars().filter(|c| c.is_alphabetic()).count() == 1;
        (!single || words.starts_with(char::is_uppercase)).then_some(Spanned::new(point, atom.span))
    }

    /// `12.5 arcsec`, `-33.1 mas/yr`, `6".4`: too small a unit for a coordinate.
    fn small_unit_after(&self, end: usize, last: &Angle) -> bool {
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

    // ------------------------------------------------------------------------------------------ evidence

    /// A word in the same clause says that what follows is no position.
    fn blocked(&self, i: usize) -> bool {
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
                    return !p
                        .meanings()
                        .any(|w| matches!(w, Word::Weekday(_) | Word::Month(_)));
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

    /// "at", "position", "found" close before it on the line.
    fn word_before(&self, i: usize) -> bool {
        for k in (i.saturating_sub(5)..i).rev() {
            let atom = &self.atoms[k];
            match &atom.kind {
                Kind::LineEnd | Kind::Mark(';' | '.') => return false,
                Kind::Word(p)
                    if [
                        Word::Position,
                        Word::At,
                        Word::RoleReference,
                        Word::RolePointing,
                        Word::RoleCatalogued,
                        Word::RoleRegion,
                        Word::RoleMeasured,
                    ]
                    .iter()
                    .any(|w| p.means(*w)) =>
                {
                    return true;
                }
                Kind::Word(_) | Kind::Plain | Kind::Mark(_) | Kind::Equinox(_) => {}
                _ => return false,
            }
        }
        false
    }

    /// "that is", "=" or a bracket opened right after a position: another form of it follows.
    fn form_led(&self, i: usize, from: usize) -> bool {
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
    fn named_line(&self, i: usize) -> bool {
        let mut words = 0;
        for k in (0..i).rev() {
            match &self.atoms[k].kind {
                Kind::LineEnd => break,
                Kind::Plain | Kind::Word(_) => words += 1,
                Kind::Mark(
                    ':' | '-' | '–' | '=' | ',' | '#' | '*' | '|' | '.' | '(' | ')' | ';',
                )
                | Kind::Run(_)
                | Kind::Instant(_)
                | Kind::Equinox(_) => {}
                _ => return false,
            }
        }
        words <= 5
    }

    fn bracketed(&self, i: usize) -> bool {
        i > 0 && self.atoms[i - 1].is_mark('(')
            || self.atoms.get(i + 1).is_some_and(|a| a.is_mark(')'))
    }

    fn tag_right_before(&self, i: usize, from: usize) -> bool {
        self.tag_before(i, from).is_some()
    }

    fn tag_right_after(&self, end: usize) -> bool {
        self.tag_after(end).is_some()
    }

    /// The tag right before a position, over separators.
    fn tag_before(&self, first: usize, from: usize) -> Option<(usize, Spanned<Tagged>)> {
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
    fn tag_after(&self, end: usize) -> Option<(usize, Spanned<Tagged>)> {
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

    fn ends_clause(&self, i: usize) -> bool {
        self.atoms.get(i).is_none_or(|a| {
            matches!(a.kind, Kind::LineEnd | Kind::Mark(';' | ')' | ',' | '.'))
                || a.means(Word::From)
        })
    }

    fn tag_of_number(&self, run: &Run, index: usize) -> Option<Spanned<Tagged>> {
        let (_, span) = run.numbers.get(index)?;
        let (rest, tag) = equinox_year(Text::window(self.text, *span)).ok()?;
        let year = run.numbers[index].0;
        // a bare year without decimals is an equinox only where it is one that people use
        let usual =
            year.places > 0 || year.mantissa % 25 == 0 || matches!(year.mantissa, 1855 | 1860);
        (rest.is_empty() && usual).then_some(Spanned::new(tag, *span))
    }

    /// A year that sticks to the declination's run: `+26 06 24.92 2000.0`.
    fn tag_in_run(&self, i: usize, dec: &Angle) -> Option<Spanned<Tagged>> {
        let Kind::Run(run) = &self.atoms.get(i)?.kind else {
            return None;
        };
        (dec.parts().len() < run.numbers.len())
            .then(|| self.tag_of_number(run, dec.parts().len()))
            .flatten()
    }

    /// Adds the tags that stand right before and right after.
    fn tags_around(&self, f: &mut Found, from: usize) {
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

    /// Two positions with "that is", "=", brackets between, or one decimal beside one sexagesimal, are two forms of one.
    fn join_other_forms(&self, found: Vec<Found>) -> Vec<Found> {
        let mut joined: Vec<Found> = Vec::new();
        for f in found {
            if let Some(last) = joined.last_mut()
                && self.other_form(last, &f)
            {
                let tag = f.tags.first().copied();
                last.other_forms.push((f.position, tag));
                last.other_forms.extend(f.other_forms);
                last.end = f.end;
                continue;
            }
            joined.push(f);
        }
        joined
    }

    fn other_form(&self, first: &Found, second: &Found) -> bool {
        let between = &self.atoms[first.end.min(second.first)..second.first];
        let mut says = false;
        let mut open = false;
        let mut lines = 0;
        for a in between {
            match &a.kind {
                Kind::Mark('=' | '≡') => says = true,
                Kind::Mark('(' | '[' | '{') => open = true,
                Kind::LineEnd => lines += 1,
                Kind::Mark(_) | Kind::Equinox(_) | Kind::Uncertainty(_) => {}
                Kind::Word(p) if p.means(Word::ThatIs) => says = true,
                Kind::Word(p)
                    if [Word::Filler, Word::Position, Word::Degrees, Word::Hours]
                        .iter()
                        .any(|w| p.means(*w)) => {}
                // date and site lines may stand between a position and its other form in brackets
                Kind::Instant(_) | Kind::Site(_) | Kind::Elevation(_) => {}
                Kind::Word(p)
                    if [Word::Date, Word::Site, Word::Time]
                        .iter()
                        .any(|w| p.means(*w)) => {}
                _ => return self.that_is_before(second.first) && self.no_new_object(between),
            }
        }
        let close = apart_deg(&first.position, &second.position).is_some_and(|d| d < 2.0);
        says || open && close
            || lines <= 1 && close && notation(&first.position) != notation(&second.position)
    }

    fn that_is_before(&self, i: usize) -> bool {
        (i.saturating_sub(3)..i)
            .any(|k| self.atoms[k].means(Word::ThatIs) && !self.atoms[k].means(Word::Filler))
    }

    fn no_new_object(&self, between: &[Atom]) -> bool {
        !between.iter().any(|a| a.means(Word::Object))
    }
}

// ---------------------------------------------------------------------------------------------- small judgements on angles

fn position(
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
fn ra_before(run: &Run, dec_parts: Option<usize>) -> Option<Angle> {
    let n = run.numbers.len();
    let hour_ok = |i: usize| {
        run.numbers
            .get(i)
            .is_some_and(|(x, _)| x.places == 0 && x.mantissa <= 24)
    };
    let from = match n {
        0 => return None,
        1..=2 => 0,
        3 => usize::from(dec_parts == Some(2) && !hour_ok(0) && hour_ok(1)),
        _ => n - 3,
    };
    run.angle(from, n)
}

fn sexagesimal(p: &Position) -> bool {
    p.first.is_some_and(|a| a.parts().len() > 1) && p.second.is_some_and(|a| a.parts().len() > 1)
}

fn same_shape(ra: &Angle, dec: &Angle) -> bool {
    ra.parts().len() == dec.parts().len() && ra.parts()[0].mark == dec.parts()[0].mark
}

fn plausible(p: &Position) -> bool {
    sexagesimal(p)
        || p.second
            .is_some_and(|d| d.sign.is_some() && d.parts()[0].number.places >= 2)
}

fn in_range(ra: &Angle, dec: &Angle) -> bool {
    let sixty = |a: &Angle| a.parts()[1..].iter().all(|p| p.number.value() < 60.0);
    let hours = ra.parts().len() > 1 && ra.marked_unit() != Some(AngleUnit::Degrees);
    ra.value() < if hours { 24.0 } else { 360.0 }
        && dec.value().abs() <= 90.0
        && sixty(ra)
        && sixty(dec)
}

/// Decimal, or sexagesimal.
fn notation(p: &Position) -> bool {
    p.first.is_some_and(|a| a.parts().len() > 1)
}

fn apart_deg(a: &Position, b: &Position) -> Option<f64> {
    let degrees = |p: &Position| {
        let ra = p.first?;
        let ra = if p.first_unit == Some(AngleUnit::Degrees) {
            ra.value()
        } else {
            ra.value() * 15.0
        };
        Some((ra, p.second?.value()))
    };
    let ((r1, d1), (r2, d2)) = (degrees(a)?, degrees(b)?);
    let dr = (r1 - r2 + 180.0).rem_euclid(360.0) - 180.0;
    Some((dr * d1.to_radians().cos()).abs().max((d1 - d2).abs()))
}
