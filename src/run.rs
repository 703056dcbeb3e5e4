//! A whole run: sheets found and loaded, each examined under its own house rules, and what could not be done.

use crate::house::{self, House, HouseError};
use crate::report::{Examined, Finding, Frame};
use crate::rules::{self, Selection};
use crate::sheet::Sheet;
use crate::sky::almanac::Almanac;
use crate::{reading, reduction};
use std::collections::{HashMap, HashSet};
use std::ffi::OsStr;
use std::io::Read;
use std::path::{Path, PathBuf};
use std::sync::Arc;

/// The name of the sheet that standard input is.
pub const STANDARD_INPUT: &str = "-";
/// A longer line is a stream of something else more often than a sheet.
const LONG_LINE_BYTES: usize = 1 << 20;

/// Reads, reduces and judges one sheet.
pub fn examine_sheet(
    sheet: &Sheet,
    house: &House,
    to: Frame,
    now_utc: (f64, f64),
    selection: &Selection,
) -> Vec<Examined> {
    let almanac = Almanac::new();
    let desk = rules::Desk {
        house,
        to,
        now_utc,
        text: &sheet.text,
        selection,
        almanac: &almanac,
    };
    reading::read(sheet)
        .into_iter()
        .map(|report| {
            let meant = reduction::mean_by(&report, house, to, &almanac);
            desk.examine(report, meant)
        })
        .collect()
}

/// What a run is asked to do.
pub struct Wanted {
    /// Files, folders and `-`; none is standard input.
    pub inputs: Vec<PathBuf>,
    /// The house file named, if one is.
    pub house: Option<PathBuf>,
    /// The frame named, else that of each sheet's house.
    pub to: Option<Frame>,
    /// What counts as now: UTC as a two-part Julian date.
    pub now_utc: (f64, f64),
    /// Which rules are asked.
    pub selection: Selection,
}

/// One sheet, examined.
pub struct SheetRun {
    /// The sheet.
    pub sheet: Sheet,
    /// The house rules it was held to.
    pub house: Arc<House>,
    /// Its reports, in its own order.
    pub examined: Vec<Examined>,
    /// Findings that belong to no report.
    pub remarks: Vec<Finding>,
}

/// Something that could not be done.
#[derive(Debug)]
pub enum Failure {
    /// A house file with mistakes, told once; the sheets under it were not done.
    House(HouseError),
    /// A sheet or folder: its name, what is wrong, what to do.
    Input {
        /// The name as given.
        name: String,
        /// What is wrong.
        what: String,
        /// What to do.
        advice: String,
    },
}

/// A finished run.
#[derive(Default)]
pub struct Run {
    /// The sheets done, in order.
    pub sheets: Vec<SheetRun>,
    /// What could not be done.
    pub failures: Vec<Failure>,
    /// What is worth saying and stops nothing: name and note.
    pub notes: Vec<(String, String)>,
    /// The rules asked, where not all of them were.
    pub only: Vec<String>,
    /// The rules left out.
    pub except: Vec<String>,
    /// The files done, by what the disk calls them.
    pub done: HashSet<PathBuf>,
}

/// Does the whole run. What fails of one sheet stops no other.
pub fn run(wanted: &Wanted) -> Run {
    let mut run = Run {
        only: wanted.selection.only.clone(),
        except: wanted.selection.except.clone(),
        ..Run::default()
    };
    let mut houses = Houses::new(wanted.house.as_deref());
    let inputs = match &wanted.inputs[..] {
        [] => vec![PathBuf::from(STANDARD_INPUT)],
        some => some.to_vec(),
    };
    for input in inputs {
        if input.as_os_str() == STANDARD_INPUT {
            if !run.done.insert(input) {
                run.note(STANDARD_INPUT, "is named twice: it was read once");
                continue;
            }
            let mut bytes = Vec::new();
            match std::io::stdin().lock().read_to_end(&mut bytes) {
                Ok(_) => one(
                    STANDARD_INPUT.to_owned(),
                    bytes,
                    Path::new("."),
                    false,
                    wanted,
                    &mut houses,
                    &mut run,
                ),
                Err(e) => run.fail(
                    "standard input",
                    house::io_words(&e),
                    "give the sheet as a file",
                ),
            }
        } else if input.is_dir() {
            folder(&input, wanted, &mut houses, &mut run);
        } else {
            file(&input, false, wanted, &mut houses, &mut run);
        }
    }
    together(&mut run, wanted);
    run
}

