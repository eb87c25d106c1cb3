//! Sweeps of departure dates against cold starts, the law of arrivals, and the work they may take.

use std::cell::Cell;

use orbits::ephemeris::Traveller;
use orbits::epochs::start_of_day;
use orbits::planets::Planet;
use orbits::units;

use super::*;
use crate::spatial::ends::ordered;

/// Hands the route from the Earth, times counted from 2030-01-01, to `then`; `calls` counts how often the departure
/// body is asked for: once for each integration.
fn with_route<R>(to: Planet, ac_mm_s2: f64, calls: &Cell<usize>, then: impl FnOnce(&Route<'_>) -> R) -> R {
    let reference = start_of_day(2030, 1, 1).expect("a day of the calendar");
    let (earth, target) = (Traveller::Planet(Planet::Earth), Traveller::Planet(to));
    let day = |time: f64| reference + units::days(time);
    let start = |time: f64| {
        calls.set(calls.get() + 1);
        earth.state(day(time)).ok().map(|body| ordered(&body))
    };
    let end = |time: f64| target.state(day(time)).ok().map(|body| ordered(&body));
    let ends = |time: f64| Ends::new(earth.elements(day(time)), target.elements(day(time)));
    let conditions = Conditions {
        lightness: units::lightness(ac_mm_s2),
        from: &start,
        to: &end,
        target_axis: target.elements(reference).semi_major_axis,
    };
    then(&Route { conditions, ends: &ends })
}

fn departures(first_d: f64, step_d: f64, count: usize) -> Vec<f64> {
    (0..count).map(|k| units::canonical_time(first_d + step_d * k as f64)).collect()
}

/// Marches over 12 dates and compares each date's best with a cold start of its own.
#[track_caller]
fn check_span(to: Planet, ac_mm_s2: f64, first_d: f64, step_d: f64) {
    let dates = departures(first_d, step_d, 12);
    with_route(to, ac_mm_s2, &Cell::new(0), |route| {
        let found = span(route, &dates);
        let mut last_arrival = f64::NEG_INFINITY;
        for (date, found) in dates.iter().zip(&found) {
            let marched = best(&route.conditions, found).expect("found by marching");
            let started = best(&route.conditions, &cold(route, *date)).expect("found by a cold start");
            assert_eq!(marched.evidence.verdict(), Verdict::Converged);
            // Both are polished to 1e-10 of the target's size and speed; flight times follow within 100 times that.
            let difference = marched.flight.time / started.flight.time - 1.0;
            assert!(difference.abs() < 1e-8, "{to:?} at {}: {difference:e}", units::days(*date));
            // One may always wait edge-on: leaving later never arrives earlier, up to the elements' drift.
            assert!(marched.flight.arrival > last_arrival - 1e-3 * units::canonical_time(step_d));
            last_arrival = marched.flight.arrival;
        }
    });
}

#[test]
fn marching_finds_what_cold_starts_find() {
    check_span(Planet::Mars, 1.0, 300.0, 8.0);
    check_span(Planet::Mars, 0.5, 0.0, 8.0);
    check_span(Planet::Venus, 1.0, 100.0, 6.0);
    check_span(Planet::Mercury, 1.0, 0.0, 2.0);
}

#[test]
fn strong_sails_that_wait_are_marched_too() {
    // At 3 mm/s^2 the best flights to Mars wait for months: their ends are up to 1e7 times as sensitive.
    check_span(Planet::Mars, 3.0, 330.0, 8.0);
}

#[test]
fn a_marched_date_takes_few_integrations() {
    let calls = Cell::new(0);
    with_route(Planet::Mars, 1.0, &calls, |route| {
        let dates = departures(300.0, 8.0, 12);
        let mut near = cold(route, dates[0]);
        let started = calls.get();
        for &date in &dates[1..] {
            near = stepped(route, &near, date);
        }
        assert_eq!(near.len(), 2);
        // Two Jacobians a branch and date with a third-order predictor, four where it starts; and one call of the
        // departure body for each flight's axes.
        let per_date = (calls.get() - started) as f64 / 11.0;
        assert!(per_date <= 8.0, "{per_date} integrations a date");
    });
}

#[test]
fn no_dates_are_no_trouble() {
    with_route(Planet::Mars, 1.0, &Cell::new(0), |route| assert!(span(route, &[]).is_empty()));
}
