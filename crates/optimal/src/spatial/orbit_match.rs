//! Ending anywhere on the target orbit: from a given departure point, or from the best one.

use nalgebra::Vector6;
use numerics::arclength::{Ended, Goal, follow};

use super::curves::{Growing, Leaving, Point, Setting};
use super::ends::coasting_rate;
use super::growing_open::{GrowingOpen, OpenPoint};
use super::launch::{Care, grown, grown_to};
use super::polish::{Conditions, Flight, Kind, polish};
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

/// How far to march round the start orbit.
#[derive(Clone, Copy, Debug)]
struct Walk {
    /// Most Jacobians along one direction.
    budget: usize,
    /// Most turns of the start orbit along one direction.
    turns: f64,
    /// Whether to go only where flights become faster, and to stop at the first stationary point.
    downhill: bool,
}

/// Once round, both ways: meets every stationary point of nearly round orbits.
const ROUND: Walk = Walk { budget: 500, turns: 1.05, downhill: false };

/// Steep and eccentric targets have curves that wind: from turn to turn the flight differs, and the minimum may be some
/// turns away.
const DOWN: Walk = Walk { budget: 1500, turns: 6.0, downhill: true };

/// Departure points tried, evenly spread in time, where marching once round from the first meets no stationary one.
const PLACES: u32 = 8;

/// Of those, how many of the fastest to march from.
const FASTEST: usize = 3;

/// Flights with both ends free, fastest first.
///
/// A stationary point of flight time over departure place has l . (rate of the departure body) = 0. Those met while
/// marching round the start orbit are taken; where there are none, those of nearly round orbits are grown.
pub fn free_ends(setting: &Setting, conditions: &Conditions<'_>) -> Vec<Flown> {
    let mut found = Collected::new(conditions);
    if let Some(open) = launched(setting, 0.0, &Care::QUICK) {
        marched(setting, &open, &Care::QUICK, &ROUND, &mut found);
    }
    if found.flights.is_empty() {
        from_fastest(setting, &mut found);
    }
    if found.flights.is_empty() {
        grown_from_round(setting, &mut found);
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

/// Stationary departure points met while marching round the start orbit from `open`.
fn marched(setting: &Setting, open: &Point, care: &Care, walk: &Walk, found: &mut Collected<'_>) {
    for guess in crossings(setting, open, care, walk) {
        found.add(guess);
    }
}

/// Marches from the fastest of several departure points: a curve of flights has several sheets, and the one with the
/// least time is where its minimum is near.
fn from_fastest(setting: &Setting, found: &mut Collected<'_>) {
    let care = Care::CAREFUL;
    let place = |k: u32| launched(setting, period(setting) * f64::from(k) / f64::from(PLACES), &care);
    let mut points: Vec<Point> = (0..PLACES).filter_map(place).collect();
    points.sort_by(|a, b| a.time.total_cmp(&b.time));
    for open in points.iter().take(FASTEST) {
        if found.flights.is_empty() {
            marched(setting, open, &care, &DOWN, found);
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
    let (from, to) = (|time| round.ends.departure(1.0, time), |time| round.ends.target(1.0, time));
    let axis = round.ends.to.semi_major_axis;
    let nearly_round = Conditions { from: &from, to: &to, target_axis: axis, ..*found.conditions };
    let guesses = crossings(&round, &open, &care, &ROUND).into_iter();
    for guess in guesses.filter_map(|guess| polish(Kind::OpenEnds, &nearly_round, guess, care.tolerance)) {
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

/// Guesses of stationary departure points: where the gain changes sign along the curve of orbit matches.
fn crossings(setting: &Setting, open: &Point, care: &Care, walk: &Walk) -> Vec<Flight> {
    let reach = walk.turns * period(setting);
    let setting = Setting { tolerance: care.tolerance, ..*setting };
    let curve = Leaving(&setting);
    let mut guesses = Vec::new();
    let Some(first_gain) = leaving_gain(&setting, &open.costate, open.parameter) else { return guesses };
    // Leaving later makes the flight longer by the gain over the Hamiltonian: downhill is against its sign.
    let ways: &[f64] = if walk.downhill { &[first_gain.signum()] } else { &[1.0, -1.0] };
    for &sign in ways {
        let mut last = (*open, first_gain);
        let mut watch = |point: &Point| {
            let Some(gain) = leaving_gain(&setting, &point.costate, point.parameter) else { return false };
            if last.1 * gain < 0.0 {
                guesses.push(between(&last.0, point, last.1 / (last.1 - gain)));
            }
            last = (*point, gain);
            let arrived = walk.downhill && !guesses.is_empty();
            !arrived && (point.parameter - open.parameter).abs() < reach
        };
        let goal = Goal { parameter: f64::INFINITY * sign, sign };
        let stride = numerics::arclength::Stride { budget: walk.budget, ..care.stride() };
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
