//! The record that other programs read: one object a report, every member always there, `null` where unknown.
//!
//! Its JSON Schema is made from these types and kept beside this file in `record.schema.json`.

use super::printed;
use crate::report::{
    Becomes, Examined, Finding, InstantMeant, ReadPosition, Reduced, Role, SiteMeant, Slip, System,
};
use crate::sheet::Sheet;
use crate::sky::time;
use crate::span::Span;
use schemars::JsonSchema;
use serde::Serialize;

/// One line of the output: a report, or a remark that belongs to none.
#[derive(Serialize, JsonSchema, Debug)]
#[serde(untagged)]
pub enum Record {
    /// A report.
    Report(Box<ReportRecord>),
    /// Findings that belong to no report of the lines before.
    Remark(RemarkRecord),
}

/// The tag of a report.
#[derive(Serialize, JsonSchema, Debug)]
#[serde(rename_all = "lowercase")]
pub enum ReportTag {
    /// `report`
    Report,
}

/// The tag of a remark.
#[derive(Serialize, JsonSchema, Debug)]
#[serde(rename_all = "lowercase")]
pub enum RemarkTag {
    /// `remark`
    Remark,
}

/// One report, in the order of the sheet.
#[derive(Serialize, JsonSchema, Debug)]
pub struct ReportRecord {
    /// Always `report`.
    pub record: ReportTag,
    /// The sheet as it was named.
    pub sheet: String,
    /// 1, 2, 3 … in the order of the sheet.
    pub ordinal: usize,
    /// Line of the first byte of the position, from 1.
    pub line: usize,
    /// The position's bytes on disk.
    pub span: SpanRecord,
    /// The object's name as written.
    pub object: Option<String>,
    /// The observer's name as written.
    pub observer: Option<String>,
    /// What the text says the position is.
    pub role: RoleRecord,
    /// The words as they stand in the sheet.
    pub stated: Stated,
    /// The position as written, in its own system.
    pub read: Option<ReadRecord>,
    /// The position restated; `null` where no honest reduction exists.
    pub reduced: Option<ReducedRecord>,
    /// The magnitude stated.
    pub magnitude: Option<f64>,
    /// The uncertainty stated: one radius, arcseconds.
    pub uncertainty_arcsec: Option<f64>,
    /// The instant.
    pub instant: Option<InstantRecord>,
    /// The site.
    pub site: Option<SiteRecord>,
    /// The object over the site's horizon.
    pub horizon: Option<HorizonRecord>,
    /// IAU abbreviation of the constellation of the reduced place.
    pub constellation: Option<String>,
    /// The heaviest weight among the findings; notes do not count.
    pub verdict: VerdictRecord,
    /// What a house rule supplied.
    pub assumed: Vec<String>,
    /// What the rules say.
    pub findings: Vec<FindingRecord>,
    /// What probably happened, best first; never applied.
    pub slips: Vec<SlipRecord>,
}

/// Findings that belong to no report.
#[derive(Serialize, JsonSchema, Debug)]
pub struct RemarkRecord {
    /// Always `remark`.
    pub record: RemarkTag,
    /// The sheet as it was named.
    pub sheet: String,
    /// What the rules say.
    pub findings: Vec<FindingRecord>,
}

/// Bytes of the sheet on disk, `end` exclusive.
#[derive(Serialize, JsonSchema, Debug, Clone, Copy, PartialEq, Eq)]
#[allow(missing_docs)]
pub struct SpanRecord {
    pub start: usize,
    pub end: usize,
}

/// What a position is.
#[derive(Serialize, JsonSchema, Debug)]
#[serde(rename_all = "lowercase")]
#[allow(missing_docs)]
pub enum RoleRecord {
    Measured,
    Catalogued,
    Reference,
    Pointing,
    Region,
}

/// A verdict.
#[derive(Serialize, JsonSchema, Debug)]
#[serde(rename_all = "lowercase")]
#[allow(missing_docs)]
pub enum VerdictRecord {
    Accept,
    Query,
    Reject,
}

/// A weight.
#[derive(Serialize, JsonSchema, Debug)]
#[serde(rename_all = "lowercase")]
#[allow(missing_docs)]
pub enum WeightRecord {
    Note,
    Query,
    Reject,
}

/// The words of the sheet.
#[derive(Serialize, JsonSchema, Debug)]
#[allow(missing_docs)]
pub struct Stated {
    pub position: String,
    pub equinox: Option<String>,
    pub instant: Option<String>,
    pub site: Option<String>,
}

