//! Two forms of one position: recognised by "that is", by brackets, by another notation right beside it.

use super::position::{Finder, Found};
use super::scan::{Atom, Kind};
use super::words::Word;
use crate::report::{AngleUnit, Position};

impl Finder<'_, '_> {
    /// Two positions with "that is", "=", brackets between, or one decimal beside one sexagesimal, are two forms of one.
    pub(super) fn join_other_forms(&self, found: Vec<Found>) -> Vec<Found> {
        let mut joined: Vec<Found> = Vec::new();
        for f in found {
            if let Some(last) = joined.last_mut()
                && self.other_form(last, &f)
            {
                let tag = f.tags.first().copied();
                // the tag after the second form speaks of both, unless the first has its own
                if last.tags.is_empty() && notation(&last.position) != notation(&f.position) {
                    last.tags.extend(tag);
                }
                last.other_forms.push((f.position, tag));
                last.other_forms.extend(f.other_forms);
                last.end = f.end;
                continue;
            }
            joined.push(f);
        }
        joined
    }

    pub(super) fn other_form(&self, first: &Found, second: &Found) -> bool {
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

    pub(super) fn that_is_before(&self, i: usize) -> bool {
        (i.saturating_sub(3)..i)
            .any(|k| self.atoms[k].means(Word::ThatIs) && !self.atoms[k].means(Word::Filler))
    }

    pub(super) fn no_new_object(&self, between: &[Atom]) -> bool {
        !between.iter().any(|a| a.means(Word::Object))
    }
}

/// Decimal, or sexagesimal.
fn notation(p: &Position) -> bool {
    p.first.is_some_and(|a| a.parts().len() > 1)
}

pub(super) fn apart_deg(a: &Position, b: &Position) -> Option<f64> {
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
