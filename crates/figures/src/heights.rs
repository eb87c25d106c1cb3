//! Hints of height above the ecliptic: rings in its plane, lines of nodes, drop lines, and the highest points.

use scenario::report::{Columns, End, Report};

use crate::axis::{extent, number};
use crate::ellipse::{corners, nodes, orbit};
use crate::labels::{Style, beside};
use crate::marks::Ticks;
use crate::orbit::Sheet;
use crate::orbit_labels::COVER;
use crate::shapes::{Point, Shape, Stroke, Weight};
use crate::track::{Place, distances};

/// Heights below this share of the flight's reach are not told.
const TOLD: f64 = 0.01;

/// Orbits inclined by less than this (deg) have no line of nodes worth drawing.
const NODE_LINE_DEG: f64 = 0.5;

/// How far the flight and its orbits reach.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Heights {
    /// Farthest distance from the Sun, au.
    pub(crate) reach_au: f64,
    /// Whether anything is high enough above or below the ecliptic to be told.
    pub(crate) matter: bool,
}

impl Heights {
    pub(crate) fn of(report: &Report, columns: &Columns) -> Heights {
        let ends = [&report.ends.from, &report.ends.to];
        let aphelia = ends.map(|end| end.semi_major_axis_au * (1.0 + end.eccentricity));
        let distances: Vec<f64> = distances(columns).chain(aphelia).collect();
        let reach_au = extent(&distances).map_or(1.0, |(_, farthest)| farthest);
        let orbits = ends.into_iter().flat_map(|end| orbit(end, 72)).map(|point| point[2]);
        let highest = orbits.chain(columns.z_au.iter().copied()).map(f64::abs).fold(0.0, f64::max);
        Heights { reach_au, matter: highest > TOLD * reach_au }
    }

    /// Whether these points (au) leave the ecliptic far enough to be told.
    pub(crate) fn shown_by(&self, points: &[[f64; 3]]) -> bool {
        points.iter().any(|point| point[2].abs() > TOLD * self.reach_au)
    }
}

/// The highest place north or south of the ecliptic.
pub(crate) struct Top {
    at: Point,
    height_au: f64,
}

