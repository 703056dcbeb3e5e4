//! Who is named: a planet, the Moon, the Sun, an object of the catalogue or of the house's own lists; and where it is.

use crate::house::{House, KnownObject};
use crate::report::{InstantMeant, Meant, Report};
use crate::rules::Case;
use crate::sky::bodies::Body;
use crate::sky::catalogue::{self, Entry};
use crate::sky::{Direction, Ground, separation_deg};

/// Something with a name and a place of its own.
#[derive(Clone, Copy, Debug)]
pub enum Known<'h> {
    /// A body of the solar system.
    Body(Body),
    /// An object of the embedded catalogue.
    Entry(Entry),
    /// An object of the house's own lists.
    Own(&'h KnownObject),
}

/// Names of the bodies in the languages of the sheets, English first.
const BODIES: [(Body, &[&str]); 9] = [
    (
        Body::Sun,
        &["sun", "thesun", "sonne", "soleil", "sol", "sole"],
    ),
    (Body::Moon, &["moon", "themoon", "mond", "lune", "luna"]),
    (Body::Mercury, &["mercury", "merkur", "mercure", "mercurio"]),
    (Body::Venus, &["venus", "vénus", "venere"]),
    (Body::Mars, &["mars", "marte"]),
    (Body::Jupiter, &["jupiter", "júpiter", "giove"]),
    (Body::Saturn, &["saturn", "saturne", "saturno"]),
    (Body::Uranus, &["uranus", "urano"]),
    (Body::Neptune, &["neptune", "neptun", "neptuno", "nettuno"]),
];

/// A name as one key whatever the case, blanks, hyphens, brackets and leading zeros: `Suspect #012` is `suspect12`.
pub fn key(name: &str) -> String {
    let mut key = String::with_capacity(name.len());
    let mut chars = name.chars().flat_map(char::to_lowercase).peekable();
    let mut in_number = false;
    while let Some(c) = chars.next() {
        if c == '0' && !in_number && chars.peek().is_some_and(char::is_ascii_digit) {
            continue;
        }
        in_number = c.is_ascii_digit();
        if c.is_alphanumeric() {
            key.push(c);
        }
    }
    key
}

/// The body a name means.
pub fn body(name: &str) -> Option<Body> {
    let key = key(name);
    BODIES
        .iter()
        .find(|(_, names)| names.contains(&key.as_str()))
        .map(|(body, _)| *body)
}

/// The English name of a body.
pub fn body_name(body: Body) -> &'static str {
    match body {
        Body::Sun => "the Sun",
        Body::Moon => "the Moon",
        Body::Mercury => "Mercury",
        Body::Venus => "Venus",
        Body::Mars => "Mars",
        Body::Jupiter => "Jupiter",
        Body::Saturn => "Saturn",
        Body::Uranus => "Uranus",
        Body::Neptune => "Neptune",
    }
}

/// What a report's object name means, where it names something known. The house's own lists count first.
pub fn named<'h>(report: &Report, house: &'h House) -> Option<Known<'h>> {
    let name = report.object.as_ref()?.value.trim();
    if !house.known_objects.is_empty() {
        let wanted = key(name);
        if let Some(own) = house.known_objects.iter().find(|o| key(&o.name) == wanted) {
            return Some(Known::Own(own));
        }
    }
    body(name)
        .map(Known::Body)
        .or_else(|| catalogue::find(name).map(Known::Entry))
}

/// Where something known is for a report, and how far from there a right report of it may lie.
#[derive(Clone, Debug)]
pub struct Expected {
    /// Its name for people.
    pub name: String,
    /// Its ICRS place then.
    pub icrs: Direction,
    /// The radius of its disc or extent, arcsec.
    pub radius_arcsec: f64,
    /// What motion within the instant's step, parallax, theory and catalogue may add, arcsec.
    pub slack_arcsec: f64,
}

