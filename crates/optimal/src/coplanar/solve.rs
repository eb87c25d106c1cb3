//! The minimum-time flight between two circles: guess, Newton, fallbacks, polish.

use numerics::continuation::{Pace, follow};
use numerics::newton::{Goal, Solved, levenberg_marquardt, newton};

use super::guess;
use super::shooting::{Shooting, Unknowns};

/// Integration tolerance and residual to reach: while searching, from node to node, and in the final polish.
///
/// A loose search costs least (measured over 500 random flights: 1e-8 is 1.3 times faster than 1e-10 and loses
/// none); the polish alone decides the answer.
const SEARCH: (f64, f64) = (1e-8, 1e-5);
const CARRY: (f64, f64) = (1e-10, 1e-8);
const POLISH: (f64, f64) = (1e-12, 1e-10);

/// Two coplanar circles about the Sun and a sail. Canonical units (au).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Problem {
    /// Radius of the circle at departure.
    pub start_radius: f64,
    /// Radius of the circle at arrival.
    pub target_radius: f64,
    /// Lightness number.
    pub lightness: f64,
}

/// How the answer was found.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Route {
    /// Newton from the table.
    Table,
    /// Levenberg-Marquardt from the table, then Newton.
    Damped,
    /// Continuation from a solved neighbour.
    Continuation,
}

/// A solved (or nearly solved) extremal, in units of the start radius.
#[derive(Clone, Copy, Debug)]
pub struct Extremum {
    /// First costate and time.
    pub unknowns: Unknowns,
    /// Largest residual at the polish tolerance.
    pub residual: f64,
    /// How it was found.
    pub route: Route,
    /// Jacobians evaluated.
    pub passes: usize,
}

impl Problem {
    /// Target radius over start radius.
    pub fn ratio(&self) -> f64 {
        self.target_radius / self.start_radius
    }

    /// Canonical time per unit of time on the start circle.
    pub fn time_scale(&self) -> f64 {
        self.start_radius.powf(1.5)
    }
}

/// Newton on one flight at the given tolerance.
pub fn refine(
    ratio: f64,
    lightness: f64,
    start: Unknowns,
    (tolerance, residual): (f64, f64),
    passes: usize,
) -> Option<Solved<Unknowns>> {
    newton(&Shooting { ratio, lightness, tolerance }, start, &Goal { residual, passes })
}

/// Follows a solved flight at `from` (ratio, lightness) to `to` along the straight line in logarithms.
pub fn carry(start: Unknowns, from: (f64, f64), to: (f64, f64)) -> Option<Unknowns> {
    let pace = Pace { first: 0.1, largest: 0.5, smallest: 1e-3, easy_passes: 4 };
    // The distance between circles shrinks and grows by factors, as the table's own axis does.
    let closeness = |ratio: f64| ratio.ln().abs().ln();
    let (near, far) = (closeness(from.0), closeness(to.0));
    let side = if to.0 > 1.0 { 1.0 } else { -1.0 };
    follow(
        start,
        &pace,
        |s, guess| {
            let ratio = (side * (near + s * (far - near)).exp()).exp();
            let lightness = (from.1.ln() + s * (to.1 / from.1).ln()).exp();
            let goal = (CARRY.0, CARRY.1.min(1e-3 * ratio.ln().abs()));
            refine(ratio, lightness, guess, goal, 8).filter(|x| x.converged).map(|x| (x.point, x.passes))
        },
        Unknowns::extrapolated,
    )
    .ok()
}

/// Solves `problem`; `None` when every route failed. The radii must differ by more than one part in ten million.
pub fn solve(problem: &Problem) -> Option<Extremum> {
    let (ratio, lightness) = (problem.ratio(), problem.lightness);
    let start = guess::look_up(ratio, lightness);
    // Between neighbouring circles standing still is a small residual: goals shrink with the gap.
    let gap = ratio.ln().abs();
    let search = (SEARCH.0, SEARCH.1.min(1e-2 * gap));
    let polish = (POLISH.0, POLISH.1.min(1e-5 * gap));
    let mut passes = 0;
    let mut count = |solved: Option<Solved<Unknowns>>| {
        passes += solved.as_ref().map_or(0, |x| x.passes);
        solved.filter(|x| x.converged).map(|x| x.point)
    };
    let table = count(refine(ratio, lightness, start, search, 25)).map(|x| (x, Route::Table));
    let damped = table.or_else(|| {
        let shooting = Shooting { ratio, lightness, tolerance: search.0 };
        let goal = Goal { residual: search.1, passes: 60 };
        count(levenberg_marquardt(&shooting, start, &goal)).map(|x| (x, Route::Damped))
    });
    let (rough, route) = damped.or_else(|| {
        let from = guess::nearest_node(ratio, lightness);
        carry(guess::look_up(from.0, from.1), from, (ratio, lightness)).map(|x| (x, Route::Continuation))
    })?;
    let polished = refine(ratio, lightness, rough, polish, 8)?;
    passes += polished.passes;
    Some(Extremum { unknowns: polished.point, residual: polished.residual, route, passes })
}
