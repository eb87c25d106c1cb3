//! Small systems of nonlinear equations: Newton's method with backtracking, and Levenberg-Marquardt for bad
//! starts.
//!
//! Sources: J. E. Dennis and R. B. Schnabel, *Numerical Methods for Unconstrained Optimization and Nonlinear
//! Equations* (1983), section 6.3; D. W. Marquardt, *J. SIAM* 11 (1963) 431-441.

use nalgebra::{Const, DimMin, SMatrix, SVector};

/// A value and its Jacobian.
pub type Linearised<const N: usize> = (SVector<f64, N>, SMatrix<f64, N, N>);

/// `N` equations in `N` unknowns, where a point may live on a curved surface and is moved by tangent steps.
pub trait Equations<const N: usize> {
    /// Where the unknowns stand.
    type Point: Clone;

    /// Residuals and their derivatives with respect to the step of [`Equations::moved`]; `None` where the
    /// equations cannot be evaluated.
    fn linearised(&self, point: &Self::Point) -> Option<Linearised<N>>;

    /// Residuals alone.
    fn residuals(&self, point: &Self::Point) -> Option<SVector<f64, N>>;

    /// The point after a step.
    fn moved(&self, point: &Self::Point, step: &SVector<f64, N>) -> Self::Point;

    /// The largest fraction (at most 1) of `step` that may be trusted.
    fn trusted_fraction(&self, point: &Self::Point, step: &SVector<f64, N>) -> f64;
}

/// When to stop.
#[derive(Clone, Copy, Debug)]
pub struct Goal {
    /// Largest residual, in the equations' own scaling.
    pub residual: f64,
    /// Most passes; each evaluates one Jacobian.
    pub passes: usize,
}

/// A solve that ended, well or not: compare `residual` with the goal.
#[derive(Clone, Debug)]
pub struct Solved<P> {
    /// The best point seen.
    pub point: P,
    /// Largest residual there.
    pub residual: f64,
    /// Passes made.
    pub passes: usize,
    /// Whether the goal was met.
    pub converged: bool,
}

/// Damped Newton from `start`; `None` when the start cannot be evaluated.
pub fn newton<const N: usize, E: Equations<N>>(
    equations: &E,
    start: E::Point,
    goal: &Goal,
) -> Option<Solved<E::Point>>
where
    Const<N>: DimMin<Const<N>, Output = Const<N>>,
{
    let mut point = start;
    let (mut value, mut jacobian) = equations.linearised(&point)?;
    let mut passes = 1;
    loop {
        let residual = value.amax();
        let converged = residual <= goal.residual;
        if converged || passes >= goal.passes || !residual.is_finite() {
            return Some(Solved { point, residual, passes, converged });
        }
        let Some(full) = jacobian.lu().solve(&-value) else {
            return Some(Solved { point, residual, passes, converged });
        };
        let mut fraction = equations.trusted_fraction(&point, &full);
        // The next Jacobian is needed anyway when the step holds, as it mostly does: take both at once.
        let mut next = None;
        for attempt in 0..8 {
            let trial = equations.moved(&point, &(full * fraction));
            let better = |v: &SVector<f64, N>| v.norm() <= (1.0 - 0.1 * fraction) * value.norm();
            if attempt == 0 {
                if let Some(both) = equations.linearised(&trial).filter(|(v, _)| better(v)) {
                    next = Some((trial, both));
                    break;
                }
            } else if equations.residuals(&trial).is_some_and(|v| better(&v)) {
                if let Some(both) = equations.linearised(&trial) {
                    next = Some((trial, both));
                }
                break;
            }
            fraction *= 0.4;
        }
        let Some((trial, both)) = next else {
            return Some(Solved { point, residual, passes, converged });
        };
        point = trial;
        (value, jacobian) = both;
        passes += 1;
    }
}

/// Levenberg-Marquardt from `start`; `None` when the start cannot be evaluated.
pub fn levenberg_marquardt<const N: usize, E: Equations<N>>(
    equations: &E,
    start: E::Point,
    goal: &Goal,
) -> Option<Solved<E::Point>>
where
    Const<N>: DimMin<Const<N>, Output = Const<N>>,
{
    let mut point = start;
    let (mut value, mut jacobian) = equations.linearised(&point)?;
    let (mut passes, mut damping) = (1, 1e-2);
    loop {
        let residual = value.amax();
        let converged = residual <= goal.residual;
        if converged || passes >= goal.passes || !residual.is_finite() || damping > 1e12 {
            return Some(Solved { point, residual, passes, converged });
        }
        let mut normal = jacobian.transpose() * jacobian;
        let gradient = jacobian.transpose() * value;
        for i in 0..N {
            normal[(i, i)] *= 1.0 + damping;
        }
        let trial = normal
            .lu()
            .solve(&-gradient)
            .map(|step| equations.moved(&point, &(step * equations.trusted_fraction(&point, &step))));
        let held = trial.and_then(|trial| {
            let both = equations.linearised(&trial)?;
            (both.0.norm() < value.norm()).then_some((trial, both))
        });
        match held {
            Some((trial, both)) => {
                point = trial;
                (value, jacobian) = both;
                damping = (damping * 0.1).max(1e-12);
            }
            None => damping *= 6.0,
        }
        passes += 1;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Rosenbrock's valley as equations: 10 (y - x^2) = 0, 1 - x = 0.
    struct Valley;

    impl Equations<2> for Valley {
        type Point = [f64; 2];

        fn linearised(&self, &[x, y]: &[f64; 2]) -> Option<Linearised<2>> {
            Some((
                SVector::from([10.0 * (y - x * x), 1.0 - x]),
                SMatrix::from_row_slice(&[-20.0 * x, 10.0, -1.0, 0.0]),
            ))
        }

        fn residuals(&self, point: &[f64; 2]) -> Option<SVector<f64, 2>> {
            self.linearised(point).map(|(value, _)| value)
        }

        fn moved(&self, point: &[f64; 2], step: &SVector<f64, 2>) -> [f64; 2] {
            [point[0] + step[0], point[1] + step[1]]
        }

        fn trusted_fraction(&self, _: &[f64; 2], _: &SVector<f64, 2>) -> f64 {
            1.0
        }
    }

    const GOAL: Goal = Goal { residual: 1e-12, passes: 200 };

    #[test]
    fn both_methods_find_the_planted_root() {
        for solved in [newton(&Valley, [-1.2, 1.0], &GOAL), levenberg_marquardt(&Valley, [-1.2, 1.0], &GOAL)]
        {
            let solved = solved.expect("the start can be evaluated");
            assert!(solved.converged);
            assert!((solved.point[0] - 1.0).abs() < 1e-12 && (solved.point[1] - 1.0).abs() < 1e-12);
        }
    }

    #[test]
    fn newton_takes_few_passes() {
        let solved = newton(&Valley, [-1.2, 1.0], &GOAL).expect("the start can be evaluated");
        // Measured: 11 passes with backtracking; undamped Newton takes 3 but climbs to a residual of 48 first.
        assert!(solved.passes <= 15, "{} passes", solved.passes);
    }

    #[test]
    fn an_exhausted_budget_is_reported_as_such() {
        let goal = Goal { passes: 1, ..GOAL };
        let solved = newton(&Valley, [-1.2, 1.0], &goal).expect("the start can be evaluated");
        assert!(!solved.converged && solved.residual > goal.residual);
    }
}
