//! A robust fit of a fixed place, or of steady motion on a great circle, to directions seen at times.
//!
//! Plain numbers only. Rousseeuw 1984 (least median of squares) finds who keeps the motion; least squares does the rest.

/// The fastest steady motion that is taken for one object's, degrees a day (the owner's design, section 5).
const FASTEST_DEG_PER_DAY: f64 = 5.0;
/// Pairs of sightings tried at most; beyond that they are drawn evenly.
const MOST_PAIRS: usize = 400;
const ARCSEC: f64 = std::f64::consts::PI / 648_000.0;

/// One direction seen at one time.
#[derive(Clone, Copy, Debug)]
pub struct Sighting {
    /// Days, from any beginning.
    pub t_day: f64,
    /// Unit vector.
    pub at: [f64; 3],
    /// Its own step, arcsec.
    pub step_arcsec: f64,
    /// The step of its time, seconds.
    pub step_s: f64,
}

/// A steady motion that most of the sightings keep.
#[derive(Clone, Debug)]
pub struct Steady {
    /// Middle of the times of those that keep it, days.
    middle_day: f64,
    /// Direction then, and the direction of motion, at right angles.
    u: [f64; 3],
    v: [f64; 3],
    /// Radians a day.
    rate: f64,
    /// Which sightings keep it.
    pub keeps: Vec<bool>,
    /// Their scatter about it, arcsec.
    pub scatter_arcsec: f64,
    /// Inverse normal matrix along the motion and across it, arcsec².
    covariance: [[[f64; 2]; 2]; 2],
}

/// The unit vector of a direction.
pub fn vector(ra_deg: f64, dec_deg: f64) -> [f64; 3] {
    let (a, d) = (ra_deg.to_radians(), dec_deg.to_radians());
    [d.cos() * a.cos(), d.cos() * a.sin(), d.sin()]
}

fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

fn cross(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    ]
}

fn unit(a: [f64; 3]) -> Option<[f64; 3]> {
    let n = dot(a, a).sqrt();
    (n > 1e-15).then(|| a.map(|x| x / n))
}

fn mix(a: [f64; 3], x: f64, b: [f64; 3], y: f64) -> [f64; 3] {
    [0, 1, 2].map(|k| a[k] * x + b[k] * y)
}

/// Angle between two unit vectors, arcsec.
fn apart_arcsec(a: [f64; 3], b: [f64; 3]) -> f64 {
    let c = cross(a, b);
    dot(c, c).sqrt().atan2(dot(a, b)) / ARCSEC
}

/// Any direction at right angles to `a`.
fn aside(a: [f64; 3]) -> [f64; 3] {
    let pole = if a[2].abs() < 0.9 {
        [0.0, 0.0, 1.0]
    } else {
        [1.0, 0.0, 0.0]
    };
    unit(cross(pole, a)).unwrap_or([0.0, 1.0, 0.0])
}

/// A motion without its quality: what the search tries.
#[derive(Clone, Copy)]
struct Trial {
    day: f64,
    u: [f64; 3],
    v: [f64; 3],
    rate: f64,
}

impl Trial {
    fn at(&self, t_day: f64) -> [f64; 3] {
        let angle = self.rate * (t_day - self.day);
        mix(self.u, angle.cos(), self.v, angle.sin())
    }

    fn fixed(s: &Sighting) -> Trial {
        Trial {
            day: s.t_day,
            u: s.at,
            v: aside(s.at),
            rate: 0.0,
        }
    }

    fn through(a: &Sighting, b: &Sighting) -> Option<Trial> {
        let days = b.t_day - a.t_day;
        let angle = apart_arcsec(a.at, b.at) * ARCSEC;
        if days == 0.0 || angle == 0.0 || angle / days.abs() > FASTEST_DEG_PER_DAY.to_radians() {
            return None;
        }
        let v = unit(mix(b.at, 1.0, a.at, -dot(a.at, b.at)))?;
        Some(Trial {
            day: a.t_day,
            u: a.at,
            v,
            rate: angle / days,
        })
    }

