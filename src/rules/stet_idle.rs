//! An editor's word that does nothing.
//!
//! ## Why it matters
//! A stet that lets nothing pass is left over from another state of the sheet, or misspelt, and hides that nobody decided.
//!
//! ## What is asked
//! Whether every `[stet RULE: reason]` has a reason, names a rule, and let a finding of that rule pass.
//!
//! ## Formula
//! None.
//!
//! ## Source
//! The owner's design, section 5.
//!
//! ## Example
//! ```report
//! Object: trail 629
//! RA 14:10:09.96 Dec -69:55:20.4 (J2000.0)
//! Date: 2001-02-25 00:13 UT
//! [stet below-horizon]
//! #     ^^^^^^^^^^^^^ no reason given
//! ```
//!
//! ## What to do
//! Give a reason, correct the rule's name, or take the stet out. To let it pass: `[stet stet-idle: reason]`.

use super::common::examine::{Selection, weight};
use super::{Case, Findings, Rule, find, nearest};
use crate::report::{Finding, Weight};

pub(super) const RULE: Rule = Rule {
    name: "stet-idle",
    weight: Weight::Note,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("stet_idle.rs"),
    check,
};

/// What a stet did is known only when all other rules have spoken: see [`apply`].
fn check(_: &Case, _: &mut Findings) {}

/// Lets pass what the editor's word lets pass, and says which word did nothing.
///
/// `gave_way` are findings that another one spoke for: a stet of the one that stands lets them pass too, and a stet that names
/// one of them is not idle.
pub(super) fn apply(
    case: &Case,
    selection: &Selection,
    findings: &mut Vec<Finding>,
    gave_way: &[(&'static str, &'static str)],
) {
    let idle_weight = weight(&RULE, case.house, selection);
    let mut out = Findings::new(&RULE, idle_weight);
    let mut silenced = false;
    for stet in &case.report.stets {
        for named in &stet.rules {
            let name = named.value.trim();
            let Some(rule) = find(name) else {
                let likely = nearest(name)
                    .map_or("See `colure rulebook` for the names.".to_string(), |rule| {
                        format!("Is it {}?", rule.name)
                    });
                out.add(
                    named.span,
                    format!("{} is no rule.", case.quote(named.span)),
                    likely,
                );
                continue;
            };
            if stet
                .reason
                .as_ref()
                .is_none_or(|reason| reason.value.trim().is_empty())
            {
                out.add(
                    named.span,
                    format!(
                        "The stet of {} gives no reason, so it lets nothing pass.",
                        rule.name
                    ),
                    "Write the reason after a colon.",
                );
                continue;
            }
            if rule.name == RULE.name {
                silenced = true;
                continue;
            }
            if !let_pass(findings, rule.name)
                && !gave_way.iter().any(|(from, _)| *from == rule.name)
                && !late(rule.name)
            {
                out.add(
                    named.span,
                    format!(
                        "The stet of {} let nothing pass: that rule found nothing here.",
                        rule.name
                    ),
                    "Take it out.",
                );
            }
        }
    }
    if idle_weight.is_some() && !silenced {
        findings.append(&mut out.into_list());
    }
}

/// Says which stets of rules that see reports together let nothing pass; `let_pass` are those that did.
pub(super) fn apply_late(
    report: &crate::report::Report,
    house: &crate::house::House,
    selection: &Selection,
    let_pass: &[&str],
) -> Vec<Finding> {
    let Some(weight) = weight(&RULE, house, selection) else {
        return Vec::new();
    };
    let mut out = Findings::new(&RULE, Some(weight));
    for named in report
        .stets
        .iter()
        .filter(|s| s.reason.is_some())
        .flat_map(|s| &s.rules)
    {
        let name = named.value.trim();
        if late(name) && !let_pass.contains(&name) {
            out.add(
                named.span,
                format!("The stet of {name} let nothing pass: that rule found nothing here."),
                "Take it out.",
            );
        }
    }
    out.into_list()
}

/// Rules that speak only when all reports of the run have been seen.
fn late(rule: &str) -> bool {
    rule == super::report_outlying::RULE.name || rule == super::report_repeated::RULE.name
}

/// Takes a rule's findings out; true where there were any. The caution near the Sun stays as a note.
fn let_pass(findings: &mut Vec<Finding>, rule: &str) -> bool {
    let before = findings.len();
    let mut found = false;
    findings.retain_mut(|finding| {
        if finding.rule != rule {
            return true;
        }
        found = true;
        if rule == super::near_sun::RULE.name {
            finding.weight = Weight::Note;
            finding.advice = Some(super::near_sun::CAUTION.to_string());
            return true;
        }
        false
    });
    found || findings.len() < before
}
