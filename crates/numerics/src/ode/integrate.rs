//! The explicit Runge-Kutta method of order 8(5,3) with step control, dense output and events.
//!
//! Method and step control: E. Hairer, S. P. Norsett, G. Wanner, *Solving Ordinary Differential Equations I*
//! (2nd ed., 1993), sections II.4 to II.6. Sensitivities across a switch: the jump (saltation) condition, for
//! example R. I. Leine and H. Nijmeijer, *Dynamics and Bifurcations of Non-Smooth Mechanical Systems* (2004),
//! section 7.1 (from memory).

use crate::root::{Bracket, find_root};
use crate::scalar::Scalar;

use super::dense::DenseStep;
use super::flow::{EventKind, Flow, Mode};
use super::tableau::*;

/// How to integrate.
#[derive(Clone, Copy, Debug)]
pub struct Options {
    /// Local error allowed per step, relative to `1 + |y|` component by component.
    pub tolerance: f64,
    /// Most steps, accepted and rejected together.
    pub max_steps: usize,
}

/// Why integration ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Termination {
    /// The whole duration was covered.
    Reached,
    /// Event function `.0` of kind [`EventKind::Stop`] changed sign.
    Stopped(usize),
    /// The step budget ran out.
    TooManySteps,
    /// The step shrank below the resolution of time, or the state stopped being finite.
    Stuck,
}

/// Where integration ended, and what it took.
#[derive(Clone, Copy, Debug)]
pub struct Outcome<T, const N: usize> {
    /// Time covered, signed.
    pub time: f64,
    /// State there.
    pub state: [T; N],
    /// Right-hand side in force there.
    pub mode: Mode,
    /// Why it ended.
    pub termination: Termination,
    /// Accepted steps.
    pub steps: usize,
    /// Rejected steps.
    pub rejected: usize,
    /// Evaluations of the right-hand side.
    pub evaluations: usize,
}

/// Integrates `flow` from `state` over the signed `duration`.
pub fn integrate<T: Scalar, const N: usize, F: Flow<T, N>>(
    flow: &F,
    state: &[T; N],
    duration: f64,
    options: &Options,
) -> Outcome<T, N> {
    Run::new(flow, state, duration, options).finish::<false>(&mut |_| ())
}

/// Like [`integrate`], showing every accepted step with its dense output to `observe`.
pub fn integrate_observed<T: Scalar, const N: usize, F: Flow<T, N>>(
    flow: &F,
    state: &[T; N],
    duration: f64,
    options: &Options,
    observe: &mut dyn FnMut(&DenseStep<T, N>),
) -> Outcome<T, N> {
    Run::new(flow, state, duration, options).finish::<true>(observe)
}

/// `y + h * sum(coefficient * k[stage])`, zero coefficients left out by the tables.
///
/// Kept out of line, as is [`Run::rates`]: unrolled into every stage they made the page's core 2.5 times as large.
#[inline(never)]
fn combine<T: Scalar, const N: usize>(y: &[T; N], h: f64, k: &[[T; N]; 16], row: &[(usize, f64)]) -> [T; N] {
    let mut sum = *y;
    for &(stage, coefficient) in row {
        let weight = h * coefficient;
        for i in 0..N {
            sum[i] += k[stage][i] * weight;
        }
    }
    sum
}

struct Trial<T, const N: usize> {
    state: [T; N],
    /// Error norm relative to the tolerance: accept when at most 1.
    error: f64,
}

struct Run<'a, T, const N: usize, F> {
    flow: &'a F,
    options: &'a Options,
    duration: f64,
    time: f64,
    state: [T; N],
    mode: Mode,
    k: [[T; N]; 16],
    outcome: (usize, usize, usize),
}

impl<'a, T: Scalar, const N: usize, F: Flow<T, N>> Run<'a, T, N, F> {
    fn new(flow: &'a F, state: &[T; N], duration: f64, options: &'a Options) -> Self {
        let mut mode = Mode::default();
        for index in 0..flow.events() {
            if flow.event(index, state).value() > 0.0 {
                mode = mode.toggled(index);
            }
        }
        let mut k = [[T::from(0.0); N]; 16];
        k[0] = flow.rates(mode, state);
        Run { flow, options, duration, time: 0.0, state: *state, mode, k, outcome: (0, 0, 1) }
    }

