//! The cheapest transfer of two impulses between two moving bodies, within a span of dates and flight times.
//!
//! Every flight between two instants is an arc of [`crate::lambert`]. A coarse grid over departure and flight time
//! (and over the place on the target's orbit, where any place will do) finds the basins, one grid for each
//! direction and number of revolutions; a simplex search descends into the best of them. Nothing is random: the
//! same question gives the same digits.

mod search;
mod simplex;

use std::f64::consts::TAU;

use nalgebra::Vector3;

use crate::argument::{BadArgument, not_negative};
use crate::ephemeris::Traveller;
use crate::escape::{Burn, Excess};
use crate::impulsive::Impulses;
use crate::lambert::{Arc, Direction, Transfer, arcs};
use crate::two_body::State;
use crate::units::{canonical_time, km_per_s};

/// What the impulses are counted against.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Count {
    /// Both bodies massless: the sum of both excess speeds.
    Heliocentric,
    /// From where the launch left the craft to where it may end.
    SameEnds(SameEnds),
}

/// A start outside the departure body's gravity with some excess, and an end with no more than some excess.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SameEnds {
    /// Where the first burn happens; `None`: far from the body, at full price.
    pub burn: Option<Burn>,
    /// Excess speed that the launch has already given, km/s.
    pub available_km_s: f64,
    /// Excess speed that may be left at arrival, km/s: 0 matched, infinite for passing at any speed.
    pub allowed_km_s: f64,
}

impl Count {
    /// The two impulses for these excess speeds, km/s.
    ///
    /// # Errors
    /// [`BadArgument`] when an excess speed is not a number from zero up (the allowed one may be infinite).
    pub fn impulses(
        &self,
        depart_excess_km_s: f64,
        arrive_excess_km_s: f64,
    ) -> Result<Impulses, BadArgument> {
        let needed_km_s = not_negative("depart_excess_km_s", depart_excess_km_s)?;
        let left_km_s = not_negative("arrive_excess_km_s", arrive_excess_km_s)?;
        let Count::SameEnds(ends) = self else {
            return Ok(Impulses { depart_km_s: needed_km_s, arrive_km_s: left_km_s });
        };
        let available_km_s = not_negative("available_km_s", ends.available_km_s)?;
        if ends.allowed_km_s.is_nan() || ends.allowed_km_s < 0.0 {
            let rule = "must be a number from zero up, or infinite";
            return Err(BadArgument { name: "allowed_km_s", value: ends.allowed_km_s, rule });
        }
        Ok(Impulses {
            depart_km_s: match ends.burn {
                Some(burn) => burn.on_hyperbola_km_s(Excess { available_km_s, needed_km_s })?,
                None => (needed_km_s - available_km_s).max(0.0),
            },
            arrive_km_s: (left_km_s - ends.allowed_km_s).max(0.0),
        })
    }
}

/// What counts as having arrived.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Goal {
    /// The body itself, where it is then.
    Body,
    /// Any place on its orbit, as the orbit is at the first departure of the span.
    Orbit,
}

/// Between whom, and how it is counted.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Question {
    /// The body that the transfer leaves.
    pub from: Traveller,
    /// The body that it goes to.
    pub to: Traveller,
    /// What counts as having arrived.
    pub goal: Goal,
    /// What is minimised.
    pub count: Count,
}

/// Which departures and flight times are searched, bounds included. Equal bounds fix a date or a time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Span {
    /// First departure, days of TDB since J2000.
    pub first_j2000_d: f64,
    /// Last departure, days of TDB since J2000.
    pub last_j2000_d: f64,
    /// Shortest flight, d.
    pub shortest_d: f64,
    /// Longest flight, d.
    pub longest_d: f64,
    /// Last arrival, days of TDB since J2000; infinite for none.
    pub arrive_by_j2000_d: f64,
}

impl Span {
    /// One departure and one flight time.
    pub fn dates(depart_j2000_d: f64, time_d: f64) -> Span {
        Span {
            first_j2000_d: depart_j2000_d,
            last_j2000_d: depart_j2000_d,
            shortest_d: time_d,
            longest_d: time_d,
            arrive_by_j2000_d: f64::INFINITY,
        }
    }

    fn checked(&self) -> Result<(), BadArgument> {
        let rule = "must be a finite number, the first before the last and flight times above zero";
        let check = |name, value: f64, holds: bool| {
            if value.is_finite() && holds { Ok(()) } else { Err(BadArgument { name, value, rule }) }
        };
        check("first_j2000_d", self.first_j2000_d, true)?;
        check("last_j2000_d", self.last_j2000_d, self.last_j2000_d >= self.first_j2000_d)?;
        check("shortest_d", self.shortest_d, self.shortest_d > 0.0)?;
        check("longest_d", self.longest_d, self.longest_d >= self.shortest_d)?;
        if self.arrive_by_j2000_d.is_nan() {
            return Err(BadArgument { name: "arrive_by_j2000_d", value: f64::NAN, rule });
        }
        Ok(())
    }
}

/// A transfer of two impulses.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TwoImpulse {
    /// Departure, days of TDB since J2000.
    pub depart_j2000_d: f64,
    /// Flight time, d.
    pub time_d: f64,
    /// Velocity against the departure body after the first impulse, km/s, ecliptic of J2000.
    pub depart_excess_km_s: Vector3<f64>,
    /// Velocity against the target before the second impulse, km/s, ecliptic of J2000.
    pub arrive_excess_km_s: Vector3<f64>,
    /// Both impulses, counted as asked.
    pub impulses: Impulses,
    /// Whole revolutions made.
    pub whole_revolutions: u32,
    /// Heliocentric angle swept / 360 deg.
    pub revolutions: f64,
    /// Which way round.
    pub direction: Direction,
    /// Heliocentric state after the first impulse, canonical units: the arc to draw.
    pub start: State,
    /// Heliocentric state before the second impulse, canonical units.
    pub end: State,
}

