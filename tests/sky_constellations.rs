//! Constellation boundaries, tried from both sides of every corner of the table (Roman 1987, PASP 99, 695; CDS VI/42).
//!
//! The cells the crate searches must say what the table's own rule says: the first row, from the north, whose lower
//! declination is not above the place and whose right ascensions hold it. The rows are read here anew from the table.

use colure::sky::constellations;

fn by_the_rule(ra_s: f64, dec_arcsec: f64) -> String {
    include_str!("../src/sky/data/constellation_bounds_b1875.csv")
        .lines()
        .skip(1)
        .map(|line| line.split(',').collect::<Vec<_>>())
        .find(|row| {
            let number = |i: usize| row[i].parse::<f64>().unwrap();
            number(5) <= ra_s && ra_s < number(6) && number(7) <= dec_arcsec
        })
        .map(|row| row[4].to_string())
        .unwrap()
}

#[test]
fn every_corner_from_all_sides() {
    let mut tried = 0;
    let mut changes = 0;
    for line in include_str!("../src/sky/data/constellation_bounds_b1875.csv")
        .lines()
        .skip(1)
    {
        let row: Vec<&str> = line.split(',').collect();
        let number = |i: usize| row[i].parse::<f64>().unwrap();
        for ra in [number(5), number(6)] {
            let mut names = Vec::new();
            for (across, up) in [
                (-0.001, -0.01),
                (-0.001, 0.01),
                (0.001, -0.01),
                (0.001, 0.01),
                (0.0, 0.0),
            ] {
                let ra = (ra + across).rem_euclid(86_400.0);
                let dec = (number(7) + up).clamp(-324_000.0, 324_000.0);
                let name = constellations::at_b1875(ra, dec);
                assert_eq!(name, by_the_rule(ra, dec), "RA {ra} s, Dec {dec} arcsec");
                names.push(name);
                tried += 1;
            }
            names.dedup();
            changes += usize::from(names.len() > 1);
        }
    }
    println!(
        "{tried} places about the corners of 357 rows; the constellation changes at {changes} corners"
    );
    assert!(tried >= 3570 && changes > 500);
}

#[test]
fn a_grid_over_the_sky() {
    let mut seen = std::collections::BTreeSet::new();
    for i in 0..200 {
        for j in 0..200 {
            let ra = f64::from(i) * 432.0 + 0.5;
            let dec = (f64::from(j) - 99.5) * 3240.0;
            let name = constellations::at_b1875(ra, dec);
            assert_eq!(name, by_the_rule(ra, dec), "RA {ra} s, Dec {dec} arcsec");
            seen.insert(name);
        }
    }
    assert_eq!(seen.len(), 88, "all constellations are met");
}
