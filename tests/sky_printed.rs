//! Reports' numbers through the whole reduction, printed form included, held to the practice sheets' truth (pyerfa
//! 2.0.1.5 and astropy): place, step, printed value and the digits DESIGN section 3 allows.

use colure::reduction::{Sky, parse_target, printed, to};
use colure::report::{Equinox, Frame, InstantMeant, Meant, ReadPosition, SiteMeant, System};
use colure::sky::almanac::Almanac;
use colure::sky::moment::Moment;
use colure::sky::{Direction, separation_deg, time};

fn frame(system: &str, equinox: Option<f64>) -> Frame {
    let (system, equinox) = match (system, equinox) {
        ("ICRS", _) => (System::Icrs, Equinox::Julian(2000.0)),
        ("FK5", Some(year)) => (System::Fk5, Equinox::Julian(year)),
        ("FK4", Some(year)) => (System::Fk4, Equinox::Besselian(year)),
        ("mean", Some(year)) => (System::Mean, Equinox::Julian(year)),
        ("mean", None) => (System::Mean, Equinox::OfDate),
        ("apparent", _) => (System::Apparent, Equinox::OfDate),
        ("hour-angle", _) => (System::HourAngle, Equinox::OfDate),
        _ => (System::Horizontal, Equinox::OfDate),
    };
    Frame { system, equinox }
}

/// Value in degrees and unit of the last digit in arcsec of a printed coordinate.
fn read_back(text: &str) -> (f64, f64) {
    let hours = text.contains('h');
    let minus = text.starts_with('-');
    let bare = text.trim_start_matches(['+', '-']);
    let parts: Vec<&str> = bare
        .split(['h', 'm', 's', '°', '′', '″'])
        .filter(|p| !p.is_empty())
        .collect();
    let value: f64 = parts
        .iter()
        .zip([1.0, 60.0, 3600.0])
        .map(|(p, by)| p.parse::<f64>().unwrap() / by)
        .sum();
    for sixty in &parts[1..] {
        assert!(sixty.parse::<f64>().unwrap() < 60.0, "{text}");
    }
    let places = parts
        .last()
        .unwrap()
        .split_once('.')
        .map_or(0, |p| p.1.len());
    let unit = [3600.0, 60.0, 1.0][parts.len() - 1] / 10f64.powi(places as i32);
    let scale = if hours { 15.0 } else { 1.0 };
    (if minus { -value } else { value } * scale, unit * scale)
}

