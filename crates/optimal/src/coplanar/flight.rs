//! Flying a solved extremal once more: the path for people, and the evidence.

use numerics::dual::Dual;
use numerics::ode::{DenseStep, Flow, Mode, Options, Termination, integrate, integrate_observed};
use sail::trajectory::{Jump, Sample, Sampling, Trajectory};

use super::extremal::{Augmented, Extremal, attitude};
use super::shooting::Unknowns;
use super::solve::Problem;
use crate::certificate::{Evidence, REFLY_TOLERANCE};
use crate::excess::{Allowance, End, Used};

/// A flown extremal. Canonical units (au).
#[derive(Clone, Debug)]
pub struct Flown {
    /// Flight time.
    pub time: f64,
    /// The path.
    pub trajectory: Trajectory,
    /// What the flight proves.
    pub evidence: Evidence,
    /// Eccentricity of the orbit the craft ends on.
    pub final_eccentricity: f64,
    /// Excess speeds used at the two ends.
    pub excess: Used,
}

/// The extremal with two quadratures: angle swept, and velocity change by the sail.
type Recorded = [f64; 8];

struct Recorder(Extremal);

fn augmented(y: &Recorded) -> [f64; 6] {
    [y[0], y[1], y[2], y[3], y[4], y[5]]
}

impl Flow<f64, 8> for Recorder {
    fn rates(&self, mode: Mode, y: &Recorded) -> Recorded {
        let [dr, du, dv, dl_r, dl_u, dl_v] = self.0.rates(mode, &augmented(y));
        [dr, du, dv, dl_r, dl_u, dl_v, y[2] / y[0], self.acceleration(y)]
    }

    fn events(&self) -> usize {
        1
    }

    /// The transverse primer: where it changes sign on the sunward side the normal turns over.
    fn event(&self, _: usize, y: &Recorded) -> f64 {
        y[5]
    }
}

impl Recorder {
    fn acceleration(&self, y: &Recorded) -> f64 {
        let (cos, _) = attitude(y[4], y[5]);
        self.0.lightness / (y[0] * y[0]) * cos * cos
    }

    /// Signed cone angle and its rate; the mode says which side the normal is on where the primer passes through
    /// the Sun line.
    fn cone(&self, mode: Mode, y: &Recorded) -> (f64, f64) {
        let rates = self.0.rates(mode, &augmented(y));
        let seeded = |i: usize| Dual::<1> { v: y[i], d: [rates[i]] };
        let (cos, sin) = attitude(seeded(4), seeded(5));
        let cone = numerics::scalar::Scalar::atan2(sin, cos);
        (if mode.is_set(0) { cone.v.abs() } else { -cone.v.abs() }, cone.d[0])
    }

    fn sample(&self, mode: Mode, time: f64, y: &Recorded) -> Sample {
        let (cone, rate) = self.cone(mode, y);
        Sample::coplanar(time, [y[0], y[1], y[2]], y[6], cone, self.acceleration(y), y[2] / y[0] + rate)
    }
}

/// Heliocentric angle that the flight will sweep, roughly: it only decides how densely the path is sampled.
///
/// A slow spiral with the best constant cone angle sweeps |ln ratio| / (2 x 0.385 beta); a short flight no more than
/// the faster circle does in that time.
fn sweep_estimate(problem: &Problem, time: f64) -> f64 {
    let spiral = problem.ratio().ln().abs() / (0.77 * problem.lightness) + std::f64::consts::TAU;
    spiral.min(time * problem.ratio().min(1.0).powf(-1.5))
}

/// Heliocentric angle swept by a solved flight, to a few digits; `None` when it cannot be flown.
pub fn swept_angle(problem: &Problem, unknowns: &Unknowns) -> Option<f64> {
    let l = unknowns.costate;
    let start = [1.0, 0.0, 1.0, l.x, l.y, l.z, 0.0, 0.0];
    let options = Options { tolerance: 1e-9, max_steps: 80_000 };
    let outcome =
        integrate(&Recorder(Extremal { lightness: problem.lightness }), &start, unknowns.time, &options);
    (outcome.termination == Termination::Reached).then_some(outcome.state[6])
}

