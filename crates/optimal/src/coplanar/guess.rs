//! First guesses: a small table of solved flights over (ratio of radii, lightness number).
//!
//! The table is made by `examples/make_guess_table.rs`; a test solves a sample of its nodes anew.

use nalgebra::Vector3;

use super::guess_table::{LIGHTNESS_LN, NODES, RATIO_LOG_LN};
use super::shooting::Unknowns;

/// One node: l_r min(t, 1), l_u, l_v, each over their common length, and ln t.
pub type Node = [f32; 4];

/// Scales a unit first costate so that it varies little as the radii draw together and flights become short.
pub fn node(solution: &Unknowns) -> Node {
    let l = solution.costate;
    let scaled = Vector3::new(l.x * solution.time.min(1.0), l.y, l.z).normalize();
    [scaled.x as f32, scaled.y as f32, scaled.z as f32, solution.time.ln() as f32]
}

/// Undoes [`node`].
pub fn unknowns(node: &[f64; 4]) -> Unknowns {
    let time = node[3].exp();
    Unknowns { costate: Vector3::new(node[0] / time.min(1.0), node[1], node[2]).normalize(), time }
}

/// Index of the interval that holds `x` (clamped to the table) and the place in it, 0 to 1.
fn place(axis: &[f64], x: f64) -> (usize, f64) {
    let upper = axis.partition_point(|&node| node <= x).clamp(1, axis.len() - 1);
    let (low, high) = (axis[upper - 1], axis[upper]);
    (upper - 1, ((x - low) / (high - low)).clamp(0.0, 1.0))
}

/// The bilinear guess for `ratio` (not 1) and `lightness`, clamped to the edge of the table.
pub fn look_up(ratio: f64, lightness: f64) -> Unknowns {
    let outward = usize::from(ratio > 1.0);
    let closeness = ratio.ln().abs().ln();
    let (i, x) = place(&RATIO_LOG_LN, closeness);
    let (j, y) = place(&LIGHTNESS_LN, lightness.ln());
    let mut sum = [0.0; 4];
    for (di, dj, weight) in
        [(0, 0, (1.0 - x) * (1.0 - y)), (1, 0, x * (1.0 - y)), (0, 1, (1.0 - x) * y), (1, 1, x * y)]
    {
        let node = NODES[outward][i + di][j + dj];
        for (s, n) in sum.iter_mut().zip(node) {
            *s += weight * f64::from(n);
        }
    }
    // Below the closest node times go on falling with the fifth root of the distance between the circles (measured:
    // 17.7, 11.1 and 8.0 d at 1e-5, 1e-6 and 2e-7 of the radius, at 1 mm/s^2).
    sum[3] += (closeness - RATIO_LOG_LN[0]).min(0.0) / 5.0;
    unknowns(&sum)
}

/// The table's axes, for the program that makes it and the test that samples it: ln |ln ratio| and ln lightness.
pub fn axes() -> (&'static [f64], &'static [f64]) {
    (&RATIO_LOG_LN, &LIGHTNESS_LN)
}

/// A node of the table: `outward` or inward, and its indices on the two axes.
pub fn table_node(outward: bool, ratio_index: usize, lightness_index: usize) -> Node {
    NODES[usize::from(outward)][ratio_index][lightness_index]
}

/// Ratio and lightness number of the table's node nearest to a request.
pub fn nearest_node(ratio: f64, lightness: f64) -> (f64, f64) {
    let nearest = |axis: &[f64], x: f64| {
        let (i, t) = place(axis, x);
        axis[if t < 0.5 { i } else { i + 1 }]
    };
    let closeness = nearest(&RATIO_LOG_LN, ratio.ln().abs().ln()).exp();
    ((if ratio > 1.0 { closeness } else { -closeness }).exp(), nearest(&LIGHTNESS_LN, lightness.ln()).exp())
}
