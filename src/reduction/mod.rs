//! A report brought to the wanted equinox, with its step: from as written to as meant.

pub mod instant;
pub mod site;

use crate::house::House;
use crate::report::{Frame, Meant, Report};

/// What a report means under the house rules, restated in the frame `to`. Never fails: what cannot be had is `None`.
pub fn mean(_report: &Report, _house: &House, _to: Frame) -> Meant {
    todo!()
}
