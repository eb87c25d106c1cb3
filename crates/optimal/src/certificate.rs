//! What an answer must show before it is called one.
//!
//! Every flight is flown again from its first costate, at a tighter tolerance than it was found with, and judged
//! by what that flight does: the thresholds below are the whole rule.

/// Largest miss in distance and in speed, in parts of the target's: 15 km per au, about 3 mm/s.
pub const CONVERGED_MISS: f64 = 1e-7;

/// Largest miss in distance, in parts of the distance between the two orbits: where they nearly coincide, standing
/// still must not count as arriving.
pub const CONVERGED_GAP: f64 = 1e-3;

/// Largest relative drift of the Hamiltonian of a converged flight.
pub const CONVERGED_DRIFT: f64 = 1e-8;

/// Largest departure of the excess velocities from what minimum time asks of them, in parts of the Earth's speed (3 cm/s)
/// and of the costate.
pub const CONVERGED_EXCESS: f64 = 1e-6;

/// Largest miss, and drift, of a flight that may be shown as approximate.
pub const APPROXIMATE_MISS: f64 = 1e-4;

/// Tolerance of the flight that proves.
pub const REFLY_TOLERANCE: f64 = 1e-13;

/// What re-flying showed. Canonical units.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Evidence {
    /// Distance from the target at arrival.
    pub position_error: f64,
    /// Speed mismatch at arrival, beyond the excess allowed there.
    pub speed_error: f64,
    /// How far the excess velocities at the two ends are from those of minimum time ([`crate::excess::End::misfit`]);
    /// zero where none is allowed.
    pub excess_misfit: f64,
    /// Target's distance from the Sun, which the position error is compared with.
    pub target_distance: f64,
    /// Target's speed, which the speed error is compared with.
    pub target_speed: f64,
    /// Distance between the two orbits: the other thing the position error is compared with.
    pub gap: f64,
    /// Largest change of the Hamiltonian along the flight, over its first value.
    pub hamiltonian_drift: f64,
    /// The Hamiltonian at arrival; an extremal of minimum time has it positive.
    pub hamiltonian_at_arrival: f64,
}

/// What the evidence amounts to.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Verdict {
    /// An extremal, proven to the thresholds.
    Converged,
    /// Misses them, but by no more than [`APPROXIMATE_MISS`].
    Approximate,
    /// No result.
    NotConverged,
}

impl Evidence {
    /// Judges the evidence; anything that is not a number fails.
    pub fn verdict(&self) -> Verdict {
        // Comparisons one by one: a maximum would let a NaN slip through.
        let within = |miss_limit: f64, excess_limit: f64, drift_limit: f64| {
            self.position_error <= miss_limit * self.target_distance
                && self.position_error <= CONVERGED_GAP * self.gap
                && self.speed_error <= miss_limit * self.target_speed
                && self.excess_misfit <= excess_limit
                && self.hamiltonian_drift <= drift_limit
                && self.hamiltonian_at_arrival > 0.0
        };
        if within(CONVERGED_MISS, CONVERGED_EXCESS, CONVERGED_DRIFT) {
            Verdict::Converged
        } else if within(APPROXIMATE_MISS, APPROXIMATE_MISS, APPROXIMATE_MISS) {
            Verdict::Approximate
        } else {
            Verdict::NotConverged
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const GOOD: Evidence = Evidence {
        position_error: 1e-9,
        speed_error: 1e-9,
        excess_misfit: 1e-9,
        target_distance: 1.5,
        target_speed: 0.8,
        gap: 0.5,
        hamiltonian_drift: 1e-11,
        hamiltonian_at_arrival: 0.1,
    };

    #[track_caller]
    fn check_verdict(evidence: Evidence, expected: Verdict) {
        assert_eq!(evidence.verdict(), expected);
    }

    #[test]
    fn good_evidence_converges() {
        check_verdict(GOOD, Verdict::Converged);
    }

    #[test]
    fn each_threshold_alone_holds_an_answer_back() {
        check_verdict(Evidence { position_error: 1.6e-7, ..GOOD }, Verdict::Approximate);
        check_verdict(Evidence { speed_error: 1e-7, ..GOOD }, Verdict::Approximate);
        check_verdict(Evidence { excess_misfit: 2e-6, ..GOOD }, Verdict::Approximate);
        check_verdict(Evidence { gap: 1e-7, ..GOOD }, Verdict::NotConverged);
        check_verdict(Evidence { hamiltonian_drift: 2e-8, ..GOOD }, Verdict::Approximate);
        check_verdict(Evidence { position_error: 2e-4, ..GOOD }, Verdict::NotConverged);
        check_verdict(Evidence { hamiltonian_at_arrival: -0.1, ..GOOD }, Verdict::NotConverged);
    }

    #[test]
    fn not_a_number_is_not_a_result() {
        check_verdict(Evidence { position_error: f64::NAN, ..GOOD }, Verdict::NotConverged);
        check_verdict(
            Evidence { speed_error: f64::NAN, position_error: f64::NAN, ..GOOD },
            Verdict::NotConverged,
        );
        check_verdict(Evidence { excess_misfit: f64::NAN, ..GOOD }, Verdict::NotConverged);
        check_verdict(Evidence { hamiltonian_drift: f64::NAN, ..GOOD }, Verdict::NotConverged);
        check_verdict(Evidence { hamiltonian_at_arrival: f64::NAN, ..GOOD }, Verdict::NotConverged);
    }
}