impl Sheet<'_> {
    /// Draws a line in two strokes, north and south of the ecliptic, and returns its visible pieces.
    pub(crate) fn split_line(
        &mut self,
        points_au: &[[f64; 3]],
        [north, south]: [Stroke; 2],
        weight: f32,
    ) -> Vec<Vec<Point>> {
        if north == south {
            let points: Vec<Point> = points_au.iter().map(|&au| self.view.px(au)).collect();
            return self.line(&points, north, weight);
        }
        let mut pieces = Vec::new();
        let mut start = 0;
        for run in points_au.chunk_by(|a, b| (a[2] < 0.0) == (b[2] < 0.0)) {
            // Runs share the point where the line crosses, so that it has no gap.
            let end = (start + run.len() + 1).min(points_au.len());
            let points: Vec<Point> = points_au[start..end].iter().map(|&au| self.view.px(au)).collect();
            pieces.extend(self.line(&points, if run[0][2] < 0.0 { south } else { north }, weight));
            start += run.len();
        }
        pieces
    }

    /// Rings about the Sun in the ecliptic, but for those that an orbit stands for; their step, au.
    pub(crate) fn rings(&mut self, heights: &Heights, ends: [&End; 2]) -> Option<f64> {
        if !self.view.is_tilted() {
            return None;
        }
        let step_au = ring_step(heights.reach_au);
        let orbits = ends.map(|end| orbit(end, 72));
        let mut radius_au = step_au;
        let mut drawn = false;
        while radius_au <= heights.reach_au * 1.02 {
            if !orbits.iter().any(|points| stands_for(points, radius_au)) {
                let count = corners(radius_au * self.view.px_per_au);
                let ring: Vec<Point> = (0..=count)
                    .map(|k| {
                        let (sin, cos) = (std::f64::consts::TAU * k as f64 / count as f64).sin_cos();
                        self.view.px([radius_au * cos, radius_au * sin, 0.0])
                    })
                    .collect();
                self.line(&ring, Stroke::solid(self.theme.hairline, 1.0), 0.2);
                drawn = true;
            }
            radius_au += step_au;
        }
        drawn.then_some(step_au)
    }

    /// The line in which an inclined orbit cuts the ecliptic, its ascending node marked.
    pub(crate) fn node_lines(&mut self, ends: [&End; 2]) {
        if !self.view.is_tilted() {
            return;
        }
        let inclined = |end: &&End| {
            let from_plane = end.inclination_deg.min(180.0 - end.inclination_deg);
            from_plane > NODE_LINE_DEG
        };
        for end in ends.into_iter().filter(inclined) {
            let [ascending, descending] = nodes(end).map(|au| self.view.px(au));
            let stroke = Stroke::dashed(self.theme.hairline.towards(self.theme.edge, 0.5), 1.0, (1.5, 3.0));
            self.line(&[ascending, descending], stroke, 0.2);
        }
    }

    /// Lines from the way down, or up, to the ecliptic at its time marks and both ends.
    pub(crate) fn drop_lines(&mut self, heights: &Heights, places: &[Place], ticks: &Ticks) {
        if !self.view.is_tilted() || !heights.matter {
            return;
        }
        let edge = self.theme.edge;
        for place in ticks.places.iter().chain(places.first()).chain(places.last()) {
            let [x, y, _] = place.position_au;
            let foot = self.view.px([x, y, 0.0]);
            if foot.distance(place.at) > 3.0 {
                self.line(&[place.at, foot], Stroke::solid(edge, 0.8), 0.6);
                if self.view.frame.contains(foot) {
                    self.shapes.push(Shape::Disc { centre: foot, radius: 1.5, color: edge });
                }
            }
        }
    }

    /// Dots at the highest points north and south of the ecliptic.
    /// Where the way ends its own mark stands for the dot.
    pub(crate) fn tops(&mut self, heights: &Heights, places: &[Place], marks: &[Point]) -> Vec<Top> {
        let inside = self.view.frame.grown(-6.0);
        let z = |place: &Place| place.position_au[2];
        let north = places.iter().max_by(|a, b| z(a).total_cmp(&z(b)));
        let south = places.iter().min_by(|a, b| z(a).total_cmp(&z(b)));
        let tops: Vec<Top> = [north.filter(|place| z(place) > 0.0), south.filter(|place| z(place) < 0.0)]
            .into_iter()
            .flatten()
            .filter(|place| z(place).abs() > TOLD * heights.reach_au && inside.contains(place.at))
            .map(|place| Top { at: place.at, height_au: z(place) })
            .collect();
        for top in tops.iter().filter(|top| marks.iter().all(|mark| mark.distance(top.at) > 6.0)) {
            self.shapes.push(Shape::Disc { centre: top.at, radius: 3.4, color: self.theme.sheet });
            self.shapes.push(Shape::Disc { centre: top.at, radius: 2.4, color: self.theme.sail });
        }
        tops
    }

    /// How high the highest points are.
    pub(crate) fn top_labels(&mut self, tops: &[Top]) {
        let style = Style { size: 11.0, color: self.theme.muted, weight: Weight::Normal };
        for top in tops {
            let content = height_words(top.height_au);
            let up = Point::new(0.0, if top.height_au > 0.0 { -1.0 } else { 1.0 });
            let candidates = beside(top.at, up, 6.0, &content, style).into_iter().take(24).collect();
            self.label(&content, style, candidates, 2.0 * COVER);
        }
    }
}

/// A height in words: `0.05 au north`.
pub(crate) fn height_words(height_au: f64) -> String {
    let decimals = if height_au.abs() < 0.0995 { 3 } else { 2 };
    let side = if height_au < 0.0 { "south" } else { "north" };
    format!("{} au {side}", number(height_au.abs(), decimals))
}

/// The smallest round step, au, of which at most four reach as far as the flight.
fn ring_step(reach_au: f64) -> f64 {
    let decade = 10.0_f64.powf((reach_au / 4.0).log10().floor());
    [1.0, 2.0, 5.0, 10.0]
        .map(|m| m * decade)
        .into_iter()
        .find(|step| reach_au < 5.0 * step)
        .unwrap_or(reach_au)
}

/// Whether an orbit (points, au) runs so close to the ring of this radius that both would be drawn as one.
fn stands_for(orbit: &[[f64; 3]], radius_au: f64) -> bool {
    let near =
        orbit.iter().filter(|[x, y, z]| (x.hypot(*y) - radius_au).hypot(*z) < 0.05 * radius_au).count();
    2 * near > orbit.len()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rings_are_round_and_at_most_four() {
        for (reach_au, step_au) in
            [(1.67, 0.5), (1.02, 0.5), (0.72, 0.2), (5.4, 2.0), (30.3, 10.0), (40.0, 10.0)]
        {
            let step = ring_step(reach_au);
            assert!((step - step_au).abs() < 1e-9, "{reach_au}: {step}");
        }
        for k in 0..2000 {
            let reach_au = 10.0_f64.powf(-1.0 + 3.0 * f64::from(k) / 2000.0);
            let count = (reach_au / ring_step(reach_au)).floor();
            assert!((1.0..=4.0).contains(&count), "{reach_au}: {count}");
        }
    }

    #[test]
    fn heights_say_their_side() {
        assert_eq!(height_words(0.0512), "0.051 au north");
        assert_eq!(height_words(-0.314), "0.31 au south");
    }
}