#[test]
fn printed_as_written() {
    let j2000 = parse_target("J2000.0").unwrap();
    let mut tried = 0;
    for line in include_str!("published/reductions_by_pyerfa.csv")
        .lines()
        .skip(1)
    {
        let part: Vec<&str> = line.split(',').collect();
        let number = |i: usize| part[i].parse::<f64>().ok();
        let utc = (!part[5].is_empty()).then(|| {
            let n = |r: std::ops::Range<usize>| part[5][r].parse::<u32>().unwrap();
            let second = part[5][17..].parse().unwrap();
            time::utc_from_civil(
                n(0..4) as i32,
                n(5..7),
                n(8..10),
                n(11..13),
                n(14..16),
                second,
            )
            .unwrap()
        });
        let meant = Meant {
            instant: utc.map(|utc| InstantMeant {
                utc,
                step_s: 1.0,
                heliocentric: false,
            }),
            site: number(6).map(|latitude_deg| SiteMeant {
                name: None,
                latitude_deg,
                longitude_deg: number(7).unwrap(),
                elevation_m: number(8),
                zone: None,
                step_deg: 0.01,
            }),
            ..Meant::default()
        };
        let hours = if part[1] == "hour-angle" { 15.0 } else { 1.0 };
        let written = to::Written {
            read: ReadPosition {
                frame: Some(frame(part[1], number(2))),
                first_deg: number(3).unwrap() * hours,
                second_deg: number(4).unwrap(),
                first_step_arcsec: number(15).unwrap_or(15.0),
                second_step_arcsec: number(16).unwrap_or(1.0),
            },
            from_origin: false,
            airless: part[9] == "yes",
            epoch: None,
        };
        for almanac in [Almanac::new(), Almanac::by(Moment::shared)] {
            let sky = Sky::new(&meant, &almanac);
            let reduced = to::reduce(&written, j2000, &sky).unwrap_or_else(|| panic!("{line}"));
            let got = Direction::new(reduced.ra_deg, reduced.dec_deg);
            let expected = Direction::new(number(10).unwrap(), number(11).unwrap());
            let usual = if part[1] == "FK4" && number(2) != Some(1950.0) {
                0.01
            } else {
                0.001
            };
            let off = separation_deg(got, expected) * 3600.0;
            assert!(off <= number(14).unwrap_or(usual), "{line}: {off} arcsec");

            let (ra, dec) = printed(&reduced);
            let ((ra_deg, ra_unit), (dec_deg, dec_unit)) = (read_back(&ra), read_back(&dec));
            let turn = |a: f64, b: f64| ((a - b + 180.0).rem_euclid(360.0) - 180.0).abs();
            let room = number(14).unwrap_or(0.0);
            assert!(
                turn(ra_deg, expected.ra_deg) * 3600.0 <= 0.502 * ra_unit + 0.02 + room * 2.0,
                "{line}: {ra}"
            );
            assert!(
                (dec_deg - expected.dec_deg).abs() * 3600.0 <= 0.502 * dec_unit + 0.02 + room,
                "{line}: {dec}"
            );
            let cos = expected.dec_deg.to_radians().cos();
            let step = reduced.step_arcsec;
            assert!(
                ra_unit * cos >= reduced.ra_step_on_sky_arcsec / 3.05,
                "{line}: {ra} too fine"
            );
            assert!(
                dec_unit >= reduced.dec_step_arcsec / 3.05,
                "{line}: {dec} too fine"
            );
            assert!(
                ra_unit * cos <= step * 10.0 && dec_unit <= step * 10.0,
                "{line}: {ra} {dec} too coarse"
            );
            tried += 1;
        }
    }
    println!("{tried} reductions printed and read back");
    assert!(tried > 500);
}

#[test]
fn every_target_comes_back_to_the_icrs() {
    let meant = Meant {
        instant: Some(InstantMeant {
            utc: time::utc_from_civil(2024, 7, 5, 22, 31, 0.0).unwrap(),
            step_s: 60.0,
            heliocentric: false,
        }),
        ..Meant::default()
    };
    let almanac = Almanac::new();
    let sky = Sky::new(&meant, &almanac);
    for target in [
        "J2000",
        "ICRS",
        "B1950",
        "FK4 B1900",
        "FK5 J1975.0",
        "FK5",
        "of-date",
        "apparent",
        "J2034.5",
        "mean B1900",
        "FK4 of date",
    ] {
        let target = parse_target(target).unwrap();
        let place = Direction::new(83.625, 22.0175);
        let there = to::from_icrs(place, target, None, &sky).unwrap();
        let written = to::Written {
            read: ReadPosition {
                frame: Some(target),
                first_deg: there.ra_deg,
                second_deg: there.dec_deg,
                first_step_arcsec: 1.5,
                second_step_arcsec: 1.0,
            },
            from_origin: false,
            airless: false,
            epoch: None,
        };
        let back = to::reduce(&written, parse_target("ICRS").unwrap(), &sky).unwrap();
        let off =
            separation_deg(place, Direction::new(back.icrs_ra_deg, back.icrs_dec_deg)) * 3600.0;
        // fk54z and fk45z close to 0.5 mas
        assert!(off < 5e-4, "{target:?}: {off}");
        let undated = Sky::new(&Meant::default(), &almanac);
        let of_date = target.equinox == Equinox::OfDate;
        assert_eq!(
            to::reduce(&written, parse_target("ICRS").unwrap(), &undated).is_none(),
            of_date
        );
    }
}
