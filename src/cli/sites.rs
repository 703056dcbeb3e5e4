//! `colure sites`: the register, and what it makes of a written site.

use super::{ALL_WELL, NOT_DONE, SOMETHING_FOUND, finish, sheets};
use crate::house::angle::{self, AngleError, Axis, Degrees, wrap_longitude};
use crate::house::{House, RegisteredSite};
use crate::output::plain::one_line;
use crate::output::screen_text::write_house_error;
use crate::run::house_here;
use std::io::{self, Write};
use std::path::Path;

pub(super) fn run(words: &[String], house: Option<&Path>) -> u8 {
    let house = match house_here(house) {
        Ok(house) => house,
        Err(error) => {
            let stderr = io::stderr();
            let _ = write_house_error(&error, sheets::style(&stderr), &mut stderr.lock());
            return NOT_DONE;
        }
    };
    let (text, status) = if words.is_empty() {
        (register(&house), ALL_WELL)
    } else {
        written(&words.join(" "), &house)
    };
    finish(io::stdout().lock().write_all(text.as_bytes()), status)
}

fn register(house: &House) -> String {
    if house.sites.is_empty() {
        return "The house has no register of sites. Put one into colure.yaml:\n\n\
                sites:\n  Skarn Head: { latitude: 54°18.6′ N, longitude: 3°01′ W, elevation: 240 m, zone: Europe/London }\n"
            .to_owned();
    }
    let mut text = String::new();
    for site in &house.sites {
        text.push_str(&described(site));
        text.push('\n');
        let observers: Vec<String> = house
            .observers
            .iter()
            .filter(|o| {
                let of = o.site.as_deref().and_then(|s| house.site(s));
                of.is_some_and(|s| s.name == site.name)
            })
            .map(|o| one_line(&o.name, 60))
            .collect();
        if !observers.is_empty() {
            text.push_str(&format!("    observers: {}\n", observers.join(", ")));
        }
    }
    text
}

fn described(site: &RegisteredSite) -> String {
    let mut text = format!(
        "{}: {}",
        one_line(&site.name, 60),
        coordinates(site.latitude_deg, site.longitude_deg)
    );
    if let Some(elevation) = site.elevation_m {
        text.push_str(&format!(", {elevation:.0} m"));
    }
    match &site.zone {
        Some(zone) => text.push_str(&format!(", {zone}")),
        None => text.push_str(", no zone (local times cannot be read)"),
    }
    if !site.aliases.is_empty() {
        let aliases: Vec<String> = site.aliases.iter().map(|a| one_line(a, 60)).collect();
        text.push_str(&format!("; also {}", aliases.join(", ")));
    }
    text
}

fn coordinates(latitude_deg: f64, longitude_deg: f64) -> String {
    format!(
        "{:.4}° {}, {:.4}° {}",
        latitude_deg.abs(),
        if latitude_deg < 0.0 { 'S' } else { 'N' },
        longitude_deg.abs(),
        if longitude_deg < 0.0 { 'W' } else { 'E' },
    )
}

/// What is made of a written site, and the exit status: 1 where nothing is.
fn written(words: &str, house: &House) -> (String, u8) {
    if let Some(site) = house.site(words) {
        return (format!("{}\n", described(site)), ALL_WELL);
    }
    let bare = without_elevation(words);
    if let Some((latitude, longitude)) = pair(bare) {
        let mut text = format!("read as {}\n", coordinates(latitude.value, longitude.value));
        if let Some((site, km)) = nearest(house, latitude.value, longitude.value) {
            let apart = match km {
                km if km < 1.0 => String::new(),
                km => format!(", {km:.0} km off"),
            };
            text.push_str(&format!(
                "nearest site of the register{apart}: {}\n",
                described(site)
            ));
        }
        return (text, ALL_WELL);
    }
    if let Some(what) = what_fails(bare) {
        let text = format!("“{}” cannot be read: {what}\n", one_line(words, 60));
        return (text, SOMETHING_FOUND);
    }
    let near = house.nearest_sites(words);
    let shown = one_line(words, 60);
    let advice = if house.sites.is_empty() {
        "the house has no register of sites (no colure.yaml here or above)".to_owned()
    } else if near.is_empty() {
        "`colure sites` lists the register; coordinates are written like 54°18.6′ N, 3°01′ W"
            .to_owned()
    } else {
        format!("did you mean {}?", near.join(" or "))
    };
    (
        format!("“{shown}” is no site of the register; {advice}\n"),
        SOMETHING_FOUND,
    )
}