    fn finish<const DENSE: bool>(mut self, observe: &mut dyn FnMut(&DenseStep<T, N>)) -> Outcome<T, N> {
        if self.duration == 0.0 {
            return self.done(Termination::Reached);
        }
        let mut h = self.first_step();
        let mut just_rejected = false;
        loop {
            let (accepted, rejected, _) = self.outcome;
            if accepted + rejected >= self.options.max_steps {
                return self.done(Termination::TooManySteps);
            }
            let left = self.duration - self.time;
            let last = h.abs() >= left.abs() * (1.0 - 1e-14);
            if last {
                h = left;
            }
            if h.abs() <= 1e-15 * self.time.abs().max(1e-3 * self.duration.abs()) || !h.is_finite() {
                return self.done(Termination::Stuck);
            }
            let trial = self.attempt(h);
            if trial.error.is_nan() || trial.error > 1.0 {
                self.outcome.1 += 1;
                just_rejected = true;
                h *= if trial.error.is_finite() { (0.9 * trial.error.powf(-0.125)).max(0.333) } else { 0.1 };
                continue;
            }
            let growth = (0.9 * trial.error.max(1e-14).powf(-0.125)).clamp(0.333, 6.0);
            let next = h * if just_rejected { growth.min(1.0) } else { growth };
            just_rejected = false;

            let events = self.flow.events() > 0;
            let mut dense = (DENSE || events).then(|| self.interpolant(h, &trial.state));
            if dense.is_none() {
                self.k[12] = self.rates(&trial.state);
            }
            let found = if events { dense.as_ref().and_then(|step| self.first_event(step)) } else { None };
            let mut end = trial.state;
            let mut ended_at = if last { self.duration } else { self.time + h };
            if let Some((x, _)) = found {
                // Stepping again, exactly to the event, keeps the state as accurate as any other step end;
                // dense output alone would lose two or three digits.
                let shorter = h * x;
                end = self.attempt(shorter).state;
                ended_at = self.time + shorter;
                dense = Some(self.interpolant(shorter, &end));
            }
            self.outcome.0 += 1;
            if DENSE && let Some(step) = &dense {
                observe(step);
            }
            self.k[0] = self.k[12];
            self.time = ended_at;
            self.state = end;
            match found {
                Some((_, index)) => {
                    if self.flow.kind(index) == EventKind::Stop {
                        return self.done(Termination::Stopped(index));
                    }
                    self.cross(index, h);
                    if ended_at == self.duration {
                        return self.done(Termination::Reached);
                    }
                    h = next;
                }
                None => {
                    if last {
                        return self.done(Termination::Reached);
                    }
                    h = next;
                }
            }
        }
    }

    fn done(&self, termination: Termination) -> Outcome<T, N> {
        let (steps, rejected, evaluations) = self.outcome;
        let Run { time, state, mode, .. } = *self;
        Outcome { time, state, mode, termination, steps, rejected, evaluations }
    }

    #[inline(never)]
    fn rates(&mut self, y: &[T; N]) -> [T; N] {
        self.outcome.2 += 1;
        self.flow.rates(self.mode, y)
    }

    /// Starting step after Hairer et al., section II.4.
    fn first_step(&mut self) -> f64 {
        let tolerance = self.options.tolerance;
        let norm = |v: &[T; N], y: &[T; N]| {
            let sum: f64 =
                (0..N).map(|i| (v[i].value() / (tolerance * (1.0 + y[i].value().abs()))).powi(2)).sum();
            (sum / N as f64).sqrt()
        };
        let (y, f0) = (self.state, self.k[0]);
        let (size, slope) = (norm(&y, &y), norm(&f0, &y));
        let guess = if size < 1e-5 || slope < 1e-5 { 1e-6 } else { 0.01 * size / slope };
        let guess = guess.min(self.duration.abs()).copysign(self.duration);
        let ahead = std::array::from_fn(|i| y[i] + f0[i] * guess);
        let f1 = self.rates(&ahead);
        let change: [T; N] = std::array::from_fn(|i| f1[i] - f0[i]);
        let curvature = norm(&change, &y) / guess.abs();
        let steepest = slope.max(curvature);
        let limit =
            if steepest <= 1e-15 { (guess.abs() * 1e-3).max(1e-6) } else { (0.01 / steepest).powf(0.125) };
        limit.min(100.0 * guess.abs()).min(self.duration.abs()).copysign(self.duration)
    }

