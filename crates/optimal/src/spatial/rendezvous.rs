//! Meeting a moving body: both branches of the fastest flight that leaves at a given instant.

use numerics::arclength::{Ended, Goal, follow};

use super::curves::{Clock, Meeting, Point, Setting};
use super::launch::{Care, grown};
use super::polish::{Conditions, Flight, Kind};
use super::prove::{Flown, answered};

/// Flights to the body, departure at the reference instant, traced but not polished: those found of the two whose
/// target is ahead of, and behind, the place where an orbit match would end.
pub fn traced(setting: &Setting, care: &Care) -> Vec<Point> {
    let Some(open) = grown(setting, care) else { return Vec::new() };
    let period = std::f64::consts::TAU * setting.ends.to.semi_major_axis.powf(1.5);
    let ahead = (open.arrival - open.time).rem_euclid(period);
    let phases = [ahead, ahead - period];
    phases.into_iter().filter_map(|phase| turned(setting, &open, phase, care)).collect()
}

/// Turns the target back by `phase`, from where `open` meets its orbit to where the body is.
fn turned(setting: &Setting, open: &Point, phase: f64, care: &Care) -> Option<Point> {
    let setting = Setting { tolerance: care.tolerance, ..*setting };
    let curve = Meeting { setting: &setting, clock: Clock::Phase };
    let start = Point { parameter: phase, ..*open };
    let goal = Goal { parameter: 0.0, sign: -phase.signum() };
    let followed = follow(&curve, start, &goal, &care.stride(), &mut |_| true);
    (followed.ended == Ended::Reached).then_some(followed.point)
}

/// Proven flights to the body, fastest first: both branches where both are found.
///
/// A branch that the quick way loses is traced again with care.
pub fn flights(setting: &Setting, conditions: &Conditions<'_>) -> Vec<Flown> {
    let mut found: Vec<Flown> = Vec::new();
    for care in [Care::QUICK, Care::CAREFUL] {
        for point in traced(setting, &care) {
            let flight =
                Flight { costate: point.costate, departure: 0.0, time: point.time, arrival: point.time };
            let answer = answered(Kind::Meeting, conditions, flight);
            found.extend(answer.filter(|new| found.iter().all(|known| !same(&known.flight, &new.flight))));
        }
        if found.len() == 2 {
            break;
        }
    }
    found.sort_by(|a, b| a.flight.time.total_cmp(&b.flight.time));
    found
}

/// Whether two polished flights are one extremal.
pub(super) fn same(a: &Flight, b: &Flight) -> bool {
    (a.time / b.time - 1.0).abs() < 1e-7 && (a.departure - b.departure).abs() < 1e-5
}
