//! Elliptic orbits: Kepler's equation, elements to state and back.

use std::f64::consts::TAU;

use nalgebra::Vector3;

use crate::argument::{BadArgument, positive};
use crate::two_body::State;

/// Largest eccentricity that Kepler's equation is solved and tested for.
pub const ECCENTRICITY_MAX: f64 = 0.99;

/// An ellipse in space and a place on it.
///
/// Angles are measured in the frame in which the orbit is given, for planets the ecliptic of J2000. Where an angle
/// has no meaning (node of an orbit in the reference plane, periapsis of a circle) zero stands, and the angles
/// after it count from there.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Elements {
    /// Semi-major axis, in the length unit of the gravitational parameter (au in canonical units).
    pub semi_major_axis: f64,
    /// Eccentricity, 0 to 0.99.
    pub eccentricity: f64,
    /// Inclination, rad.
    pub inclination_rad: f64,
    /// Longitude of the ascending node, rad.
    pub node_rad: f64,
    /// Argument of periapsis, from the node, rad.
    pub arg_peri_rad: f64,
    /// Mean anomaly, rad.
    pub mean_anomaly_rad: f64,
}

/// Solves Kepler's equation E - e sin E = M for the eccentric anomaly E, rad.
///
/// Newton steps within a bracket that halves whenever a step would leave it: in the first half turn E lies between
/// M and the smaller of M + e and M / (1 - e), so the method cannot fail, and small M keep all digits. Whole turns
/// of M are kept in E.
///
/// # Errors
/// [`BadArgument`] when the eccentricity is outside 0 to 0.99 or the mean anomaly is not a finite number.
///
/// # References
/// J. M. A. Danby, Fundamentals of Celestial Mechanics, 2nd ed., section 6.6 (from memory), for the first guess
/// M + 0.85 e.
///
/// # Example
/// ```
/// let e = 0.4;
/// let mean = 2.0;
/// let eccentric = orbits::kepler::eccentric_anomaly(mean, e)?;
/// assert!((eccentric - e * eccentric.sin() - mean).abs() < 1e-15 * 4.0);
/// # Ok::<(), orbits::argument::BadArgument>(())
/// ```
pub fn eccentric_anomaly(mean_anomaly_rad: f64, eccentricity: f64) -> Result<f64, BadArgument> {
    let e = eccentricity;
    if !(0.0..=ECCENTRICITY_MAX).contains(&e) {
        return Err(BadArgument { name: "eccentricity", value: e, rule: "must be 0 to 0.99" });
    }
    if !mean_anomaly_rad.is_finite() {
        let rule = "must be a finite number";
        return Err(BadArgument { name: "mean_anomaly_rad", value: mean_anomaly_rad, rule });
    }
    // By symmetry only the first half turn needs solving.
    let turns = (mean_anomaly_rad / TAU).round();
    let remainder = mean_anomaly_rad - turns * TAU;
    let m = remainder.abs();
    Ok(turns * TAU + eccentric_of_first_half_turn(m, e).copysign(remainder))
}

/// Kepler's equation for 0 <= M <= pi.
fn eccentric_of_first_half_turn(m: f64, e: f64) -> f64 {
    let (mut low, mut high) = (m, (m + e).min(m / (1.0 - e)));
    let mut eccentric = (m + 0.85 * e).min(high);
    for _ in 0..100 {
        let (sin, cos) = eccentric.sin_cos();
        let excess = eccentric - e * sin - m;
        if excess > 0.0 {
            high = eccentric;
        } else {
            low = eccentric;
        }
        let newton = eccentric - excess / (1.0 - e * cos);
        let next = if newton >= low && newton <= high { newton } else { 0.5 * (low + high) };
        if (next - eccentric).abs() <= f64::EPSILON * eccentric {
            return next;
        }
        eccentric = next;
    }
    // Steps that no longer shrink bounce between neighbouring numbers: either is the answer.
    eccentric
}

impl Elements {
    /// Mean motion sqrt(gm / a^3), rad per unit of time.
    pub fn mean_motion(&self, gm: f64) -> f64 {
        (gm / self.semi_major_axis).sqrt() / self.semi_major_axis
    }

