//! Items and points as they cross between workers: plain data, a mirror of those in `study`, which knows no serde.

use std::f64::consts::TAU;

use ::study::departures;
use optimal::certificate::Verdict;
use orbits::units;
use serde::{Deserialize, Serialize};

use crate::report::Status;

/// Consecutive dates of one sail, evaluated together.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Item {
    /// Which sail, from 0.
    pub sail: usize,
    /// First date, from 0.
    pub first: usize,
    /// One past the last date.
    pub end: usize,
    /// Flights to march from; null in the first evaluation.
    pub seeds: Option<Vec<Seed>>,
}

/// A flight known at a date.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Seed {
    /// Which date, from 0.
    pub date: usize,
    /// First costate: position, then primer; unit length together.
    pub costate: [f64; 6],
    /// Flight time, canonical (58.13 d).
    pub time: f64,
}

/// One evaluated point of a study.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Point {
    /// Which sail, from 0.
    pub sail: usize,
    /// Which date, from 0.
    pub date: usize,
    /// Converged, approximate or not converged.
    pub status: Status,
    /// Flight time, d.
    pub time_d: Option<f64>,
    /// Heliocentric angle swept, in turns.
    pub revolutions: Option<f64>,
    /// Extremals found; all but the best traced, not proven.
    pub branches: usize,
    /// The best flight, to march from.
    pub seed: Option<Seed>,
}

impl From<departures::Seed> for Seed {
    fn from(departures::Seed { date, costate, time }: departures::Seed) -> Self {
        Seed { date, costate, time }
    }
}

impl From<Seed> for departures::Seed {
    fn from(Seed { date, costate, time }: Seed) -> Self {
        departures::Seed { date, costate, time }
    }
}

impl From<departures::Item> for Item {
    fn from(departures::Item { sail, first, end, seeds }: departures::Item) -> Self {
        Item { sail, first, end, seeds: seeds.map(|seeds| seeds.into_iter().map(Seed::from).collect()) }
    }
}

impl From<Item> for departures::Item {
    fn from(Item { sail, first, end, seeds }: Item) -> Self {
        let seeds = seeds.map(|seeds| seeds.into_iter().map(departures::Seed::from).collect());
        departures::Item { sail, first, end, seeds }
    }
}

impl From<&departures::Row> for Point {
    fn from(row: &departures::Row) -> Self {
        let status = row.best.map_or(Status::NotConverged, |best| match best.verdict {
            Verdict::Converged => Status::Converged,
            Verdict::Approximate => Status::Approximate,
            Verdict::NotConverged => Status::NotConverged,
        });
        let flight = row.best.map(|best| best.flight);
        Point {
            sail: row.sail,
            date: row.date,
            status,
            time_d: flight.map(|flight| units::days(flight.time)),
            revolutions: row.best.map(|best| best.swept / TAU),
            branches: row.branches,
            seed: flight.map(Seed::from),
        }
    }
}

impl From<&Point> for departures::Row {
    fn from(point: &Point) -> Self {
        let verdict = match point.status {
            Status::Converged => Verdict::Converged,
            Status::Approximate => Verdict::Approximate,
            _ => Verdict::NotConverged,
        };
        let swept = point.revolutions.map_or(f64::NAN, |turns| turns * TAU);
        let best = point.seed.map(|seed| departures::Best { verdict, flight: seed.into(), swept });
        departures::Row { sail: point.sail, date: point.date, branches: point.branches, best }
    }
}
