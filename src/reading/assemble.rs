//! Assembly: positions and statements become reports; each report takes what its own line says, then its block, then what stands.

use super::equinox::Tagged;
use super::position::{Found, positions};
use super::row::Row;
use super::scan::{Atom, Kind, atoms};
use super::statements::{Statements, gather};
use super::table;
use super::text::Text;
use super::words::Word;
use crate::report::{
    Compass, DateWritten, InstantWritten, Nearness, Report, Role, SiteWritten, Zone,
};
use crate::sheet::{Block, Sheet};
use crate::span::{Span, Spanned};

/// All reports of a sheet, in its order.
pub fn read(sheet: &Sheet) -> Vec<Report> {
    let mut reader = Reader {
        sheet,
        text: &sheet.text,
        standing: Standing::default(),
        reports: Vec::new(),
        untagged: Vec::new(),
    };
    let blocks = sheet.blocks();
    let mut head: Option<table::Head> = None;
    for block in blocks {
        reader.block(block, &mut head);
    }
    // "all positions …" said at the end of a sheet holds for what stood before it
    if let Some(tag) = reader.standing.whole_sheet {
        for i in std::mem::take(&mut reader.untagged) {
            if let Some(r) = reader.reports.get_mut(i)
                && r.equinoxes.is_empty()
            {
                r.equinoxes.push((tag.map(|t| t.tag), Nearness::Standing));
            }
        }
    }
    for (i, r) in reader.reports.iter_mut().enumerate() {
        r.ordinal = i + 1;
    }
    reader.reports
}

/// What stands for the rest of the sheet until it is replaced.
#[derive(Default)]
struct Standing {
    tag: Option<Spanned<Tagged>>,
    whole_sheet: Option<Spanned<Tagged>>,
    site: Option<SiteWritten>,
    observer: Option<Spanned<String>>,
    zone: Option<Spanned<Zone>>,
    date: Option<InstantWritten>,
    role: Option<Role>,
    /// The year and month last written, for dates that leave them out.
    year: Option<(i32, u8)>,
}

struct Reader<'t> {
    sheet: &'t Sheet,
    text: &'t str,
    standing: Standing,
    reports: Vec<Report>,
    /// Reports that no tag reached.
    untagged: Vec<usize>,
}

impl<'t> Reader<'t> {
    fn block(&mut self, block: Block, head: &mut Option<table::Head>) {
        // tables first: their rows are read by their heads
        let mut from = block.first;
        let mut prose: Vec<usize> = Vec::new();
        let lines: Vec<usize> = (block.first..block.end).collect();
        while from < block.end {
            if let Some(found) = table::head(self.sheet, from, block.end) {
                self.prose(&prose, block);
                prose.clear();
                let rows = table::rows(self.sheet, &found, block.end);
                let next = rows
                    .iter()
                    .map(|r| r.line + 1)
                    .max()
                    .unwrap_or(found.line + 1)
                    .max(found.line + 1);
                self.table(&found, &rows, block);
                *head = Some(found);
                from = next;
                continue;
            }
            prose.push(from);
            from += 1;
        }
        let _ = lines;
        // rows may go on after a blank line under the same head
        if let Some(h) = head
            && prose.len() == block.end - block.first
            && table::continues(self.sheet, h, block)
        {
            let h = h.clone();
            let rows = table::rows_from(self.sheet, &h, block.first, block.end);
            self.table(&h, &rows, block);
            return;
        }
        if prose.len() == block.end - block.first && !prose.is_empty() {
            *head = None;
        }
        self.prose(&prose, block);
    }

    // ------------------------------------------------------------------------------------------ prose

