//! Steered flights against closed forms.

use super::*;
use crate::spiral::Spiral;
use orbits::units;

fn spiral_plan(lightness: f64, cone: f64, target: f64) -> (Spiral, Plan) {
    let spiral = Spiral::new(lightness, cone).expect("a weak sail spirals");
    let (u, v) = spiral.speeds(1.0);
    let law = Law::Fixed { cone_deg: cone.to_degrees() };
    (spiral, Plan { lightness, start: [1.0, u, v], target, law, time_limit: 200.0 })
}

#[test]
fn propagation_reproduces_the_logarithmic_spiral_table() {
    // Closed form of Bacon 1959, London 1960, Tsu 1959 (computed from it); digits as written in the table.
    let cone = std::f64::consts::FRAC_1_SQRT_2.atan();
    for (lightness, cone, target, angle_deg, time_d) in [
        (0.05, cone, 1.52371034, 2.2676, 874.416),
        (0.10, cone, 1.52371034, 4.6697, 430.500),
        (0.10, -cone, 0.72333566, -4.6697, 188.069),
    ] {
        let (spiral, plan) = spiral_plan(lightness, cone, target);
        assert!((spiral.flight_path_angle.to_degrees() - angle_deg).abs() < 5e-5);
        assert!((units::days(spiral.time(1.0, target)) - time_d).abs() < 5e-4);
        let flown = fly(&plan);
        assert_eq!(flown.ending, Ending::Arrived);
        // Propagation against closed form: 1e-12 a step over some hundred steps.
        assert!((flown.time / spiral.time(1.0, target) - 1.0).abs() < 1e-9, "{}", units::days(flown.time));
        let (u, v) = spiral.speeds(target);
        assert!((flown.end[1] - u).abs() < 1e-9 && (flown.end[2] - v).abs() < 1e-9);
    }
}

#[test]
fn energy_is_constant_edge_on() {
    let law = Law::Fixed { cone_deg: 90.0 };
    let plan = Plan { lightness: 0.3, start: [1.0, 0.1, 1.05], target: 40.0, law, time_limit: 30.0 };
    let flown = fly(&plan);
    let [r, u, v] = flown.end;
    let drift = polar::energy(r, u, v) - polar::energy(1.0, 0.1, 1.05);
    assert!(drift.abs() < 1e-10, "{drift:e}"); // 1e-12 a step, some forty steps, no secular growth
    assert!(flown.trajectory.delta_v < 1e-30);
}

#[test]
fn local_steering_matches_the_semi_major_axis() {
    for (target, towards) in [(1.6, local::Towards::Larger), (0.6, local::Towards::Smaller)] {
        let law = Law::Local(towards);
        let plan = Plan { lightness: 0.15, start: [1.0, 0.0, 1.0], target, law, time_limit: 100.0 };
        let flown = fly(&plan);
        assert_eq!(flown.ending, Ending::Arrived);
        let [r, u, v] = flown.end;
        let (a, e) = polar::shape(r, u, v);
        assert!((a / target - 1.0).abs() < 1e-10, "{a}");
        assert!(e > 1e-3, "a law without foresight does not end on a circle, yet e = {e}");
    }
}

#[test]
fn local_steering_changes_the_axis_faster_than_any_constant_angle_near_the_start() {
    // Independent of the law's own formula: short flights at every whole degree from the same state.
    let start = [1.0, 0.05, 0.97];
    let after = |law: Law| {
        let plan = Plan { lightness: 0.2, start, target: 30.0, law, time_limit: 1e-3 };
        let [r, u, v] = fly(&plan).end;
        polar::energy(r, u, v)
    };
    let best = after(Law::Local(local::Towards::Larger));
    for cone_deg in -90..=90 {
        assert!(after(Law::Fixed { cone_deg: f64::from(cone_deg) }) <= best + 1e-14);
    }
}

#[test]
fn flights_that_cannot_arrive_say_why() {
    let ending = |cone_deg: f64, target: f64, lightness: f64| {
        let law = Law::Fixed { cone_deg };
        fly(&Plan { lightness, start: [1.0, 0.0, 1.0], target, law, time_limit: 2000.0 }).ending
    };
    assert_eq!(ending(35.0, 0.7, 0.2), Ending::Escaped);
    assert_eq!(ending(-35.0, 1.5, 0.2), Ending::FellIntoSun);
    assert_eq!(ending(90.0, 1.5, 0.2), Ending::OutOfTime);
}
