//! Film temperature: a thin isothermal film that faces the Sun with one side and radiates from both.
//!
//! Source: C. R. McInnes, *Solar Sailing* (1999), section 2.6 (place from memory).

use orbits::constants::IRRADIANCE_W_M2;

use crate::film::Optics;

/// Stefan-Boltzmann constant, W/(m^2 K^4). Source: International System of Units, 2019 (exact to these digits).
pub const STEFAN_BOLTZMANN_W_M2_K4: f64 = 5.670_374_419e-8;

/// Film temperature, K, at `distance_au` from the Sun with the cosine `cos_cone` of the cone angle.
///
/// T = [S (1 au / r)^2 cos(alpha) (1 - reflectance) / (sigma (eps_f + eps_b))]^(1/4). An ideal mirror would stay
/// cold: for it callers pass the thermal numbers of a real film and say so.
///
/// # Example
/// ```
/// use sail::{film::ALUMINISED, temperature::film_temperature_k};
/// assert!((film_temperature_k(&ALUMINISED, 1.0, 1.0) - 263.2).abs() < 0.1);
/// ```
pub fn film_temperature_k(film: &Optics, distance_au: f64, cos_cone: f64) -> f64 {
    let absorbed =
        IRRADIANCE_W_M2 / (distance_au * distance_au) * cos_cone.max(0.0) * (1.0 - film.reflectance);
    let emissivity = film.emissivity_front + film.emissivity_back;
    (absorbed / (STEFAN_BOLTZMANN_W_M2_K4 * emissivity)).sqrt().sqrt()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::film::ALUMINISED;

    #[test]
    fn head_on_temperatures_follow_from_the_formula() {
        // Arithmetic on the published set, S = 1361 W/m^2, to the digits written.
        for (distance_au, expected_k) in [(1.0, 263.2), (0.3871, 423.1), (0.25, 526.4)] {
            let found = film_temperature_k(&ALUMINISED, distance_au, 1.0);
            assert!((found - expected_k).abs() < 0.06, "{found} K at {distance_au} au");
        }
    }

    #[test]
    fn an_edge_on_film_absorbs_nothing() {
        assert_eq!(film_temperature_k(&ALUMINISED, 0.3, 0.0), 0.0);
    }
}
