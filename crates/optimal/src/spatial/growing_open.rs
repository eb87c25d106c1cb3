//! Both ends free while the orbits grow from nearly round to themselves.
//!
//! On nearly round orbits the best departure points are found by going once round; each is then followed here. For
//! eccentric or steep targets this finds what going round the final orbit does not.

use nalgebra::{SMatrix, SVector};
use numerics::arclength::{Curve, Row};

use super::curves::{Point, SHAPE_COLUMN, SHIFT, Setting, TIME_COLUMN, moved_point, row_scales, sphere_row};
use super::ends::{State, coasting_acceleration, coasting_rate};
use super::terminal::{Terminal, fly_two_ways};

/// A point of [`GrowingOpen`]: the curves' own, with the departure place as a further unknown.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OpenPoint {
    /// Costate, time, arrival place, and the shape as parameter.
    pub point: Point,
    /// Departure place on the start orbit, as a time.
    pub departure: f64,
}

/// Departure and arrival point free; the parameter is the shape.
pub struct GrowingOpen<'a>(pub &'a Setting);

impl Curve<9, 10> for GrowingOpen<'_> {
    type Point = OpenPoint;

    fn linearised(&self, at: &OpenPoint) -> Option<Row<9, 10>> {
        let setting = self.0;
        let OpenPoint { point, departure } = at;
        let (shape, near) = (point.parameter, point.parameter + SHIFT);
        let difference = |a: &State, b: State| -> State { std::array::from_fn(|i| (b[i] - a[i]) / SHIFT) };
        let start = setting.ends.departure(shape, *departure)?;
        let start_grows = difference(&start, setting.ends.departure(near, *departure)?);
        let target = setting.ends.target(shape, point.arrival)?;
        let target_near = setting.ends.target(near, point.arrival)?;
        let target_grows = difference(&target, target_near);
        let leaving = coasting_rate(&start);
        let (terminal, by_shape) = fly_two_ways(
            setting.lightness,
            &start,
            [&leaving, &start_grows],
            &point.costate,
            point.time,
            setting.tolerance,
        )?;
        let Terminal { end, rates, by_costate, by_start } = &terminal;
        let scales = row_scales(setting.ends.to.semi_major_axis);
        let (along, bend) = (coasting_rate(&target), coasting_acceleration(&target));
        let along_grows = difference(&along, coasting_rate(&target_near));
        let leaving_bend = coasting_acceleration(&start);
        let leaving_grows = difference(&leaving, coasting_rate(&setting.ends.departure(near, *departure)?));
        // Rows: six mismatches, transversality at arrival, at departure, the sphere.
        // Columns: costate, time, arrival place, departure place, shape.
        let mut value = SVector::<f64, 9>::zeros();
        let mut j = SMatrix::<f64, 9, 10>::zeros();
        for i in 0..6 {
            value[i] = (end[i] - target[i]) * scales[i];
            value[6] += end[6 + i] * along[i];
            value[7] += point.costate[i] * leaving[i];
            for k in 0..6 {
                j[(i, k)] = by_costate[(i, k)] * scales[i];
                j[(6, k)] += by_costate[(6 + i, k)] * along[i];
            }
            j[(i, 6)] = rates[i] * scales[i] * TIME_COLUMN;
            j[(i, 7)] = -along[i] * scales[i] * TIME_COLUMN;
            j[(i, 8)] = by_start[i] * scales[i] * TIME_COLUMN;
            j[(i, 9)] = (by_shape[i] - target_grows[i]) * scales[i] * SHAPE_COLUMN;
            j[(6, 6)] += rates[6 + i] * along[i] * TIME_COLUMN;
            j[(6, 7)] += end[6 + i] * bend[i] * TIME_COLUMN;
            j[(6, 8)] += by_start[6 + i] * along[i] * TIME_COLUMN;
            j[(6, 9)] += (by_shape[6 + i] * along[i] + end[6 + i] * along_grows[i]) * SHAPE_COLUMN;
            j[(7, i)] = leaving[i];
            j[(7, 8)] += point.costate[i] * leaving_bend[i] * TIME_COLUMN;
            j[(7, 9)] += point.costate[i] * leaving_grows[i] * SHAPE_COLUMN;
        }
        j.row_mut(8).copy_from(&sphere_row::<10>(point).transpose());
        Some((value, j))
    }

    fn moved(&self, at: &OpenPoint, step: &SVector<f64, 10>) -> OpenPoint {
        let costate = step.fixed_rows::<6>(0).into_owned();
        let (time, arrival) = (step[6] * TIME_COLUMN, step[7] * TIME_COLUMN);
        OpenPoint {
            point: moved_point(&at.point, costate, time, arrival, step[9] * SHAPE_COLUMN),
            departure: at.departure + step[8] * TIME_COLUMN,
        }
    }

    fn parameter(&self, at: &OpenPoint) -> f64 {
        at.point.parameter / SHAPE_COLUMN
    }
}
