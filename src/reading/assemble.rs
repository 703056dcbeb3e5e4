//! Assembly: positions and statements become reports; each report takes what its own line says, then its block, then what stands.

use super::fields::{self, Piece};
use super::names::new_word_in;
use super::position::{Found, positions};
use super::row::Row;
use super::scan::{Atom, Kind, atoms};
use super::standing::{Draft, Standing};
use super::statements::{Statements, gather};
use super::table;
use super::text::Text;
use super::words::Word;
use crate::report::{Nearness, Report, Role};
use crate::sheet::{Block, Sheet};
use crate::span::Span;

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
    let mut turns = sheet.turns().iter().peekable();
    for piece in fields::pieces(sheet, blocks) {
        let begins = match &piece {
            Piece::Words(block) | Piece::Items(_, _, block) => block.span.start,
        };
        // another person speaks
        while let Some(turn) = turns.next_if(|t| t.at <= begins) {
            if turn.fresh {
                reader.standing = Standing::default();
                head = None;
            }
            reader.standing.observer.clone_from(&turn.observer);
        }
        match piece {
            Piece::Words(block) => reader.block(block, &mut head),
            Piece::Items(head, rows, block) => reader.table(&head, &rows, block),
        }
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

pub(super) struct Reader<'t> {
    sheet: &'t Sheet,
    pub text: &'t str,
    pub standing: Standing,
    pub reports: Vec<Report>,
    /// Reports that no tag reached.
    pub untagged: Vec<usize>,
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
}
