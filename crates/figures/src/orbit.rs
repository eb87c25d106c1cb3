//! The orbit picture: both orbits, the sail's way and attitude, and the impulsive transfer, to scale.

use scenario::report::{Columns, End, Report};

use crate::ellipse::{corners, half_ellipse, orbit};
use crate::geometry::{Rect, clip, reduce};
use crate::heights::Heights;
use crate::labels::Room;
use crate::marks::{BarPlan, Ticks, arrow_head, arrows, bars, sail_mark, ticks};
use crate::notes;
use crate::shapes::{Point, Shape, Stroke, Text};
use crate::theme::{Color, Theme};
use crate::track::{Place, distances, heading, is_spatial, position, track};
use crate::view::{Aspect, View};
use crate::{Drawing, FigureOptions, Panel};

/// How far a drawn line may be from the true one, CSS pixels.
const TOLERANCE: f64 = 0.2;

/// Distance between turns (CSS pixels) below which marks on the way need a ground of their own.
const CROWDED: f64 = 12.0;

/// The picture being drawn: labels go on top of everything, so they are kept apart.
pub(crate) struct Sheet<'a> {
    pub(crate) shapes: Vec<Shape>,
    pub(crate) labels: Vec<Text>,
    pub(crate) room: Room,
    pub(crate) view: View,
    pub(crate) theme: &'a Theme,
    pub(crate) small: bool,
}

pub(crate) fn draw(report: &Report, columns: &Columns, options: &FigureOptions, theme: &Theme) -> Drawing {
    let whole = Rect { left: 0.0, top: 0.0, width: options.width, height: options.height };
    let mut top = Vec::new();
    let sentences = notes::sentences(report, columns, options.stale);
    let used = notes::set(&mut top, &sentences, whole.grown(-10.0), theme);
    let small = options.width.min(options.height) < 480.0;
    let below = if used > 0.0 { used + 8.0 } else { 0.0 };
    let free = Rect { top: below, height: whole.height - below, ..whole };
    let aspect = Aspect { tilt_deg: options.tilt_deg, turn_deg: options.turn_deg };
    let view = fitted(report, columns, [whole, free], small, aspect)
        .moved(options.zoom, [options.pan_x_au, options.pan_y_au]);
    let mut sheet =
        Sheet { shapes: Vec::new(), labels: Vec::new(), room: Room::new(whole), view, theme, small };
    if used > 0.0 {
        sheet.room.take(Rect { height: used + 12.0, ..whole });
    }
    sheet.fill(whole, theme.sheet);

    let (from, to) = (&report.ends.from, &report.ends.to);
    let places = track(columns, &view);
    let heights = Heights::of(report, columns);
    let rings_au = sheet.rings(&heights, [from, to]);
    sheet.node_lines([from, to]);
    let from_line = sheet.ellipse(from, &heights);
    // One orbit is one line with one name and one arrow.
    let to_line = if from == to { Vec::new() } else { sheet.ellipse(to, &heights) };
    let pitch_px = pitch(report, columns, &view);
    let crowded = pitch_px < CROWDED;
    let ticks = sheet.find_ticks(&places, crowded);
    sheet.drop_lines(&heights, &places, &ticks);
    sheet.way(&places, pitch_px, &heights);
    let impulsive = if is_spatial(report, columns) { Vec::new() } else { sheet.impulsive(report, columns) };
    sheet.sun(report);
    let bodies = sheet.bodies(report, &places);
    let marks = sheet.ends(&places);
    sheet.ticks(&places, &ticks, crowded);
    sheet.attitudes(&places, crowded, &marks, &ticks);
    sheet.orbit_arrow(&from_line, &marks);
    sheet.orbit_arrow(&to_line, &marks);
    let tops = sheet.tops(&heights, &places, &marks);

    sheet.scale_bar();
    sheet.captions(&ticks, rings_au, heights.matter, options);
    sheet.end_labels(&places, report, &bodies);
    let outer_first = to.semi_major_axis_au >= from.semi_major_axis_au;
    sheet.orbit_label(to, &to_line, outer_first);
    sheet.orbit_label(from, &from_line, !outer_first);
    sheet.line_labels(report, &places, &impulsive);
    sheet.body_labels(&bodies);
    sheet.top_labels(&tops);
    sheet.tick_labels(&ticks);
    sheet.sun_label();
    // Last, so that nothing else moves with the cursor.
    if let Some(t_d) = options.cursor_t_d {
        sheet.cursor(report, t_d);
    }

    let mut shapes = sheet.shapes;
    shapes.extend(sheet.labels.into_iter().map(Shape::Text));
    if used > 0.0 {
        let strip = Rect { height: used + 14.0, ..whole };
        shapes.push(Shape::Polygon { points: strip.corners(), color: theme.sheet });
    }
    shapes.append(&mut top);
    Drawing { shapes, panels: vec![panel(&view)] }
}

