//! `grammar/*.pest` made to run: the words of `grammar/words/*.yaml` become rules, and pest_vm reads the whole.

use std::collections::{BTreeMap, BTreeSet};
use std::fmt::Write as _;
use std::fs;
use std::path::Path;

#[path = "../../src/reading/fold.rs"]
mod fold;

/// The grammar, ready to run; made once.
pub fn vm() -> &'static pest_vm::Vm {
    static VM: std::sync::OnceLock<pest_vm::Vm> = std::sync::OnceLock::new();
    VM.get_or_init(made)
}

/// pest_meta checks every rule through all it refers to, time and again: half a minute for the whole. So each file, and each
/// rule of words, is checked by itself, with the rules of the others standing in it by name only.
fn made() -> pest_vm::Vm {
    let mut pieces: Vec<String> = files().into_iter().map(|(_, source)| source).collect();
    let words = word_rules();
    pieces.extend(
        words
            .split("}\n")
            .filter(|r| r.contains('='))
            .map(|r| format!("{r}}}\n")),
    );
    let names: Vec<BTreeSet<&str>> = pieces.iter().map(|p| defined(p)).collect();
    let mut rules = Vec::new();
    for (i, piece) in pieces.iter().enumerate() {
        let mut text = piece.clone();
        for other in names.iter().flatten().filter(|n| !names[i].contains(*n)) {
            writeln!(text, "{other} = {{ \"{other}\" }}").expect("to a string");
        }
        rules.extend(
            optimized(&text)
                .into_iter()
                .filter(|r| names[i].contains(&*r.name)),
        );
    }
    pest_vm::Vm::new(rules)
}

/// The names of the rules that a piece defines.
fn defined(text: &str) -> BTreeSet<&str> {
    text.lines()
        .filter_map(|l| l.split_once('='))
        .map(|(name, _)| name.trim_end())
        .filter(|n| !n.is_empty() && n.chars().all(|c| c.is_ascii_alphanumeric() || c == '_'))
        .collect()
}

fn optimized(text: &str) -> Vec<pest_meta::optimizer::OptimizedRule> {
    match pest_meta::parse_and_optimize(text) {
        Ok((_, rules)) => rules,
        Err(errors) => panic!(
            "the grammar does not stand:\n{}",
            errors
                .iter()
                .map(|e| e.to_string())
                .collect::<Vec<_>>()
                .join("\n")
        ),
    }
}

/// The end of what a production takes from the beginning of `text`.
pub fn taken(vm: &pest_vm::Vm, production: &str, text: &str) -> Option<usize> {
    vm.parse(production, text)
        .ok()
        .map(|pairs| pairs.map(|p| p.as_span().end()).max().unwrap_or(0))
}

/// Name (without `.pest`) and text of each file of the grammar.
pub fn files() -> Vec<(String, String)> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("grammar");
    let mut files: Vec<_> = fs::read_dir(folder)
        .expect("grammar")
        .map(|e| e.expect("entry").path())
        .filter(|p| p.extension().is_some_and(|x| x == "pest"))
        .collect();
    files.sort();
    files
        .into_iter()
        .map(|p| {
            (
                p.file_stem().expect("name").to_string_lossy().into_owned(),
                fs::read_to_string(&p).expect("text"),
            )
        })
        .collect()
}

/// A word of the language files: the key it stands under (with its number or point), and the word as written there.
pub fn words() -> BTreeMap<String, BTreeSet<String>> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("grammar/words");
    let mut found: BTreeMap<String, BTreeSet<String>> = BTreeMap::new();
    for entry in fs::read_dir(folder).expect("grammar/words") {
        let text = fs::read_to_string(entry.expect("entry").path()).expect("text");
        let file: BTreeMap<String, serde_yaml::Value> = serde_yaml::from_str(&text).expect("yaml");
        for (key, value) in file {
            let mut add = |key: String, list: &serde_yaml::Value| {
                for word in list.as_sequence().into_iter().flatten() {
                    found
                        .entry(key.clone())
                        .or_default()
                        .insert(word.as_str().expect("a word").to_string());
                }
            };
            match (&*key, &value) {
                ("language", _) => {}
                (_, serde_yaml::Value::Mapping(map)) => {
                    for (k, list) in map {
                        let k = k
                            .as_str()
                            .map_or_else(|| k.as_u64().unwrap_or(0).to_string(), str::to_string);
                        add(format!("{key} {k}"), list);
                    }
                }
                _ => add(key, &value),
            }
        }
    }
    found
}

/// One word made into an expression: folding spelt out, blanks of any width, the final dot optional.
struct Entry {
    folded: String,
    exact: bool,
    expression: String,
}

fn entry(word: &str, letters: &mut BTreeSet<char>) -> Entry {
    let (word, exact) = match word.strip_prefix('=') {
        Some(rest) if !rest.is_empty() => (rest, true),
        _ => (word, false),
    };
    let (word, dot) = match word.strip_suffix('.') {
        Some(rest) if !rest.is_empty() && !exact => (rest, true),
        _ => (word, false),
    };
    let folded: String = word.chars().map(fold::fold).collect();
    let mut expression = String::new();
    if exact {
        write!(expression, "{word:?}").expect("to a string");
    } else {
        let parts: Vec<String> = folded
            .chars()
            .map(|c| {
                if c == ' ' {
                    "fold_blank+".to_string()
                } else {
                    letters.insert(c);
                    format!("fold_{:x}", c as u32)
                }
            })
            .collect();
        expression.push_str(&parts.join(" ~ "));
    }
    if word.ends_with(char::is_alphabetic) {
        expression.push_str(if dot {
            " ~ (\".\" | !ALPHABETIC)"
        } else {
            " ~ !ALPHABETIC"
        });
    } else if dot {
        expression.push_str(" ~ \".\"?");
    }
    Entry {
        folded,
        exact,
        expression,
    }
}

