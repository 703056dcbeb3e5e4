//! Slips: what people do wrong, tried one at a time, then in pairs, on a report that cannot be right as written.
//!
//! A reading ([`readings`]) is the report as it may have been meant. It is brought to the sky and held to the same rules of
//! place and time as the report itself, and to the other reports of its object; it is offered only if nothing is left
//! standing. Offered readings are ranked by how common the slip is ([`priors`]) and how sharply the facts confirm it
//! ([`evidence`]). Nothing is ever applied: outputs show what is offered, and an editor decides.

pub mod digits;
mod evidence;
pub mod priors;
mod readings;
mod sieve;

use crate::report::{Becomes, Finding, Frame, Meant, PositionKind, Slip};
use crate::rules::identity::Known;
use crate::rules::{Case, Sisters, breaks_place_or_time, of_place_and_time};
use crate::sky::almanac::Almanac;
use readings::{Changes, Reading};

/// At most so many are offered.
const MOST: usize = 5;

/// A reading with which every stated fact agrees.
struct Kept {
    kinds: Vec<&'static str>,
    reading: Reading,
    meant: Meant,
    /// Prior times likelihood, not yet a share.
    score: f64,
    because: String,
}

/// What probably happened to a report with a query or reject about where or when, best first, at most five; none where no
/// slip explains it. `to` is the frame that readings are restated in, `sisters` the word of the object's other reports.
pub(crate) fn explain(case: &Case, to: Frame, sisters: Option<&Sisters>) -> Vec<Slip> {
    let broken = of_place_and_time(&Case { text: "", ..*case });
    let outlying =
        sisters.is_some_and(|s| matches!(s.agrees(case.report, case.meant), Some((false, _))));
    if broken.is_empty() && !outlying && case.meant.read.is_some() {
        return Vec::new();
    }
    // readings are tried by quick instants; a body's own place is asked to the arcsecond
    let quick = Almanac::quick();
    let almanac = match case.named {
        Some(Known::Body(_)) => case.almanac,
        _ => &quick,
    };
    let exact = case.almanac;
    let case = &Case { almanac, ..*case };
    let sieve = sieve::Sieve::new(case, sisters);
    let mut kept = Vec::new();
    let step = case.meant.reduced.map_or(0.0, |r| r.step_arcsec);
    let still = outlying && sisters.is_some_and(|s| !s.move_beyond(step));
    let singles = singles(case, &broken, outlying, still, &sieve);
    for reading in &singles {
        if let Some(reading) = hold(case, vec![reading.kind], reading, sisters) {
            kept.push(reading);
        }
    }
    if kept.is_empty() {
        for (kinds, reading) in pairs(case, &broken) {
            if let Some(reading) = hold(case, kinds, &reading, sisters) {
                kept.push(reading);
            }
        }
    }
    offer(
        &Case {
            almanac: exact,
            ..*case
        },
        kept,
        to,
    )
}

/// Single readings of the kinds that can mend what is broken: another time does not move a star into its constellation.
fn singles(
    case: &Case,
    broken: &[Finding],
    outlying: bool,
    still: bool,
    sieve: &sieve::Sieve,
) -> Vec<Reading> {
    let can = |changes: Changes| {
        broken.iter().all(|f| mends(changes, f.rule))
            && !(outlying && changes == Changes::Site)
            && !(still && changes == Changes::Time)
    };
    let mut list = Vec::new();
    if can(Changes::Time) {
        list.extend(readings::of_time(case));
    }
    if can(Changes::Site) {
        list.extend(readings::of_site(case));
    }
    if can(Changes::Place) {
        list.extend(readings::of_place(case, |position| sieve.passes(position)));
    }
    list
}

/// Can a change of this sort take away a finding of that rule?
fn mends(changes: Changes, rule: &str) -> bool {
    match rule {
        "date-impossible" | "instant-in-future" | "instant-disagrees" | "daylight" => {
            changes == Changes::Time || (rule == "daylight" && changes == Changes::Site)
        }
        "site-out-of-range" | "site-disagrees" => changes == Changes::Site,
        "ra-out-of-range"
        | "dec-out-of-range"
        | "sexagesimal-out-of-range"
        | "position-disagrees"
        | "constellation-disagrees" => changes == Changes::Place,
        "near-sun" => changes != Changes::Site,
        // a star's place asks no time, a planet's does; the check itself tells them apart
        "object-elsewhere" => changes != Changes::Site,
        "never-rises" => changes != Changes::Time,
        _ => true,
    }
}

