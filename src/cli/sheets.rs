//! `colure screen` and `colure reduce`: one run over sheets, shown in the form asked for.

use super::{ALL_WELL, NOT_DONE, SOMETHING_FOUND, SheetArguments, StopAt, finish, now};
use crate::output::screen_text::Style;
use crate::output::summary::{self, Tally};
use crate::output::{Form, csv, jsonl, reduce_text, screen_text};
use crate::report::Verdict;
use crate::rules::{self, Selection};
use crate::run::{self, Run, Wanted};
use std::io::{self, BufWriter, IsTerminal, Write};
use std::path::Path;

/// Which of the two commands.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(super) enum Purpose {
    Screen,
    Reduce,
}

pub(super) fn run(arguments: SheetArguments, purpose: Purpose) -> u8 {
    if let Some(nothing) = none_left(&arguments.only, &arguments.except) {
        let _ = writeln!(io::stderr(), "not done: {nothing}");
        return NOT_DONE;
    }
    let from_input =
        arguments.sheets.is_empty() || arguments.sheets.iter().any(|s| s == Path::new("-"));
    if from_input && io::stdin().is_terminal() {
        let _ = writeln!(
            io::stderr(),
            "Reading what you type or paste; end with Ctrl-D."
        );
    }
    let wanted = Wanted {
        inputs: arguments.sheets,
        house: arguments.house,
        to: arguments.to,
        now_utc: arguments.now.unwrap_or_else(now).0,
        selection: Selection {
            only: arguments.only,
            except: arguments.except,
        },
    };
    let run = run::run(&wanted);
    let _ = summary::write_failures(&run, style(&io::stderr()), &mut io::stderr().lock());
    let written = show(&run, arguments.form, purpose);
    let status = if run.failures.is_empty() {
        status(&run, arguments.stop_at)
    } else {
        NOT_DONE
    };
    finish(written, status)
}

/// What to say where `--except` takes away everything that `--only` asks, or every rule there is.
fn none_left(only: &[String], except: &[String]) -> Option<String> {
    let left = rules::TABLE.iter().any(|rule| {
        (only.is_empty() || only.iter().any(|o| o == rule.name))
            && !except.iter().any(|e| e == rule.name)
    });
    (!left).then(|| {
        "no rule is left to ask: --except takes away all that --only asks; leave one of them out"
            .to_owned()
    })
}

/// Data to standard output; what is for people goes there too only where nothing else does.
fn show(run: &Run, form: Form, purpose: Purpose) -> io::Result<()> {
    let mut out = BufWriter::new(io::stdout().lock());
    match (form, purpose) {
        (Form::Text, Purpose::Screen) => {
            screen_text::write(run, style(&io::stdout()), &mut out)?;
            summary::write(run, style(&io::stdout()).width, &mut out)?;
            return out.flush();
        }
        (Form::Text, Purpose::Reduce) => reduce_text::write(run, &mut out)?,
        (Form::Jsonl, _) => jsonl::write(run, &mut out)?,
        (Form::Csv, _) => csv::write(run, &mut out)?,
    }
    out.flush()?;
    let mut people = BufWriter::new(io::stderr().lock());
    if form == Form::Text {
        let _ = reduce_text::write_findings(run, &mut people);
    }
    let _ = summary::write_unread(run, &mut people);
    let _ = summary::write(run, style(&io::stderr()).width, &mut people);
    let _ = people.flush();
    Ok(())
}

fn status(run: &Run, stop_at: StopAt) -> u8 {
    let heaviest = Tally::of(run).heaviest();
    let stop = match stop_at {
        StopAt::Query => heaviest >= Verdict::Query,
        StopAt::Reject => heaviest >= Verdict::Reject,
        StopAt::Never => false,
    };
    if stop { SOMETHING_FOUND } else { ALL_WELL }
}

/// Colour on a terminal that can show it, unless NO_COLOR is set to anything.
pub(super) fn style(stream: &impl IsTerminal) -> Style {
    let set = |name: &str| std::env::var_os(name).is_some_and(|v| !v.is_empty());
    let dumb = std::env::var_os("TERM").is_some_and(|t| t == "dumb");
    let said = std::env::var("COLUMNS").ok().and_then(|c| c.parse().ok());
    let columns = said.or_else(|| {
        let size = terminal_size::terminal_size().filter(|_| stream.is_terminal());
        size.map(|(width, _)| usize::from(width.0).min(120))
    });
    Style {
        colour: stream.is_terminal() && !set("NO_COLOR") && !dumb,
        width: columns.unwrap_or(100usize).clamp(40, 200),
    }
}
