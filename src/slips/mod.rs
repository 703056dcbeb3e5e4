//! Slips: what people do wrong, tried one at a time and in pairs on a report that cannot be right as written.

pub mod digits;

use crate::report::{Frame, Slip};
use crate::rules::{Case, Sisters};

/// What probably happened to a report with a query or reject about where or when, best first.
pub(crate) fn explain(_case: &Case, _to: Frame, _sisters: Option<&Sisters>) -> Vec<Slip> {
    Vec::new()
}
