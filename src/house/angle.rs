//! A latitude or longitude as a house file writes it: `54°18.6′ N`, `54 18 36 N`, `-3.02`, `W 3:01`.

/// Which of the two coordinates a word is.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Axis {
    /// North positive, within ±90°.
    Latitude,
    /// East positive; up to 360° is taken and brought to (-180, 180].
    Longitude,
}

impl Axis {
    /// Its name in messages.
    pub fn name(self) -> &'static str {
        match self {
            Axis::Latitude => "latitude",
            Axis::Longitude => "longitude",
        }
    }

    /// How to write one, for messages.
    pub fn expected(self) -> &'static str {
        match self {
            Axis::Latitude => "a latitude such as 54°18.6′ N, 54 18 36 N or 54.31 (south negative)",
            Axis::Longitude => "a longitude such as 3°01′ W, 3 01 12 W or -3.02 (west negative)",
        }
    }
}

/// An angle read: its value and the value of its last digit, both in degrees.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Degrees {
    /// North or east positive.
    pub value: f64,
    /// The value of one unit of the last digit written.
    pub step: f64,
}

/// Why a word is no such angle.
#[derive(Clone, PartialEq, Debug, thiserror::Error)]
pub enum AngleError {
    /// Not of the form of an angle.
    #[error("“{0}” is not an angle")]
    Form(String),
    /// Minutes or seconds of 60 and more.
    #[error("{value} {part}: {part} stop below 60")]
    Sexagesimal {
        /// What was written.
        value: String,
        /// `minutes` or `seconds`.
        part: &'static str,
    },
    /// The letter O for a direction.
    #[error("“O” is east in German and Dutch, west in the Romance languages: write E or W")]
    EastOrWest,
    /// A compass letter of the other axis.
    #[error("“{0}” is a letter of the other coordinate")]
    OtherAxis(char),
    /// A sign and a compass letter at once.
    #[error("both a sign and the letter {0}: which one counts?")]
    SignAndLetter(char),
    /// Beyond 90° (latitude) or 360° (longitude).
    #[error("{value}° lies beyond {limit}°")]
    Range {
        /// What was written, degrees.
        value: f64,
        /// The limit passed.
        limit: f64,
    },
}

/// Brings a longitude to (-180, 180].
pub fn wrap_longitude(degrees: f64) -> f64 {
    let x = (degrees + 180.0).rem_euclid(360.0) - 180.0;
    if x == -180.0 { 180.0 } else { x }
}

/// Reads a latitude or longitude.
pub fn read(word: &str, axis: Axis) -> Result<Degrees, AngleError> {
    let form = || AngleError::Form(word.trim().chars().take(40).collect());
    let (body, letter) = take_letter(word.trim(), axis)?;
    let (sign, body) = take_sign(&body);
    if sign.is_some()
        && let Some(letter) = letter
    {
        return Err(AngleError::SignAndLetter(letter));
    }
    let numbers: Vec<&str> = body
        .split(|c: char| !c.is_ascii_digit() && c != '.')
        .filter(|part| !part.is_empty())
        .collect();
    let is_number = |c: char| c.is_ascii_digit() || c == '.';
    let marks_fit = body.split(is_number).map(str::trim).all(|mark| {
        matches!(
            mark,
            "" | ":"
                | "°"
                | "º"
                | "d"
                | "deg"
                | "m"
                | "min"
                | "s"
                | "sec"
                | "'"
                | "′"
                | "’"
                | "\""
                | "″"
                | "”"
                | "''"
        )
    });
    if !marks_fit || numbers.is_empty() || numbers.len() > 3 {
        return Err(form());
    }
    let mut value = 0.0;
    let mut step = 1.0;
    for (i, number) in numbers.iter().enumerate() {
        let last = i + 1 == numbers.len();
        let (whole, decimals) = number.split_once('.').unwrap_or((number, ""));
        let well_formed = !whole.is_empty()
            && whole.len() + decimals.len() <= 15
            && !decimals.contains('.')
            && (last || decimals.is_empty() && !number.contains('.'));
        if !well_formed {
            return Err(form());
        }
        let n: f64 = number.parse().map_err(|_| form())?;
        if i > 0 && n >= 60.0 {
            return Err(AngleError::Sexagesimal {
                value: (*number).to_owned(),
                part: if i == 1 { "minutes" } else { "seconds" },
            });
        }
        let unit = [1.0, 60.0, 3600.0][i];
        value += n / unit;
        step = 1.0 / unit / 10f64.powi(decimals.len() as i32);
    }
    let limit = match axis {
        Axis::Latitude => 90.0,
        Axis::Longitude => 360.0,
    };
    if value > limit {
        return Err(AngleError::Range { value, limit });
    }
    if sign == Some('-') || matches!(letter, Some('S' | 'W')) {
        value = -value;
    }
    if axis == Axis::Longitude {
        value = wrap_longitude(value);
    }
    Ok(Degrees { value, step })
}

/// Takes a compass letter or word off either end; what is left, and the letter.
fn take_letter(word: &str, axis: Axis) -> Result<(String, Option<char>), AngleError> {
    let letters = |c: &char| c.is_alphabetic();
    let front: String = word.chars().take_while(letters).collect();
    let back: String = word.chars().rev().take_while(letters).collect();
    let back: String = back.chars().rev().collect();
    for (found, rest) in [
        (&front, &word[front.len()..]),
        (&back, &word[..word.len() - back.len()]),
    ] {
        let letter = match found.to_lowercase().as_str() {
            "n" | "north" => 'N',
            "s" | "south" => 'S',
            "e" | "east" => 'E',
            "w" | "west" => 'W',
            "o" if axis == Axis::Longitude => return Err(AngleError::EastOrWest),
            _ => continue,
        };
        // `18s`: seconds, not south
        let seconds = found == "s"
            && rest.contains(['m', '\'', '′'])
            && rest.ends_with(|c: char| c.is_ascii_digit());
        if letter == 'S' && (axis == Axis::Longitude || seconds) {
            continue;
        }
        let fits = match axis {
            Axis::Latitude => matches!(letter, 'N' | 'S'),
            Axis::Longitude => matches!(letter, 'E' | 'W'),
        };
        if !fits {
            return Err(AngleError::OtherAxis(letter));
        }
        return Ok((rest.trim().to_owned(), Some(letter)));
    }
    Ok((word.to_owned(), None))
}

/// Takes a sign off the front; typographic dashes count as minus.
fn take_sign(word: &str) -> (Option<char>, &str) {
    let mut chars = word.chars();
    match chars.next() {
        Some('+') => (Some('+'), chars.as_str().trim_start()),
        Some('-' | '−' | '–' | '‒') => (Some('-'), chars.as_str().trim_start()),
        _ => (None, word),
    }
}
