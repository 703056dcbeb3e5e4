//! The parts of a block: which lines belong to which position, and what stands above a list.

use super::assemble::Reader;
use super::position::Found;
use super::scan::{Atom, Kind};
use super::words::Word;
use crate::span::Span;
use std::ops::Range;

/// A block's atoms and positions, with an index of its lines.
pub(super) struct Scene<'a, 't> {
    pub all: &'a [Atom<'t>],
    pub found: &'a [Found],
    pub first_line: usize,
    /// The first atom of each line, and one past the last.
    pub starts: Vec<usize>,
}

/// Lines that belong to one report, or to several that share them.
#[derive(Clone, Debug)]
pub(super) struct Part {
    /// Its first atom.
    pub from: usize,
    /// Where its own words begin: what is before only stands above it.
    pub lead: usize,
    /// One past its last atom.
    pub to: usize,
    /// Its positions.
    pub positions: Range<usize>,
}

impl Scene<'_, '_> {
    /// The first atom of a line of the sheet (or of the next line that has one).
    pub fn line_start(&self, line: usize) -> usize {
        let i = line
            .saturating_sub(self.first_line)
            .min(self.starts.len() - 1);
        self.starts[i]
    }

    /// The atoms of a line, without its end.
    pub fn line(&self, line: usize) -> &[Atom<'_>] {
        let atoms = &self.all[self.line_start(line)..self.line_start(line + 1)];
        match atoms.split_last() {
            Some((last, rest)) if matches!(last.kind, Kind::LineEnd) => rest,
            _ => atoms,
        }
    }

    /// First and last line of a position.
    pub fn lines_of(&self, f: &Found) -> (usize, usize) {
        let line = |i: usize| self.all[i.min(self.all.len() - 1)].line;
        (line(f.first), line(f.end.saturating_sub(1)))
    }

    /// The words from one atom up to another.
    pub fn span(&self, from: usize, to: usize) -> Span {
        let last = self.all[to.clamp(from + 1, self.all.len()) - 1].span;
        Span::new(self.all[from.min(self.all.len() - 1)].span.start, last.end)
    }
}

/// Cuts a block into parts.
pub(super) fn parts(reader: &Reader, scene: &Scene) -> Vec<Part> {
    let found = scene.found;
    let end = scene.all.len();
    if found.len() == 1 {
        return vec![Part {
            from: 0,
            lead: 0,
            to: end,
            positions: 0..1,
        }];
    }
    let starts = record_starts(scene).unwrap_or_else(|| list_starts(reader, scene));
    let mut parts = Vec::new();
    let mut next = 0;
    for (n, &(from, lead)) in starts.iter().enumerate() {
        let to = starts.get(n + 1).map_or(end, |s| s.0);
        let first = next;
        while next < found.len() && found[next].first < to {
            next += 1;
        }
        if first < next {
            parts.push(Part {
                from,
                lead,
                to,
                positions: first..next,
            });
        } else if let Some(last) = parts.last_mut() {
            // a record without a position belongs to the one before
            let last: &mut Part = last;
            last.to = to;
        }
    }
    parts
        .into_iter()
        .flat_map(|p| each_alone(scene, p))
        .collect()
}

/// A line with hundreds of positions is no sentence: each takes what stands between its neighbours.
fn each_alone(scene: &Scene, part: Part) -> Vec<Part> {
    if part.positions.len() <= 100 {
        return vec![part];
    }
    let found = scene.found;
    part.positions
        .clone()
        .map(|n| {
            let lead = if n == part.positions.start {
                part.lead
            } else {
                found[n - 1].end
            };
            let to = if n + 1 == part.positions.end {
                part.to
            } else {
                found[n + 1].first
            };
            let from = if n == part.positions.start {
                part.from
            } else {
                lead
            };
            Part {
                from,
                lead,
                to,
                positions: n..n + 1,
            }
        })
        .collect()
}

/// Records that begin with the same label ("Object:", "Date:", an equinox, a date): where each begins. `None` where the block is a list.
fn record_starts(scene: &Scene) -> Option<Vec<(usize, usize)>> {
    let last_line = scene.all.last()?.line;
    let key = |line: usize| -> Option<Word> {
        let atoms = scene.line(line);
        match &atoms.first()?.kind {
            Kind::Word(p) => {
                let label = atoms
                    .get(1)
                    .is_some_and(|a| a.is_mark(':') || a.is_mark('='));
                p.meanings().find(|w| {
                    label
                        && matches!(
                            w,
                            Word::Object
                                | Word::Date
                                | Word::Observer
                                | Word::Site
                                | Word::Equinox
                                | Word::Night
                        )
                })
            }
            Kind::Equinox(_) if atoms.len() <= 3 => Some(Word::Equinox),
            Kind::Instant(_) if atoms.len() <= 3 => Some(Word::Date),
            _ => None,
        }
    };
    let first = key(scene.first_line)?;
    let same: Vec<usize> = (scene.first_line..=last_line)
        .filter(|l| key(*l) == Some(first))
        .collect();
    (same.len() > 1).then(|| {
        same.into_iter()
            .map(|l| scene.line_start(l))
            .map(|a| (a, a))
            .collect()
    })
}

/// A list: each position's lines, with the name above it; statements that stand above the list are its lead.
fn list_starts(reader: &Reader, scene: &Scene) -> Vec<(usize, usize)> {
    let mut starts: Vec<(usize, usize)> = Vec::new();
    let mut floor = scene.first_line;
    let mut leading = Vec::new();
    for (n, f) in scene.found.iter().enumerate() {
        let (line, last) = scene.lines_of(f);
        if n > 0 && scene.lines_of(&scene.found[n - 1]).0 == line {
            floor = floor.max(last + 1);
            continue;
        }
        // a lone name right above a position's line begins its part
        let mut own = line;
        if line > floor && reader.name_only(scene.line(line - 1)) {
            own = line - 1;
        }
        let above: Vec<usize> = (floor..own).collect();
        let from = if n == 0 {
            leading = above.iter().flat_map(|l| kinds(scene.line(*l))).collect();
            scene.first_line
        } else {
            // lines between two positions lead the second where lines of that kind led the first
            let led = above
                .iter()
                .position(|l| kinds(scene.line(*l)).iter().any(|k| leading.contains(k)));
            led.map_or(own, |k| above[k])
        };
        starts.push((scene.line_start(from), scene.line_start(own)));
        floor = last + 1;
    }
    starts
}

/// What kinds of statement a line makes.
fn kinds(line: &[Atom]) -> Vec<u8> {
    line.iter()
        .filter_map(|a| match &a.kind {
            Kind::Equinox(_) => Some(1),
            Kind::Instant(_) => Some(2),
            Kind::Site(_) => Some(3),
            Kind::Word(p) if p.means(Word::Site) => Some(3),
            Kind::Word(p) if p.means(Word::Observer) => Some(4),
            Kind::Word(p) if p.means(Word::Universal) => Some(5),
            _ => None,
        })
        .collect()
}
