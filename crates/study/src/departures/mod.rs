//! When to leave: flight time and arrival against departure date, for one sail or for several.
//!
//! A plan splits into items of fixed size, each evaluated by itself from a cold start, so that neither the number of
//! workers nor their order can change a digit. Dates at which the arrivals break their law are then evaluated again
//! ([`mends`]), from their neighbours.

mod evaluate;
mod law;
mod picks;

#[cfg(test)]
mod tests;

use std::f64::consts::TAU;

use optimal::certificate::Verdict;
use orbits::ephemeris::Traveller;
use orbits::hohmann::synodic_d;
use orbits::units;

pub use evaluate::evaluate;
pub use law::{Law, mends};
pub use picks::{Kind, Pick, Slip, picks};

/// What is asked: flights that meet a moving body.
#[derive(Clone, Debug, PartialEq)]
pub struct Plan {
    /// Body at departure.
    pub from: Traveller,
    /// Body to meet.
    pub to: Traveller,
    /// Departures, days since J2000, ascending.
    pub departures_j2000_d: Vec<f64>,
    /// Lightness numbers of the sails.
    pub sails: Vec<f64>,
}

/// Consecutive dates of one sail, evaluated together.
#[derive(Clone, Debug, PartialEq)]
pub struct Item {
    /// Which sail.
    pub sail: usize,
    /// First date.
    pub first: usize,
    /// One past the last date.
    pub end: usize,
    /// Flights to march from, at and beside these dates. `None`: the first evaluation, from a cold start alone.
    pub seeds: Option<Vec<Seed>>,
}

/// A flight known at a date. Canonical units.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Seed {
    /// Which date.
    pub date: usize,
    /// First costate, position before primer.
    pub costate: [f64; 6],
    /// Flight time.
    pub time: f64,
}

/// What was found for one sail on one date.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Row {
    /// Which sail.
    pub sail: usize,
    /// Which date.
    pub date: usize,
    /// Extremals found; all but the best are traced, not proven.
    pub branches: usize,
    /// The best flight, re-flown; `None` where no flight was confirmed.
    pub best: Option<Best>,
}

/// A flight with its proof's verdict.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Best {
    /// What re-flying it showed: converged or approximate.
    pub verdict: Verdict,
    /// The flight.
    pub flight: Seed,
    /// Heliocentric angle swept, rad.
    pub swept: f64,
}

/// Most dates of one item.
const DATES: usize = 12;

/// Longest item, in parts of the synodic period: over a quarter of it a better branch may appear that marching from
/// one date does not meet.
const SYNODIC_PART: f64 = 0.25;

impl Plan {
    /// The items of the first evaluation: they cover every date of every sail once.
    pub fn items(&self) -> Vec<Item> {
        let dates = self.departures_j2000_d.len();
        let length = self.dates_per_item();
        let starts = || (0..dates).step_by(length);
        let of_sail = |sail| {
            starts().map(move |first| Item { sail, first, end: (first + length).min(dates), seeds: None })
        };
        (0..self.sails.len()).flat_map(of_sail).collect()
    }

    /// Consecutive dates that one item holds.
    fn dates_per_item(&self) -> usize {
        let [first, .., last] = self.departures_j2000_d[..] else { return DATES };
        let step_d = (last - first) / (self.departures_j2000_d.len() - 1) as f64;
        let period_d = |body: &Traveller| units::days(TAU * body.elements(first).semi_major_axis.powf(1.5));
        let longest = synodic_d(period_d(&self.from), period_d(&self.to))
            .map_or(DATES, |synodic_d| (SYNODIC_PART * synodic_d / step_d) as usize);
        longest.clamp(1, DATES)
    }

    /// Arrival of a row's best flight, days since J2000.
    pub fn arrival_j2000_d(&self, row: &Row) -> Option<f64> {
        row.best.map(|best| self.departures_j2000_d[row.date] + units::days(best.flight.time))
    }
}

/// Sorts rows by sail and date, keeping the better of two for the same date.
pub fn gathered(rows: &[Row]) -> Vec<Row> {
    let mut rows = rows.to_vec();
    let rank = |row: &Row| {
        row.best.map_or((2, f64::INFINITY), |best| {
            (usize::from(best.verdict != Verdict::Converged), best.flight.time)
        })
    };
    rows.sort_by(|a, b| {
        let ((worse_a, time_a), (worse_b, time_b)) = (rank(a), rank(b));
        let places = (a.sail, a.date, worse_a).cmp(&(b.sail, b.date, worse_b));
        places.then(time_a.total_cmp(&time_b)).then(b.branches.cmp(&a.branches))
    });
    rows.dedup_by(|later, kept| (later.sail, later.date) == (kept.sail, kept.date));
    rows
}
