//! Rectangles, clipping of lines, and leaving out points that no eye could tell.

use crate::shapes::Point;

/// An upright rectangle, CSS pixels.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Rect {
    pub(crate) left: f64,
    pub(crate) top: f64,
    pub(crate) width: f64,
    pub(crate) height: f64,
}

impl Rect {
    pub(crate) fn around(centre: Point, width: f64, height: f64) -> Rect {
        Rect { left: centre.x - width / 2.0, top: centre.y - height / 2.0, width, height }
    }

    pub(crate) fn right(&self) -> f64 {
        self.left + self.width
    }

    pub(crate) fn bottom(&self) -> f64 {
        self.top + self.height
    }

    pub(crate) fn centre(&self) -> Point {
        Point::new(self.left + self.width / 2.0, self.top + self.height / 2.0)
    }

    pub(crate) fn corners(&self) -> Vec<Point> {
        let (l, t, r, b) = (self.left, self.top, self.right(), self.bottom());
        vec![Point::new(l, t), Point::new(r, t), Point::new(r, b), Point::new(l, b)]
    }

    pub(crate) fn grown(&self, by: f64) -> Rect {
        Rect {
            left: self.left - by,
            top: self.top - by,
            width: self.width + 2.0 * by,
            height: self.height + 2.0 * by,
        }
    }

    pub(crate) fn contains(&self, point: Point) -> bool {
        (self.left..=self.right()).contains(&point.x) && (self.top..=self.bottom()).contains(&point.y)
    }

    pub(crate) fn holds(&self, other: &Rect) -> bool {
        other.left >= self.left
            && other.top >= self.top
            && other.right() <= self.right()
            && other.bottom() <= self.bottom()
    }

    pub(crate) fn overlaps(&self, other: &Rect) -> bool {
        self.left < other.right()
            && other.left < self.right()
            && self.top < other.bottom()
            && other.top < self.bottom()
    }
}

/// The part of the segment from `a` to `b` inside the rectangle.
///
/// # References
/// Liang & Barsky, ACM Transactions on Graphics 3 (1984) 1-22.
fn clip_segment(a: Point, b: Point, rect: &Rect) -> Option<(Point, Point)> {
    let (dx, dy) = (b.x - a.x, b.y - a.y);
    let (mut enter, mut leave) = (0.0_f64, 1.0_f64);
    for (p, q) in
        [(-dx, a.x - rect.left), (dx, rect.right() - a.x), (-dy, a.y - rect.top), (dy, rect.bottom() - a.y)]
    {
        if p == 0.0 {
            if q < 0.0 {
                return None;
            }
        } else if p < 0.0 {
            enter = enter.max(q / p);
        } else {
            leave = leave.min(q / p);
        }
    }
    if enter > leave {
        return None;
    }
    let at = |s: f64| Point::new(a.x + s * dx, a.y + s * dy);
    Some((if enter == 0.0 { a } else { at(enter) }, if leave == 1.0 { b } else { at(leave) }))
}

/// The pieces of a line inside the rectangle. Points that are not finite break the line.
pub(crate) fn clip(points: &[Point], rect: &Rect) -> Vec<Vec<Point>> {
    let mut pieces: Vec<Vec<Point>> = Vec::new();
    let mut piece: Vec<Point> = Vec::new();
    for pair in points.windows(2) {
        let finite = pair.iter().all(|p| p.x.is_finite() && p.y.is_finite());
        let clipped = if finite { clip_segment(pair[0], pair[1], rect) } else { None };
        match clipped {
            Some((a, b)) => {
                if piece.last() != Some(&a) {
                    if piece.len() > 1 {
                        pieces.push(std::mem::take(&mut piece));
                    }
                    piece = vec![a];
                }
                piece.push(b);
            }
            None if piece.len() > 1 => pieces.push(std::mem::take(&mut piece)),
            None => piece.clear(),
        }
    }
    if piece.len() > 1 {
        pieces.push(piece);
    }
    pieces
}

/// The line with points left out that lie within `tolerance` (CSS pixels) of what stays.
///
/// # References
/// Douglas & Peucker, Cartographica 10 (1973) 112-122; distances are to the segment, not to its line, so that
/// turning points stay.
pub(crate) fn reduce(points: &[Point], tolerance: f64) -> Vec<Point> {
    if points.len() < 3 {
        return points.to_vec();
    }
    let mut keep = vec![false; points.len()];
    keep[0] = true;
    keep[points.len() - 1] = true;
    // Long lines are cut into blocks first: the work stays near linear for spirals of many turns.
    const BLOCK: usize = 128;
    let mut spans: Vec<(usize, usize)> = Vec::new();
    let mut start = 0;
    while start < points.len() - 1 {
        let end = (start + BLOCK).min(points.len() - 1);
        keep[end] = true;
        spans.push((start, end));
        start = end;
    }
    while let Some((first, last)) = spans.pop() {
        let (a, b) = (points[first], points[last]);
        let farthest = (first + 1..last)
            .map(|i| (i, distance_to_segment(points[i], a, b)))
            .max_by(|p, q| p.1.total_cmp(&q.1))
            .filter(|&(_, distance)| distance > tolerance);
        if let Some((i, _)) = farthest {
            keep[i] = true;
            spans.push((first, i));
            spans.push((i, last));
        }
    }
    points.iter().zip(&keep).filter(|&(_, &kept)| kept).map(|(&point, _)| point).collect()
}