/// The ground a site stands on.
pub fn ground(meant: &Meant) -> Option<Ground> {
    meant.site.as_ref().map(|site| Ground {
        latitude_deg: site.latitude_deg,
        longitude_deg: site.longitude_deg,
        elevation_m: site.elevation_m.unwrap_or(0.0),
    })
}

/// Seconds from an instant, which is its beginning as written, to the fairest single guess at the true one: the middle of
/// its step for a date alone.
pub fn middle_s(instant: &InstantMeant) -> f64 {
    if instant.step_s >= 3600.0 {
        instant.step_s / 2.0
    } else {
        0.0
    }
}

/// The Julian year of a two-part Julian date.
pub fn julian_year(utc: (f64, f64)) -> f64 {
    2000.0 + ((utc.0 - 2_451_545.0) + utc.1) / 365.25
}

impl Known<'_> {
    /// Where it is for this report. `None` for a body without an instant, or with a date alone for the Moon.
    pub fn expected(&self, case: &Case) -> Option<Expected> {
        match self {
            Known::Own(own) => Some(Expected {
                name: own.name.clone(),
                icrs: Direction {
                    ra_deg: own.ra_deg,
                    dec_deg: own.dec_deg,
                },
                radius_arcsec: own.radius_arcsec,
                slack_arcsec: 0.0,
            }),
            Known::Entry(entry) => {
                // a place may be for the date, for the epoch stated, or for the catalogue's epoch: the nearest counts
                let reported = here(case.meant)?;
                let epochs = [
                    Some(2000.0),
                    case.meant.instant.map(|i| julian_year(i.utc)),
                    case.report.epoch_of_place.map(|e| e.value.value()),
                ];
                let icrs = epochs
                    .into_iter()
                    .flatten()
                    .map(|year| entry.at_epoch(year))
                    .min_by(|a, b| {
                        separation_deg(*a, reported).total_cmp(&separation_deg(*b, reported))
                    })?;
                Some(Expected {
                    name: entry.name.to_string(),
                    icrs,
                    radius_arcsec: entry.radius_arcsec,
                    slack_arcsec: entry.error_arcsec,
                })
            }
            Known::Body(body) => {
                let instant = case.meant.instant?;
                let ground = ground(case.meant);
                let middle = middle_s(&instant);
                let at = super::words::later(instant.utc, middle);
                let place = case.almanac.view(at, ground).place(*body);
                let light_time_s = if instant.heliocentric { 500.0 } else { 0.0 };
                let motion =
                    place.motion_arcsec_per_h * (instant.step_s - middle + light_time_s) / 3600.0;
                // without a site the place is geocentric, and with one the writer's may still be: parallax either way
                Some(Expected {
                    name: body_name(*body).to_string(),
                    icrs: place.icrs,
                    radius_arcsec: place.semidiameter_deg * 3600.0,
                    slack_arcsec: motion + place.parallax_arcsec + place.theory_arcsec,
                })
            }
        }
    }

    /// Its visual magnitude, where it has a settled one; for a planet the faintest it gets (from memory).
    pub fn magnitude(&self) -> Option<f64> {
        match self {
            Known::Entry(entry) => entry.v_mag,
            Known::Body(Body::Venus) => Some(-3.8),
            Known::Body(Body::Jupiter) => Some(-1.6),
            Known::Body(Body::Mars) => Some(1.9),
            Known::Body(Body::Saturn) => Some(1.4),
            _ => None,
        }
    }
}

/// The reduced ICRS place of a report.
pub fn here(meant: &Meant) -> Option<Direction> {
    meant.reduced.map(|r| Direction {
        ra_deg: r.icrs_ra_deg,
        dec_deg: r.icrs_dec_deg,
    })
}

/// Does the report's name mean this body?
pub fn is_body(case: &Case, wanted: Body) -> bool {
    matches!(case.named, Some(Known::Body(body)) if body == wanted)
}
