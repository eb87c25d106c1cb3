//! Physical constants, each with its source.

/// Sun's gravitational parameter, m^3/s^2.
///
/// Source: JPL planetary ephemeris DE405, value in TDB-compatible units (E. M. Standish, 1998), as used by the
/// approximate planetary elements in [`crate::planets`]; from memory.
pub const SUN_GM_M3_S2: f64 = 1.327_124_400_18e20;

/// Sun's gravitational parameter, km^3/s^2.
pub const SUN_GM_KM3_S2: f64 = SUN_GM_M3_S2 / 1e9;

/// Astronomical unit, m. Source: IAU 2012 Resolution B2 (exact).
pub const AU_M: f64 = 149_597_870_700.0;

/// Astronomical unit, km.
pub const AU_KM: f64 = AU_M / 1e3;

/// Day, s (exact).
pub const DAY_S: f64 = 86_400.0;

/// Julian year, d (exact).
pub const JULIAN_YEAR_D: f64 = 365.25;

/// Julian century, d (exact).
pub const JULIAN_CENTURY_D: f64 = 36_525.0;

/// Julian date of the epoch J2000, 2000-01-01 12:00 TDB (exact).
pub const J2000_JD_TDB: f64 = 2_451_545.0;

/// Speed of light, m/s. Source: International System of Units (exact).
pub const LIGHT_SPEED_M_S: f64 = 299_792_458.0;

/// Solar irradiance at 1 au, W/m^2.
///
/// Source: IAU 2015 Resolution B3 (nominal total solar irradiance). Kopp & Lean, Geophys. Res. Lett. 38 (2011)
/// L01706 measured 1360.8 +- 0.5.
pub const IRRADIANCE_W_M2: f64 = 1361.0;

/// Radiation pressure on a black surface that faces the Sun at 1 au, N/m^2: irradiance over the speed of light.
pub const PRESSURE_N_M2: f64 = IRRADIANCE_W_M2 / LIGHT_SPEED_M_S;

/// Standard gravity that turns specific impulse into exhaust speed, m/s^2.
///
/// Source: 3rd General Conference on Weights and Measures, 1901 (exact).
pub const G0_M_S2: f64 = 9.806_65;

/// Mean obliquity of the ecliptic at J2000, deg.
///
/// Source: IAU 1976 system, 84381.448 arcsec (Lieske et al., Astron. Astrophys. 58 (1977) 1-16).
pub const OBLIQUITY_J2000_DEG: f64 = 84_381.448 / 3600.0;

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn pressure_agrees_with_the_measured_irradiance() {
        // Kopp & Lean (2011), published: 1360.8 +- 0.5 W/m^2, 4.5391e-6 N/m^2. The tolerance is their 0.5 W/m^2.
        assert!((PRESSURE_N_M2 - 4.5391e-6).abs() < 0.5 / LIGHT_SPEED_M_S);
    }

    #[test]
    fn obliquity_in_degrees_is_the_familiar_number() {
        // CCSDS practice and the JPL approximate elements quote 23.4392911 or 23.43928 deg: last digit rounds.
        assert!((OBLIQUITY_J2000_DEG - 23.439_291_1).abs() < 5e-8);
    }
}
