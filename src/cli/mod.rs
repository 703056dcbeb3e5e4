//! The command line: what may be asked, and the exit status. 0 nothing at or above `--stop-at`, 1 something, 2 not done.

mod moment;
mod rulebook;
mod sheets;
mod sites;

use crate::house::frame::frame_named;
use crate::output::Form;
use crate::report::Frame;
use crate::{rules, sky};
use clap::error::{ContextKind, ContextValue};
use clap::{Args, Parser, Subcommand, ValueEnum};
use std::ffi::OsString;
use std::io::{self, IsTerminal, Write};
use std::path::PathBuf;

/// Nothing at or above `--stop-at`.
pub const ALL_WELL: u8 = 0;
/// Something was at or above `--stop-at`.
pub const SOMETHING_FOUND: u8 = 1;
/// The work could not be done.
pub const NOT_DONE: u8 = 2;

#[derive(Parser)]
#[command(name = "colure", version, about, long_about = None, disable_help_subcommand = true)]
struct Arguments {
    #[command(subcommand)]
    command: Option<Command>,
}

#[derive(Subcommand)]
enum Command {
    /// Read and check sheets, and show what is wrong under the very words
    Screen(SheetArguments),
    /// Restate the reports of sheets at one equinox
    Reduce(SheetArguments),
    /// What each rule asks, why, its formula and its source
    Rulebook {
        /// A rule's name; none lists them all
        rule: Option<String>,
    },
    /// The site register: what it holds, what it makes of a written site
    Sites {
        /// A site's name or coordinates as somebody wrote them; none lists the register
        name: Vec<String>,
        /// House rules to use instead of the nearest colure.yaml
        #[arg(long, value_name = "FILE")]
        house: Option<PathBuf>,
    },
}

/// What `screen` and `reduce` take.
#[derive(Args)]
struct SheetArguments {
    /// Files and folders to read; - or none is standard input
    #[arg(value_name = "SHEET")]
    sheets: Vec<PathBuf>,
    /// The equinox to restate at [default: that of the house rules, else J2000.0 on the ICRS]
    #[arg(long, value_name = "EQUINOX", value_parser = frame_named)]
    to: Option<Frame>,
    /// The form of the output
    #[arg(long = "as", value_name = "FORM", value_enum, default_value_t)]
    form: Form,
    /// House rules to use instead of the nearest colure.yaml at or above each sheet
    #[arg(long, value_name = "FILE")]
    house: Option<PathBuf>,
    /// What counts as now, for runs that can be repeated: 2026-11-01, or 2026-11-01 12:00 UT
    #[arg(long, value_name = "INSTANT", value_parser = moment::instant)]
    now: Option<Now>,
    /// Exit with 1 when a verdict is this or heavier
    #[arg(long, value_name = "VERDICT", value_enum, default_value_t)]
    stop_at: StopAt,
    /// Ask only this rule (may be given again, or a list with commas)
    #[arg(long, value_name = "RULE", value_delimiter = ',', value_parser = rule_name)]
    only: Vec<String>,
    /// Do not ask this rule (may be given again, or a list with commas)
    #[arg(long, value_name = "RULE", value_delimiter = ',', value_parser = rule_name)]
    except: Vec<String>,
}

/// When to exit with 1.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default, ValueEnum)]
enum StopAt {
    /// A query or a reject
    Query,
    /// A reject
    #[default]
    Reject,
    /// Never
    Never,
}

/// UTC as a two-part Julian date.
#[derive(Clone, Copy, Debug)]
struct Now((f64, f64));

