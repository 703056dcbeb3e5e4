//! Names of objects as people write them, brought to words that can be compared. Used by the program and, to lay the
//! catalogue out, by its build script (`src/sky/data/tables.rs`): it depends on nothing else of the crate.

/// Greek letters: the letter, its name, the abbreviations in use.
pub const GREEK: [(char, &str, &[&str]); 24] = [
    ('α', "alpha", &["alp", "alf"]),
    ('β', "beta", &["bet"]),
    ('γ', "gamma", &["gam"]),
    ('δ', "delta", &["del"]),
    ('ε', "epsilon", &["eps"]),
    ('ζ', "zeta", &["zet"]),
    ('η', "eta", &[]),
    ('θ', "theta", &["the", "tet"]),
    ('ι', "iota", &["iot"]),
    ('κ', "kappa", &["kap"]),
    ('λ', "lambda", &["lam"]),
    ('μ', "mu", &[]),
    ('ν', "nu", &[]),
    ('ξ', "xi", &["ksi"]),
    ('ο', "omicron", &["omi"]),
    ('π', "pi", &[]),
    ('ρ', "rho", &[]),
    ('σ', "sigma", &["sig"]),
    ('τ', "tau", &[]),
    ('υ', "upsilon", &["ups"]),
    ('φ', "phi", &[]),
    ('χ', "chi", &[]),
    ('ψ', "psi", &[]),
    ('ω', "omega", &["ome"]),
];

/// The words of a name: lower case, no accents, digits apart from letters, Greek letters written out, marks dropped.
pub fn words(name: &str) -> Vec<String> {
    let mut words: Vec<String> = Vec::new();
    let mut last = ' ';
    for c in name.chars().flat_map(char::to_lowercase) {
        let c = plain(c);
        if let Some(letter) = greek(c) {
            words.push(letter.to_string());
            last = ' ';
        } else if c.is_ascii_alphanumeric() {
            let joins = last.is_ascii_alphanumeric() && last.is_ascii_digit() == c.is_ascii_digit();
            match words.last_mut() {
                Some(word) if joins => word.push(c),
                _ => words.push(c.to_string()),
            }
            last = c;
        } else if !matches!(c, '\'' | '’' | '´' | '`' | '\u{300}'..='\u{36f}') {
            last = ' ';
        }
    }
    words
}

fn greek(c: char) -> Option<&'static str> {
    if c.is_ascii() {
        return None;
    }
    let c = match c {
        'ς' => 'σ',
        'ϑ' => 'θ',
        'ϕ' => 'φ',
        'ϵ' => 'ε',
        'µ' => 'μ',
        _ => c,
    };
    GREEK.iter().find(|g| g.0 == c).map(|g| g.1)
}

/// A letter without its accent; superscript digits as digits.
fn plain(c: char) -> char {
    match c {
        'à'..='å' | 'ā' | 'ă' | 'ą' => 'a',
        'ç' | 'ć' | 'č' => 'c',
        'è'..='ë' | 'ē' | 'ė' | 'ę' | 'ě' => 'e',
        'ğ' => 'g',
        'ḥ' | 'ħ' => 'h',
        'ì'..='ï' | 'ī' | 'ı' => 'i',
        'ł' => 'l',
        'ñ' | 'ń' | 'ň' => 'n',
        'ò'..='ö' | 'ø' | 'ō' | 'ő' => 'o',
        'ř' => 'r',
        'ś' | 'š' | 'ş' | 'ș' | 'ṣ' => 's',
        'ť' | 'ţ' | 'ț' | 'ṭ' => 't',
        'ù'..='ü' | 'ū' | 'ů' | 'ű' => 'u',
        'ý' | 'ÿ' => 'y',
        'ź' | 'ż' | 'ž' => 'z',
        '¹' => '1',
        '²' => '2',
        '³' => '3',
        '⁴' => '4',
        '⁵' => '5',
        '⁶' => '6',
        '⁷' => '7',
        '⁸' => '8',
        '⁹' => '9',
        _ => c,
    }
}
