//! The rocket equation: what an impulse costs in propellant and what is left to deliver.

use crate::argument::{BadArgument, not_negative, positive};
use crate::constants::G0_M_S2;

/// Propellant over the mass at the start of the phases counted: 1 - exp(-dv / (g0 Isp)).
///
/// # Units
/// Velocity change in km/s, specific impulse in s; the result lies in [0, 1).
///
/// # Errors
/// [`BadArgument`] when the velocity change is not a number from zero up or the specific impulse not above zero.
///
/// # References
/// K. E. Tsiolkovsky (1903); g0 as in [`G0_M_S2`].
///
/// # Example
/// ```
/// // 2.26 km/s with 320 s burn about half of the mass.
/// let fraction = orbits::rocket::propellant_fraction(2.26, 320.0)?;
/// assert!((fraction - 0.513).abs() < 1e-3);
/// # Ok::<(), orbits::argument::BadArgument>(())
/// ```
pub fn propellant_fraction(dv_km_s: f64, isp_s: f64) -> Result<f64, BadArgument> {
    let dv_m_s = not_negative("dv_km_s", dv_km_s)? * 1e3;
    let exhaust_m_s = G0_M_S2 * positive("isp_s", isp_s)?;
    Ok(-(-dv_m_s / exhaust_m_s).exp_m1())
}

/// A stage that carries a payload.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Stage {
    /// Mass at the start of the phases counted, kg.
    pub start_kg: f64,
    /// Propellant over start mass.
    pub propellant_fraction: f64,
    /// Dry mass of the stage over its propellant.
    pub stage_dry: f64,
}

impl Stage {
    /// Mass delivered, kg: start mass less propellant less stage dry mass. Negative when the stage cannot even
    /// carry itself.
    pub fn delivered_kg(&self) -> f64 {
        self.start_kg * (1.0 - self.propellant_fraction * (1.0 + self.stage_dry))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn no_impulse_needs_no_propellant_and_delivers_everything() {
        let fraction = propellant_fraction(0.0, 320.0).unwrap();
        assert_eq!(fraction, 0.0);
        let stage = Stage { start_kg: 60.0, propellant_fraction: fraction, stage_dry: 0.1 };
        assert_eq!(stage.delivered_kg(), 60.0);
    }

    #[test]
    fn one_exhaust_speed_leaves_one_part_in_e() {
        let exhaust_km_s = 320.0 * G0_M_S2 / 1e3;
        let fraction = propellant_fraction(exhaust_km_s, 320.0).unwrap();
        assert!((fraction - (1.0 - (-1f64).exp())).abs() < 4.0 * f64::EPSILON);
    }

    #[test]
    fn stage_that_cannot_carry_itself_delivers_less_than_nothing() {
        let stage = Stage { start_kg: 60.0, propellant_fraction: 0.95, stage_dry: 0.1 };
        assert!(stage.delivered_kg() < 0.0);
    }

    #[test]
    fn impossible_arguments_are_named() {
        assert_eq!(propellant_fraction(f64::NAN, 320.0).unwrap_err().name, "dv_km_s");
        assert_eq!(propellant_fraction(1.0, 0.0).unwrap_err().name, "isp_s");
    }

    proptest! {
        #[test]
        fn mass_ratios_multiply(first in 0.0f64..10.0, second in 0.0f64..10.0, isp in 100.0f64..5000.0) {
            let left = |dv: f64| 1.0 - propellant_fraction(dv, isp).unwrap();
            prop_assert!((left(first) * left(second) - left(first + second)).abs() < 1e-15);
        }
    }
}