/// Runs the command with its arguments and gives the exit status.
pub fn run(arguments: impl IntoIterator<Item = OsString>) -> u8 {
    let arguments = match Arguments::try_parse_from(signs_kept(arguments)) {
        Ok(arguments) => arguments,
        Err(mut error) => {
            // what is offered for an unknown option must be near it
            let near = |offer: &str, wrong: &str| strsim::damerau_levenshtein(offer, wrong) <= 2;
            if let (Some(ContextValue::String(wrong)), Some(ContextValue::String(offer))) = (
                error.get(ContextKind::InvalidArg),
                error.get(ContextKind::SuggestedArg),
            ) && !near(offer, wrong)
            {
                error.remove(ContextKind::SuggestedArg);
            }
            // "to pass it as a value": no sheet is called so
            error.remove(ContextKind::Suggested);
            // a closed pipe is no reason to complain
            let _ = error.print();
            return if error.use_stderr() {
                NOT_DONE
            } else {
                ALL_WELL
            };
        }
    };
    match arguments.command {
        None => welcome(),
        Some(Command::Screen(wanted)) => sheets::run(wanted, sheets::Purpose::Screen),
        Some(Command::Reduce(wanted)) => sheets::run(wanted, sheets::Purpose::Reduce),
        Some(Command::Rulebook { rule }) => rulebook::run(rule.as_deref()),
        Some(Command::Sites { name, house }) => sites::run(&name, house.as_deref()),
    }
}

/// A southern or western number after `sites` is no option: its sign becomes a typographic minus.
fn signs_kept(arguments: impl IntoIterator<Item = OsString>) -> Vec<OsString> {
    let mut arguments: Vec<OsString> = arguments.into_iter().collect();
    if arguments.get(1).is_some_and(|command| command == "sites") {
        for argument in &mut arguments[2..] {
            let signed = argument.to_str().and_then(|a| a.strip_prefix('-'));
            if let Some(number) = signed.filter(|n| n.starts_with(|c: char| c.is_ascii_digit())) {
                *argument = format!("−{number}").into();
            }
        }
    }
    arguments
}

/// What to do next, in ten lines.
const WELCOME: &str = "\
Colure reads position reports as observers write them, says what cannot be right, and restates them at one equinox.

  colure screen inbox/                 check every sheet in a folder
  colure screen -                      check what you paste (end with Ctrl-D)
  colure reduce july.txt               a table of all positions at J2000.0
  colure reduce july.txt --as csv      the same for a spreadsheet (or --as jsonl for programs)
  colure rulebook                      what is asked, and why
  colure sites                         the sites your colure.yaml knows

`colure COMMAND --help` says more.
";

fn welcome() -> u8 {
    if io::stdin().is_terminal() {
        print(WELCOME)
    } else {
        let _ = io::stderr().write_all(WELCOME.as_bytes());
        NOT_DONE
    }
}

/// Prints to standard output; a pipe that was closed is no error.
fn print(text: &str) -> u8 {
    finish(io::stdout().lock().write_all(text.as_bytes()), ALL_WELL)
}

/// The status after writing: a closed pipe changes nothing, any other failure means that the work is not done.
fn finish(written: io::Result<()>, status: u8) -> u8 {
    match written {
        Err(e) if e.kind() != io::ErrorKind::BrokenPipe => {
            let _ = writeln!(
                io::stderr(),
                "not done: standard output cannot be written: {e}"
            );
            NOT_DONE
        }
        _ => status,
    }
}

fn rule_name(word: &str) -> Result<String, String> {
    if rules::find(word).is_some() {
        return Ok(word.to_owned());
    }
    Err(no_such_rule(word))
}

/// What to say to a rule's name that is none.
fn no_such_rule(word: &str) -> String {
    match rules::nearest(word) {
        Some(near) => format!("there is no such rule; did you mean `{}`?", near.name),
        None => "there is no such rule; `colure rulebook` lists them".to_owned(),
    }
}

fn now_at(unix_s: i64, nanoseconds: i32) -> Option<Now> {
    // the Unix count starts at MJD 40587 and knows no leap seconds
    let (day, second) = (unix_s.div_euclid(86_400), unix_s.rem_euclid(86_400));
    let part = (second as f64 + f64::from(nanoseconds) / 1e9) / 86_400.0;
    sky::time::mjd_to_utc((40_587 + day) as f64, part)
        .ok()
        .map(Now)
}

/// The clock of this machine.
fn now() -> Now {
    let now = jiff::Timestamp::now();
    now_at(now.as_second(), now.subsec_nanosecond()).unwrap_or(Now((sky::time::J2000, 0.0)))
}
