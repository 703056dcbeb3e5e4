//! The site of a report: looked up in the register, or taken from the coordinates written, or both and compared.

use crate::house::angle::wrap_longitude;
use crate::house::{House, RegisteredSite};
use crate::report::{Angle, AngleUnit, Report, Sign, SiteMeant, SiteTrouble, SiteWritten, Zone};

/// Written coordinates may differ from the register's by this many of their own steps, and one of the register's.
const STEPS_APART: f64 = 3.0;

/// The site of a report, its trouble, and the register's own coordinates where written ones disagree.
///
/// Without words for a site the observer's own site, as the house has it, stands in.
pub fn resolve(
    report: &Report,
    house: &House,
) -> (Option<SiteMeant>, Option<SiteTrouble>, Option<(f64, f64)>) {
    match &report.site {
        Some((written, _)) => written_site(written, house),
        None => {
            let site = mentioned(report, house).or_else(|| observers_site(report, house));
            (site.map(registered), None, None)
        }
    }
}

/// The one site of the register that the report's words name in passing ("…, 22:31 UT, Skarn Head").
fn mentioned<'h>(report: &Report, house: &'h House) -> Option<&'h RegisteredSite> {
    let mut named = report.mentions.iter().filter_map(|m| house.site(&m.value));
    let first = named.next()?;
    named.all(|s| s.name == first.name).then_some(first)
}

fn observers_site<'h>(report: &Report, house: &'h House) -> Option<&'h RegisteredSite> {
    let observer = house.observer(&report.observer.as_ref()?.value)?;
    house.site(observer.site.as_ref()?)
}

fn registered(site: &RegisteredSite) -> SiteMeant {
    SiteMeant {
        name: Some(site.name.clone()),
        latitude_deg: site.latitude_deg,
        longitude_deg: site.longitude_deg,
        elevation_m: site.elevation_m,
        zone: site.zone.clone(),
        step_deg: site.step_deg,
    }
}

fn written_site(
    written: &SiteWritten,
    house: &House,
) -> (Option<SiteMeant>, Option<SiteTrouble>, Option<(f64, f64)>) {
    let name = written.name.as_ref().map(|n| n.value.as_str());
    let register = name.and_then(|n| house.site(n));
    let zone = match &written.zone {
        Some(z) => match &z.value {
            Zone::Named(name) => Some(name.clone()),
            _ => None,
        },
        None => None,
    };
    match (&written.latitude, &written.longitude) {
        (Some(latitude), Some(longitude)) => match coordinates(written, latitude, longitude) {
            Ok((latitude_deg, longitude_deg, step_deg)) => {
                let apart = register.filter(|r| differ(r, latitude_deg, longitude_deg, step_deg));
                let meant = SiteMeant {
                    name: register.map(|r| r.name.clone()).or(name.map(str::to_owned)),
                    latitude_deg,
                    longitude_deg,
                    elevation_m: written
                        .elevation_m
                        .map(|e| e.value)
                        .or(register.and_then(|r| r.elevation_m)),
                    zone: zone.or(register.and_then(|r| r.zone.clone())),
                    step_deg,
                };
                (
                    Some(meant),
                    None,
                    apart.map(|r| (r.latitude_deg, r.longitude_deg)),
                )
            }
            Err(trouble) => (None, Some(trouble), None),
        },
        _ => match (register, name) {
            (Some(site), _) => {
                let mut meant = registered(site);
                if let Some(elevation) = written.elevation_m {
                    meant.elevation_m = Some(elevation.value);
                }
                meant.zone = zone.or(meant.zone);
                (Some(meant), None, None)
            }
            (None, Some(name)) => {
                let trouble = SiteTrouble::Unknown {
                    nearest: house.nearest_sites(name),
                    have_register: !house.sites.is_empty(),
                };
                (None, Some(trouble), None)
            }
            (None, None) => (None, None, None),
        },
    }
}

/// Latitude, longitude east positive, and the coarser step, degrees.
fn coordinates(
    written: &SiteWritten,
    latitude: &Angle,
    longitude: &Angle,
) -> Result<(f64, f64, f64), SiteTrouble> {
    // a longitude in time: 24 hours to the circle
    let in_time = longitude.marked_unit() == Some(AngleUnit::Hours);
    let scale = if in_time { 15.0 } else { 1.0 };
    let (lat, lon) = (latitude.value(), longitude.value() * scale);
    let overfull = |angle: &Angle| {
        angle
            .parts()
            .iter()
            .skip(1)
            .any(|p| p.number.value() >= 60.0)
    };
    if lat.abs() > 90.0 || lon.abs() > 360.0 || overfull(latitude) || overfull(longitude) {
        return Err(SiteTrouble::OutOfRange);
    }
    if contradicts(latitude) || contradicts(longitude) {
        return Err(SiteTrouble::HemisphereUnclear);
    }
    if !written.signed_field && hemisphere_unclear(written, latitude, longitude) {
        return Err(SiteTrouble::HemisphereUnclear);
    }
    let lon = if written.west_positive && longitude.compass.is_none() {
        -lon
    } else {
        lon
    };
    Ok((
        lat,
        wrap_longitude(lon),
        latitude.step().max(longitude.step() * scale),
    ))
}

/// A minus says south or west, and the letter north or east: one of the two is wrong.
fn contradicts(angle: &Angle) -> bool {
    matches!(angle.sign, Some(s) if s.value == Sign::Minus)
        && matches!(angle.compass, Some(c) if c.value.sign() > 0.0)
}

/// In free text a plain number counts as positive only beside a signed partner (`-33.2, 149.1`), never beside a lettered
/// one (`52.1 N, 3.2`), which shows that the writer marks hemispheres by letters.
fn hemisphere_unclear(written: &SiteWritten, latitude: &Angle, longitude: &Angle) -> bool {
    let either = |angle: &Angle| matches!(angle.sign, Some(s) if s.value == Sign::Either);
    let says = |angle: &Angle| angle.compass.is_some() || angle.sign.is_some();
    let lat_says = says(latitude);
    let lon_says = says(longitude) || written.west_positive || longitude.value() > 180.0;
    let open = |angle: &Angle, says: bool| !says && angle.value() != 0.0;
    either(latitude)
        || either(longitude)
        || !lat_says && !lon_says && (open(latitude, false) || open(longitude, false))
        || latitude.compass.is_some() && open(longitude, lon_says)
        || longitude.compass.is_some() && open(latitude, lat_says)
}

/// True where written coordinates lie further from the register's than their steps allow.
fn differ(register: &RegisteredSite, latitude_deg: f64, longitude_deg: f64, step_deg: f64) -> bool {
    let allowed = STEPS_APART * step_deg + register.step_deg;
    let d_lon = wrap_longitude(longitude_deg - register.longitude_deg).abs();
    (latitude_deg - register.latitude_deg).abs() > allowed || d_lon > allowed
}
