//! Stub: another helper writes this file.

use crate::house::House;
use crate::report::{Report, SiteMeant, SiteTrouble};

/// The site of a report, its trouble, and the register's own coordinates where written ones disagree.
pub fn resolve(
    _report: &Report,
    _house: &House,
) -> (Option<SiteMeant>, Option<SiteTrouble>, Option<(f64, f64)>) {
    (None, None, None)
}
