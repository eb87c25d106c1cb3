//! Laws of flights between circles with excess speed; outside values are compared in `tests/excess.rs`.

use orbits::units;
use proptest::prelude::*;

use super::*;
use crate::certificate::Verdict;

fn problem(target_radius: f64, ac_mm_s2: f64, [departure, arrival]: [f64; 2]) -> Problem {
    let lightness = units::lightness(ac_mm_s2);
    Problem {
        circles: solve::Problem { start_radius: 1.0, target_radius, lightness },
        allowance: Allowance {
            departure: units::canonical_speed(departure),
            arrival: units::canonical_speed(arrival),
        },
    }
}

/// The proven flight, and its first costate.
#[track_caller]
fn flown(problem: &Problem) -> (Flown, Unknowns) {
    let solved = solve(problem).expect("a way leads there");
    let flown = fly(problem, &solved.unknowns).expect("a solved flight flies");
    assert_eq!(flown.evidence.verdict(), Verdict::Converged, "{problem:?}: {:?}", flown.evidence);
    (flown, solved.unknowns)
}

const MARS: f64 = 1.52371034;

#[test]
fn no_allowance_gives_the_flight_without_to_the_last_digit() {
    let problem = problem(MARS, 0.7, [0.0, 0.0]);
    let plain = without_excess(&problem.circles).expect("the table covers this flight");
    let (flight, unknowns) = flown(&problem);
    let expected = super::super::flight::fly(&problem.circles, &plain.unknowns).expect("it flies");
    assert_eq!(unknowns, plain.unknowns);
    assert_eq!((flight.time, flight.evidence), (expected.time, expected.evidence));
    assert_eq!(flight.excess.departure, 0.0);
}

#[test]
fn a_huge_allowance_stops_mattering() {
    // Computed by collocation and by an independent indirect method (tests/reference): 2.698907 km/s is best.
    let (enough, _) = flown(&problem(MARS, 0.5, [3.0, 0.0]));
    for allowance in [5.0, 12.0, 30.0] {
        let (huge, _) = flown(&problem(MARS, 0.5, [allowance, 0.0]));
        // Times are stationary, so they agree to the square of the residual; the speed to the residual itself.
        assert!(
            (huge.time / enough.time - 1.0).abs() < 1e-9,
            "{allowance} km/s: {} {}",
            huge.time,
            enough.time
        );
        assert!((units::km_per_s(huge.excess.departure) - 2.698907).abs() < 1e-5);
    }
    let (less, _) = flown(&problem(MARS, 0.5, [2.6, 0.0]));
    assert!(less.time > enough.time && (units::km_per_s(less.excess.departure) - 2.6).abs() < 1e-9);
}

#[test]
fn a_kick_off_the_primer_is_caught() {
    let problem = problem(MARS, 1.0, [3.0, 0.0]);
    let (_, unknowns) = flown(&problem);
    let mut start = launched(unknowns.costate.into(), problem.allowance.departure);
    let (u, v) = (start[1], start[2] - 1.0);
    let (sin, cos) = 1e-3f64.sin_cos();
    (start[1], start[2]) = (u * cos - v * sin, 1.0 + u * sin + v * cos);
    let turned = fly_from(&problem.circles, &start, unknowns.time, &problem.allowance).expect("it flies");
    assert!(turned.evidence.excess_misfit > 1e-5, "{:?}", turned.evidence);
    assert_ne!(turned.evidence.verdict(), Verdict::Converged);
}

#[test]
fn more_than_allowed_is_caught() {
    let problem = problem(MARS, 1.0, [0.0, 2.0]);
    let (_, unknowns) = flown(&problem);
    let allowance = Allowance { arrival: 0.99 * problem.allowance.arrival, ..problem.allowance };
    let judged = fly(&Problem { allowance, ..problem }, &unknowns).expect("it flies");
    assert!((judged.evidence.speed_error / problem.allowance.arrival - 0.01).abs() < 1e-6);
    assert_ne!(judged.evidence.verdict(), Verdict::Converged);
}

/// d(time)/d(allowance) = -|p|/H at the end in question: the multiplier of the allowance.
#[test]
fn time_falls_with_the_allowance_as_the_primer_says() {
    let step = 0.01;
    for (target, ac, at) in [(MARS, 1.0, [2.0, 0.0]), (0.7, 0.6, [0.0, 1.5]), (2.5, 1.4, [1.0, 3.0])] {
        let central = problem(target, ac, at);
        let (flight, unknowns) = flown(&central);
        let start = launched(unknowns.costate.into(), central.allowance.departure);
        let flow = Extremal { lightness: central.circles.lightness };
        let options = Options { tolerance: 1e-12, max_steps: MAX_STEPS };
        let end = integrate(&flow, &start, unknowns.time, &options).state;
        for (which, y) in [start, end].into_iter().enumerate() {
            if at[which] == 0.0 {
                continue;
            }
            let moved = |by: f64| {
                let mut speeds = at;
                speeds[which] += by;
                flown(&problem(target, ac, speeds)).0.time
            };
            let rate = (moved(step) - moved(-step)) / units::canonical_speed(2.0 * step);
            let expected = -y[4].hypot(y[5]) / flight.evidence.hamiltonian_at_arrival;
            // The central difference's own error: third derivatives times (3e-4)^2.
            assert!((rate / expected - 1.0).abs() < 1e-4, "{target} {which}: {rate} against {expected}");
        }
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(40))]

    #[test]
    fn more_allowance_is_never_slower(
        ratio_ln in -1.0..1.2f64, ac in 0.6..4.0f64, departure in 0.0..4.0f64, arrival in 0.0..4.0f64, more in 0.0..1.0f64,
    ) {
        prop_assume!(ratio_ln.abs() > 0.05);
        let (few, _) = flown(&problem(ratio_ln.exp(), ac, [departure, arrival]));
        let (many, _) = flown(&problem(ratio_ln.exp(), ac, [departure + more, arrival + 1.0 - more]));
        prop_assert!(many.time < few.time * (1.0 + 1e-9));
    }

    #[test]
    fn scaling_lengths_scales_speeds_by_the_inverse_root(
        ratio_ln in -1.0..1.2f64, ac in 0.6..4.0f64, speed in 0.5..3.0f64, scale in 0.3..3.0f64,
    ) {
        prop_assume!(ratio_ln.abs() > 0.05);
        let small = problem(ratio_ln.exp(), ac, [speed, speed]);
        let circles = solve::Problem {
            start_radius: scale, target_radius: scale * ratio_ln.exp(), ..small.circles
        };
        let large = Problem { circles, allowance: small.allowance.times(scale.powf(-0.5)) };
        let ((small, _), (large, _)) = (flown(&small), flown(&large));
        prop_assert!((large.time / small.time / scale.powf(1.5) - 1.0).abs() < 1e-9);
        prop_assert!((large.excess.arrival / small.excess.arrival * scale.sqrt() - 1.0).abs() < 1e-6);
    }
}
