//! The grid that a run shares, held to the direct way at 200,000 random instants from 1900 to 2100 (20,000 unless built
//! with optimisation: the direct way is the slow one), and timed.

use colure::sky::grid;
use colure::sky::moment::Moment;
use colure::sky::{Direction, separation_deg, time};
use std::time::Instant;

fn next(state: &mut u64) -> f64 {
    // SplitMix64 (Steele et al. 2014)
    *state = state.wrapping_add(0x9e37_79b9_7f4a_7c15);
    let mut z = *state;
    z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    ((z ^ (z >> 31)) >> 11) as f64 / (1u64 << 53) as f64
}

#[test]
fn grid_against_direct() {
    const UAS: f64 = 648_000e6 / std::f64::consts::PI;
    let count = if cfg!(debug_assertions) {
        4_000
    } else {
        200_000
    };
    // few years in the small run, or the nodes cost more than the tries
    let years = if cfg!(debug_assertions) { 5.0 } else { 199.8 };
    let mut state = 3;
    let (mut matrix, mut velocity, mut origins, mut sun): (f64, f64, f64, f64) =
        (0.0, 0.0, 0.0, 0.0);
    for _ in 0..count {
        let days = (next(&mut state) - 0.5) * years * 365.25;
        let tt = (time::J2000 + days.floor(), days - days.floor());
        let (near, exact) = (grid::at(tt).unwrap(), grid::direct(tt));
        let apart = |a: &[f64; 3], b: &[f64; 3]| -> f64 {
            a.iter()
                .zip(b)
                .map(|(x, y)| (x - y).abs())
                .fold(0.0, f64::max)
                * UAS
        };
        for (a, b) in near.matrix.iter().zip(&exact.matrix) {
            matrix = matrix.max(apart(a, b));
        }
        // au/day over the speed of light (173.14 au/day)
        let moving = apart(&near.earth.barycentric[1], &exact.earth.barycentric[1]);
        velocity = velocity.max(moving / 173.144_6);
        sun = sun.max(apart(
            &near.earth.heliocentric[0],
            &exact.earth.heliocentric[0],
        ));
        let o = near.equation_of_origins_rad - exact.equation_of_origins_rad;
        origins = origins.max(o.abs() * UAS);
    }
    println!(
        "{count} instants: matrix {matrix:.3} µas, aberration {velocity:.5} µas, origins {origins:.3} µas, Sun {sun:.3} µas"
    );
    assert!(matrix < 0.5 && velocity < 0.01 && origins < 0.5 && sun < 5.0);
    assert!(grid::at((time::J2000 - 40_000.0, 0.0)).is_none());
    assert!(grid::at((f64::NAN, 0.0)).is_none());
}

#[test]
fn the_whole_place_and_its_cost() {
    let count = 20_000;
    let mut state = 9;
    let cases: Vec<((f64, f64), Direction)> = (0..count)
        .map(|_| {
            let utc = (
                2_458_849.5 + (next(&mut state) * 30.0).floor(),
                next(&mut state),
            );
            (
                utc,
                Direction::new(next(&mut state) * 360.0, next(&mut state) * 178.0 - 89.0),
            )
        })
        .collect();
    let site = colure::sky::Ground {
        latitude_deg: 54.0,
        longitude_deg: -3.0,
        elevation_m: 200.0,
    };
    let see = |utc, place| Moment::shared(utc).station(site).observed(place, false);
    for (utc, place) in cases.iter().take(2_000) {
        let exact = Moment::new(*utc).station(site).observed(*place, false);
        let near = see(*utc, *place);
        let at = |o: colure::sky::moment::Observed| Direction::new(o.hour_angle_deg, o.dec_deg);
        let off = separation_deg(at(exact), at(near)) * 3.6e9;
        assert!(off < 1.0, "{off} µas");
    }
    for &(utc, _) in &cases {
        Moment::shared(utc);
    }
    let start = Instant::now();
    let sum: f64 = cases
        .iter()
        .map(|&(utc, place)| see(utc, place).altitude_deg)
        .sum();
    let each = start.elapsed().as_nanos() as f64 / f64::from(count);
    println!(
        "ICRS to altitude and azimuth at a shuffled instant of a month: {each:.0} ns (sum {sum:.3})"
    );
}
