//! Coplanar flights: circles without dates.

use optimal::coplanar::excess;
use optimal::coplanar::flight::{Flown, fly};
use optimal::coplanar::guess;
use optimal::coplanar::solve::{Extremum, Problem, Route, solve};
use optimal::excess::Allowance;
use orbits::units;
use sail::motion::polar;
use sail::motion::steered::{self, Ending, Law, Plan, Steered};
use sail::steering::{fixed, local};
use sail::trajectory::{Sample, Trajectory};
use study::deadline::lightness_needed;

use super::{THERMAL, allowance, described, judged, prove, tell_excess, unsolved, wrapped_deg};
use crate::histories::{columns, km};
use crate::place::circle_au;
use crate::report::{Branch, Columns, Flight, Margin, Status};
use crate::schema::{Scenario, Steer};

/// Circles closer than this (in parts of their radius) are one orbit: a flight between them would be within the
/// proof's own threshold before it began.
const SAME_ORBIT: f64 = optimal::certificate::CONVERGED_MISS;

/// The flight of `scenario` at this lightness number, and its histories (empty when there is none to show).
pub(super) fn flight(scenario: &Scenario, lightness: f64) -> (Flight, Columns) {
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

/// [`described`], with the angle by which a body on the target circle must lead: it moves during the flight and must
/// start behind the arrival point.
fn described_on_circles(problem: &Problem, time: f64, path: &Trajectory, method: &str) -> Flight {
    let target_moves = time * problem.target_radius.powf(-1.5);
    let lead = wrapped_deg((path.swept - target_moves).to_degrees());
    Flight { lead_angle_deg: Some(lead), ..described(time, path, method) }
}

fn nothing_to_fly(scenario: &Scenario, problem: &Problem) -> (Flight, Columns) {
    let (r, v) = (problem.start_radius, problem.start_radius.powf(-0.5));
    let edge_on = std::f64::consts::FRAC_PI_2;
    let sample = Sample::coplanar(0.0, [r, 0.0, v], 0.0, edge_on, 0.0, 0.0);
    let path = Trajectory { samples: vec![sample], jumps: Vec::new(), swept: 0.0, delta_v: 0.0 };
    let mut flight =
        described_on_circles(problem, 0.0, &path, "nothing to fly: start and target are the same orbit");
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

/// The minimum-time flight with whatever excess the scenario allows, and how it was found.
fn solved(problem: &Problem, allowance: Allowance) -> Option<(Flown, String)> {
    if !allowance.is_some() {
        let solved = solve(problem)?;
        return Some((fly(problem, &solved.unknowns)?, method(&solved)));
    }
    let problem = excess::Problem { circles: *problem, allowance };
    let solved = excess::solve(&problem)?;
    let method = "Pontryagin's principle, shooting: the flight without excess, followed while the allowance grows; \
                  re-flown at 1e-13";
    Some((excess::fly(&problem, &solved.unknowns)?, method.to_owned()))
}

fn fastest(scenario: &Scenario, problem: &Problem) -> (Flight, Columns) {
    let allowance = allowance(scenario);
    let Some((flown, method)) = solved(problem, allowance) else { return not_converged(problem) };
    let Some((status, message)) = judged(&flown.evidence) else { return not_converged(problem) };
    let mut flight = described_on_circles(problem, flown.time, &flown.trajectory, &method);
    tell_excess(&mut flight, &flown.excess);
    flight.status = status;
    flight.message = message;
    flight.final_eccentricity = Some(flown.final_eccentricity);
    prove(&mut flight.proof, &flown.evidence);
    flight.proof.extremals_found = 1;
    flight.branches = vec![Branch {
        time_d: units::days(flown.time),
        revolutions: flown.trajectory.swept / std::f64::consts::TAU,
        best: true,
    }];
    // How much weaker the sail could be is solved for flights that match both circles.
    let deadline_d = scenario.deadline_d.filter(|_| !allowance.is_some());
    flight.margin = deadline_d.map(|deadline_d| margin(problem, &flown, deadline_d));
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
    let mut flight = described_on_circles(problem, flown.time, &flown.trajectory, method);
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