    fn residual(&self, s: &Sighting) -> f64 {
        apart_arcsec(self.at(s.t_day), s.at)
    }

    /// What a sighting's own last digits leave open on this motion, arcsec.
    fn tolerance(&self, s: &Sighting) -> f64 {
        s.step_arcsec.max(0.05) + self.rate.abs() / ARCSEC * s.step_s / 86_400.0
    }
}

/// How well a trial does: the residual of the sighting that makes the majority, in arcsec.
fn quality(trial: &Trial, sightings: &[Sighting], majority: usize, room: &mut Vec<f64>) -> f64 {
    room.clear();
    room.extend(sightings.iter().map(|s| trial.residual(s)));
    let (_, r, _) = room.select_nth_unstable_by(majority - 1, f64::total_cmp);
    *r
}

/// Who keeps a trial: within three of the own tolerances or of the scatter that the majority shows.
fn keepers(trial: &Trial, sightings: &[Sighting], scale: f64) -> Vec<bool> {
    sightings
        .iter()
        .map(|s| trial.residual(s) <= 3.0 * trial.tolerance(s).max(scale))
        .collect()
}

/// The steady motion that most of the sightings keep; `timed` is false where not all of them have a time: then only a fixed
/// place is tried. `None` for fewer than three.
pub fn fit(sightings: &[Sighting], timed: bool) -> Option<Steady> {
    let n = sightings.len();
    if n < 3 {
        return None;
    }
    let majority = ((n + 3) / 2).clamp(3, n).max(n / 2 + 1);
    let mut room = Vec::with_capacity(n);
    let mut best = |trials: &mut dyn Iterator<Item = Trial>| {
        trials
            .map(|trial| (quality(&trial, sightings, majority, &mut room), trial))
            .min_by(|a, b| a.0.total_cmp(&b.0))
    };
    let stride = n.div_ceil(MOST_PAIRS);
    let (fixed_r, fixed) = best(&mut sightings.iter().step_by(stride).map(Trial::fixed))?;
    let steady = if timed {
        let pairs = n * (n - 1) / 2;
        let skip = pairs.div_ceil(MOST_PAIRS);
        let all = (0..n).flat_map(|i| (i + 1..n).map(move |j| (i, j)));
        best(
            &mut all
                .step_by(skip)
                .filter_map(|(i, j)| Trial::through(&sightings[i], &sightings[j])),
        )
    } else {
        None
    };
    let scale = |r: f64| 1.2 * r;
    let count = |keeps: &[bool]| keeps.iter().filter(|k| **k).count();
    let mut tolerances: Vec<f64> = sightings.iter().map(|s| fixed.tolerance(s)).collect();
    tolerances.sort_by(f64::total_cmp);
    let usual = tolerances[n / 2];
    let fixed_keeps = keepers(&fixed, sightings, scale(fixed_r).min(2.0 * usual));
    let (trial, r) = match steady {
        Some((r, trial))
            if fixed_r > (1.5 * r).max(2.0 * usual)
                || count(&keepers(&trial, sightings, scale(r))) > count(&fixed_keeps) =>
        {
            (trial, r)
        }
        _ => (fixed, fixed_r),
    };
    refine(trial, sightings, scale(r), timed)
}

