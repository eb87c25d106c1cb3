//! The two orbits of a spatial flight, and how they grow out of coplanar circles.

use nalgebra::Vector3;
use orbits::kepler::Elements;
use orbits::two_body::State as TwoBody;

/// Position and velocity.
pub type State = [f64; 6];

/// Two elliptic orbits with elements at one instant, the reference from which times count. Canonical units, rad.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ends {
    /// Orbit at departure.
    pub from: Elements,
    /// Orbit at arrival.
    pub to: Elements,
    /// Semi-major axis of the target orbit at shape 0, where it must not be too close to the start orbit's.
    pub round_target: f64,
}

/// Orbits nearer than this (in parts of the semi-major axis) start their homotopy from a target farther away.
const TOO_CLOSE: f64 = 0.12;

impl Ends {
    /// Both orbits, with the coplanar start of the homotopy chosen.
    pub fn new(from: Elements, to: Elements) -> Ends {
        let ratio = to.semi_major_axis / from.semi_major_axis;
        let away = if ratio >= 1.0 { 1.2 } else { 1.0 / 1.2 };
        let round_target =
            if (ratio - 1.0).abs() < TOO_CLOSE { from.semi_major_axis * away } else { to.semi_major_axis };
        Ends { from, to, round_target }
    }

    /// State of the departure orbit's point at `time`, shape `shape`.
    pub fn departure(&self, shape: f64, time: f64) -> Option<State> {
        state(&shaped(&self.from, shape), time)
    }

    /// State of the target orbit's point at `time`, shape `shape`.
    pub fn target(&self, shape: f64, time: f64) -> Option<State> {
        state(&self.target_orbit(shape), time)
    }

    /// The target orbit at `shape`.
    pub fn target_orbit(&self, shape: f64) -> Elements {
        let axis = self.round_target + shape * (self.to.semi_major_axis - self.round_target);
        Elements { semi_major_axis: axis, ..shaped(&self.to, shape) }
    }

    /// The pair of orbits at `shape`, as orbits in their own right.
    pub fn at_shape(&self, shape: f64) -> Ends {
        let to = self.target_orbit(shape);
        Ends { from: shaped(&self.from, shape), to, round_target: to.semi_major_axis }
    }

    /// Mean longitude of the departure body at the reference instant.
    pub fn departure_longitude(&self) -> f64 {
        longitude(&self.from)
    }

    /// Mean longitude of the target body at the reference instant.
    pub fn target_longitude(&self) -> f64 {
        longitude(&self.to)
    }
}

/// Eccentricity and inclination times `shape`: 0 is a circle in the ecliptic, 1 the orbit itself.
fn shaped(orbit: &Elements, shape: f64) -> Elements {
    Elements {
        eccentricity: orbit.eccentricity * shape.max(0.0),
        inclination_rad: orbit.inclination_rad * shape,
        ..*orbit
    }
}

fn longitude(orbit: &Elements) -> f64 {
    orbit.node_rad + orbit.arg_peri_rad + orbit.mean_anomaly_rad
}

fn state(orbit: &Elements, time: f64) -> Option<State> {
    orbit.later(1.0, time).state(1.0).ok().map(|body| ordered(&body))
}

/// Rate of a state under the Sun's gravity alone.
pub fn coasting_rate(s: &State) -> State {
    let r2 = s[0] * s[0] + s[1] * s[1] + s[2] * s[2];
    let pull = -1.0 / (r2 * r2.sqrt());
    [s[3], s[4], s[5], pull * s[0], pull * s[1], pull * s[2]]
}

/// Rate of [`coasting_rate`] under the Sun's gravity alone.
pub fn coasting_acceleration(s: &State) -> State {
    let r2 = s[0] * s[0] + s[1] * s[1] + s[2] * s[2];
    let pull = -1.0 / (r2 * r2.sqrt());
    let radial = 3.0 * (s[0] * s[3] + s[1] * s[4] + s[2] * s[5]) / r2;
    let jerk = |i: usize| pull * (s[3 + i] - radial * s[i]);
    [pull * s[0], pull * s[1], pull * s[2], jerk(0), jerk(1), jerk(2)]
}

/// A two-body state in the order of [`State`].
pub fn ordered(body: &TwoBody) -> State {
    let (r, v) = (body.position, body.velocity);
    [r.x, r.y, r.z, v.x, v.y, v.z]
}

/// Eccentricity of the ellipse that a state lies on; `None` where it lies on none.
pub fn eccentricity(state: &State) -> Option<f64> {
    let [x, y, z, vx, vy, vz] = *state;
    let body = TwoBody { position: Vector3::new(x, y, z), velocity: Vector3::new(vx, vy, vz) };
    Elements::of_state(&body, 1.0).ok().map(|orbit| orbit.eccentricity)
}
