//! The search itself: a grid for each way round and number of revolutions, then a descent into the best basins.

use std::f64::consts::{PI, TAU};

use super::simplex::descend;
use super::{Goal, Question, Span, TwoImpulse, lambert_between, transfer};
use crate::kepler::Elements;
use crate::lambert::Direction;
use crate::two_body::State;
use crate::units::days;

/// Grid steps in one revolution of the faster body; basins are a sixth of a revolution wide or more.
const STEPS_A_REVOLUTION: f64 = 24.0;

/// The same for the place on the target's orbit and for flight time to it, where nothing moves.
const PLACES: usize = 20;
const TIMES_TO_AN_ORBIT: usize = 14;

/// Fewest and most grid points along departure or flight time.
const POINTS: (f64, f64) = (12.0, 90.0);

/// Basins that are descended into.
const BASINS: usize = 12;

/// A descent ends when its simplex is this share of a grid step: the impulse is then settled to its square.
const SETTLED: f64 = 1e-6;

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
    fn new(first: f64, last: f64, spacing: f64) -> Axis {
        let count = if last > first {
            ((last - first) / spacing).ceil().clamp(POINTS.0, POINTS.1) as usize
        } else {
            1
        };
        Axis { first, last, count }
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

    /// The cheapest transfer of one family at these values.
    fn best_of(&self, family: Family, x: [f64; 3]) -> Option<TwoImpulse> {
        let [depart, time, anomaly] = self.inside(x)?;
        let from = self.question.from.state(depart).ok()?;
        let to = self.target(depart + time, anomaly)?;
        lambert_between((&from, &to), time, family.direction, family.revolutions)
            .iter()
            .filter(|arc| arc.revolutions == family.revolutions)
            .filter_map(|arc| transfer(self.question, (depart, time), (&from, &to), arc, family.direction))
            .min_by(|a, b| a.impulses.total_km_s().total_cmp(&b.impulses.total_km_s()))
    }

    /// [`Search::best_of`] as a function to descend on.
    fn cost(&self, family: Family, x: [f64; 3]) -> f64 {
        self.best_of(family, x).map_or(f64::INFINITY, |found| found.impulses.total_km_s())
    }
}

/// The transfer with the least sum of impulses within a span that was checked.
pub(super) fn search(question: &Question, span: &Span) -> Option<TwoImpulse> {
    let (from_orbit, orbit) =
        (question.from.elements(span.first_j2000_d), question.to.elements(span.first_j2000_d));
    let search = Search { question, span, orbit };
    let axes = axes(question, span, &from_orbit, &orbit);
    let families = families(span, &from_orbit, &orbit);
    let costs = costs(&search, &axes, &families);
    let step = [axes[0].step(), axes[1].step(), axes[2].step()];
    let mut best: Option<TwoImpulse> = None;
    for (family, start) in basins(&costs, &axes, &families) {
        let cost = |x: [f64; 3]| search.cost(family, x);
        let (settled, _) = descend(cost, start, step.map(|s| 0.5 * s), SETTLED);
        let Some(found) = search.best_of(family, settled) else { continue };
        if best.is_none_or(|b| found.impulses.total_km_s() < b.impulses.total_km_s()) {
            best = Some(found);
        }
    }
    best
}

fn axes(question: &Question, span: &Span, from: &Elements, to: &Elements) -> [Axis; 3] {
    // Near the perihelion of an ellipse a body turns faster than on average.
    let turn_d = |orbit: &Elements| {
        let hurry = (1.0 - orbit.eccentricity) * (1.0 - orbit.eccentricity * orbit.eccentricity).sqrt();
        days(TAU / orbit.mean_motion(1.0)) * hurry.max(0.25)
    };
    let spacing = |turn_d: f64| turn_d / STEPS_A_REVOLUTION;
    let (first, last) = (span.first_j2000_d, span.last_j2000_d);
    let (shortest, longest) = (span.shortest_d, span.longest_d);
    match question.goal {
        Goal::Body => [
            Axis::new(first, last, spacing(turn_d(from).min(turn_d(to)))),
            Axis::new(shortest, longest, spacing(turn_d(to)).min((longest - shortest) / 30.0)),
            Axis { first: 0.0, last: 0.0, count: 1 },
        ],
        Goal::Orbit => [
            Axis::new(first, last, spacing(turn_d(from))),
            Axis {
                first: shortest,
                last: longest,
                count: if longest > shortest { TIMES_TO_AN_ORBIT } else { 1 },
            },
            Axis { first: 0.0, last: TAU, count: PLACES + 1 },
        ],
    }
}