/// What the reports of a run say of one another.
fn together(run: &mut Run, wanted: &Wanted) {
    let to = wanted.to.unwrap_or(House::default().canonical);
    let mut runs: Vec<rules::Run> = run
        .sheets
        .iter_mut()
        .map(|s| rules::Run {
            sheet: &s.sheet.name,
            text: &s.sheet.text,
            house: &s.house,
            examined: &mut s.examined,
        })
        .collect();
    rules::together(&mut runs, to, wanted.now_utc, &wanted.selection);
}

impl Run {
    fn fail(&mut self, name: &str, what: impl Into<String>, advice: &str) {
        self.failures.push(Failure::Input {
            name: name.to_owned(),
            what: what.into(),
            advice: advice.to_owned(),
        });
    }

    fn note(&mut self, name: &str, note: impl Into<String>) {
        self.notes.push((name.to_owned(), note.into()));
    }
}

/// Every file below a folder, hidden ones and house rules left out, in order of their paths.
fn folder(path: &Path, wanted: &Wanted, houses: &mut Houses, run: &mut Run) {
    let walk = ignore::WalkBuilder::new(path)
        .standard_filters(false)
        .hidden(true)
        .sort_by_file_path(|a, b| a.cmp(b))
        .build();
    let mut any = false;
    for entry in walk {
        match entry {
            Ok(entry)
                if entry
                    .file_type()
                    .is_some_and(|t| t.is_file() || t.is_symlink()) =>
            {
                let file_path = entry.path();
                if file_path.file_name() == Some(OsStr::new(house::FILE_NAME)) || file_path.is_dir()
                {
                    continue;
                }
                if houses.lists_objects(file_path) {
                    continue;
                }
                any = true;
                file(file_path, true, wanted, houses, run);
            }
            Ok(_) => {}
            Err(e) => run.fail(
                &path.display().to_string(),
                walk_words(&e),
                "check its permissions",
            ),
        }
    }
    if !any {
        run.fail(
            &path.display().to_string(),
            "holds no sheet",
            "put the sheets into it, or name another folder (hidden files and colure.yaml are no sheets)",
        );
    }
}

fn file(path: &Path, walked: bool, wanted: &Wanted, houses: &mut Houses, run: &mut Run) {
    let name = path.display().to_string();
    if let Ok(real) = path.canonicalize()
        && !run.done.insert(real)
    {
        run.note(&name, "is named twice: it was read once");
        return;
    }
    match std::fs::read(path) {
        Ok(bytes) => {
            let folder = match path.parent() {
                Some(p) if p != Path::new("") => p,
                _ => Path::new("."),
            };
            one(name, bytes, folder, walked, wanted, houses, run);
        }
        Err(e) if e.kind() == std::io::ErrorKind::NotFound => {
            run.fail(&name, "there is no such file or folder", &near_file(path));
        }
        Err(e) => run.fail(&name, house::io_words(&e), "check its permissions"),
    }
}

/// What went wrong on the way through a folder.
fn walk_words(error: &ignore::Error) -> String {
    match error.io_error() {
        Some(e) => format!("a part of it was not seen: {}", house::io_words(e)),
        None => format!("a part of it was not seen: {error}"),
    }
}

/// A word on what to do about a file that is not there: the nearest name beside it, if one is near.
fn near_file(path: &Path) -> String {
    let folder = path
        .parent()
        .filter(|p| *p != Path::new(""))
        .unwrap_or(Path::new("."));
    let wanted = path
        .file_name()
        .map_or(String::new(), |n| n.to_string_lossy().into_owned());
    let names: Vec<String> = std::fs::read_dir(folder)
        .into_iter()
        .flatten()
        .flatten()
        .take(10_000)
        .map(|e| e.file_name().to_string_lossy().into_owned())
        .collect();
    match house::nearest(&wanted, names.iter().map(String::as_str)) {
        Some(near) => format!("did you mean {}?", path.with_file_name(near).display()),
        None => "check the path (a single - reads standard input)".to_owned(),
    }
}

