//! The search itself: a grid for each way round and number of revolutions, then a descent into the best basins.

use std::f64::consts::{PI, TAU};

use super::simplex::{Point, descend};
use super::{Flown, Goal, Question, Span, TwoImpulse, lambert_between, sum_km_s};
use crate::kepler::Elements;
use crate::lambert::Direction;
use crate::two_body::State;
use crate::units::days;

/// Grid steps in one revolution of a body; basins are a sixth of a revolution wide or more.
const STEPS_A_REVOLUTION: f64 = 24.0;

/// The same for the place on the target's orbit and for flight time to it, where nothing moves.
const PLACES: usize = 20;
const TIMES_TO_AN_ORBIT: usize = 12;

/// Fewest grid points along departure, along flight time, and most grid points in all.
const DEPARTS_MIN: usize = 6;
const TIMES_MIN: usize = 48;
const POINTS_MAX: usize = 6000;

/// Basins whose floor is sounded, and how many of the lowest are descended to the end.
const BASINS: (usize, usize) = (48, 6);

/// Size of the simplex, in grid steps, at which a sounding and a descent end: the impulse is then known to the square
/// of that.
const SOUNDED: f64 = 0.05;
const SETTLED: f64 = 1e-6;

/// The best descent starts again from its end, since a simplex can collapse in a long valley: until it gains less than
/// this share of the impulse, so many times at most.
const GAIN: f64 = 1e-12;
const RESTARTS_MAX: usize = 8;

/// More whole revolutions than this are not looked at.
const REVOLUTIONS_MAX: u32 = 20;

/// Evenly spaced values along one variable.
#[derive(Clone, Copy)]
struct Axis {
    first: f64,
    last: f64,
    count: usize,
}

impl Axis {
    /// Points no farther apart than `spacing`, as far as their number allows; one where nothing is free.
    fn new((first, last): (f64, f64), spacing: f64, (fewest, most): (usize, usize)) -> Axis {
        let wanted = ((last - first) / spacing).ceil() as usize;
        Axis { first, last, count: if last > first { wanted.min(most).max(fewest) } else { 1 } }
    }

    fn at(&self, i: usize) -> f64 {
        if self.count == 1 { self.first } else { self.first + self.step() * i as f64 }
    }

    /// Spacing; zero for a variable that is fixed.
    fn step(&self) -> f64 {
        if self.count == 1 { 0.0 } else { (self.last - self.first) / (self.count - 1) as f64 }
    }
}

/// One way round and one number of revolutions.
#[derive(Clone, Copy, PartialEq)]
struct Family {
    direction: Direction,
    revolutions: u32,
}

/// Whether the target, at arrival, is less than half a turn ahead of the start (counter-clockwise). Between inclined
/// orbits a ridge runs along the half turn, since the plane of the arc then stands steep: a narrow basin on one side of
/// it would go unseen between higher points of the other.
fn is_ahead(from: &State, to: &State) -> bool {
    from.position.x * to.position.y >= from.position.y * to.position.x
}

/// Where a descent starts, in which family, and on which side of the ridge.
#[derive(Clone, Copy)]
struct Basin {
    family: Family,
    ahead: bool,
    lowest: Point,
}

/// The least sum of impulses over the grid.
struct Grid {
    axes: [Axis; 3],
    /// One row for each family, infinite where it has no arc.
    costs: Vec<Vec<f64>>,
    /// Side of the ridge of each grid point.
    ahead: Vec<bool>,
}

/// The question with what the search looks up again and again. Variables: departure [d since J2000], flight time
/// [d], mean anomaly on the target's orbit [rad] (free for [`Goal::Orbit`] only).
struct Search<'a> {
    question: &'a Question,
    span: &'a Span,
    orbit: Elements,
}