/// The view of everything there is, below the sentences.
fn fitted(report: &Report, columns: &Columns, frames: [Rect; 2], small: bool, aspect: Aspect) -> View {
    let [whole, free] = frames;
    let ends = [&report.ends.from, &report.ends.to];
    let curves = ends.into_iter().flat_map(|end| orbit(end, 180));
    let samples = (0..columns.t_d.len()).map(|row| position(columns, row));
    let points: Vec<[f64; 3]> = curves.chain(samples).collect();
    let view = View::fitting(&points, aspect, free, if small { 22.0 } else { 30.0 });
    // The whole picture shows the same view, shifted so that the free part keeps its centre.
    let lift = (free.centre().y - whole.centre().y) / view.px_per_au;
    View { frame: whole, centre_au: [view.centre_au[0], view.centre_au[1] + lift], ..view }
}

fn panel(view: &View) -> Panel {
    let [x_min, x_max, y_min, y_max] = view.range_au();
    let Rect { left, top, width, height } = view.frame;
    let (column, unit) = ("y_au".to_owned(), "au".to_owned());
    let (project, sun) = (Some(view.matrix()), view.sun());
    let (center_x, center_y) = (Some(sun.x), Some(sun.y));
    let y_log = false;
    Panel {
        column,
        unit,
        left,
        top,
        width,
        height,
        x_min,
        x_max,
        y_min,
        y_max,
        y_log,
        project,
        center_x,
        center_y,
    }
}

/// Distance between neighbouring turns of the sail's way, CSS pixels; infinite for less than a turn and a half.
fn pitch(report: &Report, columns: &Columns, view: &View) -> f64 {
    let turns = report.flight.revolutions.unwrap_or(0.0);
    let found = distances(columns).filter(|r| r.is_finite());
    let (low, high) = found.fold((f64::INFINITY, 0.0_f64), |(a, b), r| (a.min(r), b.max(r)));
    if turns < 1.5 || low > high { f64::INFINITY } else { (high - low) * view.px_per_au / turns }
}