    fn prose(&mut self, lines: &[usize], block: Block) {
        let (Some(&first), Some(&last)) = (lines.first(), lines.last()) else {
            return;
        };
        let mut all: Vec<Atom<'t>> = Vec::new();
        let mut awaiting = false;
        for &i in lines {
            let line = self.sheet.lines()[i];
            atoms(
                Text::window(self.text, line.body),
                i,
                &mut awaiting,
                &mut all,
            );
            let end = line.whole.end;
            all.push(Atom {
                kind: Kind::LineEnd,
                span: Span::new(end, end),
                line: i,
            });
        }
        let found = positions(self.text, &all);
        let taken: Vec<(usize, usize)> = found.iter().map(|f| (f.first, f.end)).collect();
        if found.is_empty() {
            let said = gather(self.text, &all, &taken);
            self.stands(said, last - first + 1);
            return;
        }
        let parts = self.parts(&all, &found, first);
        // what is said before the first part holds for all of them
        let shared = parts.first().map_or(0, |p| p.0);
        let preface = gather(self.text, &all[..shared], &[]);
        let preface_lines = all[..shared]
            .iter()
            .filter(|a| matches!(a.kind, Kind::LineEnd))
            .count();
        if shared > 0 {
            self.stands(preface, preface_lines);
        }
        for (from, to) in parts {
            let local: Vec<(usize, usize)> = taken
                .iter()
                .filter(|(a, b)| *a >= from && *b <= to)
                .map(|(a, b)| (a - from, b - from))
                .collect();
            let inside: Vec<&Found> = found
                .iter()
                .filter(|f| f.first >= from && f.end <= to)
                .collect();
            let said = gather(self.text, &all[from..to], &local);
            self.note_year(&said.instants);
            for f in inside {
                self.report(&all, f, from, to, &said, block);
            }
        }
    }

    /// The parts of a block that belong to one report each (or to several on shared lines): ranges of atoms.
    fn parts(&self, all: &[Atom], found: &[Found], first_line: usize) -> Vec<(usize, usize)> {
        let line_start = |line: usize| all.iter().position(|a| a.line >= line).unwrap_or(all.len());
        if found.len() == 1 {
            return vec![(0, all.len())];
        }
        let lines: Vec<usize> = found.iter().map(|f| all[f.first].line).collect();
        let last_line = all.last().map_or(first_line, |a| a.line);
        // records that begin with the same label: "Object:", "Date:" …
        let key = |line: usize| -> Option<Word> {
            let start = line_start(line);
            let Kind::Word(p) = &all.get(start)?.kind else {
                return None;
            };
            let label = all
                .get(start + 1)
                .is_some_and(|a| a.is_mark(':') || a.is_mark('='));
            p.meanings().find(|w| {
                label && matches!(w, Word::Object | Word::Date | Word::Observer | Word::Site)
            })
        };
        let mut starts: Vec<usize> = Vec::new();
        if let Some(k) = key(first_line) {
            let same: Vec<usize> = (first_line..=last_line)
                .filter(|l| key(*l) == Some(k))
                .collect();
            if same.len() > 1 && same.len() >= found.len().min(2) {
                starts = same;
            }
        }
        if starts.is_empty() {
            for (n, &line) in lines.iter().enumerate() {
                if n > 0 && lines[n - 1] == line {
                    continue;
                }
                let floor = if n == 0 {
                    first_line
                } else {
                    self.last_line_of(all, &found[n - 1]) + 1
                };
                // a lone name right above a position's line begins its part
                let mut start = line;
                if line > floor && self.name_only(all, line - 1) {
                    start = line - 1;
                }
                starts.push(start);
            }
        }
        starts.dedup();
        let mut parts = Vec::new();
        for (n, &start) in starts.iter().enumerate() {
            let end = starts
                .get(n + 1)
                .map_or(all.len(), |&next| line_start(next));
            parts.push((line_start(start), end));
        }
        parts
    }

    fn last_line_of(&self, all: &[Atom], f: &Found) -> usize {
        all[f.end.saturating_sub(1).min(all.len() - 1)].line
    }

    /// A line that holds a name and nothing else.
    fn name_only(&self, all: &[Atom], line: usize) -> bool {
        let words: Vec<&Atom> = all
            .iter()
            .filter(|a| a.line == line && !matches!(a.kind, Kind::LineEnd))
            .collect();
        !words.is_empty()
            && words.len() <= 9
            && words
                .iter()
                .any(|a| matches!(a.kind, Kind::Plain | Kind::Word(_)))
            && words.iter().all(|a| match &a.kind {
                Kind::Plain
                | Kind::Run(_)
                | Kind::Mark('=' | '(' | ')' | '-' | '*' | '+' | '/' | '#' | '.') => true,
                Kind::Word(p) => {
                    ![
                        Word::Date,
                        Word::Site,
                        Word::Observer,
                        Word::Equinox,
                        Word::Time,
                    ]
                    .iter()
                    .any(|w| p.means(*w))
                        || p.means(Word::New)
                }
                _ => false,
            })
    }

