//! The rules: one file a rule (its page, its check), and one table that lists them.
//!
//! To add a rule: write `src/rules/<name_with_underscores>.rs` with its page at the head (the headings of [`HEADINGS`]) and
//! a `RULE`, then add its `mod` line and its line in [`TABLE`]. A test compares the table with the folder. A rule sees one
//! finished report and returns findings; what it computes itself it computes with [`crate::sky`]. Helpers stand in `common/`.

mod common;

mod apparent_or_mean;
mod below_horizon;
mod constellation_disagrees;
mod date_impossible;
mod date_order_unclear;
mod daylight;
mod dec_out_of_range;
mod dec_sign_missing;
mod equinox_conflict;
mod equinox_implausible;
mod equinox_missing;
mod horizon_disagrees;
mod instant_disagrees;
mod instant_heliocentric;
mod instant_in_future;
mod instant_missing;
mod known_object_here;
mod low_altitude;
mod marks_mixed;
mod near_moon;
mod near_sun;
mod never_rises;
mod object_elsewhere;
mod of_date_undated;
mod position_disagrees;
mod position_incomplete;
mod ra_out_of_range;
mod ra_unit_unclear;
mod report_outlying;
mod report_repeated;
mod sexagesimal_out_of_range;
mod site_disagrees;
mod site_hemisphere_unclear;
mod site_out_of_range;
mod site_unknown;
mod steps_uneven;
mod stet_idle;
mod system_equinox_mismatch;
mod tag_misspelt;
mod zone_doubtful;
mod zone_missing;

pub use common::examine::{Desk, Selection, examine};
pub use common::sisters::{Run, together};

pub(crate) use common::examine::{breaks_place_or_time, of_place_and_time};
pub(crate) use common::sisters::Sisters;
pub(crate) use common::words;
pub(crate) use common::{angles, identity};
pub(crate) use date_order_unclear::exchanged as day_and_month_exchanged;
pub(crate) use equinox_missing::usual as usual_equinoxes;

use crate::house::House;
use crate::report::{Finding, Meant, Report, Weight};
use crate::sky::almanac::Almanac;
use crate::span::Span;
use common::identity::Known;

/// Every rule, in the order of the design.
pub const TABLE: &[Rule] = &[
    sexagesimal_out_of_range::RULE,
    ra_out_of_range::RULE,
    dec_out_of_range::RULE,
    ra_unit_unclear::RULE,
    marks_mixed::RULE,
    dec_sign_missing::RULE,
    position_incomplete::RULE,
    position_disagrees::RULE,
    steps_uneven::RULE,
    equinox_missing::RULE,
    equinox_conflict::RULE,
    tag_misspelt::RULE,
    system_equinox_mismatch::RULE,
    equinox_implausible::RULE,
    of_date_undated::RULE,
    apparent_or_mean::RULE,
    date_impossible::RULE,
    date_order_unclear::RULE,
    zone_missing::RULE,
    zone_doubtful::RULE,
    instant_heliocentric::RULE,
    instant_missing::RULE,
    instant_in_future::RULE,
    instant_disagrees::RULE,
    site_unknown::RULE,
    site_out_of_range::RULE,
    site_hemisphere_unclear::RULE,
    site_disagrees::RULE,
    never_rises::RULE,
    below_horizon::RULE,
    low_altitude::RULE,
    daylight::RULE,
    near_sun::RULE,
    near_moon::RULE,
    horizon_disagrees::RULE,
    constellation_disagrees::RULE,
    object_elsewhere::RULE,
    known_object_here::RULE,
    report_repeated::RULE,
    report_outlying::RULE,
    stet_idle::RULE,
];

/// The headings that every page has, in this order.
pub const HEADINGS: [&str; 6] = [
    "## Why it matters",
    "## What is asked",
    "## Formula",
    "## Source",
    "## Example",
    "## What to do",
];

