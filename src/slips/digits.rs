//! One digit of an angle changed, or two neighbours exchanged: every angle that such a slip could have come from.

use crate::report::Angle;

/// An angle with a changed digit.
#[derive(Clone, Copy, Debug)]
pub struct Changed {
    /// The angle as it may have been meant.
    pub angle: Angle,
    /// Which part of it was changed.
    pub part: usize,
    /// Value of the changed digit's place in the part: 1 for its units, 10 for its tens, 0.1 for the first decimal.
    pub place: f64,
    /// By how much the digit changed; 0 for exchanged ones.
    pub off_by: u64,
    /// A digit was put in front that may have been lost.
    pub lost: bool,
}

/// The angle with two neighbouring digits exchanged, within a part or across the mark between two parts.
pub fn exchanged(angle: &Angle) -> impl Iterator<Item = Changed> + use<> {
    let mut list = Vec::new();
    // every digit with its part and its place in that part, as they stand in a row
    let mut row: Vec<(usize, u32, u64)> = Vec::new();
    for (part, p) in angle.parts().iter().enumerate() {
        let digits = u32::from(p.number.whole_digits) + u32::from(p.number.places);
        for k in (0..digits.min(18)).rev() {
            row.push((part, k, p.number.mantissa / 10u64.pow(k) % 10));
        }
    }
    for pair in row.windows(2) {
        let [(part, k, left), (next, l, right)] = [pair[0], pair[1]];
        if left == right {
            continue;
        }
        let mut changed = *angle;
        for (part, k, old, new) in [(part, k, left, right), (next, l, right, left)] {
            let m = &mut changed.parts_mut()[part].number.mantissa;
            *m = *m - old * 10u64.pow(k) + new * 10u64.pow(k);
        }
        let places = angle.parts()[part].number.places;
        list.push(Changed {
            angle: changed,
            part,
            place: 10f64.powi(k as i32 - i32::from(places)),
            off_by: 0,
            lost: false,
        });
    }
    list.retain(in_range);
    list.into_iter()
}

/// The angle with one digit wrong, or with a leading digit of its first part lost.
pub fn miskeyed(angle: &Angle) -> impl Iterator<Item = Changed> + use<> {
    let mut list = Vec::new();
    for part in 0..angle.parts().len() {
        let number = angle.parts()[part].number;
        let digits = u32::from(number.whole_digits) + u32::from(number.places);
        for k in 0..digits.min(18) {
            let unit = 10u64.pow(k);
            let old = number.mantissa / unit % 10;
            for new in (0..10).filter(|new| *new != old) {
                let mut changed = *angle;
                changed.parts_mut()[part].number.mantissa =
                    number.mantissa - old * unit + new * unit;
                list.push(Changed {
                    angle: changed,
                    part,
                    place: 10f64.powi(k as i32 - i32::from(number.places)),
                    off_by: old.abs_diff(new),
                    lost: false,
                });
            }
        }
        if part == 0 && digits < 18 && number.whole_digits < 3 {
            for new in 1..10 {
                let mut changed = *angle;
                let first = &mut changed.parts_mut()[0].number;
                first.mantissa += new * 10u64.pow(digits);
                first.whole_digits += 1;
                list.push(Changed {
                    angle: changed,
                    part,
                    place: 10f64.powi(i32::from(number.whole_digits)),
                    off_by: new,
                    lost: true,
                });
            }
        }
    }
    list.retain(in_range);
    list.into_iter()
}

/// Minutes and seconds below 60.
fn in_range(changed: &Changed) -> bool {
    changed
        .angle
        .parts()
        .iter()
        .skip(1)
        .all(|part| part.number.value() < 60.0)
}
