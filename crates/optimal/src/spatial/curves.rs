//! Curves of spatial extremals: what is solved along them, and which parameter moves.
//!
//! All share the unknowns of [`Point`]. Columns are scaled so that a step of 0.1 is a careful one in each.

use nalgebra::{SMatrix, SVector, Vector6};
use numerics::arclength::{Curve, Row};

use super::ends::{Ends, State, coasting_acceleration, coasting_rate};
use super::terminal::{Terminal, fly};

/// First costate (unit vector), flight time, time at which the target orbit's point is met, and the curve's parameter.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Point {
    /// l_r and the primer at departure.
    pub costate: Vector6<f64>,
    /// Flight time.
    pub time: f64,
    /// Place on the target orbit where the flight ends, as the time since the reference instant at which a body on it is there.
    pub arrival: f64,
    /// Shape, phase, departure time or departure place: whatever the curve moves.
    pub parameter: f64,
}

/// What the curves have in common.
#[derive(Clone, Copy, Debug)]
pub struct Setting {
    /// The two orbits.
    pub ends: Ends,
    /// Lightness number.
    pub lightness: f64,
    /// Tolerance of the integration.
    pub tolerance: f64,
}

/// One unit of a time column, in units of the target's (and start's) mean time scale.
pub(super) const TIME_COLUMN: f64 = 3.0;
pub(super) const SHAPE_COLUMN: f64 = 0.3;
pub(super) const PHASE_COLUMN: f64 = 2.0;

/// Rows of position and velocity mismatch, in parts of the target orbit's size and speed.
pub(super) fn row_scales(target_axis: f64) -> [f64; 6] {
    let (length, speed) = (1.0 / target_axis, target_axis.sqrt());
    [length, length, length, speed, speed, speed]
}

pub(super) fn moved_point(
    point: &Point,
    costate: Vector6<f64>,
    time: f64,
    arrival: f64,
    parameter: f64,
) -> Point {
    Point {
        costate: (point.costate + costate).normalize(),
        time: point.time + time,
        arrival: point.arrival + arrival,
        parameter: point.parameter + parameter,
    }
}

pub(super) fn sphere_row<const M: usize>(point: &Point) -> SVector<f64, M> {
    let mut row = SVector::<f64, M>::zeros();
    row.fixed_rows_mut::<6>(0).copy_from(&point.costate);
    row
}

/// Arrival anywhere on the target orbit; the last column moves shape (`Growing`) or departure place (`Leaving`).
struct OpenArrival<'a> {
    setting: &'a Setting,
    terminal: Terminal,
    target: State,
    /// How the parameter moves the target's state, per unit of parameter.
    target_shift: State,
}

impl OpenArrival<'_> {
    /// Six mismatches, the transversality condition l . (rate of the target) = 0, and the sphere.
    fn rows(&self, point: &Point, parameter_column: f64) -> Row<8, 9> {
        let scales = row_scales(self.setting.ends.to.semi_major_axis);
        let Terminal { end, rates, by_costate, by_start } = &self.terminal;
        let (along, bend) = (coasting_rate(&self.target), coasting_acceleration(&self.target));
        let shifted: State = std::array::from_fn(|i| self.target[i] + self.target_shift[i] * SHIFT);
        let along_shifted = coasting_rate(&shifted);
        let mut value = SVector::<f64, 8>::zeros();
        let mut j = SMatrix::<f64, 8, 9>::zeros();
        for i in 0..6 {
            value[i] = (end[i] - self.target[i]) * scales[i];
            for k in 0..6 {
                j[(i, k)] = by_costate[(i, k)] * scales[i];
            }
            j[(i, 6)] = rates[i] * scales[i] * TIME_COLUMN;
            j[(i, 7)] = -along[i] * scales[i] * TIME_COLUMN;
            j[(i, 8)] = (by_start[i] - self.target_shift[i]) * scales[i] * parameter_column;
            value[6] += end[6 + i] * along[i];
            for k in 0..6 {
                j[(6, k)] += by_costate[(6 + i, k)] * along[i];
            }
            j[(6, 6)] += rates[6 + i] * along[i] * TIME_COLUMN;
            j[(6, 7)] += end[6 + i] * bend[i] * TIME_COLUMN;
            let slope = (along_shifted[i] - along[i]) / SHIFT;
            j[(6, 8)] += (by_start[6 + i] * along[i] + end[6 + i] * slope) * parameter_column;
        }
        j.row_mut(7).copy_from(&sphere_row::<9>(point).transpose());
        (value, j)
    }
}

/// Difference step for derivatives of closed forms that only guide a Newton step.
pub(super) const SHIFT: f64 = 1e-6;

/// Arrival point free, departure at the reference instant, orbits growing from coplanar circles (parameter 0) to
/// themselves (1).
pub struct Growing<'a>(pub &'a Setting);

