//! One branch of flights to a moving body, marched along the calendar of departure dates.
//!
//! The target is where the ephemeris says, so that a marched flight needs only its last digits polished. Steps are
//! natural, with a predictor of third order; where the calendar is steep they follow the arc.

use nalgebra::{Matrix3, SVector, Vector3, Vector6};
use numerics::arclength::{Curve, Ended, Goal, Row, Stride, follow};

use super::curves::{PHASE_COLUMN, Point, meeting_rows, moved_point, row_scales};
use super::ends::{State, coasting_rate};
use super::polish::{Conditions, Flight};
use super::terminal::{Terminal, fly};

/// A flight that can be marched on.
#[derive(Clone, Debug)]
pub struct Branch {
    /// The flight, exact to about the square of [`ACCEPT`]: good to march and to compare, not to report.
    pub flight: Flight,
    /// Where it stands on its curve.
    now: Stand,
    /// Where it stood one step before.
    before: Option<Stand>,
}

/// A point of a curve and the curve's direction there: change of costate and flight time per unit of parameter, in
/// the scale of the columns.
#[derive(Clone, Copy, Debug)]
struct Stand {
    point: Point,
    rate: SVector<f64, 7>,
    /// Tolerance of the integrations that it needed.
    tolerance: f64,
}

/// Tolerance of integrations on the way: the usual one, and that of flights which wait nearly edge-on on the departure
/// orbit, whose ends move by up to 1e7 times a change of the first costate.
const TOLERANCE: f64 = 1e-9;
const TIGHT: f64 = 1e-12;

/// A correction at most this long ends the corrections of a marched flight.
const ACCEPT: f64 = 3e-4;

/// Longest first correction of a natural step; beyond it the step is halved.
const NATURAL: f64 = 0.03;

/// How often a step is halved before it is taken along the arc instead.
const HALVINGS: u32 = 3;

/// The curve of flights to the body where it will be, departure at the parameter.
///
/// Costates count along the departure body's own outward, forward and upward directions: those of a flight that
/// waits turn with the body, and their curve would be a helix in fixed axes.
struct Calendar<'a> {
    conditions: &'a Conditions<'a>,
    tolerance: f64,
}

/// Outward, forward and upward at `start`, and how fast the first two turn.
fn frame(start: &State) -> (Matrix3<f64>, f64) {
    let (r, v) = (Vector3::new(start[0], start[1], start[2]), Vector3::new(start[3], start[4], start[5]));
    let momentum = r.cross(&v);
    let (outward, up) = (r.normalize(), momentum.normalize());
    (Matrix3::from_columns(&[outward, up.cross(&outward), up]), momentum.norm() / r.norm_squared())
}

fn turned(axes: &Matrix3<f64>, costate: &Vector6<f64>) -> Vector6<f64> {
    let (l, p) = (axes * costate.fixed_rows::<3>(0), axes * costate.fixed_rows::<3>(3));
    Vector6::new(l.x, l.y, l.z, p.x, p.y, p.z)
}

impl Curve<7, 8> for Calendar<'_> {
    type Point = Point;

    fn linearised(&self, point: &Point) -> Option<Row<7, 8>> {
        let conditions = self.conditions;
        let start = (conditions.from)(point.parameter)?;
        let target = (conditions.to)(point.parameter + point.time)?;
        let (leaving, along) = (coasting_rate(&start), coasting_rate(&target));
        let (axes, swing) = frame(&start);
        let costate = turned(&axes, &point.costate);
        let fixed = fly(conditions.lightness, &start, &leaving, &costate, point.time, self.tolerance)?;
        let mut by_costate = fixed.by_costate;
        for k in [0, 3] {
            let block = fixed.by_costate.fixed_columns::<3>(k) * axes;
            by_costate.fixed_columns_mut::<3>(k).copy_from(&block);
        }
        let l = point.costate;
        let turning = Vector6::new(-l[1], l[0], 0.0, -l[4], l[3], 0.0) * swing;
        let carried = by_costate * turning;
        let by_start = std::array::from_fn(|i| fixed.by_start[i] + carried[i]);
        let terminal = Terminal { by_costate, by_start, ..fixed };
        let scales = row_scales(conditions.target_axis);
        Some(meeting_rows(&scales, &point.costate, &terminal, &by_start, (&target, &along)))
    }

    fn moved(&self, point: &Point, step: &SVector<f64, 8>) -> Point {
        let costate = step.fixed_rows::<6>(0).into_owned();
        moved_point(point, costate, step[6] * PHASE_COLUMN, 0.0, step[7] * PHASE_COLUMN)
    }

    fn parameter(&self, point: &Point) -> f64 {
        point.parameter / PHASE_COLUMN
    }
}