/// Least squares over those that keep the motion, twice, with the scatter and the uncertainty of what it foretells.
fn refine(mut trial: Trial, sightings: &[Sighting], scale: f64, timed: bool) -> Option<Steady> {
    let mut keeps = keepers(&trial, sightings, scale);
    let mut covariance = [[[0.0; 2]; 2]; 2];
    let mut scatter = 0.0;
    for _ in 0..3 {
        let kept: Vec<&Sighting> = sightings
            .iter()
            .zip(&keeps)
            .filter(|(_, k)| **k)
            .map(|(s, _)| s)
            .collect();
        if kept.len() < 3 {
            return None;
        }
        let middle = kept.iter().map(|s| s.t_day).sum::<f64>() / kept.len() as f64;
        trial = moved_to(&trial, middle);
        let moving = timed && kept.iter().any(|s| (s.t_day - middle).abs() > 1e-6);
        let normal = cross(trial.u, trial.v);
        let (mut matrix, mut right) = ([[[0.0; 2]; 2]; 2], [[0.0; 2]; 2]);
        for s in &kept {
            let tau = s.t_day - middle;
            let here = trial.at(s.t_day);
            let ahead = cross(normal, here);
            let off = [dot(s.at, ahead) / ARCSEC, dot(s.at, normal) / ARCSEC];
            let weight = trial.tolerance(s).powi(-2);
            for axis in 0..2 {
                let basis = basis(axis, trial.rate, tau, moving);
                for i in 0..2 {
                    for j in 0..2 {
                        matrix[axis][i][j] += weight * basis[i] * basis[j];
                    }
                    right[axis][i] += weight * basis[i] * off[axis];
                }
            }
        }
        let mut change = [[0.0; 2]; 2];
        for axis in 0..2 {
            covariance[axis] = inverse(matrix[axis]);
            for i in 0..2 {
                change[axis][i] = covariance[axis][i][0] * right[axis][0]
                    + covariance[axis][i][1] * right[axis][1];
            }
        }
        trial = corrected(&trial, change)?;
        let sum: f64 = kept.iter().map(|s| trial.residual(s).powi(2)).sum();
        // two coordinates each, less the two or four that were fitted
        let free = (2 * kept.len())
            .saturating_sub(if moving { 4 } else { 2 })
            .max(1);
        scatter = (2.0 * sum / free as f64).sqrt();
        keeps = keepers(&trial, sightings, scatter.min(scale));
    }
    Some(Steady {
        middle_day: trial.day,
        u: trial.u,
        v: trial.v,
        rate: trial.rate,
        keeps,
        scatter_arcsec: scatter,
        covariance,
    })
}

/// The same motion counted from another day.
fn moved_to(trial: &Trial, day: f64) -> Trial {
    let angle = trial.rate * (day - trial.day);
    Trial {
        day,
        u: mix(trial.u, angle.cos(), trial.v, angle.sin()),
        v: mix(trial.v, angle.cos(), trial.u, -angle.sin()),
        rate: trial.rate,
    }
}

/// What a change of the two parameters of an axis does `tau` days from the middle: place, and place a day.
fn basis(axis: usize, rate: f64, tau: f64, moving: bool) -> [f64; 2] {
    if !moving {
        return [1.0, 0.0];
    }
    let angle = rate * tau;
    match axis {
        0 => [1.0, tau],
        _ if angle.abs() < 1e-6 => [1.0, tau],
        _ => [angle.cos(), angle.sin() / rate],
    }
}

/// The inverse of a symmetric 2×2 matrix; of its first element alone where the second stands still.
fn inverse(m: [[f64; 2]; 2]) -> [[f64; 2]; 2] {
    let det = m[0][0] * m[1][1] - m[0][1] * m[1][0];
    if det <= 1e-12 * m[0][0] * m[1][1].max(1e-30) || m[1][1] == 0.0 {
        return [[1.0 / m[0][0].max(1e-30), 0.0], [0.0, 0.0]];
    }
    [
        [m[1][1] / det, -m[0][1] / det],
        [-m[1][0] / det, m[0][0] / det],
    ]
}

/// The motion with its corrections applied: arcsec and arcsec a day, along and across.
fn corrected(trial: &Trial, change: [[f64; 2]; 2]) -> Option<Trial> {
    let normal = cross(trial.u, trial.v);
    let shift = mix(
        trial.v,
        change[0][0] * ARCSEC,
        normal,
        change[1][0] * ARCSEC,
    );
    let u = unit([0, 1, 2].map(|k| trial.u[k] + shift[k]))?;
    let rate = mix(
        trial.v,
        trial.rate + change[0][1] * ARCSEC,
        normal,
        change[1][1] * ARCSEC,
    );
    // the velocity stays at right angles to the place
    let rate = mix(rate, 1.0, u, -dot(rate, u));
    let speed = dot(rate, rate).sqrt();
    let v = if speed < 1e-15 {
        unit(mix(trial.v, 1.0, u, -dot(trial.v, u)))?
    } else {
        unit(rate)?
    };
    Some(Trial {
        day: trial.day,
        u,
        v,
        rate: speed,
    })
}

