//! Invented flights in space: ellipses whose size, shape and inclination grow steadily from one orbit to another.

use std::f64::consts::TAU;

use scenario::report::{Columns, End, Report};

use super::{MARS, Spiral, UNIT_D, UNIT_KM_S, report};

/// What to fly: from a circle in the ecliptic to an ellipse anywhere.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Crossing {
    /// Name, radius (au) of the start.
    pub(crate) from: (&'static str, f64),
    /// Name of the target.
    pub(crate) to: &'static str,
    /// Semi-major axis (au) and eccentricity of the target's orbit.
    pub(crate) shape: (f64, f64),
    /// Its inclination, node and argument of perihelion, deg.
    pub(crate) angles_deg: [f64; 3],
    /// Longitude at departure, deg.
    pub(crate) start_deg: f64,
    /// Revolutions.
    pub(crate) turns: f64,
    /// Departure and arrival dates; neither body's place is known without.
    pub(crate) dates: Option<(&'static str, &'static str)>,
    /// Mean anomaly by which the target's body is ahead of the craft at arrival, deg.
    pub(crate) ahead_deg: f64,
    /// Samples.
    pub(crate) rows: usize,
}

/// To an orbit like that of Mars, and the body on it met.
pub(crate) const CROSSING: Crossing = Crossing {
    from: ("Earth", 1.0),
    to: "Mars",
    shape: (1.52371034, 0.0934),
    angles_deg: [1.85, 49.56, 286.5],
    start_deg: 236.0,
    turns: 1.1,
    dates: Some(("2031-05-17", "2032-09-20")),
    ahead_deg: 0.0,
    rows: 600,
};

/// The report and columns of an invented flight in space, whose attitude is invented too: the clock angle passes half
/// a turn, and once the attitude jumps.
pub(crate) fn crossing(flight: Crossing) -> (Report, Columns) {
    let [inclination, node, peri] = flight.angles_deg.map(f64::to_radians);
    let (a1, e1) = flight.shape;
    let start = flight.start_deg.to_radians();
    // Shape, size and plane change smoothly, most in the middle.
    let state = |s: f64| {
        let grown = s * s * (3.0 - 2.0 * s);
        let (a, e, i) = (flight.from.1 + grown * (a1 - flight.from.1), e1 * grown, inclination * grown);
        let longitude = start + TAU * flight.turns * s;
        let p = a * (1.0 - e * e);
        let r = p / (1.0 + e * (longitude - node - peri).cos());
        let (sin, cos) = (longitude - node).sin_cos();
        let (sin_node, cos_node) = node.sin_cos();
        let at = [
            r * (cos * cos_node - sin * i.cos() * sin_node),
            r * (cos * sin_node + sin * i.cos() * cos_node),
            r * sin * i.sin(),
        ];
        (at, r * r / p.sqrt())
    };
    let mut columns = Columns::default();
    let mut t = 0.0;
    let step = 1.0 / (flight.rows - 1) as f64;
    let jump_row = flight.rows * 3 / 5;
    for k in 0..flight.rows {
        let s = k as f64 * step;
        let (at, pace) = state(s);
        // Kepler's second law says how long the step takes; the velocity is the central difference.
        let (before, after) = (state(s - 1e-5).0, state(s + 1e-5).0);
        let per_share = pace * TAU * flight.turns;
        let velocity: [f64; 3] =
            std::array::from_fn(|i| (after[i] - before[i]) / 2e-5 / per_share * UNIT_KM_S);
        if k > 0 {
            t += 0.5 * (pace + state(s - step).1) * TAU * flight.turns * step;
        }
        let r = at.iter().map(|x| x * x).sum::<f64>().sqrt();
        let rate = 0.6 + 0.5 * (9.0 * s).sin();
        for jumped in if k == jump_row { vec![false, true] } else { vec![k > jump_row] } {
            let cone = 32.0 + 12.0 * (7.0 * s).sin() + if jumped { 18.0 } else { 0.0 };
            let clock = 60.0 + 260.0 * s - if jumped { 130.0 } else { 0.0 };
            columns.t_d.push(t * UNIT_D);
            columns.x_au.push(at[0]);
            columns.y_au.push(at[1]);
            columns.z_au.push(at[2]);
            columns.vx_km_s.push(velocity[0]);
            columns.vy_km_s.push(velocity[1]);
            columns.vz_km_s.push(velocity[2]);
            columns.cone_deg.push(cone);
            columns.clock_deg.push((clock + 180.0).rem_euclid(360.0) - 180.0);
            columns.distance_au.push(r);
            columns.speed_km_s.push(velocity.iter().map(|v| v * v).sum::<f64>().sqrt());
            columns.sail_accel_mm_s2.push(0.8 / (r * r) * cone.to_radians().cos().powi(2));
            columns.film_temp_k.push(263.0 / r.sqrt() * cone.to_radians().cos().powf(0.25));
            columns.turn_rate_deg_d.push(rate);
            columns.earth_range_au.push(0.1 + s);
            columns.sun_earth_craft_deg.push(90.0 * s);
        }
    }
    let end_d = t * UNIT_D;
    let (to_period_d, from_period_d) = (TAU * a1.powf(1.5) * UNIT_D, TAU * flight.from.1.powf(1.5) * UNIT_D);
    let mut report = report(Spiral { from: flight.from, to: (flight.to, a1), lightness: 0.13, ..MARS });
    report.flight.time_d = Some(end_d);
    report.flight.revolutions = Some(flight.turns);
    report.flight.depart = flight.dates.map(|dates| dates.0.to_owned());
    report.flight.arrive = flight.dates.map(|dates| dates.1.to_owned());
    // True to eccentric to mean anomaly of the arrival (Kepler).
    let anomaly = start + TAU * flight.turns - node - peri;
    let eccentric =
        anomaly - 2.0 * (e1 * anomaly.sin()).atan2(1.0 + (1.0 - e1 * e1).sqrt() + e1 * anomaly.cos());
    let mean_deg = (eccentric - e1 * eccentric.sin()).to_degrees() + flight.ahead_deg;
    let dated = |degrees: f64| flight.dates.map(|_| degrees);
    report.ends.to = End {
        name: flight.to.to_owned(),
        semi_major_axis_au: a1,
        eccentricity: e1,
        inclination_deg: flight.angles_deg[0],
        node_deg: flight.angles_deg[1],
        arg_peri_deg: flight.angles_deg[2],
        mean_anomaly_deg: dated(mean_deg - 360.0 * end_d / to_period_d),
        period_d: to_period_d,
    };
    report.ends.from.mean_anomaly_deg = dated(flight.start_deg);
    report.ends.from.period_d = from_period_d;
    (report, columns)
}