impl Sheet<'_> {
    pub(crate) fn fill(&mut self, area: Rect, color: Color) {
        self.shapes.push(Shape::Polygon { points: area.corners(), color });
    }

    /// Draws the visible pieces of a line and returns them.
    pub(crate) fn line(&mut self, points: &[Point], stroke: Stroke, weight: f32) -> Vec<Vec<Point>> {
        let pieces: Vec<Vec<Point>> = clip(points, &self.view.frame.grown(4.0))
            .into_iter()
            .map(|piece| reduce(&piece, TOLERANCE))
            .collect();
        for piece in &pieces {
            self.room.draw_line(piece, weight);
            self.shapes.push(Shape::Polyline { points: piece.clone(), stroke });
        }
        pieces
    }

    fn ellipse(&mut self, end: &End, heights: &Heights) -> Vec<Vec<Point>> {
        let points = orbit(end, corners(end.semi_major_axis_au * self.view.px_per_au));
        let edge = self.theme.edge;
        let [north, south] = if heights.shown_by(&points) { [1.7, 0.8] } else { [1.2; 2] };
        let strokes = [Stroke::solid(edge, north), Stroke::solid(edge, south)];
        self.split_line(&points, strokes, 1.5)
    }

    fn impulsive(&mut self, report: &Report, columns: &Columns) -> Vec<Vec<Point>> {
        let (from, to) = (report.ends.from.semi_major_axis_au, report.ends.to.semi_major_axis_au);
        let start = match (columns.x_au.first(), columns.y_au.first()) {
            (Some(x), Some(y)) if x.is_finite() && y.is_finite() => y.atan2(*x),
            _ => 0.0,
        };
        let count = corners(from.max(to) * self.view.px_per_au);
        let points: Vec<Point> =
            half_ellipse(from, to, start, count).into_iter().map(|au| self.view.px(au)).collect();
        if let Some(&centre) = points.last().filter(|&&end| self.view.frame.contains(end)) {
            let stroke = Stroke::solid(self.theme.impulse, 1.6);
            self.shapes.push(Shape::Ring { centre, radius: 3.0, stroke });
        }
        self.line(&points, Stroke::dashed(self.theme.impulse, 1.6, (7.0, 5.0)), 2.0)
    }

    fn way(&mut self, places: &[Place], pitch_px: f64, heights: &Heights) {
        let points: Vec<[f64; 3]> = places.iter().map(|place| place.position_au).collect();
        // Many turns become a tint rather than a slab.
        let width = (pitch_px * 0.3).clamp(0.5, 2.2);
        let [north, south] = if heights.shown_by(&points) { [1.15, 0.55] } else { [1.0; 2] };
        let sail = self.theme.sail;
        let strokes = [Stroke::solid(sail, width * north), Stroke::solid(sail, width * south)];
        self.split_line(&points, strokes, 3.0);
    }

    fn sun(&mut self, report: &Report) {
        let sun = self.view.sun();
        if !self.view.frame.grown(-8.0).contains(sun) {
            return;
        }
        let nearest = [&report.ends.from, &report.ends.to]
            .map(|end| end.semi_major_axis_au * (1.0 - end.eccentricity))
            .into_iter()
            .fold(f64::INFINITY, f64::min);
        let room_px = nearest * self.view.px_per_au;
        let ink = self.theme.ink;
        if room_px > 18.0 {
            self.shapes.push(Shape::Ring { centre: sun, radius: 6.0, stroke: Stroke::solid(ink, 1.4) });
            self.shapes.push(Shape::Disc { centre: sun, radius: 1.75, color: ink });
            self.room.take(Rect::around(sun, 16.0, 16.0));
        } else {
            self.shapes.push(Shape::Disc {
                centre: sun,
                radius: (room_px * 0.3).clamp(1.0, 3.0),
                color: ink,
            });
            self.room.take(Rect::around(sun, 6.0, 6.0));
        }
    }

    /// Departure (open) and arrival (filled) marks.
    fn ends(&mut self, places: &[Place]) -> Vec<Point> {
        let (Some(first), Some(last)) = (places.first(), places.last()) else { return Vec::new() };
        let inside = self.view.frame.grown(-6.0);
        let ink = self.theme.ink;
        let mut marks = Vec::new();
        if inside.contains(first.at) {
            self.shapes.push(Shape::Disc { centre: first.at, radius: 5.0, color: self.theme.sheet });
            self.shapes.push(Shape::Ring { centre: first.at, radius: 4.5, stroke: Stroke::solid(ink, 1.6) });
            marks.push(first.at);
        }
        if inside.contains(last.at) {
            self.shapes.push(Shape::Disc { centre: last.at, radius: 6.5, color: self.theme.sheet });
            self.shapes.push(Shape::Disc { centre: last.at, radius: 5.0, color: ink });
            marks.push(last.at);
        }
        for mark in &marks {
            self.room.take(Rect::around(*mark, 12.0, 12.0));
        }
        marks
    }

    fn find_ticks(&self, places: &[Place], crowded: bool) -> Ticks {
        let most = if self.small { 15 } else { 24 };
        ticks(places, if crowded { 10 } else { most }, if crowded { 22.0 } else { 9.0 })
    }

    fn ticks(&mut self, places: &[Place], ticks: &Ticks, crowded: bool) {
        for place in ticks.places.iter().filter(|place| self.view.frame.contains(place.at)) {
            let stroke = Stroke::solid(self.theme.sail, 1.2);
            if crowded {
                self.shapes.push(Shape::Disc { centre: place.at, radius: 3.0, color: self.theme.sheet });
                self.shapes.push(Shape::Ring { centre: place.at, radius: 2.5, stroke });
            } else if let Some(along) = heading(places, place.arc_px) {
                let across = Point::new(-along.y, along.x);
                let points = vec![place.at.shifted(across, 4.0), place.at.shifted(across, -4.0)];
                self.shapes.push(Shape::Polyline { points, stroke });
            }
        }
    }

    fn attitudes(&mut self, places: &[Place], crowded: bool, marks: &[Point], ticks: &Ticks) {
        let plan = BarPlan {
            most: if crowded || self.small { 12 } else { 24 },
            spacing_px: if self.small { 58.0 } else { 96.0 },
            gap_px: if self.small { 24.0 } else { 30.0 },
        };
        let half_px = if self.small { 8.0 } else { 10.0 };
        let frame = self.view.frame.grown(-half_px * 1.5);
        let tick_points: Vec<Point> = ticks.places.iter().map(|place| place.at).collect();
        let seen: Vec<Place> = bars(places, plan, marks, &tick_points)
            .into_iter()
            .filter(|place| frame.contains(place.at))
            .collect();
        let (sail, face) = (self.theme.sail, self.theme.sail.towards(self.theme.sheet, 0.75));
        for place in &seen {
            let shapes = sail_mark(place, half_px, sail, face);
            for shape in &shapes {
                if let Shape::Polyline { points, stroke } = shape {
                    self.room.draw_line(points, 4.0);
                    if crowded {
                        let ground = Stroke::solid(self.theme.sheet, stroke.width + 3.0);
                        self.shapes.push(Shape::Polyline { points: points.clone(), stroke: ground });
                    }
                }
            }
            self.shapes.extend(shapes);
        }
        let mut avoid: Vec<Point> = seen.iter().map(|place| place.at).chain(marks.iter().copied()).collect();
        avoid.extend(tick_points);
        let shares: &[f64] = if crowded { &[] } else { &[0.2, 0.5, 0.8] };
        for (at, along) in arrows(places, shares, &avoid) {
            if frame.contains(at) {
                self.shapes
                    .push(Shape::Polygon { points: arrow_head(at, along, 9.0), color: self.theme.sail });
            }
        }
    }

    /// One arrow of motion where the orbit is freest.
    fn orbit_arrow(&mut self, pieces: &[Vec<Point>], marks: &[Point]) {
        let frame = self.view.frame.grown(-10.0);
        let spots = spots(pieces, 24);
        let far = |at: Point| marks.iter().map(|mark| mark.distance(at)).fold(f64::INFINITY, f64::min);
        let freest = spots
            .into_iter()
            .filter(|(at, _)| frame.contains(*at) && self.room.is_free(&Rect::around(*at, 8.0, 8.0)))
            .filter(|(at, _)| far(*at) > 14.0)
            .min_by(|a, b| self.room.cost_near(a.0).total_cmp(&self.room.cost_near(b.0)));
        if let Some((at, along)) = freest {
            self.shapes.push(Shape::Polygon { points: arrow_head(at, along, 8.0), color: self.theme.edge });
            self.room.draw_line(&[at, at.shifted(along, 4.0)], 4.0);
        }
    }
}

/// Up to `count` spots spread over the visible pieces of a line, with the unit direction there.
pub(crate) fn spots(pieces: &[Vec<Point>], count: usize) -> Vec<(Point, Point)> {
    let total: f64 = pieces.iter().flat_map(|piece| piece.windows(2)).map(|w| w[0].distance(w[1])).sum();
    let step = total / count as f64;
    let mut found = Vec::with_capacity(count);
    let mut until = step / 2.0;
    for pair in pieces.iter().flat_map(|piece| piece.windows(2)) {
        let length = pair[0].distance(pair[1]);
        if length <= 0.0 {
            continue;
        }
        let along = Point::new((pair[1].x - pair[0].x) / length, (pair[1].y - pair[0].y) / length);
        while until <= length && found.len() < count {
            found.push((pair[0].shifted(along, until), along));
            until += step;
        }
        until -= length;
    }
    found
}
