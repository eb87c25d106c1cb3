//! Coplanar flights under a law without foresight: locally optimal, or a constant cone angle.

use numerics::ode::{EventKind, Flow, Mode, Options, Termination, integrate_observed};

use super::polar;
use crate::force::{self, Force};
use crate::steering::{fixed, local};
use crate::trajectory::{Sample, Sampling, Trajectory};

/// The law flown.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Law {
    /// Fastest change of semi-major axis, until it matches.
    Local(local::Towards),
    /// Constant signed cone angle, deg, until the distance is reached.
    Fixed {
        /// Signed cone angle, deg: positive pushes forward.
        cone_deg: f64,
    },
}

/// A flight to ask for. Canonical units.
#[derive(Clone, Copy, Debug)]
pub struct Plan {
    /// Lightness number.
    pub lightness: f64,
    /// Distance, radial and transverse speed at the start.
    pub start: [f64; 3],
    /// Semi-major axis (local) or distance (fixed) that ends the flight.
    pub target: f64,
    /// The law.
    pub law: Law,
    /// Longest flight time.
    pub time_limit: f64,
}

/// Why a steered flight ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Ending {
    /// The target was met.
    Arrived,
    /// It came closer to the Sun than [`SUN_LIMIT_AU`].
    FellIntoSun,
    /// It went farther than [`FAR_LIMIT`] times the larger of start and target.
    Escaped,
    /// The time or step limit came first.
    OutOfTime,
}

/// A steered flight as flown.
#[derive(Clone, Debug)]
pub struct Steered {
    /// Why it ended.
    pub ending: Ending,
    /// Flight time.
    pub time: f64,
    /// Distance, radial and transverse speed at the end.
    pub end: [f64; 3],
    /// The path.
    pub trajectory: Trajectory,
}

/// Closest distance a steered flight may come to the Sun, au: the Sun's radius is 0.00465 au.
pub const SUN_LIMIT_AU: f64 = 0.005;

/// A flight this many times beyond both its ends is not coming back.
pub const FAR_LIMIT: f64 = 50.0;

const ARRIVED: usize = 0;
const SUN: usize = 1;
const FAR: usize = 2;

struct Motion<'a> {
    plan: &'a Plan,
    fixed: (f64, f64),
}

impl Motion<'_> {
    fn attitude(&self, u: f64, v: f64) -> (f64, f64) {
        match self.plan.law {
            Law::Local(towards) => local::attitude(towards, u, v),
            Law::Fixed { .. } => self.fixed,
        }
    }

    fn far(&self) -> f64 {
        FAR_LIMIT * self.plan.start[0].max(self.plan.target)
    }

    /// Cone angle at a state, and its rate along the flow by differences: the law is smooth.
    fn cone(&self, [_, u, v, ..]: [f64; 5]) -> f64 {
        let (cos, sin) = self.attitude(u, v);
        sin.atan2(cos)
    }

    fn sample(&self, time: f64, y: [f64; 5]) -> Sample {
        let [r, u, v, theta, _] = y;
        let rates = self.rates(Mode::default(), &y);
        let reach = 1e-5 * r.powf(1.5);
        let along = |sign: f64| self.cone(std::array::from_fn(|i| y[i] + sign * reach * rates[i]));
        let cone_rate = (along(1.0) - along(-1.0)) / (2.0 * reach);
        let (cos, _) = self.attitude(u, v);
        let acceleration = self.plan.lightness / (r * r) * cos * cos;
        Sample::coplanar(time, [r, u, v], theta, self.cone(y), acceleration, v / r + cone_rate)
    }
}

impl Flow<f64, 5> for Motion<'_> {
    fn rates(&self, _: Mode, &[r, u, v, _, _]: &[f64; 5]) -> [f64; 5] {
        let (cos, sin) = self.attitude(u, v);
        let force: Force<f64> = force::ideal(cos, sin);
        let [dr, du, dv] = polar::rates(self.plan.lightness, r, u, v, force);
        [dr, du, dv, v / r, self.plan.lightness / (r * r) * cos * cos]
    }

    fn events(&self) -> usize {
        3
    }

    fn event(&self, index: usize, &[r, u, v, _, _]: &[f64; 5]) -> f64 {
        match index {
            ARRIVED => match self.plan.law {
                Law::Local(_) => polar::energy(r, u, v) + 0.5 / self.plan.target,
                Law::Fixed { .. } => r - self.plan.target,
            },
            SUN => r - SUN_LIMIT_AU,
            _ => r - self.far(),
        }
    }

    fn kind(&self, _: usize) -> EventKind {
        EventKind::Stop
    }
}

/// Flies `plan` at a local error of 1e-12 a step.
pub fn fly(plan: &Plan) -> Steered {
    let fixed = match plan.law {
        Law::Fixed { cone_deg } => fixed::attitude(cone_deg),
        Law::Local(_) => (1.0, 0.0),
    };
    let motion = Motion { plan, fixed };
    let [r, u, v] = plan.start;
    let start = [r, u, v, 0.0, 0.0];
    let options = Options { tolerance: 1e-12, max_steps: 40_000 };
    let mut samples = vec![motion.sample(0.0, start)];
    let sampling = Sampling { angle: 1.5f64.to_radians() };
    let outcome = integrate_observed(&motion, &start, plan.time_limit, &options, &mut |step| {
        for x in sampling.fractions(step.to[3] - step.from[3]) {
            samples.push(motion.sample(step.start + x * step.length, step.at(x)));
        }
    });
    let ending = match outcome.termination {
        Termination::Stopped(ARRIVED) => Ending::Arrived,
        Termination::Stopped(SUN) => Ending::FellIntoSun,
        Termination::Stopped(FAR) => Ending::Escaped,
        _ => Ending::OutOfTime,
    };
    let [r, u, v, swept, delta_v] = outcome.state;
    let trajectory = Trajectory { samples, jumps: Vec::new(), swept, delta_v };
    Steered { ending, time: outcome.time, end: [r, u, v], trajectory }
}

#[cfg(test)]
#[path = "steered_tests.rs"]
mod tests;
