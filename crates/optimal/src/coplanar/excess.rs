//! Minimum time between circles with excess speed allowed at either end.
//!
//! The unknowns of plain shooting stay three: of the first costate's unit vector the last two components become the
//! guide that stands for primer and excess velocity ([`crate::excess`]). The allowance grows from nothing, from the
//! flight without one; where that path folds it is followed by pseudo-arclength.

use nalgebra::{SMatrix, SVector};
use numerics::arclength::{self, Curve, Ended, Row, Stride};
use numerics::continuation::{Pace, follow};
use numerics::dual::Dual;
use numerics::newton::{Equations, Goal, Linearised, Solved, newton};
use numerics::ode::{Flow, Mode, Options, Termination, integrate};
use numerics::scalar::Scalar;

use super::extremal::{Augmented, Extremal};
use super::flight::{Flown, fly_from};
use super::shooting::{MAX_STEPS, Unknowns, tangents, trusted};
use super::solve::{self, solve as without_excess};
use crate::excess::{Allowance, MOMENT, launch, left_over, pieces};

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
    /// Both allowances grew together (or there was nothing to grow).
    Together,
    /// The arrival's grew first.
    ArrivalFirst,
    /// The departure's grew first.
    DepartureFirst,
    /// From the flight of a stronger sail, or to a nearer target.
    Neighbour,
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
    /// Allowances at shares 0 and 1, in units of the start circle's speed.
    from: Allowance,
    to: Allowance,
    share: f64,
    tolerance: f64,
}

/// State and costate at departure, on the start circle in its own units.
fn launched<T: Scalar>([l_r, q_u, q_v]: [T; 3], allowance: T) -> Augmented<T> {
    let launch = launch([q_u, q_v], allowance);
    // A primer of zero turns into -l_r t, l_r t^2 at once: l_u' = -l_r + l_v v/r, l_v' = -2 l_u v/r + l_v u/r.
    let [l_u, l_v] = launch.primer.unwrap_or([l_r * -MOMENT, l_r * (MOMENT * MOMENT)]);
    let [u, v] = launch.excess;
    [T::from(1.0), u, v + 1.0, l_r, l_u, l_v]
}

impl Shooting {
    /// With the whole allowance granted.
    fn of(problem: &Problem, tolerance: f64) -> Shooting {
        let circles = &problem.circles;
        let to = problem.allowance.times(circles.start_radius.sqrt());
        let (ratio, lightness) = (circles.ratio(), circles.lightness);
        Shooting { ratio, lightness, from: to, to, share: 1.0, tolerance }
    }

    /// Distance, then velocity as far as it is not allowed for, in parts of the target's distance and speed.
    fn mismatch<T: Scalar>(&self, [r, u, v, l_r, l_u, l_v]: &Augmented<T>, allowed: T) -> [T; 3] {
        let root = self.ratio.sqrt();
        let scale = l_r.value().hypot(l_u.value()).hypot(l_v.value()).recip();
        let relative = [*u, *v - root.recip()];
        let [du, dv] = left_over(relative, [*l_u * scale, *l_v * scale], allowed);
        [*r / self.ratio - 1.0, du * root, dv * root]
    }

    /// The Hamiltonian, whose sign no longer follows from the start being on a circle.
    fn hamiltonian(&self, point: &Unknowns) -> f64 {
        let start = launched(point.costate.into(), self.to.departure);
        Extremal { lightness: self.lightness }.hamiltonian(&start)
    }

    /// Mismatches, with columns for the two tangents, time and share.
    fn rows(&self, point: &Unknowns, share: f64) -> Option<(SVector<f64, 3>, SMatrix<f64, 3, 4>)> {
        let [first, second] = tangents(&point.costate);
        let guide = std::array::from_fn(|i| Dual { v: point.costate[i], d: [first[i], second[i], 0.0] });
        let share = Dual::<3>::variable(share, 2);
        let granted = |from: f64, to: f64| share * (to - from) + from;
        let start = launched(guide, granted(self.from.departure, self.to.departure));
        let allowed = granted(self.from.arrival, self.to.arrival);
        let flow = Extremal { lightness: self.lightness };
        let options = Options { tolerance: self.tolerance, max_steps: MAX_STEPS };
        let outcome = integrate(&flow, &start, point.time, &options);
        if outcome.termination != Termination::Reached {
            return None;
        }
        let end = outcome.state;
        let rates = flow.rates(Mode::default(), &end.map(|y| y.v));
        let along: Augmented<Dual<1>> = std::array::from_fn(|i| Dual { v: end[i].v, d: [rates[i]] });
        let (value, slope) = (self.mismatch(&end, allowed), self.mismatch(&along, Dual::constant(allowed.v)));
        let jacobian = SMatrix::<f64, 3, 4>::from_fn(|row, column| match column {
            0 | 1 => value[row].d[column],
            2 => slope[row].d[0],
            _ => value[row].d[2],
        });
        let value = SVector::from(value.map(|y| y.v));
        let finite = value.iter().chain(jacobian.iter()).all(|x| x.is_finite());
        finite.then_some((value, jacobian))
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
        point.stepped(step)
    }

