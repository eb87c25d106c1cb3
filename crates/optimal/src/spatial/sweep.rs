//! Meeting a moving body on one departure date after another: branches marched along the calendar.
//!
//! On the way the target is where the ephemeris says, so that a marched flight needs only its last digits polished.
//! Source of the predictor and of what to do at steep places: see `numerics::arclength`.

use nalgebra::SVector;
use numerics::arclength::{Curve, Ended, Goal, Row, Stride, follow};

use super::curves::{PHASE_COLUMN, Point, Setting, meeting_rows, moved_point, row_scales};
use super::ends::{Ends, coasting_rate};
use super::launch::Care;
use super::polish::{Conditions, Exactness, Flight, Kind, polish};
use super::prove::evidence;
use super::rendezvous::traced;
use super::terminal::fly;
use crate::certificate::{Evidence, Verdict};

/// One craft between two bodies, at any departure.
#[derive(Clone, Copy)]
pub struct Route<'a> {
    /// Sail and bodies.
    pub conditions: Conditions<'a>,
    /// Orbits of both at a time (canonical, from the reference instant): where cold starts begin.
    pub ends: &'a dyn Fn(f64) -> Ends,
}

/// A flight that can be marched on.
#[derive(Clone, Debug)]
pub struct Branch {
    /// The flight, exact to about the square of [`ACCEPT`]: good to march and compare, not to report.
    pub flight: Flight,
    /// Its rate of change with the departure time: costate and flight time, in the scale of the columns.
    rate: SVector<f64, 7>,
    /// The rate of that rate, once two dates are known.
    bend: SVector<f64, 7>,
}

/// Tolerance of integrations on the way.
const TOLERANCE: f64 = 1e-9;

/// A correction at most this long ends the corrections of a marched flight.
const ACCEPT: f64 = 3e-4;

/// The first correction of a natural step, in parts of the step: beyond it the step is taken along the arc instead.
const NATURAL: f64 = 0.15;

/// The curve of flights to the body where it will be, departure at the parameter.
struct Calendar<'a>(&'a Conditions<'a>);

impl Curve<7, 8> for Calendar<'_> {
    type Point = Point;

    fn linearised(&self, point: &Point) -> Option<Row<7, 8>> {
        let conditions = self.0;
        let start = (conditions.from)(point.parameter)?;
        let target = (conditions.to)(point.parameter + point.time)?;
        let (leaving, along) = (coasting_rate(&start), coasting_rate(&target));
        let terminal = fly(conditions.lightness, &start, &leaving, &point.costate, point.time, TOLERANCE)?;
        let scales = row_scales(conditions.target_axis);
        Some(meeting_rows(&scales, &point.costate, &terminal, &terminal.by_start, (&target, &along)))
    }

    fn moved(&self, point: &Point, step: &SVector<f64, 8>) -> Point {
        let costate = step.fixed_rows::<6>(0).into_owned();
        moved_point(point, costate, step[6] * PHASE_COLUMN, 0.0, step[7] * PHASE_COLUMN)
    }

    fn parameter(&self, point: &Point) -> f64 {
        point.parameter / PHASE_COLUMN
    }
}

fn point(flight: &Flight) -> Point {
    Point { costate: flight.costate, time: flight.time, arrival: 0.0, parameter: flight.departure }
}

fn flight(point: &Point) -> Flight {
    let arrival = point.parameter + point.time;
    Flight { costate: point.costate, departure: point.parameter, time: point.time, arrival }
}

/// Newton at a fixed departure from `start`; the first correction at most `longest`.
fn corrected(conditions: &Conditions<'_>, start: Point, longest: f64) -> Option<Branch> {
    let curve = Calendar(conditions);
    let (mut now, mut last) = (start, longest / 0.5);
    for _ in 0..6 {
        let (value, jacobian) = curve.linearised(&now)?;
        let square = jacobian.fixed_columns::<7>(0).into_owned().lu();
        let step = square.solve(&-value)?;
        let length = step.norm();
        if length.is_nan() || length > 0.5 * last {
            return None;
        }
        last = length;
        now = curve.moved(&now, &step.push(0.0));
        if length <= ACCEPT {
            let rate = square.solve(&-jacobian.column(7).into_owned())?;
            return Some(Branch { flight: flight(&now), rate, bend: SVector::zeros() });
        }
    }
    None
}