impl Search<'_> {
    fn target(&self, arrive_j2000_d: f64, mean_anomaly_rad: f64) -> Option<State> {
        match self.question.goal {
            Goal::Body => self.question.to.state(arrive_j2000_d).ok(),
            Goal::Orbit => Elements { mean_anomaly_rad, ..self.orbit }.state(1.0).ok(),
        }
    }

    /// The nearest values that the span holds; `None` when the last arrival leaves no time.
    fn inside(&self, [depart, time, anomaly]: [f64; 3]) -> Option<[f64; 3]> {
        let span = self.span;
        let depart = depart.clamp(span.first_j2000_d, span.last_j2000_d);
        let longest = span.longest_d.min(span.arrive_by_j2000_d - depart);
        (longest >= span.shortest_d).then(|| [depart, time.clamp(span.shortest_d, longest), anomaly])
    }

    /// The cheapest arc of one family at these values; none on the other side of the ridge than `ahead`, if it is given.
    fn best_of(&self, family: Family, ahead: Option<bool>, x: [f64; 3]) -> Option<Flown> {
        let [depart, time, anomaly] = self.inside(x)?;
        let from = self.question.from.state(depart).ok()?;
        let to = self.target(depart + time, anomaly)?;
        if ahead.is_some_and(|ahead| ahead != is_ahead(&from, &to)) {
            return None;
        }
        let (arc, sum_km_s) = lambert_between((&from, &to), time, family.direction, family.revolutions)
            .into_iter()
            .filter(|arc| arc.revolutions == family.revolutions)
            .map(|arc| (arc, sum_km_s(self.question, (&from, &to), &arc)))
            .min_by(|a, b| a.1.total_cmp(&b.1))?;
        Some(Flown { depart_j2000_d: depart, time_d: time, from, to, arc, sum_km_s })
    }

    /// The lowest place found from `start` within one family, until the simplex is `shrink` grid steps wide.
    fn settled(&self, basin: &Basin, ahead: Option<bool>, axes: &[Axis; 3], shrink: f64) -> Basin {
        // First steps go inwards: beyond the edge of the span nothing changes, and a simplex there would not turn round.
        let (start, _) = basin.lowest;
        let step = std::array::from_fn(|axis| {
            let Axis { first, last, .. } = axes[axis];
            if start[axis] > 0.5 * (first + last) {
                -0.5 * axes[axis].step()
            } else {
                0.5 * axes[axis].step()
            }
        });
        let cost = |x| self.best_of(basin.family, ahead, x).map_or(f64::INFINITY, |flown| flown.sum_km_s);
        let (x, sum_km_s) = descend(cost, start, step, shrink);
        Basin { lowest: (self.inside(x).unwrap_or(x), sum_km_s), ..*basin }
    }
}

/// The transfer with the least sum of impulses within a span that was checked.
pub(super) fn search(question: &Question, span: &Span) -> Option<TwoImpulse> {
    let (from_orbit, orbit) =
        (question.from.elements(span.first_j2000_d), question.to.elements(span.first_j2000_d));
    let search = Search { question, span, orbit };
    let axes = axes(question, span, &from_orbit, &orbit);
    let families = families(question, span, &from_orbit, &orbit);
    let grid = grid(&search, axes, &families);
    let lower = |a: &Basin, b: &Basin| a.lowest.1.total_cmp(&b.lowest.1);
    let settled = |basin: &Basin, shrink| search.settled(basin, Some(basin.ahead), &axes, shrink);
    let mut sounded: Vec<Basin> =
        basins(&grid, &families).iter().map(|basin| settled(basin, SOUNDED)).collect();
    sounded.sort_by(lower);
    let mut best = sounded.iter().take(BASINS.1).map(|basin| settled(basin, SETTLED)).min_by(lower)?;
    for _ in 0..RESTARTS_MAX {
        // Without a wall along the ridge: where orbits share a plane there is none, and the lowest place may lie on it.
        let again = search.settled(&best, None, &axes, SETTLED);
        let gained = best.lowest.1 - again.lowest.1;
        if gained > 0.0 {
            best = again;
        }
        if gained <= GAIN * best.lowest.1 {
            break;
        }
    }
    search.best_of(best.family, None, best.lowest.0)?.told(question, best.family.direction)
}

fn axes(question: &Question, span: &Span, from: &Elements, to: &Elements) -> [Axis; 3] {
    // Near the perihelion of an ellipse a body turns faster than on average.
    let turn_d = |orbit: &Elements| {
        let hurry = (1.0 - orbit.eccentricity) * (1.0 - orbit.eccentricity * orbit.eccentricity).sqrt();
        days(TAU / orbit.mean_motion(1.0)) * hurry.max(0.25)
    };
    let spacing = |orbit: &Elements| turn_d(orbit) / STEPS_A_REVOLUTION;
    let departs = (span.first_j2000_d, span.last_j2000_d);
    let times = (span.shortest_d, span.longest_d);
    match question.goal {
        Goal::Body => {
            let departs = Axis::new(departs, spacing(from), (DEPARTS_MIN, POINTS_MAX / TIMES_MIN));
            let times = Axis::new(times, spacing(to), (TIMES_MIN, POINTS_MAX / departs.count));
            [departs, times, Axis { first: 0.0, last: 0.0, count: 1 }]
        }
        Goal::Orbit => {
            let most = POINTS_MAX / PLACES / TIMES_TO_AN_ORBIT;
            let departs = Axis::new(departs, spacing(from), (DEPARTS_MIN, most));
            let times = Axis::new(times, 0.0, (TIMES_TO_AN_ORBIT, POINTS_MAX / PLACES / departs.count));
            [departs, times, Axis { first: 0.0, last: TAU, count: PLACES + 1 }]
        }
    }
}

