//! Ending anywhere on the target orbit: from a given departure point, or from the best one.

use nalgebra::Vector6;
use numerics::arclength::{Ended, Goal, follow};

use super::curves::{Growing, Leaving, Point, Setting};
use super::ends::coasting_rate;
use super::growing_open::{GrowingOpen, OpenPoint};
use super::launch::{Care, grown, grown_to};
use super::polish::{Conditions, Flight, Kind};
use super::prove::{Flown, answered};
use super::rendezvous::same;

/// The flight from the departure orbit's point at the reference instant; `None` when no way of tracing finds it.
pub fn from_given_point(setting: &Setting, conditions: &Conditions<'_>) -> Option<Flown> {
    [Care::QUICK, Care::CAREFUL].iter().find_map(|care| {
        let open = grown(setting, care)?;
        answered(Kind::OpenArrival, conditions, flight(&open, 0.0))
    })
}

fn flight(point: &Point, departure: f64) -> Flight {
    Flight { costate: point.costate, departure, time: point.time, arrival: point.arrival }
}

/// Departure points from which a search starts, as parts of the start orbit's period.
const STARTS: [f64; 3] = [0.0, 1.0 / 3.0, 2.0 / 3.0];

/// Most Jacobians along one direction of one curve, from the first start and from the later ones.
const BUDGETS: [usize; 3] = [500, 1500, 1500];

/// Flights with both ends free, fastest first.
///
/// A stationary point of flight time over departure place has l . (rate of the departure body) = 0. Those met while
/// marching round the start orbit are taken; where there are none, those of nearly round orbits are grown.
pub fn free_ends(setting: &Setting, conditions: &Conditions<'_>) -> Vec<Flown> {
    let mut found = Collected::new(conditions);
    marched(setting, STARTS[0], BUDGETS[0], &mut found);
    if found.flights.is_empty() {
        grown_from_round(setting, &mut found);
    }
    for (part, budget) in STARTS.into_iter().zip(BUDGETS).skip(1) {
        if found.flights.is_empty() {
            marched(setting, part, budget, &mut found);
        }
    }
    found.sorted()
}

/// Distinct proven flights.
struct Collected<'a> {
    conditions: &'a Conditions<'a>,
    flights: Vec<Flown>,
}

impl<'a> Collected<'a> {
    fn new(conditions: &'a Conditions<'a>) -> Self {
        Collected { conditions, flights: Vec::new() }
    }

    fn add(&mut self, guess: Flight) {
        let answer = answered(Kind::OpenEnds, self.conditions, guess);
        let known = |new: &Flown| self.flights.iter().any(|known| same(&known.flight, &new.flight));
        if let Some(new) = answer.filter(|new| !known(new)) {
            self.flights.push(new);
        }
    }

    fn sorted(mut self) -> Vec<Flown> {
        self.flights.sort_by(|a, b| a.flight.time.total_cmp(&b.flight.time));
        self.flights
    }
}

/// Stationary departure points met while marching round the start orbit from a part of its period.
fn marched(setting: &Setting, part: f64, budget: usize, found: &mut Collected<'_>) {
    let period = period(setting);
    for care in [Care::QUICK, Care::CAREFUL] {
        if !found.flights.is_empty() {
            return;
        }
        if let Some(open) = launched(setting, part * period, &care) {
            crossings(setting, &open, period, &care, budget).into_iter().for_each(|guess| found.add(guess));
        }
    }
}

fn period(setting: &Setting) -> f64 {
    std::f64::consts::TAU * setting.ends.from.semi_major_axis.powf(1.5)
}

/// Shape at which orbits are still so round that marching meets every stationary departure point.
const NEARLY_ROUND: f64 = 0.1;

/// Stationary departure points of nearly round orbits, grown to the orbits themselves.
fn grown_from_round(setting: &Setting, found: &mut Collected<'_>) {
    let care = Care::CAREFUL;
    let round = Setting { ends: setting.ends.at_shape(NEARLY_ROUND), tolerance: care.tolerance, ..*setting };
    let Some(open) = grown_to(&Setting { tolerance: care.tolerance, ..*setting }, &care, NEARLY_ROUND) else {
        return;
    };
    let open = Point { parameter: 0.0, ..open };
    let tracing = Setting { tolerance: care.tolerance, ..*setting };
    let curve = GrowingOpen(&tracing);
    for guess in crossings(&round, &open, period(setting), &care, BUDGETS[1]) {
        let point = Point {
            costate: guess.costate,
            time: guess.time,
            arrival: guess.arrival,
            parameter: NEARLY_ROUND,
        };
        let goal = Goal { parameter: Growing::scaled(1.0), sign: 1.0 };
        let start = OpenPoint { point, departure: guess.departure };
        let followed = follow(&curve, start, &goal, &care.stride(), &mut |_| true);
        if followed.ended == Ended::Reached {
            found.add(flight(&followed.point.point, followed.point.departure));
        }
    }
}

/// An orbit match that leaves from the place `departure` on the start orbit; the point's parameter is that place.
fn launched(setting: &Setting, departure: f64, care: &Care) -> Option<Point> {
    let mut shifted = *setting;
    shifted.ends.from = shifted.ends.from.later(1.0, departure);
    let open = grown(&shifted, care)?;
    Some(Point { parameter: departure, ..open })
}

/// Gain of leaving from a place a little later on the start orbit: zero where the departure point is the best, the worst
/// or a saddle.
fn leaving_gain(setting: &Setting, costate: &Vector6<f64>, departure: f64) -> Option<f64> {
    let start = setting.ends.departure(1.0, departure)?;
    Some((0..6).map(|i| costate[i] * coasting_rate(&start)[i]).sum())
}

/// Guesses of stationary departure points: where the gain changes sign along the curve of orbit matches, followed both
/// ways until it has gone once round the start orbit.
fn crossings(setting: &Setting, open: &Point, period: f64, care: &Care, budget: usize) -> Vec<Flight> {
    let setting = Setting { tolerance: care.tolerance, ..*setting };
    let curve = Leaving(&setting);
    let mut guesses = Vec::new();
    for sign in [1.0, -1.0] {
        let mut last = (*open, leaving_gain(&setting, &open.costate, open.parameter));
        let mut watch = |point: &Point| {
            let gain = leaving_gain(&setting, &point.costate, point.parameter);
            if let (Some(before), Some(now)) = (last.1, gain)
                && before * now < 0.0
            {
                guesses.push(between(&last.0, point, before / (before - now)));
            }
            last = (*point, gain);
            (point.parameter - open.parameter).abs() < period
        };
        let goal = Goal { parameter: f64::INFINITY * sign, sign };
        let stride = numerics::arclength::Stride { budget, ..care.stride() };
        let followed = follow(&curve, *open, &goal, &stride, &mut watch);
        // Once round in one direction has seen every departure point: the other would meet them again.
        if followed.ended == Ended::Told {
            break;
        }
    }
    guesses
}

/// The flight a fraction of the way between two neighbouring points of a curve.
fn between(a: &Point, b: &Point, fraction: f64) -> Flight {
    let mix = |a: f64, b: f64| a + (b - a) * fraction;
    Flight {
        costate: (a.costate + (b.costate - a.costate) * fraction).normalize(),
        departure: mix(a.parameter, b.parameter),
        time: mix(a.time, b.time),
        arrival: mix(a.arrival, b.arrival),
    }
}
