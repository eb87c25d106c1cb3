//! The answer in one or two sentences of plain words.

use crate::place::{name, orbit_name};
use crate::report::{Craft, Flight, Impulsive, Status};
use crate::schema::{Arrive, Scenario, Steer};
use crate::words::{days, grouped, short};

/// What the report says, first of all.
pub(crate) fn sentence(scenario: &Scenario, craft: &Craft, flight: &Flight, impulsive: &Impulsive) -> String {
    let sail = match (craft.area_m2, craft.mass_kg) {
        (Some(area), Some(mass)) => format!("A {} m\u{b2} sail on {} kg", short(area), short(mass)),
        _ => format!("A sail of {} mm/s\u{b2}", short(craft.ac_mm_s2)),
    };
    let from = orbit_name(&scenario.from);
    let to = match scenario.arrive {
        Arrive::Rendezvous => name(&scenario.to),
        Arrive::Orbit | Arrive::Flyby => orbit_name(&scenario.to),
    };
    let rocket = &impulsive.same_start_same_end;
    let hohmann = format!(
        "from the same start a Hohmann transfer takes {} days and spends {} % of its mass as propellant.",
        days(rocket.time_d),
        grouped(rocket.propellant_fraction * 100.0, 1),
    );
    let Some(time_d) = flight.time_d else {
        return format!("{sail}: no flight from {from} to {to} is shown. For comparison, {hohmann}");
    };
    let time = days(time_d);
    let leaving = match (&flight.depart, &flight.arrive) {
        (Some(depart), Some(arrive)) => format!(", leaving {} and arriving {}", day(depart), day(arrive)),
        _ => String::new(),
    };
    match (flight.status, scenario.steer) {
        (Status::Converged, Steer::Fastest) => {
            format!("{sail} flies from {from} to {to} in {time} days{leaving}; {hohmann}")
        }
        (_, Steer::Fastest) => {
            format!(
                "{sail} flies from {from} to {to} in about {time} days ({}); {hohmann}",
                flight.status.word()
            )
        }
        (_, Steer::Local) => format!(
            "{sail}, steered for the fastest change of semi-major axis, leaves {from} and reaches the size of {to} \
             in {time} days with eccentricity {:.3}; {hohmann}",
            flight.final_eccentricity.unwrap_or(f64::NAN),
        ),
        (_, Steer::Fixed) => format!(
            "{sail} at a constant cone angle leaves {from} and crosses the distance of {to} in {time} days, \
             without matching it; {hohmann}"
        ),
    }
}

/// The calendar day of an ISO instant.
fn day(instant: &str) -> &str {
    instant.split('T').next().unwrap_or(instant)
}
