//! A wide scan: flights started from random first costates and times, and none of them beats the one solved for.
//!
//! Evidence that there is one extremal for each pair of circles and acceleration, not a proof of it.

use nalgebra::Vector3;
use numerics::newton::{Goal, levenberg_marquardt};
use optimal::coplanar::extremal::Extremal;
use optimal::coplanar::shooting::{Shooting, Unknowns};
use optimal::coplanar::solve::{Problem, solve};
use orbits::units;

/// Pairs of target radius (au, from 1 au) and characteristic acceleration (mm/s^2), spread over the checked range.
const PAIRS: [(f64, f64); 10] = [
    (0.2, 3.0),
    (0.38709927, 1.0),
    (0.72333566, 0.5),
    (0.99, 0.4),
    (1.02, 2.0),
    (1.52371034, 0.3),
    (1.52371034, 1.0),
    (2.8, 6.0),
    (5.202887, 1.5),
    (20.0, 4.0),
];

const STARTS: usize = 300;

/// A fixed sequence of numbers in 0 to 1: D. E. Knuth's MMIX generator (*The Art of Computer Programming* 2,
/// section 3.3.4), upper bits.
struct Numbers(u64);

impl Numbers {
    fn next(&mut self) -> f64 {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 11) as f64 / (1u64 << 53) as f64
    }

    /// Evenly over the unit sphere.
    fn direction(&mut self) -> Vector3<f64> {
        let (height, turn) = (2.0 * self.next() - 1.0, std::f64::consts::TAU * self.next());
        let across = (1.0 - height * height).sqrt();
        Vector3::new(across * turn.cos(), across * turn.sin(), height)
    }
}

#[test]
fn no_random_start_finds_a_faster_flight() {
    let mut numbers = Numbers(20_310_517);
    for (target, ac) in PAIRS {
        let problem = Problem { start_radius: 1.0, target_radius: target, lightness: units::lightness(ac) };
        let best = solve(&problem).expect("this flight is solved").unknowns;
        let shooting = Shooting { ratio: target, lightness: problem.lightness, tolerance: 1e-8 };
        let (mut found, mut same) = (0, 0);
        for _ in 0..STARTS {
            let start = Unknowns {
                costate: numbers.direction(),
                time: best.time * (0.2f64.ln() + 1.9 * numbers.next()).exp(),
            };
            let goal = Goal { residual: 1e-6, passes: 40 };
            let Some(end) = levenberg_marquardt(&shooting, start, &goal).filter(|end| end.converged) else {
                continue;
            };
            let l = end.point.costate;
            let energy =
                Extremal { lightness: problem.lightness }.hamiltonian(&[1.0, 0.0, 1.0, l.x, l.y, l.z]);
            if end.point.time <= 0.0 || energy <= 0.0 {
                continue; // arrives, but as the slowest of its neighbours or backwards in time
            }
            found += 1;
            // Residuals of 1e-6 leave about as much of the time open.
            same += usize::from((end.point.time / best.time - 1.0).abs() < 1e-4);
            assert!(
                end.point.time > best.time * (1.0 - 1e-4),
                "{target} au at {ac}: {} d beats {} d from {start:?}",
                units::days(end.point.time),
                units::days(best.time)
            );
        }
        // The scan must be able to find something, or it would prove nothing.
        assert!(same >= 3, "{target} au at {ac}: {same} of {found} found again the flight solved for");
    }
}