impl Curve<8, 9> for Growing<'_> {
    type Point = Point;

    fn linearised(&self, point: &Point) -> Option<Row<8, 9>> {
        let setting = self.0;
        let ends = &setting.ends;
        let (shape, near) = (point.parameter, point.parameter + SHIFT);
        let difference = |a: State, b: State| -> State { std::array::from_fn(|i| (b[i] - a[i]) / SHIFT) };
        let start = ends.departure(shape, 0.0)?;
        let start_shift = difference(start, ends.departure(near, 0.0)?);
        let target = ends.target(shape, point.arrival)?;
        let target_shift = difference(target, ends.target(near, point.arrival)?);
        let terminal =
            fly(setting.lightness, &start, &start_shift, &point.costate, point.time, setting.tolerance)?;
        Some(OpenArrival { setting, terminal, target, target_shift }.rows(point, SHAPE_COLUMN))
    }

    fn moved(&self, point: &Point, step: &SVector<f64, 9>) -> Point {
        let costate = step.fixed_rows::<6>(0).into_owned();
        moved_point(point, costate, step[6] * TIME_COLUMN, step[7] * TIME_COLUMN, step[8] * SHAPE_COLUMN)
    }

    fn parameter(&self, point: &Point) -> f64 {
        point.parameter / SHAPE_COLUMN
    }
}

impl Growing<'_> {
    /// The parameter of a shape, in the scale of its column.
    pub fn scaled(shape: f64) -> f64 {
        shape / SHAPE_COLUMN
    }
}

/// Arrival point free on the orbits themselves, departure from the point of the start orbit reached at `parameter`.
pub struct Leaving<'a>(pub &'a Setting);

impl Curve<8, 9> for Leaving<'_> {
    type Point = Point;

    fn linearised(&self, point: &Point) -> Option<Row<8, 9>> {
        let setting = self.0;
        let start = setting.ends.departure(1.0, point.parameter)?;
        let target = setting.ends.target(1.0, point.arrival)?;
        let rate = coasting_rate(&start);
        let terminal = fly(setting.lightness, &start, &rate, &point.costate, point.time, setting.tolerance)?;
        Some(OpenArrival { setting, terminal, target, target_shift: [0.0; 6] }.rows(point, TIME_COLUMN))
    }

    fn moved(&self, point: &Point, step: &SVector<f64, 9>) -> Point {
        let costate = step.fixed_rows::<6>(0).into_owned();
        moved_point(point, costate, step[6] * TIME_COLUMN, step[7] * TIME_COLUMN, step[8] * TIME_COLUMN)
    }

    fn parameter(&self, point: &Point) -> f64 {
        point.parameter / TIME_COLUMN
    }
}

/// Which clock a rendezvous curve turns.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Clock {
    /// The target body is `parameter` ahead of its schedule; departure at the reference instant.
    Phase,
    /// Departure `parameter` after the reference instant; the target on schedule.
    Departure,
}

/// Six mismatches with a body that is at `target` and moves on at `along`, and the sphere; `by_leaving`: derivative of
/// state and costate at arrival with respect to the departure time, at fixed flight time.
pub(super) fn meeting_rows(
    scales: &[f64; 6],
    costate: &Vector6<f64>,
    terminal: &Terminal,
    by_leaving: &[f64; 12],
    (target, along): (&State, &State),
) -> Row<7, 8> {
    let Terminal { end, rates, by_costate, .. } = terminal;
    let mut value = SVector::<f64, 7>::zeros();
    let mut j = SMatrix::<f64, 7, 8>::zeros();
    for i in 0..6 {
        value[i] = (end[i] - target[i]) * scales[i];
        for k in 0..6 {
            j[(i, k)] = by_costate[(i, k)] * scales[i];
        }
        j[(i, 6)] = (rates[i] - along[i]) * scales[i] * PHASE_COLUMN;
        j[(i, 7)] = (by_leaving[i] - along[i]) * scales[i] * PHASE_COLUMN;
    }
    j.row_mut(6).fixed_columns_mut::<6>(0).copy_from(&costate.transpose());
    (value, j)
}

/// Meeting the target body itself.
pub struct Meeting<'a> {
    /// Orbits and sail.
    pub setting: &'a Setting,
    /// What the parameter is.
    pub clock: Clock,
}

impl Curve<7, 8> for Meeting<'_> {
    type Point = Point;

    fn linearised(&self, point: &Point) -> Option<Row<7, 8>> {
        let setting = self.setting;
        let leave = if self.clock == Clock::Departure { point.parameter } else { 0.0 };
        let start = setting.ends.departure(1.0, leave)?;
        let target = setting.ends.target(1.0, point.time + point.parameter)?;
        let (start_rate, along) = (coasting_rate(&start), coasting_rate(&target));
        let terminal =
            fly(setting.lightness, &start, &start_rate, &point.costate, point.time, setting.tolerance)?;
        let by_leaving = if self.clock == Clock::Departure { terminal.by_start } else { [0.0; 12] };
        let scales = row_scales(setting.ends.to.semi_major_axis);
        Some(meeting_rows(&scales, &point.costate, &terminal, &by_leaving, (&target, &along)))
    }

    fn moved(&self, point: &Point, step: &SVector<f64, 8>) -> Point {
        let costate = step.fixed_rows::<6>(0).into_owned();
        moved_point(point, costate, step[6] * PHASE_COLUMN, 0.0, step[7] * PHASE_COLUMN)
    }

    fn parameter(&self, point: &Point) -> f64 {
        point.parameter / PHASE_COLUMN
    }
}

impl Meeting<'_> {
    /// The parameter of a time, in the scale of its column.
    pub fn scaled(time: f64) -> f64 {
        time / PHASE_COLUMN
    }
}
