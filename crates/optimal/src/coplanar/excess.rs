//! Minimum time between circles with excess speed allowed at either end.
//!
//! The unknowns of plain shooting stay three: of the first costate's unit vector the last two components become the
//! guide that stands for primer and excess velocity ([`crate::excess`]). The allowance grows from nothing, from the
//! flight without one; where that path folds it is followed by pseudo-arclength.

use nalgebra::{SMatrix, SVector};
use numerics::arclength::{self, Curve, Ended, Row, Stride};
use numerics::continuation::{Lost, Pace, follow};
use numerics::dual::Dual;
use numerics::newton::{Equations, Goal, Linearised, Solved, newton};
use numerics::ode::{Flow, Mode, Options, Termination, integrate};
use numerics::scalar::Scalar;

use super::extremal::{Augmented, Extremal};
use super::flight::{Flown, fly_from};
use super::shooting::{MAX_STEPS, Unknowns, tangents, trusted};
use super::solve::{self, solve as without_excess};
use crate::excess::{Allowance, MOMENT, launch, left_over};

/// Two circles, a sail, and the excess speeds allowed. Canonical units (au).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Problem {
    /// The circles and the sail.
    pub circles: solve::Problem,
    /// Largest speeds relative to the circles.
    pub allowance: Allowance,
}

/// How the answer was found.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Route {
    /// The allowance grew in steps from nothing.
    Grown,
    /// From where that got stuck, by Newton's method at the whole allowance.
    Leapt,
    /// From where that got stuck, round folds by pseudo-arclength.
    Folded,
}

/// A solved (or nearly solved) extremal, in units of the start radius.
#[derive(Clone, Copy, Debug)]
pub struct Extremum {
    /// First costate, with the guide in the place of the primer, and time.
    pub unknowns: Unknowns,
    /// Largest residual at the polish tolerance.
    pub residual: f64,
    /// How it was found.
    pub route: Route,
}

/// The conditions at arrival when `share` of the allowance is granted.
#[derive(Clone, Copy, Debug)]
struct Shooting {
    ratio: f64,
    lightness: f64,
    /// In units of the start circle's speed.
    allowance: Allowance,
    share: f64,
    tolerance: f64,
}

/// State and costate at departure, on the start circle in its own units.
fn launched<T: Scalar>([l_r, q_u, q_v]: [T; 3], allowance: T) -> Augmented<T> {
    let zero = T::from(0.0);
    if allowance.value() <= 0.0 && q_u.value() == 0.0 && q_v.value() == 0.0 {
        return [zero + 1.0, zero, zero + 1.0, l_r, q_u, q_v];
    }
    let launch = launch([q_u, q_v], allowance);
    // A primer of zero turns into -l_r t, l_r t^2 at once: l_u' = -l_r + l_v v/r, l_v' = -2 l_u v/r + l_v u/r.
    let [l_u, l_v] = launch.primer.unwrap_or([l_r * -MOMENT, l_r * (MOMENT * MOMENT)]);
    let [u, v] = launch.excess;
    [zero + 1.0, u, v + 1.0, l_r, l_u, l_v]
}

impl Shooting {
    fn of(problem: &Problem, tolerance: f64) -> Shooting {
        let circles = &problem.circles;
        let allowance = problem.allowance.times(circles.start_radius.sqrt());
        Shooting { ratio: circles.ratio(), lightness: circles.lightness, allowance, share: 1.0, tolerance }
    }

    /// Distance, then velocity as far as it is not allowed for, in parts of the target's distance and speed.
    fn mismatch<T: Scalar>(&self, [r, u, v, l_r, l_u, l_v]: &Augmented<T>, share: T) -> [T; 3] {
        let root = self.ratio.sqrt();
        let scale = l_r.value().hypot(l_u.value()).hypot(l_v.value()).recip();
        let relative = [*u, *v - root.recip()];
        let [du, dv] = left_over(relative, [*l_u * scale, *l_v * scale], share * self.allowance.arrival);
        [*r / self.ratio - 1.0, du * root, dv * root]
    }

    /// Mismatches, with columns for the two tangents, time and share.
    fn rows(&self, point: &Unknowns, share: f64) -> Option<(SVector<f64, 3>, SMatrix<f64, 3, 4>)> {
        let [first, second] = tangents(&point.costate);
        let guide = std::array::from_fn(|i| Dual { v: point.costate[i], d: [first[i], second[i], 0.0] });
        let share = Dual::<3>::variable(share, 2);
        let start = launched(guide, share * self.allowance.departure);
        let flow = Extremal { lightness: self.lightness };
        let options = Options { tolerance: self.tolerance, max_steps: MAX_STEPS };
        let outcome = integrate(&flow, &start, point.time, &options);
        if outcome.termination != Termination::Reached {
            return None;
        }
        let end = outcome.state;
        let rates = flow.rates(Mode::default(), &end.map(|y| y.v));
        let along: Augmented<Dual<1>> = std::array::from_fn(|i| Dual { v: end[i].v, d: [rates[i]] });
        let (value, slope) = (self.mismatch(&end, share), self.mismatch(&along, Dual::constant(share.v)));
        let jacobian = SMatrix::<f64, 3, 4>::from_fn(|row, column| match column {
            0 | 1 => value[row].d[column],
            2 => slope[row].d[0],
            _ => value[row].d[2],
        });
        let value = SVector::from(value.map(|y| y.v));
        let finite = value.iter().chain(jacobian.iter()).all(|x| x.is_finite());
        finite.then_some((value, jacobian))
    }

