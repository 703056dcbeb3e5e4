//! `colure rulebook`: what each rule asks, why, its formula and its source.

use super::{NOT_DONE, no_such_rule, print};
use crate::rules::{self, Rule};
use std::io::{self, Write};

pub(super) fn run(rule: Option<&str>) -> u8 {
    match rule {
        None => print(&list()),
        Some(name) => match rules::find(name) {
            Some(rule) => print(&page(rule)),
            None => {
                let _ = writeln!(
                    io::stderr(),
                    "not done: {}: {}",
                    crate::output::plain::one_line(name, 80),
                    no_such_rule(name)
                );
                NOT_DONE
            }
        },
    }
}

/// One line a rule: name, weight, what it is about.
fn list() -> String {
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
        text.push_str(&format!(
            "{:width$}  {:6}  {about}\n",
            rule.name,
            rule.weight.name()
        ));
    }
    text.push_str("\n`colure rulebook RULE` shows a rule's page.\n");
    text
}

fn page(rule: &Rule) -> String {
    let name = rule.name;
    format!(
        "{name} ({weight} unless the house says otherwise)\n\n{page}\n\
         To let one pass: [stet {name}: your reason] in the report's block.\n\
         To change its weight: `weights: {{ {name}: note }}` in colure.yaml (note, query, reject or off).\n",
        weight = rule.weight.name(),
        page = rule.page().trim_end(),
    )
}
