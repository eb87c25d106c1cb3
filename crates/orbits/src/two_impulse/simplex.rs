//! Downhill search of a simplex in up to three variables, without derivatives and without chance.
//!
//! J. A. Nelder, R. Mead, The Computer Journal 7 (1965) 308-313, with their coefficients.

/// Longest search, evaluations of the function.
const EVALUATIONS_MAX: u32 = 600;

/// A place and the function there.
pub(super) type Point = ([f64; 3], f64);

/// The lowest place found from `start`, moving only along variables whose `step` is not zero.
///
/// Ends when the simplex is `shrink` times its first size. A function that is infinite somewhere is never followed
/// there, as long as it is finite at the start.
pub(super) fn descend(
    mut f: impl FnMut([f64; 3]) -> f64,
    start: [f64; 3],
    step: [f64; 3],
    shrink: f64,
) -> Point {
    let axes: Vec<usize> = (0..3).filter(|&axis| step[axis] != 0.0).collect();
    let n = axes.len();
    let mut simplex: Vec<Point> = vec![(start, f(start))];
    for &axis in &axes {
        let mut x = start;
        x[axis] += step[axis];
        simplex.push((x, f(x)));
    }
    if n == 0 {
        return simplex[0];
    }
    let mut evaluations = 0;
    while evaluations < EVALUATIONS_MAX {
        simplex.sort_by(|a, b| a.1.total_cmp(&b.1));
        let size = |x: &[f64; 3]| {
            let along = |&axis: &usize| ((x[axis] - simplex[0].0[axis]) / step[axis]).abs();
            axes.iter().map(along).fold(0.0, f64::max)
        };
        if simplex.iter().map(|(x, _)| size(x)).fold(0.0, f64::max) < shrink {
            break;
        }
        let mut centre = [0.0; 3];
        for (x, _) in &simplex[..n] {
            for i in 0..3 {
                centre[i] += x[i] / n as f64;
            }
        }
        let worst = simplex[n];
        let mut try_at = |reach: f64| {
            let mut x = start;
            for &axis in &axes {
                x[axis] = centre[axis] + reach * (worst.0[axis] - centre[axis]);
            }
            evaluations += 1;
            (x, f(x))
        };
        let reflected = try_at(-1.0);
        if reflected.1 < simplex[0].1 {
            let expanded = try_at(-2.0);
            simplex[n] = if expanded.1 < reflected.1 { expanded } else { reflected };
            continue;
        }
        if reflected.1 < simplex[n - 1].1 {
            simplex[n] = reflected;
            continue;
        }
        let contracted = if reflected.1 < worst.1 { try_at(-0.5) } else { try_at(0.5) };
        if contracted.1 < worst.1.min(reflected.1) {
            simplex[n] = contracted;
            continue;
        }
        let best = simplex[0].0;
        for point in &mut simplex[1..] {
            for i in 0..3 {
                point.0[i] = 0.5 * (point.0[i] + best[i]);
            }
            point.1 = f(point.0);
            evaluations += 1;
        }
    }
    simplex.sort_by(|a, b| a.1.total_cmp(&b.1));
    simplex[0]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn valley_of_rosenbrock_is_followed_to_its_end() {
        // H. H. Rosenbrock, The Computer Journal 3 (1960) 175-184: the minimum 0 lies at (1, 1), from (-1.2, 1).
        let mut evaluations = 0;
        let valley = |x: [f64; 3]| {
            evaluations += 1;
            100.0 * (x[1] - x[0] * x[0]).powi(2) + (1.0 - x[0]).powi(2)
        };
        let (x, lowest) = descend(valley, [-1.2, 1.0, 7.0], [0.5, 0.5, 0.0], 1e-7);
        assert!((x[0] - 1.0).abs() < 1e-6 && (x[1] - 1.0).abs() < 1e-6 && lowest < 1e-12, "{x:?}");
        assert_eq!(x[2], 7.0, "a variable without a step stays");
        // Nelder and Mead report some 150 evaluations to 2.5e-9; ours goes on to 1e-14.
        assert!(evaluations < 300, "{evaluations}");
    }

    #[test]
    fn one_variable_and_three_settle_too() {
        let bowl = |x: [f64; 3]| (x[0] - 2.0).powi(2) + 3.0 * (x[1] + x[0]).powi(2) + x[2].powi(4);
        let (x, _) = descend(bowl, [0.0, -2.0, 0.0], [1.0, 0.0, 0.0], 1e-8);
        assert!((x[0] - 2.0).abs() < 1e-7);
        let (x, lowest) = descend(bowl, [0.0, 0.0, 0.5], [1.0, 1.0, 0.3], 1e-8);
        assert!(lowest < 1e-12 && (x[1] + 2.0).abs() < 1e-5, "{x:?} {lowest}");
    }

    #[test]
    fn walls_are_not_climbed() {
        let walled = |x: [f64; 3]| if x[0] > 1.0 { f64::INFINITY } else { (x[0] - 3.0).powi(2) };
        let (x, lowest) = descend(walled, [0.0, 0.0, 0.0], [0.4, 0.0, 0.0], 1e-9);
        assert!(x[0] <= 1.0 && (lowest - 4.0).abs() < 1e-7, "{x:?}");
    }
}