/// Longest first, so that the first match is the longest.
fn rule(name: &str, words: &[&String], letters: &mut BTreeSet<char>) -> String {
    let mut entries: Vec<Entry> = words.iter().map(|w| entry(w, letters)).collect();
    entries.sort_by_key(|e| std::cmp::Reverse(e.folded.chars().count()));
    let choices: Vec<String> = entries.iter().map(|e| e.expression.clone()).collect();
    format!("word_{name} = {{\n    {}\n}}\n", choices.join("\n  | "))
}

/// All `word_…` rules.
fn word_rules() -> String {
    let words = words();
    let mut letters = BTreeSet::new();
    let mut text = String::new();
    let of = |keys: &[&str]| -> Vec<&String> {
        let own = |k: &str| {
            keys.iter()
                .any(|w| k == *w || k.strip_prefix(w).is_some_and(|r| r.starts_with(' ')))
        };
        words
            .iter()
            .filter(|(k, _)| own(k))
            .flat_map(|(_, list)| list)
            .collect()
    };
    let phrase = |keys: &[&str]| -> Vec<&String> {
        of(keys).into_iter().filter(|w| w.contains(' ')).collect()
    };
    for (name, keys) in [
        ("hours", &["hours"][..]),
        ("degrees", &["degrees"]),
        ("minutes", &["minutes"]),
        ("seconds", &["seconds"]),
        ("arcminutes", &["arcminutes"]),
        ("arcseconds", &["arcseconds"]),
        ("metres", &["metres"]),
        ("feet", &["feet"]),
        ("compass", &["compass"]),
        ("latitude_point", &["compass north", "compass south"]),
        ("longitude_point", &["compass east", "compass west"]),
        ("latitude", &["latitude"]),
        ("longitude", &["longitude"]),
        ("height", &["elevation", "altitude"]),
        ("position", &["position"]),
        ("equinox", &["equinox"]),
        ("epoch", &["epoch"]),
        ("of_date", &["of-date"]),
        ("system", &["icrs", "fk5", "fk4"]),
        ("place", &["mean", "apparent"]),
        ("apparent", &["apparent"]),
        ("month", &["months"]),
        ("weekday", &["weekdays"]),
        ("date", &["date"]),
        ("time", &["time"]),
        ("at", &["at"]),
        ("local_time", &["local-time"]),
        ("sign", &["minus", "plus"]),
        ("uncertainty", &["uncertainty"]),
        ("half_day", &["am", "pm"]),
        ("universal", &["universal"]),
        (
            "other_scale",
            &[
                "ut1",
                "terrestrial",
                "barycentric",
                "atomic",
                "local-time",
                "zone-abbreviation",
            ],
        ),
        ("clock_scale", &["local-time", "zone-abbreviation"]),
        ("julian", &["julian"]),
        ("modified_julian", &["modified-julian"]),
        ("sun_julian", &["heliocentric-julian", "barycentric-julian"]),
    ] {
        text.push_str(&rule(name, &of(keys), &mut letters));
    }
    text.push_str(&rule(
        "place_phrase",
        &phrase(&["mean", "apparent"]),
        &mut letters,
    ));
    text.push_str(&rule(
        "apparent_phrase",
        &phrase(&["apparent"]),
        &mut letters,
    ));
    // a word that only fills, and is not the beginning of a longer phrase
    let all: Vec<&String> = words.values().flatten().collect();
    let mut fillers = of(&["filler"]);
    fillers.sort_by_key(|w| std::cmp::Reverse(w.chars().count()));
    let of_date = of(&["of-date"]);
    let choices: Vec<String> = fillers
        .iter()
        .filter(|w| !of_date.contains(w))
        .map(|filler| {
            let own = entry(filler, &mut letters);
            let longer: BTreeSet<String> = all
                .iter()
                .filter(|w| !fillers.contains(w))
                .map(|w| entry(w, &mut letters))
                .filter(|e| {
                    e.folded.len() > own.folded.len()
                        && e.folded.starts_with(&own.folded)
                        && !e.exact
                })
                .map(|e| e.expression)
                .collect();
            if longer.is_empty() {
                own.expression
            } else {
                let longer: Vec<String> = longer.into_iter().collect();
                format!("!({}) ~ {}", longer.join(" | "), own.expression)
            }
        })
        .collect();
    writeln!(
        text,
        "phrase_filler = {{\n    {}\n}}",
        choices.join("\n  | ")
    )
    .expect("to a string");
    // folding spelt out: every character that folds to the one wanted
    let folding: Vec<(char, char)> = ('\u{1}'..'\u{3000}').map(|c| (fold::fold(c), c)).collect();
    let forms = |wanted: char| -> Vec<String> {
        folding
            .iter()
            .filter(|(f, _)| *f == wanted)
            .map(|(_, c)| format!("\"\\u{{{:02x}}}\"", *c as u32))
            .collect()
    };
    writeln!(
        text,
        "fold_blank = _{{ \"-\" | \"_\" | {} }}",
        forms(' ').join(" | ")
    )
    .expect("to a string");
    for c in letters {
        writeln!(
            text,
            "fold_{:x} = _{{ {} }}",
            c as u32,
            forms(c).join(" | ")
        )
        .expect("to a string");
    }
    text
}