    fn moved(point: &Unknowns, a: f64, b: f64, time: f64) -> Unknowns {
        let [first, second] = tangents(&point.costate);
        Unknowns { costate: (point.costate + first * a + second * b).normalize(), time }
    }
}

impl Equations<3> for Shooting {
    type Point = Unknowns;

    fn linearised(&self, point: &Unknowns) -> Option<Linearised<3>> {
        self.rows(point, self.share).map(|(value, jacobian)| (value, jacobian.fixed_columns::<3>(0).into()))
    }

    fn residuals(&self, point: &Unknowns) -> Option<SVector<f64, 3>> {
        self.rows(point, self.share).map(|(value, _)| value)
    }

    fn moved(&self, point: &Unknowns, step: &SVector<f64, 3>) -> Unknowns {
        Shooting::moved(point, step[0], step[1], point.time + step[2])
    }

    fn trusted_fraction(&self, point: &Unknowns, step: &SVector<f64, 3>) -> f64 {
        trusted(point, step)
    }
}

/// The flights of all shares: unknowns, and the share as the parameter.
impl Curve<3, 4> for Shooting {
    type Point = (Unknowns, f64);

    fn linearised(&self, (point, share): &Self::Point) -> Option<Row<3, 4>> {
        if *share < 0.0 {
            return None;
        }
        let (value, mut jacobian) = self.rows(point, *share)?;
        // The time column counts parts of the time.
        jacobian.column_mut(2).scale_mut(point.time);
        Some((value, jacobian))
    }

    fn moved(&self, (point, share): &Self::Point, step: &SVector<f64, 4>) -> Self::Point {
        (Shooting::moved(point, step[0], step[1], point.time * step[2].exp()), share + step[3])
    }

    fn parameter(&self, (_, share): &Self::Point) -> f64 {
        *share
    }
}

/// Tolerance of integrations and residual to reach from step to step, and in the polish.
const CARRY: (f64, f64) = (1e-10, 1e-8);
const POLISH: (f64, f64) = (1e-12, 1e-10);

const PACE: Pace = Pace { first: 0.34, largest: 0.5, smallest: 2e-3, easy_passes: 4 };

/// Restarted where growing got stuck: small steps at first.
const STRIDE: Stride =
    Stride { first: 3e-3, largest: 0.3, smallest: 1e-7, accept: 1e-3, wanted_correction: 0.01, budget: 600 };

fn refine(shooting: &Shooting, start: Unknowns, residual: f64, passes: usize) -> Option<Solved<Unknowns>> {
    newton(shooting, start, &Goal { residual, passes })
}

/// Whether `next` may be the same family of flights as `now`, a step apart.
fn near(now: &Unknowns, next: &Unknowns) -> bool {
    (now.costate - next.costate).norm() < 0.4 && (next.time / now.time).ln().abs() < 0.3
}

/// Follows the flight without excess to the whole allowance.
fn grown(shooting: &Shooting, start: Unknowns, goal: f64) -> Result<Unknowns, Lost<Unknowns>> {
    let solve = |share: f64, guess: Unknowns| {
        let solved = refine(&Shooting { share, ..*shooting }, guess, goal, 8)?;
        (solved.converged && near(&guess, &solved.point)).then_some((solved.point, solved.passes))
    };
    follow(start, &PACE, solve, Unknowns::extrapolated)
}

/// Solves `problem`; `None` when every route failed. The radii must differ by more than one part in ten million.
pub fn solve(problem: &Problem) -> Option<Extremum> {
    let plain = without_excess(&problem.circles)?;
    let gap = problem.circles.ratio().ln().abs();
    let goal = CARRY.1.min(1e-3 * gap);
    let shooting = Shooting::of(problem, CARRY.0);
    let (rough, route) = match grown(&shooting, plain.unknowns, goal) {
        Ok(point) => (point, Route::Grown),
        Err(stuck) => onward(&shooting, &stuck, goal)?,
    };
    let polished = refine(&Shooting::of(problem, POLISH.0), rough, POLISH.1.min(1e-5 * gap), 8)?;
    Some(Extremum { unknowns: polished.point, residual: polished.residual, route })
}

/// From where growing got stuck to the whole allowance.
fn onward(shooting: &Shooting, stuck: &Lost<Unknowns>, goal: f64) -> Option<(Unknowns, Route)> {
    let leapt =
        refine(shooting, stuck.point, goal, 12).filter(|x| x.converged && near(&stuck.point, &x.point));
    if let Some(leapt) = leapt {
        return Some((leapt.point, Route::Leapt));
    }
    let towards = arclength::Goal { parameter: 1.0, sign: 1.0 };
    let followed =
        arclength::follow(shooting, (stuck.point, stuck.parameter), &towards, &STRIDE, &mut |_| true);
    if followed.ended != Ended::Reached {
        return None;
    }
    let landed = refine(shooting, followed.point.0, goal, 12)?;
    landed.converged.then_some((landed.point, Route::Folded))
}

/// Flies `unknowns` (in units of the start radius) to the end, as [`super::flight::fly`] does.
pub fn fly(problem: &Problem, unknowns: &Unknowns) -> Option<Flown> {
    let allowance = problem.allowance.departure * problem.circles.start_radius.sqrt();
    let start = launched(unknowns.costate.into(), allowance);
    fly_from(&problem.circles, &start, unknowns.time, &problem.allowance)
}

#[cfg(test)]
#[path = "excess_tests.rs"]
mod tests;