    /// The same orbit a time later.
    pub fn later(&self, gm: f64, time: f64) -> Elements {
        Elements { mean_anomaly_rad: self.mean_anomaly_rad + self.mean_motion(gm) * time, ..*self }
    }

    /// Unit vectors in the orbit plane: towards periapsis, and 90 degrees ahead of it.
    pub fn perifocal_axes(&self) -> (Vector3<f64>, Vector3<f64>) {
        let (sin_node, cos_node) = self.node_rad.sin_cos();
        let (sin_i, cos_i) = self.inclination_rad.sin_cos();
        let (sin_w, cos_w) = self.arg_peri_rad.sin_cos();
        let towards_node = Vector3::new(cos_node, sin_node, 0.0);
        let ahead_of_node = Vector3::new(-sin_node * cos_i, cos_node * cos_i, sin_i);
        (towards_node * cos_w + ahead_of_node * sin_w, ahead_of_node * cos_w - towards_node * sin_w)
    }

    /// Position and velocity.
    ///
    /// # Units
    /// Lengths and times in any units that agree with `gm`; canonical heliocentric: au, 58.13 d, `gm` = 1.
    ///
    /// # Errors
    /// [`BadArgument`] names a semi-major axis or `gm` that is not above zero, an eccentricity outside 0 to 0.99 or
    /// a mean anomaly that is not a number.
    ///
    /// # Example
    /// ```
    /// use nalgebra::Vector3;
    /// use orbits::kepler::Elements;
    /// let circle = Elements {
    ///     semi_major_axis: 1.0,
    ///     eccentricity: 0.0,
    ///     inclination_rad: 0.0,
    ///     node_rad: 0.0,
    ///     arg_peri_rad: 0.0,
    ///     mean_anomaly_rad: 0.0,
    /// };
    /// let state = circle.state(1.0)?;
    /// assert_eq!(state.position, Vector3::x());
    /// assert_eq!(state.velocity, Vector3::y()); // prograde: +x moves towards +y
    /// # Ok::<(), orbits::argument::BadArgument>(())
    /// ```
    pub fn state(&self, gm: f64) -> Result<State, BadArgument> {
        let gm = positive("gm", gm)?;
        let a = positive("semi_major_axis", self.semi_major_axis)?;
        let e = self.eccentricity;
        let (sin, cos) = eccentric_anomaly(self.mean_anomaly_rad, e)?.sin_cos();
        let minor_ratio = ((1.0 - e) * (1.0 + e)).sqrt();
        let (periapsis, ahead) = self.perifocal_axes();
        let speed = (gm / a).sqrt() / (1.0 - e * cos);
        Ok(State {
            position: (periapsis * (cos - e) + ahead * (minor_ratio * sin)) * a,
            velocity: (ahead * (minor_ratio * cos) - periapsis * sin) * speed,
        })
    }

    /// Elements of the ellipse that a state lies on; angles in [0, 2 pi).
    ///
    /// # Errors
    /// [`BadArgument`] when the orbit is no ellipse of eccentricity up to 0.99, or `gm` is not above zero.
    pub fn of_state(state: &State, gm: f64) -> Result<Elements, BadArgument> {
        let gm = positive("gm", gm)?;
        let (r, v) = (state.position, state.velocity);
        let distance = positive("distance", r.norm())?;
        let inverse_axis = 2.0 / distance - v.norm_squared() / gm;
        let momentum = r.cross(&v);
        let eccentricity_vector = v.cross(&momentum) / gm - r / distance;
        let eccentricity = eccentricity_vector.norm();
        let is_ellipse = inverse_axis > 0.0 && eccentricity <= ECCENTRICITY_MAX;
        if !is_ellipse {
            let rule = "of the state must be 0 to 0.99";
            return Err(BadArgument { name: "eccentricity", value: eccentricity, rule });
        }

        // In-plane axes: towards the ascending node (the x axis where there is none), and 90 degrees ahead.
        let across = momentum.x.hypot(momentum.y);
        let node_rad = if across > 0.0 { momentum.x.atan2(-momentum.y) } else { 0.0 };
        let inclination_rad = across.atan2(momentum.z);
        let (sin_node, cos_node) = node_rad.sin_cos();
        let towards_node = Vector3::new(cos_node, sin_node, 0.0);
        let ahead_of_node = momentum.normalize().cross(&towards_node);

        let angle = |vector: &Vector3<f64>| vector.dot(&ahead_of_node).atan2(vector.dot(&towards_node));
        let arg_peri_rad = if eccentricity > 0.0 { angle(&eccentricity_vector) } else { 0.0 };
        let true_anomaly = angle(&r) - arg_peri_rad;
        let (sin, cos) = true_anomaly.sin_cos();
        let minor_ratio = ((1.0 - eccentricity) * (1.0 + eccentricity)).sqrt();
        let eccentric = (minor_ratio * sin).atan2(eccentricity + cos);
        let mean = eccentric - eccentricity * eccentric.sin();
        Ok(Elements {
            semi_major_axis: 1.0 / inverse_axis,
            eccentricity,
            inclination_rad,
            node_rad: node_rad.rem_euclid(TAU),
            arg_peri_rad: arg_peri_rad.rem_euclid(TAU),
            mean_anomaly_rad: mean.rem_euclid(TAU),
        })
    }
}

