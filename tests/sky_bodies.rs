//! Sun, Moon and planets held to `published/planets_200_instants.csv`: skyfield 1.55 with JPL DE421, 1900 to 2050.
//!
//! Tolerances: the worst that ERFA's theories show against that table (src/sky/data/README.md), with 1 % of room.

use colure::sky::bodies::{Body, direction_at, place_at, roughly};
use colure::sky::horizon::Course;
use colure::sky::moment::{Moment, Station};
use colure::sky::{Direction, Ground, ecliptic, separation_deg, time};
use std::collections::BTreeMap;

#[test]
fn bodies_agree_with_de421() {
    let mut worst: BTreeMap<String, Vec<f64>> = BTreeMap::new();
    for line in include_str!("published/planets_200_instants.csv")
        .lines()
        .skip(1)
    {
        let part: Vec<&str> = line.split(',').collect();
        let number = |i: usize| part[i].parse::<f64>().unwrap();
        let Some(body) = Body::ALL
            .into_iter()
            .find(|b| format!("{b:?}").eq_ignore_ascii_case(part[2]))
        else {
            continue;
        };
        let moment = Moment::new(time::utc_from_tt((number(0), 0.0)));
        let place = place_at(body, &moment, None);
        let astrometric = Direction::new(number(3), number(4));
        let apparent = Direction::new(number(5), number(6));
        let off = separation_deg(place.icrs, astrometric) * 3600.0;
        let seen = separation_deg(moment.apparent(place.icrs), apparent) * 3600.0;
        assert!((place.distance_au / number(7) - 1.0).abs() < 3e-3, "{line}");
        // both places are off by the same theory; a planet this side of the Sun is bent less than a star (1.8″ at its limb)
        assert!((off - seen).abs() < 1.8, "{line}: {off} {seen}");
        worst.entry(part[2].to_string()).or_default().push(off);
        let allowed = body.theory_arcsec() * 1.01 + 0.005;
        assert!(off <= allowed, "{line}: {off} arcsec");
    }
    assert_eq!(worst.len(), 9);
    for (body, mut offs) in worst {
        offs.sort_by(f64::total_cmp);
        println!(
            "{body}: median {:.3}″, worst {:.3}″ of {}",
            offs[offs.len() / 2],
            offs[offs.len() - 1],
            offs.len()
        );
    }
}

/// Instants over 1900 to 2100, by an irrational stride.
fn instants() -> impl Iterator<Item = (f64, f64)> {
    (0..1500).map(|k| {
        let days = ((f64::from(k) * 0.618_033_988_749_894_9).fract() - 0.5) * 73_000.0;
        (time::J2000 + days.floor(), days - days.floor())
    })
}

/// What is told of rough places holds: against ERFA's full theories (which hold against DE421 above).
#[test]
fn rough_places_and_the_ecliptic() {
    let mut worst: BTreeMap<String, (f64, f64)> = BTreeMap::new();
    for utc in instants() {
        let (quick, exact) = (Moment::quick(utc), Moment::new(utc));
        for body in Body::ALL {
            let place = place_at(body, &exact, None).icrs;
            let off = separation_deg(place, roughly(body, &quick)) * 60.0;
            let (_, latitude) = ecliptic::from_icrs(place, (time::J2000, 0.0));
            let seen = worst.entry(format!("{body:?}")).or_default();
            *seen = (seen.0.max(off), seen.1.max(latitude.abs()));
        }
    }
    println!("worst rough place (arcmin) and ecliptic latitude (deg): {worst:.1?}");
    for (body, (off, latitude)) in worst {
        assert!(
            off < if body == "Moon" { 32.0 } else { 2.0 },
            "{body}: {off}"
        );
        assert!(latitude < 9.7, "{body}: {latitude}");
    }
}

/// The quick instant and the course over a site, against the full way.
#[test]
fn quick_instants_and_courses() {
    let (mut star_off, mut sun_off, mut course_off): (f64, f64, f64) = (0.0, 0.0, 0.0);
    let ground = Ground {
        latitude_deg: -31.3,
        longitude_deg: 149.1,
        elevation_m: 1165.0,
    };
    for (k, utc) in instants().enumerate() {
        let star = Direction::new(k as f64 * 37.0, (k as f64 * 0.7).sin() * 80.0);
        let (quick, exact) = (
            Moment::quick(utc).station(ground),
            Moment::new(utc).station(ground),
        );
        let altaz = |station: &Station, place: Direction| {
            let seen = station.observed(place, false);
            Direction::new(seen.azimuth_deg, seen.altitude_deg)
        };
        star_off = star_off.max(separation_deg(altaz(&quick, star), altaz(&exact, star)) * 3600.0);
        let sun = |station: &Station| direction_at(Body::Sun, &station.moment, Some(station)).0;
        sun_off = sun_off.max(separation_deg(sun(&quick), sun(&exact)) * 3600.0);
        let (course, day) = (
            Course::of_star(star, &exact),
            Course::of_sun(&exact, 86_400.0),
        );
        for hours in [-24.0, -7.0, 3.0, 24.0] {
            let seconds = hours * 3600.0;
            let then = Moment::new(time::add_seconds(utc, seconds)).station(ground);
            for (place, course) in [(star, course), (sun(&then), day)] {
                let along = course.after(seconds);
                let along = Direction::new(along.azimuth_deg, along.altitude_deg);
                course_off = course_off.max(separation_deg(along, altaz(&then, place)) * 3600.0);
            }
        }
    }
    println!(
        "off at worst: star {star_off:.3}″, Sun {sun_off:.2}″, courses over a day {course_off:.2}″"
    );
    // a leap second within the day is 15″ of hour angle
    assert!(star_off < 0.1 && sun_off < 5.0 && course_off < 20.0);
}
