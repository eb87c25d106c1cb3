//! Impulsive transfers on calendar dates, between the orbits as they are: the cheapest in a span of dates, and the one
//! that leaves and arrives with the sail. Both are counted from the same start to the same end as the sail.

use orbits::argument::BadArgument;
use orbits::constants::JULIAN_YEAR_D;
use orbits::epochs::{iso_day, start_of_day};
use orbits::escape::Burn;
use orbits::geometry::phase_angle_deg;
use orbits::hohmann::{Circles, Hohmann, hohmann};
use orbits::lambert;
use orbits::rocket::{Stage, propellant_fraction};
use orbits::two_impulse::{Count, Goal, Question, SameEnds, Span, TwoImpulse, least};
use orbits::units::days;

use crate::date::Date;
use crate::link::LinkError;
use crate::place::{name, traveller};
use crate::report::{DatedTransfer, Direction};
use crate::schema::{Arrive, CraftInput, Geometry, Place, Scenario};
use crate::words;

/// Departures are searched over one synodic period, but no longer than this.
const LONGEST_SPAN_D: f64 = 3.0 * JULIAN_YEAR_D;

/// Flight times searched, in Hohmann times between circles of the two semi-major axes.
const HOHMANN_TIMES: (f64, f64) = (0.2, 2.5);

/// Last day on which a transfer may arrive.
const LAST_ARRIVAL: Date = Date { year: 2100, month: 12, day: 31 };

/// What the report tells beside the sail flight.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct Dated {
    /// The cheapest within a span of dates.
    pub(crate) least: Option<DatedTransfer>,
    /// The one that leaves and arrives when the sail does.
    pub(crate) same_dates: Option<DatedTransfer>,
}

/// Both dated transfers of a scenario whose sail flight takes `sail_time_d` (`None`: there is no flight). Nothing in
/// coplanar geometry or without a departure date.
///
/// # Errors
/// When an altitude, a speed or an orbit is impossible.
pub(crate) fn dated(scenario: &Scenario, sail_time_d: Option<f64>) -> Result<Dated, LinkError> {
    let start = scenario.depart.and_then(Date::j2000_d).filter(|_| scenario.geometry == Geometry::Spatial);
    let Some(depart_j2000_d) = start else { return Ok(Dated::default()) };
    both(scenario, depart_j2000_d, sail_time_d)
        .map_err(|bad| LinkError::new("link", "dated impulsive transfer", bad.to_string()))
}

fn both(scenario: &Scenario, depart_j2000_d: f64, sail_time_d: Option<f64>) -> Result<Dated, BadArgument> {
    let question = question(scenario)?;
    let tell = |found: Option<TwoImpulse>, words: String| {
        found.map(|found| told(scenario, &question, &found, words)).transpose()
    };
    let (span, words) = span(&question, depart_j2000_d)?;
    let same_dates = match sail_time_d.filter(|&time_d| time_d > 0.0) {
        Some(time_d) => {
            let found = least(&question, &Span::dates(depart_j2000_d, time_d))?;
            tell(found, "leaves and arrives when the sail does".into())?
        }
        None => None,
    };
    Ok(Dated { least: tell(least(&question, &span)?, words)?, same_dates })
}

/// From the excess that the sail starts with to the end that the sail comes to.
fn question(scenario: &Scenario) -> Result<Question, BadArgument> {
    let burn = match (&scenario.from, scenario.baseline.park_km) {
        (Place::Planet(planet), Some(park_km)) => Some(Burn::above(*planet, park_km)?),
        _ => None,
    };
    let allowed_km_s = match scenario.arrive {
        Arrive::Flyby => f64::INFINITY,
        Arrive::Orbit | Arrive::Rendezvous => scenario.vinf_arrive_km_s,
    };
    Ok(Question {
        from: traveller(&scenario.from),
        to: traveller(&scenario.to),
        goal: if scenario.arrive == Arrive::Orbit { Goal::Orbit } else { Goal::Body },
        count: Count::SameEnds(SameEnds { burn, available_km_s: scenario.vinf_km_s, allowed_km_s }),
    })
}

