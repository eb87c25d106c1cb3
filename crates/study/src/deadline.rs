//! The weakest sail that still makes a date.

use numerics::root::{Bracket, find_root};
use optimal::coplanar::solve::{Problem, solve};

/// Lightness numbers searched: characteristic accelerations of 0.03 to 20 mm/s^2, the table of first guesses.
const LIGHTEST: f64 = 0.03 / 5.930_084;
const HEAVIEST: f64 = 20.0 / 5.930_084;

/// Lightness number at which the minimum-time flight of `problem`'s circles takes exactly `time`.
///
/// Solved directly: more acceleration is never slower, so there is one crossing. `None` when no sail in the range
/// searched is fast enough, or when even the weakest is (`problem.lightness` is where the search starts).
///
/// # Units
/// Canonical.
pub fn lightness_needed(problem: &Problem, time: f64) -> Option<f64> {
    // In logarithms the curve is nearly straight, so few solves are needed.
    let excess = |lightness_ln: f64| {
        let solved = solve(&Problem { lightness: lightness_ln.exp(), ..*problem })?;
        Some((solved.unknowns.time * problem.time_scale() / time).ln())
    };
    let start = problem.lightness.ln();
    let at_start = excess(start)?;
    let (mut edge, mut at_edge) = (start, at_start);
    let step = if at_start > 0.0 { 0.5 } else { -0.5 };
    while (at_edge > 0.0) == (at_start > 0.0) {
        if edge == LIGHTEST.ln() || edge == HEAVIEST.ln() {
            return None;
        }
        edge = (edge + step).clamp(LIGHTEST.ln(), HEAVIEST.ln());
        at_edge = excess(edge)?;
    }
    let mut bracket = Bracket { low: start, high: edge, at_low: at_start, at_high: at_edge };
    if edge < start {
        bracket = Bracket { low: edge, high: start, at_low: at_edge, at_high: at_start };
    }
    let root = find_root(|x| excess(x).unwrap_or(f64::NAN), bracket, 1e-10).exp();
    // Solved once more at the root: a failed solve on the way must not pass as an answer.
    (excess(root.ln())?.abs() < 1e-8).then_some(root)
}

#[cfg(test)]
mod tests {
    use super::*;
    use orbits::units;

    #[test]
    fn the_weakest_sail_takes_exactly_the_time_given() {
        let problem = Problem { start_radius: 1.0, target_radius: 1.52371034, lightness: 0.17 };
        for time_d in [350.0, 450.0, 700.0] {
            let needed = lightness_needed(&problem, units::canonical_time(time_d)).expect("within range");
            let solved = solve(&Problem { lightness: needed, ..problem }).expect("solved");
            assert!((units::days(solved.unknowns.time) / time_d - 1.0).abs() < 1e-8);
        }
    }

    #[test]
    fn computed_times_give_their_accelerations_back() {
        // Times by direct and indirect methods agreeing to 1e-4 (computed): 407.72 d at 1 mm/s^2, 560.11 d at 0.5.
        // Half a unit in the last digit is 1e-5 of the time; time goes as about the -0.45th power.
        let problem = Problem { start_radius: 1.0, target_radius: 1.52371034, lightness: 0.3 };
        for (time_d, ac) in [(407.72, 1.0), (560.11, 0.5)] {
            let needed = lightness_needed(&problem, units::canonical_time(time_d)).expect("within range");
            assert!((units::mm_per_s2(needed) / ac - 1.0).abs() < 1e-4, "{}", units::mm_per_s2(needed));
        }
    }

    #[test]
    fn dates_out_of_reach_are_not_answered() {
        let problem = Problem { start_radius: 1.0, target_radius: 5.202887, lightness: 0.17 };
        assert_eq!(lightness_needed(&problem, units::canonical_time(10.0)), None);
    }
}
