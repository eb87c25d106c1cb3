//! Spatial flights with excess speed allowed at either end, grown out of the flights without.
//!
//! Every flight without excess is followed while the allowance grows, so both branches of a rendezvous are; which of
//! them is the faster may change on the way.

use nalgebra::{Const, DimMin};
use numerics::arclength::{self, Ended, Stride};
use numerics::continuation::{Pace, follow};
use numerics::newton::{Goal, Solved, newton};

use super::ends::coasting_rate;
use super::excess_rows::{Granting, launched};
use super::extremal::Extremal;
use super::polish::{Conditions, Exactness, Flight, Kind};
use super::prove::{Flown, prove_granted};
use super::rendezvous::same;
use crate::certificate::Verdict;
use crate::excess::{Allowance, pieces};

/// Tolerance of integrations and residual to reach on the way.
const CARRY: (f64, f64) = (1e-9, 1e-7);

/// Tolerance of integrations along the quick way.
const QUICK: f64 = 1e-8;

/// What the polish's residuals must reach.
const RESIDUAL: f64 = 1e-10;

/// Along the curve from the start: 5 to 20 Jacobians as a rule.
const STRIDE: Stride =
    Stride { first: 0.1, largest: 0.5, smallest: 1e-4, accept: 1e-3, wanted_correction: 0.01, budget: 120 };

/// Natural steps, which cross the kink where the primer reaches zero better than a curve's tangent does.
const PACE: Pace = Pace { first: 0.1, largest: 0.5, smallest: 5e-3, easy_passes: 4 };

/// Restarted where natural steps got stuck.
const CAREFUL: Stride = Stride { first: 3e-3, largest: 0.3, smallest: 1e-7, budget: 400, ..STRIDE };

/// Proven flights with up to `allowance` of excess speed, fastest first, grown out of `plain` flights of the same kind
/// and conditions without any.
///
/// Their costates hold the guide of [`crate::excess`] in the place of the primer: only this module continues them. Without
/// an allowance they are `plain` itself. Measured over 108 dates (Mars, Venus, Mercury; 0.5, 1, 2 mm/s^2; 1, 3, 5 km/s at
/// departure, 2, 5 at arrival, 3 at both): all 1296 branches of the flights without excess lead to a proven one.
pub fn granted(
    kind: Kind,
    conditions: &Conditions<'_>,
    allowance: &Allowance,
    plain: Vec<Flown>,
) -> Vec<Flown> {
    if !allowance.is_some() {
        return plain;
    }
    let mut found: Vec<Flown> = Vec::new();
    for flown in plain {
        let flight = flown.flight;
        let new = match kind {
            Kind::Meeting => by_way::<7, 8>(kind, conditions, allowance, flight),
            Kind::OpenArrival => by_way::<8, 9>(kind, conditions, allowance, flight),
            Kind::OpenEnds => by_way::<9, 10>(kind, conditions, allowance, flight),
        };
        found.extend(new.filter(|new| found.iter().all(|known| !same(&known.flight, &new.flight))));
    }
    found.sort_by(|a, b| a.flight.time.total_cmp(&b.flight.time));
    found
}

/// Rate of the arrival instant with the departure instant of a rendezvous,
/// (l_r . w + p . a_sail)/lambda_0 at departure, w the excess velocity and lambda_0 what the flight gains by arriving a
/// moment later.
///
/// Without departure excess it is never negative (a sail may wait edge-on); with it, leaving later may arrive earlier.
pub fn arrival_slope(conditions: &Conditions<'_>, allowance: &Allowance, flown: &Flown) -> Option<f64> {
    let body = (conditions.from)(flown.flight.departure)?;
    let y = launched(body, flown.flight.costate.into(), allowance.departure);
    let extremal = Extremal { lightness: conditions.lightness };
    let gained = extremal.hamiltonian(&y) - (0..6).map(|i| y[6 + i] * coasting_rate(&body)[i]).sum::<f64>();
    Some(gained / flown.evidence.hamiltonian_at_arrival)
}

