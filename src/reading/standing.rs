//! What stands, and what a report takes from it: own words first, then its part of the block, then the standing statements.

use super::assemble::Reader;
use super::equinox::Tagged;
use super::position::Found;
use super::statements::Statements;
use crate::report::{
    Compass, DateWritten, InstantWritten, Nearness, Report, Role, SiteWritten, Zone,
};
use crate::span::{Span, Spanned};

/// What stands for the rest of the sheet until it is replaced.
#[derive(Default)]
pub(super) struct Standing {
    pub tag: Option<Spanned<Tagged>>,
    pub whole_sheet: Option<Spanned<Tagged>>,
    pub site: Option<SiteWritten>,
    pub observer: Option<Spanned<String>>,
    pub zone: Option<Spanned<Zone>>,
    pub date: Option<InstantWritten>,
    pub role: Option<Role>,
    /// The year and month last written, for dates that leave them out.
    pub year: Option<(i32, u8)>,
}

/// A report about to be put together.
pub(super) struct Draft {
    pub found: Found,
    pub object: Option<Spanned<String>>,
    pub role: Option<Role>,
    pub own: Span,
    pub part: Span,
    pub block: Span,
}

impl Reader<'_> {
    /// A block without a position: what it says may stand for what follows.
    pub(super) fn stands(&mut self, said: Statements, lines: usize) {
        self.note_year(&said.instants);
        let tag = said
            .tags
            .iter()
            .rfind(|t| !t.value.weak && t.value.tag.year.is_some() || t.value.tag.system.is_some())
            .copied();
        if let Some(tag) = tag {
            self.standing.tag = Some(tag);
            if said.all {
                self.standing.whole_sheet = Some(tag);
            }
        }
        if let Some(site) = said.sites.into_iter().next_back() {
            self.standing.site = Some(site);
        }
        if let Some(o) = said.observers.into_iter().next_back() {
            self.standing.observer = Some(o);
        }
        if said.clock_zone.is_some() {
            self.standing.zone = said.clock_zone;
        }
        if let Some(role) = said.roles.last() {
            self.standing.role = (lines <= 2).then_some(role.value);
        }
        let dated = said.instants.into_iter().find(|i| i.date.is_some());
        if let Some(date) = dated
            && (said.date_labelled || lines == 1)
        {
            self.standing.date = Some(date);
        }
    }

    pub(super) fn note_year(&mut self, instants: &[InstantWritten]) {
        for i in instants {
            if let Some(Spanned {
                value:
                    DateWritten::Calendar {
                        year, year_digits, ..
                    },
                ..
            }) = i.date
                && year_digits > 0
            {
                self.standing.year = Some((year, year_digits));
            }
        }
    }

    pub(super) fn finish(&mut self, draft: Draft, said: Statements) {
        let Draft {
            found,
            object,
            role,
            own,
            part,
            block,
        } = draft;
        // equinoxes: on the position, its line, its part, then what stands
        let mut equinoxes: Vec<(Spanned<Tagged>, Nearness)> =
            found.tags.iter().map(|t| (*t, Nearness::Own)).collect();
        for t in &said.tags {
            let inside = own.contains(t.span);
            let near = if part.contains(t.span) {
                if inside {
                    Nearness::Own
                } else {
                    Nearness::Block
                }
            } else {
                Nearness::Head
            };
            if !equinoxes.iter().any(|(e, _)| e.span == t.span) {
                equinoxes.push((*t, near));
            }
        }
        let tags: Vec<Spanned<Tagged>> = equinoxes.iter().map(|(t, _)| *t).collect();
        let epoch_of_place = Statements::epoch(&tags);
        if let Some(e) = &epoch_of_place {
            equinoxes.retain(|(t, _)| {
                t.span != e.span && !(t.value.epoch_word && t.span.contains(e.span))
            });
        }
        if equinoxes.is_empty()
            && let Some(t) = self.standing.tag
        {
            equinoxes.push((t, Nearness::Standing));
        }
        equinoxes.sort_by_key(|(_, n)| *n);

        let instants = self.instants(&said, own, part);
        let site = said
            .sites
            .iter()
            .find(|s| own.contains(s.span))
            .map(|s| (s.clone(), Nearness::Own))
            .or_else(|| said.sites.first().map(|s| (s.clone(), Nearness::Block)))
            .or_else(|| {
                if said.observers.is_empty() {
                    self.standing.site.clone().map(|s| (s, Nearness::Standing))
                } else {
                    None
                }
            });
        let site = site.map(|(s, n)| (self.settled_east(s), n));
        let observer = said
            .observers
            .first()
            .cloned()
            .or_else(|| self.standing.observer.clone());
        let mentions = if site.is_none() {
            mentions(self.text, part)
        } else {
            Vec::new()
        };
        if equinoxes.is_empty() {
            self.untagged.push(self.reports.len());
        }
        let role = role.or(self.standing.role).unwrap_or_default();
        let uncertainty_arcsec = said.uncertainty_arcsec;
        self.reports.push(Report {
            ordinal: 0,
            position: found.position,
            other_forms: found
                .other_forms
                .into_iter()
                .map(|(p, t)| (p, t.map(|t| t.map(|t| t.tag))))
                .collect(),
            object,
            observer,
            role,
            equinoxes: equinoxes
                .into_iter()
                .map(|(t, n)| (t.map(|t| t.tag), n))
                .collect(),
            epoch_of_place,
            instants,
            site,
            mentions,
            stated_horizon: said.horizon,
            stated_other: said.other,
            constellation: said.constellation,
            magnitude: said.magnitude,
            uncertainty_arcsec,
            claims_new: said.claims_new,
            stets: said.stets,
            block: if part.is_empty() { block } else { part },
        });
    }

    /// "O" is east in German and Dutch, west in the Romance languages: the sheet's own language settles it, or nothing does.
    fn settled_east(&self, mut site: SiteWritten) -> SiteWritten {
        if let Some(longitude) = &mut site.longitude
            && let Some(letter) = longitude.compass
            && letter.span.of(self.text).trim_end_matches('.') == "O"
        {
            let point = match super::words::language(self.text) {
                Some("de" | "nl") => Some(Compass::East),
                Some("fr" | "es" | "it" | "pt") => Some(Compass::West),
                _ => None,
            };
            longitude.compass = point.map(|p| Spanned::new(p, letter.span));
        }
        site
    }

    /// The instants of a report, the governing one first; dates and clock times written apart are put together.
    fn instants(
        &self,
        said: &Statements,
        own: Span,
        part: Span,
    ) -> Vec<(InstantWritten, Nearness)> {
        let mut found: Vec<(InstantWritten, Nearness)> = Vec::new();
        for i in &said.instants {
            let near = if own.contains(i.span) {
                Nearness::Own
            } else if part.contains(i.span) {
                Nearness::Block
            } else {
                Nearness::Standing
            };
            let mut i = i.clone();
            self.complete_year(&mut i);
            found.push((i, near));
        }
        found.sort_by_key(|(_, n)| *n);
        // a date alone takes the clock time that stands alone
        let complete = |i: &InstantWritten| {
            i.date.is_some_and(|d| {
                i.clock.is_some()
                    || matches!(d.value, DateWritten::Julian { .. })
                    || matches!(d.value, DateWritten::Calendar { day, .. } if day.places > 0)
            })
        };
        if !found.iter().any(|(i, _)| complete(i)) {
            let date = found
                .iter()
                .position(|(i, _)| i.date.is_some() && i.clock.is_none());
            let clock = found
                .iter()
                .position(|(i, _)| i.date.is_none() && i.clock.is_some());
            if let (Some(d), Some(c)) = (date, clock) {
                let (clock, _) = found[c].clone();
                let (date, _) = &mut found[d];
                date.clock = clock.clock;
                date.zone = date.zone.take().or(clock.zone);
                date.until = clock.until;
                date.span = date.span.cover(clock.span);
                found.remove(c);
            } else if let (None, Some(c)) = (date, clock)
                && let Some(standing) = &self.standing.date
            {
                let (clock, _) = &mut found[c];
                clock.date = standing.date;
                clock.zone = clock.zone.take().or_else(|| standing.zone.clone());
            }
        }
        if found.is_empty()
            && let Some(standing) = &self.standing.date
        {
            let mut standing = standing.clone();
            self.complete_year(&mut standing);
            found.push((standing, Nearness::Standing));
        }
        // the complete one governs
        found.sort_by_key(|(i, n)| (!complete(i), *n));
        let zone = said.clock_zone.as_ref().or(self.standing.zone.as_ref());
        for (i, _) in &mut found {
            // a Julian date takes a scale that is said (TT, TDB), and else is UTC
            let julian = matches!(i.date.map(|d| d.value), Some(DateWritten::Julian { .. }));
            let said = zone.is_some_and(|z| {
                matches!(
                    z.value,
                    Zone::Terrestrial | Zone::Barycentric | Zone::Atomic
                )
            });
            if i.zone.is_none() && i.clock_or_decimals() && (!julian || said) {
                i.zone = zone.cloned();
            }
        }
        found
    }

    fn complete_year(&self, instant: &mut InstantWritten) {
        if let Some(Spanned {
            value: DateWritten::Calendar {
                year, year_digits, ..
            },
            ..
        }) = &mut instant.date
            && *year_digits == 0
            && let Some((carried, digits)) = self.standing.year
        {
            *year = carried;
            *year_digits = digits;
        }
    }
}

/// Runs of up to three capitalised words: "Skarn Head", "Colle Ventoso".
fn mentions(text: &str, part: Span) -> Vec<Spanned<String>> {
    let mut found: Vec<Span> = Vec::new();
    let mut run: Vec<Span> = Vec::new();
    let mut at = part.start;
    for piece in part
        .of(text)
        .split_inclusive(|c: char| !(c.is_alphabetic() || c == '-' || c == '\''))
    {
        let word = piece.trim_end_matches(|c: char| !c.is_alphabetic());
        let span = Span::new(at, at + word.len());
        at += piece.len();
        if word.chars().count() > 2 && word.starts_with(char::is_uppercase) {
            run.push(span);
            found.extend(run.iter().rev().take(3).map(|first| first.cover(span)));
        }
        // anything but one blank after it ends the run
        if word.is_empty() || !piece.ends_with(' ') || !word.starts_with(char::is_uppercase) {
            run.clear();
        }
        if found.len() > 60 {
            break;
        }
    }
    found
        .into_iter()
        .map(|s| Spanned::new(s.of(text).to_string(), s))
        .collect()
}
