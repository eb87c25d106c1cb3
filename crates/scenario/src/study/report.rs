//! The study's report: an interface that outside scripts rely on, like the report of a flight.
//!
//! Fields may be added, never renamed or given another unit within link version 1. Unknown values are null.

use serde::{Deserialize, Serialize};

use crate::report::{Program, Status};

/// A whole study.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct StudyReport {
    /// Which study: `dates` or `map`.
    pub study: String,
    /// The canonical link that asks it.
    pub link: String,
    /// What computed it.
    pub program: Program,
    /// What varies: departure dates first, they vary fastest along the rows.
    pub axes: Vec<Axis>,
    /// A row for every point, by sail, then by date.
    pub rows: Vec<StudyRow>,
    /// Departures worth looking at.
    pub best: Vec<Pick>,
    /// What the reader must know, one sentence each.
    pub notes: Vec<String>,
}

/// What varies.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Axis {
    /// Field of the rows that holds it.
    pub field: String,
    /// Name for people.
    pub label: String,
    /// Unit; empty where there is none.
    pub unit: String,
    /// Its values, in order.
    pub values: Vec<AxisValue>,
}

/// A value of an axis.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(untagged)]
pub enum AxisValue {
    /// A number.
    Number(f64),
    /// A date.
    Text(String),
}

/// One flight of a study.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct StudyRow {
    /// Departure date, ISO, 0 h TDB.
    pub depart: String,
    /// Characteristic acceleration, mm/s^2.
    pub ac_mm_s2: f64,
    /// Sail area, m^2, where it is known.
    pub area_m2: Option<f64>,
    /// Converged (re-flown), approximate or not converged.
    pub status: Status,
    /// Flight time, d.
    pub time_d: Option<f64>,
    /// Arrival, ISO, TDB.
    pub arrive: Option<String>,
    /// Heliocentric angle swept, in turns.
    pub revolutions: Option<f64>,
    /// Extremals found; all but the best traced, not proven.
    pub branches: usize,
    /// Whether the arrival keeps its law.
    pub law: LawMark,
    /// The link that opens this flight.
    pub link: String,
}

/// Leaving later never arrives earlier.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum LawMark {
    /// Kept against every later date.
    Kept,
    /// A later departure arrives earlier, so a better flight exists than the one found.
    Broken,
    /// No flight to test.
    NotTested,
}

/// Why a departure is worth looking at.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Kind {
    /// Its flight is shorter than those of the dates beside it.
    Shortest,
    /// Its flight arrives before any other of the span.
    Earliest,
}

/// A departure worth looking at.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Pick {
    /// Why.
    pub kind: Kind,
    /// Departure date, ISO, 0 h TDB.
    pub depart: String,
    /// Characteristic acceleration, mm/s^2.
    pub ac_mm_s2: f64,
    /// Flight time, d.
    pub time_d: Option<f64>,
    /// Arrival, ISO, TDB.
    pub arrive: Option<String>,
    /// Whether it is the first or last date of the span: a better one may lie outside.
    pub at_edge: bool,
    /// The last date that arrives within a day of it.
    pub leave_by: String,
    /// What leaving later costs.
    pub slips: Vec<Slip>,
    /// The link that opens this flight.
    pub link: String,
}

/// The cost of leaving later.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Slip {
    /// How much later, d.
    pub slip_d: f64,
    /// How much later one arrives, d.
    pub arrive_later_d: f64,
    /// How much longer the flight takes, d.
    pub time_change_d: f64,
}