    fn trusted_fraction(&self, point: &Unknowns, step: &SVector<f64, 3>) -> f64 {
        trusted(point, step)
    }
}

/// The flights of all shares: unknowns, and the share as the parameter.
///
/// Steps are taken in the three components of the costate, with a row that keeps it a unit vector: a basis of the
/// tangent plane would turn over somewhere along the curve.
impl Curve<4, 5> for Shooting {
    type Point = (Unknowns, f64);

    fn linearised(&self, (point, share): &Self::Point) -> Option<Row<4, 5>> {
        if *share < 0.0 {
            return None;
        }
        let (value, by_tangents) = self.rows(point, *share)?;
        let [first, second] = tangents(&point.costate);
        let mut jacobian = SMatrix::<f64, 4, 5>::zeros();
        for row in 0..3 {
            let across = first * by_tangents[(row, 0)] + second * by_tangents[(row, 1)];
            jacobian.fixed_view_mut::<1, 3>(row, 0).copy_from(&across.transpose());
            // The time column counts parts of the time.
            jacobian[(row, 3)] = by_tangents[(row, 2)] * point.time;
            jacobian[(row, 4)] = by_tangents[(row, 3)];
        }
        jacobian.fixed_view_mut::<1, 3>(3, 0).copy_from(&point.costate.transpose());
        Some((value.push(0.0), jacobian))
    }

    fn moved(&self, (point, share): &Self::Point, step: &SVector<f64, 5>) -> Self::Point {
        let costate = (point.costate + step.fixed_rows::<3>(0)).normalize();
        (Unknowns { costate, time: point.time * step[3].exp() }, share + step[4])
    }

    fn parameter(&self, (_, share): &Self::Point) -> f64 {
        *share
    }
}

/// Tolerance of integrations and residual to reach from step to step, and in the polish.
const CARRY: (f64, f64) = (1e-10, 1e-8);
const POLISH: (f64, f64) = (1e-12, 1e-10);

/// Along the curve from the start.
const STRIDE: Stride =
    Stride { first: 0.1, largest: 0.5, smallest: 1e-4, accept: 1e-3, wanted_correction: 0.01, budget: 120 };

/// Natural steps, which cross the kink where the primer reaches zero better than a curve's tangent does.
const PACE: Pace = Pace { first: 0.1, largest: 0.5, smallest: 2e-3, easy_passes: 4 };

/// Restarted where natural steps got stuck.
const CAREFUL: Stride = Stride { first: 3e-3, largest: 0.3, smallest: 1e-7, budget: 600, ..STRIDE };

fn refine(shooting: &Shooting, start: Unknowns, residual: f64, passes: usize) -> Option<Solved<Unknowns>> {
    newton(shooting, start, &Goal { residual, passes })
}

/// Whether `next` may be the same family of flights as `now`, a step apart.
fn near(now: &Unknowns, next: &Unknowns) -> bool {
    (now.costate - next.costate).norm() < 0.4 && (next.time / now.time).ln().abs() < 0.3
}

/// Follows a flight from the allowance `from` to `to`; the sign of the Hamiltonian is not looked at.
fn grown(at: &Shooting, start: Unknowns, way: [Allowance; 2], goal: f64) -> Option<Unknowns> {
    pieces(way).try_fold(start, |start, [from, to]| grown_piece(&Shooting { from, to, ..*at }, start, goal))
}