/// The words without a height after the coordinates: `1690 m`.
fn without_elevation(words: &str) -> &str {
    let trimmed = words.trim_end();
    let Some(before) = trimmed.strip_suffix(['m', 'M']).map(str::trim_end) else {
        return words;
    };
    let rest = before.trim_end_matches(|c: char| c.is_ascii_digit() || c == '.');
    // "54 18 m" would be minutes: a height stands after both coordinates
    let height = rest.len() < before.len() && rest.ends_with([' ', ',']);
    let rest = rest.trim_end_matches([' ', ',', '-', '−']);
    if height && pair(rest).is_some() {
        rest
    } else {
        words
    }
}

/// Two coordinates parted by a comma, or after the letter of the first.
fn pair(words: &str) -> Option<(Degrees, Degrees)> {
    cuts(words).into_iter().find_map(|(first, second)| {
        let latitude = angle::read(first, Axis::Latitude).ok()?;
        let longitude = angle::read(second, Axis::Longitude).ok()?;
        Some((latitude, longitude))
    })
}

/// Why words that are meant as coordinates are none: the error of the half that fails, where the other half is right.
fn what_fails(words: &str) -> Option<String> {
    if words.chars().filter(char::is_ascii_digit).count() < 2 {
        return None;
    }
    let told = |error: AngleError, axis: Axis| {
        (!matches!(error, AngleError::Form(_))).then(|| format!("{}: {error}", axis.name()))
    };
    cuts(words).into_iter().find_map(|(first, second)| {
        let latitude = angle::read(first, Axis::Latitude);
        let longitude = angle::read(second, Axis::Longitude);
        match (latitude, longitude) {
            (Ok(_), Err(error)) => told(error, Axis::Longitude),
            (Err(error), Ok(_)) => told(error, Axis::Latitude),
            _ => None,
        }
    })
}

/// All ways to cut words in two: at a comma first, then after the letter of the first half, then at a blank.
fn cuts(words: &str) -> Vec<(&str, &str)> {
    let at = |wanted: fn(char) -> bool, kept: bool| {
        let places = words.char_indices().filter(move |(_, c)| wanted(*c));
        places.map(move |(i, c)| {
            let end = if kept { i + c.len_utf8() } else { i };
            (&words[..end], &words[i + c.len_utf8()..])
        })
    };
    at(|c| matches!(c, ',' | ';'), false)
        .chain(at(|c| matches!(c, 'N' | 'S' | 'n' | 's'), true))
        .chain(at(char::is_whitespace, false))
        .collect()
}

/// The nearest site and its distance, km, on a sphere of 6371 km.
fn nearest(house: &House, latitude_deg: f64, longitude_deg: f64) -> Option<(&RegisteredSite, f64)> {
    let here = crate::sky::Direction {
        ra_deg: longitude_deg,
        dec_deg: latitude_deg,
    };
    house
        .sites
        .iter()
        .map(|site| {
            let there = crate::sky::Direction {
                ra_deg: wrap_longitude(site.longitude_deg),
                dec_deg: site.latitude_deg,
            };
            (
                site,
                crate::sky::separation_deg(here, there).to_radians() * 6371.0,
            )
        })
        .min_by(|a, b| a.1.total_cmp(&b.1))
}
