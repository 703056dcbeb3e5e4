//! Every reduction of the practice sheets' truth: computed with pyerfa 2.0.1.5 and astropy, never with this crate.
//! Tolerances: 1 mas; FK4 of other equinoxes than B1950.0 10 mas (sources of Newcomb's constants differ); those a row states.

use colure::sky::moment::Moment;
use colure::sky::*;
use std::collections::BTreeMap;

fn utc_of(text: &str) -> (f64, f64) {
    let number = |range: std::ops::Range<usize>| text[range].parse::<u32>().unwrap();
    let second: f64 = text[17..].parse().unwrap();
    time::utc_from_civil(
        number(0..4) as i32,
        number(5..7),
        number(8..10),
        number(11..13),
        number(14..16),
        second,
    )
    .unwrap()
}

#[test]
fn reductions_agree_with_pyerfa() {
    let mut worst: BTreeMap<String, (f64, usize)> = BTreeMap::new();
    let mut wrong = Vec::new();
    for line in include_str!("published/reductions_by_pyerfa.csv")
        .lines()
        .skip(1)
    {
        let part: Vec<&str> = line.split(',').collect();
        let number = |i: usize| part[i].parse::<f64>().ok();
        let place = Direction {
            ra_deg: number(3).unwrap(),
            dec_deg: number(4).unwrap(),
        };
        let equinox = number(2);
        let utc = (!part[5].is_empty()).then(|| utc_of(part[5]));
        let moment = utc.map(Moment::new);
        let ground = number(6).map(|latitude_deg| Ground {
            latitude_deg,
            longitude_deg: number(7).unwrap(),
            elevation_m: number(8).unwrap_or(0.0),
        });
        let station = moment.as_ref().zip(ground).map(|(m, g)| m.station(g));
        let at = |undated: (f64, f64)| moment.as_ref().map_or(undated, |m| m.tt);
        let icrs = match (part[1], equinox) {
            ("ICRS", _) => place,
            ("FK5", Some(year)) => fk5::to_icrs(place, year, at((time::J2000, 0.0))),
            ("FK4", Some(year)) => {
                fk4_fk5::to_icrs(place, year, at(time::jd_of_besselian_epoch(year)))
            }
            ("mean", Some(year)) => mean::to_icrs(place, time::jd_of_julian_epoch(year)),
            ("mean", None) => mean::to_icrs(place, moment.as_ref().unwrap().tt),
            ("apparent", None) => apparent::to_icrs(place, moment.as_ref().unwrap()),
            ("hour-angle", None) => hour_angle::to_icrs(
                place.ra_deg * 15.0,
                place.dec_deg,
                station.as_ref().unwrap(),
            ),
            ("horizontal", None) => horizontal::to_icrs(
                place.ra_deg,
                place.dec_deg,
                part[9] == "no",
                station.as_ref().unwrap(),
            ),
            _ => panic!("{line}"),
        };
        let expected = Direction {
            ra_deg: number(10).unwrap(),
            dec_deg: number(11).unwrap(),
        };
        let off = separation_deg(icrs, expected) * 3600.0;
        let usual = if part[1] == "FK4" && equinox != Some(1950.0) {
            0.01
        } else {
            0.001
        };
        let key = format!(
            "{} {}{}",
            part[1],
            equinox.map_or("of date".into(), |y| if part[1] == "mean" {
                "J".into()
            } else {
                y.to_string()
            }),
            if part[9].is_empty() {
                String::new()
            } else {
                format!(" airless {}", part[9])
            }
        );
        let entry = worst.entry(key).or_default();
        *entry = (entry.0.max(off), entry.1 + 1);
        if off > number(14).unwrap_or(usual) {
            wrong.push(format!("{line}: {off:.6} arcsec off"));
        }
        if let (Some(altitude), Some(station)) = (number(12), station) {
            let seen = horizon::place_at(expected, &station);
            let across =
                half_turn_deg(seen.azimuth_deg - number(13).unwrap()) * altitude.to_radians().cos();
            let off = (seen.altitude_deg - altitude).hypot(across) * 3600.0;
            let entry = worst.entry("altitude and azimuth".into()).or_default();
            *entry = (entry.0.max(off), entry.1 + 1);
            if off > 0.01 {
                wrong.push(format!("{line}: altitude {off:.6} arcsec off"));
            }
        }
    }
    for (key, (off, count)) in &worst {
        println!("{key}: worst {:.1} µas over {count}", off * 1e6);
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}