    fn attempt(&mut self, h: f64) -> Trial<T, N> {
        macro_rules! stages {
            ($($stage:literal $row:ident),*) => {$(
                let y = combine(&self.state, h, &self.k, &$row);
                self.k[$stage] = self.rates(&y);
            )*};
        }
        stages!(1 A1, 2 A2, 3 A3, 4 A4, 5 A5, 6 A6, 7 A7, 8 A8, 9 A9, 10 A10, 11 A11);
        let state = combine(&self.state, h, &self.k, &B);
        let (mut third, mut fifth) = (0.0, 0.0);
        for i in 0..N {
            let scale = 1.0 + self.state[i].value().abs().max(state[i].value().abs());
            let weighted = |row: &[(usize, f64)]| -> f64 {
                row.iter().map(|&(stage, e)| e * self.k[stage][i].value()).sum::<f64>() / scale
            };
            third += weighted(&E3).powi(2);
            fifth += weighted(&E5).powi(2);
        }
        let denominator = ((fifth + 0.01 * third) * N as f64).sqrt();
        let error = if fifth == 0.0 { 0.0 } else { h.abs() * fifth / denominator / self.options.tolerance };
        Trial { state, error }
    }

    fn interpolant(&mut self, h: f64, to: &[T; N]) -> DenseStep<T, N> {
        self.k[12] = self.rates(to);
        macro_rules! stages {
            ($($stage:literal $row:ident),*) => {$(
                let y = combine(&self.state, h, &self.k, &$row);
                self.k[$stage] = self.rates(&y);
            )*};
        }
        stages!(13 A13, 14 A14, 15 A15);
        let zero = [T::from(0.0); N];
        let change: [T; N] = std::array::from_fn(|i| to[i] - self.state[i]);
        let coefficients = [
            change,
            std::array::from_fn(|i| self.k[0][i] * h - change[i]),
            std::array::from_fn(|i| change[i] * 2.0 - (self.k[12][i] + self.k[0][i]) * h),
            combine(&zero, h, &self.k, &D0),
            combine(&zero, h, &self.k, &D1),
            combine(&zero, h, &self.k, &D2),
            combine(&zero, h, &self.k, &D3),
        ];
        DenseStep { start: self.time, length: h, from: self.state, to: *to, mode: self.mode, coefficients }
    }

    /// Earliest watched event in the step, as the fraction of the step and the event's index.
    ///
    /// Signs are looked at in the middle of the step too, or two crossings in one step would go unseen.
    fn first_event(&self, step: &DenseStep<T, N>) -> Option<(f64, usize)> {
        const LOOKS: [f64; 6] = [0.0, 0.2, 0.4, 0.6, 0.8, 1.0];
        let states = LOOKS.map(|x| step.at(x));
        let mut first: Option<(f64, usize)> = None;
        for index in 0..self.flow.events() {
            if !self.flow.watches(self.mode, index) {
                continue;
            }
            let value = |y: &[T; N]| self.flow.event(index, y).value();
            let mut looks = LOOKS.iter().zip(states.iter().map(value)).map(|(&x, g)| (x, g));
            let (mut x0, mut g0) = looks.next()?;
            if (g0 > 0.0) != self.mode.is_set(index) {
                // The step starts on the event, where rounding decides the sign: the mode knows the side.
                g0 = if self.mode.is_set(index) { f64::MIN_POSITIVE } else { -f64::MIN_POSITIVE };
            }
            for (x1, g1) in looks {
                if (g0 > 0.0) != (g1 > 0.0) {
                    let bracket = Bracket { low: x0, high: x1, at_low: g0, at_high: g1 };
                    let x = find_root(|x| value(&step.at(x)), bracket, 1e-14);
                    if first.is_none_or(|(earliest, _)| x < earliest) {
                        first = Some((x, index));
                    }
                    break;
                }
                (x0, g0) = (x1, g1);
            }
        }
        first
    }

    /// Flips the mode at the present state and gives sensitivities their jump.
    fn cross(&mut self, index: usize, h: f64) {
        let before = self.k[0];
        let gap = self.flow.event(index, &self.state);
        // Rate of the event function along the flow, by a central difference whose error (1e-9 or so of
        // itself) only touches derivatives.
        let reach = 1e-5 * h.abs();
        let along = |sign: f64| {
            let y: [T; N] =
                std::array::from_fn(|i| T::from(self.state[i].value() + sign * reach * before[i].value()));
            self.flow.event(index, &y).value()
        };
        let rate = (along(1.0) - along(-1.0)) / (2.0 * reach);
        self.mode = self.mode.toggled(index);
        let after = self.rates(&{ self.state });
        if rate != 0.0 {
            // The event moves by this much when the seeds do; its own value is zero.
            let shift = -(gap - gap.value()) / rate;
            let jumped: [T; N] = std::array::from_fn(|i| self.state[i] + (before[i] - after[i]) * shift);
            self.state = jumped;
        }
        self.k[0] = self.rates(&{ self.state });
    }
}

#[cfg(test)]
#[path = "integrate_tests.rs"]
mod tests;