/// A position in its own system; steps are those of the coordinates themselves, arcseconds.
#[derive(Serialize, JsonSchema, Debug)]
#[serde(untagged)]
#[allow(missing_docs)]
pub enum ReadRecord {
    /// Right ascension and declination.
    Equatorial {
        /// `ICRS`, `FK5`, `FK4`, `mean`, `apparent`; `null` where the equinox is unknown.
        system: Option<String>,
        /// `J2000.0`, `B1950.0`, `of date`.
        equinox: Option<String>,
        #[schemars(range(min = 0.0, max = 360.0))]
        ra_deg: f64,
        #[schemars(range(min = -90.0, max = 90.0))]
        dec_deg: f64,
        ra_step_arcsec: f64,
        dec_step_arcsec: f64,
    },
    /// Hour angle and declination.
    HourAngle {
        /// `hour-angle`
        system: String,
        /// `of date`
        equinox: String,
        /// West positive.
        #[schemars(range(min = -12.0, max = 12.0))]
        hour_angle_h: f64,
        #[schemars(range(min = -90.0, max = 90.0))]
        dec_deg: f64,
        /// Of the hour angle, 15 × seconds.
        ra_step_arcsec: f64,
        dec_step_arcsec: f64,
    },
    /// Azimuth from north through east, and altitude.
    Horizontal {
        /// `horizontal`
        system: String,
        /// `of date`
        equinox: String,
        #[schemars(range(min = 0.0, max = 360.0))]
        azimuth_deg: f64,
        #[schemars(range(min = -90.0, max = 90.0))]
        altitude_deg: f64,
        /// Of the azimuth.
        ra_step_arcsec: f64,
        /// Of the altitude.
        dec_step_arcsec: f64,
    },
}

/// A restated position.
#[derive(Serialize, JsonSchema, Debug)]
#[allow(missing_docs)]
pub struct ReducedRecord {
    pub system: String,
    pub equinox: String,
    #[schemars(range(min = 0.0, max = 360.0))]
    pub ra_deg: f64,
    #[schemars(range(min = -90.0, max = 90.0))]
    pub dec_deg: f64,
    /// For print, to no more digits than were written.
    pub ra: String,
    /// For print, ASCII sign.
    pub dec: String,
    /// The larger of RA step × cos δ and Dec step.
    pub step_arcsec: f64,
}

/// An instant at its beginning as written.
#[derive(Serialize, JsonSchema, Debug)]
#[allow(missing_docs)]
pub struct InstantRecord {
    pub utc: String,
    pub jd_utc: f64,
    /// Value of its last written digit, seconds.
    pub step_s: f64,
}

/// A site.
#[derive(Serialize, JsonSchema, Debug)]
#[allow(missing_docs)]
pub struct SiteRecord {
    pub name: Option<String>,
    /// North positive.
    #[schemars(range(min = -90.0, max = 90.0))]
    pub latitude_deg: f64,
    /// East positive.
    #[schemars(range(min = -180.0, max = 180.0))]
    pub longitude_deg: f64,
    pub elevation_m: Option<f64>,
}

/// Topocentric and airless.
#[derive(Serialize, JsonSchema, Debug)]
#[allow(missing_docs)]
pub struct HorizonRecord {
    pub altitude_deg: f64,
    /// From north through east.
    pub azimuth_deg: f64,
    /// West positive.
    pub hour_angle_h: f64,
    pub sun_altitude_deg: f64,
    pub sun_separation_deg: f64,
    pub moon_separation_deg: f64,
}

/// One rule's remark on one span.
#[derive(Serialize, JsonSchema, Debug)]
#[allow(missing_docs)]
pub struct FindingRecord {
    pub rule: String,
    pub weight: WeightRecord,
    /// What is wrong, and what to do.
    pub message: String,
    pub line: usize,
    pub column: usize,
    pub span: SpanRecord,
    /// Other places that bear on it.
    pub related: Vec<RelatedRecord>,
}

/// Another place that bears on a finding.
#[derive(Serialize, JsonSchema, Debug)]
#[allow(missing_docs)]
pub struct RelatedRecord {
    pub message: String,
    pub line: usize,
    pub column: usize,
    pub span: SpanRecord,
}

/// A likely slip.
#[derive(Serialize, JsonSchema, Debug)]
#[allow(missing_docs)]
pub struct SlipRecord {
    /// What was done.
    pub slip: String,
    /// A second slip beside it.
    pub with: Option<String>,
    pub reading: String,
    pub because: String,
    /// Its share among the readings offered.
    #[schemars(range(min = 0.0, max = 1.0))]
    pub weight: f64,
    pub becomes: BecomesRecord,
}

/// The members of the record that a slip would change, whole; the others are left out.
#[derive(Serialize, JsonSchema, Debug, Default)]
#[allow(missing_docs)]
pub struct BecomesRecord {
    #[serde(skip_serializing_if = "Option::is_none")]
    pub read: Option<ReadRecord>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub reduced: Option<ReducedRecord>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub instant: Option<InstantRecord>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub site: Option<SiteRecord>,
}

