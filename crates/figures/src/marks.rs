//! What is drawn on the sail's way: time ticks, the sail at its attitude, arrows of motion.

use crate::shapes::{Point, Shape, Stroke};
use crate::theme::Color;
use crate::track::{Place, at_arc, at_time, heading};

/// Days between ticks, finest first, with the words that say so: days, months, quarters, years, decades.
const INTERVALS: [(f64, &str); 14] = [
    (1.0, "1 d"),
    (2.0, "2 d"),
    (5.0, "5 d"),
    (10.0, "10 d"),
    (30.0, "30 d"),
    (90.0, "90 d"),
    (180.0, "180 d"),
    (365.25, "1 y"),
    (730.5, "2 y"),
    (1826.25, "5 y"),
    (3652.5, "10 y"),
    (7305.0, "20 y"),
    (18262.5, "50 y"),
    (36525.0, "100 y"),
];

/// Time marks along the way.
#[derive(Clone, Debug, Default)]
pub(crate) struct Ticks {
    /// Where they are, in order of time, without the departure.
    pub(crate) places: Vec<Place>,
    /// Days between them.
    pub(crate) interval_d: f64,
    /// The same in words.
    pub(crate) words: &'static str,
}

impl Ticks {
    /// Text for the tick at a time.
    pub(crate) fn label(&self, t_d: f64) -> String {
        if self.interval_d < 365.0 { format!("{t_d:.0} d") } else { format!("{:.0} y", t_d / 365.25) }
    }
}

/// The finest ticks of which there are at most `most` and no two closer than `gap_px` in the picture.
pub(crate) fn ticks(places: &[Place], most: usize, gap_px: f64) -> Ticks {
    let end_d = places.last().map_or(0.0, |place| place.t_d);
    for (interval_d, words) in INTERVALS {
        let count = (end_d / interval_d * (1.0 - 1e-9)).floor();
        if count < 1.0 || count > most as f64 {
            continue;
        }
        let found: Vec<Place> =
            (1..=count as usize).filter_map(|k| at_time(places, k as f64 * interval_d)).collect();
        let crowded = found
            .iter()
            .enumerate()
            .any(|(i, a)| found[i + 1..].iter().any(|b| a.at.distance(b.at) < gap_px));
        if !crowded {
            return Ticks { places: found, interval_d, words };
        }
    }
    Ticks::default()
}

/// The angle by which the normal leans from the outward Sun line in the picture, rad, positive counter-clockwise.
fn lean(place: &Place, sun: Point) -> Option<f64> {
    let normal = place.normal?;
    let (x, y) = (place.at.x - sun.x, sun.y - place.at.y);
    let (cross, dot) = (x * normal[1] - y * normal[0], x * normal[0] + y * normal[1]);
    (cross != 0.0 || dot != 0.0).then(|| cross.atan2(dot))
}

/// How many attitude bars, and how close.
#[derive(Clone, Copy, Debug)]
pub(crate) struct BarPlan {
    /// At most so many.
    pub(crate) most: usize,
    /// Usual distance along the line, CSS pixels.
    pub(crate) spacing_px: f64,
    /// Least distance between any two, CSS pixels.
    pub(crate) gap_px: f64,
    /// Where the Sun is drawn.
    pub(crate) sun: Point,
}

/// Where the sail is drawn: evenly along the line, closer where its attitude changes fast, and on both sides of a
/// jump; never closer than the plan allows, nor on one of the `kept_free` points, and a little aside of `ticks`.
pub(crate) fn bars(places: &[Place], plan: BarPlan, kept_free: &[Point], ticks: &[Point]) -> Vec<Place> {
    let Some(total) = places.last().map(|place| place.arc_px) else { return Vec::new() };
    let leans: Vec<Option<f64>> = places.iter().map(|place| lean(place, plan.sun)).collect();
    let change = |i: usize| match (leans[i], leans[i + 1]) {
        (Some(a), Some(b)) => angle_difference(a, b).abs(),
        _ => 0.0,
    };
    let turned: f64 = (0..places.len().saturating_sub(1)).map(change).sum();
    let spacing = plan.spacing_px.max(total / plan.most as f64);
    let step_rad = 20.0_f64.to_radians().max(turned / plan.most as f64);
    let (mut urgent, mut regular) = (Vec::new(), Vec::new());
    let mut measure = 0.5;
    for i in 0..places.len().saturating_sub(1) {
        let (from, to) = (&places[i], &places[i + 1]);
        let (turn, arc) = (change(i), to.arc_px - from.arc_px);
        if turn > 12.0_f64.to_radians() && arc < 1.0 {
            // Half a gap to both sides of a jump, so that both attitudes are seen.
            urgent.push(from.arc_px - plan.gap_px * 0.55);
            urgent.push(to.arc_px + plan.gap_px * 0.55);
            continue;
        }
        let by_turn = turn / step_rad;
        let growth = arc / spacing + by_turn;
        let next = measure + growth;
        if next.floor() > measure.floor() && growth > 0.0 {
            let share = (next.floor() - measure) / growth;
            let place = from.arc_px + share * arc;
            if by_turn > growth / 2.0 { urgent.push(place) } else { regular.push(place) }
        }
        measure = next;
    }
    let mut chosen: Vec<Place> = Vec::new();
    for arc in urgent.into_iter().chain(regular) {
        let clear = |place: &Place| ticks.iter().all(|tick| tick.distance(place.at) >= 9.0);
        let moved = [0.0, 5.0, -5.0, 10.0, -10.0].into_iter().filter_map(|by| at_arc(places, arc + by));
        let Some(place) = moved.clone().find(clear).or_else(|| moved.clone().next()) else { continue };
        let free = chosen.iter().all(|other| other.at.distance(place.at) >= plan.gap_px)
            && kept_free.iter().all(|point| point.distance(place.at) >= plan.gap_px * 0.6);
        if free && place.normal.is_some() && chosen.len() < plan.most {
            chosen.push(place);
        }
    }
    chosen
}

