//! Whose words are whose: statements of a line go to the position of their sentence, and to the nearest where a line has several.

use super::assemble::Reader;
use super::parts::{Part, Scene};
use super::scan::Kind;
use super::statements::Statements;
use crate::report::{DateWritten, HorizonQuantity, InstantWritten, PositionKind, StatedHorizon};
use crate::span::Span;

/// What is said of position `n`: its part's words without those of its neighbours.
pub(super) fn own_words(
    scene: &Scene,
    n: usize,
    part: &Part,
    own: Span,
    said: &Statements,
    reader: &Reader,
) -> Statements {
    let mut mine = said.clone();
    let f = &scene.found[n];
    let here = Span::new(scene.all[f.first].span.start, scene.all[f.end - 1].span.end);
    let (first_line, last_line) = scene.lines_of(f);
    // positions that share its lines, in order, and those on other lines of the part
    let mut sharing: Vec<Span> = Vec::new();
    let mut others: Vec<Span> = Vec::new();
    for k in part.positions.clone() {
        let other = &scene.found[k];
        let span = Span::new(
            scene.all[other.first].span.start,
            scene.all[other.end - 1].span.end,
        );
        let lines = scene.lines_of(other);
        if lines.0 <= last_line && lines.1 >= first_line {
            sharing.push(span);
        } else {
            others.push(scene.span(scene.line_start(lines.0), scene.line_start(lines.1 + 1)));
        }
    }
    let sentence = sentences(scene, part, first_line, last_line);
    let foreign = |s: Span| others.iter().any(|o| o.contains(s));
    let nearest =
        |spans: Vec<Span>, standing: bool| nearest(spans, own, here, &sharing, &sentence, standing);

    mine.instants.retain(|i| !foreign(i.span));
    let keep = nearest(
        mine.instants.iter().map(|i| i.span).collect(),
        reader.standing.date.is_some(),
    );
    mine.instants.retain(|i| keep.contains(&i.span));
    // of several full dates in its sentence, the one nearest to the position counts; a Julian date beside it is checked against it
    let full = |i: &InstantWritten| {
        own.contains(i.span)
            && matches!(i.date.map(|d| d.value), Some(DateWritten::Calendar { .. }))
            && i.clock_or_decimals()
    };
    if sharing.len() == 1 && mine.instants.iter().filter(|i| full(i)).count() > 1 {
        let distance = |s: Span| {
            if s.start >= here.end {
                s.start - here.end
            } else {
                here.start.saturating_sub(s.end)
            }
        };
        let nearest = mine
            .instants
            .iter()
            .filter(|i| full(i))
            .map(|i| distance(i.span))
            .min();
        mine.instants
            .retain(|i| !full(i) || Some(distance(i.span)) == nearest);
    }
    // a clock time alone takes the last date before it
    for i in &mut mine.instants {
        if i.date.is_none() {
            i.date = said
                .instants
                .iter()
                .rfind(|d| d.date.is_some() && d.span.start < i.span.start && own.contains(d.span))
                .and_then(|d| d.date);
        }
    }
    mine.sites.retain(|s| !foreign(s.span));
    let keep = nearest(
        mine.sites.iter().map(|s| s.span).collect(),
        reader.standing.site.is_some(),
    );
    mine.sites.retain(|s| keep.contains(&s.span));
    mine.tags.retain(|t| !foreign(t.span));
    if sharing.len() > 1 {
        let keep = nearest(mine.tags.iter().map(|t| t.span).collect(), false);
        mine.tags.retain(|t| keep.contains(&t.span));
    }
    mine.objects.retain(|o| !foreign(o.span));
    mine.horizon.retain(|h| {
        !foreign(h.angle.span)
            && (!own.contains(h.angle.span)
                || sentence.of(h.angle.span.start) == sentence.of(here.start))
    });
    if mine.constellation.is_some_and(|c| foreign(c.span)) {
        mine.constellation = None;
    }
    if mine.magnitude.is_some_and(|m| foreign(m.span)) {
        mine.magnitude = None;
    }
    // altitude and azimuth beside a right ascension state its horizon; they are no report of their own
    for k in part.positions.clone() {
        let other = &scene.found[k].position;
        if k != n
            && other.kind == PositionKind::Horizontal
            && f.position.kind == PositionKind::Equatorial
        {
            let altitude = if other.zenith_distance {
                HorizonQuantity::ZenithDistance
            } else {
                HorizonQuantity::Altitude
            };
            mine.horizon.extend(other.second.map(|angle| StatedHorizon {
                quantity: altitude,
                angle,
            }));
            mine.horizon.extend(other.first.map(|angle| StatedHorizon {
                quantity: HorizonQuantity::Azimuth,
                angle,
            }));
        }
    }
    mine
}

