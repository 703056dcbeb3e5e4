//! How common each slip is: `priors.yaml`, read once.

use serde::Deserialize;
use std::collections::BTreeMap;
use std::sync::OnceLock;

/// How common each slip is. See the head of `priors.yaml` for the counts behind it.
#[derive(Deserialize, Debug)]
#[serde(deny_unknown_fields, rename_all = "kebab-case")]
pub struct Priors {
    /// Shares of a hundred, by kind.
    pub kinds: BTreeMap<String, f64>,
    /// How often one digit goes wrong, by what it counts.
    pub digits: Digits,
    /// How much commoner a digit is off by one than by more.
    pub off_by_one: f64,
    /// The rarer directions of a slip.
    pub directions: Directions,
    /// A pair of slips beside the product of the singles.
    pub pair: f64,
}

/// How often one digit goes wrong, by what it counts.
#[derive(Deserialize, Debug)]
#[serde(deny_unknown_fields, rename_all = "kebab-case")]
pub struct Digits {
    /// Hours of right ascension.
    pub hours: f64,
    /// Whole degrees of right ascension.
    pub degrees_of_ra: f64,
    /// Minutes of time.
    pub minutes_of_time: f64,
    /// Seconds of time.
    pub seconds_of_time: f64,
    /// Degrees of declination.
    pub degrees: f64,
    /// Minutes of arc.
    pub minutes_of_arc: f64,
    /// Seconds of arc.
    pub seconds_of_arc: f64,
    /// Decimals of anything.
    pub decimals: f64,
    /// A leading digit that was lost.
    pub lost: f64,
}

/// The rarer directions of a slip, beside 1 for the usual one.
#[derive(Deserialize, Debug)]
#[serde(deny_unknown_fields, rename_all = "kebab-case")]
pub struct Directions {
    /// The date a day late, where a day early is usual.
    pub day_too_late: f64,
    /// A neighbouring month, where day and month exchanged is usual.
    pub neighbouring_month: f64,
    /// The equinox of date.
    pub equinox_of_date: f64,
    /// An equinox other than J2000.0 and B1950.0.
    pub rare_equinox: f64,
}

/// The priors of this build.
pub fn priors() -> &'static Priors {
    static PRIORS: OnceLock<Priors> = OnceLock::new();
    PRIORS.get_or_init(|| {
        serde_yaml::from_str(include_str!("priors.yaml"))
            .expect("priors.yaml is part of the build and tested")
    })
}

impl Priors {
    /// The share of a kind.
    pub fn of(&self, kind: &str) -> f64 {
        self.kinds.get(kind).copied().unwrap_or(0.0) / 100.0
    }
}
