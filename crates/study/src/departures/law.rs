//! Leaving later never arrives earlier: where that law is broken, a better flight was missed.
//!
//! A sail may always wait edge-on on the departure orbit, so any flight of a later date is open to an earlier one. A
//! broken law therefore names the dates to evaluate again, and the flight to march there.

use super::{Item, Plan, Row, Seed};

/// Whether a date's arrival keeps the law against every later date.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Law {
    /// Kept.
    Kept,
    /// Some later departure arrives earlier: a better flight exists than the one found.
    Broken,
    /// No flight to test.
    NotTested,
}

/// How far a waiting craft may fall behind the departure body, in parts of the wait: the planet's own mass and the
/// drift of its elements, which the craft does not feel (Jupiter's mass alone gives half of this).
const DRIFT: f64 = 1e-3;

/// Rounding of arrivals, d.
const ROUNDING_D: f64 = 1e-6;

impl Law {
    /// The law's verdict on each of one sail's rows, which are in order of date.
    pub fn of_sail(plan: &Plan, rows: &[Row]) -> Vec<Law> {
        let mut laws = vec![Law::NotTested; rows.len()];
        let mut earliest_later = f64::INFINITY;
        for (law, row) in laws.iter_mut().zip(rows).rev() {
            let Some(arrival_d) = plan.arrival_j2000_d(row) else { continue };
            let allowed = arrival_d + DRIFT * plan.departures_j2000_d[row.date];
            *law = if allowed > earliest_later + ROUNDING_D { Law::Broken } else { Law::Kept };
            earliest_later = earliest_later.min(allowed);
        }
        laws
    }
}

/// Items that evaluate again what breaks the law or has no flight, with what is known at and beside those dates;
/// `rows` as [`super::gathered`] gives them.
pub fn mends(plan: &Plan, rows: &[Row]) -> Vec<Item> {
    let mut items = Vec::new();
    for rows in rows.chunk_by(|a, b| a.sail == b.sail) {
        let laws = Law::of_sail(plan, rows);
        let mut first = 0;
        for run in laws.chunk_by(|a, b| (*a == Law::Kept) == (*b == Law::Kept)) {
            let end = first + run.len();
            if run[0] != Law::Kept {
                let beside = &rows[first.saturating_sub(1)..(end + 1).min(rows.len())];
                let seeds: Vec<Seed> =
                    beside.iter().filter_map(|row| row.best.map(|best| best.flight)).collect();
                items.push(Item {
                    sail: rows[0].sail,
                    first: rows[first].date,
                    end: rows[end - 1].date + 1,
                    seeds: Some(seeds),
                });
            }
            first = end;
        }
    }
    items
}