/// The rule of that name.
pub fn find(name: &str) -> Option<&'static Rule> {
    TABLE.iter().find(|rule| rule.name == name)
}

/// The rule whose name is nearest to a misspelt one, where one is near enough to be meant.
pub fn nearest(name: &str) -> Option<&'static Rule> {
    TABLE
        .iter()
        .map(|rule| (strsim::jaro_winkler(rule.name, name), rule))
        .filter(|(likeness, _)| *likeness > 0.8)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, rule)| rule)
}

/// What a rule is given to judge.
#[derive(Clone, Copy)]
pub struct Case<'a> {
    /// The report as written.
    pub report: &'a Report,
    /// As meant.
    pub meant: &'a Meant,
    /// The house rules.
    pub house: &'a House,
    /// What counts as now: UTC as a two-part Julian date.
    pub now_utc: (f64, f64),
    /// Where the rules have instants and sites from.
    pub almanac: &'a Almanac,
    /// What the report's object name means, where it names something known.
    pub named: Option<Known<'a>>,
    /// The sheet's text, for quoting the words of a span. Empty for a trial whose words nobody will read.
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
    /// Rules that, where they speak of the same report, say the same thing better: one cause gives one finding.
    pub gives_way_to: &'static [&'static str],
    /// Its own file, whose head is its page.
    pub source: &'static str,
    /// Its check.
    pub check: fn(&Case, &mut Findings),
}

impl Rule {
    /// Its page, Markdown: the `//!` lines at the head of its file.
    pub fn page(&self) -> String {
        self.source
            .lines()
            .map_while(|line| line.strip_prefix("//!"))
            .flat_map(|line| [line.strip_prefix(' ').unwrap_or(line), "\n"])
            .collect()
    }

    /// The report of its page's example, with the comment lines that point at the words left out, and those words' places.
    pub fn example(&self) -> (String, Vec<Span>) {
        let page = self.page();
        let block = page.split("```report\n").nth(1).unwrap_or("");
        let block = block.split("```").next().unwrap_or("");
        let (mut report, mut marked, mut line_start) = (String::new(), Vec::new(), 0);
        for line in block.lines() {
            if let (true, Some(at)) = (line.starts_with('#'), line.find('^')) {
                // carets count characters, spans count bytes
                let written: &str = report[line_start..].trim_end_matches('\n');
                let offset = |column: usize| {
                    written
                        .char_indices()
                        .nth(column)
                        .map_or(written.len(), |(i, _)| i)
                };
                let first = line[..at].chars().count();
                let count = line[at..].chars().take_while(|c| *c == '^').count();
                marked.push(Span::new(
                    line_start + offset(first),
                    line_start + offset(first + count),
                ));
            } else {
                line_start = report.len();
                report.push_str(line);
                report.push('\n');
            }
        }
        (report, marked)
    }
}

/// Where a rule puts its findings.
pub struct Findings {
    rule: &'static str,
    weight: Weight,
    fixed: bool,
    list: Vec<Finding>,
}

impl Findings {
    /// An empty list for a rule, at its own weight or at the one the house sets.
    pub fn new(rule: &Rule, by_house: Option<Weight>) -> Findings {
        Findings {
            rule: rule.name,
            weight: by_house.unwrap_or(rule.weight),
            fixed: by_house.is_some(),
            list: Vec::new(),
        }
    }

    /// A finding at the rule's own weight.
    pub fn add(
        &mut self,
        primary: Span,
        message: impl Into<String>,
        advice: impl Into<String>,
    ) -> &mut Finding {
        self.add_as(self.weight, primary, message, advice)
    }

    /// A finding at another weight, unless the house has set one for the rule.
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
            weight: if self.fixed { self.weight } else { weight },
            message: message.into(),
            advice: (!advice.is_empty()).then_some(advice),
            primary,
            related: Vec::new(),
        });
        self.list.last_mut().expect("just pushed")
    }

    /// What was found.
    pub fn into_list(self) -> Vec<Finding> {
        self.list
    }
}
