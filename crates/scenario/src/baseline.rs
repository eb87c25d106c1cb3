//! The impulsive side of the report: the same Hohmann transfer counted three ways.

use orbits::argument::BadArgument;
use orbits::impulsive::{Impulses, Question, three_ways};
use orbits::rocket::{Stage, propellant_fraction};

use crate::link::LinkError;
use crate::place;
use crate::report::{Impulsive, ImpulsiveWay};
use crate::schema::{CraftInput, Place, Scenario};

/// Counts the transfer of `scenario` three ways.
///
/// # Errors
/// When an altitude or a specific impulse is impossible; the key is the argument's name.
pub(crate) fn impulsive(scenario: &Scenario) -> Result<Impulsive, LinkError> {
    count(scenario).map_err(|bad| LinkError::new("link", "impulsive baseline", bad.to_string()))
}

fn count(scenario: &Scenario) -> Result<Impulsive, BadArgument> {
    let baseline = &scenario.baseline;
    let ways = three_ways(Question {
        from: place::body(&scenario.from, baseline.park_km),
        to: place::body(&scenario.to, baseline.capture_km),
        excess_km_s: scenario.vinf_km_s,
    })?;
    let way = |impulses: &Impulses, phases: String| -> Result<ImpulsiveWay, BadArgument> {
        let fraction = propellant_fraction(impulses.total_km_s(), baseline.isp_s)?;
        let delivered_kg = match scenario.craft {
            CraftInput::AreaMass { mass_kg, .. } => Some(
                Stage { start_kg: mass_kg, propellant_fraction: fraction, stage_dry: baseline.stage_dry }
                    .delivered_kg(),
            ),
            CraftInput::Acceleration { .. } => None,
        };
        Ok(ImpulsiveWay {
            time_d: ways.transfer.time_d,
            dv_depart_km_s: impulses.depart_km_s,
            dv_arrive_km_s: impulses.arrive_km_s,
            dv_total_km_s: impulses.total_km_s(),
            propellant_fraction: fraction,
            delivered_kg,
            phases,
        })
    };
    let from = place::name(&scenario.from);
    let to = place::name(&scenario.to);
    let heliocentric =
        way(&ways.heliocentric, "between massless bodies: leaving and matching the orbits only".into())?;
    let departure = match (&scenario.from, baseline.park_km) {
        (Place::Planet(_), Some(park)) => {
            format!("burn {} km above {from} on the escape path", crate::words::short(park))
        }
        _ => format!("burn far from {from}"),
    };
    let same_start_same_end = way(
        &ways.same_start_same_end,
        format!(
            "outside {from}\u{2019}s gravity as the sail starts, {departure}; orbit of {to} matched, no capture"
        ),
    )?;
    let captured = matches!(scenario.to, Place::Planet(_)) && baseline.capture_km.is_some();
    let from_parking = ways
        .from_parking
        .as_ref()
        .map(|impulses| {
            let start = baseline.park_km.unwrap_or_default();
            let end = match baseline.capture_km {
                Some(capture) if captured => {
                    format!("into a circular orbit {} km above {to}", crate::words::short(capture))
                }
                _ => format!("orbit of {to} matched, no capture"),
            };
            way(
                impulses,
                format!("from a circular orbit {} km above {from}; {end}", crate::words::short(start)),
            )
        })
        .transpose()?;
    let from_parking_note = note(scenario);
    let transfer = &ways.transfer;
    Ok(Impulsive {
        heliocentric,
        same_start_same_end,
        from_parking,
        from_parking_note,
        lead_angle_deg: transfer.lead_angle_deg,
        synodic_d: transfer.synodic_d,
        dated: None,
        dated_same_dates: None,
    })
}

/// Why the parking way is missing or narrower than asked.
fn note(scenario: &Scenario) -> Option<String> {
    let mut notes = Vec::new();
    if matches!(scenario.from, Place::Orbit(_)) {
        notes.push("no body at the start: no parking orbit to count from");
    } else if scenario.baseline.park_km.is_none() {
        notes.push("no parking orbit asked for");
    }
    if matches!(scenario.to, Place::Orbit(_)) && scenario.baseline.capture_km.is_some() {
        notes.push("no body at the end: the capture altitude is ignored");
    }
    (!notes.is_empty()).then(|| notes.join("; "))
}