fn one(
    name: String,
    bytes: Vec<u8>,
    folder: &Path,
    walked: bool,
    wanted: &Wanted,
    houses: &mut Houses,
    run: &mut Run,
) {
    let shown = name.clone();
    if bytes.iter().all(u8::is_ascii_whitespace) {
        run.note(&shown, "is empty: there is nothing to read in it");
        return;
    }
    if let Some(line) = longest_line(&bytes) {
        run.note(
            &shown,
            format!(
                "line {} is {} million bytes long: it was read, but a sheet has shorter lines; was another file meant?",
                line.0,
                line.1.div_ceil(1_000_000)
            ),
        );
    }
    let sheet = match Sheet::decode(name, &bytes) {
        Ok(sheet) => sheet,
        Err(e) if walked => {
            let words = e.to_string();
            let what = words.split("; ").next().unwrap_or_default();
            return run.note(&shown, format!("passed over: {what}"));
        }
        Err(e) => {
            // the error holds what is wrong, and after it what to do
            let words = e.to_string();
            let (what, advice) = words.split_once("; ").unwrap_or((&words, "give a text"));
            return run.fail(&shown, what, advice);
        }
    };
    for note in sheet.notes() {
        run.note(&shown, note.as_str());
    }
    let house = match houses.of(folder) {
        Ok(house) => house,
        Err(Some(error)) => return run.failures.push(Failure::House(error)),
        Err(None) => return,
    };
    let to = wanted.to.unwrap_or(house.canonical);
    let examined = examine_sheet(&sheet, &house, to, wanted.now_utc, &wanted.selection);
    run.sheets.push(SheetRun {
        sheet,
        house,
        examined,
        remarks: Vec::new(),
    });
}

/// Number and length of the first line too long for a sheet.
fn longest_line(bytes: &[u8]) -> Option<(usize, usize)> {
    if bytes.len() < LONG_LINE_BYTES {
        return None;
    }
    let mut start = 0;
    let ends = memchr::memchr2_iter(b'\n', b'\r', bytes).chain([bytes.len()]);
    for (number, end) in ends.enumerate() {
        if end - start >= LONG_LINE_BYTES {
            return Some((number + 1, end - start));
        }
        start = end + 1;
    }
    None
}

// ---------------------------------------------------------------------------------------------- the houses of a run

/// The house rules of each folder, each file read once.
struct Houses {
    named: Option<PathBuf>,
    /// Which file rules a folder.
    files: HashMap<PathBuf, Option<PathBuf>>,
    /// `None` where the file has mistakes that were told already.
    read: HashMap<PathBuf, Option<Arc<House>>>,
    none: Arc<House>,
}

impl Houses {
    fn new(named: Option<&Path>) -> Houses {
        Houses {
            named: named.map(Path::to_owned),
            files: HashMap::new(),
            read: HashMap::new(),
            none: Arc::new(House::default()),
        }
    }

    /// The house of a folder; the error of a broken one is given once, then `Err(None)`.
    fn of(&mut self, folder: &Path) -> Result<Arc<House>, Option<HouseError>> {
        let Some(file) = self.file_for(folder) else {
            return Ok(self.none.clone());
        };
        if let Some(known) = self.read.get(&file) {
            return known.clone().ok_or(None);
        }
        let names: Vec<&str> = rules::TABLE.iter().map(|r| r.name).collect();
        let loaded = house::load(&file, &names).map(Arc::new);
        self.read.insert(file, loaded.as_ref().ok().cloned());
        loaded.map_err(Some)
    }

    fn file_for(&mut self, folder: &Path) -> Option<PathBuf> {
        if self.named.is_some() {
            return self.named.clone();
        }
        self.files
            .entry(folder.to_owned())
            .or_insert_with(|| house::nearest_house(folder))
            .clone()
    }

    /// True where a file is an object list of a house at or above it, and so no sheet.
    fn lists_objects(&mut self, path: &Path) -> bool {
        let Some(path) = house::absolute(path) else {
            return false;
        };
        if path.extension() != Some(OsStr::new("csv")) {
            return false;
        }
        // a broken house tells its mistakes when its first sheet comes
        let Some(file) = path.parent().and_then(|folder| self.file_for(folder)) else {
            return false;
        };
        match self.read.get(&file) {
            Some(Some(house)) => house.object_lists.contains(&path),
            Some(None) => false,
            None => house::object_lists(&file).contains(&path),
        }
    }
}

/// The house that rules standard input or a command without sheets.
pub fn house_here(named: Option<&Path>) -> Result<Arc<House>, HouseError> {
    match Houses::new(named).of(Path::new(".")) {
        Ok(house) => Ok(house),
        Err(Some(error)) => Err(error),
        Err(None) => unreachable!("a house file is read once here"),
    }
}
