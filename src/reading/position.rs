//! Positions: the atoms of a block paired into right ascension and declination, hour angle and declination, altitude and azimuth.
//!
//! A labelled pair is taken as it stands. A bare pair must look like nothing else, or have a tag, a label or a word beside it.

use super::equinox::Tagged;
use super::pieces::{in_range, plausible, position, ra_before, same_shape, sexagesimal};
use super::run::Run;
use super::scan::{Atom, Kind};
use super::words::Word;
use crate::report::{Angle, AngleUnit, Compass, Mark, Position, PositionKind, Sign};
use crate::span::Spanned;

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

impl Found {
    /// A position with its tags, found in the atoms `first..end`; no other forms yet.
    fn of(position: Position, tags: Vec<Spanned<Tagged>>, first: usize, end: usize) -> Found {
        Found {
            position,
            other_forms: Vec::new(),
            tags,
            first,
            end,
        }
    }
}

/// What two coordinates a label speaks of.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(super) enum Axis {
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
pub(super) struct Gathered {
    pub tags: Vec<Spanned<Tagged>>,
    pub unit: Option<AngleUnit>,
    /// A minus left at the end of a line, before its number.
    pub minus: Option<Spanned<Sign>>,
}

/// All positions of a block's atoms.
pub fn positions(text: &str, atoms: &[Atom]) -> Vec<Found> {
    let mut finder = Finder {
        text,
        atoms,
        last: None,
    };
    let mut found: Vec<Found> = Vec::new();
    let mut i = 0;
    while i < atoms.len() {
        let from = found.last().map_or(0, |f| f.end);
        match finder.labelled(i).or_else(|| finder.bare(i, from)) {
            Some(mut f) => {
                finder.tags_around(&mut f, from);
                i = f.end.max(i + 1);
                finder.last = Some(f.position.clone());
                found.push(f);
            }
            None => i += 1,
        }
    }
    finder.join_other_forms(found)
}

pub(super) struct Finder<'a, 't> {
    pub text: &'t str,
    pub atoms: &'a [Atom<'t>],
    /// The position found last.
    pub last: Option<Position>,
}

