//! What an instant, and a site at it, have for everybody who asks: made once, and kept while it is likely asked for again.

use super::bodies::{self, Body, BodyPlace};
use super::moment::{Moment, Station};
use super::{Direction, Ground};
use std::cell::{OnceCell, RefCell};
use std::collections::VecDeque;
use std::rc::Rc;

/// A way from UTC to what the sky needs of an instant.
pub type Clock = fn((f64, f64)) -> Moment;

/// Instants and sites as the sky needs them. What it gives does not depend on what was asked before.
pub struct Almanac {
    clock: Clock,
    quick: bool,
    kept: RefCell<VecDeque<(Key, Rc<View>)>>,
}

/// UTC and, where there is one, the ground, bit by bit.
type Key = ([u64; 2], Option<[u64; 3]>);

/// So many views are kept: more than the readings of a faulty report ask for.
const KEPT: usize = 48;

impl Default for Almanac {
    fn default() -> Almanac {
        Almanac::by(Moment::new)
    }
}

impl Almanac {
    /// Each instant by itself, to the full.
    pub fn new() -> Almanac {
        Almanac::default()
    }

    /// By another way to an instant: [`Moment::shared`] for a run of very many reports.
    pub fn by(clock: Clock) -> Almanac {
        Almanac {
            clock,
            quick: false,
            kept: RefCell::default(),
        }
    }

    /// For trying many instants: [`Moment::quick`], and the Moon to half a degree.
    pub fn quick() -> Almanac {
        Almanac {
            quick: true,
            ..Almanac::by(Moment::quick)
        }
    }

    /// The sky at an instant, as seen from the ground given, else from the Earth's centre.
    pub fn view(&self, utc: (f64, f64), ground: Option<Ground>) -> Rc<View> {
        let place = ground.map(|g| [g.latitude_deg, g.longitude_deg, g.elevation_m]);
        let key = (
            [utc.0.to_bits(), utc.1.to_bits()],
            place.map(|p| p.map(f64::to_bits)),
        );
        let kept = self.kept.borrow();
        if let Some((_, view)) = kept.iter().rev().find(|(k, _)| *k == key) {
            return view.clone();
        }
        // the instant itself may be at hand, seen from elsewhere
        let moment = kept.iter().rev().find(|(k, _)| k.0 == key.0);
        let moment = moment.map(|(_, view)| view.moment);
        drop(kept);
        let moment = moment.unwrap_or_else(|| (self.clock)(utc));
        let view = Rc::new(View {
            moment,
            station: ground.map(|g| moment.station(g)),
            quick: self.quick,
            directions: [const { OnceCell::new() }; 9],
            places: [const { OnceCell::new() }; 9],
        });
        let mut kept = self.kept.borrow_mut();
        if kept.len() >= KEPT {
            kept.pop_front();
        }
        kept.push_back((key, view.clone()));
        view
    }
}

/// The sky at one instant from one place.
pub struct View {
    /// The instant.
    pub moment: Moment,
    /// The instant at the site, where there is one.
    pub station: Option<Station>,
    quick: bool,
    directions: [OnceCell<(Direction, f64)>; 9],
    places: [OnceCell<BodyPlace>; 9],
}

impl View {
    /// The astrometric direction of a body, and its distance in au.
    pub fn direction(&self, body: Body) -> (Direction, f64) {
        *self.directions[body as usize].get_or_init(|| {
            if self.quick && body == Body::Moon {
                bodies::moon_to_half_a_degree(&self.moment, self.station.as_ref())
            } else {
                bodies::direction_at(body, &self.moment, self.station.as_ref())
            }
        })
    }

    /// Where a body is, with its disc and its motion.
    pub fn place(&self, body: Body) -> BodyPlace {
        *self.places[body as usize]
            .get_or_init(|| bodies::place_at(body, &self.moment, self.station.as_ref()))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_kept_is_what_would_be_made() {
        let almanac = Almanac::new();
        let ground = |k: u8| Ground {
            latitude_deg: f64::from(k),
            longitude_deg: -3.0,
            elevation_m: 0.0,
        };
        for round in 0..2 {
            for k in 0..60u8 {
                let utc = (2_460_000.5 + f64::from(k % 7), 0.25);
                let place = Some(ground(k % 50)).filter(|_| k % 3 > 0);
                let view = almanac.view(utc, place);
                let body = Body::ALL[usize::from(k % 9)];
                assert_eq!(view.place(body), bodies::place(body, utc, place), "{round}");
                assert_eq!(view.direction(body).0, view.place(body).icrs);
            }
        }
        assert!(almanac.kept.borrow().len() <= KEPT);
    }
}
