//! The sail flight of a scenario: picks the solver, and turns what it found into the report's words and units.

use optimal::certificate::{Evidence, Verdict};
use optimal::coplanar::flight::{Flown, fly};
use optimal::coplanar::guess;
use optimal::coplanar::solve::{Extremum, Problem, Route, solve};
use orbits::units;
use sail::film::{ALUMINISED, Optics};
use sail::motion::polar;
use sail::motion::steered::{self, Ending, Law, Plan, Steered};
use sail::steering::{fixed, local};
use sail::temperature::film_temperature_k;
use sail::trajectory::Trajectory;
use study::deadline::lightness_needed;

use crate::histories::{columns, jumps, km, turn_rate_deg_d};
use crate::place::circle_au;
use crate::report::{Branch, Columns, Flight, Margin, Proof, SecondOrder, Status};
use crate::schema::{Scenario, Steer};

/// An ideal mirror would stay cold: its temperature is told with the thermal numbers of this film.
const THERMAL: &Optics = &ALUMINISED;

/// Circles closer than this (in parts of their radius) are one orbit: a flight between them would be within the
/// proof's own threshold before it began.
const SAME_ORBIT: f64 = optimal::certificate::CONVERGED_MISS;

/// The flight of `scenario` at this lightness number, and its histories (empty when there is none to show).
pub(crate) fn flight(scenario: &Scenario, lightness: f64) -> (Flight, Columns) {
    let problem = Problem {
        start_radius: circle_au(&scenario.from),
        target_radius: circle_au(&scenario.to),
        lightness,
    };
    if problem.ratio().ln().abs() < SAME_ORBIT {
        return nothing_to_fly(scenario, &problem);
    }
    match scenario.steer {
        Steer::Fastest => fastest(scenario, &problem),
        Steer::Local => steered_flight(&problem, local_law(&problem)),
        Steer::Fixed => {
            let outward = problem.target_radius > problem.start_radius;
            let cone_deg = scenario.cone_deg.unwrap_or_else(|| fixed::default_cone_deg(outward));
            steered_flight(&problem, Law::Fixed { cone_deg })
        }
    }
}

fn local_law(problem: &Problem) -> Law {
    let outward = problem.target_radius > problem.start_radius;
    Law::Local(if outward { local::Towards::Larger } else { local::Towards::Smaller })
}

/// A flight without numbers: what is known is the status and why.
fn unsolved(status: Status, message: String, method: &str) -> Flight {
    Flight {
        status,
        message: Some(message),
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
        final_eccentricity: None,
        estimate: None,
        proof: Proof {
            position_error_km: None,
            speed_error_m_s: None,
            hamiltonian_drift: None,
            extremals_found: 0,
            second_order: SecondOrder::NotTested,
            method: method.to_owned(),
        },
        branches: Vec::new(),
        margin: None,
    }
}

/// The numbers that every flown path gives, whoever steered it.
fn described(problem: &Problem, time: f64, path: &Trajectory, method: &str) -> Flight {
    let (nearest, farthest) = path.distance_range();
    let temperature = |s: &sail::trajectory::Sample| {
        film_temperature_k(THERMAL, s.position[0].hypot(s.position[1]), s.cone.cos())
    };
    let revolutions = path.swept / std::f64::consts::TAU;
    // A body on the target circle moves this far during the flight; it must start behind the arrival point.
    let target_moves = time * problem.target_radius.powf(-1.5);
    Flight {
        message: None,
        time_d: Some(units::days(time)),
        revolutions: Some(revolutions),
        vinf_used_km_s: Some(0.0),
        c3_km2_s2: Some(0.0),
        vinf_arrive_km_s: Some(0.0),
        sun_distance_min_au: Some(nearest),
        sun_distance_max_au: Some(farthest),
        film_temp_max_k: Some(path.samples.iter().map(temperature).fold(0.0, f64::max)),
        turn_rate_max_deg_d: Some(turn_rate_deg_d(path.turn_rate_max())),
        jumps: jumps(path),
        sail_dv_km_s: Some(units::km_per_s(path.delta_v)),
        lead_angle_deg: Some(wrapped_deg((path.swept - target_moves).to_degrees())),
        ..unsolved(Status::Flown, String::new(), method)
    }
}

/// An angle in (-180, 180] deg.
fn wrapped_deg(angle_deg: f64) -> f64 {
    let turned = angle_deg.rem_euclid(360.0);
    if turned > 180.0 { turned - 360.0 } else { turned }
}

fn nothing_to_fly(scenario: &Scenario, problem: &Problem) -> (Flight, Columns) {
    let (r, v) = (problem.start_radius, problem.start_radius.powf(-0.5));
    let edge_on = std::f64::consts::FRAC_PI_2;
    let sample = sail::trajectory::Sample::coplanar(0.0, [r, 0.0, v], 0.0, edge_on, 0.0, 0.0);
    let path = Trajectory { samples: vec![sample], jumps: Vec::new(), swept: 0.0, delta_v: 0.0 };
    let mut flight = described(problem, 0.0, &path, "nothing to fly: start and target are the same orbit");
    flight.message = Some(
        "Start and target are the same orbit to one part in ten million: there is nothing to fly.".into(),
    );
    flight.status = if scenario.steer == Steer::Fastest { Status::Converged } else { Status::Flown };
    flight.final_eccentricity = Some(0.0);
    flight.proof.position_error_km = Some(km((problem.target_radius - r).abs()));
    flight.proof.speed_error_m_s = Some(0.0);
    flight.proof.hamiltonian_drift = (scenario.steer == Steer::Fastest).then_some(0.0);
    let histories = columns(&path, THERMAL);
    (flight, histories)
}

