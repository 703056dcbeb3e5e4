//! What leaves the house: one file a form. An output decides nothing; it shows what was found.

pub mod csv;
mod drawing;
pub mod jsonl;
pub mod plain;
pub mod printed;
pub mod record;
pub mod reduce_text;
mod report_words;
pub mod screen_text;
mod slips_text;
pub mod summary;
pub mod window;

/// A form of output, as `--as` names it.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default, clap::ValueEnum)]
pub enum Form {
    /// For reading on a terminal or on paper.
    #[default]
    Text,
    /// One JSON record a line.
    Jsonl,
    /// A table for spreadsheets.
    Csv,
}
