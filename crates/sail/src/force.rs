//! Force of sunlight on a flat sail, in parts of the head-on force.
//!
//! Source: C. R. McInnes, *Solar Sailing* (1999), section 2.4.

use numerics::scalar::Scalar;

/// Force per head-on force at the same distance.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Force<T> {
    /// Along the Sun-to-sail line, outward.
    pub radial: T,
    /// Along the part of the normal across that line.
    pub transverse: T,
}

/// Force on an ideal mirror whose normal has direction cosines `cos_cone` (outward) and `sin_cone` (transverse):
/// cos^2(alpha) along the normal.
///
/// # Example
/// ```
/// // The largest transverse force, 2/(3 sqrt 3), is at tan(alpha) = 1/sqrt 2.
/// let (cos, sin) = ((2f64 / 3.0).sqrt(), (1f64 / 3.0).sqrt());
/// assert!((sail::force::ideal(cos, sin).transverse - 0.3849002).abs() < 1e-7);
/// ```
#[inline(always)]
pub fn ideal<T: Scalar>(cos_cone: T, sin_cone: T) -> Force<T> {
    let lit = cos_cone * cos_cone;
    Force { radial: lit * cos_cone, transverse: lit * sin_cone }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn largest_transverse_force_is_where_the_books_say() {
        // Exact: tan(alpha) = 1/sqrt 2, force 2/(3 sqrt 3); McInnes (1999) ch. 4.
        let at = |cone: f64| ideal(cone.cos(), cone.sin()).transverse;
        let best = (1.0 / 2f64.sqrt()).atan();
        assert!((best.to_degrees() - 35.2644).abs() < 5e-5);
        assert!((at(best) - 2.0 / 27f64.sqrt()).abs() < 1e-15);
        assert!(at(best) > at(best - 1e-3) && at(best) > at(best + 1e-3));
    }

    proptest! {
        #[test]
        fn ideal_sail_never_pulls_sunward(cone in -std::f64::consts::FRAC_PI_2..std::f64::consts::FRAC_PI_2) {
            prop_assert!(ideal(cone.cos(), cone.sin()).radial >= 0.0);
        }
    }
}
