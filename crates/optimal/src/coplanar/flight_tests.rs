//! Solved flights against outside values, and laws they must obey.

use orbits::units;
use proptest::prelude::*;

use super::*;
use crate::certificate::Verdict;
use crate::coplanar::solve::{Route, solve};

fn flown(start_radius: f64, target_radius: f64, ac_mm_s2: f64) -> Flown {
    let problem = Problem { start_radius, target_radius, lightness: units::lightness(ac_mm_s2) };
    let solved = solve(&problem).expect("the table covers this flight");
    fly(&problem, &solved.unknowns).expect("a solved flight flies")
}

#[test]
fn the_evidence_of_a_solved_flight_is_good() {
    for (target, ac) in [(1.52371034, 1.0), (0.38709927, 0.25), (5.202887, 0.5), (30.0, 0.06), (1.0001, 3.0)]
    {
        let flight = flown(1.0, target, ac);
        assert_eq!(flight.evidence.verdict(), Verdict::Converged, "{target} au, {ac}: {:?}", flight.evidence);
        assert!(flight.final_eccentricity < 1e-6);
    }
}

#[test]
fn a_spoilt_costate_is_caught() {
    let problem = Problem { start_radius: 1.0, target_radius: 1.52371034, lightness: 0.17 };
    let mut solved = solve(&problem).expect("the table covers this flight");
    solved.unknowns.costate = (solved.unknowns.costate + nalgebra::Vector3::new(1e-3, 0.0, 0.0)).normalize();
    let flight = fly(&problem, &solved.unknowns).expect("it flies, to the wrong place");
    assert_eq!(flight.evidence.verdict(), Verdict::NotConverged);
}

#[test]
fn samples_run_from_start_to_end_in_order() {
    let flight = flown(0.72333566, 1.52371034, 0.8);
    let samples = &flight.trajectory.samples;
    let (first, last) = (samples[0], samples[samples.len() - 1]);
    assert_eq!(first.position, [0.72333566, 0.0, 0.0]);
    assert!((last.time / flight.time - 1.0).abs() < 1e-12);
    assert!((last.position[0].hypot(last.position[1]) / 1.52371034 - 1.0).abs() < 1e-7);
    assert!(samples.windows(2).all(|pair| pair[0].time <= pair[1].time));
    assert!((300..3000).contains(&samples.len()), "{} samples", samples.len());
}

#[test]
fn the_turn_rate_is_that_of_the_normal() {
    // Differences of the sampled normal, half a sample apart: second order in the sample spacing.
    let flight = flown(1.0, 1.52371034, 1.0);
    let normal = |s: &Sample| s.position[1].atan2(s.position[0]) + s.cone;
    for pair in flight.trajectory.samples.windows(2) {
        let mut turned = (normal(&pair[1]) - normal(&pair[0])).abs();
        turned = turned.min(std::f64::consts::TAU - turned);
        let rate = turned / (pair[1].time - pair[0].time);
        let middle = 0.5 * (pair[0].turn_rate + pair[1].turn_rate);
        assert!((rate - middle).abs() < 0.02 * (1.0 + middle), "{rate} against {middle} at {}", pair[0].time);
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(40))]

    #[test]
    fn more_acceleration_is_never_slower(ratio_ln in -1.6..3.6f64, ac in 0.05..5.0f64, more in 1.001..1.5f64) {
        prop_assume!(ratio_ln.abs() > 1e-3);
        let (slow, fast) = (flown(1.0, ratio_ln.exp(), ac), flown(1.0, ratio_ln.exp(), ac * more));
        prop_assert!(fast.time < slow.time * (1.0 + 1e-9));
    }

    #[test]
    fn scaling_both_radii_scales_time_by_the_power_three_halves(
        ratio_ln in -1.6..1.6f64, ac in 0.1..5.0f64, scale in 0.3..3.0f64,
    ) {
        prop_assume!(ratio_ln.abs() > 1e-3);
        let (small, large) = (flown(1.0, ratio_ln.exp(), ac), flown(scale, scale * ratio_ln.exp(), ac));
        prop_assert!((large.time / small.time / scale.powf(1.5) - 1.0).abs() < 1e-9);
        // The law holds for the path too, which is flown in the start circle's own units and then stretched.
        let low = |f: &Flown| f.trajectory.distance_range().0;
        prop_assert!((low(&large) / low(&small) / scale - 1.0).abs() < 1e-9);
    }

    #[test]
    fn the_hamiltonian_is_constant_and_the_sail_never_pulls_sunward(ratio_ln in -1.6..3.6f64, ac in 0.05..6.0f64) {
        prop_assume!(ratio_ln.abs() > 1e-3);
        let flight = flown(1.0, ratio_ln.exp(), ac);
        prop_assert!(flight.evidence.hamiltonian_drift < 1e-8);
        prop_assert!(flight.trajectory.samples.iter().all(|s| s.cone.abs() <= std::f64::consts::FRAC_PI_2 + 1e-12));
    }
}

#[test]
fn sampled_nodes_of_the_guess_table_are_solutions() {
    use crate::coplanar::guess::{axes, look_up, node, table_node};
    let (closeness, lightness) = axes();
    for outward in [false, true] {
        for (i, j) in [(0, 0), (2, 12), (5, 3), (8, 7), (10, 1), (13, 10), (17, 0), (17, 12)] {
            let ln = closeness[i].exp();
            let ratio = if outward { ln } else { -ln }.exp();
            let problem = Problem { start_radius: 1.0, target_radius: ratio, lightness: lightness[j].exp() };
            let solved = solve(&problem).expect("a node is a solved flight");
            assert_eq!(solved.route, Route::Table);
            let (fresh, stored) = (node(&solved.unknowns), table_node(outward, i, j));
            for k in 0..4 {
                // Five decimals are stored, and the table was solved to a residual of 1e-8.
                assert!(
                    (fresh[k] - stored[k]).abs() < 2e-4,
                    "{outward} {i} {j}: {fresh:?} against {stored:?}"
                );
            }
            let guess = look_up(ratio, problem.lightness);
            assert!((guess.time / solved.unknowns.time - 1.0).abs() < 2e-4);
        }
    }
}
