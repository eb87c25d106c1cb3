//! The departures worth looking at: shortest flights, earliest arrivals, and what slipping from them costs.

use super::{Plan, Row};

/// Why a date is picked.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// Its flight is shorter than its neighbours'.
    Shortest,
    /// Its flight arrives before any other of the span.
    Earliest,
}

/// A date worth looking at.
#[derive(Clone, Debug, PartialEq)]
pub struct Pick {
    /// Which sail.
    pub sail: usize,
    /// Which date.
    pub date: usize,
    /// Why.
    pub kind: Kind,
    /// Whether it is the first or last date of the span: a better one may lie outside.
    pub at_edge: bool,
    /// The last date that arrives at most [`SAME_DAY_D`] later.
    pub leave_by: usize,
    /// What leaving later costs.
    pub slips: Vec<Slip>,
}

/// The cost of leaving later than picked.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Slip {
    /// How much later, d.
    pub slip_d: f64,
    /// How much later one arrives, d.
    pub arrive_later_d: f64,
    /// How much longer the flight takes, d.
    pub time_change_d: f64,
}

/// Arrivals this close count as the same.
const SAME_DAY_D: f64 = 1.0;

/// Slips told, in steps between dates.
const SLIPS: [usize; 4] = [1, 2, 4, 8];

/// Picks of every sail, by date; `rows` as [`super::gathered`] gives them.
pub fn picks(plan: &Plan, rows: &[Row]) -> Vec<Pick> {
    rows.chunk_by(|a, b| a.sail == b.sail).flat_map(|rows| of_sail(plan, rows)).collect()
}

fn of_sail(plan: &Plan, rows: &[Row]) -> Vec<Pick> {
    let times: Vec<f64> = rows
        .iter()
        .map(|row| plan.arrival_j2000_d(row).map_or(f64::INFINITY, |d| d - plan.departures_j2000_d[row.date]))
        .collect();
    let arrivals: Vec<f64> =
        rows.iter().map(|row| plan.arrival_j2000_d(row).unwrap_or(f64::INFINITY)).collect();
    let shorter_than = |k: usize, other: Option<usize>| {
        other.and_then(|other| times.get(other)).is_none_or(|other| times[k] < *other)
    };
    let is_shortest = |k: &usize| {
        times[*k].is_finite() && shorter_than(*k, k.checked_sub(1)) && shorter_than(*k, Some(k + 1))
    };
    let shortest = (0..rows.len()).filter(is_shortest).map(|k| (k, Kind::Shortest));
    let earliest = (0..rows.len())
        .filter(|k| arrivals[*k].is_finite())
        .min_by(|a, b| arrivals[*a].total_cmp(&arrivals[*b]))
        .map(|k| (k, Kind::Earliest));
    let mut found: Vec<Pick> = shortest
        .chain(earliest)
        .map(|(k, kind)| Pick {
            sail: rows[k].sail,
            date: rows[k].date,
            kind,
            at_edge: k == 0 || k + 1 == rows.len(),
            leave_by: rows[leave_by(&arrivals, k)].date,
            slips: slips(plan, rows, &times, k),
        })
        .collect();
    found.sort_by_key(|pick| (pick.date, pick.kind == Kind::Earliest));
    found
}

/// The end of the unbroken run of dates after `k` that arrive on about the same day.
fn leave_by(arrivals: &[f64], k: usize) -> usize {
    let same_day = arrivals[k..].iter().take_while(|arrival| **arrival <= arrivals[k] + SAME_DAY_D);
    k + same_day.count() - 1
}

fn slips(plan: &Plan, rows: &[Row], times: &[f64], k: usize) -> Vec<Slip> {
    let to = |steps: usize| {
        let later = rows.get(k + steps)?;
        let slip_d = plan.departures_j2000_d[later.date] - plan.departures_j2000_d[rows[k].date];
        let time_change_d = times[k + steps] - times[k];
        let known = time_change_d.is_finite();
        known.then_some(Slip { slip_d, arrive_later_d: slip_d + time_change_d, time_change_d })
    };
    SLIPS.into_iter().filter_map(to).collect()
}
