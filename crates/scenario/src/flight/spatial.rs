//! Flights between orbits in space, dated or not.

use std::f64::consts::TAU;

use optimal::spatial::curves::Setting;
use optimal::spatial::ends::{Ends, eccentricity, ordered};
use optimal::spatial::launch::coplanar_point;
use optimal::spatial::polish::{Conditions, Kind};
use optimal::spatial::prove::Flown;
use optimal::spatial::{excess, orbit_match, rendezvous};
use orbits::ephemeris::Traveller;
use orbits::epochs;
use orbits::units;

use super::{THERMAL, allowance, described, judged, prove, tell_excess, unsolved};
use crate::histories::columns;
use crate::place::traveller;
use crate::report::{Branch, Columns, Flight, Status};
use crate::schema::{Arrive, Scenario};

/// Tolerance from which tracing starts; each way of tracing sets its own.
const TRACING: f64 = 1e-7;

/// Orbits whose states differ by less than this everywhere (in parts of size and speed) are one orbit.
const SAME_ORBIT: f64 = optimal::certificate::CONVERGED_MISS;

pub(super) fn flight(scenario: &Scenario, lightness: f64) -> (Flight, Columns) {
    let bodies = Bodies::new(scenario);
    let Some(ends) = bodies.ends() else {
        let message = "Not converged: an orbit has no place at that date.".to_owned();
        return (unsolved(Status::NotConverged, message, "none"), Columns::default());
    };
    if scenario.arrive == Arrive::Orbit && same_orbit(&ends) {
        let message =
            "Start and target are the same orbit to one part in ten million: there is nothing to fly.";
        let mut flight = unsolved(Status::Converged, message.into(), "nothing to fly");
        flight.time_d = Some(0.0);
        flight.revolutions = Some(0.0);
        flight.depart = bodies.date(0.0);
        flight.arrive = bodies.date(0.0);
        return (flight, Columns::default());
    }
    let setting = Setting { ends, lightness, tolerance: TRACING };
    let frozen = |orbit: orbits::kepler::Elements| {
        move |time: f64| orbit.later(1.0, time).state(1.0).ok().map(|body| ordered(&body))
    };
    let (from, to) = (frozen(setting.ends.from), frozen(setting.ends.to));
    let target_axis = setting.ends.to.semi_major_axis;
    let allowance = allowance(scenario);
    let found = match (scenario.arrive, scenario.depart) {
        (Arrive::Rendezvous, _) => {
            let moving = |time: f64| {
                let there = bodies.to.state(bodies.reference_j2000_d + units::days(time)).ok()?;
                Some(ordered(&there))
            };
            let conditions = Conditions { lightness, from: &from, to: &moving, target_axis };
            let plain = rendezvous::flights(&setting, &conditions);
            excess::granted(Kind::Meeting, &conditions, &allowance, plain)
        }
        (_, Some(_)) => {
            let conditions = Conditions { lightness, from: &from, to: &to, target_axis };
            let plain = orbit_match::from_given_point(&setting, &conditions).into_iter().collect();
            excess::granted(Kind::OpenArrival, &conditions, &allowance, plain)
        }
        (_, None) => {
            let conditions = Conditions { lightness, from: &from, to: &to, target_axis };
            let plain = orbit_match::free_ends(&setting, &conditions);
            excess::granted(Kind::OpenEnds, &conditions, &allowance, plain)
        }
    };
    told(scenario, &bodies, &setting, &found)
}

/// The two bodies and the instant from which times count.
struct Bodies {
    from: Traveller,
    to: Traveller,
    /// Departure date, or J2000 for flights without one; days since J2000.
    reference_j2000_d: f64,
    dated: bool,
}

impl Bodies {
    fn new(scenario: &Scenario) -> Bodies {
        let date = scenario.depart.and_then(crate::date::Date::j2000_d);
        Bodies {
            from: traveller(&scenario.from),
            to: traveller(&scenario.to),
            reference_j2000_d: date.unwrap_or(0.0),
            dated: date.is_some(),
        }
    }