/// Flies `unknowns` (in units of the start radius) to the end.
///
/// `None` when the integration itself fails; a flight that misses its target is returned with that evidence.
pub fn fly(problem: &Problem, unknowns: &Unknowns) -> Option<Flown> {
    let l = unknowns.costate;
    fly_from(problem, &[1.0, 0.0, 1.0, l.x, l.y, l.z], unknowns.time, &Allowance::NONE)
}

/// Flies from `start` (in units of the start radius) for `time`, and judges the excess at both ends by `allowance`.
pub(super) fn fly_from(
    problem: &Problem,
    start: &Augmented<f64>,
    time: f64,
    allowance: &Allowance,
) -> Option<Flown> {
    let recorder = Recorder(Extremal { lightness: problem.lightness });
    let [r, u, v, l_r, l_u, l_v] = *start;
    let speed = problem.start_radius.powf(-0.5);
    let end = |[_, u, v, l_r, l_u, l_v]: Augmented<f64>, circular: f64, sign: f64, allowance: f64| {
        let scale = sign / l_r.hypot(l_u).hypot(l_v);
        End { relative: [u * speed, (v - circular) * speed], primer: [l_u * scale, l_v * scale], allowance }
    };
    let leaving = end(*start, 1.0, -1.0, allowance.departure);
    let start = [r, u, v, l_r, l_u, l_v, 0.0, 0.0];
    let first = recorder.0.hamiltonian(&augmented(&start));
    let mut drift = 0.0f64;
    let mut jumps = Vec::new();
    let mut mode = Mode(u32::from(l_v > 0.0));
    let sampling = Sampling::for_sweep(sweep_estimate(problem, time));
    let mut samples = vec![recorder.sample(mode, 0.0, &start)];
    let options = Options { tolerance: REFLY_TOLERANCE, max_steps: 80_000 };
    let mut observe = |step: &DenseStep<f64, 8>| {
        let change = (recorder.0.hamiltonian(&augmented(&step.to)) / first - 1.0).abs();
        if change > drift || change.is_nan() {
            drift = change;
        }
        if step.mode != mode {
            mode = step.mode;
            if step.from[4] < 0.0 {
                jumps.push(Jump { time: step.start, angle: std::f64::consts::PI });
                let after = recorder.sample(mode, step.start, &step.from);
                samples.push(Sample { turn_rate: f64::NAN, ..after });
            }
        }
        for x in sampling.fractions(step.to[6] - step.from[6]) {
            samples.push(recorder.sample(mode, step.start + x * step.length, &step.at(x)));
        }
    };
    let outcome = integrate_observed(&recorder, &start, time, &options, &mut observe);
    if outcome.termination != Termination::Reached {
        return None;
    }
    let [r, u, v, .., swept, delta_v] = outcome.state;
    let ratio = problem.ratio();
    let length = problem.start_radius;
    let reached = augmented(&outcome.state);
    let arriving = end(reached, ratio.powf(-0.5), 1.0, allowance.arrival);
    let evidence = Evidence {
        position_error: (r - ratio).abs() * length,
        speed_error: arriving.beyond(),
        excess_misfit: leaving.misfit().max(arriving.misfit()),
        target_distance: problem.target_radius,
        target_speed: problem.target_radius.powf(-0.5),
        gap: (problem.target_radius - problem.start_radius).abs(),
        hamiltonian_drift: drift,
        hamiltonian_at_arrival: recorder.0.hamiltonian(&reached),
    };
    let (_, final_eccentricity) = sail::motion::polar::shape(r, u, v);
    let trajectory = Trajectory { samples, jumps, swept, delta_v }.stretched(length);
    let excess = Used { departure: leaving.speed(), arrival: arriving.speed() };
    Some(Flown { time: time * problem.time_scale(), trajectory, evidence, final_eccentricity, excess })
}

#[cfg(test)]
#[path = "flight_tests.rs"]
mod tests;