#[cfg(test)]
mod tests {
    use std::f64::consts::PI;

    use super::*;
    use proptest::prelude::*;

    #[test]
    fn keplers_equation_is_vallado_example_2_1() {
        // From memory (high confidence): D. A. Vallado, ex. 2-1: M 235.4 deg, e 0.4, E 220.512074 deg. One unit of
        // the last digit.
        let found = eccentric_anomaly(235.4f64.to_radians(), 0.4).unwrap().to_degrees();
        assert!((found - 220.512_074).abs() < 1e-6, "{found}");
    }

    #[test]
    fn elements_to_state_is_vallado_example_2_6() {
        // Published, read as quoted by others: D. A. Vallado, ex. 2-6: p 11067.790 km, e 0.83285, i 87.87, node 227.89,
        // argument 53.38, true anomaly 92.335 deg give r (6525.368, 6861.532, 6449.119) km and
        // v (4.902279, 5.533140, -1.975710) km/s with GM 398600.4418. One unit of the last digit.
        let e: f64 = 0.83285;
        let true_anomaly = 92.335f64.to_radians();
        let eccentric = 2.0 * (((1.0 - e) / (1.0 + e)).sqrt() * (true_anomaly / 2.0).tan()).atan();
        let elements = Elements {
            semi_major_axis: 11_067.790 / (1.0 - e * e),
            eccentricity: e,
            inclination_rad: 87.87f64.to_radians(),
            node_rad: 227.89f64.to_radians(),
            arg_peri_rad: 53.38f64.to_radians(),
            mean_anomaly_rad: eccentric - e * eccentric.sin(),
        };
        let state = elements.state(398_600.441_8).unwrap();
        let r = Vector3::new(6525.368, 6861.532, 6449.119);
        let v = Vector3::new(4.902_279, 5.533_140, -1.975_710);
        assert!((state.position - r).amax() < 1e-3, "{}", state.position);
        assert!((state.velocity - v).amax() < 1e-6, "{}", state.velocity);
    }

    #[test]
    fn state_to_elements_is_vallado_example_2_5() {
        // Published, read as quoted by others: D. A. Vallado, ex. 2-5: a 36127.343 km, e 0.832853, i 87.870, node 227.898,
        // argument 53.38 deg. One unit of the last digit.
        let state = State {
            position: Vector3::new(6524.834, 6862.875, 6448.296),
            velocity: Vector3::new(4.901_327, 5.533_756, -1.976_341),
        };
        let found = Elements::of_state(&state, 398_600.441_8).unwrap();
        assert!((found.semi_major_axis - 36_127.343).abs() < 0.02, "{}", found.semi_major_axis);
        assert!((found.eccentricity - 0.832_853).abs() < 1e-6);
        assert!((found.inclination_rad.to_degrees() - 87.870).abs() < 1e-3);
        assert!((found.node_rad.to_degrees() - 227.898).abs() < 1e-3);
        assert!((found.arg_peri_rad.to_degrees() - 53.38).abs() < 1e-2);
    }

