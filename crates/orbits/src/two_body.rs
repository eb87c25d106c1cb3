//! Motion around one body in universal variables: any conic, any time, with nothing but a state.

use nalgebra::Vector3;

use crate::argument::{BadArgument, positive};

/// Where something is and how it moves, in one inertial frame.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct State {
    /// Position from the attracting body.
    pub position: Vector3<f64>,
    /// Velocity.
    pub velocity: Vector3<f64>,
}

/// The functions c2 and c3 of Stumpff: (1 - cos sqrt z) / z and (sqrt z - sin sqrt z) / sqrt z^3, and their
/// hyperbolic twins for z < 0.
fn stumpff(z: f64) -> (f64, f64) {
    if z.abs() < 0.5 {
        // Ten terms of the series 1/2! - z/4! + ..., 1/3! - z/5! + ...: the next is below 1e-19.
        let (mut c2, mut c3) = (0.0, 0.0);
        let (mut term2, mut term3) = (0.5, 1.0 / 6.0);
        for k in 1..=10 {
            c2 += term2;
            c3 += term3;
            let k = f64::from(k);
            term2 *= -z / ((2.0 * k + 1.0) * (2.0 * k + 2.0));
            term3 *= -z / ((2.0 * k + 2.0) * (2.0 * k + 3.0));
        }
        (c2, c3)
    } else if z > 0.0 {
        let root = z.sqrt();
        let half_sin = (0.5 * root).sin();
        (2.0 * half_sin * half_sin / z, (root - root.sin()) / (z * root))
    } else {
        let root = (-z).sqrt();
        let half_sinh = (0.5 * root).sinh();
        (-2.0 * half_sinh * half_sinh / z, (root.sinh() - root) / (-z * root))
    }
}

/// The state a time later (earlier for a negative time) under one body's gravity.
///
/// The time of flight grows steadily with the universal anomaly, so Newton steps inside a bracket always arrive.
///
/// # Units
/// Lengths and times in any units that agree with `gm`; canonical heliocentric: au, 58.13 d, `gm` = 1.
///
/// # Errors
/// [`BadArgument`] when `gm` or the distance is not above zero, or speed or time is not a finite number.
///
/// # References
/// R. R. Bate, D. D. Mueller, J. E. White, Fundamentals of Astrodynamics (1971), chapter 4 (from memory).
///
/// # Example
/// ```
/// use nalgebra::Vector3;
/// use orbits::two_body::{State, propagate};
/// let start = State { position: Vector3::x(), velocity: Vector3::y() };
/// let quarter = propagate(&start, 1.0, std::f64::consts::FRAC_PI_2)?;
/// assert!((quarter.position - Vector3::y()).norm() < 1e-15 * 4.0);
/// # Ok::<(), orbits::argument::BadArgument>(())
/// ```
pub fn propagate(state: &State, gm: f64, time: f64) -> Result<State, BadArgument> {
    let gm = positive("gm", gm)?;
    let (r0, v0) = (state.position, state.velocity);
    let distance = positive("distance", r0.norm())?;
    for (name, value) in [("speed", v0.norm()), ("time", time)] {
        if !value.is_finite() {
            return Err(BadArgument { name, value, rule: "must be a finite number" });
        }
    }
    let conic = Conic {
        distance,
        radial: r0.dot(&v0) / gm.sqrt(),
        inverse_axis: 2.0 / distance - v0.norm_squared() / gm,
    };
    // Whole revolutions change nothing; without them the anomaly stays within one turn.
    let root_gm = gm.sqrt();
    let mut scaled_time = root_gm * time;
    if conic.inverse_axis > 0.0 {
        let period = std::f64::consts::TAU / (conic.inverse_axis * conic.inverse_axis.sqrt());
        if period.is_finite() {
            scaled_time -= period * (scaled_time / period).trunc();
        }
    }
    let chi = conic.universal_anomaly(scaled_time);

    // The f and g functions of Lagrange.
    let (c2, c3) = stumpff(conic.inverse_axis * chi * chi);
    let f = 1.0 - chi * chi * c2 / distance;
    let g = (scaled_time - chi * chi * chi * c3) / root_gm;
    let position = r0 * f + v0 * g;
    let new_distance = position.norm();
    let f_rate = root_gm / (distance * new_distance) * chi * (conic.inverse_axis * chi * chi * c3 - 1.0);
    let g_rate = 1.0 - chi * chi * c2 / new_distance;
    Ok(State { position, velocity: r0 * f_rate + v0 * g_rate })
}

/// What the time of flight depends on.
struct Conic {
    /// Distance at the start.
    distance: f64,
    /// r . v / sqrt(gm) at the start.
    radial: f64,
    /// One over the semi-major axis; negative for a hyperbola.
    inverse_axis: f64,
}

impl Conic {
    /// sqrt(gm) times the time of flight, and its derivative, the distance, at a universal anomaly.
    fn time_and_distance(&self, chi: f64) -> (f64, f64) {
        let z = self.inverse_axis * chi * chi;
        let (c2, c3) = stumpff(z);
        let chi2 = chi * chi;
        let time = self.distance * chi * (1.0 - z * c3) + self.radial * chi2 * c2 + chi2 * chi * c3;
        let distance = chi2 * c2 + self.radial * chi * (1.0 - z * c3) + self.distance * (1.0 - z * c2);
        (time, distance)
    }

