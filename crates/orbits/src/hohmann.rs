//! The cheapest two-impulse transfer between coplanar circles: the yardstick that a sail is compared with.

use std::f64::consts::PI;

use crate::argument::{BadArgument, positive};
use crate::constants::{AU_KM, DAY_S, SUN_GM_KM3_S2};

/// Two coplanar circles around one body.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Circles {
    /// Gravitational parameter of the central body, km^3/s^2.
    pub gm_km3_s2: f64,
    /// Radius of the circle where the transfer starts, km.
    pub from_km: f64,
    /// Radius of the circle where it ends, km.
    pub to_km: f64,
}

impl Circles {
    /// Circles around the Sun with radii in au.
    pub fn around_sun(from_au: f64, to_au: f64) -> Self {
        Self { gm_km3_s2: SUN_GM_KM3_S2, from_km: from_au * AU_KM, to_km: to_au * AU_KM }
    }
}

/// A half-ellipse that touches both circles.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Hohmann {
    /// Flight time, d.
    pub time_d: f64,
    /// First impulse along the direction of motion, km/s; negative (a brake) going inwards. Around the Sun its
    /// size is the hyperbolic excess speed needed at departure.
    pub depart_km_s: f64,
    /// Second impulse along the direction of motion, km/s; negative going inwards. Around the Sun its size is
    /// the hyperbolic excess speed at arrival.
    pub arrive_km_s: f64,
    /// Angle by which a body on the target circle must lead one on the start circle at departure, deg in
    /// (-180, 180].
    pub lead_angle_deg: f64,
    /// Time between two departure windows, d; `None` where both circles have the same period.
    pub synodic_d: Option<f64>,
}

impl Hohmann {
    /// Sum of both impulses' sizes, km/s.
    pub fn total_km_s(&self) -> f64 {
        self.depart_km_s.abs() + self.arrive_km_s.abs()
    }
}

/// The Hohmann transfer between two circles.
///
/// With x = (r2 - r1) / (r1 + r2), so that the two bracketed square roots of the textbook are sqrt(1 + x) and
/// sqrt(1 - x):
///
/// dv1 = v1 x / (1 + sqrt(1 + x)), dv2 = v2 x / (1 + sqrt(1 - x)), v = sqrt(GM / r)
///
/// which subtracts nothing but the radii: the same orbit costs exactly nothing, neighbours keep all digits, and
/// going back undoes both impulses exactly.
///
/// # Units
/// Radii in km and GM in km^3/s^2; speeds come out in km/s, times in d, angles in deg.
///
/// # Errors
/// [`BadArgument`] names a radius or GM that is not a number above zero (1e-60 to 1e60).
///
/// # References
/// W. Hohmann, Die Erreichbarkeit der Himmelskoerper (1925); H. D. Curtis, Orbital Mechanics for Engineering
/// Students, sections 6.3 and 8.2.
///
/// # Example
/// ```
/// use orbits::hohmann::{Circles, hohmann};
/// let transfer = hohmann(Circles::around_sun(1.0, 1.52371034))?;
/// assert!((transfer.time_d - 258.9).abs() < 0.05);
/// assert!(transfer.depart_km_s > 0.0); // outwards: speed up at both ends
/// # Ok::<(), orbits::argument::BadArgument>(())
/// ```
pub fn hohmann(circles: Circles) -> Result<Hohmann, BadArgument> {
    let gm = positive("gm_km3_s2", circles.gm_km3_s2)?;
    let r1 = positive("from_km", circles.from_km)?;
    let r2 = positive("to_km", circles.to_km)?;

    let x = (r2 - r1) / (r1 + r2);
    let a = 0.5 * (r1 + r2);
    let time_d = PI * a * (a / gm).sqrt() / DAY_S;
    let period_d = |r: f64| 2.0 * PI * r * (r / gm).sqrt() / DAY_S;
    let (from_period_d, to_period_d) = (period_d(r1), period_d(r2));

    Ok(Hohmann {
        time_d,
        depart_km_s: (gm / r1).sqrt() * x / (1.0 + (1.0 + x).sqrt()),
        arrive_km_s: (gm / r2).sqrt() * x / (1.0 + (1.0 - x).sqrt()),
        lead_angle_deg: wrap_deg(180.0 - 360.0 * (time_d / to_period_d)),
        synodic_d: synodic_d(from_period_d, to_period_d),
    })
}

/// Time between two alignments of bodies with these periods, d; `None` for equal periods.
pub fn synodic_d(first_period_d: f64, second_period_d: f64) -> Option<f64> {
    let difference = (first_period_d - second_period_d).abs();
    (difference > 0.0).then(|| first_period_d * (second_period_d / difference))
}

