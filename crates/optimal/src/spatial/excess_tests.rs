//! Laws of spatial flights with excess speed; outside values are compared in `tests/excess.rs`.

use orbits::kepler::Elements;
use orbits::{ephemeris::Traveller, planets::Planet, units};

use super::*;
use crate::coplanar;
use crate::spatial::curves::Setting;
use crate::spatial::ends::{Ends, ordered};
use crate::spatial::orbit_match::{free_ends, from_given_point};
use crate::spatial::rendezvous::flights;

fn speeds(departure: f64, arrival: f64) -> Allowance {
    Allowance { departure: units::canonical_speed(departure), arrival: units::canonical_speed(arrival) }
}

/// Flights from the Earth that meet a planet, without excess and with it.
fn meetings<R>(
    (planet, ac_mm_s2): (Planet, f64),
    date: f64,
    then: impl FnOnce(&Conditions<'_>, Vec<Flown>) -> R,
) -> R {
    let (earth, body) = (Traveller::Planet(Planet::Earth), Traveller::Planet(planet));
    let ends = Ends::new(earth.elements(date), body.elements(date));
    let setting = Setting { ends, lightness: units::lightness(ac_mm_s2), tolerance: 1e-7 };
    let at = |body: Traveller| {
        move |time: f64| body.state(date + units::days(time)).ok().map(|state| ordered(&state))
    };
    let (from, to) = (at(earth), at(body));
    let target_axis = ends.to.semi_major_axis;
    let conditions = Conditions { lightness: setting.lightness, from: &from, to: &to, target_axis };
    let plain = flights(&setting, &conditions);
    then(&conditions, plain)
}

/// Flights that end anywhere on an orbit.
fn matches<R>(ends: Ends, ac_mm_s2: f64, then: impl FnOnce(&Setting, &Conditions<'_>) -> R) -> R {
    let setting = Setting { ends, lightness: units::lightness(ac_mm_s2), tolerance: 1e-7 };
    let (from, to) = (|time: f64| ends.departure(1.0, time), |time: f64| ends.target(1.0, time));
    let target_axis = ends.to.semi_major_axis;
    then(&setting, &Conditions { lightness: setting.lightness, from: &from, to: &to, target_axis })
}

#[track_caller]
fn check_proven(flights: &[Flown]) {
    for flown in flights {
        assert_eq!(flown.evidence.verdict(), Verdict::Converged, "{:?}", flown.evidence);
    }
}

const DATE: f64 = 10_957.5 - 1826.5;

#[test]
fn no_allowance_returns_the_flights_without() {
    meetings((Planet::Mars, 1.0), DATE, |conditions, plain| {
        let same = granted(Kind::Meeting, conditions, &Allowance::NONE, plain.clone());
        assert_eq!(same.len(), 2);
        for (new, old) in same.iter().zip(&plain) {
            assert_eq!((new.flight, new.evidence), (old.flight, old.evidence));
        }
    });
}

#[test]
fn more_allowance_is_never_slower_on_either_branch() {
    for (planet, ac) in [(Planet::Mars, 1.0), (Planet::Venus, 0.5), (Planet::Mercury, 2.0)] {
        meetings((planet, ac), DATE + 100.0, |conditions, plain| {
            assert_eq!(plain.len(), 2, "{planet:?}");
            for branch in plain {
                let mut last = branch.flight.time;
                for allowance in [speeds(0.5, 0.0), speeds(1.5, 0.0), speeds(1.5, 1.0), speeds(3.0, 3.0)] {
                    let more = granted(Kind::Meeting, conditions, &allowance, vec![branch.clone()]);
                    check_proven(&more);
                    let time = more.first().expect("the branch goes on").flight.time;
                    assert!(time < last, "{planet:?}: {time} after {last}");
                    last = time;
                }
            }
        });
    }
}

#[test]
fn a_huge_allowance_stops_mattering() {
    meetings((Planet::Mars, 0.5), DATE + 130.0, |conditions, plain| {
        let [enough, huge] = [speeds(5.0, 0.0), speeds(20.0, 0.0)]
            .map(|allowance| granted(Kind::Meeting, conditions, &allowance, plain.clone()));
        check_proven(&huge);
        let (few, many) = (&enough[0], &huge[0]);
        assert!(units::km_per_s(few.excess.departure) < 4.9, "{:?}", few.excess);
        assert!((many.flight.time / few.flight.time - 1.0).abs() < 1e-8);
        assert!((many.excess.departure / few.excess.departure - 1.0).abs() < 1e-6);
    });
}

#[test]
fn arrival_moves_with_departure_by_the_slope_law() {
    for (planet, ac, allowance) in [
        (Planet::Mars, 1.0, speeds(3.0, 0.0)),
        (Planet::Venus, 1.0, speeds(2.0, 1.0)),
        (Planet::Mercury, 1.0, speeds(5.0, 0.0)),
        (Planet::Mars, 0.5, speeds(0.0, 2.0)),
    ] {
        let step_d = 0.05;
        let at = |date: f64| {
            meetings((planet, ac), date, |conditions, plain| {
                let found = granted(Kind::Meeting, conditions, &allowance, plain);
                check_proven(&found);
                found
                    .iter()
                    .map(|x| {
                        let slope = arrival_slope(conditions, &allowance, x).expect("bodies have places");
                        (units::days(x.flight.time), slope)
                    })
                    .collect::<Vec<_>>()
            })
        };
        let [before, now, after] = [-step_d, 0.0, step_d].map(|shift| at(DATE + 200.0 + shift));
        assert!(!now.is_empty() && before.len() == now.len() && after.len() == now.len());
        for ((before, now), after) in before.iter().zip(&now).zip(&after) {
            let rate = 1.0 + (after.0 - before.0) / (2.0 * step_d);
            // The elements drift, which the law leaves out: 1e-6 or so of the mean motion, over lambda_0.
            assert!((rate - now.1).abs() < 2e-3 * (1.0 + rate.abs()), "{planet:?}: {rate} against {}", now.1);
        }
    }
}

fn circle(radius: f64) -> Elements {
    Elements {
        semi_major_axis: radius,
        eccentricity: 0.0,
        inclination_rad: 0.0,
        node_rad: 0.0,
        arg_peri_rad: 0.0,
        mean_anomaly_rad: 0.0,
    }
}

#[test]
fn between_coplanar_circles_the_coplanar_answer_comes_out() {
    for (target, ac, allowance) in [
        (1.52371034, 1.0, speeds(3.0, 0.0)),
        (0.72333566, 0.7, speeds(0.0, 2.0)),
        (1.52371034, 0.5, speeds(5.0, 0.0)),
        (2.0, 2.0, speeds(1.0, 2.0)),
    ] {
        let lightness = units::lightness(ac);
        let circles = coplanar::solve::Problem { start_radius: 1.0, target_radius: target, lightness };
        let problem = coplanar::excess::Problem { circles, allowance };
        let solved = coplanar::excess::solve(&problem).expect("a way leads there");
        let expected = coplanar::excess::fly(&problem, &solved.unknowns).expect("it flies");
        matches(Ends::new(circle(1.0), circle(target)), ac, |setting, conditions| {
            let plain = from_given_point(setting, conditions).expect("circles are easy");
            let found = granted(Kind::OpenArrival, conditions, &allowance, vec![plain]);
            check_proven(&found);
            let time = found.first().expect("circles are easy").flight.time;
            assert!((time / expected.time - 1.0).abs() < 1e-8, "{time} against {}", expected.time);
        });
    }
}

#[test]
fn the_best_departure_point_is_no_slower_than_its_neighbours() {
    let [earth, mars] = [Planet::Earth, Planet::Mars].map(|body| Traveller::Planet(body).elements(0.0));
    let allowance = speeds(2.0, 1.0);
    let best = matches(Ends::new(earth, mars), 1.0, |setting, conditions| {
        let plain = free_ends(setting, conditions);
        granted(Kind::OpenEnds, conditions, &allowance, plain).into_iter().next().expect("Mars is easy")
    });
    check_proven(std::slice::from_ref(&best));
    for shift in [-0.05, 0.05] {
        let ends = Ends::new(earth.later(1.0, best.flight.departure + shift), mars);
        let beside = matches(ends, 1.0, |setting, conditions| {
            let plain = from_given_point(setting, conditions).expect("Mars is easy");
            granted(Kind::OpenArrival, conditions, &allowance, vec![plain]).remove(0)
        });
        let slower = beside.flight.time / best.flight.time - 1.0;
        // Second order in the shift of 3 days: were it first order, it would be some 1e-2, and negative on one side.
        assert!(slower > 0.0 && slower < 1e-3, "{slower:e}");
    }
}
