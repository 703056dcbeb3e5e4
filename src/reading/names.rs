//! Names of objects: after their label, before the position on its line, or alone on the line above.

use super::assemble::Reader;
use super::parts::{Part, Scene};
use super::scan::{Atom, Kind};
use super::statements::Statements;
use super::text::Text;
use super::words::Word;
use crate::report::Role;
use crate::span::{Span, Spanned};

impl Reader<'_> {
    /// A line that holds a name and nothing else.
    pub(super) fn name_only(&self, words: &[Atom]) -> bool {
        const STATEMENTS: [Word; 5] = [
            Word::Date,
            Word::Site,
            Word::Observer,
            Word::Equinox,
            Word::Time,
        ];
        !words.is_empty()
            && words.len() <= 9
            && words
                .iter()
                .any(|a| matches!(a.kind, Kind::Plain | Kind::Word(_)))
            && words.iter().all(|a| match &a.kind {
                Kind::Plain
                | Kind::Run(_)
                | Kind::Mark('=' | '(' | ')' | '-' | '*' | '+' | '/' | '#' | '.') => true,
                Kind::Word(p) => !STATEMENTS.iter().any(|w| p.means(*w)) || p.means(Word::New),
                _ => false,
            })
    }

    /// The object's name: after its label; else before the position on its line; else the line above.
    pub(super) fn object(
        &self,
        scene: &Scene,
        n: usize,
        part: &Part,
        said: &Statements,
        role: Option<Role>,
    ) -> Option<Spanned<String>> {
        let all = scene.all;
        let f = &scene.found[n];
        let own = said
            .objects
            .iter()
            .rfind(|o| o.span.start < f.position.span.start)
            .or_else(|| said.objects.first());
        if let Some(o) = own {
            return Some(o.clone());
        }
        let line = scene.lines_of(f).0;
        let start = scene.line_start(line).max(part.lead);
        // a second position on a line takes the words since the first
        let before = n.checked_sub(1).map_or(0, |k| scene.found[k].end);
        let mut words: Vec<usize> = (start.max(before)..f.first).collect();
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
        if matches!(
            role,
            Some(Role::Reference | Role::Pointing | Role::Catalogued | Role::Region)
        ) {
            return None;
        }
        if let Some(mut name) = self.name_in(all, &words) {
            // "M 57 18 53 35.1": the numbers of a run that are not the right ascension's belong to the name
            let position = f.position.first.map_or(0, |a| a.span.start);
            let run = all[f.first].span.start;
            let touches = words
                .last()
                .is_some_and(|&k| all[k].span.end == name.span.end);
            if touches && run < position && matches!(all[f.first].kind, Kind::Run(_)) {
                let extra = Span::new(name.span.start, position)
                    .of(self.text)
                    .trim_end();
                name = Spanned::new(
                    extra.to_string(),
                    Span::new(name.span.start, name.span.start + extra.len()),
                );
            }
            return Some(name);
        }
        // the line above, if it is a lone name
        if line > scene.first_line
            && self.name_only(scene.line(line - 1))
            && scene.line_start(line - 1) >= part.from
        {
            let words: Vec<usize> = (scene.line_start(line - 1)..scene.line_start(line))
                .filter(|&k| !matches!(all[k].kind, Kind::LineEnd))
                .collect();
            return self.name_in(all, &words);
        }
        None
    }

    /// A name among these atoms: what is left when dates, verbs, prepositions and labels are taken off.
    pub(super) fn name_in(&self, all: &[Atom], words: &[usize]) -> Option<Spanned<String>> {
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
        let words = a.span.of(self.text);
        // "Star A", "Star I": a single capital is a name
        let letter = words.chars().count() == 1 && words.starts_with(char::is_uppercase);
        let name = letter || a.means(Word::New) && !a.means(Word::Found);
        !name && LEADING.iter().any(|w| a.means(*w))
    }
}

/// The first word for something new inside a name.
pub(super) fn new_word_in(text: &str, span: Span) -> Option<Span> {
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