/// Pairs of the commonest slips of different sorts, for what no single one explains: every finding must be one that either
/// of the two can mend.
fn pairs(case: &Case, broken: &[Finding]) -> Vec<(Vec<&'static str>, Reading)> {
    let mut list = Vec::new();
    // the place of an hour angle or an altitude is a matter of time and site too
    let any = case.report.position.kind != PositionKind::Equatorial;
    let can = |first: Changes, second: Changes| {
        let one_mends = |f: &Finding| mends(first, f.rule) || mends(second, f.rule);
        any || broken.iter().all(one_mends)
    };
    // no pairs with a changed digit: hundreds of them fit anything
    let of_place = |case: &Case| readings::of_place(case, |_| false);
    let mut firsts = readings::of_time(case);
    firsts.extend(readings::of_site(case));
    firsts.extend(of_place(case));
    for (k, first) in firsts.iter().enumerate() {
        // places go second
        let sorts: &[Changes] = match first.changes {
            Changes::Time => &[Changes::Site, Changes::Place, Changes::Time],
            Changes::Site => &[Changes::Site, Changes::Place],
            Changes::Place => &[],
        };
        let sorts = sorts.iter().filter(|second| can(first.changes, **second));
        let sorts: Vec<Changes> = sorts.copied().collect();
        if sorts.is_empty() {
            continue;
        }
        let meant = case.mean(&first.report);
        let changed = Case {
            report: &first.report,
            meant: &meant,
            ..*case
        };
        let seconds = sorts.into_iter().flat_map(|sort| match sort {
            Changes::Time => readings::of_time(&changed),
            Changes::Site => readings::of_site(&changed),
            Changes::Place => of_place(&changed),
        });
        for second in seconds {
            // each pair once, and no slip twice
            if second.kind == first.kind
                || firsts[..k]
                    .iter()
                    .any(|f| f.kind == second.kind && f.changes == first.changes)
            {
                continue;
            }
            let reading = Reading {
                prior: first.prior * second.prior * priors::priors().pair,
                words: format!("{}, and {}", first.words, second.words),
                ..second
            };
            list.push((vec![first.kind, second.kind], reading));
        }
    }
    list
}

/// Holds a reading to every stated fact: kept with its score, or nothing.
fn hold(
    case: &Case,
    kinds: Vec<&'static str>,
    reading: &Reading,
    sisters: Option<&Sisters>,
) -> Option<Kept> {
    let meant = case.mean(&reading.report);
    meant.reduced?;
    // what was known of time and site must not be lost by the change
    if (case.meant.instant.is_some() && meant.instant.is_none())
        || (case.meant.site.is_some() && meant.site.is_none())
    {
        return None;
    }
    let changed = Case {
        report: &reading.report,
        meant: &meant,
        text: "",
        ..*case
    };
    if breaks_place_or_time(&changed)
        || meant.instant_trouble.is_some() && case.meant.instant_trouble.is_none()
    {
        return None;
    }
    let sister = match sisters.map(|s| s.agrees(&reading.report, &meant)) {
        None => None,
        Some(Some((true, distance))) => Some(distance),
        Some(_) => return None,
    };
    if !evidence::zone_fits(&meant) && evidence::zone_fits(case.meant) {
        return None;
    }
    // a zone that the written longitude cannot have speaks for the longitude's sign
    let zone = match (evidence::zone_fits(case.meant), evidence::zone_fits(&meant)) {
        (false, false) => 0.03,
        _ => 1.0,
    };
    let facts = evidence::weigh(&changed, sister.zip(sisters.map(Sisters::count)));
    Some(Kept {
        kinds,
        score: reading.prior * facts.likelihood * zone,
        because: facts.because,
        reading: reading.clone(),
        meant,
    })
}

/// The best of those kept, with their shares.
fn offer(case: &Case, mut kept: Vec<Kept>, to: Frame) -> Vec<Slip> {
    kept.sort_by(|a, b| {
        b.score
            .total_cmp(&a.score)
            .then_with(|| a.reading.words.cmp(&b.reading.words))
    });
    kept.truncate(MOST);
    // what is a hundred times less likely than the best is no help to an editor
    let least = kept.first().map_or(0.0, |best| best.score / 100.0);
    kept.retain(|k| k.score >= least);
    let sum: f64 = kept.iter().map(|k| k.score).sum();
    kept.into_iter()
        .map(|k| {
            let words = evidence::told(case, &k.reading, &k.meant);
            let name = k.kinds.join(" and ");
            Slip {
                because: format!("If {}, {}.", evidence::clause(&k.kinds), k.because),
                reading: words,
                weight: if sum > 0.0 {
                    k.score / sum
                } else {
                    1.0 / name.len().max(1) as f64
                },
                becomes: becomes(case, &k, to),
                kinds: k.kinds,
            }
        })
        .collect()
}

/// The members of the record that a reading changes.
fn becomes(case: &Case, kept: &Kept, to: Frame) -> Vec<Becomes> {
    let mut list = Vec::new();
    let (old, new) = (case.report, &kept.reading.report);
    if old.position != new.position || old.equinoxes != new.equinoxes {
        let meant = crate::reduction::mean_by(new, case.house, to, case.almanac);
        if let (Some(read), Some(reduced)) = (meant.read, meant.reduced) {
            list.push(Becomes::Read(read, reduced));
        }
    }
    // neither depends on the frame, nor on how closely the sky is computed
    if old.instants != new.instants
        && let Some(instant) = kept.meant.instant
    {
        list.push(Becomes::Instant(instant));
    }
    if old.site != new.site
        && let Some(site) = kept.meant.site.clone()
    {
        list.push(Becomes::Site(site));
    }
    list
}
