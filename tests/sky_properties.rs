//! What must hold anywhere and at any time, tried by proptest: there and back, distances, ranges, culmination, no panic.

use colure::sky::bodies::{self, Body};
use colure::sky::moment::Moment;
use colure::sky::*;
use proptest::prelude::*;

fn place() -> impl Strategy<Value = Direction> {
    let ra =
        prop_oneof![4 => 0.0..360.0, 1 => Just(0.0), 1 => Just(359.999_999_999), 1 => Just(180.0)];
    let dec = prop_oneof![6 => -90.0..90.0, 1 => Just(90.0), 1 => Just(-90.0), 1 => Just(0.0), 1 => Just(89.999_999)];
    (ra, dec).prop_map(|(ra, dec)| Direction::new(ra, dec))
}

/// UTC within 1600 to 2150.
fn instant() -> impl Strategy<Value = (f64, f64)> {
    (-94_000i32..107_000, 0.0..1.0f64).prop_map(|(day, part)| (2_400_000.5 + f64::from(day), part))
}

fn site() -> impl Strategy<Value = Ground> {
    (-90.0..=90.0f64, -180.0..=180.0f64, -300.0..5000.0f64).prop_map(
        |(latitude_deg, longitude_deg, elevation_m)| Ground {
            latitude_deg,
            longitude_deg,
            elevation_m,
        },
    )
}

fn arcsec(a: Direction, b: Direction) -> f64 {
    separation_deg(a, b) * 3600.0
}

