//! Names looked up as people write them: case, accents, word order and words like "Observatory" forgiven.

use super::{House, Observer, RegisteredSite};

/// Words that name a kind of place and not the place.
const PLACE_WORDS: &[&str] = &[
    "observatory",
    "observatories",
    "observatorio",
    "observatoire",
    "osservatorio",
    "observatorium",
    "sternwarte",
    "station",
    "stations",
    "obs",
    "site",
    "observing",
    "astronomical",
    "field",
    "the",
    "at",
    "stn",
    "of",
    "de",
    "di",
    "der",
    "del",
    "della",
];

/// Words before a person's name that are none of it.
const PERSON_WORDS: &[&str] = &["dr", "prof", "mr", "mrs", "ms", "obs", "observer", "by"];

impl House {
    /// The site of the register that goes by this name, leniently.
    pub fn site(&self, name: &str) -> Option<&RegisteredSite> {
        let wanted = plain(name);
        let by = |key: &dyn Fn(&str) -> String| {
            let wanted = key(name);
            (!wanted.is_empty())
                .then(|| {
                    let mut found = self
                        .sites
                        .iter()
                        .filter(|s| s.names().any(|n| key(n) == wanted));
                    // a name that fits two sites names neither
                    found.next().filter(|_| found.next().is_none())
                })
                .flatten()
        };
        self.sites
            .iter()
            .find(|s| s.names().any(|n| plain(n) == wanted))
            .or_else(|| by(&place_key))
    }

    /// The names of the register nearest to a name it does not have, best first, three at most.
    pub fn nearest_sites(&self, name: &str) -> Vec<String> {
        let wanted = place_key(name);
        let mut scored: Vec<(f64, &str)> = self
            .sites
            .iter()
            .map(|site| {
                let best = site
                    .names()
                    .map(|n| strsim::jaro_winkler(&place_key(n), &wanted))
                    .fold(0.0, f64::max);
                (best, site.name.as_str())
            })
            .filter(|(score, _)| *score > 0.75)
            .collect();
        scored.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(b.1)));
        scored
            .into_iter()
            .take(3)
            .map(|(_, n)| n.to_owned())
            .collect()
    }

    /// The observer who goes by this name, leniently: `Quill, R.`, `r quill` and `R. Quill` are one.
    pub fn observer(&self, name: &str) -> Option<&Observer> {
        let wanted = person_key(name);
        if wanted.is_empty() {
            return None;
        }
        self.observers
            .iter()
            .find(|o| person_key(&o.name) == wanted)
            .or_else(|| {
                let mut found = self
                    .observers
                    .iter()
                    .filter(|o| initials_fit(&person_key(&o.name), &wanted));
                found.next().filter(|_| found.next().is_none())
            })
    }
}

impl RegisteredSite {
    /// Its name and its aliases.
    pub fn names(&self) -> impl Iterator<Item = &str> {
        std::iter::once(self.name.as_str()).chain(self.aliases.iter().map(String::as_str))
    }
}

/// Letters and digits only, lower case, without accents; words parted by one blank.
pub fn plain(name: &str) -> String {
    words(name).join(" ")
}

fn words(name: &str) -> Vec<String> {
    let mut words = vec![String::new()];
    for c in name.chars() {
        match unaccented(c) {
            Some(text) => words.last_mut().expect("never empty").push_str(&text),
            // an apostrophe stays inside its word
            None if matches!(c, '\'' | '’') => {}
            None => words.push(String::new()),
        }
    }
    words.retain(|w| !w.is_empty());
    words
}

/// A letter or digit in lower case without its accent; `None` for anything else. Combining accents become nothing.
fn unaccented(c: char) -> Option<String> {
    let text = match c {
        'À'..='Å' | 'à'..='å' | 'Ā' | 'ā' | 'Ă' | 'ă' | 'Ą' | 'ą' => "a",
        'Æ' | 'æ' => "ae",
        'Ç' | 'ç' | 'Ć' | 'ć' | 'Č' | 'č' => "c",
        'Ď' | 'ď' | 'Đ' | 'đ' | 'Ð' | 'ð' => "d",
        'È'..='Ë' | 'è'..='ë' | 'Ē' | 'ē' | 'Ę' | 'ę' | 'Ě' | 'ě' => "e",
        'Ì'..='Ï' | 'ì'..='ï' | 'Ī' | 'ī' | 'İ' | 'ı' => "i",
        'Ł' | 'ł' | 'Ľ' | 'ľ' => "l",
        'Ñ' | 'ñ' | 'Ń' | 'ń' | 'Ň' | 'ň' => "n",
        'Ò'..='Ö' | 'Ø' | 'ò'..='ö' | 'ø' | 'Ō' | 'ō' | 'Ő' | 'ő' => "o",
        'Œ' | 'œ' => "oe",
        'Ŕ' | 'ŕ' | 'Ř' | 'ř' => "r",
        'Ś' | 'ś' | 'Š' | 'š' | 'Ş' | 'ş' => "s",
        'ß' => "ss",
        'Ť' | 'ť' | 'Ţ' | 'ţ' => "t",
        'Ù'..='Ü' | 'ù'..='ü' | 'Ū' | 'ū' | 'Ů' | 'ů' | 'Ű' | 'ű' => "u",
        'Ý' | 'ý' | 'ÿ' => "y",
        'Ź' | 'ź' | 'Ž' | 'ž' | 'Ż' | 'ż' => "z",
        '\u{300}'..='\u{36f}' => "",
        c if c.is_alphanumeric() => return Some(c.to_lowercase().collect()),
        _ => return None,
    };
    Some(text.to_owned())
}

fn place_key(name: &str) -> String {
    sorted_without(name, PLACE_WORDS)
}

fn person_key(name: &str) -> String {
    sorted_without(name, PERSON_WORDS)
}

/// The words in order of the alphabet, those of `idle` left out unless nothing else is there.
fn sorted_without(name: &str, idle: &[&str]) -> String {
    let all = words(name);
    let mut telling: Vec<&String> = all.iter().filter(|w| !idle.contains(&w.as_str())).collect();
    if telling.is_empty() {
        telling = all.iter().collect();
    }
    telling.sort();
    telling
        .iter()
        .map(|w| w.as_str())
        .collect::<Vec<_>>()
        .join(" ")
}

/// Two sets of words that agree once a single letter may stand for a word it begins, with one full word in common.
fn initials_fit(a: &str, b: &str) -> bool {
    let (a, mut b): (Vec<&str>, Vec<&str>) = (a.split(' ').collect(), b.split(' ').collect());
    if a.len() != b.len() {
        return false;
    }
    let mut full = false;
    let mut left = Vec::new();
    for word in a {
        match b
            .iter()
            .position(|x| *x == word && word.chars().count() > 1)
        {
            Some(i) => {
                b.remove(i);
                full = true;
            }
            None => left.push(word),
        }
    }
    let initial = |x: &str, y: &str| {
        (x.chars().count() == 1 && y.starts_with(x)) || (y.chars().count() == 1 && x.starts_with(y))
    };
    full && left
        .iter()
        .all(|word| match b.iter().position(|x| initial(x, word)) {
            Some(i) => {
                b.remove(i);
                true
            }
            None => false,
        })
}