impl<'t> Finder<'_, 't> {
    pub(super) fn axis(&self, i: usize) -> Option<Axis> {
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
        } else if is(Word::Altitude) || is(Word::Elevation) {
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
        let (mut ra, mut used) = self.angle_at(at, Axis::Ra, None)?;
        if let Some((whole, after)) = self
            .rejoined(&ra, used, 3)
            .or_else(|| self.rejoined(&ra, used, 2))
        {
            (ra, used) = (whole, after);
        }
        let unit = self.unit_of(&ra, g.unit.or_else(|| self.unit_after(used)));
        next = used;
        let mut other_ra: Option<(Angle, Option<AngleUnit>)> = None;
        // on the way to the declination: tags, uncertainties, another form of the RA
        let mut forms_passed = 0;
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
                Kind::Mark('(' | '[' | '{') => {}
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
                    let Some((mut dec, used)) = self.angle_at(at, Axis::Dec, Some(&ra)) else {
                        break None;
                    };
                    if dec.sign.is_none() {
                        dec.sign = h.minus;
                    }
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
                    // with the declination's own label ahead: an error of the right ascension, or another form of it
                    let ahead = self.dec_label_near(after);
                    if ahead && !self.same_kind_of_ra(&ra, unit, &candidate) {
                        forms_passed += 1;
                        next = after;
                        continue;
                    }
                    // hours are no declination: another form, or the RA of another equinox; its declination has a label of its own
                    let again_on_lines = candidate.sign.is_none()
                        && self.atoms[used..next]
                            .iter()
                            .any(|a| matches!(a.kind, Kind::LineEnd))
                        && self.dec_label_ahead(after);
                    if candidate.marked_unit() == Some(AngleUnit::Hours)
                        && self.dec_label_ahead(after)
                        || again_on_lines
                    {
                        forms_passed += 1;
                        next = after;
                        continue;
                    }
                    if candidate.marked_unit() == Some(AngleUnit::Hours) {
                        break None;
                    }
                    let again = self.between_is(used, next, &['=', '(', '[', '{'])
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
            if lines > 2 + forms_passed || next > used + 14 + 12 * forms_passed {
                break None;
            }
        };
        let kind = if axis == Axis::HourAngle {
            PositionKind::HourAngle
        } else {
            PositionKind::Equatorial
        };
        let sexagesimal_ra = ra.parts().len() > 1 || ra.marked_unit() == Some(AngleUnit::Hours);
        match dec {
            Some((mut dec, mut end, polar_distance)) => {
                if let Some((whole, after)) = self.rejoined(&dec, end, ra.parts().len()) {
                    (dec, end) = (whole, after);
                }
                if let Some((c, after)) = self.compass_atom(end, &dec) {
                    dec.compass = Some(c);
                    dec.span.end = c.span.end;
                    end = after;
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
                let whole = !self.cut(&dec);
                let mut p = position(kind, Some(ra), whole.then_some(dec), unit);
                p.polar_distance = polar_distance;
                p.labelled = true;
                if self.blocked(i) && !sexagesimal(&p) && g.tags.is_empty()
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
                Some(Found::of(p, g.tags, i, used))
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
                Some(Found::of(p, g.tags, i, end))
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
                Some(Found::of(p, g.tags, i, used))
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
        let (which, two, end) = other?;
        let (mut one, mut two, mut end) = (one, two, end);
        let mut from_south = false;
        // "S 35° W": counted from the south through west; other quarters are not settled here
        let azimuth_here = if axis == Axis::Azimuth {
            &mut one
        } else {
            &mut two
        };
        if let Some(point) = azimuth_here.compass {
            let after = self.atoms.get(end).and_then(|a| match &a.kind {
                Kind::Word(p) => p.meanings().find_map(|w| match w {
                    Word::Compass(c) => Some(c),
                    _ => None,
                }),
                _ => None,
            });
            match (point.value, after) {
                (Compass::South, Some(Compass::West)) => from_south = true,
                (Compass::North, Some(Compass::East)) => {}
                _ => return None,
            }
            azimuth_here.compass = None;
            end += 1;
        }
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
        p.azimuth_from_south = from_south;
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
        Some(Found::of(p, Vec::new(), i, last))
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
        let over_lines = self.word_before(i);
        let found = self.pair(i, &mut g, over_lines, None)?;
        let p = &found.position;
        let (ra, dec) = (p.first?, p.second?);
        let tag = !found.tags.is_empty()
            || self.tag_right_before(i, from)
            || self.tag_right_after(found.end);
        let marked_ra = ra.marked_unit() == Some(AngleUnit::Hours) && ra.parts().len() > 1;
        let dec_marked = dec.marked_unit() == Some(AngleUnit::Degrees)
            || dec.sign.is_some()
            || dec.compass.is_some();
        if self.blocked(i) && !tag
            || self.other_coordinates(i) && ra.marked_unit() != Some(AngleUnit::Hours)
        {
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
        // a lone number is a right ascension only where a word or a tag says so
        let lone =
            ra.parts().len() == 1 && ra.parts()[0].number.places == 0 && ra.marked_unit().is_none();
        if lone && !self.word_before(i)
            || ra.parts().len() > 1 && !dec_marked && dec.parts().len() == 1
        {
            return None;
        }
        // "12 13 -4 05 7 …": what follows the declination with a sign is the declination
        if !dec_marked && self.signed_after(found.end) {
            return None;
        }
        let led = self.word_before(i);
        let row = self.named_line(i, from) && self.short_tail(found.end);
        let strong = marked_ra && (dec_marked && (dec.parts().len() > 1 || row) || led)
            || (led || row)
                && (marked_ra && dec.parts().len() > 1
                    || colons(&ra)
                        && ra.parts().len() == 3
                        && dec.sign.is_some()
                        && dec.parts().len() > 1
                    || ra.parts().len() == 3
                        && padded(&ra)
                        && dec.sign.is_some()
                        && dec.parts().len() > 1
                        && padded(&dec)
                        && in_range(&ra, &dec));
        let both_degrees = ra.marked_unit() == Some(AngleUnit::Degrees)
            && dec.marked_unit() == Some(AngleUnit::Degrees)
            && dec.sign.is_some();
        let named = led
            || row
                && (ra.parts().len() > 1 && padded(&ra) || both_degrees)
                && (dec.sign.is_some() || dec.compass.is_some())
                && (dec.parts().len() > 1 || dec.marked_unit().is_some());
        let pairs_well =
            ra.parts().len() > 1 && dec.parts().len() > 1 || dec.sign.is_some() || dec_marked;
        let form = self.form_led(i, from)
            && (self.says_form(i, from) || self.close_to_last(&found.position));
        let taken = strong
            || tag && (pairs_well || ra.marked_unit().is_some())
            || (named || form) && pairs_well && in_range(&ra, &dec);
        taken.then_some(found)
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
            Kind::Run(run) => (
                ra_before(
                    run,
                    dec_run,
                    self.name_right_before(i),
                    self.month_right_before(i),
                )?,
                i + 1,
            ),
            _ => self.angle_at(i, Axis::Ra, None)?,
        };
        let mut h = Gathered::default();
        let between_unit = self.unit_after(i + 1);
        let (mut dec, mut end) = self.angle_at(next_dec, Axis::Dec, Some(&ra))?;
        if dec.marked_unit() == Some(AngleUnit::Hours) {
            return None;
        }
        if let Some((whole, after)) = self.rejoined(&dec, end, ra.parts().len()) {
            (dec, end) = (whole, after);
        }
        if let Some((c, after)) = self.compass_atom(end, &dec) {
            dec.compass = Some(c);
            dec.span.end = c.span.end;
            end = after;
        }
        g.tags.append(&mut h.tags);
        let unit = self.unit_of(
            &ra,
            unit.or(between_unit)
                .or_else(|| if labelled { self.unit_after(end) } else { None }),
        );
        let p = position(PositionKind::Equatorial, Some(ra), Some(dec), unit);
        if self.cut(&dec) && !labelled {
            return None;
        }
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
}
