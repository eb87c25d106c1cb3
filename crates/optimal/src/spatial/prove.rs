//! Flying a spatial extremal once more: the path for people, and the evidence.

use nalgebra::{Vector3, Vector6};
use numerics::dual::Dual;
use numerics::ode::{DenseStep, Flow, Mode, Options, Termination, integrate_observed};
use sail::trajectory::{Sample, Sampling, Trajectory};

use super::ends::{State, coasting_rate};
use super::excess_rows::launched;
use super::extremal::Extremal;
use super::polish::{Conditions, Exactness, Flight, Kind, polish};
use crate::certificate::{Evidence, Verdict};
use crate::excess::{Allowance, End, Used};

/// A flown spatial extremal. Canonical units (au).
#[derive(Clone, Debug)]
pub struct Flown {
    /// The flight.
    pub flight: Flight,
    /// The path; times count from departure.
    pub trajectory: Trajectory,
    /// What the flight proves.
    pub evidence: Evidence,
    /// State at arrival.
    pub end: State,
    /// Excess speeds used at the two ends.
    pub excess: Used,
}

/// The extremal with two quadratures: angle swept, and velocity change by the sail.
type Recorded = [f64; 14];

struct Recorder(Extremal);

fn augmented<T: Copy>(y: &[T; 14]) -> [T; 12] {
    std::array::from_fn(|i| y[i])
}

impl Flow<f64, 14> for Recorder {
    fn rates(&self, mode: Mode, y: &Recorded) -> Recorded {
        let rates = self.0.rates(mode, &augmented(y));
        let (r, v) = (Vector3::new(y[0], y[1], y[2]), Vector3::new(y[3], y[4], y[5]));
        let (_, acceleration) = self.0.attitude(&augmented(y));
        let mut all = [0.0; 14];
        all[..12].copy_from_slice(&rates);
        all[12] = r.cross(&v).norm() / r.norm_squared();
        all[13] = acceleration;
        all
    }
}

impl Recorder {
    fn sample(&self, time: f64, y: &Recorded) -> Sample {
        let state = augmented(y);
        let rates = self.0.rates(Mode::default(), &state);
        let seeded = std::array::from_fn(|i| Dual::<1> { v: state[i], d: [rates[i]] });
        let (normal, acceleration) = self.0.attitude(&seeded);
        let turn = Vector3::from(normal.map(|n| n.d[0])).norm();
        let (r, v) = (Vector3::new(y[0], y[1], y[2]), Vector3::new(y[3], y[4], y[5]));
        Sample::spatial(time, r, v, Vector3::from(normal.map(|n| n.v)), acceleration.v, turn)
    }
}

/// Polishes a traced flight and proves it, with the utmost exactness where the usual one does not suffice.
pub fn answered(kind: Kind, conditions: &Conditions<'_>, traced: Flight) -> Option<Flown> {
    let at = |flight: Flight, exactness: Exactness| {
        prove(conditions, &polish(kind, conditions, flight, exactness.polish)?, exactness.prove)
    };
    let usual = at(traced, Exactness::USUAL)?;
    if usual.evidence.verdict() == Verdict::Converged {
        return Some(usual);
    }
    let utmost = at(usual.flight, Exactness::UTMOST);
    Some(utmost.filter(|x| x.evidence.verdict() == Verdict::Converged).unwrap_or(usual))
}

/// Flies `flight` to its end at `tolerance`.
///
/// `None` when the integration itself fails; a flight that misses its target is returned with that evidence.
pub fn prove(conditions: &Conditions<'_>, flight: &Flight, tolerance: f64) -> Option<Flown> {
    prove_granted(conditions, flight, &Allowance::NONE, tolerance)
}