/// The same angle in (-180, 180], deg.
fn wrap_deg(angle_deg: f64) -> f64 {
    let wrapped = angle_deg.rem_euclid(360.0);
    if wrapped > 180.0 { wrapped - 360.0 } else { wrapped }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::planets::Planet;
    use proptest::prelude::*;

    fn between(from: Planet, to: Planet) -> Hohmann {
        hohmann(Circles::around_sun(from.circle_radius_au(), to.circle_radius_au())).unwrap()
    }

    #[test]
    fn earth_to_mars_is_curtis_example_8_2() {
        // From memory (high confidence): H. D. Curtis, examples 8.2-8.5: 258.82 d, 2.943 and 2.648 km/s, with
        // R 149.6e6 and 227.9e6 km and GM 1.327e11. Tolerances: one unit of the last printed digit.
        let found = hohmann(Circles { gm_km3_s2: 1.327e11, from_km: 149.6e6, to_km: 227.9e6 }).unwrap();
        assert!((found.time_d - 258.82).abs() < 0.02, "{}", found.time_d);
        assert!((found.depart_km_s - 2.943).abs() < 1e-3);
        assert!((found.arrive_km_s - 2.648).abs() < 1e-3);
    }

    #[test]
    fn low_orbit_to_geosynchronous_is_vallado_example_6_1() {
        // From memory (high confidence): D. A. Vallado, Fundamentals of Astrodynamics and Applications, ex. 6-1:
        // altitudes 191.34411 and 35781.34857 km, 3.935224 km/s in 5.256713 h. One unit of the last digit.
        let earth = 6378.137;
        let found = hohmann(Circles {
            gm_km3_s2: 398_600.441_8,
            from_km: earth + 191.344_11,
            to_km: earth + 35_781.348_57,
        })
        .unwrap();
        assert!((found.total_km_s() - 3.935_224).abs() < 1e-6, "{}", found.total_km_s());
        assert!((found.time_d * 24.0 - 5.256_713).abs() < 1e-6, "{}", found.time_d * 24.0);
    }

    #[test]
    fn earth_to_mars_on_the_circles_in_force() {
        // Arithmetic from the constants: 258.9 d and a synodic period of 779.9 d, both to the digit written.
        let found = between(Planet::Earth, Planet::Mars);
        assert!((found.time_d - 258.9).abs() < 0.05, "{}", found.time_d);
        assert!((found.synodic_d.unwrap() - 779.9).abs() < 0.1, "{:?}", found.synodic_d);
    }

    #[test]
    fn mars_must_lead_and_venus_must_trail() {
        // Common practice, no source: Mars leads by about 44 deg, Venus trails by about 54 deg (whole degrees).
        assert!((between(Planet::Earth, Planet::Mars).lead_angle_deg - 44.3).abs() < 0.5);
        assert!((between(Planet::Earth, Planet::Venus).lead_angle_deg + 54.0).abs() < 0.5);
    }

    #[test]
    fn same_orbit_costs_nothing() {
        for r in [0.2, 1.0, 5.2, 40.0] {
            let found = hohmann(Circles::around_sun(r, r)).unwrap();
            assert_eq!(found.total_km_s(), 0.0);
            assert_eq!(found.synodic_d, None);
            assert!(found.lead_angle_deg.abs() < 1e-10);
        }
    }

    #[test]
    fn nan_radius_is_named_in_the_error() {
        let error = hohmann(Circles::around_sun(f64::NAN, 1.0)).unwrap_err();
        assert_eq!(error.name, "from_km");
        assert!(error.value.is_nan());
    }

    #[test]
    fn impossible_radii_and_gravity_are_refused() {
        for bad in [0.0, -1.0, f64::INFINITY, f64::NEG_INFINITY, 1e308, 1e-308] {
            assert!(hohmann(Circles { gm_km3_s2: 1.0, from_km: bad, to_km: 1.0 }).is_err());
            assert!(hohmann(Circles { gm_km3_s2: 1.0, from_km: 1.0, to_km: bad }).is_err());
            assert!(hohmann(Circles { gm_km3_s2: bad, from_km: 1.0, to_km: 2.0 }).is_err());
        }
    }

    proptest! {
        #[test]
        fn going_back_undoes_both_impulses(from in 0.05f64..50.0, to in 0.05f64..50.0) {
            let out = hohmann(Circles::around_sun(from, to)).unwrap();
            let back = hohmann(Circles::around_sun(to, from)).unwrap();
            prop_assert_eq!(out.depart_km_s, -back.arrive_km_s);
            prop_assert_eq!(out.arrive_km_s, -back.depart_km_s);
            prop_assert_eq!(out.time_d, back.time_d);
        }

        #[test]
        fn impulses_agree_with_energy(from in 0.05f64..50.0, to in 0.05f64..50.0) {
            // Independent form: vis-viva on the transfer ellipse at both ends, in canonical units.
            let found = hohmann(Circles { gm_km3_s2: 1.0, from_km: from, to_km: to }).unwrap();
            let a = 0.5 * (from + to);
            let speed = |r: f64| (2.0 / r - 1.0 / a).sqrt();
            let circular = |r: f64| (1.0 / r).sqrt();
            prop_assert!((found.depart_km_s - (speed(from) - circular(from))).abs() < 1e-13 * circular(from));
            prop_assert!((found.arrive_km_s - (circular(to) - speed(to))).abs() < 1e-13 * circular(to));
        }

        #[test]
        fn scaling_both_radii_scales_time_by_the_three_halves_power(
            from in 0.2f64..5.0, to in 0.2f64..5.0, scale in 0.1f64..10.0,
        ) {
            let small = hohmann(Circles::around_sun(from, to)).unwrap();
            let large = hohmann(Circles::around_sun(scale * from, scale * to)).unwrap();
            prop_assert!((large.time_d / small.time_d / scale.powf(1.5) - 1.0).abs() < 1e-13);
            prop_assert!((large.lead_angle_deg - small.lead_angle_deg).abs() < 1e-9);
        }
    }
}
