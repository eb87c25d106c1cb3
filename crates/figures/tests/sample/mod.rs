//! Invented flights for tests and the sample sheet: logarithmic spirals, whose motion has a closed form.

#![allow(dead_code, unused_imports, reason = "each test and the sample sheet uses part of it")]

mod space;

use scenario::report::*;

pub(crate) use space::{CROSSING, Crossing, crossing};

/// Days in the canonical unit of time, sqrt(au^3 / mu) for the Sun.
const UNIT_D: f64 = 58.132_441;
/// km/s in the canonical unit of speed.
const UNIT_KM_S: f64 = 29.784_692;

/// What to fly.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Spiral {
    /// Name, radius (au) of the start.
    pub(crate) from: (&'static str, f64),
    /// Name, radius (au) of the end.
    pub(crate) to: (&'static str, f64),
    /// Lightness number.
    pub(crate) lightness: f64,
    /// Samples.
    pub(crate) rows: usize,
    /// Which cone angle the columns show.
    pub(crate) cone: Cone,
}

/// Cone angle histories.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Cone {
    /// The spiral's own, which never changes.
    Own,
    /// Invented: a fall, a jump, a fall.
    Jump,
    /// Invented: the same with a fast swing instead of the jump.
    Swing,
}

/// Outwards from the Earth to Mars.
pub(crate) const MARS: Spiral =
    Spiral { from: ("Earth", 1.0), to: ("Mars", 1.52371034), lightness: 0.1, rows: 400, cone: Cone::Jump };

/// The report and columns of a logarithmic spiral with the cone angle that gives the largest transverse force.
///
/// # References
/// Bacon 1959, London 1960, Tsu 1959 (ARS Journal 29, 422-427): sin g cos g / (2 - sin^2 g) =
/// b cos^2 a sin a / (1 - b cos^3 a), v^2 r / mu = 2 (1 - b cos^3 a) / (2 - sin^2 g).
pub(crate) fn flight(spiral: Spiral) -> (Report, Columns) {
    let outward = spiral.to.1 >= spiral.from.1;
    let sign = if outward { 1.0 } else { -1.0 };
    let (sin, cos) = (sign * 0.5_f64.sqrt().atan()).sin_cos();
    let b = spiral.lightness;
    let ratio = b * cos * cos * sin / (1.0 - b * cos.powi(3));
    // The ratio is tan g / (2 + tan^2 g), a quadratic in tan g; the root near zero is the spiral.
    let tan_g = 4.0 * ratio / (1.0 + (1.0 - 8.0 * ratio * ratio).sqrt());
    let g = tan_g.atan();
    let speed2 = 2.0 * (1.0 - b * cos.powi(3)) / (2.0 - g.sin().powi(2));
    let (r0, r1) = (spiral.from.1, spiral.to.1);
    let time = |r: f64| (r.powf(1.5) - r0.powf(1.5)) * 2.0 / 3.0 / (speed2.sqrt() * g.sin());
    let end_d = time(r1) * UNIT_D;
    let turns = (r1 / r0).ln() / tan_g / std::f64::consts::TAU;
    let mut columns = Columns::default();
    let jump_share = 0.23;
    let mut times: Vec<f64> = (0..spiral.rows).map(|k| k as f64 / (spiral.rows - 1) as f64).collect();
    if spiral.cone == Cone::Jump {
        let at = times.partition_point(|&s| s < jump_share);
        times.splice(at..at, [jump_share, jump_share]);
    }
    for (row, &share) in times.iter().enumerate() {
        let after = share > jump_share || (row > 0 && times[row - 1] == share);
        let r = (r0.powf(1.5) + share * (r1.powf(1.5) - r0.powf(1.5))).powf(2.0 / 3.0);
        let angle = (r / r0).ln() / tan_g;
        let (sin_t, cos_t) = angle.sin_cos();
        let speed = (speed2 / r).sqrt() * UNIT_KM_S;
        let (along, out) = (speed * g.cos(), speed * g.sin());
        let (early, late) =
            (22.0 - 12.0 * share / jump_share, 71.0 - 26.0 * (share - jump_share) / (1.0 - jump_share));
        let cone = match spiral.cone {
            Cone::Own => sign * 35.264,
            Cone::Jump if after => late,
            Cone::Jump => early,
            Cone::Swing => early + (late - early) * (0.5 + 0.5 * ((share - jump_share) * 120.0).tanh()),
        };
        columns.t_d.push(share * end_d);
        columns.x_au.push(r * cos_t);
        columns.y_au.push(r * sin_t);
        columns.z_au.push(0.0);
        columns.vx_km_s.push(out * cos_t - along * sin_t);
        columns.vy_km_s.push(out * sin_t + along * cos_t);
        columns.vz_km_s.push(0.0);
        columns.cone_deg.push(cone);
        columns.clock_deg.push(if cone >= 0.0 { 0.0 } else { 180.0 });
        columns.distance_au.push(r);
        columns.speed_km_s.push(speed);
        columns.sail_accel_mm_s2.push(b * 5.930_084 / (r * r) * cone.to_radians().cos().powi(2));
        columns.film_temp_k.push(f64::NAN);
        columns.earth_range_au.push(f64::NAN);
        columns.sun_earth_craft_deg.push(f64::NAN);
    }
    let heading = |i: usize| columns.y_au[i].atan2(columns.x_au[i]).to_degrees() + columns.cone_deg[i];
    columns.turn_rate_deg_d = (0..times.len())
        .map(|i| {
            let (i, j) = (i.saturating_sub(1), (i + 1).min(times.len() - 1));
            let turn = (heading(j) - heading(i) + 540.0).rem_euclid(360.0) - 180.0;
            let jump = (i + 1..=j).any(|k| columns.t_d[k] == columns.t_d[k - 1]);
            if jump { f64::NAN } else { turn.abs() / (columns.t_d[j] - columns.t_d[i]) }
        })
        .collect();
    let mut report = report(spiral);
    report.flight.time_d = Some(end_d);
    report.flight.revolutions = Some(turns);
    (report, columns)
}

