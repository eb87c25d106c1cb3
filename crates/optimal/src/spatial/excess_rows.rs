//! The conditions of a spatial flight with excess speed at its ends, and their derivatives.
//!
//! The last three components of the first costate's unit vector become the guide that stands for primer and excess
//! velocity ([`crate::excess`]); the speed rows at arrival become what is left of the relative velocity there.

use nalgebra::{Const, DimMin, SMatrix, SVector};
use numerics::arclength::{Curve, Row};
use numerics::dual::Dual;
use numerics::newton::{Equations, Linearised};
use numerics::ode::{Flow, Mode, Options, Termination, integrate};
use numerics::scalar::Scalar;

use super::curves::{PHASE_COLUMN, row_scales};
use super::ends::{State, coasting_acceleration, coasting_rate};
use super::extremal::{Augmented, Extremal};
use super::polish::{Conditions, Flight, Kind, trusted};
use super::terminal::{MAX_STEPS, tangents};
use crate::excess::{Allowance, MOMENT, launch, left_over};

/// State and costate at departure from a body's state.
pub fn launched<T: Scalar>(body: [T; 6], [a, b, c, q @ ..]: [T; 6], allowance: T) -> Augmented<T> {
    let [x, y, z, u, v, w] = body;
    let launch = launch(q, allowance);
    let [du, dv, dw] = launch.excess;
    // A primer of zero turns against l_r at once, p' = -l_r.
    let [d, e, f] = launch.primer.unwrap_or([a, b, c].map(|l| l * -MOMENT));
    [x, y, z, u + du, v + dv, w + dw, a, b, c, d, e, f]
}

/// One kind of flight, with `share` of the way from one allowance to another granted.
///
/// `N` unknowns: costate and time, and as the kind asks arrival place and departure place.
#[derive(Clone, Copy)]
pub(super) struct Granting<'a, const N: usize> {
    pub(super) kind: Kind,
    pub(super) conditions: &'a Conditions<'a>,
    /// Allowances at shares 0 and 1.
    pub(super) from: Allowance,
    pub(super) to: Allowance,
    pub(super) share: f64,
    pub(super) tolerance: f64,
}

/// Rows and columns of the richest kind: costate (6), time, arrival place, departure place, share.
type Full = (SVector<f64, 9>, SMatrix<f64, 9, 10>);

/// Costate and time, arrival place, departure place, share: what an end state may change with.
const COLUMNS: usize = 10;

impl<const N: usize> Granting<'_, N> {
    fn rows(&self, flight: &Flight, share: f64) -> Option<Full> {
        let conditions = self.conditions;
        let start = (conditions.from)(flight.departure)?;
        let target = (conditions.to)(flight.arrival)?;
        let (leaving, along) = (coasting_rate(&start), coasting_rate(&target));
        let basis = tangents(&flight.costate);
        // Seeds: five across the costate, the departure place, the share.
        let body =
            std::array::from_fn(|i| Dual { v: start[i], d: [0.0, 0.0, 0.0, 0.0, 0.0, leaving[i], 0.0] });
        let guide = std::array::from_fn(|i| {
            let d = std::array::from_fn(|k| if k < 5 { basis[(i, k)] } else { 0.0 });
            Dual { v: flight.costate[i], d }
        });
        let granted = |from: f64, to: f64| Dual::<7>::variable(share, 6) * (to - from) + from;
        let first = launched(body, guide, granted(self.from.departure, self.to.departure));
        let allowed = granted(self.from.arrival, self.to.arrival);
        let flow = Extremal { lightness: conditions.lightness };
        let options = Options { tolerance: self.tolerance, max_steps: MAX_STEPS };
        let outcome = integrate(&flow, &first, flight.time, &options);
        if outcome.termination != Termination::Reached {
            return None;
        }
        let spread = |y: &Augmented<Dual<7>>, row: usize, column: usize| match column {
            0..6 => (0..5).map(|k| y[row].d[k] * basis[(column, k)]).sum(),
            8 => y[row].d[5],
            9 => y[row].d[6],
            _ => 0.0,
        };
        let end = outcome.state.map(|y| y.v);
        let rates = flow.rates(Mode::default(), &end);
        let mut by = SMatrix::<f64, 12, COLUMNS>::from_fn(|i, k| spread(&outcome.state, i, k));
        by.set_column(6, &SVector::from(rates));
        // The same for the target's state: a body moves on with the time of flight, an orbit's point by itself.
        let moving = if self.kind == Kind::Meeting { 6 } else { 7 };
        let mut apart = by.fixed_rows::<6>(0).into_owned();
        for i in 0..6 {
            apart[(i, moving)] -= along[i];
        }
        let (value, jacobian) = mismatch(&end, &target, &apart, &by, allowed);
        let mut all = SVector::<f64, 9>::zeros();
        let mut j = SMatrix::<f64, 9, COLUMNS>::zeros();
        let scales = row_scales(conditions.target_axis);
        for i in 0..6 {
            all[i] = value[i] * scales[i];
            j.row_mut(i).copy_from(&(jacobian.row(i) * scales[i]));
        }
        j.fixed_view_mut::<1, 6>(6, 0).copy_from(&flight.costate.transpose());
        // Ending anywhere: l . (rate of the target) = 0; leaving from anywhere: l . (rate of the departure body) = 0,
        // in which the excess does not appear.
        let (bend, leaving_bend) = (coasting_acceleration(&target), coasting_acceleration(&start));
        for i in 0..6 {
            all[7] += end[6 + i] * along[i];
            j[(7, 7)] += end[6 + i] * bend[i];
            all[8] += first[6 + i].v * leaving[i];
            j[(8, 8)] += first[6 + i].v * leaving_bend[i];
            for k in 0..COLUMNS {
                j[(7, k)] += by[(6 + i, k)] * along[i];
                j[(8, k)] += spread(&first, 6 + i, k) * leaving[i];
            }
        }
        let finite = all.iter().chain(j.iter()).all(|x: &f64| x.is_finite());
        finite.then_some((all, j))
    }
}