    /// The universal anomaly at which the scaled time is reached.
    fn universal_anomaly(&self, scaled_time: f64) -> f64 {
        if scaled_time == 0.0 {
            return 0.0;
        }
        let forward = scaled_time.signum();
        // |time| at |chi|: looking back is looking forward with the radial motion reversed.
        let ahead = Conic { radial: forward * self.radial, ..*self };
        let target = scaled_time.abs();
        let is_beyond = |time: f64| !time.is_finite() || time >= target;

        // Double from the smallest of the lengths that matter: straight motion, a parabola, one radian of the
        // conic. A bracket from farther out would make Newton crawl down the exponential of a hyperbola.
        let mut low = 0.0;
        let mut high =
            (target / self.distance).min((6.0 * target).cbrt()).min(self.inverse_axis.abs().sqrt().recip());
        while !is_beyond(ahead.time_and_distance(high).0) {
            low = high;
            high *= 2.0;
        }
        let mut chi = 0.5 * (low + high);
        for _ in 0..200 {
            let (time, distance) = ahead.time_and_distance(chi);
            if is_beyond(time) {
                high = chi;
            } else {
                low = chi;
            }
            let newton = chi - (time - target) / distance;
            // Before the bracket is asked: chi is one of its ends by now, and a settled step lands on it.
            if (newton - chi).abs() <= f64::EPSILON * chi {
                return forward * newton;
            }
            chi = if newton > low && newton < high { newton } else { 0.5 * (low + high) };
        }
        forward * chi
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn propagation_is_vallado_example_2_4() {
        // From memory (high confidence): D. A. Vallado, ex. 2-4: 40 minutes from r (1131.340, -2282.343, 6672.423) km,
        // v (-5.64305, 4.30333, 2.42879) km/s with GM 398600.4418. One unit of the last digit.
        let start = State {
            position: Vector3::new(1131.340, -2282.343, 6672.423),
            velocity: Vector3::new(-5.643_05, 4.303_33, 2.428_79),
        };
        let end = propagate(&start, 398_600.441_8, 2400.0).unwrap();
        let r = Vector3::new(-4219.7527, 4363.0292, -3958.7666);
        let v = Vector3::new(3.689_866, -1.916_735, -6.112_511);
        assert!((end.position - r).amax() < 2e-4, "{}", end.position);
        assert!((end.velocity - v).amax() < 1e-6, "{}", end.velocity);
    }

    #[test]
    fn stumpff_functions_join_where_the_formula_changes() {
        for z in [0.5f64, -0.5] {
            let (below, above) = (stumpff(z * (1.0 - 1e-15)), stumpff(z * (1.0 + 1e-15)));
            assert!((below.0 / above.0 - 1.0).abs() < 1e-14);
            assert!((below.1 / above.1 - 1.0).abs() < 1e-14);
        }
        assert_eq!(stumpff(0.0), (0.5, 1.0 / 6.0));
    }

    #[test]
    fn impossible_arguments_are_named() {
        let start = State { position: Vector3::x(), velocity: Vector3::y() };
        assert_eq!(propagate(&start, -1.0, 1.0).unwrap_err().name, "gm");
        assert_eq!(propagate(&start, 1.0, f64::NAN).unwrap_err().name, "time");
        let nowhere = State { position: Vector3::zeros(), velocity: Vector3::y() };
        assert_eq!(propagate(&nowhere, 1.0, 1.0).unwrap_err().name, "distance");
    }

    fn states() -> impl Strategy<Value = State> {
        let direction = || prop::array::uniform3(-1.0f64..1.0).prop_map(Vector3::from);
        (direction(), direction(), 0.2f64..40.0, 0.05f64..2.5).prop_filter_map(
            "rectilinear motion falls into the centre",
            |(r, v, distance, relative_speed)| {
                let (r, v) = (r.try_normalize(0.1)?, v.try_normalize(0.1)?);
                let velocity = v * relative_speed / distance.sqrt();
                (r.cross(&v).norm() > 0.05).then_some(State { position: r * distance, velocity })
            },
        )
    }

    proptest! {
        #[test]
        fn there_and_back_is_where_we_were(start in states(), time in -300.0f64..300.0) {
            let end = propagate(&start, 1.0, time).unwrap();
            let back = propagate(&end, 1.0, -time).unwrap();
            // Rounding grows with the number of revolutions and with how deep the orbit dives.
            let momentum = start.position.cross(&start.velocity).norm();
            let tolerance = 1e-10 * (1.0 + time.abs()) * (1.0 + momentum.powi(-3));
            prop_assert!((back.position - start.position).norm() < tolerance * start.position.norm());
        }

        #[test]
        fn momentum_and_energy_stay(start in states(), time in -300.0f64..300.0) {
            let end = propagate(&start, 1.0, time).unwrap();
            let momentum = |s: &State| s.position.cross(&s.velocity);
            let energy = |s: &State| 0.5 * s.velocity.norm_squared() - 1.0 / s.position.norm();
            let before = momentum(&start);
            prop_assert!((momentum(&end) - before).norm() < 1e-9 * before.norm().max(1.0));
            let largest = 1.0 / start.position.norm().min(end.position.norm());
            prop_assert!((energy(&end) - energy(&start)).abs() < 1e-10 * largest);
        }

        #[test]
        fn ellipses_agree_with_keplers_equation(start in states(), time in -300.0f64..300.0) {
            // Independent path: elements, Kepler's equation, elements to state.
            let Ok(elements) = crate::kepler::Elements::of_state(&start, 1.0) else { return Ok(()) };
            let by_elements = elements.later(1.0, time).state(1.0).unwrap();
            let end = propagate(&start, 1.0, time).unwrap();
            let turns = 1.0 + elements.mean_motion(1.0) * time.abs();
            let tolerance = 1e-11 * turns / (1.0 - elements.eccentricity).powi(2);
            prop_assert!((end.position - by_elements.position).norm() < tolerance * elements.semi_major_axis);
        }
    }
}
