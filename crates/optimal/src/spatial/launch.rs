//! The first spatial flight: the coplanar optimum between circles, carried over to the orbits themselves.

use nalgebra::Vector6;
use numerics::arclength::{Ended, Goal, Stride, follow};

use super::curves::{Growing, Point, Setting};
use crate::coplanar::flight::swept_angle;
use crate::coplanar::solve::{Problem, solve};

/// A push out of the plane that keeps the first Jacobians regular.
const LIFT: f64 = 1e-7;

/// The coplanar optimum between the two semi-major axes, as a point at shape 0.
pub fn coplanar_point(setting: &Setting) -> Option<Point> {
    let ends = &setting.ends;
    let problem = Problem {
        start_radius: ends.from.semi_major_axis,
        target_radius: ends.round_target,
        lightness: setting.lightness,
    };
    let solved = solve(&problem)?;
    let swept = swept_angle(&problem, &solved.unknowns)?;
    let r = problem.start_radius;
    let l = solved.unknowns.costate;
    // Costates per au and per canonical speed, from those per start radius and per its circular speed.
    let (l_r, l_u, l_v) = (l.x / r, l.y * r.sqrt(), l.z * r.sqrt());
    let l_theta = l_u * r.powf(-1.5);
    let longitude = ends.departure_longitude();
    let (sin, cos) = longitude.sin_cos();
    let turned =
        |radial: f64, transverse: f64| [radial * cos - transverse * sin, radial * sin + transverse * cos];
    let ([lx, ly], [px, py]) = (turned(l_r, l_theta), turned(l_u, l_v));
    let rate = ends.round_target.powf(-1.5);
    Some(Point {
        costate: Vector6::new(lx, ly, LIFT, px, py, LIFT).normalize(),
        time: solved.unknowns.time * problem.time_scale(),
        arrival: (longitude + swept - ends.target_longitude()) / rate,
        parameter: 0.0,
    })
}

/// How carefully to follow curves.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Care {
    /// Tolerance of integrations on the way.
    pub tolerance: f64,
    /// Wanted length of the first correction of a step over the step's own: smaller steps along bends.
    pub wanted_correction: f64,
    /// Most Jacobians for one curve.
    pub budget: usize,
}

impl Care {
    /// Quick. Measured over 216 dates (Mars, Venus, Mercury; 0.5, 1, 2 mm/s^2): 426 of 432 branches, 174 Jacobians a
    /// date.
    pub const QUICK: Care = Care { tolerance: 1e-7, wanted_correction: 0.005, budget: 400 };
    /// For what the quick way loses: 430 of the same 432 branches, 229 Jacobians a date.
    pub const CAREFUL: Care = Care { tolerance: 1e-8, wanted_correction: 0.0015, budget: 1500 };

    pub(super) fn stride(&self) -> Stride {
        Stride {
            first: 0.05,
            largest: 0.6,
            smallest: 1e-6,
            accept: 2e-3,
            wanted_correction: self.wanted_correction,
            budget: self.budget,
        }
    }
}

/// Grows the orbits from circles to themselves, departure at the reference instant, arrival point free.
pub fn grown(setting: &Setting, care: &Care) -> Option<Point> {
    grown_to(setting, care, 1.0)
}

/// Grows the orbits from circles to `shape`, departure at the reference instant, arrival point free.
pub(super) fn grown_to(setting: &Setting, care: &Care, shape: f64) -> Option<Point> {
    let start = coplanar_point(setting)?;
    let setting = Setting { tolerance: care.tolerance, ..*setting };
    let goal = Goal { parameter: Growing::scaled(shape), sign: 1.0 };
    let followed = follow(&Growing(&setting), start, &goal, &care.stride(), &mut |_| true);
    (followed.ended == Ended::Reached).then_some(followed.point)
}
