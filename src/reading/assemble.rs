//! Assembly: positions and statements become reports; each report takes what its own line says, then its block, then what stands.

use super::fields::{self, Piece};
use super::head::Head;
use super::names::new_word_in;
use super::parts::{Part, Scene, parts};
use super::position::positions;
use super::row::Row;
use super::scan::{Atom, Kind, atoms};
use super::scope;
use super::standing::{Draft, Standing};
use super::statements::{Statements, gather};
use super::table;
use super::text::Text;
use super::wrap::logical_lines;
use crate::report::{Nearness, PositionKind, Report, Role};
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
    let mut head: Option<Head> = None;
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
    fn block(&mut self, block: Block, head: &mut Option<Head>) {
        // tables first: their rows are read by their heads
        let mut from = block.first;
        let mut prose: Vec<usize> = Vec::new();
        while from < block.end {
            if let Some(found) = table::head(self.sheet, from, block.end) {
                let rows = table::rows(self.sheet, &found, block.end);
                // a head without a row is prose, unless the rows follow a blank line
                if rows.is_empty() && found.line + 1 < block.end {
                    prose.push(from);
                    from += 1;
                    continue;
                }
                self.prose(&prose, block);
                prose.clear();
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
        for (i, words) in logical_lines(self.sheet, lines) {
            atoms(Text::window(self.text, words), i, &mut awaiting, &mut all);
            all.push(Atom {
                kind: Kind::LineEnd,
                span: Span::new(words.end, words.end),
                line: i,
            });
        }
        let starts = (first..=last + 1)
            .map(|line| all.partition_point(|a| a.line < line))
            .collect();
        let found = positions(self.text, &all);
        if found.is_empty() {
            let said = gather(self.text, &all, &[]);
            self.stands(said, last - first + 1);
            return;
        }
        let scene = Scene {
            all: &all,
            found: &found,
            first_line: first,
            starts,
        };
        let reports_before = self.reports.len();
        let mut block_object = None;
        for part in parts(self, &scene) {
            // what stands above the first position of a part, in a list, stands for what follows
            if part.lead > part.from {
                let lead = &all[part.from..part.lead];
                let count = lead
                    .iter()
                    .filter(|a| matches!(a.kind, Kind::LineEnd))
                    .count();
                let said = gather(self.text, lead, &[]);
                block_object = said.objects.last().cloned().or(block_object);
                self.stands(said, if lead.len() <= 8 * count { 1 } else { count });
            }
            let inside = &found[part.positions.clone()];
            let taken: Vec<(usize, usize)> = inside
                .iter()
                .map(|f| (f.first - part.lead, f.end - part.lead))
                .collect();
            let mut said = gather(self.text, &all[part.lead..part.to], &taken);
            if said.objects.is_empty() {
                said.objects.extend(block_object.clone());
            }
            self.note_year(&said.instants);
            let equatorial = inside
                .iter()
                .any(|f| f.position.kind == PositionKind::Equatorial);
            for n in part.positions.clone() {
                // altitude and azimuth beside a right ascension are no report of their own
                if equatorial && found[n].position.kind == PositionKind::Horizontal {
                    continue;
                }
                self.report(&scene, n, &part, &said, block);
            }
        }
        self.shared_tag(reports_before);
    }

    /// A tag said once in a block holds for all of it, where no other is said there.
    fn shared_tag(&mut self, from: usize) {
        let mut tags = self.reports[from..]
            .iter()
            .flat_map(|r| &r.equinoxes)
            .filter(|(_, n)| matches!(n, Nearness::Own | Nearness::Block))
            .map(|(t, _)| *t);
        let Some(tag) = tags.next() else { return };
        if tags.any(|t| t.value != tag.value) {
            return;
        }
        for r in &mut self.reports[from..] {
            if r.equinoxes.iter().all(|(_, n)| *n == Nearness::Standing) {
                r.equinoxes = vec![(tag, Nearness::Block)];
            }
        }
    }

    fn report(&mut self, scene: &Scene, n: usize, part: &Part, said: &Statements, block: Block) {
        let f = &scene.found[n];
        let (first_line, last_line) = scene.lines_of(f);
        let own_from = scene.line_start(first_line).max(part.lead);
        let own_to = scene.line_start(last_line + 1).min(part.to);
        let own = scene.span(own_from, own_to);
        let said = scope::own_words(scene, n, part, own, said, self);
        // a role is what the nearest words before the position on its line say, else the part's
        let start = scope::sentence_start(scene, part, n).max(own.start);
        let before = Span::new(start, scene.all[f.first].span.start.max(start));
        let role = said
            .roles
            .iter()
            .rfind(|r| before.contains(r.span))
            .or_else(|| {
                said.roles
                    .iter()
                    .find(|r| own.contains(r.span) && r.value == Role::Region)
            })
            .map(|r| r.value);
        let object = self.object(scene, n, part, &said, role);
        let mut said = said;
        if said.claims_new.is_none()
            && let Some(o) = &object
        {
            said.claims_new = new_word_in(self.text, o.span);
        }
        let draft = Draft {
            found: f.clone(),
            object,
            role,
            own,
            part: scene.span(part.lead, part.to),
            block: block.span,
        };
        self.finish(draft, said);
    }

    // ------------------------------------------------------------------------------------------ tables

    fn table(&mut self, head: &Head, rows: &[Row], block: Block) {
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