    /// Both orbits frozen at the reference instant.
    fn ends(&self) -> Option<Ends> {
        let (from, to) =
            (self.from.elements(self.reference_j2000_d), self.to.elements(self.reference_j2000_d));
        (from.state(1.0).is_ok() && to.state(1.0).is_ok()).then(|| Ends::new(from, to))
    }

    /// Calendar date `time` (canonical) after departure; only flights with a date have one.
    fn date(&self, time: f64) -> Option<String> {
        if !self.dated {
            return None;
        }
        epochs::iso_instant(self.reference_j2000_d + units::days(time))
    }
}

/// Whether a body on one orbit could be anywhere on the other: the same ellipse in the same plane.
fn same_orbit(ends: &Ends) -> bool {
    let period = TAU * ends.from.semi_major_axis.powf(1.5);
    if (ends.to.semi_major_axis / ends.from.semi_major_axis - 1.0).abs() > SAME_ORBIT {
        return false;
    }
    // With equal periods, equal orbits are equal states up to a shift in time: compare at equal longitudes.
    let shift = (ends.departure_longitude() - ends.target_longitude()) / TAU * period;
    (0..8).all(|k| {
        let time = period * f64::from(k) / 8.0;
        let pair = ends.departure(1.0, time).zip(ends.target(1.0, time + shift));
        pair.is_some_and(|(a, b)| {
            (0..6).all(|i| (a[i] - b[i]).abs() < SAME_ORBIT * ends.from.semi_major_axis)
        })
    })
}

/// The best of the flights found, in the report's units.
fn told(scenario: &Scenario, bodies: &Bodies, setting: &Setting, found: &[Flown]) -> (Flight, Columns) {
    let judged_best = found.iter().find_map(|flown| judged(&flown.evidence).map(|verdict| (flown, verdict)));
    let Some((best, (status, message))) = judged_best else { return not_converged(setting) };
    let mut flight = described(best.flight.time, &best.trajectory, method(scenario));
    flight.status = status;
    flight.message = message;
    flight.depart = bodies.date(0.0);
    flight.arrive = bodies.date(best.flight.time);
    tell_excess(&mut flight, &best.excess);
    flight.final_eccentricity = eccentricity(&best.end);
    prove(&mut flight.proof, &best.evidence);
    flight.proof.extremals_found = found.len() as u32;
    flight.branches = found
        .iter()
        .map(|flown| Branch {
            time_d: units::days(flown.flight.time),
            revolutions: flown.trajectory.swept / TAU,
            best: std::ptr::eq(flown, best),
        })
        .collect();
    let histories = columns(&best.trajectory, THERMAL);
    (flight, histories)
}

fn method(scenario: &Scenario) -> &'static str {
    match (scenario.arrive, scenario.depart) {
        (Arrive::Rendezvous, _) => {
            "Pontryagin's principle, shooting: coplanar optimum grown into the orbits, then the target turned to its \
             place, both ways, by pseudo-arclength; re-flown at 1e-13 or tighter"
        }
        (_, Some(_)) => {
            "Pontryagin's principle, shooting: coplanar optimum grown into the orbits by pseudo-arclength, arrival point \
             free; re-flown at 1e-13 or tighter"
        }
        (_, None) => {
            "Pontryagin's principle, shooting: coplanar optimum grown into the orbits, then the departure point moved \
             round its orbit by pseudo-arclength, both ends free; re-flown at 1e-13 or tighter"
        }
    }
}

fn not_converged(setting: &Setting) -> (Flight, Columns) {
    let message = "Not converged: no flight between these orbits was found within the budget. The estimate is that of \
                   coplanar circles, not a result.";
    let method = "pseudo-arclength from the coplanar optimum";
    let mut flight = unsolved(Status::NotConverged, message.into(), method);
    flight.estimate = coplanar_point(setting).map(|point| units::days(point.time));
    (flight, Columns::default())
}
