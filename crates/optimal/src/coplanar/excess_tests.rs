//! Excess.
use orbits::units;
use super::*;
use crate::certificate::Verdict;

#[test]
fn explore() {
    for (ac, w, wa) in [(1.0, 0.0, 0.0), (1.0, 1.0, 0.0), (1.0, 3.0, 0.0), (0.5, 2.0, 0.0), (0.5, 5.0, 0.0), (1.0, 0.0, 1.0), (1.0, 0.0, 5.0), (1.0, 3.0, 3.0),(0.5,5.0,5.0)] {
        let problem = Problem {
            circles: solve::Problem { start_radius: 1.0, target_radius: 1.52371034, lightness: units::lightness(ac) },
            allowance: Allowance { departure: units::canonical_speed(w), arrival: units::canonical_speed(wa) },
        };
        let x = solve(&problem);
        let Some(x) = x else { println!("{ac} {w} {wa} none"); continue };
        let f = fly(&problem, &x.unknowns);
        let Some(f) = f else { println!("{ac} {w} {wa} unflown {x:?}"); continue };
        println!("{ac} {w} {wa}: {:.7} d used {:.6} {:.6} {:?} res {:.1e} {:?} {:?}", units::days(f.time), units::km_per_s(f.excess.departure), units::km_per_s(f.excess.arrival), x.route, x.residual, f.evidence.verdict(), f.evidence);
        let _ = Verdict::Converged;
    }
}