/// The JSON Schema of a line, as kept in `record.schema.json`.
pub fn schema() -> String {
    let settings = schemars::generate::SchemaSettings::draft2020_12().for_serialize();
    let schema = settings.into_generator().into_root_schema_for::<Record>();
    let mut text = serde_json::to_string_pretty(&schema).unwrap_or_default();
    text.push('\n');
    text
}

// ---------------------------------------------------------------------------------------------- from the model

/// A number rounded to some decimals, so that no digits are shown that mean nothing. Minus zero becomes zero.
fn rounded(value: f64, decimals: i32) -> f64 {
    let scale = 10f64.powi(decimals);
    let result = (value * scale).round() / scale;
    if result.is_finite() {
        result + 0.0
    } else {
        value
    }
}

/// Words without the full stop or comma of the sentence they end.
fn without_stop(words: &str) -> &str {
    let trimmed = words.trim_end_matches(|c: char| ".,;:".contains(c) || c.is_whitespace());
    // "10 p.m." keeps its own
    let own = trimmed.to_ascii_lowercase();
    if words.len() > trimmed.len() && (own.ends_with("p.m") || own.ends_with("a.m")) {
        return &words[..=trimmed.len()];
    }
    trimmed
}

/// A rounded angle that must stay below 360.
fn turn(value_deg: f64) -> f64 {
    let r = rounded(value_deg, 10);
    if r >= 360.0 { 0.0 } else { r }
}

impl ReportRecord {
    /// The record of one examined report.
    pub fn of(sheet: &Sheet, examined: &Examined) -> ReportRecord {
        let (report, meant) = (&examined.report, &examined.meant);
        let words = |span: Span| span.of(&sheet.text).to_owned();
        let (line, _) = sheet.line_column(report.position.span.start);
        ReportRecord {
            record: ReportTag::Report,
            sheet: sheet.name.clone(),
            ordinal: report.ordinal,
            line,
            span: span(sheet, report.position.span),
            object: report.object.as_ref().map(|o| o.value.clone()),
            observer: report.observer.as_ref().map(|o| o.value.clone()),
            role: role(report.role),
            stated: Stated {
                position: words(report.position.span),
                equinox: report.equinoxes.first().map(|(tag, _)| words(tag.span)),
                instant: report
                    .instants
                    .first()
                    .map(|(i, _)| without_stop(&words(i.span)).to_owned()),
                site: report.site.as_ref().map(|(s, _)| words(s.span)),
            },
            read: meant.read.as_ref().map(read),
            reduced: meant.reduced.as_ref().map(reduced),
            magnitude: report.magnitude.map(|m| m.value),
            uncertainty_arcsec: report.uncertainty_arcsec.map(|u| rounded(u.value, 6)),
            instant: meant.instant.as_ref().map(instant),
            site: meant.site.as_ref().map(site),
            horizon: meant.horizon.as_ref().map(|h| HorizonRecord {
                altitude_deg: rounded(h.altitude_deg, 6),
                azimuth_deg: rounded(h.azimuth_deg, 6),
                hour_angle_h: rounded(h.hour_angle_h, 7),
                sun_altitude_deg: rounded(h.sun_altitude_deg, 4),
                sun_separation_deg: rounded(h.sun_separation_deg, 4),
                moon_separation_deg: rounded(h.moon_separation_deg, 4),
            }),
            constellation: meant.constellation.map(str::to_owned),
            verdict: match examined.verdict() {
                crate::report::Verdict::Accept => VerdictRecord::Accept,
                crate::report::Verdict::Query => VerdictRecord::Query,
                crate::report::Verdict::Reject => VerdictRecord::Reject,
            },
            assumed: meant.assumed.clone(),
            findings: examined
                .findings
                .iter()
                .map(|f| finding(sheet, f))
                .collect(),
            slips: examined.slips.iter().map(slip).collect(),
        }
    }
}

impl RemarkRecord {
    /// The record of findings that belong to no report.
    pub fn of(sheet: &Sheet, findings: &[Finding]) -> RemarkRecord {
        RemarkRecord {
            record: RemarkTag::Remark,
            sheet: sheet.name.clone(),
            findings: findings.iter().map(|f| finding(sheet, f)).collect(),
        }
    }
}

fn span(sheet: &Sheet, of: Span) -> SpanRecord {
    let on_disk = sheet.on_disk(of);
    SpanRecord {
        start: on_disk.start,
        end: on_disk.end,
    }
}

fn role(role: Role) -> RoleRecord {
    match role {
        Role::Measured => RoleRecord::Measured,
        Role::Catalogued => RoleRecord::Catalogued,
        Role::Reference => RoleRecord::Reference,
        Role::Pointing => RoleRecord::Pointing,
        Role::Region => RoleRecord::Region,
    }
}