/// Position missed, and the relative velocity beyond what is allowed.
fn mismatch(
    end: &Augmented<f64>,
    target: &State,
    apart: &SMatrix<f64, 6, COLUMNS>,
    by: &SMatrix<f64, 12, COLUMNS>,
    allowed: Dual<7>,
) -> (SVector<f64, 6>, SMatrix<f64, 6, COLUMNS>) {
    let scale = (6..12).map(|i| end[i] * end[i]).sum::<f64>().sqrt().recip();
    let seeded = |v: f64, i: usize| Dual::<7>::variable(v, i);
    let relative = std::array::from_fn(|i| seeded(end[3 + i] - target[3 + i], i));
    let primer = std::array::from_fn(|i| seeded(end[9 + i], 3 + i) * scale);
    let left: [Dual<7>; 3] = left_over(relative, primer, seeded(allowed.v, 6));
    let mut value = SVector::<f64, 6>::zeros();
    let mut jacobian = *apart;
    for i in 0..3 {
        value[i] = end[i] - target[i];
        value[3 + i] = left[i].v;
        for column in 0..COLUMNS {
            let moved = (0..3)
                .map(|k| left[i].d[k] * apart[(3 + k, column)] + left[i].d[3 + k] * by[(9 + k, column)]);
            jacobian[(3 + i, column)] = moved.sum();
        }
        jacobian[(3 + i, 9)] += left[i].d[6] * allowed.d[6];
    }
    (value, jacobian)
}

impl<const N: usize> Granting<'_, N> {
    fn stepped<const M: usize>(&self, flight: &Flight, step: &SVector<f64, M>, column: f64) -> Flight {
        let costate = step.fixed_rows::<6>(0).into_owned();
        let time = step[6] * column;
        let arrival = if self.kind == Kind::Meeting { time } else { step[7] * column };
        let departure = if self.kind == Kind::OpenEnds { step[8] * column } else { 0.0 };
        flight.moved(costate, departure, time, arrival)
    }
}

impl<const N: usize> Equations<N> for Granting<'_, N>
where
    Const<N>: DimMin<Const<N>, Output = Const<N>>,
{
    type Point = Flight;

    fn linearised(&self, flight: &Flight) -> Option<Linearised<N>> {
        let (value, jacobian) = self.rows(flight, self.share)?;
        Some((value.fixed_rows::<N>(0).into(), jacobian.fixed_view::<N, N>(0, 0).into()))
    }

    fn residuals(&self, flight: &Flight) -> Option<SVector<f64, N>> {
        Equations::linearised(self, flight).map(|(value, _)| value)
    }

    fn moved(&self, flight: &Flight, step: &SVector<f64, N>) -> Flight {
        self.stepped(flight, step, 1.0)
    }

    fn trusted_fraction(&self, flight: &Flight, step: &SVector<f64, N>) -> f64 {
        trusted(step.fixed_rows::<6>(0).norm(), step[6].abs() / flight.time)
    }
}

/// The flights of all shares; the share is the parameter.
impl<const N: usize, const M: usize> Curve<N, M> for Granting<'_, N> {
    type Point = (Flight, f64);

    fn linearised(&self, (flight, share): &(Flight, f64)) -> Option<Row<N, M>> {
        if *share < 0.0 {
            return None;
        }
        let (value, jacobian) = self.rows(flight, *share)?;
        let mut all = SMatrix::<f64, N, M>::zeros();
        all.fixed_view_mut::<N, N>(0, 0).copy_from(&jacobian.fixed_view::<N, N>(0, 0));
        for time in 6..N {
            all.column_mut(time).scale_mut(PHASE_COLUMN);
        }
        all.set_column(N, &jacobian.fixed_view::<N, 1>(0, 9));
        Some((value.fixed_rows::<N>(0).into(), all))
    }

    fn moved(&self, (flight, share): &(Flight, f64), step: &SVector<f64, M>) -> (Flight, f64) {
        (self.stepped(flight, step, PHASE_COLUMN), share + step[N])
    }

    fn parameter(&self, (_, share): &(Flight, f64)) -> f64 {
        *share
    }
}
