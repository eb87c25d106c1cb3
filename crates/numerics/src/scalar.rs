//! The number type that formulas are written in: `f64`, or a dual number that carries derivatives.

use std::ops::{Add, AddAssign, Div, Mul, Neg, Sub, SubAssign};

/// A real number that the equations of motion can be evaluated in.
///
/// Comparisons and step control look at [`Scalar::value`] only, so derivatives never change a decision.
pub trait Scalar:
    Copy
    + From<f64>
    + Neg<Output = Self>
    + Add<Output = Self>
    + Sub<Output = Self>
    + Mul<Output = Self>
    + Div<Output = Self>
    + AddAssign
    + SubAssign
    + Add<f64, Output = Self>
    + Sub<f64, Output = Self>
    + Mul<f64, Output = Self>
    + Div<f64, Output = Self>
{
    /// The plain value.
    fn value(self) -> f64;

    /// `f(self)` where `f` has the given value and derivative at [`Scalar::value`].
    fn chain(self, value: f64, derivative: f64) -> Self;

    /// Square root.
    #[inline(always)]
    fn sqrt(self) -> Self {
        let root = self.value().sqrt();
        self.chain(root, 0.5 / root)
    }

    /// One over the number.
    #[inline(always)]
    fn recip(self) -> Self {
        let inverse = self.value().recip();
        self.chain(inverse, -inverse * inverse)
    }

    /// Absolute value; the derivative at zero is that of the positive side.
    #[inline(always)]
    fn abs(self) -> Self {
        if self.value() < 0.0 { -self } else { self }
    }

    /// The number times itself.
    #[inline(always)]
    fn squared(self) -> Self {
        self * self
    }

    /// Sine, angle in radians.
    #[inline(always)]
    fn sin(self) -> Self {
        let (sin, cos) = self.value().sin_cos();
        self.chain(sin, cos)
    }

    /// Cosine, angle in radians.
    #[inline(always)]
    fn cos(self) -> Self {
        let (sin, cos) = self.value().sin_cos();
        self.chain(cos, -sin)
    }

    /// Angle of the point (`x`, `self`) from the x axis, radians.
    #[inline(always)]
    fn atan2(self, x: Self) -> Self {
        let (y, radius2) = (self.value(), self.value() * self.value() + x.value() * x.value());
        let angle = y.atan2(x.value());
        // d(atan2) = (x dy - y dx) / (x^2 + y^2), assembled from two one-argument chains.
        self.chain(angle, x.value() / radius2) + x.chain(0.0, -y / radius2)
    }
}

impl Scalar for f64 {
    #[inline(always)]
    fn value(self) -> f64 {
        self
    }

    #[inline(always)]
    fn chain(self, value: f64, _derivative: f64) -> f64 {
        value
    }
}