/// Departures and flight times that are searched, and the same in words.
fn span(question: &Question, first_j2000_d: f64) -> Result<(Span, String), BadArgument> {
    let from = question.from.elements(first_j2000_d);
    let to = question.to.elements(first_j2000_d);
    let circles = Circles::around_sun(from.semi_major_axis, to.semi_major_axis);
    let Hohmann { time_d, synodic_d, .. } = hohmann(circles)?;
    let revolution_d = days(std::f64::consts::TAU / from.mean_motion(1.0));
    // To any place on an orbit every start place is met within one revolution; bodies align once in a synodic period.
    let (whole_d, whole) = match (question.goal, synodic_d) {
        (Goal::Body, Some(synodic_d)) => (synodic_d, "one synodic period"),
        _ => (revolution_d, "one revolution of the start"),
    };
    let last_departure_d = Date::LAST.j2000_d().unwrap_or(f64::INFINITY);
    let last_j2000_d = (first_j2000_d + whole_d.min(LONGEST_SPAN_D)).min(last_departure_d).max(first_j2000_d);
    let arrive_by_j2000_d = start_of_day(LAST_ARRIVAL.year, LAST_ARRIVAL.month, LAST_ARRIVAL.day)
        .map_or(f64::INFINITY, |midnight| midnight + 1.0);
    let (shortest_d, longest_d) = (HOHMANN_TIMES.0 * time_d, HOHMANN_TIMES.1 * time_d);
    let span = Span { first_j2000_d, last_j2000_d, shortest_d, longest_d, arrive_by_j2000_d };

    let share = if last_j2000_d - first_j2000_d >= whole_d - 1.0 {
        whole.to_owned()
    } else {
        format!("part of {whole}, {} days", words::days(whole_d))
    };
    let day = |j2000_d| iso_day(j2000_d).unwrap_or_default();
    let mut words = format!(
        "departures from {} to {} ({share}); flight times {} to {} days ({} to {} Hohmann times)",
        day(first_j2000_d),
        day(last_j2000_d),
        words::short(shortest_d),
        words::short(longest_d),
        HOHMANN_TIMES.0,
        HOHMANN_TIMES.1,
    );
    if last_j2000_d + longest_d > arrive_by_j2000_d {
        words += &format!(", arrival by {LAST_ARRIVAL}");
    }
    Ok((span, words))
}

/// A transfer in the report's units.
fn told(
    scenario: &Scenario,
    question: &Question,
    found: &TwoImpulse,
    span: String,
) -> Result<DatedTransfer, BadArgument> {
    let (depart_j2000_d, arrive_j2000_d) = (found.depart_j2000_d, found.arrive_j2000_d());
    let fraction = propellant_fraction(found.impulses.total_km_s(), scenario.baseline.isp_s)?;
    let phase_depart_deg = match question.goal {
        Goal::Body => Some(phase_angle_deg(&question.to, &question.from, depart_j2000_d)?),
        Goal::Orbit => None,
    };
    Ok(DatedTransfer {
        depart: iso_day(depart_j2000_d).unwrap_or_default(),
        arrive: iso_day(arrive_j2000_d).unwrap_or_default(),
        time_d: found.time_d,
        dv_depart_km_s: found.impulses.depart_km_s,
        dv_arrive_km_s: found.impulses.arrive_km_s,
        dv_total_km_s: found.impulses.total_km_s(),
        c3_km2_s2: found.c3_km2_s2(),
        vinf_arrive_km_s: found.arrive_excess_km_s.norm(),
        propellant_fraction: fraction,
        delivered_kg: delivered_kg(scenario, fraction),
        revolutions: found.revolutions,
        direction: match found.direction {
            lambert::Direction::Prograde => Direction::Prograde,
            lambert::Direction::Retrograde => Direction::Retrograde,
        },
        phase_depart_deg,
        span,
        phases: phases(scenario),
    })
}

/// Mass delivered by a stage that burns this fraction; `None` without a mass.
fn delivered_kg(scenario: &Scenario, propellant_fraction: f64) -> Option<f64> {
    let stage_dry = scenario.baseline.stage_dry;
    match scenario.craft {
        CraftInput::AreaMass { mass_kg, .. } => {
            Some(Stage { start_kg: mass_kg, propellant_fraction, stage_dry }.delivered_kg())
        }
        CraftInput::Acceleration { .. } => None,
    }
}

