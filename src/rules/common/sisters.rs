//! Reports of one run seen together: the same object's other reports, what they agree on, and who contradicts them.

use super::examine::{Desk, Selection, needs_explaining, sort, weight};
use super::identity::{body, key};
use super::motion::{self, Sighting, Steady, vector};
use super::words::{apart, seconds_between};
use crate::house::House;
use crate::report::{Examined, Finding, Frame, Meant, Report, Role};
use crate::rules::{Findings, report_outlying, report_repeated, stet_idle};
use crate::sky::almanac::Almanac;
use crate::sky::catalogue;
use std::collections::BTreeMap;

/// The reports of one sheet, for seeing all sheets of a run together.
pub struct Run<'a> {
    /// The sheet's name, for pointing at it from another.
    pub sheet: &'a str,
    /// Its text.
    pub text: &'a str,
    /// The house rules in force for it.
    pub house: &'a House,
    /// Its reports, examined one by one.
    pub examined: &'a mut [Examined],
}

/// What the other reports of an object say of where it is at a time.
pub struct Sisters {
    steady: Steady,
    count: usize,
}

impl Sisters {
    /// Does a changed reading agree with the others? Also how far it is from them, arcsec. `None` where it cannot be told.
    pub fn agrees(&self, report: &Report, meant: &Meant) -> Option<(bool, f64)> {
        let sighting = sighting(report, meant)?;
        let distance = self.steady.distance_arcsec(&sighting);
        Some((distance <= self.steady.allowed_arcsec(&sighting), distance))
    }

    /// Do they move, so that another time is another place? By more than a report's own step in a day.
    pub fn move_beyond(&self, step_arcsec: f64) -> bool {
        self.steady.arcsec_per_h() * 24.0 > 3.0 * step_arcsec
    }

    /// How many others there are that agree among themselves.
    pub fn count(&self) -> usize {
        self.count
    }
}

/// The place and time of a report as a sighting; without an instant the time is 0, and only a fixed place can be judged.
fn sighting(report: &Report, meant: &Meant) -> Option<Sighting> {
    let reduced = meant.reduced?;
    let said = report.uncertainty_arcsec.as_ref().map_or(0.0, |u| u.value);
    Some(Sighting {
        t_day: meant
            .instant
            .map_or(0.0, |i| (i.utc.0 - 2_451_545.0) + i.utc.1),
        at: vector(reduced.icrs_ra_deg, reduced.icrs_dec_deg),
        step_arcsec: reduced.step_arcsec.max(said),
        step_s: meant.instant.map_or(0.0, |i| i.step_s),
    })
}

/// Sees all reports of a run together: adds `report-repeated` and `report-outlying`, and has what probably happened to the
/// outlying ones told anew with the others as evidence. The answer does not depend on the order of the sheets but for which of
/// two repeated reports counts as the second.
pub fn together(runs: &mut [Run], to: Frame, now_utc: (f64, f64), selection: &Selection) {
    let mut groups: BTreeMap<String, Vec<(usize, usize)>> = BTreeMap::new();
    for (r, run) in runs.iter().enumerate() {
        for (e, examined) in run.examined.iter().enumerate() {
            if let Some(name) = &examined.report.object {
                let key = key(&name.value);
                if !key.is_empty() {
                    groups.entry(key).or_default().push((r, e));
                }
            }
        }
    }
    for members in groups.values().filter(|members| members.len() > 1) {
        repeated(runs, members, selection);
        outlying(runs, members, to, now_utc, selection);
    }
    for run in runs.iter_mut() {
        for examined in run
            .examined
            .iter_mut()
            .filter(|e| !e.report.stets.is_empty())
        {
            settle_stets(run.house, examined, selection);
        }
    }
}

/// Adds findings of a rule that sees reports together.
fn add(examined: &mut Examined, findings: Vec<Finding>) {
    if !findings.is_empty() {
        examined.findings.extend(findings);
        sort(&mut examined.findings);
    }
}