/// The same report without a flight.
pub(crate) fn without_flight(spiral: Spiral, status: Status, message: &str) -> (Report, Columns) {
    let mut report = report(spiral);
    report.flight.status = status;
    report.flight.message = Some(message.to_owned());
    report.flight.estimate = Some(512.0);
    (report, Columns::default())
}

fn end((name, radius): (&str, f64)) -> End {
    End {
        name: name.to_owned(),
        semi_major_axis_au: radius,
        eccentricity: 0.0,
        inclination_deg: 0.0,
        node_deg: 0.0,
        arg_peri_deg: 0.0,
        mean_anomaly_deg: None,
        period_d: 0.0,
    }
}

fn way(time_d: f64) -> ImpulsiveWay {
    ImpulsiveWay {
        time_d,
        dv_depart_km_s: 2.9,
        dv_arrive_km_s: 2.6,
        dv_total_km_s: 5.5,
        propellant_fraction: 0.83,
        delivered_kg: None,
        phases: "heliocentric".to_owned(),
    }
}

fn report(spiral: Spiral) -> Report {
    let (r0, r1) = (spiral.from.1, spiral.to.1);
    // Half the period of the ellipse that touches both circles.
    let hohmann_d = std::f64::consts::PI * ((r0 + r1) / 2.0).powf(1.5) * UNIT_D;
    Report {
        program: Program {
            name: "sunreach".to_owned(),
            version: "0".to_owned(),
            constants: Constants {
                sun_gm_km3_s2: 1.327_124_400_18e11,
                au_km: 149_597_870.7,
                irradiance_w_m2: 1361.0,
                pressure_n_m2: 4.5398e-6,
                sun_gravity_mm_s2: 5.930_084,
                g0_m_s2: 9.80665,
            },
        },
        link: "v=1".to_owned(),
        sentence: "An invented spiral.".to_owned(),
        ends: Ends { from: end(spiral.from), to: end(spiral.to) },
        craft: Craft {
            ac_mm_s2: spiral.lightness * 5.930_084,
            lightness: spiral.lightness,
            efficiency: 1.0,
            loading_g_m2: None,
            area_m2: None,
            side_m: None,
            mass_kg: None,
            delivered_kg: None,
        },
        flight: Flight {
            status: Status::Flown,
            message: None,
            time_d: None,
            revolutions: None,
            depart: None,
            arrive: None,
            vinf_used_km_s: None,
            c3_km2_s2: None,
            vinf_arrive_km_s: None,
            sun_distance_min_au: None,
            sun_distance_max_au: None,
            film_temp_max_k: None,
            turn_rate_max_deg_d: None,
            jumps: Vec::new(),
            sail_dv_km_s: None,
            lead_angle_deg: None,
            earth_range_max_au: None,
            earth_view: None,
            final_eccentricity: None,
            estimate: None,
            proof: Proof {
                position_error_km: None,
                speed_error_m_s: None,
                hamiltonian_drift: None,
                extremals_found: 0,
                second_order: SecondOrder::NotTested,
                method: "closed form".to_owned(),
            },
            branches: Vec::new(),
            margin: None,
        },
        impulsive: Impulsive {
            heliocentric: way(hohmann_d),
            same_start_same_end: way(hohmann_d),
            from_parking: None,
            from_parking_note: None,
            lead_angle_deg: 44.3,
            synodic_d: None,
            dated: None,
            dated_same_dates: None,
        },
        cautions: Vec::new(),
    }
}