/// What is counted, in words.
fn phases(scenario: &Scenario) -> String {
    let (from, to) = (name(&scenario.from), name(&scenario.to));
    let burn = match (&scenario.from, scenario.baseline.park_km) {
        (Place::Planet(_), Some(park_km)) => {
            format!("burn {} km above {from} on the escape path", words::short(park_km))
        }
        _ => format!("burn far from {from}"),
    };
    let allowed = scenario.vinf_arrive_km_s;
    let slack =
        if allowed > 0.0 { format!(" to within {} km/s", words::short(allowed)) } else { String::new() };
    let end = match scenario.arrive {
        Arrive::Orbit => format!("orbit of {to} matched anywhere{slack}, no capture"),
        Arrive::Rendezvous => format!("{to} met and its motion matched{slack}, no capture"),
        Arrive::Flyby => format!("{to} passed at any speed"),
    };
    format!("outside {from}\u{2019}s gravity as the sail starts, {burn}; {end}")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::link::decode;

    #[track_caller]
    fn of(link: &str, sail_time_d: Option<f64>) -> Dated {
        dated(&decode(link).expect("a link"), sail_time_d).expect("possible input")
    }

    const MARS_2033: &str = "geometry=spatial&arrive=rendezvous&depart=2033-01-01";

    #[test]
    fn only_dated_flights_in_space_have_dated_transfers() {
        assert_eq!(of("", Some(400.0)), Dated::default());
        assert_eq!(of("geometry=spatial", Some(400.0)), Dated::default());
        let without_flight = of(MARS_2033, None);
        assert!(without_flight.least.is_some() && without_flight.same_dates.is_none());
    }

    #[test]
    fn mars_in_2033_is_left_in_april() {
        // Common practice, no source: the opportunity of 2033 is left in April, C3 about 9 km^2/s^2, six to seven months.
        let found = of(MARS_2033, Some(400.0));
        let least = found.least.unwrap();
        assert!(least.depart.starts_with("2033-04"), "{least:?}");
        assert!(
            (190.0..215.0).contains(&least.time_d) && (8.0..10.0).contains(&least.c3_km2_s2),
            "{least:?}"
        );
        assert!(least.span.contains("2033-01-01 to 2035-02-19 (one synodic period)"), "{}", least.span);
        let same = found.same_dates.unwrap();
        assert_eq!((same.depart.as_str(), same.arrive.as_str()), ("2033-01-01", "2034-02-05"));
        assert!(same.dv_total_km_s > least.dv_total_km_s);
        for transfer in [least, same] {
            // 60 kg, 320 s and a stage of 0.1 are the defaults; g0 Isp is 3.138 km/s.
            let fraction = 1.0 - (-transfer.dv_total_km_s / 3.138_128).exp();
            assert!((transfer.propellant_fraction - fraction).abs() < 1e-9);
            assert!((transfer.delivered_kg.unwrap() - 60.0 * (1.0 - 1.1 * fraction)).abs() < 1e-6);
            // The burn pays for C3 and no more: deep in the well it is cheaper than the excess itself.
            assert!(transfer.dv_depart_km_s < transfer.c3_km2_s2.sqrt());
            assert_eq!(transfer.dv_arrive_km_s, transfer.vinf_arrive_km_s);
        }
    }

    #[test]
    fn what_the_sail_is_given_the_stage_is_given_too() {
        let with = |more: &str| of(&format!("{MARS_2033}{more}"), Some(300.0)).least.unwrap();
        let plain = with("");
        assert!(with("&vinf_km_s=3").dv_total_km_s < plain.dv_total_km_s);
        let loose = with("&vinf_arrive_km_s=1");
        assert!((plain.dv_total_km_s - loose.dv_total_km_s - 1.0).abs() < 0.05);
        assert!(loose.phases.contains("to within 1 km/s"), "{}", loose.phases);
        let far = with("&park_km=none");
        assert!((far.dv_depart_km_s.powi(2) - far.c3_km2_s2).abs() < 1e-9);
        assert!(far.phases.contains("far from Earth"), "{}", far.phases);
    }

    #[test]
    fn matching_the_orbit_anywhere_is_cheaper_than_meeting_the_body() {
        let orbit = of("geometry=spatial&depart=2033-01-01", Some(400.0));
        let body = of(MARS_2033, Some(400.0));
        let total = |transfer: &Option<DatedTransfer>| transfer.as_ref().unwrap().dv_total_km_s;
        assert!(total(&orbit.least) < total(&body.least));
        assert!(total(&orbit.same_dates) < total(&body.same_dates));
        assert_eq!(orbit.least.unwrap().phase_depart_deg, None);
    }

    #[test]
    fn spans_end_with_the_elements_and_far_planets_with_the_century() {
        let late = of("geometry=spatial&arrive=rendezvous&depart=2050-12-31", None).least.unwrap();
        assert_eq!(late.depart, "2050-12-31");
        assert!(late.span.contains("part of one synodic period"), "{}", late.span);
        let neptune =
            of("geometry=spatial&arrive=rendezvous&depart=2049-01-01&to=neptune", None).least.unwrap();
        assert!(neptune.span.ends_with("arrival by 2100-12-31"), "{}", neptune.span);
        assert!(neptune.arrive.as_str() <= "2100-12-31");
        let slow = of("geometry=spatial&arrive=rendezvous&depart=2030-01-01&from=jupiter&to=saturn", None);
        assert!(slow.least.unwrap().span.contains("(part of one synodic period, 7"), "capped at three years");
    }

    #[test]
    fn retrograde_orbits_are_met_on_retrograde_arcs() {
        let link = "geometry=spatial&arrive=rendezvous&depart=2031-05-17&from=orbit&from_orbit=1,0,175\
                    &to=orbit&to_orbit=1.5,0.1,175,20";
        assert_eq!(of(link, None).least.unwrap().direction, Direction::Retrograde);
    }
}
