//! The map from heliocentric space to the picture: orthographic, one scale for all directions.
//!
//! Untilted and unturned it shows the ecliptic from the north: ecliptic x to the right, y up.

use crate::geometry::Rect;
use crate::shapes::Point;

/// Where the picture is seen from, deg.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct Aspect {
    /// Angle between ecliptic north and the direction towards the reader; north leans upwards in the picture.
    pub(crate) tilt_deg: f64,
    /// Angle by which everything is turned about ecliptic north, counter-clockwise.
    pub(crate) turn_deg: f64,
}

impl Aspect {
    /// The picture's axes in ecliptic axes: to the right, up, towards the reader.
    fn axes(self) -> [[f64; 3]; 3] {
        let (sin_turn, cos_turn) = self.turn_deg.to_radians().sin_cos();
        let (sin, cos) = self.tilt_deg.to_radians().sin_cos();
        [
            [cos_turn, -sin_turn, 0.0],
            [sin_turn * cos, cos_turn * cos, sin],
            [-sin_turn * sin, -cos_turn * sin, cos],
        ]
    }
}

/// Place, size and aspect of the picture.
#[derive(Clone, Copy, Debug)]
pub(crate) struct View {
    /// Where it is drawn, CSS pixels.
    pub(crate) frame: Rect,
    /// CSS pixels per au.
    pub(crate) px_per_au: f64,
    /// What lies at the centre of the frame, au to the right and up from the Sun.
    pub(crate) centre_au: [f64; 2],
    /// The picture's axes in ecliptic axes: to the right, up, towards the reader.
    pub(crate) axes: [[f64; 3]; 3],
}

impl View {
    /// The view that shows all points (au) inside the frame less a margin (CSS pixels), at a scale that does not
    /// depend on the aspect: tilting changes nothing but the tilt. Points that are not finite do not count; without
    /// any, 1 au on each side of the Sun is shown.
    pub(crate) fn fitting(points: &[[f64; 3]], aspect: Aspect, frame: Rect, margin: f64) -> View {
        let (mut low, mut high) = ([0.0_f64; 3], [0.0_f64; 3]);
        let finite = || points.iter().filter(|point| point.iter().all(|x| x.is_finite()));
        for point in finite() {
            for i in 0..3 {
                low[i] = low[i].min(point[i]);
                high[i] = high[i].max(point[i]);
            }
        }
        let centre: [f64; 3] = std::array::from_fn(|i| (low[i] + high[i]) / 2.0);
        let distance = |point: &[f64; 3]| (0..3).map(|i| (point[i] - centre[i]).powi(2)).sum::<f64>().sqrt();
        let radius = finite().map(distance).fold(distance(&[0.0; 3]), f64::max);
        let radius = if radius > 0.0 { radius } else { 1.0 };
        let inside = frame.grown(-margin);
        let px_per_au = inside.width.min(inside.height).max(1.0) / (2.0 * radius).max(1e-9);
        let view = View { frame, px_per_au, centre_au: [0.0; 2], axes: aspect.axes() };
        let [right, up, _] = view.seen(centre);
        View { centre_au: [right, up], ..view }
    }

    /// The same view magnified about its centre, then with the point `pan` (au) away brought to the centre.
    pub(crate) fn moved(self, zoom: f64, pan: [f64; 2]) -> View {
        View {
            px_per_au: self.px_per_au * zoom,
            centre_au: [self.centre_au[0] + pan[0], self.centre_au[1] + pan[1]],
            ..self
        }
    }

    /// Components of a vector to the right, up and towards the reader, from its ecliptic ones.
    pub(crate) fn seen(&self, vector: [f64; 3]) -> [f64; 3] {
        self.axes.map(|axis| axis[0] * vector[0] + axis[1] * vector[1] + axis[2] * vector[2])
    }

    /// Where a heliocentric position (au) is drawn.
    pub(crate) fn px(&self, au: [f64; 3]) -> Point {
        let [right, up, _] = self.seen(au);
        let centre = self.frame.centre();
        Point::new(
            centre.x + (right - self.centre_au[0]) * self.px_per_au,
            centre.y - (up - self.centre_au[1]) * self.px_per_au,
        )
    }

    /// Where the Sun is drawn.
    pub(crate) fn sun(&self) -> Point {
        self.px([0.0; 3])
    }

    /// Whether heights above the ecliptic can be seen.
    pub(crate) fn is_tilted(&self) -> bool {
        self.axes[1][2] > 0.02
    }

