//! Two inertial frames with one origin: mean ecliptic and equinox of J2000, and ICRF (EME2000).
//!
//! Both share the x axis, towards the equinox; they differ by a turn about it through the obliquity of J2000.
//! ICRF and EME2000 differ by less than 0.03 arcsec, far below the planetary elements' errors, and are taken as
//! one.

use nalgebra::Vector3;

use crate::constants::OBLIQUITY_J2000_DEG;

/// Components in ICRF (EME2000) of a vector given in the ecliptic of J2000.
///
/// # Example
/// ```
/// use nalgebra::Vector3;
/// // The ecliptic's north pole leans towards 18 h of right ascension: -y, +z.
/// let pole = orbits::frames::ecliptic_to_icrf(&Vector3::z());
/// assert!(pole.y < 0.0 && pole.z > 0.9);
/// ```
pub fn ecliptic_to_icrf(vector: &Vector3<f64>) -> Vector3<f64> {
    turned_about_x(vector, OBLIQUITY_J2000_DEG)
}

/// Components in the ecliptic of J2000 of a vector given in ICRF (EME2000).
pub fn icrf_to_ecliptic(vector: &Vector3<f64>) -> Vector3<f64> {
    turned_about_x(vector, -OBLIQUITY_J2000_DEG)
}

fn turned_about_x(vector: &Vector3<f64>, angle_deg: f64) -> Vector3<f64> {
    let (sin, cos) = angle_deg.to_radians().sin_cos();
    Vector3::new(vector.x, cos * vector.y - sin * vector.z, sin * vector.y + cos * vector.z)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn solstice_stands_high_in_the_north() {
        // The Sun at ecliptic longitude 90 deg has the obliquity as declination (definition of the obliquity).
        let sun = ecliptic_to_icrf(&Vector3::y());
        assert!((sun.z.asin().to_degrees() - OBLIQUITY_J2000_DEG).abs() < 1e-13);
    }

    #[test]
    fn pollux_is_where_meeus_puts_it() {
        // From memory (high confidence): J. Meeus, Astronomical Algorithms, example 13.a: right ascension
        // 116.328942, declination 28.026183 deg (J2000) is longitude 113.215630, latitude 6.684170 deg.
        let direction = |longitude: f64, latitude: f64| {
            let ((sin_l, cos_l), (sin_b, cos_b)) =
                (longitude.to_radians().sin_cos(), latitude.to_radians().sin_cos());
            Vector3::new(cos_b * cos_l, cos_b * sin_l, sin_b)
        };
        let found = icrf_to_ecliptic(&direction(116.328_942, 28.026_183));
        let expected = direction(113.215_630, 6.684_170);
        assert!((found - expected).norm().to_degrees() < 2e-6);
    }

    proptest! {
        #[test]
        fn there_and_back_is_where_we_were(x in -1.0f64..1.0, y in -1.0f64..1.0, z in -1.0f64..1.0) {
            let vector = Vector3::new(x, y, z);
            prop_assert!((icrf_to_ecliptic(&ecliptic_to_icrf(&vector)) - vector).norm() < 1e-15 * 4.0);
        }
    }
}