/// Newton at a fixed departure from `start`; the first correction at most `longest`.
fn corrected(conditions: &Conditions<'_>, tolerance: f64, start: Point, longest: f64) -> Option<Stand> {
    let curve = Calendar { conditions, tolerance };
    let (mut now, mut last) = (start, longest);
    for pass in 0..6 {
        let (value, jacobian) = curve.linearised(&now)?;
        let square = jacobian.fixed_columns::<7>(0).into_owned().lu();
        let step = square.solve(&-value)?;
        let length = step.norm();
        // Where the last correction was short in all but a weak direction, the second may be as long as the first.
        let limit = if pass < 2 { longest } else { 0.5 * last };
        if length.is_nan() || length > limit {
            return None;
        }
        last = length;
        now = curve.moved(&now, &step.push(0.0));
        if length <= ACCEPT {
            let rate = square.solve(&-jacobian.column(7).into_owned())?;
            return Some(Stand { point: now, rate, tolerance });
        }
    }
    None
}

impl Stand {
    /// Where the curve leads to: along its direction, or along the cubic through this stand and the one before.
    fn ahead(&self, before: Option<&Stand>, parameter: f64) -> Point {
        let there = |point: &Point| point.costate.push(point.time / PHASE_COLUMN);
        let gap = (parameter - self.point.parameter) / PHASE_COLUMN;
        let place = match before {
            None => there(&self.point) + self.rate * gap,
            Some(before) => {
                let span = (self.point.parameter - before.point.parameter) / PHASE_COLUMN;
                let s = 1.0 + gap / span;
                there(&before.point) * ((2.0 * s - 3.0) * s * s + 1.0)
                    + before.rate * (((s - 2.0) * s + 1.0) * s * span)
                    + there(&self.point) * ((3.0 - 2.0 * s) * s * s)
                    + self.rate * ((s - 1.0) * s * s * span)
            }
        };
        let costate = place.fixed_rows::<6>(0).normalize();
        Point { costate, time: place[6] * PHASE_COLUMN, arrival: 0.0, parameter }
    }
}

impl Branch {
    /// Takes up a flight found elsewhere; `None` where nothing near it meets the body.
    pub fn taken_up(conditions: &Conditions<'_>, found: &Flight) -> Option<Branch> {
        let (axes, _) = frame(&(conditions.from)(found.departure)?);
        let costate = turned(&axes.transpose(), &found.costate);
        let point = Point { costate, time: found.time, arrival: 0.0, parameter: found.departure };
        Branch::standing(conditions, corrected(conditions, TOLERANCE, point, 0.3)?, None)
    }

    fn standing(conditions: &Conditions<'_>, now: Stand, before: Option<Stand>) -> Option<Branch> {
        let Point { time, parameter: departure, .. } = now.point;
        let (axes, _) = frame(&(conditions.from)(departure)?);
        let costate = turned(&axes, &now.point.costate);
        Some(Branch { flight: Flight { costate, departure, time, arrival: departure + time }, now, before })
    }

    /// The branch at another departure; `None` when it is lost on the way.
    pub fn marched(&self, conditions: &Conditions<'_>, departure: f64) -> Option<Branch> {
        let (now, before) = onward(conditions, self.now, self.before, departure, HALVINGS)?;
        Branch::standing(conditions, now, before)
    }
}

/// A natural step to `departure`; in halves, or along the arc, where the curve bends too much for it.
fn onward(
    conditions: &Conditions<'_>,
    now: Stand,
    before: Option<Stand>,
    departure: f64,
    halvings: u32,
) -> Option<(Stand, Option<Stand>)> {
    if departure == now.point.parameter {
        return Some((now, before));
    }
    let guess = now.ahead(before.as_ref(), departure);
    for tolerance in [TOLERANCE, TIGHT].into_iter().filter(|tolerance| *tolerance <= now.tolerance) {
        if let Some(next) = corrected(conditions, tolerance, guess, NATURAL) {
            return Some((next, Some(now)));
        }
    }
    if halvings > 0 {
        let middle = 0.5 * (now.point.parameter + departure);
        let (half, before) = onward(conditions, now, before, middle, halvings - 1)?;
        return onward(conditions, half, before, departure, halvings - 1);
    }
    let sign = (departure - now.point.parameter).signum();
    let goal = Goal { parameter: departure / PHASE_COLUMN, sign };
    let followed =
        follow(&Calendar { conditions, tolerance: TIGHT }, now.point, &goal, &ALONG, &mut |_| true);
    let end = Some(followed).filter(|x| x.ended == Ended::Reached)?;
    let next = corrected(conditions, TIGHT, Point { parameter: departure, ..end.point }, 0.1)?;
    Some((next, Some(now)))
}

/// Steps along the arc where the calendar is steep.
const ALONG: Stride =
    Stride { first: 0.02, largest: 0.6, smallest: 1e-6, accept: 1e-3, wanted_correction: 0.01, budget: 100 };
