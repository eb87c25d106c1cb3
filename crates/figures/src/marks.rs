//! What is drawn on the sail's way: time ticks, the sail at its attitude, arrows of motion.

use crate::shapes::{Point, Shape, Stroke};
use crate::theme::Color;
use crate::track::{Attitude, Place, angle, at_arc, at_time, heading};

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

/// How many attitude bars, and how close.
#[derive(Clone, Copy, Debug)]
pub(crate) struct BarPlan {
    /// At most so many.
    pub(crate) most: usize,
    /// Usual distance along the line, CSS pixels.
    pub(crate) spacing_px: f64,
    /// Least distance between any two, CSS pixels.
    pub(crate) gap_px: f64,
}

/// Where the sail is drawn: evenly along the line, closer where its attitude changes fast, and on both sides of a
/// jump; never closer than the plan allows, nor on one of the `kept_free` points, and a little aside of `ticks`.
pub(crate) fn bars(places: &[Place], plan: BarPlan, kept_free: &[Point], ticks: &[Point]) -> Vec<Place> {
    let Some(total) = places.last().map(|place| place.arc_px) else { return Vec::new() };
    let change = |i: usize| match (places[i].attitude, places[i + 1].attitude) {
        (Some(a), Some(b)) => angle(a.in_orbit, b.in_orbit),
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
        if free && place.attitude.is_some() && chosen.len() < plan.most {
            chosen.push(place);
        }
    }
    chosen
}

/// The sail as the reader sees it, with its normal as an arrow on the side away from the Sun: a round plate, or from
/// its edge a bar of the given half length. The bar is the first shape, from its left end to its right end as seen
/// along the normal; the arrow of a plate comes before it where it points away from the reader.
pub(crate) fn sail_mark(place: &Place, half_px: f64, color: Color, face: Color) -> Vec<Shape> {
    let Some(Attitude { normal, .. }) = place.attitude else { return Vec::new() };
    let in_picture = normal[0].hypot(normal[1]);
    let n = if in_picture > 1e-6 {
        Point::new(normal[0] / in_picture, -normal[1] / in_picture)
    } else {
        Point::new(0.0, -1.0)
    };
    let left = Point::new(n.y, -n.x);
    let length_px = half_px * 1.5 * in_picture;
    // A plate looks heavier than a bar.
    let plate_px = 0.8 * half_px;
    let open_px = plate_px * normal[2].abs();
    let mut arrow = Vec::new();
    if length_px > 5.0 {
        let tip = place.at.shifted(n, length_px);
        arrow.push(Shape::Polyline { points: vec![place.at, tip], stroke: Stroke::solid(color, 1.0) });
        arrow.push(Shape::Polygon { points: arrow_head(tip, n, 5.0), color });
    }
    if open_px < 1.5 {
        let points = vec![place.at.shifted(left, half_px), place.at.shifted(left, -half_px)];
        let bar = Shape::Polyline { points, stroke: Stroke::solid(color, 3.0) };
        return std::iter::once(bar).chain(arrow).collect();
    }
    let outline: Vec<Point> = (0..=28)
        .map(|k| {
            let (sin, cos) = (std::f64::consts::TAU * f64::from(k) / 28.0).sin_cos();
            place.at.shifted(left, plate_px * cos).shifted(n, open_px * sin)
        })
        .collect();
    let plate = [
        Shape::Polygon { points: outline.clone(), color: face },
        Shape::Polyline { points: outline, stroke: Stroke::solid(color, 1.5) },
    ];
    if normal[2] < 0.0 {
        arrow.into_iter().chain(plate).collect()
    } else {
        plate.into_iter().chain(arrow).collect()
    }
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
            position_au: [k as f64, 0.0, 0.0],
            at: Point::new(k as f64, 0.0),
            arc_px: k as f64,
            attitude: Some(Attitude { normal, in_orbit: normal }),
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
        let plan = BarPlan { most: 12, spacing_px: 80.0, gap_px: 26.0 };
        let chosen = bars(&straight(400), plan, &[], &[]);
        let near = |from: f64, to: f64| chosen.iter().filter(|p| (from..to).contains(&p.at.x)).count();
        assert!(near(180.0, 200.0) == 1 && near(200.0, 220.0) == 1, "{chosen:?}");
        for (i, a) in chosen.iter().enumerate() {
            assert!(chosen[i + 1..].iter().all(|b| a.at.distance(b.at) >= 26.0));
        }
    }

    #[test]
    fn the_bar_is_square_to_the_normal_and_north_is_up() {
        let shapes = sail_mark(&seen([0.6, 0.8, 0.0]), 10.0, LIGHT.sail, LIGHT.sheet);
        let Shape::Polyline { points: bar, .. } = &shapes[0] else { panic!("bar first") };
        let Shape::Polyline { points: arrow, .. } = &shapes[1] else { panic!("normal second") };
        let along = Point::new(bar[1].x - bar[0].x, bar[1].y - bar[0].y);
        let n = Point::new(arrow[1].x - arrow[0].x, arrow[1].y - arrow[0].y);
        assert!((along.x * n.x + along.y * n.y).abs() < 1e-9);
        assert!(n.x > 0.0 && n.y < 0.0, "a normal towards ecliptic +y points up in the picture: {n:?}");
    }

    fn seen(normal: [f64; 3]) -> Place {
        Place { attitude: Some(Attitude { normal, in_orbit: normal }), ..straight(10)[0] }
    }

    #[test]
    fn a_plate_is_as_open_as_its_normal_faces_the_reader() {
        let shapes = sail_mark(&seen([0.8, 0.0, 0.6]), 10.0, LIGHT.sail, LIGHT.sheet);
        let Shape::Polygon { points, .. } = &shapes[0] else { panic!("the face comes first: {shapes:?}") };
        let reach = |of: fn(&Point) -> f64| points.iter().map(of).fold(0.0, f64::max);
        assert!((reach(|p| p.y) - 8.0).abs() < 1e-9 && (reach(|p| p.x) - 4.8).abs() < 1e-9);
    }

    #[test]
    fn a_normal_that_points_away_from_the_reader_is_behind_the_plate() {
        let shapes = sail_mark(&seen([0.8, 0.0, -0.6]), 10.0, LIGHT.sail, LIGHT.sheet);
        assert!(matches!(&shapes[0], Shape::Polyline { points, .. } if points.len() == 2), "{shapes:?}");
        let facing = sail_mark(&seen([0.0, 0.0, 1.0]), 10.0, LIGHT.sail, LIGHT.sheet);
        assert_eq!(facing.len(), 2, "only the plate: {facing:?}");
    }
}