/// Which of these statements belong to the position `here`.
fn nearest(
    spans: Vec<Span>,
    own: Span,
    here: Span,
    sharing: &[Span],
    sentence: &Sentences,
    standing: bool,
) -> Vec<Span> {
    let on_line: Vec<Span> = spans.iter().copied().filter(|s| own.contains(*s)).collect();
    let elsewhere = || spans.iter().copied().filter(|s| !own.contains(*s));
    if on_line.is_empty() {
        return spans;
    }
    if sharing.len() > 1 && on_line.len() > 1 {
        let first = sharing.iter().map(|s| s.start).min().unwrap_or(0);
        let leading = on_line.iter().any(|s| s.start < first);
        let chosen = if leading {
            // each statement leads the positions after it
            on_line
                .iter()
                .copied()
                .filter(|s| s.start < here.start)
                .max_by_key(|s| s.start)
        } else {
            let next = sharing
                .iter()
                .map(|s| s.start)
                .filter(|s| *s > here.start)
                .min()
                .unwrap_or(usize::MAX);
            on_line
                .iter()
                .copied()
                .find(|s| s.start >= here.end && s.start < next)
        };
        return chosen.into_iter().chain(elsewhere()).collect();
    }
    let mine = sentence.of(here.start);
    let far = |s: &Span| sentence.of(s.start).abs_diff(mine);
    let least = on_line.iter().map(far).min().unwrap_or(0);
    let chosen: Vec<Span> = on_line
        .iter()
        .copied()
        .filter(|s| far(s) == least)
        .collect();
    // a later sentence speaks of something else where another statement stands
    if least > 0 && standing && chosen.iter().all(|s| s.start > here.end) {
        return elsewhere().collect();
    }
    chosen.into_iter().chain(elsewhere()).collect()
}

/// Where the sentence of position `n` begins.
pub(super) fn sentence_start(scene: &Scene, part: &Part, n: usize) -> usize {
    let f = &scene.found[n];
    let (first, last) = scene.lines_of(f);
    let here = scene.all[f.first].span.start;
    sentences(scene, part, first, last)
        .ends
        .into_iter()
        .rfind(|e| *e <= here)
        .unwrap_or(0)
}

/// Where the sentences of some lines end.
struct Sentences {
    ends: Vec<usize>,
}

impl Sentences {
    fn of(&self, offset: usize) -> usize {
        self.ends.partition_point(|e| *e <= offset)
    }
}

/// A point after a word or a statement, before a capital letter or a digit, ends a sentence; a point after an abbreviation does not.
fn sentences(scene: &Scene, part: &Part, first_line: usize, last_line: usize) -> Sentences {
    let from = scene.line_start(first_line).max(part.lead);
    let to = scene.line_start(last_line + 1).min(part.to);
    let mut ends = Vec::new();
    for k in from..to {
        let atom = &scene.all[k];
        if !atom.is_mark('.') || k == from {
            continue;
        }
        let before = &scene.all[k - 1];
        let long = match &before.kind {
            Kind::Plain => before.span.len() > 3,
            Kind::Mark(c) => *c == ')',
            _ => true,
        };
        let gap = scene
            .all
            .get(k + 1)
            .is_some_and(|a| a.span.start > atom.span.end);
        if long && gap {
            ends.push(atom.span.end);
        }
    }
    Sentences { ends }
}
