//! Words shown in their lines, marked from below: what miette draws, in a look of our own.
//!
//! miette places the marks and their words (wide characters, colours, several places on one line). Its frame, icons and
//! headings belong to the messages of compilers, not to an editor's desk: three control characters, which no window can
//! hold, stand for the parts of that frame and are taken out again here.

use super::window::Window;
use miette::{
    Diagnostic, GraphicalReportHandler, GraphicalTheme, LabeledSpan, SourceCode, ThemeCharacters,
    ThemeStyles,
};
use std::fmt;
use std::io::{self, Write};

/// Stands at the head of a snippet.
const HEAD: char = '\u{1}';
/// Stands between a line's number and its text, and leads from a mark down to its word.
const GUTTER: char = '\u{2}';
/// Stands where the word for a mark begins, and at the foot of a snippet.
const WORD: char = '\u{3}';

/// How to draw.
#[derive(Clone, Copy, Debug)]
pub struct Style {
    /// With colours. Nothing depends on them.
    pub colour: bool,
    /// Characters to a line.
    pub width: usize,
}

/// Draws windows in one style.
pub struct Drawing {
    handler: GraphicalReportHandler,
}

impl Drawing {
    /// A drawing in that style.
    pub fn new(style: Style) -> Drawing {
        let styles = styles(style.colour);
        let theme = GraphicalTheme {
            characters: characters(),
            styles,
        };
        Drawing {
            handler: GraphicalReportHandler::new_themed(theme)
                .with_width(style.width)
                .with_links(false)
                .with_context_lines(1)
                .without_primary_span_start()
                .without_syntax_highlighting(),
        }
    }

    /// Writes a window's lines, each snippet under the sheet's name and line, all set in by `indent`.
    pub fn write(&self, window: Window, indent: &str, out: &mut impl Write) -> io::Result<()> {
        let mut text = String::new();
        if self
            .handler
            .render_report(&mut text, &Drawn(window))
            .is_err()
        {
            // a window that cannot be drawn leaves its message, which stands before it
            return Ok(());
        }
        let lines = text.lines().skip_while(|line| !line.contains(HEAD));
        for line in lines {
            if line.contains(HEAD) {
                let name = line
                    .find('[')
                    .zip(line.rfind(']'))
                    .map_or("", |(from, to)| &line[from + 1..to]);
                writeln!(out, "{indent}{name}")?;
            } else if line.trim() != "\u{3}" {
                let line = line
                    .replacen(GUTTER, " ", 1)
                    .replace(GUTTER, "|")
                    .replace(WORD, "↑");
                // the room kept at the end of each line of a window
                writeln!(out, "{indent}{}", line.trim_end())?;
            }
        }
        Ok(())
    }
}

fn characters() -> ThemeCharacters {
    ThemeCharacters {
        hbar: ' ',
        vbar: GUTTER,
        xbar: ' ',
        vbar_break: GUTTER,
        uarrow: '↑',
        rarrow: ' ',
        ltop: HEAD,
        mtop: ' ',
        rtop: ' ',
        lbot: WORD,
        rbot: ' ',
        mbot: ' ',
        lbox: ' ',
        rbox: ' ',
        lcross: ' ',
        rcross: ' ',
        underbar: '‾',
        underline: '‾',
        error: String::new(),
        warning: String::new(),
        advice: String::new(),
    }
}

/// The words in question bold, the other places plain, what surrounds them dim.
fn styles(colour: bool) -> ThemeStyles {
    let mut styles = ThemeStyles::none();
    if colour {
        let ansi = ThemeStyles::ansi();
        styles.linum = ansi.linum;
        styles.highlights = ansi.highlights;
    }
    styles
}

/// A window as miette wants it.
struct Drawn(Window);

impl fmt::Display for Drawn {
    fn fmt(&self, _: &mut fmt::Formatter) -> fmt::Result {
        Ok(())
    }
}

impl fmt::Debug for Drawn {
    fn fmt(&self, f: &mut fmt::Formatter) -> fmt::Result {
        f.write_str("Drawn")
    }
}

impl std::error::Error for Drawn {}

impl Diagnostic for Drawn {
    fn source_code(&self) -> Option<&dyn SourceCode> {
        Some(&self.0)
    }

    fn labels(&self) -> Option<Box<dyn Iterator<Item = LabeledSpan> + '_>> {
        Some(Box::new(self.0.labels()))
    }
}