/// Grows both allowances together, and where that does not end in a minimum one after the other.
fn by_way<const N: usize, const M: usize>(
    kind: Kind,
    conditions: &Conditions<'_>,
    allowance: &Allowance,
    plain: Flight,
) -> Option<Flown>
where
    Const<N>: DimMin<Const<N>, Output = Const<N>>,
    Const<M>: DimMin<Const<M>, Output = Const<M>>,
{
    const NONE: Allowance = Allowance::NONE;
    let both = *allowance;
    let at = Granting::<N> { kind, conditions, from: both, to: both, share: 1.0, tolerance: CARRY.0 };
    let leg = |start: Flight, from: Allowance, to: Allowance| {
        pieces([from, to])
            .try_fold(start, |at_from, [from, to]| grown::<N, M>(&Granting { from, to, ..at }, at_from))
    };
    let minimum = |x: &Flown| x.evidence.verdict() == Verdict::Converged;
    let in_turn = |first: Allowance| {
        if first == NONE || first == both {
            return None;
        }
        let end = leg(leg(plain, NONE, first)?, first, both)?;
        answered(&at, end).filter(minimum)
    };
    let together = leg(plain, NONE, both).and_then(|end| answered(&at, end));
    if together.as_ref().is_some_and(minimum) {
        return together;
    }
    in_turn(Allowance { departure: 0.0, ..both })
        .or_else(|| in_turn(Allowance { arrival: 0.0, ..both }))
        .or(together)
}

fn refine<const N: usize>(
    at: &Granting<'_, N>,
    start: Flight,
    residual: f64,
    passes: usize,
) -> Option<Solved<Flight>>
where
    Const<N>: DimMin<Const<N>, Output = Const<N>>,
{
    newton(at, start, &Goal { residual, passes })
}

/// Whether `next` may be the same family of flights as `now`, a step apart.
fn near(now: &Flight, next: &Flight) -> bool {
    (now.costate - next.costate).norm() < 0.4 && (next.time / now.time).ln().abs() < 0.3
}

fn ahead(before: &Flight, now: &Flight, ratio: f64) -> Flight {
    let on = |from: f64, to: f64| (to - from) * ratio;
    now.moved(
        (now.costate - before.costate) * ratio,
        on(before.departure, now.departure),
        on(before.time, now.time),
        on(before.arrival, now.arrival),
    )
}

/// Follows a flight along a leg of allowances; the sign of the Hamiltonian is not looked at.
fn grown<const N: usize, const M: usize>(leg: &Granting<'_, N>, start: Flight) -> Option<Flight>
where
    Const<N>: DimMin<Const<N>, Output = Const<N>>,
    Const<M>: DimMin<Const<M>, Output = Const<M>>,
{
    let along = |leg: &Granting<'_, N>, start: (Flight, f64), stride: &Stride| {
        let goal = arclength::Goal { parameter: 1.0, sign: 1.0 };
        let followed = arclength::follow::<N, M, _>(leg, start, &goal, stride, &mut |_| true);
        (followed.ended == Ended::Reached).then_some(followed.point.0)
    };
    let landed = |flight: Flight| refine(leg, flight, CARRY.1, 12).filter(|x| x.converged).map(|x| x.point);
    let quick = along(&Granting { tolerance: QUICK, ..*leg }, (start, 0.0), &STRIDE).and_then(landed);
    if quick.is_some() {
        return quick;
    }
    let held = |guess: Flight, solved: Solved<Flight>| {
        (solved.converged && near(&guess, &solved.point)).then_some((solved.point, solved.passes))
    };
    let solve =
        |share: f64, guess: Flight| held(guess, refine(&Granting { share, ..*leg }, guess, CARRY.1, 8)?);
    let stuck = match follow(start, &PACE, solve, ahead) {
        Ok(flight) => return Some(flight),
        Err(stuck) => stuck,
    };
    // Where only a part will be used from here on, the rest of the way is one step.
    let leap = refine(leg, stuck.point, CARRY.1, 12).and_then(|solved| held(stuck.point, solved));
    leap.map(|(flight, _)| flight)
        .or_else(|| along(leg, (stuck.point, stuck.parameter), &CAREFUL).and_then(landed))
        .or_else(|| along(leg, (start, 0.0), &Stride { wanted_correction: 2e-3, ..CAREFUL }).and_then(landed))
}

/// Polishes a grown flight and proves it, with the utmost exactness where the usual one does not suffice.
fn answered<const N: usize>(at: &Granting<'_, N>, grown: Flight) -> Option<Flown>
where
    Const<N>: DimMin<Const<N>, Output = Const<N>>,
{
    let with = |flight: Flight, exactness: Exactness| {
        let polishing = Granting { tolerance: exactness.polish, ..*at };
        let polished = refine(&polishing, flight, RESIDUAL, 8)?.point;
        prove_granted(at.conditions, &polished, &at.to, exactness.prove)
    };
    let usual = with(grown, Exactness::USUAL)?;
    if usual.evidence.verdict() == Verdict::Converged || usual.evidence.hamiltonian_at_arrival <= 0.0 {
        return Some(usual);
    }
    let utmost = with(usual.flight, Exactness::UTMOST);
    Some(utmost.filter(|x| x.evidence.verdict() == Verdict::Converged).unwrap_or(usual))
}

#[cfg(test)]
#[path = "excess_tests.rs"]
mod tests;
