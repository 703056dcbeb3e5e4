//! Nutation and the Earth's series, summed several terms at once, held to ERFA's own sums (sofars 0.6.3, bit for bit ERFA's).

use colure::sky::{earth, nutation, time};
use sofars::eph::epv00;
use sofars::pnp::{nut06a, pnm06a};

/// Instants over 1600 to 2400 (the Earth's over 1900 to 2100, where `epv00` speaks), by an irrational stride.
fn instants(years: f64) -> impl Iterator<Item = (f64, f64)> {
    (0..4000).map(move |k| {
        let days = ((f64::from(k) * 0.618_033_988_749_894_9).fract() - 0.5) * years * 365.25;
        (time::J2000 + days.floor(), days - days.floor())
    })
}

#[test]
fn nutation_as_erfa_sums_it() {
    const UAS: f64 = 648_000e6 / std::f64::consts::PI;
    let (mut angles, mut matrix): (f64, f64) = (0.0, 0.0);
    for tt in instants(800.0) {
        let (ours, theirs) = (nutation::angles(tt), nut06a(tt.0, tt.1));
        angles = angles.max((ours.0 - theirs.0).abs().max((ours.1 - theirs.1).abs()) * UAS);
        let (ours, theirs) = (nutation::matrix(tt), pnm06a(tt.0, tt.1));
        for (a, b) in ours.iter().flatten().zip(theirs.iter().flatten()) {
            matrix = matrix.max((a - b).abs() * UAS);
        }
    }
    println!("nutation off by {angles:.1e} µas, matrix by {matrix:.1e} µas at worst");
    assert!(angles < 1e-5 && matrix < 1e-4);
}

#[test]
fn the_earth_as_erfa_sums_it() {
    let (mut place, mut speed): (f64, f64) = (0.0, 0.0);
    for tt in instants(199.9) {
        let ours = earth::at(tt);
        let (heliocentric, barycentric) = epv00(tt.0, tt.1).expect("within its years");
        for (a, b) in [
            (ours.heliocentric, heliocentric),
            (ours.barycentric, barycentric),
        ] {
            for axis in 0..3 {
                place = place.max((a[0][axis] - b[0][axis]).abs());
                speed = speed.max((a[1][axis] - b[1][axis]).abs());
            }
        }
    }
    println!("the Earth off by {place:.1e} au and {speed:.1e} au a day at worst");
    // phases are kept in turns: a figure in the sixteenth place, some thousand terms
    assert!(place < 5e-13 && speed < 1e-14);
}
