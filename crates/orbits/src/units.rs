//! Canonical heliocentric units, and the way in and out of them.
//!
//! Length 1 au, time sqrt(au^3 / GM of the Sun): the Earth's circular speed is 1, its year 2 pi and the Sun's
//! gravitational parameter 1. Solvers work in these units and never let them out.
//!
//! # Example
//! ```
//! use orbits::units;
//! // A year on a circle of 1 au is 2 pi canonical units.
//! let year_d = units::days(std::f64::consts::TAU);
//! assert!((year_d - 365.2569).abs() < 1e-4);
//! ```

/// Canonical time unit sqrt(au^3 / GM), s.
pub const TIME_UNIT_S: f64 = 5_022_642.891_366_037;

/// Canonical time unit, d: 58.132441.
pub const TIME_UNIT_D: f64 = TIME_UNIT_S / crate::constants::DAY_S;

/// Canonical speed unit: circular speed at 1 au, km/s.
pub const SPEED_UNIT_KM_S: f64 = crate::constants::AU_KM / TIME_UNIT_S;

/// Canonical acceleration unit: solar gravity at 1 au, mm/s^2.
pub const ACCELERATION_UNIT_MM_S2: f64 =
    crate::constants::SUN_GM_M3_S2 / (crate::constants::AU_M * crate::constants::AU_M) * 1e3;

/// Days of a canonical time.
pub fn days(canonical_time: f64) -> f64 {
    canonical_time * TIME_UNIT_D
}

/// Canonical time of days.
pub fn canonical_time(time_d: f64) -> f64 {
    time_d / TIME_UNIT_D
}

/// Kilometres per second of a canonical speed.
pub fn km_per_s(canonical_speed: f64) -> f64 {
    canonical_speed * SPEED_UNIT_KM_S
}

/// Canonical speed of kilometres per second.
pub fn canonical_speed(speed_km_s: f64) -> f64 {
    speed_km_s / SPEED_UNIT_KM_S
}

/// Lightness number of a characteristic acceleration in mm/s^2: the same number in canonical units.
pub fn lightness(ac_mm_s2: f64) -> f64 {
    ac_mm_s2 / ACCELERATION_UNIT_MM_S2
}

/// Characteristic acceleration in mm/s^2 of a lightness number.
pub fn mm_per_s2(lightness: f64) -> f64 {
    lightness * ACCELERATION_UNIT_MM_S2
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::constants::{AU_M, SUN_GM_M3_S2};

    #[test]
    fn time_unit_follows_from_the_constants() {
        // Square roots are correctly rounded everywhere: the written constant must match to the last bit or two.
        let from_constants = AU_M * (AU_M / SUN_GM_M3_S2).sqrt();
        assert!((TIME_UNIT_S / from_constants - 1.0).abs() < 4.0 * f64::EPSILON);
    }

    #[test]
    fn units_are_the_textbook_ones() {
        // Arithmetic from the constants; each to the digits written in the texts.
        assert!((TIME_UNIT_D - 58.132_441).abs() < 5e-7);
        assert!((SPEED_UNIT_KM_S - 29.784_7).abs() < 5e-5);
        assert!((ACCELERATION_UNIT_MM_S2 - 5.930_084).abs() < 5e-7);
    }

    #[test]
    fn there_and_back_is_where_we_were() {
        for x in [1e-9, 0.17, 1.0, 58.0, 1e5] {
            assert!((canonical_time(days(x)) / x - 1.0).abs() < 4.0 * f64::EPSILON);
            assert!((canonical_speed(km_per_s(x)) / x - 1.0).abs() < 4.0 * f64::EPSILON);
            assert!((lightness(mm_per_s2(x)) / x - 1.0).abs() < 4.0 * f64::EPSILON);
        }
    }
}