fn grown_piece(leg: &Shooting, start: Unknowns, goal: f64) -> Option<Unknowns> {
    let along = |start: (Unknowns, f64), stride: &Stride| {
        let towards = arclength::Goal { parameter: 1.0, sign: 1.0 };
        let followed = arclength::follow(leg, start, &towards, stride, &mut |_| true);
        (followed.ended == Ended::Reached).then_some(followed.point.0)
    };
    let landed = |point: Unknowns| refine(leg, point, goal, 12).filter(|x| x.converged).map(|x| x.point);
    let quick = along((start, 0.0), &STRIDE).and_then(landed);
    if quick.is_some() {
        return quick;
    }
    let solve = |share: f64, guess: Unknowns| {
        let solved = refine(&Shooting { share, ..*leg }, guess, goal, 8)?;
        (solved.converged && near(&guess, &solved.point)).then_some((solved.point, solved.passes))
    };
    let stuck = match follow(start, &PACE, solve, Unknowns::extrapolated) {
        Ok(point) => return Some(point),
        Err(stuck) => stuck,
    };
    // Where only a part will be used from here on, the rest of the way is one step.
    let leap = refine(leg, stuck.point, goal, 12).filter(|x| x.converged && near(&stuck.point, &x.point));
    leap.map(|x| x.point)
        .or_else(|| along((stuck.point, stuck.parameter), &CAREFUL).and_then(landed))
        .or_else(|| along((start, 0.0), &Stride { wanted_correction: 2e-3, ..CAREFUL }).and_then(landed))
}

/// The flight of shooting `at` by one of the ways that start from `plain`, the flight without excess.
fn by_way(at: &Shooting, plain: Unknowns, goal: f64) -> Option<(Unknowns, Route)> {
    const NONE: Allowance = Allowance::NONE;
    let both = at.to;
    let arrival = Allowance { departure: 0.0, ..both };
    let departure = Allowance { arrival: 0.0, ..both };
    let minimum = |point: &Unknowns| at.hamiltonian(point) > 0.0;
    let in_turn = |first: Allowance| {
        if first == NONE || first == both {
            return None;
        }
        let halfway = grown(at, plain, [NONE, first], goal)?;
        grown(at, halfway, [first, both], goal).filter(minimum)
    };
    grown(at, plain, [NONE, both], goal)
        .filter(minimum)
        .map(|x| (x, Route::Together))
        .or_else(|| in_turn(arrival).map(|x| (x, Route::ArrivalFirst)))
        .or_else(|| in_turn(departure).map(|x| (x, Route::DepartureFirst)))
}

/// Neighbours from which to come (2 in 100 random flights with up to 5 km/s at both ends need one) where no way leads from the flight without excess: factor on the lightness number,
/// power of the ratio of radii.
const NEIGHBOURS: [(f64, f64); 6] = [(1.5, 1.0), (2.2, 1.0), (4.0, 1.0), (1.0, 0.8), (1.0, 0.6), (8.0, 1.0)];

/// The flight found for a neighbour, carried over.
fn by_neighbour(problem: &Problem, (factor, power): (f64, f64), goal: f64) -> Option<(Unknowns, Route)> {
    let circles = problem.circles;
    let at = |share: f64| {
        let lightness = circles.lightness * factor.powf(1.0 - share);
        let target_radius = circles.start_radius * circles.ratio().powf(power + share * (1.0 - power));
        let circles = solve::Problem { lightness, target_radius, ..circles };
        Shooting::of(&Problem { circles, ..*problem }, CARRY.0)
    };
    let first = at(0.0);
    let plain = without_excess(&solve::Problem {
        start_radius: 1.0,
        target_radius: first.ratio,
        lightness: first.lightness,
    })?;
    let (there, _) = by_way(&first, plain.unknowns, goal)?;
    let solve = |share: f64, guess: Unknowns| {
        let between = at(share);
        let solved = refine(&between, guess, goal, 8)?;
        let held =
            solved.converged && near(&guess, &solved.point) && between.hamiltonian(&solved.point) > 0.0;
        held.then_some((solved.point, solved.passes))
    };
    let point = follow(there, &PACE, solve, Unknowns::extrapolated).ok()?;
    Some((point, Route::Neighbour))
}

/// Solves `problem`; `None` when every route failed. The radii must differ by more than one part in ten million.
pub fn solve(problem: &Problem) -> Option<Extremum> {
    let plain = without_excess(&problem.circles)?;
    if !problem.allowance.is_some() {
        return Some(Extremum { unknowns: plain.unknowns, residual: plain.residual, route: Route::Together });
    }
    let gap = problem.circles.ratio().ln().abs();
    let goal = CARRY.1.min(1e-3 * gap);
    let (rough, route) = by_way(&Shooting::of(problem, CARRY.0), plain.unknowns, goal)
        .or_else(|| NEIGHBOURS.into_iter().find_map(|from| by_neighbour(problem, from, goal)))?;
    let polished = refine(&Shooting::of(problem, POLISH.0), rough, POLISH.1.min(1e-5 * gap), 8)?;
    Some(Extremum { unknowns: polished.point, residual: polished.residual, route })
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
