//! Hyperbolic excess speed "up to" an allowance, at departure and at arrival: one smooth condition per end.
//!
//! A craft may leave its planet with a relative velocity w of at most W. Minimum time asks that the primer p at
//! departure lie in the normal cone of that ball at w: either |w| = W and w = W p/|p|, or, where more would not help,
//! p = 0 and w anything within. At arrival the same holds with the opposite sign, v - v_target = -W p/|p| or p = 0
//! (transversality: A. E. Bryson and Y.-C. Ho, *Applied Optimal Control* (1975), section 2.8; R. T. Rockafellar and
//! R. J.-B. Wets, *Variational Analysis* (1998), theorem 6.12, from memory).
//!
//! Both cases are one equation when written with the projection P of a vector on the ball. At departure a *guide*
//! vector q stands for both, w = P(q) and p = q - P(q) (S. M. Robinson's normal map, *Math. Oper. Res.* 17 (1992)
//! 691-714); at arrival the condition on the relative velocity d is d = P(d - c p), for any c > 0 (the natural map).
//! Neither is singular where the primer goes to zero, which p/|p| is.

use numerics::scalar::Scalar;

/// Largest excess speeds allowed. Canonical units; a coplanar flight counts in the start circle's speed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Allowance {
    /// Relative to the departure body.
    pub departure: f64,
    /// Relative to the target body.
    pub arrival: f64,
}

impl Allowance {
    /// None at either end: velocities are matched.
    pub const NONE: Allowance = Allowance { departure: 0.0, arrival: 0.0 };

    /// Whether either end has one.
    pub fn is_some(&self) -> bool {
        self.departure > 0.0 || self.arrival > 0.0
    }

    /// Both times `factor`.
    pub fn times(&self, factor: f64) -> Allowance {
        Allowance { departure: self.departure * factor, arrival: self.arrival * factor }
    }
}

/// Most by which an allowance grows in one go: with larger pieces a followed flight may slip to another branch.
const PIECE: f64 = 0.1;

/// The way from one allowance to another in pieces.
pub(crate) fn pieces([from, to]: [Allowance; 2]) -> impl Iterator<Item = [Allowance; 2]> {
    let longest = (to.departure - from.departure).abs().max((to.arrival - from.arrival).abs());
    let count = (longest / PIECE).ceil().max(1.0) as u32;
    let at = move |part: u32| {
        if part == count {
            return to;
        }
        let share = f64::from(part) / f64::from(count);
        let between = |from: f64, to: f64| from + (to - from) * share;
        Allowance {
            departure: between(from.departure, to.departure),
            arrival: between(from.arrival, to.arrival),
        }
    };
    (0..count).map(move |part| [at(part), at(part + 1)])
}

/// How long after departure a primer that starts at zero is taken up, so that it has a direction.
pub(crate) const MOMENT: f64 = 1e-9;

/// What a guide vector stands for at departure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Launch<T, const D: usize> {
    /// The primer; `None` where it is zero.
    pub primer: Option<[T; D]>,
    /// Velocity relative to the body.
    pub excess: [T; D],
}

/// The primer and the excess velocity that `guide` stands for.
///
/// The guide lives on a unit sphere together with the rest of the costate, so the ball is drawn with the radius
/// W/(1 + W) and blown up by 1 + W. Without an allowance the guide is the primer itself.
#[inline]
pub fn launch<T: Scalar, const D: usize>(guide: [T; D], allowance: T) -> Launch<T, D> {
    let scale = allowance + 1.0;
    let radius = allowance / scale;
    let length = length(&guide);
    if length.value() <= radius.value() {
        return Launch { primer: None, excess: guide.map(|q| q * scale) };
    }
    let direction = guide.map(|q| q / length);
    let primer = std::array::from_fn(|i| guide[i] - direction[i] * radius);
    Launch { primer: Some(primer), excess: direction.map(|n| n * allowance) }
}

/// What is left of the `relative` velocity at arrival: zero exactly where it is allowed and of minimum time.
///
/// `primer` in any scale that makes it comparable with a speed. Without an allowance this is `relative` itself.
#[inline]
pub fn left_over<T: Scalar, const D: usize>(relative: [T; D], primer: [T; D], allowance: T) -> [T; D] {
    if allowance.value() <= 0.0 {
        // The length of a matched velocity has no derivative; the ball around it is a point.
        let aim: [f64; D] = std::array::from_fn(|i| relative[i].value() - primer[i].value());
        let length = aim.map(|x| x * x).iter().sum::<f64>().sqrt();
        return std::array::from_fn(|i| relative[i] - allowance * (aim[i] / length));
    }
    let aim: [T; D] = std::array::from_fn(|i| relative[i] - primer[i]);
    let length = length(&aim);
    if length.value() <= allowance.value() {
        return primer;
    }
    let share = allowance / length;
    std::array::from_fn(|i| relative[i] - aim[i] * share)
}

#[inline]
fn length<T: Scalar, const D: usize>(vector: &[T; D]) -> T {
    vector.iter().fold(T::from(0.0), |sum, &x| sum + x * x).sqrt()
}

/// What a flown extremal does at one of its ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct End<const D: usize> {
    /// Velocity relative to the body.
    pub relative: [f64; D],
    /// Primer over the length of the whole costate; with its sign changed at departure.
    pub primer: [f64; D],
    /// Largest speed allowed.
    pub allowance: f64,
}

impl<const D: usize> End<D> {
    /// Speed relative to the body.
    pub fn speed(&self) -> f64 {
        length(&self.relative)
    }

    /// Distance of the relative velocity from what is allowed.
    pub fn beyond(&self) -> f64 {
        let beyond = self.speed() - self.allowance;
        // Written so that what is not a number stays so.
        if beyond < 0.0 { 0.0 } else { beyond }
    }

    /// How far the excess is from being of minimum time: along the primer and whole, or anything with the primer zero.
    pub fn misfit(&self) -> f64 {
        if self.allowance > 0.0 {
            length(&left_over(self.relative, self.primer, self.allowance))
        } else {
            0.0
        }
    }
}

/// Excess speeds used at the two ends of a flight. Canonical units.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Used {
    /// Relative to the departure body.
    pub departure: f64,
    /// Relative to the target body.
    pub arrival: f64,
}