fn read(read: &ReadPosition) -> ReadRecord {
    let system = read.frame.map(|f| f.system);
    let (ra_step_arcsec, dec_step_arcsec) = (
        rounded(read.first_step_arcsec, 9),
        rounded(read.second_step_arcsec, 9),
    );
    let second = rounded(read.second_deg, 10);
    match (system, read.frame) {
        (Some(System::HourAngle), Some(frame)) => ReadRecord::HourAngle {
            system: frame.system.name().to_owned(),
            equinox: frame.equinox.to_string(),
            hour_angle_h: rounded(read.first_deg / 15.0, 10),
            dec_deg: second,
            ra_step_arcsec,
            dec_step_arcsec,
        },
        (Some(System::Horizontal), Some(frame)) => ReadRecord::Horizontal {
            system: frame.system.name().to_owned(),
            equinox: frame.equinox.to_string(),
            azimuth_deg: turn(read.first_deg),
            altitude_deg: second,
            ra_step_arcsec,
            dec_step_arcsec,
        },
        (_, frame) => ReadRecord::Equatorial {
            system: frame.map(|f| f.system.name().to_owned()),
            equinox: frame.map(|f| f.equinox.to_string()),
            ra_deg: turn(read.first_deg),
            dec_deg: second,
            ra_step_arcsec,
            dec_step_arcsec,
        },
    }
}

fn reduced(reduced: &Reduced) -> ReducedRecord {
    ReducedRecord {
        system: reduced.frame.system.name().to_owned(),
        equinox: reduced.frame.equinox.to_string(),
        ra_deg: turn(reduced.ra_deg),
        dec_deg: rounded(reduced.dec_deg, 10),
        ra: printed::ra(reduced),
        dec: printed::dec(reduced),
        step_arcsec: significant(reduced.step_arcsec),
    }
}

/// Six digits that tell.
fn significant(value: f64) -> f64 {
    if value == 0.0 || !value.is_finite() {
        return value;
    }
    let digits = 5 - value.abs().log10().floor() as i32;
    rounded(value, digits.clamp(0, 12))
}

fn instant(instant: &InstantMeant) -> InstantRecord {
    InstantRecord {
        utc: printed::utc(instant.utc),
        jd_utc: rounded(time::jd_from_utc(instant.utc), 8),
        step_s: rounded(instant.step_s, 9),
    }
}

fn site(site: &SiteMeant) -> SiteRecord {
    SiteRecord {
        name: site.name.clone(),
        latitude_deg: rounded(site.latitude_deg, 10),
        longitude_deg: rounded(site.longitude_deg, 10),
        elevation_m: site.elevation_m.map(|e| rounded(e, 3)),
    }
}

fn finding(sheet: &Sheet, finding: &Finding) -> FindingRecord {
    let (line, column) = sheet.line_column(finding.primary.start);
    FindingRecord {
        rule: finding.rule.to_owned(),
        weight: match finding.weight {
            crate::report::Weight::Note => WeightRecord::Note,
            crate::report::Weight::Query => WeightRecord::Query,
            crate::report::Weight::Reject => WeightRecord::Reject,
        },
        message: message(finding),
        line,
        column,
        span: span(sheet, finding.primary),
        related: finding
            .related
            .iter()
            .map(|(place, word)| {
                let (line, column) = sheet.line_column(place.start);
                RelatedRecord {
                    message: word.clone(),
                    line,
                    column,
                    span: span(sheet, *place),
                }
            })
            .collect(),
    }
}

/// What is wrong and what to do, as one text.
pub fn message(finding: &Finding) -> String {
    match &finding.advice {
        None => finding.message.clone(),
        Some(advice) => {
            let what = finding.message.trim_end();
            let link = match (what.chars().last(), advice.chars().next()) {
                (Some('.' | '!' | '?' | ':'), _) => " ",
                (_, Some(c)) if c.is_uppercase() => ". ",
                _ => "; ",
            };
            format!("{what}{link}{advice}")
        }
    }
}

fn slip(slip: &Slip) -> SlipRecord {
    let mut becomes = BecomesRecord::default();
    for part in &slip.becomes {
        match part {
            Becomes::Read(as_read, restated) => {
                becomes.read = Some(read(as_read));
                becomes.reduced = Some(reduced(restated));
            }
            Becomes::Instant(meant) => becomes.instant = Some(instant(meant)),
            Becomes::Site(meant) => becomes.site = Some(site(meant)),
        }
    }
    SlipRecord {
        slip: slip.kinds.first().copied().unwrap_or_default().to_owned(),
        with: slip.kinds.get(1).map(|k| (*k).to_owned()),
        reading: slip.reading.clone(),
        because: slip.because.clone(),
        weight: rounded(slip.weight, 4),
        becomes,
    }
}
