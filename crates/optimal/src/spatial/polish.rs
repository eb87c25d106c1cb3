//! Last digits: Newton on the exact conditions, with the target where the ephemeris says.

use nalgebra::{SMatrix, SVector, Vector6};
use numerics::newton::{Equations, Goal, Linearised, Solved, newton};

use super::ends::{State, coasting_acceleration, coasting_rate};
use super::terminal::{Terminal, fly};
use crate::certificate::REFLY_TOLERANCE;

/// A body or an orbit as polishing and proof need it: where a point of it is at a time (canonical, from the reference
/// instant).
pub type Place<'a> = dyn Fn(f64) -> Option<State> + 'a;

/// An extremal to polish.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Flight {
    /// First costate (unit vector).
    pub costate: Vector6<f64>,
    /// Departure after the reference instant (place on the start orbit, where the departure point is free).
    pub departure: f64,
    /// Flight time.
    pub time: f64,
    /// Time at which a body on the target orbit is where the flight ends; `departure + time` for a rendezvous.
    pub arrival: f64,
}

impl Flight {
    pub(super) fn moved(&self, costate: Vector6<f64>, departure: f64, time: f64, arrival: f64) -> Flight {
        Flight {
            costate: (self.costate + costate).normalize(),
            departure: self.departure + departure,
            time: self.time + time,
            arrival: self.arrival + arrival,
        }
    }
}

/// Conditions of one kind of flight.
#[derive(Clone, Copy)]
pub struct Conditions<'a> {
    /// Lightness number.
    pub lightness: f64,
    /// Where the departure body is.
    pub from: &'a Place<'a>,
    /// Where the target body is.
    pub to: &'a Place<'a>,
    /// Size of the target orbit, which scales the residuals.
    pub target_axis: f64,
}

/// How exactly to polish and to prove.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Exactness {
    /// Tolerance of the polish.
    pub polish: f64,
    /// Tolerance of the flight that proves: tighter than the polish, or it would prove nothing.
    pub prove: f64,
}

impl Exactness {
    /// For nearly every flight.
    pub const USUAL: Exactness = Exactness { polish: 1e-12, prove: REFLY_TOLERANCE };
    /// For flights that wait, nearly edge-on, on the departure orbit: their end moves by up to 1e7 times a change of
    /// the first costate, so the last digits of a double are needed.
    pub const UTMOST: Exactness = Exactness { polish: 3e-14, prove: 3e-15 };
}

/// What the polish's residuals must reach.
const RESIDUAL: f64 = 1e-10;

impl Conditions<'_> {
    fn terminal(&self, flight: &Flight, tolerance: f64) -> Option<(Terminal, State, State)> {
        let start = (self.from)(flight.departure)?;
        let target = (self.to)(flight.arrival)?;
        let rate = coasting_rate(&start);
        let terminal = fly(self.lightness, &start, &rate, &flight.costate, flight.time, tolerance)?;
        Some((terminal, start, target))
    }

    fn scales(&self) -> [f64; 6] {
        let (length, speed) = (1.0 / self.target_axis, self.target_axis.sqrt());
        [length, length, length, speed, speed, speed]
    }
}

/// Rows that every kind shares: six mismatches and the sphere, with columns for costate and time.
fn common<const N: usize>(
    conditions: &Conditions<'_>,
    flight: &Flight,
    terminal: &Terminal,
    target: &State,
) -> (SVector<f64, N>, SMatrix<f64, N, N>) {
    let scales = conditions.scales();
    let mut value = SVector::<f64, N>::zeros();
    let mut j = SMatrix::<f64, N, N>::zeros();
    for i in 0..6 {
        value[i] = (terminal.end[i] - target[i]) * scales[i];
        for k in 0..6 {
            j[(i, k)] = terminal.by_costate[(i, k)] * scales[i];
        }
        j[(i, 6)] = terminal.rates[i] * scales[i];
    }
    for k in 0..6 {
        j[(6, k)] = flight.costate[k];
    }
    (value, j)
}

/// Meeting a moving body at `departure + time`, departure given: unknowns costate and time.
struct Meeting<'a>(&'a Conditions<'a>, f64);

impl Equations<7> for Meeting<'_> {
    type Point = Flight;

    fn linearised(&self, flight: &Flight) -> Option<Linearised<7>> {
        let (terminal, _, target) = self.0.terminal(flight, self.1)?;
        let (value, mut j) = common(self.0, flight, &terminal, &target);
        let (scales, along) = (self.0.scales(), coasting_rate(&target));
        for i in 0..6 {
            j[(i, 6)] -= along[i] * scales[i];
        }
        Some((value, j))
    }

    fn residuals(&self, flight: &Flight) -> Option<SVector<f64, 7>> {
        self.linearised(flight).map(|(value, _)| value)
    }

    fn moved(&self, flight: &Flight, step: &SVector<f64, 7>) -> Flight {
        flight.moved(step.fixed_rows::<6>(0).into_owned(), 0.0, step[6], step[6])
    }

    fn trusted_fraction(&self, flight: &Flight, step: &SVector<f64, 7>) -> f64 {
        trusted(step.fixed_rows::<6>(0).norm(), step[6].abs() / flight.time)
    }
}

pub(super) fn trusted(turn: f64, stretch: f64) -> f64 {
    (0.4 / turn).min(0.2 / stretch).min(1.0)
}

/// Ending anywhere on the target orbit, departure given: unknowns costate, time, arrival place.
struct OpenArrival<'a>(&'a Conditions<'a>, f64);