impl Branch {
    /// Takes up a flight found elsewhere; `None` where nothing near it meets the body.
    pub fn taken_up(conditions: &Conditions<'_>, found: &Flight) -> Option<Branch> {
        corrected(conditions, point(found), 0.3)
    }

    /// The branch at another departure; `None` when it is lost on the way.
    pub fn marched(&self, conditions: &Conditions<'_>, departure: f64) -> Option<Branch> {
        let gap = (departure - self.flight.departure) / PHASE_COLUMN;
        if gap == 0.0 {
            return Some(self.clone());
        }
        let curve = Calendar(conditions);
        let ahead = self.rate * gap + self.bend * (0.5 * gap * gap);
        let mut guess = curve.moved(&point(&self.flight), &ahead.push(gap));
        guess.parameter = departure;
        let length = ahead.push(gap).norm();
        let natural = corrected(conditions, guess, NATURAL * length.min(1.0));
        let mut next = natural.or_else(|| {
            let goal = Goal { parameter: departure / PHASE_COLUMN, sign: gap.signum() };
            let followed = follow(&curve, point(&self.flight), &goal, &ALONG, &mut |_| true);
            let end = Some(followed).filter(|x| x.ended == Ended::Reached)?;
            corrected(conditions, Point { parameter: departure, ..end.point }, 0.1)
        })?;
        next.bend = (next.rate - self.rate) / gap;
        Some(next)
    }
}

/// Steps along the arc where the calendar is steep.
const ALONG: Stride =
    Stride { first: 0.05, largest: 0.6, smallest: 1e-6, accept: 2e-3, wanted_correction: 0.01, budget: 150 };

/// Every branch that a cold start finds at a departure: two, as a rule.
pub fn cold(route: &Route<'_>, departure: f64, care: &Care) -> Vec<Branch> {
    let conditions = &route.conditions;
    let setting =
        Setting { ends: (route.ends)(departure), lightness: conditions.lightness, tolerance: care.tolerance };
    let mut found = Vec::new();
    for point in traced(&setting, care) {
        let arrival = departure + point.time;
        let flight = Flight { costate: point.costate, departure, time: point.time, arrival };
        found.extend(Branch::taken_up(conditions, &flight));
    }
    found
}

/// Adds the branches that are not known yet.
pub fn merge(known: &mut Vec<Branch>, new: impl IntoIterator<Item = Branch>) {
    for branch in new {
        let alike = |other: &Branch| (other.flight.time / branch.flight.time - 1.0).abs() < 1e-5;
        if !known.iter().any(alike) {
            known.push(branch);
        }
    }
    known.sort_by(|a, b| a.flight.time.total_cmp(&b.flight.time));
}

/// A polished flight and what re-flying it showed.
#[derive(Clone, Copy, Debug)]
pub struct Settled {
    /// The flight, to its last digits.
    pub flight: Flight,
    /// What re-flying showed.
    pub evidence: Evidence,
}

/// Polishes and re-flies a marched flight; with the utmost exactness where the usual one does not suffice.
pub fn settled(conditions: &Conditions<'_>, branch: &Branch) -> Option<Settled> {
    let at = |flight: Flight, exactness: Exactness| {
        let flight = polish(Kind::Meeting, conditions, flight, exactness.polish)?;
        Some(Settled { flight, evidence: evidence(conditions, &flight, exactness.prove)? })
    };
    let usual = at(branch.flight, Exactness::USUAL)?;
    if usual.evidence.verdict() == Verdict::Converged {
        return Some(usual);
    }
    let utmost = at(usual.flight, Exactness::UTMOST);
    Some(utmost.filter(|x| x.evidence.verdict() == Verdict::Converged).unwrap_or(usual))
}
