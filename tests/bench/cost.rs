//! What a report costs: `cargo bench`. Its astronomy alone, a clean report's rules, a faulty report with its slips, a mail.
//!
//! Reports are made up here: one site, an object high in the night, one a night; the faulty ones have the clock of the day.

use colure::house::House;
use colure::reduction;
use colure::report::{Meant, Report};
use colure::rules::{Desk, Selection};
use colure::sheet::Sheet;
use colure::sky::almanac::Almanac;
use colure::sky::moment::Moment;
use colure::sky::{Direction, Ground};
use colure::{reading, run};
use divan::{Bencher, black_box};

const NOW: (f64, f64) = (2_461_345.5, 0.0);
const SITE: Ground = Ground {
    latitude_deg: 50.1,
    longitude_deg: 2.2,
    elevation_m: 100.0,
};

fn main() {
    divan::main();
}

/// So many reports, the hour of their clocks as given.
fn mail(count: usize, hour: u32) -> String {
    (0..count)
        .map(|k| {
            format!(
                "Object: Suspect {}\nRA 06 {:02} 30 Dec +40 12 {:02} (J2000.0)\nDate: 2024-01-{:02} {hour}:{:02} UT\n\
                 Site: 50.1 N 2.2 E, 100 m\n\n",
                k + 11,
                k % 30,
                k % 60,
                k % 28 + 1,
                (k * 7) % 60
            )
        })
        .collect()
}

fn sheet(count: usize, hour: u32) -> Sheet {
    Sheet::decode("mail.txt".to_owned(), mail(count, hour).as_bytes()).expect("plain text")
}

fn at_night(report: &Report, almanac: &Almanac) -> Meant {
    let house = House::default();
    reduction::mean_by(report, &house, house.canonical, almanac)
}

/// Instants of a month, a minute and more apart.
fn instants(shuffled: bool) -> Vec<(f64, f64)> {
    (0..4096u32)
        .map(|k| if shuffled { (k * 1597) % 4096 } else { k })
        .map(|k| f64::from(k) / 4096.0 * 30.0)
        .map(|day| (2_460_310.5 + day.floor(), day.fract()))
        .collect()
}

fn altitude(moment: Moment) -> f64 {
    let place = Direction::new(91.0, 40.2);
    moment.station(SITE).observed(place, false).altitude_deg
}

#[divan::bench(args = [false, true])]
fn astronomy_direct(bencher: Bencher, shuffled: bool) {
    let mut instants = instants(shuffled).into_iter().cycle();
    bencher.bench_local(|| altitude(Moment::new(instants.next().expect("a cycle"))));
}

#[divan::bench(args = [false, true])]
fn astronomy_on_the_grid(bencher: Bencher, shuffled: bool) {
    let list = instants(shuffled);
    for utc in &list {
        Moment::shared(*utc);
    }
    let mut instants = list.into_iter().cycle();
    bencher.bench_local(|| altitude(Moment::shared(instants.next().expect("a cycle"))));
}

#[divan::bench]
fn astronomy_of_a_trial(bencher: Bencher) {
    let mut instants = instants(true).into_iter().cycle();
    bencher.bench_local(|| altitude(Moment::quick(instants.next().expect("a cycle"))));
}

/// Rules, and slips where there is a fault, of a report that is read and reduced already.
fn judged(bencher: Bencher, hour: u32) {
    let (sheet, house, selection) = (sheet(1, hour), House::default(), Selection::default());
    let almanac = Almanac::new();
    let desk = Desk {
        house: &house,
        to: house.canonical,
        now_utc: NOW,
        text: &sheet.text,
        selection: &selection,
        almanac: &almanac,
    };
    let report = reading::read(&sheet).into_iter().next().expect("a report");
    bencher
        .with_inputs(|| (report.clone(), at_night(&report, &almanac)))
        .bench_local_values(|(report, meant)| desk.examine(report, meant));
}

#[divan::bench]
fn rules_of_a_clean_report(bencher: Bencher) {
    judged(bencher, 23);
}

#[divan::bench]
fn rules_and_slips_of_a_faulty_report(bencher: Bencher) {
    judged(bencher, 11);
}

#[divan::bench]
fn reduction_of_a_report(bencher: Bencher) {
    let report = reading::read(&sheet(1, 23))
        .into_iter()
        .next()
        .expect("a report");
    bencher.bench_local(|| at_night(black_box(&report), &Almanac::new()));
}

#[divan::bench]
fn reading_of_twenty(bencher: Bencher) {
    let sheet = sheet(20, 23);
    bencher.bench_local(|| reading::read(black_box(&sheet)));
}

/// Read, reduced and judged.
#[divan::bench(args = [23, 11])]
fn mail_of_twenty(bencher: Bencher, hour: u32) {
    let (sheet, house, selection) = (sheet(20, hour), House::default(), Selection::default());
    bencher.bench_local(|| {
        run::examine_sheet(black_box(&sheet), &house, house.canonical, NOW, &selection)
    });
}
