//! Finding room for labels: never on another label, never outside, and off the lines where possible.

use crate::geometry::Rect;
use crate::metrics::{text_height, text_width};
use crate::shapes::{Anchor, Point, Text, Weight, printable};
use crate::theme::Color;

/// Side of a cell of the grid that remembers what is drawn where, CSS pixels.
const CELL: f64 = 4.0;

/// How a label looks.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Style {
    pub(crate) size: f64,
    pub(crate) color: Color,
    pub(crate) weight: Weight,
}

/// The room left in a picture.
pub(crate) struct Room {
    frame: Rect,
    columns: usize,
    rows: usize,
    weights: Vec<f32>,
    taken: Vec<Rect>,
}

impl Room {
    /// An empty picture.
    pub(crate) fn new(frame: Rect) -> Room {
        let columns = (frame.width / CELL).ceil().max(1.0) as usize;
        let rows = (frame.height / CELL).ceil().max(1.0) as usize;
        Room { frame, columns, rows, weights: vec![0.0; columns * rows], taken: Vec::new() }
    }

    /// Remembers a drawn line; a heavier one is more to be avoided.
    pub(crate) fn draw_line(&mut self, points: &[Point], weight: f32) {
        for pair in points.windows(2) {
            let steps = (pair[0].distance(pair[1]) / (CELL * 0.7)).ceil().max(1.0);
            if !steps.is_finite() || steps > 1e5 {
                continue;
            }
            for k in 0..=steps as usize {
                let s = k as f64 / steps;
                let x = pair[0].x + s * (pair[1].x - pair[0].x);
                let y = pair[0].y + s * (pair[1].y - pair[0].y);
                if let Some(cell) = self.cell(x, y) {
                    self.weights[cell] = self.weights[cell].max(weight);
                }
            }
        }
    }

    /// Keeps an area free of labels.
    pub(crate) fn take(&mut self, area: Rect) {
        self.taken.push(area);
    }

    /// Whether nothing that was taken overlaps the area.
    pub(crate) fn is_free(&self, area: &Rect) -> bool {
        !self.taken.iter().any(|taken| taken.overlaps(area))
    }

    /// Drawn weight close to a point.
    pub(crate) fn cost_near(&self, at: Point) -> f64 {
        self.cost(&Rect::around(at, 20.0, 20.0))
    }

    /// Whether anything is drawn under the area.
    pub(crate) fn covers(&self, area: &Rect) -> bool {
        self.cost(area) > 0.0
    }

    fn cell(&self, x: f64, y: f64) -> Option<usize> {
        let (column, row) = ((x - self.frame.left) / CELL, (y - self.frame.top) / CELL);
        let inside = column >= 0.0 && row >= 0.0 && column < self.columns as f64 && row < self.rows as f64;
        inside.then(|| row as usize * self.columns + column as usize)
    }

    /// Drawn weight under an area.
    fn cost(&self, area: &Rect) -> f64 {
        let first = |from: f64| (from / CELL).floor().max(0.0) as usize;
        let last = |to: f64, count: usize| ((to / CELL).floor().max(0.0) as usize).min(count - 1);
        let mut sum = 0.0;
        for row in first(area.top - self.frame.top)..=last(area.bottom() - self.frame.top, self.rows) {
            let range =
                first(area.left - self.frame.left)..=last(area.right() - self.frame.left, self.columns);
            for column in range {
                sum += f64::from(self.weights[row * self.columns + column]);
            }
        }
        sum
    }

    /// Sets the text where it does least harm: candidates are centres of its box, better ones first. `None` when
    /// every candidate is outside, on another label, or covers more drawn weight than `most`.
    pub(crate) fn place(
        &mut self,
        content: &str,
        style: Style,
        candidates: impl IntoIterator<Item = Point>,
        most: f64,
    ) -> Option<Text> {
        let content = printable(content);
        let width = text_width(&content, style.size, style.weight);
        let height = text_height(style.size);
        let inside = self.frame.grown(-2.0);
        let mut best: Option<(f64, Rect)> = None;
        for (rank, centre) in candidates.into_iter().enumerate() {
            let area = Rect::around(centre, width, height);
            if !inside.holds(&area) || !self.is_free(&area.grown(2.0)) {
                continue;
            }
            let drawn = self.cost(&area);
            let cost = drawn + 0.06 * rank as f64;
            if drawn <= most && best.is_none_or(|(least, _)| cost < least) {
                best = Some((cost, area));
            }
        }
        let (_, area) = best?;
        self.taken.push(area);
        Some(Text {
            at: area.centre(),
            content,
            anchor: Anchor::Middle,
            size: style.size,
            color: style.color,
            weight: style.weight,
        })
    }
}

/// Centres of a label's box beside a point: the box just clears a circle of radius `gap` about the point, first in
/// the direction `first` and then turning away from it to both sides, then the same farther out.
pub(crate) fn beside(at: Point, first: Point, gap: f64, content: &str, style: Style) -> Vec<Point> {
    let half_width = text_width(content, style.size, style.weight) / 2.0;
    let half_height = text_height(style.size) / 2.0;
    let start = first.y.atan2(first.x);
    let turns = [0.0, 25.0, -25.0, 50.0, -50.0, 80.0, -80.0, 110.0, -110.0, 145.0, -145.0, 180.0_f64];
    [gap, gap + 8.0, gap + 18.0]
        .into_iter()
        .flat_map(|gap| turns.into_iter().map(move |turn| (gap, start + turn.to_radians())))
        .map(|(gap, angle)| {
            let (sin, cos) = angle.sin_cos();
            Point::new(at.x + cos * (gap + half_width), at.y + sin * (gap + half_height))
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::theme::LIGHT;

    const FRAME: Rect = Rect { left: 0.0, top: 0.0, width: 200.0, height: 100.0 };
    const STYLE: Style = Style { size: 12.0, color: LIGHT.ink, weight: Weight::Normal };

    #[test]
    fn labels_of_one_point_do_not_overlap() {
        let mut room = Room::new(FRAME);
        let at = Point::new(100.0, 50.0);
        let candidates = beside(at, Point::new(1.0, 0.0), 6.0, "day 30", STYLE);
        let placed: Vec<Rect> = (0..6)
            .filter_map(|_| room.place("day 30", STYLE, candidates.clone(), 1e9))
            .map(|text| crate::metrics::text_box(&text))
            .collect();
        assert!(placed.len() >= 4);
        for (i, a) in placed.iter().enumerate() {
            assert!(FRAME.holds(a));
            assert!(placed[i + 1..].iter().all(|b| !a.overlaps(b)));
        }
    }

    #[test]
    fn a_label_prefers_the_side_without_a_line() {
        let mut room = Room::new(FRAME);
        room.draw_line(&[Point::new(100.0, 50.0), Point::new(200.0, 50.0)], 3.0);
        let candidates = beside(Point::new(100.0, 50.0), Point::new(1.0, 0.0), 6.0, "Mars", STYLE);
        let text = room.place("Mars", STYLE, candidates, 1e9).unwrap();
        assert!((text.at.y - 50.0).abs() > 8.0 || text.at.x < 100.0, "{text:?}");
    }
}
