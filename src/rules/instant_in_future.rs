//! An observation in the future.
//!
//! ## Why it matters
//! Nobody observed it yet. The year, the month or the day is wrong.
//!
//! ## What is asked
//! Whether the instant lies before now (`--now`, else this machine's clock).
//!
//! ## Formula
//! UTC of the report ≤ now.
//!
//! ## Source
//! Common practice, no source.
//!
//! ## Example
//! ```report
//! Object: field object K743
//! RA 13 50 31.5 Dec -12 12 09 (J2000.0)
//! Date: 2128-02-16 07:11 UT
//! #                ^^^^^ not yet
//! ```
//!
//! ## What to do
//! Ask for the date. To let it pass: `[stet instant-in-future: reason]`.

use super::common::words::{instant, lapse, seconds_between};
use super::{Case, Findings, Rule};
use crate::report::Weight;

pub(super) const RULE: Rule = Rule {
    name: "instant-in-future",
    weight: Weight::Reject,
    of_place_or_time: true,
    gives_way_to: &["date-order-unclear"],
    source: include_str!("instant_in_future.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    let Some(meant) = case.meant.instant else {
        return;
    };
    let ahead = seconds_between(case.now_utc, meant.utc);
    // the leap seconds between two quasi Julian dates are no future
    if ahead <= 2.0 {
        return;
    }
    out.add(
        case.when_span(),
        format!(
            "{} lies {} in the future.",
            instant(meant.utc),
            lapse(ahead)
        ),
        "Ask for the date of observation.",
    );
}
