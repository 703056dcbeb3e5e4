//! The rules: one file a rule (its page, its check, its examples), and one table that lists them.

use crate::house::House;
use crate::report::{Finding, Meant, Report, Weight};
use crate::span::Span;

/// What a rule is given to judge.
pub struct Case<'a> {
    /// The report as written.
    pub report: &'a Report,
    /// As meant.
    pub meant: &'a Meant,
    /// The house rules.
    pub house: &'a House,
    /// What counts as now: UTC as a two-part Julian date.
    pub now_utc: (f64, f64),
    /// The sheet's text, for quoting the words of a span.
    pub text: &'a str,
}

/// A rule.
pub struct Rule {
    /// Its name, stable for ever.
    pub name: &'static str,
    /// Its own weight.
    pub weight: Weight,
    /// It speaks of where or when: a slip may explain it, and a slip's reading must not leave it standing.
    pub of_place_or_time: bool,
    /// Its page, Markdown.
    pub page: &'static str,
    /// Its check.
    pub check: fn(&Case, &mut Findings),
}

/// Where a rule puts its findings.
pub struct Findings {
    rule: &'static str,
    weight: Weight,
    list: Vec<Finding>,
}

impl Findings {
    /// A finding at the rule's own weight.
    pub fn add(
        &mut self,
        primary: Span,
        message: impl Into<String>,
        advice: impl Into<String>,
    ) -> &mut Finding {
        let weight = self.weight;
        self.add_as(weight, primary, message, advice)
    }

    /// A finding at another weight.
    pub fn add_as(
        &mut self,
        weight: Weight,
        primary: Span,
        message: impl Into<String>,
        advice: impl Into<String>,
    ) -> &mut Finding {
        let advice = advice.into();
        self.list.push(Finding {
            rule: self.rule,
            weight,
            message: message.into(),
            advice: (!advice.is_empty()).then_some(advice),
            primary,
            related: Vec::new(),
        });
        self.list.last_mut().expect("just pushed")
    }
}

// ---- stub until the rules' own branch is merged: take theirs ----

/// Every rule.
pub const TABLE: &[Rule] = &[];

/// Which rules are asked.
#[derive(Clone, Debug, Default)]
pub struct Selection {
    /// Only these, where any is named.
    pub only: Vec<String>,
    /// Not these.
    pub except: Vec<String>,
}

/// The rule of that name.
pub fn find(name: &str) -> Option<&'static Rule> {
    TABLE.iter().find(|rule| rule.name == name)
}

/// The nearest rule.
pub fn nearest(_name: &str) -> Option<&'static Rule> {
    None
}

impl Rule {
    /// Its page.
    pub fn page(&self) -> String {
        self.page.to_owned()
    }
}

/// Judges one report.
pub fn examine(
    report: Report,
    meant: Meant,
    _house: &House,
    _now_utc: (f64, f64),
    _text: &str,
    _selection: &Selection,
) -> crate::report::Examined {
    crate::report::Examined {
        report,
        meant,
        findings: Vec::new(),
        slips: Vec::new(),
    }
}
