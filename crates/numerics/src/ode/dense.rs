//! The inside of an accepted step: a polynomial of degree 7 through it.

use crate::scalar::Scalar;

use super::flow::Mode;

/// An accepted step with its interpolating polynomial.
#[derive(Clone, Debug)]
pub struct DenseStep<T, const N: usize> {
    /// Time at the start of the step.
    pub start: f64,
    /// Signed length of the step.
    pub length: f64,
    /// State at the start.
    pub from: [T; N],
    /// State at the end.
    pub to: [T; N],
    /// Right-hand side in force during the step.
    pub mode: Mode,
    pub(super) coefficients: [[T; N]; 7],
}

impl<T: Scalar, const N: usize> DenseStep<T, N> {
    /// Time at the end of the step.
    pub fn end(&self) -> f64 {
        self.start + self.length
    }

    /// State at the fraction `x` of the step, 0 to 1.
    pub fn at(&self, x: f64) -> [T; N] {
        std::array::from_fn(|i| {
            let mut y = T::from(0.0);
            for (n, coefficient) in self.coefficients.iter().rev().enumerate() {
                y = (y + coefficient[i]) * if n % 2 == 0 { x } else { 1.0 - x };
            }
            y + self.from[i]
        })
    }
}
