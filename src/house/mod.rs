//! House rules and the site register: what the section's `colure.yaml` says.

pub mod angle;
pub mod frame;
mod load;
mod mistake;
pub mod objects;
mod register;

pub use load::{LONGEST_BYTES, absolute, load, nearest_house, object_lists, parse};
pub use mistake::{HouseError, Mistake, io_words, nearest};
pub use register::plain;

use crate::report::{Equinox, Frame, System, Weight};
use std::collections::BTreeMap;

/// The name of a house file.
pub const FILE_NAME: &str = "colure.yaml";

/// What to do with a position that has no equinox.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum WhenMissing {
    /// Ask.
    Query,
    /// Take this one, and say so in `assumed`.
    Assume(Frame),
}

/// A site of the register.
#[derive(Clone, PartialEq, Debug)]
pub struct RegisteredSite {
    /// Its name as the house writes it.
    pub name: String,
    /// Other names it goes by.
    pub aliases: Vec<String>,
    /// Degrees, north positive.
    pub latitude_deg: f64,
    /// Degrees, east positive.
    pub longitude_deg: f64,
    /// Value of the last digit written of its coordinates, degrees.
    pub step_deg: f64,
    /// Metres.
    pub elevation_m: Option<f64>,
    /// IANA zone name.
    pub zone: Option<String>,
}

/// An observer the house knows.
#[derive(Clone, PartialEq, Debug)]
pub struct Observer {
    /// Name as the house writes it.
    pub name: String,
    /// Name of a site of the register.
    pub site: Option<String>,
    /// Mail address for letters.
    pub letters_to: Option<String>,
}

/// An object of the user's own lists.
#[derive(Clone, PartialEq, Debug)]
pub struct KnownObject {
    /// Its name.
    pub name: String,
    /// ICRS, degrees.
    pub ra_deg: f64,
    /// ICRS, degrees.
    pub dec_deg: f64,
    /// Its own radius, arcsec.
    pub radius_arcsec: f64,
}

/// The house rules in force for a sheet.
#[derive(Clone, PartialEq, Debug)]
pub struct House {
    /// The frame reports are restated in when `--to` does not say.
    pub canonical: Frame,
    /// What to do with a missing equinox.
    pub when_missing: WhenMissing,
    /// Altitudes below this are queried, degrees.
    pub lowest_altitude_deg: f64,
    /// Sun altitudes above this are daylight, degrees.
    pub darkness_deg: f64,
    /// Objects of this magnitude or brighter are not queried for daylight.
    pub daylight_magnitude: Option<f64>,
    /// Weights set by the house: rule name → weight, or `None` for off.
    pub weights: BTreeMap<String, Option<Weight>>,
    /// The register; empty where the house has none.
    pub sites: Vec<RegisteredSite>,
    /// Observers.
    pub observers: Vec<Observer>,
    /// The user's own objects.
    pub known_objects: Vec<KnownObject>,
    /// The files they come from, absolute: no sheets, though they may lie among them.
    pub object_lists: Vec<std::path::PathBuf>,
}

impl Default for House {
    fn default() -> House {
        House {
            canonical: Frame {
                system: System::Icrs,
                equinox: Equinox::Julian(2000.0),
            },
            when_missing: WhenMissing::Query,
            lowest_altitude_deg: 5.0,
            darkness_deg: -6.0,
            daylight_magnitude: None,
            weights: BTreeMap::new(),
            sites: Vec::new(),
            observers: Vec::new(),
            known_objects: Vec::new(),
            object_lists: Vec::new(),
        }
    }
}