fn fastest(scenario: &Scenario, problem: &Problem) -> (Flight, Columns) {
    let solved = solve(problem);
    let flown = solved.as_ref().and_then(|extremum| fly(problem, &extremum.unknowns));
    let (Some(solved), Some(flown)) = (solved, flown) else { return not_converged(problem) };
    let status = match flown.evidence.verdict() {
        Verdict::Converged => Status::Converged,
        Verdict::Approximate => Status::Approximate,
        Verdict::NotConverged => return not_converged(problem),
    };
    let mut flight = described(problem, flown.time, &flown.trajectory, &method(&solved));
    flight.status = status;
    flight.message = (status == Status::Approximate).then(|| {
        "Approximate: the flight misses the proof's thresholds; treat the last digits with care.".into()
    });
    flight.final_eccentricity = Some(flown.final_eccentricity);
    prove(&mut flight.proof, &flown.evidence);
    flight.branches = vec![Branch {
        time_d: units::days(flown.time),
        revolutions: flown.trajectory.swept / std::f64::consts::TAU,
        best: true,
    }];
    flight.margin = scenario.deadline_d.map(|deadline_d| margin(problem, &flown, deadline_d));
    let histories = columns(&flown.trajectory, THERMAL);
    (flight, histories)
}

fn not_converged(problem: &Problem) -> (Flight, Columns) {
    let message = "Not converged: no minimum-time flight was found. The estimate is a look-up, not a result.";
    let mut flight =
        unsolved(Status::NotConverged, message.into(), "shooting from a table of first costates");
    let guess = guess::look_up(problem.ratio(), problem.lightness);
    flight.estimate = Some(units::days(guess.time * problem.time_scale()));
    (flight, Columns::default())
}

fn method(solved: &Extremum) -> String {
    let route = match solved.route {
        Route::Table => "Newton's method from a table of first costates",
        Route::Damped => "Levenberg-Marquardt from a table of first costates",
        Route::Continuation => "continuation from a solved neighbour",
    };
    format!("Pontryagin's principle, shooting: {route}, {} passes; re-flown at 1e-13", solved.passes)
}

fn prove(proof: &mut Proof, evidence: &Evidence) {
    proof.position_error_km = Some(km(evidence.position_error));
    proof.speed_error_m_s = Some(units::km_per_s(evidence.speed_error) * 1e3);
    proof.hamiltonian_drift = Some(evidence.hamiltonian_drift);
    proof.extremals_found = 1;
}

fn margin(problem: &Problem, flown: &Flown, deadline_d: f64) -> Margin {
    let needed = lightness_needed(problem, units::canonical_time(deadline_d));
    Margin {
        days_in_hand: deadline_d - units::days(flown.time),
        // Acceleration goes as one over mass, at the same area.
        mass_growth_pct: needed.map(|needed| (problem.lightness / needed - 1.0) * 100.0),
        ac_in_hand_pct: needed.map(|needed| (1.0 - needed / problem.lightness) * 100.0),
    }
}

fn steered_flight(problem: &Problem, law: Law) -> (Flight, Columns) {
    let Problem { start_radius, target_radius, lightness } = *problem;
    // Twenty times the spiral at the best constant angle, and twenty years on the larger circle.
    let spiral = (target_radius.powf(1.5) - start_radius.powf(1.5)).abs() / (3.0 * 0.3849 * lightness);
    let years = std::f64::consts::TAU * start_radius.max(target_radius).powf(1.5);
    let plan = Plan {
        lightness,
        start: [start_radius, 0.0, start_radius.powf(-0.5)],
        target: target_radius,
        law,
        time_limit: 20.0 * (spiral + years),
    };
    let flown = steered::fly(&plan);
    let method = match law {
        Law::Local(_) => "locally optimal steering, flown at 1e-12 a step; promises no optimum",
        Law::Fixed { .. } => "constant cone angle, flown at 1e-12 a step; promises no optimum",
    };
    if flown.ending != Ending::Arrived {
        let message = missed(&flown, target_radius);
        return (unsolved(Status::NotConverged, message, method), Columns::default());
    }
    let mut flight = described(problem, flown.time, &flown.trajectory, method);
    let [r, u, v] = flown.end;
    let (_, eccentricity) = polar::shape(r, u, v);
    flight.final_eccentricity = Some(eccentricity);
    flight.proof.position_error_km = Some(km((r - target_radius).abs()));
    flight.proof.speed_error_m_s = Some(units::km_per_s(u.hypot(v - target_radius.powf(-0.5))) * 1e3);
    let reached = match law {
        Law::Local(_) => "the semi-major axis matches",
        Law::Fixed { .. } => "the distance is reached",
    };
    flight.message = Some(format!(
        "Ends where {reached}, on an orbit of eccentricity {eccentricity:.4}, not on the target\u{2019}s: see the \
         mismatch under proof."
    ));
    let histories = columns(&flown.trajectory, THERMAL);
    (flight, histories)
}

fn missed(flown: &Steered, target_au: f64) -> String {
    let target = crate::words::short(target_au);
    let days = crate::words::days(units::days(flown.time));
    match flown.ending {
        Ending::FellIntoSun => format!("Never reaches {target} au: it falls to the Sun after {days} days."),
        Ending::Escaped => {
            format!("Never reaches {target} au: it leaves the other way and does not come back.")
        }
        Ending::Arrived | Ending::OutOfTime => {
            format!("Does not reach {target} au within {days} days, where the search stopped.")
        }
    }
}
