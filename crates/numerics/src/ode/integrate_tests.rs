//! Order, accuracy, work and events of the integrator, against planted solutions.

use std::f64::consts::{PI, TAU};

use super::*;
use crate::dual::Dual;

/// A Kepler orbit of eccentricity `e` about a unit attractor, from perihelion: period 2 pi.
struct Kepler;

impl<T: Scalar> Flow<T, 4> for Kepler {
    fn rates(&self, _: Mode, &[x, y, vx, vy]: &[T; 4]) -> [T; 4] {
        let r2 = x * x + y * y;
        let pull = -(r2 * r2.sqrt()).recip();
        [vx, vy, x * pull, y * pull]
    }
}

fn perihelion(e: f64) -> [f64; 4] {
    [1.0 - e, 0.0, 0.0, ((1.0 + e) / (1.0 - e)).sqrt()]
}

fn options(tolerance: f64) -> Options {
    Options { tolerance, max_steps: 10_000 }
}

fn largest_gap(a: &[f64; 4], b: &[f64; 4]) -> f64 {
    a.iter().zip(b).map(|(a, b)| (a - b).abs()).fold(0.0, f64::max)
}

#[test]
fn a_kepler_orbit_closes() {
    for (e, tolerance, growth) in [(0.0, 1e-10, 20.0), (0.6, 1e-10, 400.0), (0.6, 1e-13, 400.0)] {
        // Local errors add up over some 40 steps, and an error in energy grows along the orbit: the position at
        // perihelion moves by about 3 pi (1 + e)^1.5 / (1 - e)^2.5, some 190 at e = 0.6, per unit of energy.
        let outcome = integrate(&Kepler, &perihelion(e), TAU, &options(tolerance));
        assert_eq!(outcome.termination, Termination::Reached);
        let gap = largest_gap(&outcome.state, &perihelion(e));
        assert!(gap < growth * tolerance, "e {e}, tolerance {tolerance:e}: gap {gap:e}");
    }
}

#[test]
fn the_solution_is_of_order_eight_and_the_interpolant_of_order_seven() {
    // One step of length h from perihelion, compared with the same flow at a tight tolerance.
    let e = 0.3;
    let errors = |h: f64| {
        let loose = Options { tolerance: 1e6, max_steps: 1 };
        let mut run = Run::new(&Kepler, &perihelion(e), h, &loose);
        let end = run.attempt(h).state;
        let step = run.interpolant(h, &end);
        let exact = |x: f64| integrate(&Kepler, &perihelion(e), x * h, &options(1e-15)).state;
        (largest_gap(&end, &exact(1.0)), largest_gap(&step.at(0.37), &exact(0.37)))
    };
    let (coarse, fine) = (errors(0.4), errors(0.2));
    let orders = ((coarse.0 / fine.0).log2(), (coarse.1 / fine.1).log2());
    // The error of one step is one order higher than the method's: 9 and 8, give or take the next term.
    assert!((8.3..10.0).contains(&orders.0), "step order {}", orders.0);
    assert!((7.3..9.3).contains(&orders.1), "interpolant order {}", orders.1);
}

#[test]
fn work_is_as_expected() {
    let outcome = integrate(&Kepler, &perihelion(0.3), TAU, &options(1e-10));
    let counts = (outcome.steps, outcome.rejected, outcome.evaluations);
    // Twelve evaluations a step, eleven a rejection, and two to choose the first step.
    assert_eq!(outcome.evaluations, 2 + 12 * outcome.steps + 11 * outcome.rejected);
    // Measured when written; a change here is a change of method or of step control.
    assert_eq!(counts, WORK, "work changed");
}

const WORK: (usize, usize, usize) = (31, 5, 429);

#[test]
fn dense_output_follows_the_orbit() {
    let mut worst: f64 = 0.0;
    let mut covered = 0.0;
    integrate_observed(&Kepler, &perihelion(0.0), TAU, &options(1e-9), &mut |step| {
        assert_eq!(step.start, covered);
        covered = step.end();
        for x in [0.1, 0.35, 0.5, 0.85] {
            let t = step.start + x * step.length;
            worst = worst.max(largest_gap(&step.at(x), &[t.cos(), t.sin(), -t.sin(), t.cos()]));
        }
    });
    assert!((covered - TAU).abs() < 1e-14);
    assert!(worst < 1e-7, "{worst:e}"); // measured 1e-8: one order below the steps themselves
}

