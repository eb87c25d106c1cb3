//! Meeting a moving body: both branches of the fastest flight that leaves at a given instant.

use numerics::arclength::{Ended, Goal, follow};

use super::curves::{Clock, Meeting, Point, Setting};
use super::launch::{Care, grown};

/// Traced (not yet polished) flights to the body, departure at the reference instant.
pub fn branches(setting: &Setting, care: &Care) -> Vec<Point> {
    let Some(open) = grown(setting, care) else { return Vec::new() };
    let period = std::f64::consts::TAU * setting.ends.to.semi_major_axis.powf(1.5);
    let ahead = (open.point.arrival - open.point.time).rem_euclid(period);
    let setting = Setting { tolerance: care.tolerance, ..*setting };
    let curve = Meeting { setting: &setting, clock: Clock::Phase };
    let traced = [ahead, ahead - period].map(|phase| {
        let start = Point { parameter: phase, ..open.point };
        let goal = Goal { parameter: 0.0, sign: -phase.signum() };
        let followed = follow(&curve, start, &goal, &care.stride(), &mut |_| true);
        (followed.ended == Ended::Reached).then_some(followed.point)
    });
    traced.into_iter().flatten().collect()
}