impl TwoImpulse {
    /// Arrival, days of TDB since J2000.
    pub fn arrive_j2000_d(&self) -> f64 {
        self.depart_j2000_d + self.time_d
    }

    /// Square of the departure excess speed, km^2/s^2.
    pub fn c3_km2_s2(&self) -> f64 {
        self.depart_excess_km_s.norm_squared()
    }
}

/// The transfer with the least sum of impulses within the span; `None` when no instant of it has one (bodies that
/// touch, or a last arrival before the first possible one).
///
/// Prograde arcs (counter-clockwise from ecliptic north) of every number of revolutions that fits; retrograde ones
/// too where one of the orbits is retrograde. To any place on an orbit ([`Goal::Orbit`]) whole revolutions add nothing
/// but time, and are tried only where short flights are excluded.
///
/// A search, not a proof: the best of the basins that a grid of a twenty-fourth of each body's revolution, or a
/// forty-eighth of the flight times, shows. The grid ends at some 6 000 points; where the target goes round a hundred times within the span of flight times
/// (Neptune to Mercury) it is too coarse, and the impulse found can be a few per cent above the least.
///
/// # Units
/// Instants and times in days; speeds come out in km/s.
///
/// # Errors
/// [`BadArgument`] names what is impossible: a span without length or order, a count with a negative speed, a body
/// that is nowhere.
///
/// # References
/// R. H. Battin, An Introduction to the Mathematics and Methods of Astrodynamics (1999), chapter 6, for charts of
/// impulse over departure and flight time (from memory).
///
/// # Example
/// ```
/// use orbits::ephemeris::Traveller;
/// use orbits::epochs::start_of_day;
/// use orbits::planets::Planet;
/// use orbits::two_impulse::{Count, Goal, Question, Span, least};
/// let question = Question {
///     from: Traveller::Planet(Planet::Earth),
///     to: Traveller::Planet(Planet::Mars),
///     goal: Goal::Body,
///     count: Count::Heliocentric,
/// };
/// let first_j2000_d = start_of_day(2033, 1, 1).expect("a day of the calendar");
/// let span = Span {
///     first_j2000_d,
///     last_j2000_d: first_j2000_d + 780.0,
///     shortest_d: 80.0,
///     longest_d: 650.0,
///     arrive_by_j2000_d: f64::INFINITY,
/// };
/// let found = least(&question, &span)?.expect("Mars can be reached");
/// // Between inclined ellipses the opportunity of April 2033 costs more than Hohmann's 5.6 km/s between circles.
/// assert!((6.2..6.5).contains(&found.impulses.total_km_s()));
/// # Ok::<(), orbits::argument::BadArgument>(())
/// ```
pub fn least(question: &Question, span: &Span) -> Result<Option<TwoImpulse>, BadArgument> {
    span.checked()?;
    question.count.impulses(0.0, 0.0)?;
    question.from.state(span.first_j2000_d)?;
    question.to.state(span.first_j2000_d)?;
    Ok(search::search(question, span))
}

/// Both impulses of an arc between two bodies, km/s together; infinite where they cannot be counted.
fn sum_km_s(question: &Question, (from, to): (&State, &State), arc: &Arc) -> f64 {
    let depart = km_per_s((arc.depart_velocity - from.velocity).norm());
    let arrive = km_per_s((arc.arrive_velocity - to.velocity).norm());
    question.count.impulses(depart, arrive).map_or(f64::INFINITY, |impulses| impulses.total_km_s())
}

/// An arc with the bodies at its ends.
struct Flown {
    depart_j2000_d: f64,
    time_d: f64,
    from: State,
    to: State,
    arc: Arc,
    sum_km_s: f64,
}

impl Flown {
    /// The arc as a transfer.
    fn told(&self, question: &Question, direction: Direction) -> Option<TwoImpulse> {
        let Flown { depart_j2000_d, time_d, from, to, arc, .. } = *self;
        let depart_excess_km_s = (arc.depart_velocity - from.velocity).map(km_per_s);
        let arrive_excess_km_s = (arc.arrive_velocity - to.velocity).map(km_per_s);
        let impulses = question.count.impulses(depart_excess_km_s.norm(), arrive_excess_km_s.norm()).ok()?;
        let normal = from.position.cross(&arc.depart_velocity).try_normalize(0.0)?;
        let ahead = normal.cross(&from.position);
        let swept = to.position.dot(&ahead).atan2(to.position.dot(&from.position)).rem_euclid(TAU);
        Some(TwoImpulse {
            depart_j2000_d,
            time_d,
            depart_excess_km_s,
            arrive_excess_km_s,
            impulses,
            whole_revolutions: arc.revolutions,
            revolutions: f64::from(arc.revolutions) + swept / TAU,
            direction,
            start: State { position: from.position, velocity: arc.depart_velocity },
            end: State { position: to.position, velocity: arc.arrive_velocity },
        })
    }
}

/// The question of Lambert between two states, `revolutions_max` whole revolutions at most.
fn lambert_between(
    (from, to): (&State, &State),
    time_d: f64,
    direction: Direction,
    revolutions_max: u32,
) -> Vec<Arc> {
    let question = Transfer {
        gm: 1.0,
        from: from.position,
        to: to.position,
        time: canonical_time(time_d),
        direction,
        pole: Vector3::z(),
        revolutions_max,
    };
    // Places that coincide have no arc; their neighbours have.
    arcs(&question).unwrap_or_default()
}
