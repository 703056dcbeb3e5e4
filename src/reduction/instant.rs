//! Stub: another helper writes this file.

use crate::house::House;
use crate::report::{InstantMeant, InstantTrouble, Report, SiteMeant};

/// The governing instant of a report.
pub fn resolve(
    _report: &Report,
    _house: &House,
    _site: Option<&SiteMeant>,
) -> (Option<InstantMeant>, Option<InstantTrouble>) {
    (None, None)
}