#[test]
fn backwards_undoes_forwards() {
    let there = integrate(&Kepler, &perihelion(0.5), 3.0, &options(1e-12));
    let back = integrate(&Kepler, &there.state, -3.0, &options(1e-12));
    assert!(largest_gap(&back.state, &perihelion(0.5)) < 1e-10);
}

/// A clock that counts up at rate 1 and drops to rate `slow` beyond `edge`; may stop at `end`.
struct Clock {
    edge: f64,
    slow: f64,
    end: f64,
}

impl<T: Scalar> Flow<T, 1> for Clock {
    fn rates(&self, mode: Mode, _: &[T; 1]) -> [T; 1] {
        [T::from(if mode.is_set(0) { self.slow } else { 1.0 })]
    }

    fn events(&self) -> usize {
        2
    }

    fn event(&self, index: usize, y: &[T; 1]) -> T {
        y[0] - if index == 0 { self.edge } else { self.end }
    }

    fn kind(&self, index: usize) -> EventKind {
        if index == 0 { EventKind::Switch } else { EventKind::Stop }
    }
}

#[test]
fn a_switch_is_located_and_sensitivities_jump() {
    let clock = Clock { edge: 1.0, slow: 0.25, end: 100.0 };
    let outcome = integrate(&clock, &[Dual::<1>::variable(0.5, 0)], 2.0, &options(1e-10));
    // 0.5 at full rate up to the edge, then 1.5 at a quarter; starting later by d means d/4 more at the end.
    assert!((outcome.state[0].v - 1.375).abs() < 1e-13);
    assert!((outcome.state[0].d[0] - 0.25).abs() < 1e-9, "sensitivity {}", outcome.state[0].d[0]);
}

#[test]
fn a_stop_ends_on_the_event() {
    let clock = Clock { edge: 1.0, slow: 0.25, end: 1.25 };
    let outcome = integrate(&clock, &[0.0], 50.0, &options(1e-10));
    assert_eq!(outcome.termination, Termination::Stopped(1));
    assert!((outcome.time - 2.0).abs() < 1e-12, "{}", outcome.time);
}

/// A circle with an event just inside its rightmost point: two crossings a short time apart.
struct Grazing(f64);

impl<T: Scalar> Flow<T, 3> for Grazing {
    fn rates(&self, mode: Mode, &[x, y, _]: &[T; 3]) -> [T; 3] {
        [-y, x, T::from(if mode.is_set(0) { 1.0 } else { 0.0 })]
    }

    fn events(&self) -> usize {
        1
    }

    fn event(&self, _: usize, y: &[T; 3]) -> T {
        y[0] - self.0
    }
}

#[test]
fn two_crossings_inside_one_step_are_both_found() {
    // Beyond x = cos(0.2) for an angle of 0.4: the third state counts the time spent there.
    let outcome = integrate(&Grazing(0.2f64.cos()), &[-1.0, 0.0, 0.0], TAU, &options(1e-6));
    assert!((outcome.state[2] - 0.4).abs() < 1e-5, "{}", outcome.state[2]);
}

#[test]
fn a_spent_budget_and_a_blow_up_are_told_apart() {
    let few = Options { tolerance: 1e-12, max_steps: 3 };
    assert_eq!(integrate(&Kepler, &perihelion(0.5), PI, &few).termination, Termination::TooManySteps);
    // Falling straight into the attractor ends at t = pi / (2 sqrt 2).
    let fall = integrate(&Kepler, &[1.0, 0.0, 0.0, 0.0], 2.0, &options(1e-10));
    assert_ne!(fall.termination, Termination::Reached);
    assert!((fall.time - PI / 8f64.sqrt()).abs() < 1e-3, "{}", fall.time);
}
