//! Reduced coordinates for print, to no more digits than were written.
//!
//! One form only: `05h34m30.9s`, `05h34m30s`, `05h34.5m`, `05h34m`, `05.6h`; `+22°01′02.1″`, `+22°01′02″`, `+22°01.4′`,
//! `+22°01′`, `+22.0°`. The last unit is the finest that is not finer than a third of the coordinate's own step on the
//! sky (so never coarser than ten times it). Rounding is done on whole units: never 60 s, never 24 h.

use crate::report::Reduced;

/// Right ascension and declination as printed.
pub fn printed(reduced: &Reduced) -> (String, String) {
    let cos = reduced.dec_deg.to_radians().cos().max(0.0);
    (
        right_ascension(reduced.ra_deg, reduced.ra_step_on_sky_arcsec, cos),
        declination(reduced.dec_deg, reduced.dec_step_arcsec),
    )
}

/// Most decimals of a second ever printed.
const MOST_DECIMALS: u32 = 9;

/// How a coordinate ends.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
enum Form {
    /// Tenths of the leading unit.
    Tenths,
    /// Whole minutes.
    Minutes,
    /// Tenths of minutes.
    MinuteTenths,
    /// Seconds with some decimals.
    Seconds(u32),
}

impl Form {
    /// Whole units of this form in one leading unit (hour or degree).
    fn per_unit(self) -> u64 {
        match self {
            Form::Tenths => 10,
            Form::Minutes => 60,
            Form::MinuteTenths => 600,
            Form::Seconds(decimals) => 3600 * 10u64.pow(decimals),
        }
    }

    /// The finest form whose unit on the sky is at least a third of the step; `unit_arcsec` is the leading unit on the sky.
    fn for_step(step_arcsec: f64, unit_arcsec: f64) -> Form {
        let coarse_first = [Form::Tenths, Form::Minutes, Form::MinuteTenths]
            .into_iter()
            .chain((0..=MOST_DECIMALS).map(Form::Seconds));
        // a hair of room, so that a step of exactly three units stays
        let least = step_arcsec / 3.0 * (1.0 - 1e-9);
        coarse_first
            .take_while(|form| unit_arcsec / form.per_unit() as f64 >= least)
            .last()
            .unwrap_or(Form::Tenths)
    }
}

fn right_ascension(ra_deg: f64, step_on_sky_arcsec: f64, cos_dec: f64) -> String {
    let form = Form::for_step(step_on_sky_arcsec, 15.0 * 3600.0 * cos_dec);
    let per_hour = form.per_unit();
    let units = (ra_deg / 15.0 * per_hour as f64).round().max(0.0) as u64 % (24 * per_hour);
    written(units, form, ["h", "m", "s"])
}

fn declination(dec_deg: f64, step_arcsec: f64) -> String {
    let form = Form::for_step(step_arcsec, 3600.0);
    let units = (dec_deg.abs() * form.per_unit() as f64).round() as u64;
    let sign = if dec_deg < 0.0 && units > 0 { '-' } else { '+' };
    format!("{sign}{}", written(units, form, ["°", "′", "″"]))
}

fn written(units: u64, form: Form, marks: [&str; 3]) -> String {
    let [one, minute, second] = marks;
    match form {
        Form::Tenths => format!("{:02}.{}{one}", units / 10, units % 10),
        Form::Minutes => format!("{:02}{one}{:02}{minute}", units / 60, units % 60),
        Form::MinuteTenths => format!(
            "{:02}{one}{:02}.{}{minute}",
            units / 600,
            units % 600 / 10,
            units % 10
        ),
        Form::Seconds(decimals) => {
            let scale = 10u64.pow(decimals);
            let (seconds, part) = (units / scale, units % scale);
            let point = if decimals == 0 {
                String::new()
            } else {
                format!(".{part:0width$}", width = decimals as usize)
            };
            format!(
                "{:02}{one}{:02}{minute}{:02}{point}{second}",
                seconds / 3600,
                seconds / 60 % 60,
                seconds % 60
            )
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// DESIGN section 3: the forms; carries by arithmetic.
    #[test]
    fn forms_digits_and_carries() {
        let ra = |deg, step| right_ascension(deg, step, 1.0);
        assert_eq!(ra(83.62875, 1.5), "05h34m30.9s");
        assert_eq!(ra(83.62875, 15.0), "05h34m31s");
        assert_eq!(ra(83.62875, 90.0), "05h34.5m");
        assert_eq!(ra(83.62875, 900.0), "05h35m");
        assert_eq!(ra(83.62875, 54_000.0), "05.6h");
        assert_eq!(ra(83.62875, 0.036), "05h34m30.900s");
        assert_eq!(ra(359.99999, 15.0), "00h00m00s");
        assert_eq!(ra(359.9, 900.0), "00h00m");
        assert_eq!(ra(14.999999, 1.5), "01h00m00.0s");
        assert_eq!(declination(22.017250, 0.1), "+22°01′02.1″");
        assert_eq!(declination(22.017250, 1.0), "+22°01′02″");
        assert_eq!(declination(22.0237, 6.0), "+22°01.4′");
        assert_eq!(declination(22.0237, 60.0), "+22°01′");
        assert_eq!(declination(22.0237, 360.0), "+22.0°");
        assert_eq!(declination(-0.5, 1.0), "-00°30′00″");
        assert_eq!(declination(-0.00001, 1.0), "+00°00′00″");
        assert_eq!(declination(89.99999, 1.0), "+90°00′00″");
        assert_eq!(declination(12.9999999, 1.0), "+13°00′00″");
    }
}
