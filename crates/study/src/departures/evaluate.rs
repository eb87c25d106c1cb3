//! One item: marching along its dates from a cold start, or from flights already known.

use optimal::spatial::calendar::Branch;
use optimal::spatial::ends::{Ends, ordered};
use optimal::spatial::launch::Care;
use optimal::spatial::polish::{Conditions, Flight};
use optimal::spatial::sweep::{self, Found, Route};
use orbits::units;

use super::{Best, Item, Plan, Row, Seed};

/// Evaluates one item: a row for each of its dates.
pub fn evaluate(plan: &Plan, item: &Item) -> Vec<Row> {
    // Times count from the item's first date: small numbers keep their digits.
    let reference_d = plan.departures_j2000_d[item.first];
    let day = |time: f64| reference_d + units::days(time);
    let departure = |date: usize| units::canonical_time(plan.departures_j2000_d[date] - reference_d);
    let from = |time: f64| plan.from.state(day(time)).ok().map(|body| ordered(&body));
    let to = |time: f64| plan.to.state(day(time)).ok().map(|body| ordered(&body));
    let ends = |time: f64| Ends::new(plan.from.elements(day(time)), plan.to.elements(day(time)));
    let conditions = Conditions {
        lightness: plan.sails[item.sail],
        from: &from,
        to: &to,
        target_axis: plan.to.elements(reference_d).semi_major_axis,
    };
    let route = Route { conditions, ends: &ends };
    let found = match &item.seeds {
        None => sweep::span(&route, &(item.first..item.end).map(departure).collect::<Vec<_>>()),
        Some(seeds) => mended(&route, item, seeds, &departure),
    };
    let rows = (item.first..item.end).zip(&found).map(|(date, found)| Row {
        sail: item.sail,
        date,
        branches: found.len(),
        best: sweep::best(&route.conditions, found).map(|settled| Best {
            verdict: settled.evidence.verdict(),
            flight: Seed { date, costate: settled.flight.costate.into(), time: settled.flight.time },
            swept: settled.swept,
        }),
    });
    rows.collect()
}

/// Every branch that a careful cold start finds, and those that the seeds lead to, forwards and backwards.
fn mended(route: &Route<'_>, item: &Item, seeds: &[Seed], departure: &dyn Fn(usize) -> f64) -> Vec<Found> {
    let mut all: Vec<Found> =
        (item.first..item.end).map(|date| sweep::cold_with(route, departure(date), &Care::CAREFUL)).collect();
    for seed in seeds {
        let start = departure(seed.date);
        let flight = Flight {
            costate: seed.costate.into(),
            departure: start,
            time: seed.time,
            arrival: start + seed.time,
        };
        let Some(branch) = Branch::taken_up(&route.conditions, &flight) else { continue };
        let forwards: Vec<usize> = (item.first.max(seed.date)..item.end).collect();
        let backwards: Vec<usize> = (item.first..item.end.min(seed.date + 1)).rev().collect();
        for dates in [forwards, backwards] {
            let mut near = vec![branch.clone()];
            for date in dates {
                near = sweep::marched(&route.conditions, &near, departure(date));
                sweep::merge(&mut all[date - item.first], near.iter().cloned());
            }
        }
    }
    all
}
