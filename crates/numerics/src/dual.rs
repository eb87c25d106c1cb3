//! Forward-mode automatic differentiation: a value with `N` partial derivatives.

use std::ops::{Add, AddAssign, Div, Mul, Neg, Sub, SubAssign};

use crate::scalar::Scalar;

/// A number `v + sum_i d[i] e_i` with `e_i e_j = 0`: arithmetic on it carries exact first derivatives.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Dual<const N: usize> {
    /// The value.
    pub v: f64,
    /// Partial derivatives with respect to the `N` seeds.
    pub d: [f64; N],
}

impl<const N: usize> Dual<N> {
    /// A constant: all derivatives zero.
    #[inline(always)]
    pub fn constant(v: f64) -> Self {
        Dual { v, d: [0.0; N] }
    }

    /// The independent variable number `index`.
    ///
    /// # Panics
    /// When `index >= N`.
    pub fn variable(v: f64, index: usize) -> Self {
        let mut d = [0.0; N];
        d[index] = 1.0;
        Dual { v, d }
    }

    #[inline(always)]
    fn map(self, v: f64, f: impl Fn(f64) -> f64) -> Self {
        Dual { v, d: self.d.map(f) }
    }

    #[inline(always)]
    fn zip(self, other: Self, v: f64, f: impl Fn(f64, f64) -> f64) -> Self {
        Dual { v, d: std::array::from_fn(|i| f(self.d[i], other.d[i])) }
    }
}

impl<const N: usize> From<f64> for Dual<N> {
    #[inline(always)]
    fn from(v: f64) -> Self {
        Dual::constant(v)
    }
}

impl<const N: usize> Neg for Dual<N> {
    type Output = Self;
    #[inline(always)]
    fn neg(self) -> Self {
        self.map(-self.v, |d| -d)
    }
}

impl<const N: usize> Add for Dual<N> {
    type Output = Self;
    #[inline(always)]
    fn add(self, o: Self) -> Self {
        self.zip(o, self.v + o.v, |a, b| a + b)
    }
}

impl<const N: usize> Sub for Dual<N> {
    type Output = Self;
    #[inline(always)]
    fn sub(self, o: Self) -> Self {
        self.zip(o, self.v - o.v, |a, b| a - b)
    }
}

#[allow(clippy::suspicious_arithmetic_impl, reason = "the product rule is a sum")]
impl<const N: usize> Mul for Dual<N> {
    type Output = Self;
    #[inline(always)]
    fn mul(self, o: Self) -> Self {
        self.zip(o, self.v * o.v, |a, b| a * o.v + self.v * b)
    }
}

#[allow(clippy::suspicious_arithmetic_impl, reason = "one reciprocal serves the value and every derivative")]
impl<const N: usize> Div for Dual<N> {
    type Output = Self;
    #[inline(always)]
    fn div(self, o: Self) -> Self {
        let inverse = o.v.recip();
        let quotient = self.v * inverse;
        self.zip(o, quotient, |a, b| (a - quotient * b) * inverse)
    }
}

impl<const N: usize> Add<f64> for Dual<N> {
    type Output = Self;
    #[inline(always)]
    fn add(self, o: f64) -> Self {
        Dual { v: self.v + o, d: self.d }
    }
}

impl<const N: usize> Sub<f64> for Dual<N> {
    type Output = Self;
    #[inline(always)]
    fn sub(self, o: f64) -> Self {
        Dual { v: self.v - o, d: self.d }
    }
}

impl<const N: usize> Mul<f64> for Dual<N> {
    type Output = Self;
    #[inline(always)]
    fn mul(self, o: f64) -> Self {
        self.map(self.v * o, |d| d * o)
    }
}

#[allow(clippy::suspicious_arithmetic_impl, reason = "one reciprocal serves the value and every derivative")]
impl<const N: usize> Div<f64> for Dual<N> {
    type Output = Self;
    #[inline(always)]
    fn div(self, o: f64) -> Self {
        self * o.recip()
    }
}

impl<const N: usize> AddAssign for Dual<N> {
    #[inline(always)]
    fn add_assign(&mut self, o: Self) {
        *self = *self + o;
    }
}

impl<const N: usize> SubAssign for Dual<N> {
    #[inline(always)]
    fn sub_assign(&mut self, o: Self) {
        *self = *self - o;
    }
}

impl<const N: usize> Scalar for Dual<N> {
    #[inline(always)]
    fn value(self) -> f64 {
        self.v
    }

    #[inline(always)]
    fn chain(self, value: f64, derivative: f64) -> Self {
        self.map(value, |d| d * derivative)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A formula that uses every operation once or more.
    fn formula<T: Scalar>(x: T, y: T) -> T {
        let a = (x * y + 2.0 - y / x).sqrt();
        let b = (x - y).sin() * (x * 0.5).cos() + y.atan2(x);
        -(a / b) + (x + y).recip() - (x - 3.0).abs() / 7.0
    }

    #[test]
    fn derivatives_agree_with_central_differences() {
        for (x, y) in [(1.3, 0.4), (0.2, 0.3), (4.0, -0.1)] {
            let exact = formula(Dual::<2>::variable(x, 0), Dual::<2>::variable(y, 1));
            // Truncation h^2 f'''/6 and rounding eps/h balance near h = 1e-5; the error there is about 1e-9.
            let h = 1e-5;
            let dx = (formula(x + h, y) - formula(x - h, y)) / (2.0 * h);
            let dy = (formula(x, y + h) - formula(x, y - h)) / (2.0 * h);
            // Division rounds differently in the two types: a few units in the last place, more where terms cancel.
            assert!((exact.v - formula(x, y)).abs() < 1e-13 * (1.0 + exact.v.abs()));
            assert!((exact.d[0] - dx).abs() < 1e-7 * (1.0 + dx.abs()), "{} against {dx}", exact.d[0]);
            assert!((exact.d[1] - dy).abs() < 1e-7 * (1.0 + dy.abs()), "{} against {dy}", exact.d[1]);
        }
    }

    #[test]
    fn constants_carry_no_derivative() {
        assert_eq!(formula(Dual::<3>::from(0.7), Dual::from(0.2)).d, [0.0; 3]);
    }
}
