//! From square metres and kilograms to characteristic acceleration, and back.
//!
//! Source: C. R. McInnes, *Solar Sailing* (1999), section 2.6 (place from memory).

use orbits::constants::{PRESSURE_N_M2, SUN_GM_M3_S2};

/// Head-on force of the film over that of an ideal mirror: 1 for `ideal`.
pub type Efficiency = f64;

/// Characteristic acceleration, mm/s^2: the true acceleration at 1 au with the sail facing the Sun.
///
/// a_c = 2 P eta A / m.
///
/// # Units
/// `area_m2` m^2, `mass_kg` kg.
///
/// # Example
/// ```
/// // An invented 6400 m^2 sail on 60 kg.
/// let ac = sail::loading::acceleration_mm_s2(6400.0, 60.0, 1.0);
/// assert!((ac - 0.96849).abs() < 1e-5);
/// ```
pub fn acceleration_mm_s2(area_m2: f64, mass_kg: f64, efficiency: Efficiency) -> f64 {
    2e3 * PRESSURE_N_M2 * efficiency * area_m2 / mass_kg
}

/// Sail area, m^2, that gives `mass_kg` the characteristic acceleration `ac_mm_s2`.
pub fn area_m2(ac_mm_s2: f64, mass_kg: f64, efficiency: Efficiency) -> f64 {
    ac_mm_s2 * mass_kg / (2e3 * PRESSURE_N_M2 * efficiency)
}

/// Total mass, kg, that `area_m2` gives the characteristic acceleration `ac_mm_s2`.
pub fn mass_kg(ac_mm_s2: f64, area_m2: f64, efficiency: Efficiency) -> f64 {
    2e3 * PRESSURE_N_M2 * efficiency * area_m2 / ac_mm_s2
}

/// Total mass per sail area, g/m^2.
pub fn loading_g_m2(area_m2: f64, mass_kg: f64) -> f64 {
    1e3 * mass_kg / area_m2
}

/// Side of the square sail of that area, m.
pub fn side_m(area_m2: f64) -> f64 {
    area_m2.sqrt()
}

/// The loading at which light pushes an ideal sail as hard as the Sun pulls it, g/m^2 (lightness number 1).
pub fn critical_loading_g_m2() -> f64 {
    let au_m = orbits::constants::AU_M;
    2e3 * PRESSURE_N_M2 * au_m * au_m / SUN_GM_M3_S2
}

#[cfg(test)]
mod tests {
    use super::*;
    use orbits::units;

    #[test]
    fn critical_loading_is_the_textbook_one() {
        // 1.53 g/m^2, McInnes (1999) eq. 2.24 (from memory); with L = 3.828e26 W the exact figure is 1.5313.
        // IRRADIANCE 1361 W/m^2 is that luminosity at 1 au rounded to 0.01 %.
        assert!((critical_loading_g_m2() - 1.5313).abs() < 2e-4);
    }

    #[test]
    fn lightness_number_is_critical_loading_over_loading() {
        // McInnes (1999) eq. 2.25 (from memory): exact by definition, to rounding.
        let (area, mass) = (5000.0, 40.0);
        let by_loading = critical_loading_g_m2() / loading_g_m2(area, mass);
        let by_acceleration = units::lightness(acceleration_mm_s2(area, mass, 1.0));
        assert!((by_loading / by_acceleration - 1.0).abs() < 1e-14);
    }

    #[test]
    fn acceleration_from_loading_matches_the_rule() {
        // a_c = 9.12 eta / sigma with P = 4.56e-6 N/m^2, McInnes (1999) eq. 2.26 (from memory); our pressure is
        // 4.5398e-6, so ours is 4.5398 / 4.56 of it.
        let (area, mass, efficiency) = (1000.0, 8.0, 0.85);
        let rule = 9.12 * efficiency / loading_g_m2(area, mass) * (PRESSURE_N_M2 / 4.56e-6);
        assert!((acceleration_mm_s2(area, mass, efficiency) / rule - 1.0).abs() < 1e-14);
    }

    #[test]
    fn there_and_back() {
        let ac = acceleration_mm_s2(6400.0, 60.0, 0.9);
        assert!((area_m2(ac, 60.0, 0.9) - 6400.0).abs() < 1e-9);
        assert!((mass_kg(ac, 6400.0, 0.9) - 60.0).abs() < 1e-11);
        assert_eq!(side_m(6400.0), 80.0);
    }
}
