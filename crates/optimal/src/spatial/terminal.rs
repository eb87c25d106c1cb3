//! One spatial extremal flown to its end, with the derivatives that every condition at arrival is made of.

use nalgebra::{SMatrix, Vector6};
use numerics::dual::Dual;
use numerics::ode::{Flow, Mode, Options, Termination, integrate};

use super::ends::State;
use super::extremal::{Augmented, Extremal};

pub(super) const MAX_STEPS: usize = 20_000;

/// State and costate at arrival, as plain numbers and as derivatives.
#[derive(Clone, Debug)]
pub struct Terminal {
    /// State and costate.
    pub end: Augmented<f64>,
    /// Their rates.
    pub rates: Augmented<f64>,
    /// Derivative with respect to the first costate, whose part along the costate itself is left out.
    pub by_costate: SMatrix<f64, 12, 6>,
    /// Derivative with respect to whatever moves the first state by `start_rate`.
    pub by_start: [f64; 12],
}

/// Five unit vectors across `axis` (a unit vector) and across each other: columns of a Householder reflection.
pub(super) fn tangents(axis: &Vector6<f64>) -> SMatrix<f64, 6, 5> {
    let sign = if axis[0] < 0.0 { -1.0 } else { 1.0 };
    let mut mirror = *axis;
    mirror[0] += sign;
    let reflection =
        SMatrix::<f64, 6, 6>::identity() - mirror * mirror.transpose() * (2.0 / mirror.norm_squared());
    reflection.fixed_columns::<5>(1).into_owned()
}

/// Flies from `start` with the unit first `costate` for `time`; `start_rate` seeds one more derivative.
pub fn fly(
    lightness: f64,
    start: &State,
    start_rate: &State,
    costate: &Vector6<f64>,
    time: f64,
    tolerance: f64,
) -> Option<Terminal> {
    seeded::<6>(lightness, start, &[start_rate], costate, time, tolerance).map(|(terminal, _)| terminal)
}

/// Like [`fly`] with two movements of the first state; the derivative by the second is returned beside.
pub fn fly_two_ways(
    lightness: f64,
    start: &State,
    start_rates: [&State; 2],
    costate: &Vector6<f64>,
    time: f64,
    tolerance: f64,
) -> Option<(Terminal, Augmented<f64>)> {
    seeded::<7>(lightness, start, &start_rates, costate, time, tolerance)
}

/// Five seeds for the costate, the others for `start_rates`: the last of these is returned beside the terminal.
fn seeded<const SEEDS: usize>(
    lightness: f64,
    start: &State,
    start_rates: &[&State],
    costate: &Vector6<f64>,
    time: f64,
    tolerance: f64,
) -> Option<(Terminal, Augmented<f64>)> {
    let basis = tangents(costate);
    let flow = Extremal { lightness };
    let first: Augmented<Dual<SEEDS>> = std::array::from_fn(|i| {
        let mut d = [0.0; SEEDS];
        if i < 6 {
            for (d, rate) in d.iter_mut().skip(5).zip(start_rates) {
                *d = rate[i];
            }
            Dual { v: start[i], d }
        } else {
            for (k, d) in d.iter_mut().take(5).enumerate() {
                *d = basis[(i - 6, k)];
            }
            Dual { v: costate[i - 6], d }
        }
    });
    let outcome = integrate(&flow, &first, time, &Options { tolerance, max_steps: MAX_STEPS });
    if outcome.termination != Termination::Reached {
        return None;
    }
    let end = outcome.state.map(|y| y.v);
    let rates = flow.rates(Mode::default(), &end);
    let tangent = SMatrix::<f64, 12, 5>::from_fn(|i, k| outcome.state[i].d[k]);
    let by_start = outcome.state.map(|y| y.d[5]);
    let by_last = outcome.state.map(|y| y.d[SEEDS - 1]);
    Some((Terminal { end, rates, by_costate: tangent * basis.transpose(), by_start }, by_last))
}
