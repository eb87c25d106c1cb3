//! The attitude of an ideal sail that pushes hardest along a given direction.
//!
//! With the wanted direction (the primer vector in a minimum-time flight) at the angle phi from the outward Sun
//! line, cos^2(alpha) cos(phi - alpha) is largest at tan(alpha) = (sqrt(9 + 8 tan^2 phi) - 3) / (4 tan phi) for
//! phi below 90 deg (McInnes, *Solar Sailing* (1999), eq. 4.82 or near, from memory; H. J. Kelley 1962; Zhukov &
//! Lebedev, *Cosmic Research* 2 (1964) 41-44). Written in components below, it holds for every phi and cancels
//! nowhere.

use numerics::scalar::Scalar;

/// Cosine and sine of the cone angle that gives the largest force along (`outward`, `across`).
///
/// `across` is the size of the wanted direction's part across the Sun line, >= 0; the sine returned is >= 0 on
/// that side. Only the direction matters, not the length, which must not be zero.
///
/// # Example
/// ```
/// // Wanted: straight across. Best: tan(alpha) = 1/sqrt 2.
/// let (cos, sin) = sail::steering::primer::ideal_attitude(0.0, 1.0);
/// assert!((sin / cos - 0.5f64.sqrt()).abs() < 1e-15);
/// ```
#[inline(always)]
pub fn ideal_attitude<T: Scalar>(outward: T, across: T) -> (T, T) {
    let root = (outward * outward * 9.0 + across * across * 8.0).sqrt();
    let (a, b) = if outward.value() >= 0.0 {
        (outward * 3.0 + root, across * 2.0)
    } else {
        (across * 4.0, root - outward * 3.0)
    };
    let scale = (a * a + b * b).sqrt().recip();
    (a * scale, b * scale)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::force;
    use proptest::prelude::*;

    fn cone_deg(phi_deg: f64) -> f64 {
        let phi = phi_deg.to_radians();
        let (cos, sin) = ideal_attitude(phi.cos(), phi.sin());
        sin.atan2(cos).to_degrees()
    }

    #[test]
    fn published_pairs_of_wanted_direction_and_cone_angle() {
        // checks: 60, 90, 120, 150 deg give 21.6, 35.26, 51.6, 70.2 deg (McInnes 1999 eq. 4.82, arithmetic beyond
        // 90 deg); tolerance half of the last digit written.
        for (phi, expected, tolerance) in
            [(60.0, 21.6, 0.05), (90.0, 35.26, 0.005), (120.0, 51.6, 0.05), (150.0, 70.2, 0.05)]
        {
            assert!((cone_deg(phi) - expected).abs() <= tolerance, "{phi}: {}", cone_deg(phi));
        }
    }

    #[test]
    fn the_ends_are_face_on_and_edge_on() {
        assert_eq!(cone_deg(0.0), 0.0);
        assert!((cone_deg(180.0) - 90.0).abs() < 1e-6);
    }

    proptest! {
        #[test]
        fn no_other_attitude_pushes_harder(phi in 0.0..std::f64::consts::PI, other in 0.0..std::f64::consts::FRAC_PI_2) {
            let gain = |cos: f64, sin: f64| {
                let f = force::ideal(cos, sin);
                f.radial * phi.cos() + f.transverse * phi.sin()
            };
            let (cos, sin) = ideal_attitude(phi.cos(), phi.sin());
            prop_assert!(gain(cos, sin) >= gain(other.cos(), other.sin()) - 1e-15);
        }

        #[test]
        fn the_short_formula_agrees_below_ninety_degrees(phi in 0.01..1.55f64) {
            let tan: f64 = phi.tan();
            let short = (((9.0 + 8.0 * tan * tan).sqrt() - 3.0) / (4.0 * tan)).atan();
            // The short form loses digits where 3 and the root cancel: about eps / tan^2.
            prop_assert!((cone_deg(phi.to_degrees()).to_radians() - short).abs() < 1e-11);
        }
    }
}
