//! What several rules need: the words of a report, its place over the horizon, who is named, how rules are run.
//!
//! No rule is here, and nothing here has an opinion.

pub mod angles;
pub mod examine;
pub mod identity;
pub mod motion;
pub mod sight;
pub mod sisters;
pub mod words;
