//! Colure reads position reports the way observers write them, says what each one means, and restates it at one equinox.
//!
//! The way of the data is the way of the folders: [`sheet`] → [`reading`] → [`report`] → [`reduction`] → [`rules`]
//! → [`output`]. Each knows only those before it. [`sky`] is numerical astronomy over plain numbers.
#![forbid(unsafe_code)]
#![warn(missing_docs)]

pub mod cli;
pub mod house;
pub mod output;
pub mod reading;
pub mod reduction;
pub mod report;
pub mod rules;
pub mod run;
pub mod sheet;
pub mod slips;
pub mod sky;
pub mod span;

pub use run::examine_sheet;