    fn report(
        &mut self,
        all: &[Atom],
        f: &Found,
        from: usize,
        to: usize,
        said: &Statements,
        block: Block,
    ) {
        let line_of = |i: usize| all[i.min(all.len() - 1)].line;
        let (first_line, last_line) = (line_of(f.first), line_of(f.end.saturating_sub(1)));
        let own_from = all
            .iter()
            .position(|a| a.line >= first_line)
            .unwrap_or(f.first);
        let own_to = all
            .iter()
            .rposition(|a| a.line <= last_line)
            .map_or(f.end, |i| i + 1);
        let own_span = Span::new(all[own_from].span.start, all[own_to - 1].span.end);
        let mut said_here = said.clone();
        // a role is what the nearest words before the position on its line say, else the part's
        let before = Span::new(own_span.start, all[f.first].span.start.max(own_span.start));
        let role = said
            .roles
            .iter()
            .rfind(|r| before.contains(r.span))
            .or_else(|| {
                said.roles
                    .iter()
                    .find(|r| own_span.contains(r.span) && r.value == Role::Region)
            })
            .map(|r| r.value);
        let object = self.object(all, f, from, to, said, role);
        if said_here.claims_new.is_none()
            && let Some(o) = &object
        {
            said_here.claims_new = new_word_in(self.text, o.span);
        }
        let part = Span::new(all[from].span.start, all[to - 1].span.end);
        let draft = Draft {
            found: f.clone(),
            object,
            role,
            own: own_span,
            part,
            block: block.span,
        };
        self.finish(draft, said_here);
    }

    // ------------------------------------------------------------------------------------------ names

    /// The object's name: after its label; else before the position on its line; else the line above.
    fn object(
        &self,
        all: &[Atom],
        f: &Found,
        from: usize,
        to: usize,
        said: &Statements,
        role: Option<Role>,
    ) -> Option<Spanned<String>> {
        let line = all[f.first].line;
        let own: Option<&Spanned<String>> = said
            .objects
            .iter()
            .rfind(|o| o.span.start < f.position.span.start)
            .or_else(|| said.objects.first());
        if let Some(o) = own {
            return Some(o.clone());
        }
        let start = all.iter().position(|a| a.line == line)?;
        // a second position on a line takes the words since the first
        let since = all[start..f.first]
            .iter()
            .rposition(|a| matches!(a.kind, Kind::Mark(';')) && f.first - start > 12)
            .map_or(start, |k| start + k + 1);
        let mut words: Vec<usize> = (since..f.first).collect();
        // after the last sentence end
        if let Some(k) = words.iter().rposition(|&k| {
            all[k].is_mark('.')
                && k + 1 < f.first
                && k > start
                && all[k - 1].span.len() > 2
                && !matches!(all[k - 1].kind, Kind::Run(_))
        }) {
            words.drain(..=k);
        }
        let role_only = matches!(
            role,
            Some(Role::Reference | Role::Pointing | Role::Catalogued | Role::Region)
        );
        if !role_only && let Some(name) = self.name_in(all, &words) {
            return Some(name);
        }
        if role_only {
            return None;
        }
        // the line above, if it is a lone name
        let above = all[from..to]
            .iter()
            .map(|a| a.line)
            .filter(|l| *l < line)
            .max()?;
        if above + 1 == line && self.name_only(all, above) {
            let words: Vec<usize> = (0..all.len())
                .filter(|&k| all[k].line == above && !matches!(all[k].kind, Kind::LineEnd))
                .collect();
            return self.name_in(all, &words);
        }
        None
    }

