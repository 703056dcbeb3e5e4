//! What is wrong with a house file, each mistake at its own words.

use crate::span::Span;
use std::path::PathBuf;

/// One mistake in a house file.
#[derive(Clone, PartialEq, Debug)]
pub struct Mistake {
    /// The object list it stands in; `None` for the house file itself.
    pub list: Option<PathBuf>,
    /// Where: bytes of that file's text. `None` where the whole file is meant.
    pub span: Option<Span>,
    /// What is wrong, with the word.
    pub what: String,
    /// What was expected, or what to do.
    pub expected: String,
}

/// A house file that cannot be used.
#[derive(Clone, PartialEq, Debug, thiserror::Error)]
#[error("{}: {}", path.display(), mistakes.first().map_or("cannot be used", |m| m.what.as_str()))]
pub struct HouseError {
    /// The file.
    pub path: PathBuf,
    /// Its text, as far as it could be read.
    pub text: String,
    /// The object lists in which there are mistakes, and their texts.
    pub lists: Vec<(PathBuf, String)>,
    /// Its mistakes in the order of the file; never empty.
    pub mistakes: Vec<Mistake>,
}

impl HouseError {
    /// One mistake about the file as a whole.
    pub fn whole(
        path: PathBuf,
        what: impl Into<String>,
        expected: impl Into<String>,
    ) -> HouseError {
        HouseError {
            path,
            text: String::new(),
            lists: Vec::new(),
            mistakes: vec![Mistake {
                list: None,
                span: None,
                what: what.into(),
                expected: expected.into(),
            }],
        }
    }
}

/// The nearest of some right words to a wrong one, if one is near enough to offer.
pub fn nearest<'a>(word: &str, right: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let word = word.to_lowercase();
    right
        .into_iter()
        .map(|w| {
            let whole = strsim::normalized_damerau_levenshtein(&word, w);
            (whole.max(strsim::jaro_winkler(&word, w) - 0.15), w)
        })
        .filter(|(score, _)| *score > 0.6)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, w)| w)
}

/// What the system says of a file, in words that help.
pub fn io_words(error: &std::io::Error) -> String {
    use std::io::ErrorKind;
    match error.kind() {
        ErrorKind::NotFound => "there is no such file".to_owned(),
        ErrorKind::PermissionDenied => "it may not be read".to_owned(),
        ErrorKind::IsADirectory => "it is a folder".to_owned(),
        _ => {
            let full = error.to_string();
            let words = full.split(" (os error").next().unwrap_or_default();
            format!("it cannot be read: {words}")
        }
    }
}