/// The row l . (rate of the target) = 0 at arrival: its value, and its derivatives by costate, time and arrival place.
fn arrival_row(terminal: &Terminal, target: &State) -> (f64, SVector<f64, 8>) {
    let (along, bend) = (coasting_rate(target), coasting_acceleration(target));
    let mut row = SVector::<f64, 8>::zeros();
    let mut value = 0.0;
    for i in 0..6 {
        value += terminal.end[6 + i] * along[i];
        for k in 0..6 {
            row[k] += terminal.by_costate[(6 + i, k)] * along[i];
        }
        row[6] += terminal.rates[6 + i] * along[i];
        row[7] += terminal.end[6 + i] * bend[i];
    }
    (value, row)
}

impl Equations<8> for OpenArrival<'_> {
    type Point = Flight;

    fn linearised(&self, flight: &Flight) -> Option<Linearised<8>> {
        let (terminal, _, target) = self.0.terminal(flight, self.1)?;
        let (mut value, mut j) = common::<8>(self.0, flight, &terminal, &target);
        let (scales, along) = (self.0.scales(), coasting_rate(&target));
        for i in 0..6 {
            j[(i, 7)] = -along[i] * scales[i];
        }
        let (condition, row) = arrival_row(&terminal, &target);
        value[7] = condition;
        j.row_mut(7).copy_from(&row.transpose());
        Some((value, j))
    }

    fn residuals(&self, flight: &Flight) -> Option<SVector<f64, 8>> {
        self.linearised(flight).map(|(value, _)| value)
    }

    fn moved(&self, flight: &Flight, step: &SVector<f64, 8>) -> Flight {
        flight.moved(step.fixed_rows::<6>(0).into_owned(), 0.0, step[6], step[7])
    }

    fn trusted_fraction(&self, flight: &Flight, step: &SVector<f64, 8>) -> f64 {
        trusted(step.fixed_rows::<6>(0).norm(), step[6].abs() / flight.time)
    }
}

/// Both ends anywhere on their orbits: unknowns costate, time, arrival and departure place.
struct OpenEnds<'a>(&'a Conditions<'a>, f64);

impl Equations<9> for OpenEnds<'_> {
    type Point = Flight;

    fn linearised(&self, flight: &Flight) -> Option<Linearised<9>> {
        let (terminal, start, target) = self.0.terminal(flight, self.1)?;
        let (mut value, mut j) = common::<9>(self.0, flight, &terminal, &target);
        let (scales, along) = (self.0.scales(), coasting_rate(&target));
        for i in 0..6 {
            j[(i, 7)] = -along[i] * scales[i];
            j[(i, 8)] = terminal.by_start[i] * scales[i];
        }
        let (condition, row) = arrival_row(&terminal, &target);
        value[7] = condition;
        j.fixed_view_mut::<1, 8>(7, 0).copy_from(&row.transpose());
        let (leaving, bend) = (coasting_rate(&start), coasting_acceleration(&start));
        for i in 0..6 {
            j[(7, 8)] += terminal.by_start[6 + i] * along[i];
            value[8] += flight.costate[i] * leaving[i];
            j[(8, i)] = leaving[i];
            j[(8, 8)] += flight.costate[i] * bend[i];
        }
        Some((value, j))
    }

    fn residuals(&self, flight: &Flight) -> Option<SVector<f64, 9>> {
        self.linearised(flight).map(|(value, _)| value)
    }

    fn moved(&self, flight: &Flight, step: &SVector<f64, 9>) -> Flight {
        flight.moved(step.fixed_rows::<6>(0).into_owned(), step[8], step[6], step[7])
    }

    fn trusted_fraction(&self, flight: &Flight, step: &SVector<f64, 9>) -> f64 {
        trusted(step.fixed_rows::<6>(0).norm(), step[6].abs() / flight.time)
    }
}

/// Which ends are free.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// Meets the body itself; departure given.
    Meeting,
    /// Ends anywhere on the target orbit; departure given.
    OpenArrival,
    /// Leaves and ends anywhere on the two orbits.
    OpenEnds,
}

/// Polishes `flight`: first roughly, where Newton still has to find its way, then at `tolerance`.
///
/// `None` when it leaves the flight it started from: a polish must not wander to another branch.
pub fn polish(kind: Kind, conditions: &Conditions<'_>, flight: Flight, tolerance: f64) -> Option<Flight> {
    let found = sought(kind, conditions, flight, tolerance)?;
    let near = (found.time / flight.time - 1.0).abs() < 0.05 && found.costate.dot(&flight.costate) > 0.95;
    near.then_some(found)
}

/// Newton from `start` to whatever flight it leads to; `None` when it leads to none.
pub fn sought(kind: Kind, conditions: &Conditions<'_>, start: Flight, tolerance: f64) -> Option<Flight> {
    const ROUGH: (f64, f64) = (1e-9, 1e-6);
    let rough = solved(kind, conditions, start, ROUGH, 20)?;
    let fine = solved(kind, conditions, rough.point, (tolerance, RESIDUAL), 6)?;
    fine.converged.then_some(fine.point)
}

fn solved(
    kind: Kind,
    conditions: &Conditions<'_>,
    flight: Flight,
    (tolerance, residual): (f64, f64),
    passes: usize,
) -> Option<Solved<Flight>> {
    let goal = Goal { residual, passes };
    let solved = match kind {
        Kind::Meeting => newton(&Meeting(conditions, tolerance), flight, &goal),
        Kind::OpenArrival => newton(&OpenArrival(conditions, tolerance), flight, &goal),
        Kind::OpenEnds => newton(&OpenEnds(conditions, tolerance), flight, &goal),
    };
    solved.filter(|x| x.residual <= residual.max(1e-9))
}