/// Prograde always, retrograde where one of the orbits is; as many revolutions as the longest flight has room for. To any
/// place on an orbit the same ellipse without its whole revolutions costs the same: where flights may be short they
/// are left out.
fn families(question: &Question, span: &Span, from: &Elements, to: &Elements) -> Vec<Family> {
    // The shortest ellipse between two places has half their larger distance as semi-major axis, or more.
    let perihelion = |orbit: &Elements| orbit.semi_major_axis * (1.0 - orbit.eccentricity);
    let smallest_axis = 0.5 * perihelion(from).max(perihelion(to));
    let shortest_turn_d = days(TAU * smallest_axis.powf(1.5));
    let mut revolutions_max = ((span.longest_d / shortest_turn_d) as u32).min(REVOLUTIONS_MAX);
    if question.goal == Goal::Orbit
        && span.shortest_d < 0.5 * shortest_turn_d
        && span.longest_d > span.shortest_d
    {
        revolutions_max = 0;
    }
    let retrograde = |orbit: &Elements| orbit.inclination_rad.rem_euclid(TAU) > 0.5 * PI;
    let mut families = Vec::new();
    let directions: &[Direction] = if retrograde(from) || retrograde(to) {
        &[Direction::Prograde, Direction::Retrograde]
    } else {
        &[Direction::Prograde]
    };
    for &direction in directions {
        families.extend((0..=revolutions_max).map(|revolutions| Family { direction, revolutions }));
    }
    families
}

/// The least sum of impulses of every family at every grid point.
fn grid(search: &Search, axes: [Axis; 3], families: &[Family]) -> Grid {
    let [departs, times, places] = axes;
    let cells = departs.count * times.count * places.count;
    let mut costs = vec![vec![f64::INFINITY; cells]; families.len()];
    let mut ahead = vec![false; cells];
    let fixed: Vec<Option<State>> = match search.question.goal {
        Goal::Body => Vec::new(),
        Goal::Orbit => (0..places.count).map(|k| search.target(0.0, places.at(k))).collect(),
    };
    for i in 0..departs.count {
        let depart = departs.at(i);
        let Ok(from) = search.question.from.state(depart) else { continue };
        for j in 0..times.count {
            // Cells beyond the last arrival stand for the edge itself.
            let Some([depart, time, _]) = search.inside([depart, times.at(j), 0.0]) else { continue };
            for k in 0..places.count {
                let to = match search.question.goal {
                    Goal::Body => search.target(depart + time, 0.0),
                    Goal::Orbit => fixed[k],
                };
                let Some(to) = to else { continue };
                let cell = (i * times.count + j) * places.count + k;
                ahead[cell] = is_ahead(&from, &to);
                for (first, family) in families.iter().enumerate().filter(|(_, f)| f.revolutions == 0) {
                    let highest = families.iter().filter(|f| f.direction == family.direction).count() - 1;
                    for arc in lambert_between((&from, &to), time, family.direction, highest as u32) {
                        let least = &mut costs[first + arc.revolutions as usize][cell];
                        *least = least.min(sum_km_s(search.question, (&from, &to), &arc));
                    }
                }
            }
        }
    }
    Grid { axes, costs, ahead }
}

/// Grid points lower than all their neighbours on the same side of the ridge, the lowest first.
fn basins(grid: &Grid, families: &[Family]) -> Vec<Basin> {
    let [departs, times, places] = &grid.axes;
    let mut found = Vec::new();
    for (family, row) in families.iter().zip(&grid.costs) {
        for i in 0..departs.count {
            for j in 0..times.count {
                for k in 0..places.count {
                    let cell = (i * times.count + j) * places.count + k;
                    if row[cell].is_finite() && is_lowest(grid, row, [i, j, k], cell) {
                        let x = [departs.at(i), times.at(j), places.at(k)];
                        found.push(Basin {
                            family: *family,
                            ahead: grid.ahead[cell],
                            lowest: (x, row[cell]),
                        });
                    }
                }
            }
        }
    }
    found.sort_by(|a, b| a.lowest.1.total_cmp(&b.lowest.1));
    found.truncate(BASINS.0);
    found
}

/// Whether no neighbour on the same side is lower; of equal neighbours the first counts.
fn is_lowest(grid: &Grid, row: &[f64], at: [usize; 3], cell: usize) -> bool {
    let around = |axis: usize| at[axis].saturating_sub(1)..=(at[axis] + 1).min(grid.axes[axis].count - 1);
    for i in around(0) {
        for j in around(1) {
            for k in around(2) {
                let other = (i * grid.axes[1].count + j) * grid.axes[2].count + k;
                let lower = row[other] < row[cell] || (row[other] == row[cell] && other < cell);
                if lower && grid.ahead[other] == grid.ahead[cell] {
                    return false;
                }
            }
        }
    }
    true
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::ephemeris::Traveller;
    use crate::planets::Planet;
    use crate::two_impulse::Count;

    #[test]
    fn number_of_revolutions_is_what_the_time_has_room_for() {
        let body = |planet| Traveller::Planet(planet);
        let (from, to, goal) = (body(Planet::Earth), body(Planet::Mars), Goal::Body);
        let question = Question { from, to, goal, count: Count::Heliocentric };
        let most = |longest_d| {
            let span = Span { longest_d, ..Span::dates(0.0, 10.0) };
            families(&question, &span, &from.elements(0.0), &to.elements(0.0)).last().unwrap().revolutions
        };
        // Half of Mars's perihelion distance, 0.69 au, is gone round in 0.574 years.
        assert_eq!((most(200.0), most(220.0), most(430.0)), (0, 1, 2));
    }
}
