//! How rules are run over one report: house weights, one finding for one cause, and the editor's word.

use crate::house::House;
use crate::report::{Examined, Finding, Frame, Meant, Report, Weight};
use crate::rules::identity::named;
use crate::rules::{Case, Findings, Rule, TABLE};
use crate::sky::almanac::Almanac;

/// Which rules are asked: `--only` and `--except`.
#[derive(Clone, PartialEq, Eq, Debug, Default)]
pub struct Selection {
    /// Only these, where any is named.
    pub only: Vec<String>,
    /// All but these.
    pub except: Vec<String>,
}

impl Selection {
    /// Is this rule asked?
    pub fn takes(&self, rule: &str) -> bool {
        (self.only.is_empty() || self.only.iter().any(|name| name == rule))
            && !self.except.iter().any(|name| name == rule)
    }
}

/// The weight at which a rule speaks in this house and run: `None` for not at all.
pub fn weight(rule: &Rule, house: &House, selection: &Selection) -> Option<Weight> {
    if !selection.takes(rule.name) {
        return None;
    }
    match house.weights.get(rule.name) {
        Some(set) => *set,
        None => Some(rule.weight),
    }
}

/// Runs one rule. The caution near the Sun stands as a note even where the rule is switched off.
fn run(rule: &Rule, case: &Case, selection: &Selection) -> Vec<Finding> {
    let by_house = case.house.weights.get(rule.name).copied();
    let weight = match weight(rule, case.house, selection) {
        Some(_) => by_house.flatten(),
        None if rule.name == super::super::near_sun::RULE.name && selection.only.is_empty() => {
            Some(Weight::Note)
        }
        None => return Vec::new(),
    };
    let mut out = Findings::new(rule, weight);
    (rule.check)(case, &mut out);
    out.into_list()
}

/// Takes out what another finding says better; returns what gave way, with the rule it gave way to.
fn one_cause_one_finding(findings: &mut Vec<Finding>) -> Vec<(&'static str, &'static str)> {
    // a note speaks for nothing heavier
    let standing: Vec<(&'static str, Weight)> =
        findings.iter().map(|f| (f.rule, f.weight)).collect();
    let mut gave_way = Vec::new();
    findings.retain(|finding| {
        let better = TABLE
            .iter()
            .find(|rule| rule.name == finding.rule)
            .and_then(|rule| {
                rule.gives_way_to.iter().find(|other| {
                    standing.iter().any(|(name, weight)| {
                        name == *other && (*weight > Weight::Note || finding.weight == Weight::Note)
                    })
                })
            });
        if let Some(better) = better {
            gave_way.push((finding.rule, *better));
        }
        better.is_none()
    });
    gave_way
}

/// Query and reject findings of the rules about where and when: what a slip must explain, and must not leave standing.
pub fn of_place_and_time(case: &Case) -> Vec<Finding> {
    let all = Selection::default();
    let mut findings = Vec::new();
    for rule in TABLE.iter().filter(|rule| rule.of_place_or_time) {
        findings.extend(run(rule, case, &all));
    }
    findings.retain(|f| f.weight > Weight::Note);
    one_cause_one_finding(&mut findings);
    findings
}

/// Is there any such finding? Stops at the first: what a trial asks. (A finding gives way only to one that stands.)
pub fn breaks_place_or_time(case: &Case) -> bool {
    let all = Selection::default();
    TABLE
        .iter()
        .filter(|rule| rule.of_place_or_time)
        .any(|rule| {
            run(rule, case, &all)
                .iter()
                .any(|f| f.weight > Weight::Note)
        })
}

/// What reports are examined with: all that is the same for each report of a sheet.
#[derive(Clone, Copy)]
pub struct Desk<'a> {
    /// The house rules.
    pub house: &'a House,
    /// The frame that positions are restated in.
    pub to: Frame,
    /// What counts as now: UTC as a two-part Julian date.
    pub now_utc: (f64, f64),
    /// The sheet's text.
    pub text: &'a str,
    /// Which rules are asked.
    pub selection: &'a Selection,
    /// Where instants and sites come from.
    pub almanac: &'a Almanac,
}

impl<'a> Desk<'a> {
    /// A report of the sheet as a case for the rules.
    pub fn case(&self, report: &'a Report, meant: &'a Meant) -> Case<'a> {
        Case {
            report,
            meant,
            house: self.house,
            now_utc: self.now_utc,
            almanac: self.almanac,
            named: named(report, self.house),
            text: self.text,
        }
    }

    /// Runs every rule over a report, lets the editor's word count, and says what probably happened. Findings come in the
    /// order of the sheet.
    pub fn examine(&self, report: Report, meant: Meant) -> Examined {
        let desk: Desk = *self;
        let case = desk.case(&report, &meant);
        let mut findings = Vec::new();
        for rule in TABLE {
            findings.extend(run(rule, &case, self.selection));
        }
        let gave_way = one_cause_one_finding(&mut findings);
        super::super::stet_idle::apply(&case, self.selection, &mut findings, &gave_way);
        sort(&mut findings);
        let slips = if needs_explaining(&findings) {
            crate::slips::explain(&case, self.to, None)
        } else {
            Vec::new()
        };
        Examined {
            report,
            meant,
            findings,
            slips,
        }
    }
}

/// The same for a single report: `now_utc` is what counts as now, `text` the sheet's text.
pub fn examine(
    report: Report,
    meant: Meant,
    house: &House,
    to: Frame,
    now_utc: (f64, f64),
    text: &str,
    selection: &Selection,
) -> Examined {
    Desk {
        house,
        to,
        now_utc,
        text,
        selection,
        almanac: &Almanac::new(),
    }
    .examine(report, meant)
}

/// Puts findings in the order of the sheet, the heaviest first at one place.
pub fn sort(findings: &mut [Finding]) {
    findings.sort_by(|a, b| {
        (a.primary.start, b.weight, a.rule).cmp(&(b.primary.start, a.weight, b.rule))
    });
}

/// Is there a query or reject about where or when?
pub fn needs_explaining(findings: &[Finding]) -> bool {
    findings.iter().any(|f| {
        f.weight > Weight::Note
            && TABLE
                .iter()
                .any(|rule| rule.name == f.rule && rule.of_place_or_time)
    })
}