/// Lets the editor's word count for the rules that see reports together, and says which word did nothing.
fn settle_stets(house: &House, examined: &mut Examined, selection: &Selection) {
    let mut let_pass = Vec::new();
    for rule in [report_repeated::RULE.name, report_outlying::RULE.name] {
        let named = examined.report.stets.iter().any(|stet| {
            stet.reason
                .as_ref()
                .is_some_and(|r| !r.value.trim().is_empty())
                && stet.rules.iter().any(|n| n.value.trim() == rule)
        });
        if named && examined.findings.iter().any(|f| f.rule == rule) {
            examined.findings.retain(|f| f.rule != rule);
            let_pass.push(rule);
        }
    }
    let idle = stet_idle::apply_late(&examined.report, house, selection, &let_pass);
    add(examined, idle);
    if !needs_explaining(&examined.findings) {
        examined.slips.clear();
    }
}

/// The same object, instant and place twice.
fn repeated(runs: &mut [Run], members: &[(usize, usize)], selection: &Selection) {
    let mut by_time: Vec<(f64, usize, usize)> = members
        .iter()
        .filter_map(|&(r, e)| {
            let meant = &runs[r].examined[e].meant;
            meant.reduced?;
            let utc = meant.instant?.utc;
            Some(((utc.0 - 2_451_545.0) + utc.1, r, e))
        })
        .collect();
    by_time.sort_by(|a, b| a.0.total_cmp(&b.0).then((a.1, a.2).cmp(&(b.1, b.2))));
    for i in 0..by_time.len() {
        let (t, r, e) = by_time[i];
        // the earlier twin in the order of the run, of all at the same second
        let first = by_time
            .iter()
            .filter(|(u, q, f)| (u - t).abs() * 86_400.0 < 0.5 && (*q, *f) < (r, e))
            .find(|(_, q, f)| same(&runs[r].examined[e], &runs[*q].examined[*f]))
            .map(|(_, q, f)| (*q, *f));
        let Some((q, f)) = first else { continue };
        let Some(weight) = weight(&report_repeated::RULE, runs[r].house, selection) else {
            continue;
        };
        let mut out = Findings::new(&report_repeated::RULE, Some(weight));
        let other = runs[q].examined[f].report.position.span;
        let other_sheet = (q != r).then(|| runs[q].sheet.to_string());
        let report = &runs[r].examined[e].report;
        let finding = out.add(
            report.position.span,
            match &other_sheet {
                Some(sheet) => {
                    format!("The same object, instant and place are reported in {sheet} too.")
                }
                None => "The same object, instant and place are reported above too.".to_string(),
            },
            "Count it once.",
        );
        if other_sheet.is_none() {
            finding
                .related
                .push((other, "the first of the two".to_string()));
        }
        add(&mut runs[r].examined[e], out.into_list());
    }
}

/// Are two reports of one object, at one instant, the same within their last digits, with no other observer or site?
fn same(a: &Examined, b: &Examined) -> bool {
    let (Some(x), Some(y)) = (sighting(&a.report, &a.meant), sighting(&b.report, &b.meant)) else {
        return false;
    };
    let (Some(i), Some(j)) = (a.meant.instant, b.meant.instant) else {
        return false;
    };
    let observers = match (&a.report.observer, &b.report.observer) {
        (Some(p), Some(q)) => key(&p.value) == key(&q.value),
        _ => true,
    };
    let sites = match (&a.meant.site, &b.meant.site) {
        (Some(p), Some(q)) => {
            (p.latitude_deg - q.latitude_deg).abs() < 0.1
                && (p.longitude_deg - q.longitude_deg).abs() < 0.1
        }
        _ => true,
    };
    let step =
        |s: &Sighting, e: &Examined| e.meant.reduced.map_or(s.step_arcsec, |r| r.step_arcsec);
    let d = [0, 1, 2].map(|k| x.at[k] - y.at[k]);
    let arcsec = (d[0] * d[0] + d[1] * d[1] + d[2] * d[2]).sqrt() * 206_264.806;
    seconds_between(i.utc, j.utc).abs() < 0.5
        && arcsec <= step(&x, a).max(step(&y, b)) * 1.01
        && observers
        && sites
}

