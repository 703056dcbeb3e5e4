//! `colure rulebook`: what each rule asks, why, its formula and its source.

use super::{NOT_DONE, print, sheets};
use crate::output::plain::{one_line, wrapped};
use crate::rules::{self, Rule};
use std::io::{self, Write};

pub(super) fn run(rule: Option<&str>) -> u8 {
    match rule {
        None => print(&list()),
        Some(name) => match rules::find(name) {
            Some(rule) => print(&page(rule)),
            None => {
                let advice = match rules::nearest(name) {
                    Some(near) => format!("did you mean `{}`?", near.name),
                    None => "`colure rulebook` lists the rules".to_owned(),
                };
                let _ = writeln!(
                    io::stderr(),
                    "not done: there is no rule `{}`; {advice}",
                    one_line(name, 80)
                );
                NOT_DONE
            }
        },
    }
}

/// One line a rule: name, weight, what it is about.
fn list() -> String {
    let columns = sheets::style(&io::stdout()).width;
    let width = rules::TABLE.iter().map(|r| r.name.len()).max().unwrap_or(0);
    let mut text = String::new();
    for rule in rules::TABLE {
        let page = rule.page();
        let about = page
            .lines()
            .map(str::trim)
            .find(|l| !l.is_empty())
            .unwrap_or("");
        let about = about.trim_start_matches('#').trim();
        let head = format!("{:width$}  {:6}  ", rule.name, rule.weight.name());
        // a narrow screen has no room for a second column of words
        let rest = if columns < 70 { 4 } else { head.len() };
        text.push_str(&wrapped(about, &head, &" ".repeat(rest), columns));
        text.push('\n');
    }
    text.push_str("\n`colure rulebook RULE` shows a rule's page.\n");
    text
}

fn page(rule: &Rule) -> String {
    let (name, weight) = (rule.name, rule.weight.name());
    let columns = sheets::style(&io::stdout()).width;
    let mut text = format!("{name} ({weight} unless the house says otherwise)\n\n");
    for piece in pieces(rule.page().trim_end()) {
        text.push_str(&piece.shown(columns));
    }
    text.push('\n');
    for line in [
        format!("To let one pass: [stet {name}: your reason] in the report's block."),
        format!(
            "To change its weight: `weights: {{ {name}: note }}` in colure.yaml (note, query, reject or off)."
        ),
    ] {
        text.push_str(&wrapped(&line, "", "  ", columns));
        text.push('\n');
    }
    text
}

/// A piece of a page.
enum Piece<'p> {
    /// Words that may be broken anywhere between two of them.
    Words(String),
    /// A line that stays as it is.
    Line(&'p str),
}

impl Piece<'_> {
    fn shown(&self, columns: usize) -> String {
        let mut text = match self {
            Piece::Words(words) => wrapped(words, "", "", columns),
            Piece::Line(line) => (*line).to_owned(),
        };
        text.push('\n');
        text
    }
}

/// A line of a page at least this long goes on in the next; a shorter one ends: a formula, the end of a paragraph.
const FULL_LINE: usize = 90;

/// The paragraphs of a page joined, its headings, lists and examples line by line, the fences of examples left out.
fn pieces(page: &str) -> Vec<Piece<'_>> {
    let mut pieces: Vec<Piece> = Vec::new();
    let (mut example, mut goes_on) = (false, false);
    for line in page.lines() {
        if line.starts_with("```") {
            example = !example;
            continue;
        }
        let words = !example && !line.is_empty() && !line.starts_with(['#', '-', '|', ' ', '>']);
        let joined = std::mem::replace(&mut goes_on, words && line.chars().count() >= FULL_LINE);
        match (words, pieces.last_mut()) {
            (true, Some(Piece::Words(before))) if joined => {
                before.push(' ');
                before.push_str(line);
            }
            (true, _) => pieces.push(Piece::Words(line.to_owned())),
            (false, _) => pieces.push(Piece::Line(line)),
        }
    }
    pieces
}
