//! Locally optimal steering: the attitude that changes the semi-major axis fastest at this very moment.
//!
//! da/dt = 2 a^2 (v . f) (Gauss; canonical units), so the wanted direction is along the velocity to raise the
//! orbit and against it to lower it. McInnes, *Solar Sailing* (1999), section 4.4. No memory, no foresight: the
//! eccentricity ends wherever it ends.

use numerics::scalar::Scalar;

use super::primer::ideal_attitude;

/// Which way the semi-major axis has to go.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Towards {
    /// Larger.
    Larger,
    /// Smaller.
    Smaller,
}

/// Cosine and signed sine of the cone angle (positive pushes forward) for radial and transverse speed `u`, `v`.
#[inline(always)]
pub fn attitude<T: Scalar>(towards: Towards, u: T, v: T) -> (T, T) {
    let (outward, forward) = match towards {
        Towards::Larger => (u, v),
        Towards::Smaller => (-u, -v),
    };
    let (cos, sin) = ideal_attitude(outward, forward.abs());
    (cos, if forward.value() < 0.0 { -sin } else { sin })
}
