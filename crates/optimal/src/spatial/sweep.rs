//! Meeting a moving body on one departure date after another: cold starts, and branches marched between them.

use super::calendar::Branch;
use super::curves::Setting;
use super::ends::Ends;
use super::launch::Care;
use super::polish::{Conditions, Exactness, Flight, Kind, polish};
use super::prove::evidence;
use super::rendezvous::traced;
use crate::certificate::{Evidence, Verdict};

/// One craft between two bodies, at any departure.
#[derive(Clone, Copy)]
pub struct Route<'a> {
    /// Sail and bodies.
    pub conditions: Conditions<'a>,
    /// Orbits of both at a time (canonical, from the reference instant): where cold starts begin.
    pub ends: &'a dyn Fn(f64) -> Ends,
}

/// Branches of one date, fastest first; good to march and to compare, not to report.
pub type Found = Vec<Branch>;

/// Most branches carried from date to date: the two that a cold start gives, and one that they leave behind.
const CARRIED: usize = 3;

/// Branches at every one of `departures` (canonical, from the reference instant, ascending).
///
/// Starts cold at the middle date and marches both ways; where a branch is lost, or nothing was found, it starts cold
/// again. The dates should span a small part of the synodic period: over longer spans a better branch may appear that
/// marching does not meet.
pub fn span(route: &Route<'_>, departures: &[f64]) -> Vec<Found> {
    let mut all = vec![Found::new(); departures.len()];
    let middle = departures.len() / 2;
    let Some(&start) = departures.get(middle) else { return all };
    all[middle] = cold(route, start);
    for next in middle + 1..departures.len() {
        all[next] = stepped(route, &all[next - 1], departures[next]);
    }
    for next in (0..middle).rev() {
        all[next] = stepped(route, &all[next + 1], departures[next]);
    }
    all
}

/// The next date's branches from those of its neighbour.
fn stepped(route: &Route<'_>, near: &Found, departure: f64) -> Found {
    let mut found = marched(&route.conditions, near, departure);
    if found.len() < near.len() || near.is_empty() {
        merge(&mut found, cold(route, departure));
    }
    found.truncate(CARRIED);
    found
}

/// Those of `branches` that lead to `departure`.
pub fn marched(conditions: &Conditions<'_>, branches: &[Branch], departure: f64) -> Found {
    let mut found = Found::new();
    merge(&mut found, branches.iter().filter_map(|branch| branch.marched(conditions, departure)));
    found
}

/// What a cold start finds at a departure: two branches, as a rule. What the quick way loses is sought with care.
pub fn cold(route: &Route<'_>, departure: f64) -> Found {
    let mut found = cold_with(route, departure, &Care::QUICK);
    if found.len() < 2 {
        merge(&mut found, cold_with(route, departure, &Care::CAREFUL));
    }
    found
}

/// What a cold start with this care finds at a departure.
pub fn cold_with(route: &Route<'_>, departure: f64, care: &Care) -> Found {
    let conditions = &route.conditions;
    let setting =
        Setting { ends: (route.ends)(departure), lightness: conditions.lightness, tolerance: care.tolerance };
    let taken_up = |time: f64, costate| {
        Branch::taken_up(conditions, &Flight { costate, departure, time, arrival: departure + time })
    };
    let mut found = Found::new();
    merge(&mut found, traced(&setting, care).iter().filter_map(|point| taken_up(point.time, point.costate)));
    found
}

/// Adds the branches that are not known yet, and sorts.
pub fn merge(known: &mut Found, new: impl IntoIterator<Item = Branch>) {
    for branch in new {
        let alike = |other: &Branch| {
            let (a, b) = (&other.flight, &branch.flight);
            (a.time / b.time - 1.0).abs() < 0.01 && a.costate.dot(&b.costate) > 0.99
        };
        if !known.iter().any(alike) {
            known.push(branch);
        }
    }
    known.sort_by(|a, b| a.flight.time.total_cmp(&b.flight.time));
}

/// A polished flight and what re-flying it showed.
#[derive(Clone, Copy, Debug)]
pub struct Settled {
    /// The flight, to its last digits.
    pub flight: Flight,
    /// What re-flying it showed.
    pub evidence: Evidence,
    /// Heliocentric angle swept, rad.
    pub swept: f64,
}

/// Marched flight times this close (relative) are told apart by polishing both.
const TOO_CLOSE: f64 = 1e-3;

/// The fastest of one date's branches that re-flying confirms; one that it confirms only approximately where there is
/// no better.
pub fn best(conditions: &Conditions<'_>, found: &[Branch]) -> Option<Settled> {
    let mut best: Option<Settled> = None;
    let rank = |settled: &Settled| (settled.evidence.verdict() != Verdict::Converged, settled.flight.time);
    for branch in found {
        let beaten = |best: &Settled| {
            best.evidence.verdict() == Verdict::Converged
                && branch.flight.time > best.flight.time * (1.0 + TOO_CLOSE)
        };
        if best.as_ref().is_some_and(beaten) {
            break;
        }
        let new = settled(conditions, branch).filter(|x| x.evidence.verdict() != Verdict::NotConverged);
        best = new.into_iter().chain(best).min_by(|a, b| {
            let ((worse_a, time_a), (worse_b, time_b)) = (rank(a), rank(b));
            worse_a.cmp(&worse_b).then(time_a.total_cmp(&time_b))
        });
    }
    best
}

/// Polishes and re-flies a marched flight; with the utmost exactness where the usual one does not suffice.
fn settled(conditions: &Conditions<'_>, branch: &Branch) -> Option<Settled> {
    let at = |flight: Flight, exactness: Exactness| {
        let flight = polish(Kind::Meeting, conditions, flight, exactness.polish)?;
        let (evidence, swept) = evidence(conditions, &flight, exactness.prove)?;
        Some(Settled { flight, evidence, swept })
    };
    let usual = at(branch.flight, Exactness::USUAL)?;
    if usual.evidence.verdict() == Verdict::Converged {
        return Some(usual);
    }
    let utmost = at(usual.flight, Exactness::UTMOST);
    Some(utmost.filter(|x| x.evidence.verdict() == Verdict::Converged).unwrap_or(usual))
}

#[cfg(test)]
#[path = "sweep_tests.rs"]
mod tests;
