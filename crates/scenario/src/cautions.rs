//! What the reader must know before relying on this report: only what this very flight brings up.

use crate::place::circle_au;
use crate::report::{Craft, Flight};
use crate::schema::{Film, Scenario};
use crate::words::{grouped, short};

/// Closer to the Sun than this the point-source Sun and two-body motion are poor, au.
const CLOSE_AU: f64 = 0.15;

/// Polyimide service limit, K (McInnes 1999; Dachwald 2005; from memory).
const POLYIMIDE_K: f64 = 520.0;

/// Accelerations and radii over which answers were checked.
const CHECKED_MM_S2: (f64, f64) = (0.05, 6.0);
const CHECKED_AU: (f64, f64) = (0.2, 40.0);

/// Cautions for one report, most important first.
pub(crate) fn cautions(scenario: &Scenario, craft: &Craft, flight: &Flight) -> Vec<String> {
    let mut cautions = Vec::new();
    if let Some(nearest) = flight.sun_distance_min_au.filter(|&r| r < CLOSE_AU) {
        cautions.push(format!(
            "The flight passes the Sun at {} au, closer than {CLOSE_AU} au: a point-source Sun and two-body motion \
             are poor models there.",
            short(nearest)
        ));
    }
    if let Some(hottest) = flight.film_temp_max_k.filter(|&t| t > POLYIMIDE_K) {
        cautions.push(format!(
            "The film would reach {} K; polyimide films are kept below about {POLYIMIDE_K} K.",
            grouped(hottest, 0)
        ));
    }
    if scenario.film == Film::Ideal && flight.film_temp_max_k.is_some() {
        cautions.push(
            "An ideal mirror absorbs nothing: film temperatures are those of an aluminised film with chromium back."
                .into(),
        );
    }
    let (low, high) = CHECKED_MM_S2;
    if !(low..=high).contains(&craft.ac_mm_s2) {
        cautions.push(format!(
            "{} mm/s\u{b2} lies outside the {low} to {high} mm/s\u{b2} over which answers were checked.",
            short(craft.ac_mm_s2)
        ));
    }
    let (near, far) = CHECKED_AU;
    let ratio = circle_au(&scenario.to) / circle_au(&scenario.from);
    if !(near..=far).contains(&ratio) {
        cautions.push(format!(
            "The target orbit is {} times the start orbit, outside the {near} to {far} times that were checked.",
            short(ratio)
        ));
    }
    if flight.arrive.as_deref().is_some_and(|date| date > "2051") {
        cautions.push(
            "Arrival after 2050: the planets\u{2019} elements are extrapolated beyond the years they were fitted to."
                .into(),
        );
    }
    if craft.delivered_kg.is_some_and(|kg| kg <= 0.0) {
        cautions.push("The sail assembly alone is heavier than the total mass: no such craft exists.".into());
    }
    cautions
}