    /// CSS pixels to the right and down for each au along ecliptic x, y and z: rows of the 2 x 3 matrix whose
    /// product with a position, added to [`View::sun`], is where it is drawn.
    pub(crate) fn matrix(&self) -> [f64; 6] {
        let [right, up, _] = self.axes;
        let k = self.px_per_au;
        [k * right[0], k * right[1], k * right[2], -k * up[0], -k * up[1], -k * up[2]]
    }

    /// What the edges of the frame show, au to the right and up from the Sun: left, right, bottom, top.
    pub(crate) fn range_au(&self) -> [f64; 4] {
        let half_x = self.frame.width / 2.0 / self.px_per_au;
        let half_y = self.frame.height / 2.0 / self.px_per_au;
        let [x, y] = self.centre_au;
        [x - half_x, x + half_x, y - half_y, y + half_y]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const FRAME: Rect = Rect { left: 5.0, top: 7.0, width: 700.0, height: 300.0 };

    fn view(tilt_deg: f64, turn_deg: f64) -> View {
        let points = [[-2.0, -1.0, 0.0], [1.0, 1.0, 0.5]];
        View::fitting(&points, Aspect { tilt_deg, turn_deg }, FRAME, 10.0).moved(1.7, [0.2, -0.1])
    }

    #[test]
    fn untilted_x_is_right_y_is_up_and_a_circle_stays_a_circle() {
        let view = view(0.0, 0.0);
        let sun = view.sun();
        let (east, north) = (view.px([1.0, 0.0, 0.0]), view.px([0.0, 1.0, 0.0]));
        assert!(east.x > sun.x && (east.y - sun.y).abs() < 1e-9);
        assert!(north.y < sun.y && (north.x - sun.x).abs() < 1e-9);
        assert!((sun.distance(east) - sun.distance(north)).abs() < 1e-9);
        assert!(view.px([0.0, 0.0, 1.0]).distance(sun) < 1e-9);
    }

    #[test]
    fn edge_on_ecliptic_north_is_up_and_the_ecliptic_a_line() {
        let view = view(90.0, 0.0);
        let sun = view.sun();
        let pole = view.px([0.0, 0.0, 1.0]);
        assert!((sun.y - pole.y - view.px_per_au).abs() < 1e-9 && (pole.x - sun.x).abs() < 1e-9);
        assert!((view.px([0.3, -0.8, 0.0]).y - sun.y).abs() < 1e-9);
        // The reader stands at ecliptic -y.
        assert!((view.seen([0.0, -1.0, 0.0])[2] - 1.0).abs() < 1e-12);
    }

    #[test]
    fn turning_is_counter_clockwise_seen_from_north() {
        let view = view(0.0, 90.0);
        let (sun, x) = (view.sun(), view.px([1.0, 0.0, 0.0]));
        assert!((sun.y - x.y - view.px_per_au).abs() < 1e-9, "x points up after a quarter turn");
    }

    #[test]
    fn the_range_is_what_the_corners_show() {
        let view = view(0.0, 0.0);
        let [x_min, _, _, y_max] = view.range_au();
        assert!(view.px([x_min, y_max, 0.0]).distance(Point::new(5.0, 7.0)) < 1e-9);
    }

    proptest! {
        #[test]
        fn the_matrix_says_where_a_position_is_drawn_and_all_fits_at_any_aspect(
            tilt in 0.0..90.0_f64, turn in -360.0..360.0_f64,
            points in prop::collection::vec(prop::array::uniform3(-30.0..30.0_f64), 1..20)
        ) {
            let aspect = Aspect { tilt_deg: tilt, turn_deg: turn };
            let view = View::fitting(&points, aspect, FRAME, 10.0);
            let (m, sun) = (view.matrix(), view.sun());
            for p in points {
                let x = sun.x + m[0] * p[0] + m[1] * p[1] + m[2] * p[2];
                let y = sun.y + m[3] * p[0] + m[4] * p[1] + m[5] * p[2];
                prop_assert!(view.px(p).distance(Point::new(x, y)) < 1e-6);
                prop_assert!(FRAME.grown(-10.0 + 1e-6).contains(view.px(p)));
            }
            let untilted = View::fitting(&[[1.0, 2.0, 3.0]], Aspect::default(), FRAME, 10.0);
            let tilted = View::fitting(&[[1.0, 2.0, 3.0]], aspect, FRAME, 10.0);
            prop_assert_eq!(untilted.px_per_au, tilted.px_per_au);
        }
    }
}