    /// A name among these atoms: what is left when dates, verbs, prepositions and labels are taken off.
    fn name_in(&self, all: &[Atom], words: &[usize]) -> Option<Spanned<String>> {
        let mut words: Vec<usize> = words.to_vec();
        // "On DATE I found X at": what follows the verb
        if let Some(k) = words.iter().rposition(|&k| all[k].means(Word::Found)) {
            let after: Vec<usize> = words[k + 1..].to_vec();
            if after
                .iter()
                .any(|&k| matches!(all[k].kind, Kind::Plain | Kind::Word(_) | Kind::Run(_)))
            {
                words = after;
            }
        }
        // "X: position …": up to the colon
        if let Some(k) = words.iter().position(|&k| all[k].is_mark(':'))
            && words[..k].iter().any(|&k| !self.never_a_name(&all[k]))
            && k > 0
        {
            words.truncate(k);
        }
        let strip = |a: &Atom| match &a.kind {
            Kind::Mark(_)
            | Kind::LineEnd
            | Kind::Instant(_)
            | Kind::Equinox(_)
            | Kind::Site(_)
            | Kind::Elevation(_)
            | Kind::Uncertainty(_)
            | Kind::Stet(_)
            | Kind::Angle(_) => true,
            _ => self.never_a_name(a),
        };
        while words.last().is_some_and(|&k| strip(&all[k])) {
            words.pop();
        }
        while words.first().is_some_and(|&k| strip(&all[k])) {
            words.remove(0);
        }
        // a list's running number: "12. Suspect 3", "(4) X"
        if words.len() > 2
            && matches!(all[words[0]].kind, Kind::Run(_))
            && matches!(all[words[1]].kind, Kind::Mark('.' | ')' | ':'))
        {
            words.drain(..2);
        }
        // nothing but statements may not stand inside
        if let Some(k) = words.iter().rposition(|&k| {
            matches!(
                all[k].kind,
                Kind::Instant(_) | Kind::Site(_) | Kind::Equinox(_)
            )
        }) {
            words.drain(..=k);
            while words.first().is_some_and(|&k| strip(&all[k])) {
                words.remove(0);
            }
        }
        if words.is_empty()
            || words.len() > 7
            || !words
                .iter()
                .any(|&k| matches!(all[k].kind, Kind::Plain | Kind::Word(_)))
        {
            return None;
        }
        let span = all[words[0]].span.cover(all[*words.last()?].span);
        let name = span.of(self.text).trim();
        (!name.is_empty() && name.len() <= 80).then(|| Spanned::new(name.to_string(), span))
    }

    /// Words that lead to a name or follow it and are no part of one.
    fn never_a_name(&self, a: &Atom) -> bool {
        const LEADING: [Word; 17] = [
            Word::Filler,
            Word::And,
            Word::LeadIn,
            Word::At,
            Word::From,
            Word::Position,
            Word::Found,
            Word::RoleMeasured,
            Word::RightAscension,
            Word::Declination,
            Word::Both,
            Word::Date,
            Word::Time,
            Word::Universal,
            Word::Equinox,
            Word::ThatIs,
            Word::All,
        ];
        LEADING.iter().any(|w| a.means(*w)) && !(a.means(Word::New) && !a.means(Word::Found))
    }

    // ------------------------------------------------------------------------------------------ tables

    fn table(&mut self, head: &table::Head, rows: &[Row], block: Block) {
        for row in rows {
            self.note_year(&row.said.instants);
            let draft = Draft {
                found: row.found.clone(),
                object: row.said.objects.first().cloned(),
                role: row.said.roles.first().map(|r| r.value),
                own: row.span,
                part: row.span,
                block: row.span,
            };
            let mut said = row.said.clone();
            if said.clock_zone.is_none() {
                said.clock_zone.clone_from(&head.zone);
            }
            let _ = block;
            self.finish(draft, said);
        }
    }

    // ------------------------------------------------------------------------------------------ standing and finishing

    /// A block without a position: what it says may stand for what follows.
    fn stands(&mut self, said: Statements, lines: usize) {
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

    fn note_year(&mut self, instants: &[InstantWritten]) {
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

    fn finish(&mut self, draft: Draft, said: Statements) {
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
            if i.zone.is_none()
                && (i.clock.is_some()
                    || i.date.is_some_and(
                        |d| matches!(d.value, DateWritten::Calendar { day, .. } if day.places > 0),
                    ))
            {
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

struct Draft {
    found: Found,
    object: Option<Spanned<String>>,
    role: Option<Role>,
    own: Span,
    part: Span,
    block: Span,
}

/// The first word for something new inside a name.
fn new_word_in(text: &str, span: Span) -> Option<Span> {
    let mut at = span.start;
    for piece in span
        .of(text)
        .split_inclusive(|c: char| c.is_whitespace() || c == ',')
    {
        if let Some(rest) =
            super::words::says(Text::window(text, Span::new(at, span.end)), Word::New)
        {
            return Some(Span::new(at, rest.at()));
        }
        at += piece.len();
    }
    None
}
