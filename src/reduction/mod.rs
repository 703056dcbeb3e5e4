//! A report brought to the wanted equinox, with its step: from as written to as meant.
//!
//! Not here: what the reader is for (words), and what rules are for (judging). What cannot be had is `None`; why is told
//! by the rules.

pub mod frame;
pub mod horizon;
pub mod instant;
pub mod position;
pub mod print;
pub mod site;
pub mod target;
pub mod to;

pub use print::printed;
pub use target::parse_target;

use crate::house::{House, WhenMissing};
use crate::report::{EquinoxTag, Frame, Meant, ReadPosition, Report};
use crate::sky::almanac::{Almanac, View};
use crate::sky::moment::{Moment, Station};
use crate::sky::{Direction, Ground, constellations};
use std::cell::OnceCell;
use std::rc::Rc;

/// What a report means under the house rules, restated in the frame `to`. Never fails: what cannot be had is `None`.
pub fn mean(report: &Report, house: &House, to: Frame) -> Meant {
    mean_by(report, house, to, &Almanac::new())
}

/// The same with the instants and sites of an almanac, which many reports share.
pub fn mean_by(report: &Report, house: &House, to: Frame, almanac: &Almanac) -> Meant {
    let mut meant = Meant::default();
    (meant.site, meant.site_trouble, meant.site_register_deg) = site::resolve(report, house);
    (meant.instant, meant.instant_trouble) = instant::resolve(report, house, meant.site.as_ref());
    let Some(numbers) = position::numbers(&report.position) else {
        return meant;
    };
    let mut understood = frame::understand(report.position.kind, &report.equinoxes);
    // a house rule fills in what nobody wrote, not what was written and contradicts itself
    let year_written = |t: &EquinoxTag| !t.misspelt && t.year.is_some();
    let unsaid = !report.equinoxes.iter().any(|t| year_written(&t.0.value));
    if let (None, true, WhenMissing::Assume(frame)) = (understood.frame, unsaid, house.when_missing)
    {
        understood.frame = Some(frame);
        meant.assumed.push(format!("equinox {}", frame.equinox));
    }
    let read = ReadPosition {
        frame: understood.frame,
        ..numbers
    };
    meant.read = Some(read);

    let sky = Sky::new(&meant, almanac);
    let written = to::Written {
        read,
        from_origin: understood.from_origin,
        airless: report.position.airless,
        epoch: report.epoch_of_place.map(|e| e.value.value()),
    };
    meant.reduced = to::reduce(&written, to, &sky);
    if let Some(reduced) = meant.reduced {
        let icrs = Direction::new(reduced.icrs_ra_deg, reduced.icrs_dec_deg);
        meant.constellation = Some(constellations::at(icrs));
        meant.horizon = sky.view().and_then(|view| horizon::over(icrs, view));
    }
    meant
}

/// An instant known to no better than this says nothing of the horizon, seconds.
const HALF_DAY_S: f64 = 43_200.0;

/// The instant and the site of a report as the sky needs them, each looked up when first asked for, and once.
pub struct Sky<'a> {
    /// UTC of the observation, however doubtful its hour.
    utc: Option<(f64, f64)>,
    /// Nothing is doubtful about the instant and the site.
    sure: bool,
    ground: Option<Ground>,
    almanac: &'a Almanac,
    geocentric: OnceCell<Rc<View>>,
    topocentric: OnceCell<Rc<View>>,
}

impl<'a> Sky<'a> {
    /// Of a report whose instant and site are resolved.
    pub fn new(meant: &Meant, almanac: &'a Almanac) -> Sky<'a> {
        Sky {
            utc: meant
                .instant
                .map(|i| i.utc)
                .filter(|&utc| Moment::is_computable(utc)),
            // a date alone is no time of the night
            sure: meant.instant_trouble.is_none()
                && meant.site_trouble.is_none()
                && meant.instant.is_none_or(|i| i.step_s < HALF_DAY_S),
            ground: meant.site.as_ref().map(|s| Ground {
                latitude_deg: s.latitude_deg,
                longitude_deg: s.longitude_deg,
                elevation_m: s.elevation_m.unwrap_or(0.0),
            }),
            almanac,
            geocentric: OnceCell::new(),
            topocentric: OnceCell::new(),
        }
    }

    /// The date of observation, TT, if there is one.
    pub fn tt(&self) -> Option<(f64, f64)> {
        self.utc.map(crate::sky::time::tt_from_utc)
    }

    /// The instant, if there is one.
    pub fn moment(&self) -> Option<&Moment> {
        let utc = self.utc?;
        let view = self.geocentric.get_or_init(|| self.almanac.view(utc, None));
        Some(&view.moment)
    }

    /// The sky over the site at the instant, if there are both and nothing is doubtful about them.
    pub fn view(&self) -> Option<&View> {
        let (true, Some(ground), Some(utc)) = (self.sure, self.ground, self.utc) else {
            return None;
        };
        let look = || self.almanac.view(utc, Some(ground));
        Some(self.topocentric.get_or_init(look))
    }

    /// The instant at the site, likewise.
    pub fn station(&self) -> Option<&Station> {
        self.view()?.station.as_ref()
    }
}
