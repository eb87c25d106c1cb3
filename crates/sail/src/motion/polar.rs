//! Coplanar motion about the Sun in polar coordinates: r, radial speed u, transverse speed v.
//!
//! r' = u, u' = v^2/r - 1/r^2 + a_r, v' = -u v / r + a_t, theta' = v/r; canonical units, a the sail acceleration.

use numerics::scalar::Scalar;

use crate::force::Force;

/// Rates of (r, u, v) under the sail `force` (in parts of head-on) at `lightness`.
#[inline(always)]
pub fn rates<T: Scalar>(lightness: T, r: T, u: T, v: T, force: Force<T>) -> [T; 3] {
    let inverse = r.recip();
    let push = lightness * inverse * inverse;
    let pull = inverse * inverse;
    let swing = v * inverse;
    [u, v * swing - pull + push * force.radial, -(u * swing) + push * force.transverse]
}

/// Orbital energy per mass: v^2/2 - 1/r.
#[inline(always)]
pub fn energy<T: Scalar>(r: T, u: T, v: T) -> T {
    (u * u + v * v) * 0.5 - r.recip()
}

/// Semi-major axis (negative on a hyperbola) and eccentricity of the orbit through a state.
pub fn shape(r: f64, u: f64, v: f64) -> (f64, f64) {
    let momentum2 = (r * v) * (r * v);
    // Components of the eccentricity vector: no cancellation near a circle.
    let along = momentum2 / r - 1.0;
    let across = -r * v * u;
    (-0.5 / energy(r, u, v), along.hypot(across))
}