/// Prograde always, retrograde where one of the orbits is; as many revolutions as the longest flight has room for.
fn families(span: &Span, from: &Elements, to: &Elements) -> Vec<Family> {
    // The shortest ellipse between two places has half their larger distance as semi-major axis, or more.
    let perihelion = |orbit: &Elements| orbit.semi_major_axis * (1.0 - orbit.eccentricity);
    let smallest_axis = 0.5 * perihelion(from).max(perihelion(to));
    let shortest_turn_d = days(TAU * smallest_axis.powf(1.5));
    let revolutions_max = ((span.longest_d / shortest_turn_d) as u32).min(REVOLUTIONS_MAX);
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

/// The least sum of impulses of every family at every grid point: one row of the grid for each family.
fn costs(search: &Search, axes: &[Axis; 3], families: &[Family]) -> Vec<Vec<f64>> {
    let [departs, times, places] = axes;
    let cells = departs.count * times.count * places.count;
    let mut costs = vec![vec![f64::INFINITY; cells]; families.len()];
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
                for (first, family) in families.iter().enumerate().filter(|(_, f)| f.revolutions == 0) {
                    let highest = families.iter().filter(|f| f.direction == family.direction).count() - 1;
                    for arc in lambert_between((&from, &to), time, family.direction, highest as u32) {
                        let found =
                            transfer(search.question, (depart, time), (&from, &to), &arc, family.direction);
                        let Some(found) = found else { continue };
                        let least = &mut costs[first + arc.revolutions as usize][cell];
                        *least = least.min(found.impulses.total_km_s());
                    }
                }
            }
        }
    }
    costs
}

/// Grid points lower than all their neighbours, the lowest first.
fn basins(costs: &[Vec<f64>], axes: &[Axis; 3], families: &[Family]) -> Vec<(Family, [f64; 3])> {
    let [departs, times, places] = axes;
    let mut found = Vec::new();
    for (family, row) in families.iter().zip(costs) {
        for i in 0..departs.count {
            for j in 0..times.count {
                for k in 0..places.count {
                    let cell = (i * times.count + j) * places.count + k;
                    if row[cell].is_finite() && is_lowest(row, axes, [i, j, k], cell) {
                        found.push((row[cell], *family, [departs.at(i), times.at(j), places.at(k)]));
                    }
                }
            }
        }
    }
    found.sort_by(|a, b| a.0.total_cmp(&b.0));
    found.truncate(BASINS);
    found.into_iter().map(|(_, family, x)| (family, x)).collect()
}

/// Whether no neighbour is lower; of equal neighbours the first counts.
fn is_lowest(row: &[f64], axes: &[Axis; 3], at: [usize; 3], cell: usize) -> bool {
    let around = |axis: usize| at[axis].saturating_sub(1)..=(at[axis] + 1).min(axes[axis].count - 1);
    for i in around(0) {
        for j in around(1) {
            for k in around(2) {
                let other = (i * axes[1].count + j) * axes[2].count + k;
                if row[other] < row[cell] || (row[other] == row[cell] && other < cell) {
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

    #[test]
    fn number_of_revolutions_is_what_the_time_has_room_for() {
        let orbit = |planet| Traveller::Planet(planet).elements(0.0);
        let span = |longest_d| Span { longest_d, ..Span::dates(0.0, 10.0) };
        let most = |longest_d| {
            let all = families(&span(longest_d), &orbit(Planet::Earth), &orbit(Planet::Mars));
            all.last().unwrap().revolutions
        };
        // Half of Mars's perihelion distance, 0.69 au, is gone round in 0.574 years.
        assert_eq!((most(200.0), most(220.0), most(430.0)), (0, 1, 2));
    }
}