    #[test]
    fn circles_in_the_plane_have_zero_for_what_has_no_meaning() {
        for prograde in [1.0, -1.0] {
            let state = State {
                position: Vector3::new(0.0, 2.0, 0.0),
                velocity: Vector3::new(-prograde / 2f64.sqrt(), 0.0, 0.0),
            };
            let found = Elements::of_state(&state, 1.0).unwrap();
            assert!(found.eccentricity < 4.0 * f64::EPSILON);
            assert_eq!(found.node_rad, 0.0);
            assert!((found.inclination_rad - if prograde > 0.0 { 0.0 } else { PI }).abs() < 1e-15);
            let back = found.state(1.0).unwrap();
            assert!((back.position - state.position).norm() < 1e-14);
        }
    }

    #[test]
    fn open_orbits_and_impossible_elements_are_refused() {
        let escape = State { position: Vector3::x(), velocity: Vector3::y() * 1.5 };
        assert_eq!(Elements::of_state(&escape, 1.0).unwrap_err().name, "eccentricity");
        assert_eq!(eccentric_anomaly(1.0, 1.0).unwrap_err().name, "eccentricity");
        assert_eq!(eccentric_anomaly(1.0, f64::NAN).unwrap_err().name, "eccentricity");
        assert_eq!(eccentric_anomaly(f64::INFINITY, 0.5).unwrap_err().name, "mean_anomaly_rad");
        let still = State { position: Vector3::zeros(), velocity: Vector3::y() };
        assert_eq!(Elements::of_state(&still, 1.0).unwrap_err().name, "distance");
    }

    fn elements() -> impl Strategy<Value = Elements> {
        (0.2f64..40.0, 0.0f64..0.98, 0.0f64..PI, 0.0f64..TAU, 0.0f64..TAU, 0.0f64..TAU).prop_map(
            |(semi_major_axis, eccentricity, inclination_rad, node_rad, arg_peri_rad, mean_anomaly_rad)| {
                Elements {
                    semi_major_axis,
                    eccentricity,
                    inclination_rad,
                    node_rad,
                    arg_peri_rad,
                    mean_anomaly_rad,
                }
            },
        )
    }

    proptest! {
        #[test]
        fn keplers_equation_holds_everywhere(mean in -20.0f64..20.0, e in 0.0f64..=0.99) {
            let eccentric = eccentric_anomaly(mean, e).unwrap();
            // The residual can be no smaller than the rounding of its largest term.
            let rounding = 4.0 * f64::EPSILON * (1.0 + mean.abs());
            prop_assert!((eccentric - e * eccentric.sin() - mean).abs() < rounding);
        }

        #[test]
        fn small_anomalies_keep_their_digits(power in -300.0f64..-3.0, e in 0.0f64..=0.99) {
            // For small M the anomaly is M / (1 - e) + O(M^3): relative, not absolute accuracy.
            let mean = 10f64.powf(power);
            let eccentric = eccentric_anomaly(mean, e).unwrap();
            let linear = mean / (1.0 - e);
            let cubic = e * linear.powi(2) / (6.0 * (1.0 - e));
            prop_assert!((eccentric / linear - 1.0).abs() <= 1.1 * cubic + 1e-13, "{}", eccentric);
        }

        #[test]
        fn state_reads_back_as_the_same_state(elements in elements()) {
            // Elements lose digits near e = 0 and i = 0, states do not: compare those.
            let state = elements.state(1.0).unwrap();
            let back = Elements::of_state(&state, 1.0).unwrap().state(1.0).unwrap();
            // Rounding in 1/a is amplified by the speed near a grazing perihelion.
            let tolerance = 1e-11 / (1.0 - elements.eccentricity).powi(2);
            prop_assert!((back.position - state.position).norm() < tolerance * state.position.norm());
            prop_assert!((back.velocity - state.velocity).norm() < tolerance * state.velocity.norm());
        }

        #[test]
        fn momentum_and_energy_are_those_of_the_ellipse(elements in elements()) {
            let state = elements.state(1.0).unwrap();
            let (a, e) = (elements.semi_major_axis, elements.eccentricity);
            let momentum = state.position.cross(&state.velocity).norm();
            prop_assert!((momentum / (a * (1.0 - e * e)).sqrt() - 1.0).abs() < 1e-12);
            let energy = 0.5 * state.velocity.norm_squared() - 1.0 / state.position.norm();
            prop_assert!((energy + 0.5 / a).abs() < 1e-14 / state.position.norm() * 4.0);
        }
    }
}
