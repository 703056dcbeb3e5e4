//! The slow part of an instant (nutation, the Earth's motion) from a grid of quarter days, shared by a whole run.
//!
//! Cubic Hermite between nodes, slopes from the nodes about (five-point, as exact as the cubic). Nodes are computed when
//! first needed, from 1900 to 2100, and kept; a value does not depend on the order of asking. Against the direct way:
//! under 0.5 µas of the matrix and of the aberration (`tests/sky_grid.rs`). One node costs about what one direct
//! [`super::moment::Moment`] costs, an isolated instant six of them: for runs of many instants only.

use super::earth::{self, Earth};
use super::nutation;
use super::time::J2000;
use sofars::erst::{era00, gmst06};
use sofars::pnp::{bpn2xy, eors, fw2m, pfw06, s06};
use std::sync::OnceLock;

/// What is slow to compute of an instant.
#[derive(Clone, Copy, Debug)]
pub struct Slow {
    /// Bias-precession-nutation, GCRS to true equator and equinox of date.
    pub matrix: [[f64; 3]; 3],
    /// Equation of the origins, radians.
    pub equation_of_origins_rad: f64,
    /// The Earth.
    pub earth: Earth,
}

/// The slow part computed directly at a TT instant.
pub fn direct(tt: (f64, f64)) -> Slow {
    let matrix = nutation::matrix(tt);
    let (x, y) = bpn2xy(&matrix);
    Slow {
        matrix,
        equation_of_origins_rad: eors(&matrix, s06(tt.0, tt.1, x, y)),
        earth: earth::at(tt),
    }
}

/// Near enough for trying many instants: the largest terms of nutation and of the Earth's motion.
pub fn quick(tt: (f64, f64)) -> Slow {
    let (gamma, phi, psi, epsilon) = pfw06(tt.0, tt.1);
    let (d_psi, d_epsilon) = nutation::largest(tt);
    // the origins without the equinoxes' complementary terms (3 mas): ERA − GMST − Δψ cos ε
    let polynomial = era00(tt.0, tt.1) - gmst06(tt.0, tt.1, tt.0, tt.1);
    Slow {
        matrix: fw2m(gamma, phi, psi + d_psi, epsilon + d_epsilon),
        equation_of_origins_rad: polynomial - d_psi * epsilon.cos(),
        earth: earth::quick(tt),
    }
}

/// Nine of the matrix, the equation of the origins, twelve of the Earth.
const VALUES: usize = 22;
type Node = [f64; VALUES];

const NODES_A_DAY: f64 = 4.0;
/// The nodes lie at J2000.0 + k/4 days.
const FIRST: i64 = -36_520 * 4;
const LAST: i64 = 36_520 * 4;
const IN_BLOCK: usize = 128;
const BLOCKS: usize = ((LAST - FIRST) as usize) / IN_BLOCK + 1;

type Block = [OnceLock<Node>; IN_BLOCK];
static BLOCK: [OnceLock<Box<Block>>; BLOCKS] = [const { OnceLock::new() }; BLOCKS];

/// The slow part at a TT instant from the grid; `None` outside of 1900 to 2100, where only [`direct`] will do.
pub fn at(tt: (f64, f64)) -> Option<Slow> {
    let quarter = ((tt.0 - J2000) + tt.1) * NODES_A_DAY;
    // two nodes to the left and three to the right are needed
    if !(FIRST as f64 + 2.0..LAST as f64 - 3.0).contains(&quarter) {
        return None;
    }
    let left = quarter.floor();
    let u = quarter - left;
    let left = left as i64;
    let near: [&Node; 6] = std::array::from_fn(|i| node(left + i as i64 - 2));
    // Hermite's basis, with the slopes' five-point weights folded in: one weight a node
    let (u2, u3) = (u * u, u * u * u);
    let (from, to) = (2.0 * u3 - 3.0 * u2 + 1.0, 3.0 * u2 - 2.0 * u3);
    let (slope_from, slope_to) = ((u3 - 2.0 * u2 + u) / 12.0, (u3 - u2) / 12.0);
    let weights = [
        slope_from,
        -8.0 * slope_from + slope_to,
        from - 8.0 * slope_to,
        to + 8.0 * slope_from,
        -slope_from + 8.0 * slope_to,
        -slope_to,
    ];
    let mut value = [0.0; VALUES];
    for (node, weight) in near.into_iter().zip(weights) {
        for (sum, x) in value.iter_mut().zip(node) {
            *sum += weight * x;
        }
    }
    Some(unpack(&value))
}

fn node(k: i64) -> &'static Node {
    let index = (k - FIRST) as usize;
    let block =
        BLOCK[index / IN_BLOCK].get_or_init(|| Box::new([const { OnceLock::new() }; IN_BLOCK]));
    block[index % IN_BLOCK].get_or_init(|| pack(&direct((J2000, k as f64 / NODES_A_DAY))))
}

fn pack(slow: &Slow) -> Node {
    let mut node = [0.0; VALUES];
    let parts = slow
        .matrix
        .iter()
        .chain(&slow.earth.heliocentric)
        .chain(&slow.earth.barycentric);
    for (place, x) in node.iter_mut().zip(parts.flatten()) {
        *place = *x;
    }
    node[VALUES - 1] = slow.equation_of_origins_rad;
    node
}

fn unpack(value: &Node) -> Slow {
    let rows = |from: usize| -> [f64; 3] { std::array::from_fn(|i| value[from + i]) };
    Slow {
        matrix: [rows(0), rows(3), rows(6)],
        equation_of_origins_rad: value[VALUES - 1],
        earth: Earth {
            heliocentric: [rows(9), rows(12)],
            barycentric: [rows(15), rows(18)],
        },
    }
}