fn in_range(d: Direction) -> bool {
    (0.0..360.0).contains(&d.ra_deg) && (-90.0..=90.0).contains(&d.dec_deg)
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn there_and_back(p in place(), utc in instant(), ground in site(), year in 1750.0..2100.0f64) {
        let moment = Moment::new(utc);
        let station = moment.station(ground);
        let tt = moment.tt;
        let besselian = year.min(2000.0);
        let (ha, dec) = hour_angle::from_icrs(p, &station);
        let (az, alt) = horizontal::from_icrs(p, false, &station);
        let (el, eb) = ecliptic::from_icrs(p, tt);
        let (gl, gb) = galactic::from_icrs(p);
        // ERFA's own fk54z and fk45z close to 0.4 mas; aticq's two rounds of aberration to 1 µas;
        // close to the Sun the deflection is bent back in five rounds only
        let (sun, _) = bodies::direction_at(Body::Sun, &moment, None);
        let apparent_room = if separation_deg(p, sun) < 3.0 { 2.0 } else { 1e-5 };
        for (name, back, room) in [
            ("FK5", fk5::to_icrs(fk5::from_icrs(p, year, tt), year, tt), 1e-6),
            ("FK4", fk4_fk5::to_icrs(fk4_fk5::from_icrs(p, besselian, tt), besselian, tt), 5e-4),
            ("mean", mean::to_icrs(mean::from_icrs(p, tt), tt), 1e-6),
            ("apparent", apparent::to_icrs(apparent::from_icrs(p, &moment), &moment), apparent_room),
            ("hour angle", hour_angle::to_icrs(ha, dec, &station), apparent_room),
            ("horizontal", horizontal::to_icrs(az, alt, false, &station), apparent_room),
            ("ecliptic", ecliptic::to_icrs(el, eb, tt), 1e-6),
            ("galactic", galactic::to_icrs(gl, gb), 1e-6),
        ] {
            prop_assert!(arcsec(back, p) < room, "{name}: {} arcsec", arcsec(back, p));
            prop_assert!(in_range(back), "{name}: {back:?}");
        }
    }

    #[test]
    fn rotations_keep_distances(a in place(), b in place(), utc in instant(), year in 1750.0..2100.0f64) {
        let tt = time::tt_from_utc(utc);
        let before = separation_deg(a, b);
        let room = if before > 179.0 { 1e-4 } else { 1e-8 };
        for (name, x, y) in [
            ("mean", mean::from_icrs(a, tt), mean::from_icrs(b, tt)),
            ("FK5", fk5::from_icrs(a, year, tt), fk5::from_icrs(b, year, tt)),
            ("B1875", constellations::at_1875(a), constellations::at_1875(b)),
        ] {
            prop_assert!((separation_deg(x, y) - before).abs() < room, "{name}: {before} {}", separation_deg(x, y));
            prop_assert!(in_range(x) && in_range(y));
        }
    }

    /// Meeus 1998, ch. 13: a star culminates at altitude 90° − |φ − δ|.
    #[test]
    fn upper_culmination(dec in -90.0..90.0f64, utc in instant(), ground in site()) {
        let station = Moment::new(utc).station(ground);
        let icrs = hour_angle::to_icrs(0.0, dec, &station);
        let seen = station.observed(icrs, false);
        let expected = 90.0 - (ground.latitude_deg - dec).abs();
        // the observer's own motion: 0.33″ at most
        prop_assert!((seen.altitude_deg - expected).abs() * 3600.0 < 0.35, "{seen:?} {expected}");
    }

    /// Up means above: asked again at the middle and just outside of each span.
    #[test]
    fn up_agrees_with_the_altitude(p in place(), utc in instant(), ground in site(), limit in -20.0..60.0f64) {
        let altitude = |at| horizon::place(p, at, ground).altitude_deg;
        match horizon::up(p, utc, ground, limit) {
            horizon::Up::Always => prop_assert!(altitude(utc) > limit - 0.01),
            horizon::Up::Never => prop_assert!(altitude(utc) < limit + 0.01),
            horizon::Up::Between(spans) => {
                for (from, to) in spans {
                    let length = ((to.0 - from.0) + (to.1 - from.1)) * 86_400.0;
                    prop_assert!(length >= 0.0);
                    let middle = time::add_seconds(from, length / 2.0);
                    prop_assert!(altitude(middle) > limit - 0.01);
                }
            }
        }
    }

    #[test]
    fn instants_keep_their_civil_date(utc in instant(), seconds in -1e6..1e6f64) {
        let civil = time::civil_from_utc(utc);
        let again = time::utc_from_civil(civil.year, civil.month, civil.day, civil.hour, civil.minute, civil.second).unwrap();
        prop_assert!((((again.0 - utc.0) + (again.1 - utc.1)) * 86_400.0).abs() < 2e-6);
        let back = time::add_seconds(time::add_seconds(utc, seconds), -seconds);
        prop_assert!((((back.0 - utc.0) + (back.1 - utc.1)) * 86_400.0).abs() < 1e-5);
    }

    #[test]
    fn a_constellation_holds_its_places(p in place()) {
        let name = constellations::at(p);
        prop_assert_eq!(constellations::distance_deg(p, name), 0.0);
        prop_assert!(constellations::NAMES.iter().any(|n| n[0] == name));
    }

    /// Any number at all, at any door: no panic, and what comes out is finite.
    #[test]
    fn nothing_panics(a in any::<f64>(), b in any::<f64>(), c in any::<f64>(), d in any::<f64>()) {
        let p = Direction { ra_deg: a, dec_deg: b };
        for utc in [(c, d), (2_451_545.0 + c, 0.0), (2_451_545.0, c)] {
            let moment = Moment::with_ut1(utc, d);
            let station = moment.station(Ground { latitude_deg: a, longitude_deg: b, elevation_m: c });
            let seen = station.observed(p, true);
            prop_assert!(seen.altitude_deg.is_finite() && seen.azimuth_deg.is_finite());
            prop_assert!(horizontal::to_icrs(a, b, true, &station).ra_deg.is_finite());
            prop_assert!(hour_angle::to_icrs(a, b, &station).ra_deg.is_finite());
            let _ = horizon::up_at(p, &station, d);
            for body in Body::ALL {
                prop_assert!(bodies::place_at(body, &moment, Some(&station)).icrs.ra_deg.is_finite());
            }
            let _ = (time::jd_to_utc(c, d), time::mjd_to_utc(c, d), time::civil_from_utc(utc));
        }
        for back in [fk5::to_icrs(p, c, (d, a)), fk4_fk5::from_icrs(p, c, (d, a)), mean::to_icrs(p, (c, d))] {
            let _ = back;
        }
        let _ = (constellations::at(p), constellations::distance_deg(p, "Tau"), catalogue::near(p, c), ecliptic::from_icrs(p, (c, d)), galactic::from_icrs(p), horizon::refraction_deg(a, b), horizon::dip_deg(c));
    }
}

/// `src/sky` is to be taken as a library: its files use only each other, std, sofars and thiserror.
#[test]
fn sky_uses_nothing_else_of_the_crate() {
    let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/src/sky");
    let mut files = 0;
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.extension().is_none_or(|e| e != "rs") {
            continue;
        }
        files += 1;
        let text = std::fs::read_to_string(&path).unwrap();
        assert!(
            text.starts_with("//!"),
            "{path:?} does not say what it is for"
        );
        for line in text.lines().map(str::trim).filter(|l| !l.starts_with("//")) {
            assert!(
                !line.contains("crate::") && !line.contains("super::super"),
                "{path:?}: {line}"
            );
            if let Some(used) = line
                .strip_prefix("use ")
                .or_else(|| line.strip_prefix("pub use "))
            {
                let root = used.split([':', ';', ' ', ',']).next().unwrap_or("");
                assert!(
                    ["super", "std", "sofars", "thiserror", "self"].contains(&root),
                    "{path:?}: {line}"
                );
            }
        }
    }
    assert!(files >= 15, "{files}");
}
