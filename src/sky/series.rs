//! Sine and cosine for long sums of terms: without branches or calls, so that the compiler takes several terms at once.

/// Terms that are summed together; the tables are cut into such blocks.
pub(crate) const BLOCK: usize = 16;

/// Sine and cosine of an angle given in turns, within 1e-15 up to a hundred thousand turns beyond the rounding of the
/// angle itself. By Taylor's series of a quarter of the angle (at most π/4) and doubling it twice.
#[inline(always)]
pub(crate) fn sin_cos(turns: f64) -> (f64, f64) {
    // adding and taking away 1.5 × 2^52 rounds to the nearest whole number
    const WHOLE: f64 = 6_755_399_441_055_744.0;
    let y = turns - ((turns + WHOLE) - WHOLE);
    let z = y * y;
    let (mut sin, mut cos) = (COEFFICIENTS[15], COEFFICIENTS[16]);
    let mut power = 15;
    while power > 1 {
        power -= 2;
        sin = sin * z + COEFFICIENTS[power];
        cos = cos * z + COEFFICIENTS[power + 1];
    }
    cos = cos * z + 1.0;
    sin *= y;
    for _ in 0..2 {
        (sin, cos) = (2.0 * sin * cos, 1.0 - 2.0 * sin * sin);
    }
    (sin, cos)
}

/// (π/2)^k / k! with the signs of the series of sine (odd k) and cosine (even k).
const COEFFICIENTS: [f64; 17] = {
    let mut all = [1.0; 17];
    let (mut size, mut k) = (1.0, 1);
    while k < 17 {
        size *= std::f64::consts::FRAC_PI_2 / k as f64;
        all[k] = if k % 4 < 2 { size } else { -size };
        k += 1;
    }
    all
};

#[cfg(test)]
mod tests {
    use super::*;

    /// Against the standard library's.
    #[test]
    fn as_the_library_has_it() {
        for k in -200_000..200_000 {
            let turns = f64::from(k) * 0.000_037_19;
            let (sin, cos) = sin_cos(turns);
            let (sine, cosine) = (turns * std::f64::consts::TAU).sin_cos();
            // the library's angle is rounded when it is multiplied by 2π
            let rounding = 1e-15 + turns.abs() * 1e-15;
            assert!((sin - sine).abs() < rounding && (cos - cosine).abs() < rounding);
        }
    }
}
