//! The map from the ecliptic plane to the picture: one scale for both axes, ecliptic x to the right, y up.

use crate::geometry::Rect;
use crate::shapes::Point;

/// Place and size of the picture of the ecliptic plane.
#[derive(Clone, Copy, Debug)]
pub(crate) struct View {
    /// Where it is drawn, CSS pixels.
    pub(crate) frame: Rect,
    /// CSS pixels per au.
    pub(crate) px_per_au: f64,
    /// What lies at the centre of the frame, au.
    pub(crate) centre_au: [f64; 2],
}

impl View {
    /// The view that shows all points (au) inside the frame less a margin (CSS pixels). Points that are not finite
    /// do not count; without any, 1 au on each side of the Sun is shown.
    pub(crate) fn fitting(points: impl IntoIterator<Item = [f64; 2]>, frame: Rect, margin: f64) -> View {
        let (mut low, mut high) = ([0.0_f64; 2], [0.0_f64; 2]);
        for point in points.into_iter().filter(|p| p[0].is_finite() && p[1].is_finite()) {
            for i in 0..2 {
                low[i] = low[i].min(point[i]);
                high[i] = high[i].max(point[i]);
            }
        }
        if high[0] - low[0] <= 0.0 && high[1] - low[1] <= 0.0 {
            (low, high) = ([-1.0; 2], [1.0; 2]);
        }
        let inside = frame.grown(-margin);
        let per_x = inside.width.max(1.0) / (high[0] - low[0]).max(1e-9);
        let per_y = inside.height.max(1.0) / (high[1] - low[1]).max(1e-9);
        View {
            frame,
            px_per_au: per_x.min(per_y),
            centre_au: [(low[0] + high[0]) / 2.0, (low[1] + high[1]) / 2.0],
        }
    }

    /// The same view magnified about its centre, then with the point `pan` (au) away brought to the centre.
    pub(crate) fn moved(self, zoom: f64, pan: [f64; 2]) -> View {
        View {
            px_per_au: self.px_per_au * zoom,
            centre_au: [self.centre_au[0] + pan[0], self.centre_au[1] + pan[1]],
            ..self
        }
    }

    pub(crate) fn px(&self, au: [f64; 2]) -> Point {
        let centre = self.frame.centre();
        Point::new(
            centre.x + (au[0] - self.centre_au[0]) * self.px_per_au,
            centre.y - (au[1] - self.centre_au[1]) * self.px_per_au,
        )
    }

    /// The ecliptic coordinates at the edges of the frame, au: x from and to, y from and to.
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

    #[test]
    fn north_is_up_and_a_circle_stays_a_circle() {
        let frame = Rect { left: 0.0, top: 0.0, width: 700.0, height: 300.0 };
        let view = View::fitting([[-1.0, -1.0], [1.0, 1.0]], frame, 10.0).moved(1.7, [0.2, -0.1]);
        let sun = view.px([0.0, 0.0]);
        let (east, north) = (view.px([1.0, 0.0]), view.px([0.0, 1.0]));
        assert!(east.x > sun.x && north.y < sun.y);
        assert!((sun.distance(east) - sun.distance(north)).abs() < 1e-9);
    }

    #[test]
    fn the_range_is_what_the_corners_show() {
        let frame = Rect { left: 5.0, top: 7.0, width: 400.0, height: 300.0 };
        let view = View::fitting([[-2.0, -1.0], [1.0, 1.0]], frame, 20.0);
        let [x_min, _, _, y_max] = view.range_au();
        let corner = view.px([x_min, y_max]);
        assert!(corner.distance(Point::new(5.0, 7.0)) < 1e-9);
    }
}
