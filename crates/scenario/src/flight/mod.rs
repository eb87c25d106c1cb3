//! The sail flight of a scenario: picks the solver, and turns what it found into the report's words and units.

mod coplanar;
mod spatial;

use optimal::certificate::{Evidence, Verdict};
use optimal::excess::{Allowance, Used};
use orbits::units;
use sail::film::{ALUMINISED, Optics};
use sail::temperature::film_temperature_k;
use sail::trajectory::{Sample, Trajectory};

use crate::earth;
use crate::histories::{jumps, km, turn_rate_deg_d};
use crate::report::{Columns, Flight, Margin, Proof, SecondOrder, Status};
use crate::schema::{Geometry, Scenario};

/// An ideal mirror would stay cold: its temperature is told with the thermal numbers of this film.
const THERMAL: &Optics = &ALUMINISED;

/// The flight of `scenario` at this lightness number, and its histories (empty when there is none to show).
pub(crate) fn flight(scenario: &Scenario, lightness: f64) -> (Flight, Columns) {
    let (mut flight, mut columns) = match scenario.geometry {
        Geometry::Coplanar => coplanar::flight(scenario, lightness),
        Geometry::Spatial => spatial::flight(scenario, lightness),
    };
    flight.earth_view = earth::fill(scenario, &mut columns);
    flight.earth_range_max_au = flight.earth_view.map(|view| view.range_max_au);
    if flight.margin.is_none() {
        flight.margin = scenario.deadline_d.zip(flight.time_d).map(|(deadline_d, time_d)| Margin {
            days_in_hand: deadline_d - time_d,
            mass_growth_pct: None,
            ac_in_hand_pct: None,
        });
    }
    (flight, columns)
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
        earth_view: None,
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

/// Distance of a sample from the Sun.
fn distance(s: &Sample) -> f64 {
    s.position[0].hypot(s.position[1]).hypot(s.position[2])
}

/// The numbers that every flown path gives, whoever steered it.
fn described(time: f64, path: &Trajectory, method: &str) -> Flight {
    let (nearest, farthest) = path.distance_range();
    let temperature = |s: &Sample| film_temperature_k(THERMAL, distance(s), s.cone.cos());
    let revolutions = path.swept / std::f64::consts::TAU;
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
        ..unsolved(Status::Flown, String::new(), method)
    }
}

/// An angle in (-180, 180] deg.
fn wrapped_deg(angle_deg: f64) -> f64 {
    let turned = angle_deg.rem_euclid(360.0);
    if turned > 180.0 { turned - 360.0 } else { turned }
}

/// Status and message of a proven flight; `None` when the evidence makes it no result.
fn judged(evidence: &Evidence) -> Option<(Status, Option<String>)> {
    match evidence.verdict() {
        Verdict::Converged => Some((Status::Converged, None)),
        Verdict::Approximate => Some((
            Status::Approximate,
            Some(
                "Approximate: the flight misses the proof's thresholds; treat the last digits with care."
                    .into(),
            ),
        )),
        Verdict::NotConverged => None,
    }
}

/// The excess speeds that a scenario allows, canonical.
fn allowance(scenario: &Scenario) -> Allowance {
    Allowance {
        departure: units::canonical_speed(scenario.vinf_km_s),
        arrival: units::canonical_speed(scenario.vinf_arrive_km_s),
    }
}

/// Fills in how much of the allowance the flight uses.
fn tell_excess(flight: &mut Flight, used: &Used) {
    let departure_km_s = units::km_per_s(used.departure);
    flight.vinf_used_km_s = Some(departure_km_s);
    flight.c3_km2_s2 = Some(departure_km_s * departure_km_s);
    flight.vinf_arrive_km_s = Some(units::km_per_s(used.arrival));
}

/// Fills in what re-flying showed.
fn prove(proof: &mut Proof, evidence: &Evidence) {
    proof.position_error_km = Some(km(evidence.position_error));
    proof.speed_error_m_s = Some(units::km_per_s(evidence.speed_error) * 1e3);
    proof.hamiltonian_drift = Some(evidence.hamiltonian_drift);
}