/// Who contradicts at least three others.
fn outlying(
    runs: &mut [Run],
    members: &[(usize, usize)],
    to: Frame,
    now_utc: (f64, f64),
    selection: &Selection,
) {
    let usable: Vec<(usize, usize, Sighting, bool)> = members
        .iter()
        .filter_map(|&(r, e)| {
            let examined = &runs[r].examined[e];
            let counts = matches!(examined.report.role, Role::Measured | Role::Catalogued);
            let sighting = sighting(&examined.report, &examined.meant)?;
            counts.then_some((r, e, sighting, examined.meant.instant.is_some()))
        })
        .collect();
    if usable.len() < 4 {
        return;
    }
    let (r, e, ..) = usable[0];
    let Some(name) = runs[r].examined[e]
        .report
        .object
        .as_ref()
        .map(|o| o.value.clone())
    else {
        return;
    };
    if body(&name).is_some() || catalogue::find(&name).is_some() {
        return;
    }
    let timed = usable.iter().all(|u| u.3);
    let sightings: Vec<Sighting> = usable.iter().map(|u| u.2).collect();
    let Some(steady) = motion::fit(&sightings, timed) else {
        return;
    };
    let keepers = steady.kept_by();
    if keepers < 3 || keepers * 2 <= usable.len() {
        return;
    }
    let almanac = Almanac::new();
    for (k, &(r, e, ref sighting, _)) in usable.iter().enumerate() {
        let distance = steady.distance_arcsec(sighting);
        let outlies = !steady.keeps[k] && distance > steady.allowed_arcsec(sighting);
        if outlies && let Some(weight) = weight(&report_outlying::RULE, runs[r].house, selection) {
            let others: Vec<_> = usable
                .iter()
                .enumerate()
                .filter(|(j, u)| steady.keeps[*j] && u.0 == r)
                .take(3)
                .map(|(_, u)| runs[r].examined[u.1].report.position.span)
                .collect();
            let report = &runs[r].examined[e].report;
            let motion = match steady.arcsec_per_h() {
                fast if fast > 1.0 => format!(" (steady motion of {} an hour)", apart(fast)),
                _ => String::new(),
            };
            let mut out = Findings::new(&report_outlying::RULE, Some(weight));
            let finding = out.add(
                report.position.span,
                format!(
                    "It is {} ({:.0} of its own steps) from where {keepers} other reports of {name} have it{motion}.",
                    apart(distance),
                    distance / sighting.step_arcsec.max(1e-9)
                ),
                "Ask for the original position, equinox and time.",
            );
            for span in others {
                finding
                    .related
                    .push((span, "another report of it".to_string()));
            }
            add(&mut runs[r].examined[e], out.into_list());
        }
        if needs_explaining(&runs[r].examined[e].findings) {
            // the others' word without this one's own
            let others: Vec<Sighting> = sightings
                .iter()
                .enumerate()
                .filter(|(j, _)| *j != k)
                .map(|(_, s)| *s)
                .collect();
            if let Some(steady) = motion::fit(&others, timed)
                .filter(|s| s.kept_by() >= 3 || s.kept_by() == others.len())
            {
                let sisters = Sisters {
                    count: steady.kept_by(),
                    steady,
                };
                let run = &runs[r];
                let examined = &run.examined[e];
                let desk = Desk {
                    house: run.house,
                    to,
                    now_utc,
                    text: run.text,
                    selection,
                    almanac: &almanac,
                };
                let case = desk.case(&examined.report, &examined.meant);
                let slips = crate::slips::explain(&case, to, Some(&sisters));
                runs[r].examined[e].slips = slips;
            }
        }
    }
}
