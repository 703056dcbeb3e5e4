//! Folding: letters without case and accents, so that a word is known however it is typed. Shared with the build script.

/// The letter without case and accent; blanks of all kinds become one blank. Anything else stays as it is.
pub fn fold(c: char) -> char {
    if c.is_ascii() {
        return if matches!(c, '\t' | '\n' | '\r') {
            ' '
        } else {
            c.to_ascii_lowercase()
        };
    }
    let c = c.to_lowercase().next().unwrap_or(c);
    match c {
        'à' | 'á' | 'â' | 'ã' | 'ä' | 'å' | 'ą' | 'ā' => 'a',
        'ç' | 'ć' | 'č' => 'c',
        'è' | 'é' | 'ê' | 'ë' | 'ę' | 'ē' => 'e',
        'ì' | 'í' | 'î' | 'ï' => 'i',
        'ł' => 'l',
        'ñ' | 'ń' => 'n',
        'ò' | 'ó' | 'ô' | 'õ' | 'ö' | 'ø' => 'o',
        'ś' | 'š' | 'ß' => 's',
        'ù' | 'ú' | 'û' | 'ü' => 'u',
        'ý' | 'ÿ' => 'y',
        'ź' | 'ż' | 'ž' => 'z',
        '’' | '‘' | 'ʼ' => '\'',
        '\u{a0}' | '\u{2009}' | '\u{202f}' | '\u{2007}' | '\u{2002}' | '\u{2003}' => ' ',
        _ => c,
    }
}