fn angle_difference(a: f64, b: f64) -> f64 {
    let turn = std::f64::consts::TAU;
    (b - a + 1.5 * turn).rem_euclid(turn) - turn / 2.0
}

/// The sail seen from ecliptic north as a bar of the given half length, with its normal as an arrow on the side away
/// from the Sun. Empty where the sail faces the reader. The first shape is the bar, from its left end to its right
/// end as seen along the normal.
pub(crate) fn sail_bar(place: &Place, half_px: f64, color: Color) -> Vec<Shape> {
    let Some(normal) = place.normal else { return Vec::new() };
    let in_plane = normal[0].hypot(normal[1]);
    if in_plane < 0.1 {
        return Vec::new();
    }
    let n = Point::new(normal[0] / in_plane, -normal[1] / in_plane);
    let left = Point::new(n.y, -n.x);
    let bar = vec![place.at.shifted(left, half_px), place.at.shifted(left, -half_px)];
    let tip = place.at.shifted(n, (half_px * 1.5 * in_plane).max(5.0));
    vec![
        Shape::Polyline { points: bar, stroke: Stroke::solid(color, 3.0) },
        Shape::Polyline { points: vec![place.at, tip], stroke: Stroke::solid(color, 1.0) },
        Shape::Polygon { points: arrow_head(tip, n, 5.0), color },
    ]
}

/// A triangle that points along `direction`, its tip 60 % of its length ahead of `at`.
pub(crate) fn arrow_head(at: Point, direction: Point, length: f64) -> Vec<Point> {
    let side = Point::new(-direction.y, direction.x);
    let back = at.shifted(direction, -0.4 * length);
    vec![
        at.shifted(direction, 0.6 * length),
        back.shifted(side, 0.4 * length),
        back.shifted(side, -0.4 * length),
    ]
}

/// Places for arrows of motion on the line: at the given shares of its length, moved a little where something of
/// `avoid` is near, left out where nothing near is free.
pub(crate) fn arrows(places: &[Place], shares: &[f64], avoid: &[Point]) -> Vec<(Point, Point)> {
    let total = places.last().map_or(0.0, |place| place.arc_px);
    shares
        .iter()
        .filter_map(|share| {
            [0.0, 12.0, -12.0, 22.0, -22.0, 32.0, -32.0].into_iter().find_map(|shift| {
                let arc = share * total + shift;
                let at = at_arc(places, arc)?.at;
                let free = avoid.iter().all(|other| other.distance(at) > 13.0);
                if free { Some((at, heading(places, arc)?)) } else { None }
            })
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::theme::LIGHT;

    /// A straight way to the right, one pixel a day, with a jump of the normal half way.
    fn straight(length: usize) -> Vec<Place> {
        let place = |k: usize, normal| Place {
            t_d: k as f64,
            at: Point::new(k as f64, 0.0),
            arc_px: k as f64,
            normal: Some(normal),
        };
        let half = length / 2;
        (0..=half)
            .map(|k| place(k, [1.0, 0.0, 0.0]))
            .chain((half..=length).map(|k| place(k, [0.0, 1.0, 0.0])))
            .collect()
    }

    #[test]
    fn ticks_are_the_finest_that_are_not_crowded() {
        let found = ticks(&straight(400), 40, 8.0);
        assert_eq!(found.interval_d, 10.0);
        assert_eq!(found.places.len(), 39);
        assert_eq!(ticks(&straight(4000), 40, 8.0).interval_d, 180.0);
        assert_eq!(found.label(90.0), "90 d");
    }

    #[test]
    fn a_jump_is_shown_from_both_sides() {
        let plan = BarPlan { most: 12, spacing_px: 80.0, gap_px: 26.0, sun: Point::new(-1000.0, 500.0) };
        let chosen = bars(&straight(400), plan, &[], &[]);
        let near = |from: f64, to: f64| chosen.iter().filter(|p| (from..to).contains(&p.at.x)).count();
        assert!(near(180.0, 200.0) == 1 && near(200.0, 220.0) == 1, "{chosen:?}");
        for (i, a) in chosen.iter().enumerate() {
            assert!(chosen[i + 1..].iter().all(|b| a.at.distance(b.at) >= 26.0));
        }
    }

    #[test]
    fn the_bar_is_square_to_the_normal_and_north_is_up() {
        let place = Place { normal: Some([0.6, 0.8, 0.0]), ..straight(10)[0] };
        let shapes = sail_bar(&place, 10.0, LIGHT.sail);
        let Shape::Polyline { points: bar, .. } = &shapes[0] else { panic!("bar first") };
        let Shape::Polyline { points: arrow, .. } = &shapes[1] else { panic!("normal second") };
        let along = Point::new(bar[1].x - bar[0].x, bar[1].y - bar[0].y);
        let n = Point::new(arrow[1].x - arrow[0].x, arrow[1].y - arrow[0].y);
        assert!((along.x * n.x + along.y * n.y).abs() < 1e-9);
        assert!(n.x > 0.0 && n.y < 0.0, "a normal towards ecliptic +y points up in the picture: {n:?}");
    }
}