/// Like [`prove`], with excess speeds allowed at the ends; the flight's costate holds the guide of [`crate::excess`].
pub fn prove_granted(
    conditions: &Conditions<'_>,
    flight: &Flight,
    allowance: &Allowance,
    tolerance: f64,
) -> Option<Flown> {
    let recorder = Recorder(Extremal { lightness: conditions.lightness });
    let sampling = Sampling::for_sweep(flight.time * conditions.target_axis.min(1.0).powf(-1.5));
    let mut samples = Vec::new();
    let (end, evidence, excess) = reflown(conditions, flight, allowance, tolerance, &mut |step| {
        if samples.is_empty() {
            samples.push(recorder.sample(step.start, &step.from));
        }
        for x in sampling.fractions(step.to[12] - step.from[12]) {
            samples.push(recorder.sample(step.start + x * step.length, &step.at(x)));
        }
    })?;
    let trajectory = Trajectory { samples, jumps: Vec::new(), swept: end[12], delta_v: end[13] };
    Some(Flown { flight: *flight, trajectory, evidence, end: std::array::from_fn(|i| end[i]), excess })
}

/// What [`prove`] proves, and the angle swept, without the path: several times cheaper.
pub fn evidence(conditions: &Conditions<'_>, flight: &Flight, tolerance: f64) -> Option<(Evidence, f64)> {
    reflown(conditions, flight, &Allowance::NONE, tolerance, &mut |_| ())
        .map(|(end, evidence, _)| (evidence, end[12]))
}

/// Flies `flight`, shows every step, and judges where it ends.
fn reflown(
    conditions: &Conditions<'_>,
    flight: &Flight,
    allowance: &Allowance,
    tolerance: f64,
    show: &mut dyn FnMut(&DenseStep<f64, 14>),
) -> Option<(Recorded, Evidence, Used)> {
    let start = (conditions.from)(flight.departure)?;
    let target = (conditions.to)(flight.arrival)?;
    let recorder = Recorder(Extremal { lightness: conditions.lightness });
    let mut state = [0.0; 14];
    state[..12].copy_from_slice(&launched(start, flight.costate.into(), allowance.departure));
    let leaving = end_of(&augmented(&state), &start, -1.0, allowance.departure);
    let first = recorder.0.hamiltonian(&augmented(&state));
    let mut largest_change = 0.0f64;
    let mut observe = |step: &DenseStep<f64, 14>| {
        let change = (recorder.0.hamiltonian(&augmented(&step.to)) - first).abs();
        if change > largest_change || change.is_nan() {
            largest_change = change;
        }
        show(step);
    };
    let options = Options { tolerance, max_steps: 80_000 };
    let outcome = integrate_observed(&recorder, &state, flight.time, &options, &mut observe);
    if outcome.termination != Termination::Reached {
        return None;
    }
    let end = outcome.state;
    let arriving = end_of(&augmented(&end), &target, 1.0, allowance.arrival);
    let gap = |i: usize| end[i] - target[i];
    let rates = recorder.rates(Mode::default(), &end);
    let moving = coasting_rate(&target);
    // What the flight gains by arriving a moment later: positive on a minimum. Against a target that does not wait
    // it is the Hamiltonian less its part along the target's motion.
    let at_arrival: f64 = (0..6).map(|i| end[6 + i] * (rates[i] - moving[i])).sum();
    let apart = Vector6::from_fn(|i, _| start[i] - target[i]).norm();
    let evidence = Evidence {
        position_error: gap(0).hypot(gap(1)).hypot(gap(2)),
        speed_error: arriving.beyond(),
        excess_misfit: leaving.misfit().max(arriving.misfit()),
        target_distance: target[0].hypot(target[1]).hypot(target[2]),
        target_speed: target[3].hypot(target[4]).hypot(target[5]),
        gap: apart,
        hamiltonian_drift: largest_change / first.abs().max(at_arrival.abs()),
        hamiltonian_at_arrival: at_arrival,
    };
    Some((end, evidence, Used { departure: leaving.speed(), arrival: arriving.speed() }))
}

/// Velocity relative to a body, and the primer there, counted with `sign`.
fn end_of(y: &[f64; 12], body: &State, sign: f64, allowance: f64) -> End<3> {
    let scale = sign / Vector6::from_fn(|i, _| y[6 + i]).norm();
    End {
        relative: std::array::from_fn(|i| y[3 + i] - body[3 + i]),
        primer: std::array::from_fn(|i| y[9 + i] * scale),
        allowance,
    }
}
