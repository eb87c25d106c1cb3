//! Leaving and reaching a planet with one burn at a given distance from its centre (patched conics).

use crate::argument::{BadArgument, not_negative, positive};
use crate::planets::Planet;

/// A place to burn: the periapsis of a hyperbola, or a circular orbit, at one distance from a planet's centre.
///
/// # Example
/// ```
/// use orbits::{escape::Burn, planets::Planet};
/// let low = Burn::above(Planet::Earth, 300.0)?;
/// // A parking orbit is far cheaper to leave than its speed suggests: 3.6 km/s buys 2.94 km/s of excess.
/// let burn_km_s = low.from_circle_km_s(2.943)?;
/// assert!((burn_km_s - 3.59).abs() < 0.01);
/// # Ok::<(), orbits::argument::BadArgument>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Burn {
    /// Gravitational parameter of the planet, km^3/s^2.
    gm_km3_s2: f64,
    /// Distance from its centre, km.
    radius_km: f64,
}

/// Hyperbolic excess speeds before and after a burn.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Excess {
    /// Excess speed that the launch has already given, km/s (C3 is its square).
    pub available_km_s: f64,
    /// Excess speed that the transfer needs, km/s.
    pub needed_km_s: f64,
}

impl Burn {
    /// A burn at a distance from a body's centre.
    ///
    /// # Units
    /// GM in km^3/s^2, radius in km.
    ///
    /// # Errors
    /// [`BadArgument`] when either is not a number above zero.
    pub fn at_radius(gm_km3_s2: f64, radius_km: f64) -> Result<Self, BadArgument> {
        Ok(Self {
            gm_km3_s2: positive("gm_km3_s2", gm_km3_s2)?,
            radius_km: positive("radius_km", radius_km)?,
        })
    }

    /// A burn at an altitude in km above a planet's equatorial radius.
    ///
    /// # Errors
    /// [`BadArgument`] when the altitude is not a number from zero up.
    pub fn above(planet: Planet, altitude_km: f64) -> Result<Self, BadArgument> {
        let altitude_km = not_negative("altitude_km", altitude_km)?;
        Self::at_radius(planet.gm_km3_s2(), planet.equatorial_radius_km() + altitude_km)
    }

    /// Speed on the circular orbit, km/s.
    pub fn circular_km_s(&self) -> f64 {
        (self.gm_km3_s2 / self.radius_km).sqrt()
    }

    /// Speed at the periapsis of a hyperbola with this excess speed, km/s: sqrt(vinf^2 + 2 GM / r).
    fn periapsis_km_s(&self, excess_km_s: f64) -> f64 {
        excess_km_s.hypot(std::f64::consts::SQRT_2 * self.circular_km_s())
    }

    /// Burn from the circular orbit to a hyperbolic excess speed, km/s. The capture burn from that excess into
    /// the circular orbit has the same size.
    ///
    /// # Errors
    /// [`BadArgument`] when the excess is not a number from zero up.
    ///
    /// # References
    /// H. D. Curtis, Orbital Mechanics for Engineering Students, section 8.6.
    pub fn from_circle_km_s(&self, excess_km_s: f64) -> Result<f64, BadArgument> {
        let excess_km_s = not_negative("excess_km_s", excess_km_s)?;
        Ok(self.periapsis_km_s(excess_km_s) - self.circular_km_s())
    }

    /// Burn at the periapsis of the hyperbola that the launch gave, up to the excess speed needed, km/s; zero
    /// when the launch gave enough, since a flight may use less than it is offered.
    ///
    /// Both periapsis speeds differ by (needed^2 - available^2) over their sum: equal excess costs exactly
    /// nothing.
    ///
    /// # Errors
    /// [`BadArgument`] when either excess is not a number from zero up.
    pub fn on_hyperbola_km_s(&self, excess: Excess) -> Result<f64, BadArgument> {
        let available = not_negative("available_km_s", excess.available_km_s)?;
        let needed = not_negative("needed_km_s", excess.needed_km_s)?;
        let sum = self.periapsis_km_s(needed) + self.periapsis_km_s(available);
        Ok((needed - available).max(0.0) * ((needed + available) / sum))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn leaving_a_300_km_orbit_for_mars_is_curtis_example_8_4() {
        // From memory (high confidence): H. D. Curtis, ex. 8.4: 3.590 km/s from a 300 km parking orbit with
        // GM 398600 and R 6378, excess 2.943 km/s. One unit of the last digit.
        let burn = Burn::at_radius(398_600.0, 6_678.0).unwrap();
        assert!((burn.from_circle_km_s(2.943).unwrap() - 3.590).abs() < 1e-3);
    }

    #[test]
    fn escape_without_excess_is_the_circular_speed_times_root_two_less_one() {
        let burn = Burn::above(Planet::Mars, 400.0).unwrap();
        let expected = (2f64.sqrt() - 1.0) * burn.circular_km_s();
        assert!((burn.from_circle_km_s(0.0).unwrap() - expected).abs() < 1e-15 * 10.0);
    }

    #[test]
    fn enough_excess_costs_nothing() {
        let burn = Burn::above(Planet::Earth, 300.0).unwrap();
        for available in [2.9, 3.0, 20.0] {
            let excess = Excess { available_km_s: available, needed_km_s: 2.9 };
            assert_eq!(burn.on_hyperbola_km_s(excess), Ok(0.0));
        }
        let nothing = Excess { available_km_s: 0.0, needed_km_s: 0.0 };
        assert_eq!(burn.on_hyperbola_km_s(nothing), Ok(0.0));
    }

    #[test]
    fn impossible_arguments_are_named() {
        assert_eq!(Burn::above(Planet::Earth, -1.0).unwrap_err().name, "altitude_km");
        assert_eq!(Burn::at_radius(f64::NAN, 1.0).unwrap_err().name, "gm_km3_s2");
        let burn = Burn::above(Planet::Earth, 300.0).unwrap();
        assert_eq!(burn.from_circle_km_s(f64::INFINITY).unwrap_err().name, "excess_km_s");
        let excess = Excess { available_km_s: -1.0, needed_km_s: 0.0 };
        assert_eq!(burn.on_hyperbola_km_s(excess).unwrap_err().name, "available_km_s");
    }

    proptest! {
        #[test]
        fn two_burns_on_the_way_cost_as_much_as_one(
            altitude in 0.0f64..1e5, parts in prop::array::uniform3(0.0f64..20.0),
        ) {
            // All burns happen at the same speed-independent place, so their sizes add up.
            let mut v = parts;
            v.sort_by(f64::total_cmp);
            let burn = Burn::above(Planet::Earth, altitude).unwrap();
            let cost = |from: f64, to: f64| {
                burn.on_hyperbola_km_s(Excess { available_km_s: from, needed_km_s: to }).unwrap()
            };
            prop_assert!((cost(v[0], v[1]) + cost(v[1], v[2]) - cost(v[0], v[2])).abs() < 1e-13 * 30.0);
            let from_circle = |to: f64| burn.from_circle_km_s(to).unwrap();
            prop_assert!((from_circle(v[0]) + cost(v[0], v[1]) - from_circle(v[1])).abs() < 1e-13 * 30.0);
        }
    }
}