/// Distance of `p` from the segment from `a` to `b`.
pub(crate) fn distance_to_segment(p: Point, a: Point, b: Point) -> f64 {
    let (dx, dy) = (b.x - a.x, b.y - a.y);
    let length2 = dx * dx + dy * dy;
    let s =
        if length2 > 0.0 { (((p.x - a.x) * dx + (p.y - a.y) * dy) / length2).clamp(0.0, 1.0) } else { 0.0 };
    p.distance(Point::new(a.x + s * dx, a.y + s * dy))
}

/// The line cut into drawn dashes: lengths in CSS pixels.
pub(crate) fn dashes(points: &[Point], drawn: f64, left_out: f64) -> Vec<Vec<Point>> {
    let mut pieces = Vec::new();
    let mut piece: Vec<Point> = points.first().copied().into_iter().collect();
    let (mut drawing, mut remaining) = (true, drawn);
    for pair in points.windows(2) {
        let (mut from, to) = (pair[0], pair[1]);
        let mut length = from.distance(to);
        while length > remaining {
            let s = remaining / length;
            from = Point::new(from.x + (to.x - from.x) * s, from.y + (to.y - from.y) * s);
            length -= remaining;
            if drawing {
                piece.push(from);
                pieces.push(std::mem::take(&mut piece));
            } else {
                piece = vec![from];
            }
            drawing = !drawing;
            remaining = if drawing { drawn } else { left_out };
        }
        remaining -= length;
        if drawing {
            piece.push(to);
        }
    }
    if piece.len() > 1 {
        pieces.push(piece);
    }
    pieces
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const FRAME: Rect = Rect { left: 0.0, top: 0.0, width: 100.0, height: 50.0 };

    #[test]
    fn a_line_through_the_frame_is_cut_at_both_edges() {
        let pieces = clip(&[Point::new(-50.0, 25.0), Point::new(150.0, 25.0)], &FRAME);
        assert_eq!(pieces, vec![vec![Point::new(0.0, 25.0), Point::new(100.0, 25.0)]]);
    }

    #[test]
    fn nan_breaks_the_line() {
        let line = [
            Point::new(10.0, 10.0),
            Point::new(20.0, 10.0),
            Point::new(f64::NAN, 10.0),
            Point::new(30.0, 10.0),
            Point::new(40.0, 10.0),
        ];
        assert_eq!(clip(&line, &FRAME).len(), 2);
    }

    #[test]
    fn dashes_cover_their_share_of_the_line() {
        let line: Vec<Point> = (0..=1000).map(|i| Point::new(f64::from(i) * 0.3, 0.0)).collect();
        let drawn: f64 =
            dashes(&line, 6.0, 4.0).iter().map(|piece| piece[0].distance(piece[piece.len() - 1])).sum();
        // 300 px hold 30 whole periods of 10 px.
        assert!((drawn - 180.0).abs() < 1e-9, "{drawn}");
    }

    proptest! {
        #[test]
        fn clipped_lines_stay_inside(
            line in prop::collection::vec((-300.0..300.0_f64, -300.0..300.0_f64), 2..40)
        ) {
            let line: Vec<Point> = line.into_iter().map(|(x, y)| Point::new(x, y)).collect();
            for point in clip(&line, &FRAME).into_iter().flatten() {
                prop_assert!(FRAME.grown(1e-9).contains(point), "{point:?}");
            }
        }

        #[test]
        fn reduction_moves_no_point_by_more_than_the_tolerance(
            line in prop::collection::vec((0.0..400.0_f64, 0.0..400.0_f64), 3..400)
        ) {
            let line: Vec<Point> = line.into_iter().map(|(x, y)| Point::new(x, y)).collect();
            let kept = reduce(&line, 0.25);
            for &point in &line {
                let nearest = kept
                    .windows(2)
                    .map(|pair| distance_to_segment(point, pair[0], pair[1]))
                    .fold(f64::INFINITY, f64::min);
                prop_assert!(nearest <= 0.25 + 1e-9);
            }
        }
    }
}
