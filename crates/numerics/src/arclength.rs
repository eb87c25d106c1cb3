//! Pseudo-arclength continuation: following a curve of solutions round its folds.
//!
//! E. L. Allgower and K. Georg, *Numerical Continuation Methods* (1990), chapters 2 and 6. Steps are accepted on
//! the size of the last correction, without an evaluation to confirm it, so most cost one Jacobian or two.

use nalgebra::{Const, DimMin, SMatrix, SVector};

/// Residuals and their derivatives: `N` rows, `M` columns, the last for the parameter.
pub type Row<const N: usize, const M: usize> = (SVector<f64, N>, SMatrix<f64, N, M>);

/// `N` equations in `M` = `N` + 1 unknowns, the last of which is the parameter of the curve.
pub trait Curve<const N: usize, const M: usize> {
    /// Where the unknowns stand.
    type Point: Clone;

    /// Residuals and derivatives with respect to the step of [`Curve::moved`]; `None` where they do not exist.
    fn linearised(&self, point: &Self::Point) -> Option<Row<N, M>>;

    /// The point after a step.
    fn moved(&self, point: &Self::Point, step: &SVector<f64, M>) -> Self::Point;

    /// The parameter, in the scale of its column.
    fn parameter(&self, point: &Self::Point) -> f64;
}

/// How to follow a curve. Lengths are in the scale of the columns.
#[derive(Clone, Copy, Debug)]
pub struct Stride {
    /// First step.
    pub first: f64,
    /// Largest step.
    pub largest: f64,
    /// Below this the curve counts as lost.
    pub smallest: f64,
    /// A correction at most this long ends the corrections of a step.
    pub accept: f64,
    /// Wanted length of the first correction over that of the step: smaller is more careful.
    pub wanted_correction: f64,
    /// Most Jacobians.
    pub budget: usize,
}

/// Why following ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Ended {
    /// On the goal.
    Reached,
    /// Told to by the observer.
    Told,
    /// The step became too small.
    Lost,
    /// The budget of Jacobians ran out.
    Spent,
}

/// The end of a followed curve.
#[derive(Clone, Debug)]
pub struct Followed<P> {
    /// The last point on the curve; only as exact as `Stride::accept` squared, or so.
    pub point: P,
    /// Why it ended.
    pub ended: Ended,
    /// Jacobians evaluated.
    pub jacobians: usize,
}

/// Which way and how far.
#[derive(Clone, Copy, Debug)]
pub struct Goal {
    /// Parameter to end on, in the scale of its column.
    pub parameter: f64,
    /// Sign of the parameter's first change.
    pub sign: f64,
}

/// Follows the curve through `start` until the parameter reaches the goal or `observe` (shown every accepted point)
/// returns false.
pub fn follow<const N: usize, const M: usize, C: Curve<N, M>>(
    curve: &C,
    start: C::Point,
    goal: &Goal,
    stride: &Stride,
    observe: &mut dyn FnMut(&C::Point) -> bool,
) -> Followed<C::Point>
where
    Const<M>: DimMin<Const<M>, Output = Const<M>>,
    Const<N>: DimMin<Const<N>, Output = Const<N>>,
{
    let mut jacobians = 1;
    let end = |point, ended, jacobians| Followed { point, ended, jacobians };
    let mut towards = SVector::<f64, M>::zeros();
    towards[M - 1] = goal.sign;
    let Some(mut tangent) = curve.linearised(&start).and_then(|(_, j)| tangent(&j, &towards)) else {
        return end(start, Ended::Lost, jacobians);
    };
    let mut now = start;
    let mut step = stride.first;
    let mut bend: Option<SVector<f64, M>> = None;
    loop {
        if jacobians >= stride.budget {
            return end(now, Ended::Spent, jacobians);
        }
        if step < stride.smallest {
            return end(now, Ended::Lost, jacobians);
        }
        let ahead = |length: f64| {
            let straight = tangent * length;
            let bent = bend.map_or(straight, |bend| straight + bend * (0.5 * length * length));
            curve.moved(&now, &bent)
        };
        let here = curve.parameter(&now);
        let there = curve.parameter(&ahead(step));
        if (here - goal.parameter) * (there - goal.parameter) <= 0.0 && here != goal.parameter {
            // Land: go along the curve as far as the goal, then hold the parameter and correct the rest.
            let length = step * (goal.parameter - here) / (there - here);
            let (landed, used) = land(curve, ahead(length), goal.parameter, stride);
            jacobians += used;
            if let Some(point) = landed {
                observe(&point);
                return end(point, Ended::Reached, jacobians);
            }
            step *= 0.4;
            continue;
        }
        let mut trial = ahead(step);
        let mut first_correction = 0.0;
        let mut last_correction = f64::INFINITY;
        let mut accepted = None;
        for pass in 0..4 {
            let Some((value, jacobian)) = curve.linearised(&trial) else { break };
            jacobians += 1;
            let Some(correction) = bordered(&jacobian, &tangent, &-value, 0.0) else { break };
            let length = correction.norm();
            if pass == 0 {
                first_correction = length;
            }
            if length.is_nan() || length > 0.3 * step.max(stride.accept) || length > 0.7 * last_correction {
                break;
            }
            last_correction = length;
            trial = curve.moved(&trial, &correction);
            if length <= stride.accept {
                accepted = bordered(&jacobian, &tangent, &SVector::zeros(), 1.0).map(|t| t.normalize());
                break;
            }
        }
        let Some(next) = accepted.filter(|next| next.dot(&tangent) > 0.5) else {
            step *= 0.4;
            bend = None;
            continue;
        };
        bend = Some((next - tangent) / step);
        tangent = next;
        now = trial;
        if !observe(&now) {
            return end(now, Ended::Told, jacobians);
        }
        let growth = (stride.wanted_correction * step / first_correction.max(1e-12)).cbrt();
        step = (step * growth.clamp(0.4, 2.0)).min(stride.largest);
    }
}