impl Steady {
    fn trial(&self) -> Trial {
        Trial {
            day: self.middle_day,
            u: self.u,
            v: self.v,
            rate: self.rate,
        }
    }

    /// How many sightings keep it.
    pub fn kept_by(&self) -> usize {
        self.keeps.iter().filter(|k| **k).count()
    }

    /// How fast it is, arcsec an hour.
    pub fn arcsec_per_h(&self) -> f64 {
        self.rate / ARCSEC / 24.0
    }

    /// How far a sighting is from it, arcsec.
    pub fn distance_arcsec(&self, sighting: &Sighting) -> f64 {
        self.trial().residual(sighting)
    }

    /// How far a sighting may be from it: three of its own steps, of the scatter of those that keep it, and of the
    /// uncertainty of what they foretell, which grows with the time from them; at most what 5° a day allows.
    pub fn allowed_arcsec(&self, sighting: &Sighting) -> f64 {
        let trial = self.trial();
        let tau = sighting.t_day - self.middle_day;
        let variance: f64 = (0..2)
            .map(|axis| {
                let b = basis(axis, self.rate, tau, self.covariance[axis][1][1] > 0.0);
                let c = self.covariance[axis];
                b[0] * (c[0][0] * b[0] + c[0][1] * b[1]) + b[1] * (c[1][0] * b[0] + c[1][1] * b[1])
            })
            .sum();
        let foretold = variance
            .max(0.0)
            .sqrt()
            .min(3600.0 * FASTEST_DEG_PER_DAY * (tau.abs() + 0.01));
        3.0 * trial
            .tolerance(sighting)
            .max(self.scatter_arcsec)
            .max(foretold)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A great circle at a constant rate, from its definition: the fit must find it with one sighting far off.
    #[test]
    fn steady_motion_with_one_outlier() {
        let (u, v) = (vector(30.0, 10.0), aside(vector(30.0, 10.0)));
        let sightings: Vec<Sighting> = (0..7)
            .map(|k| {
                let t = f64::from(k) * 0.9;
                let angle = (2.0 * t).to_radians();
                let at = mix(u, angle.cos(), v, angle.sin());
                let at = if k == 3 {
                    unit(mix(at, 1.0, [0.0, 0.0, 1.0], 0.01)).unwrap()
                } else {
                    at
                };
                Sighting {
                    t_day: t,
                    at,
                    step_arcsec: 1.0,
                    step_s: 1.0,
                }
            })
            .collect();
        let fit = fit(&sightings, true).unwrap();
        assert_eq!(fit.keeps, [true, true, true, false, true, true, true]);
        assert!((fit.arcsec_per_h() - 2.0 * 3600.0 / 24.0).abs() < 0.5);
        assert!(fit.distance_arcsec(&sightings[3]) > fit.allowed_arcsec(&sightings[3]));
    }

    /// What moves faster than 5° a day is no steady motion of one object.
    #[test]
    fn too_fast_is_not_fitted() {
        let a = Sighting {
            t_day: 0.0,
            at: vector(0.0, 0.0),
            step_arcsec: 1.0,
            step_s: 1.0,
        };
        let b = Sighting {
            t_day: 1.0,
            at: vector(6.0, 0.0),
            step_arcsec: 1.0,
            step_s: 1.0,
        };
        assert!(Trial::through(&a, &b).is_none());
        let c = Sighting {
            at: vector(4.0, 0.0),
            ..b
        };
        assert!(Trial::through(&a, &c).is_some());
    }
}
