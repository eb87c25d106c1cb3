//! Shooting: three unknowns (direction of the first costate, flight time) for three conditions at arrival.
//!
//! The costate's length is free, so it is kept on the unit sphere and moved along its tangent plane; no row is
//! needed for the Hamiltonian, whose sign a circular start fixes.

use nalgebra::{SMatrix, SVector, Vector3};
use numerics::dual::Dual;
use numerics::newton::{Equations, Linearised};
use numerics::ode::{Flow, Mode, Options, Termination, integrate};

use super::extremal::{Augmented, Extremal};

/// First costate (unit vector) and flight time, in units of the start radius.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Unknowns {
    /// l_r, l_u, l_v at departure.
    pub costate: Vector3<f64>,
    /// Flight time.
    pub time: f64,
}

impl Unknowns {
    /// Moved by a step of two components in the tangent plane of the costate's sphere and one of time.
    pub(super) fn stepped(&self, step: &SVector<f64, 3>) -> Unknowns {
        let [first, second] = tangents(&self.costate);
        let costate = (self.costate + first * step[0] + second * step[1]).normalize();
        Unknowns { costate, time: self.time + step[2] }
    }

    /// Straight-line prediction on the sphere and in the logarithm of time.
    pub fn extrapolated(before: &Unknowns, now: &Unknowns, ratio: f64) -> Unknowns {
        let costate = (now.costate + (now.costate - before.costate) * ratio).normalize();
        Unknowns { costate, time: now.time * (now.time / before.time).powf(ratio) }
    }
}

/// The conditions at arrival on a circle `ratio` times the start circle.
#[derive(Clone, Copy, Debug)]
pub struct Shooting {
    /// Target radius over start radius.
    pub ratio: f64,
    /// Lightness number.
    pub lightness: f64,
    /// Tolerance of the integration.
    pub tolerance: f64,
}

pub(super) const MAX_STEPS: usize = 40_000;

/// Two unit vectors that span the plane across `axis`.
pub(super) fn tangents(axis: &Vector3<f64>) -> [Vector3<f64>; 2] {
    let helper = if axis.x.abs() < 0.6 { Vector3::x() } else { Vector3::y() };
    let first = axis.cross(&helper).normalize();
    [first, axis.cross(&first)]
}

impl Shooting {
    fn options(&self) -> Options {
        Options { tolerance: self.tolerance, max_steps: MAX_STEPS }
    }

    fn flow(&self) -> Extremal {
        Extremal { lightness: self.lightness }
    }

    /// Distance, radial and transverse mismatch, each in parts of the target's distance and speed.
    fn mismatch<T: numerics::scalar::Scalar>(&self, [r, u, v, ..]: &Augmented<T>) -> [T; 3] {
        let root = self.ratio.sqrt();
        [*r / self.ratio - 1.0, *u * root, *v * root - 1.0]
    }
}

impl Equations<3> for Shooting {
    type Point = Unknowns;

    fn linearised(&self, point: &Unknowns) -> Option<Linearised<3>> {
        let [first, second] = tangents(&point.costate);
        let l = |i: usize| Dual::<2> { v: point.costate[i], d: [first[i], second[i]] };
        let one = Dual::constant(1.0);
        let start = [one, Dual::constant(0.0), one, l(0), l(1), l(2)];
        let outcome = integrate(&self.flow(), &start, point.time, &self.options());
        if outcome.termination != Termination::Reached {
            return None;
        }
        let end = outcome.state;
        let rates = self.flow().rates(Mode::default(), &end.map(|y| y.v));
        let along: Augmented<Dual<1>> = std::array::from_fn(|i| Dual { v: end[i].v, d: [rates[i]] });
        let (value, slope) = (self.mismatch(&end), self.mismatch(&along));
        let jacobian =
            SMatrix::from_fn(|row, column| if column < 2 { value[row].d[column] } else { slope[row].d[0] });
        let value = SVector::from(value.map(|y| y.v));
        (value.iter().all(|x| x.is_finite())).then_some((value, jacobian))
    }

    fn residuals(&self, point: &Unknowns) -> Option<SVector<f64, 3>> {
        let l = point.costate;
        let outcome = integrate(&self.flow(), &[1.0, 0.0, 1.0, l.x, l.y, l.z], point.time, &self.options());
        (outcome.termination == Termination::Reached).then(|| self.mismatch(&outcome.state).into())
    }

    fn moved(&self, point: &Unknowns, step: &SVector<f64, 3>) -> Unknowns {
        point.stepped(step)
    }

    fn trusted_fraction(&self, point: &Unknowns, step: &SVector<f64, 3>) -> f64 {
        trusted(point, step)
    }
}

/// The fraction of a step (two tangents, time) that keeps near `point`.
pub(super) fn trusted(point: &Unknowns, step: &SVector<f64, 3>) -> f64 {
    let turn: f64 = step.fixed_rows::<2>(0).norm();
    let stretch: f64 = step[2].abs() / point.time;
    (0.6 / turn).min(0.3 / stretch).min(1.0)
}