/// Newton with the parameter held at `parameter`.
fn land<const N: usize, const M: usize, C: Curve<N, M>>(
    curve: &C,
    start: C::Point,
    parameter: f64,
    stride: &Stride,
) -> (Option<C::Point>, usize)
where
    Const<N>: DimMin<Const<N>, Output = Const<N>>,
{
    let mut shift = SVector::<f64, M>::zeros();
    shift[M - 1] = parameter - curve.parameter(&start);
    let mut point = curve.moved(&start, &shift);
    let mut last = f64::INFINITY;
    for used in 1..=6 {
        let Some((value, jacobian)) = curve.linearised(&point) else { return (None, used) };
        let square = jacobian.fixed_columns::<N>(0).into_owned();
        let Some(step) = square.lu().solve(&-value) else { return (None, used) };
        let length = step.norm();
        if length.is_nan() || length > 0.5 || length > 0.7 * last {
            return (None, used);
        }
        last = length;
        let mut full = SVector::<f64, M>::zeros();
        full.fixed_rows_mut::<N>(0).copy_from(&step);
        point = curve.moved(&point, &full);
        if length <= stride.accept {
            return (Some(point), used);
        }
    }
    (None, 6)
}

/// Solves the equations' rows with `value` and one more row, `tangent . x = along`.
fn bordered<const N: usize, const M: usize>(
    jacobian: &SMatrix<f64, N, M>,
    tangent: &SVector<f64, M>,
    value: &SVector<f64, N>,
    along: f64,
) -> Option<SVector<f64, M>>
where
    Const<M>: DimMin<Const<M>, Output = Const<M>>,
{
    let mut matrix = SMatrix::<f64, M, M>::zeros();
    matrix.fixed_rows_mut::<N>(0).copy_from(jacobian);
    matrix.row_mut(N).copy_from(&tangent.transpose());
    let mut right = SVector::<f64, M>::zeros();
    right.fixed_rows_mut::<N>(0).copy_from(value);
    right[N] = along;
    matrix.lu().solve(&right)
}

/// Unit tangent of the curve whose part along `towards` is positive.
fn tangent<const N: usize, const M: usize>(
    jacobian: &SMatrix<f64, N, M>,
    towards: &SVector<f64, M>,
) -> Option<SVector<f64, M>>
where
    Const<M>: DimMin<Const<M>, Output = Const<M>>,
{
    bordered(jacobian, towards, &SVector::zeros(), 1.0).map(|t| t.normalize())
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The fold x^2 = 1 - p, followed from (x, p) = (1, 0) round p = 1 to (-1, 0).
    struct Fold;

    impl Curve<1, 2> for Fold {
        type Point = [f64; 2];

        fn linearised(&self, &[x, p]: &[f64; 2]) -> Option<Row<1, 2>> {
            Some((SVector::from([x * x - 1.0 + p]), SMatrix::from_row_slice(&[2.0 * x, 1.0])))
        }

        fn moved(&self, point: &[f64; 2], step: &SVector<f64, 2>) -> [f64; 2] {
            [point[0] + step[0], point[1] + step[1]]
        }

        fn parameter(&self, point: &[f64; 2]) -> f64 {
            point[1]
        }
    }

    const STRIDE: Stride = Stride {
        first: 0.05,
        largest: 0.3,
        smallest: 1e-6,
        accept: 1e-3,
        wanted_correction: 0.02,
        budget: 500,
    };

    #[test]
    fn a_fold_is_rounded_and_the_goal_landed_on() {
        let mut highest = 0.0f64;
        let goal = Goal { parameter: -3.0, sign: 1.0 };
        let followed = follow(&Fold, [1.0, 0.0], &goal, &STRIDE, &mut |p| {
            highest = highest.max(p[1]);
            true
        });
        assert_eq!(followed.ended, Ended::Reached);
        // Past the fold at p = 1 the curve comes back to p = -3 on the other side, x = -2.
        assert!(highest > 0.98 && highest < 1.0 + 1e-5);
        assert!((followed.point[0] + 2.0).abs() < 1e-6 && (followed.point[1] + 3.0).abs() < 1e-15);
    }

    #[test]
    fn a_goal_out_of_reach_spends_the_budget() {
        let goal = Goal { parameter: 2.0, sign: 1.0 };
        let followed = follow(&Fold, [1.0, 0.0], &goal, &STRIDE, &mut |_| true);
        assert_eq!(followed.ended, Ended::Spent);
        assert!(followed.jacobians >= STRIDE.budget && followed.jacobians < STRIDE.budget + 10);
    }

    #[test]
    fn the_observer_can_stop() {
        let goal = Goal { parameter: -3.0, sign: 1.0 };
        let followed = follow(&Fold, [1.0, 0.0], &goal, &STRIDE, &mut |p| p[0] > 0.0);
        assert_eq!(followed.ended, Ended::Told);
        assert!(followed.point[0] <= 0.0);
    }
}
