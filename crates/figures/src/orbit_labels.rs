//! Words on the orbit picture: scale, names of lines and places, times.

use scenario::report::{End, Report};

use crate::FigureOptions;
use crate::axis::number;
use crate::bodies::{BodyMark, body_name};
use crate::calendar::day;
use crate::geometry::{Rect, clip};
use crate::labels::{Style, beside};
use crate::marks::Ticks;
use crate::metrics::{text_box, text_height, text_width};
use crate::orbit::{Sheet, spots};
use crate::shapes::{Anchor, Point, Shape, Stroke, Text, Weight};
use crate::theme::Color;
use crate::track::Place;

/// How much of the weights in `Room` an ordinary label may cover; above it the label is left out.
pub(crate) const COVER: f64 = 5.0;

/// Orbits smaller than this (CSS pixels) have no room for a name of their own.
const NAMELESS: f64 = 36.0;

/// A round number without needless decimals.
fn short(value: f64) -> String {
    number(value, (-value.log10().floor()).clamp(0.0, 9.0) as usize)
}

/// The orbit's name on the picture.
fn orbit_name(end: &End) -> String {
    if end.name.ends_with("orbit") { end.name.clone() } else { format!("{}\u{2019}s orbit", end.name) }
}

impl Sheet<'_> {
    pub(crate) fn scale_bar(&mut self) {
        let longest_au = self.view.frame.width * 0.24 / self.view.px_per_au;
        let decade = 10.0_f64.powf(longest_au.log10().floor());
        let length_au =
            [5.0, 2.0, 1.0].map(|m| m * decade).into_iter().find(|l| *l <= longest_au * 1.000_001);
        let length_au = length_au.unwrap_or(decade);
        let content = format!("{} au", short(length_au));
        let length = length_au * self.view.px_per_au;
        let (left, base) = (12.0, self.view.frame.bottom() - 12.0);
        let (size, muted) = (11.0, self.theme.muted);
        let width = length.max(text_width(&content, size, Weight::Normal));
        let area = Rect { left: left - 4.0, top: base - 24.0, width: width + 8.0, height: 32.0 };
        self.fill(area, self.theme.sheet);
        self.room.take(area);
        let points = [(0.0, -5.0), (0.0, 0.0), (length, 0.0), (length, -5.0)]
            .map(|(x, y)| Point::new(left + x, base + y))
            .to_vec();
        self.shapes.push(Shape::Polyline { points, stroke: Stroke::solid(muted, 1.2) });
        let at = Point::new(left + length / 2.0, base - 13.0);
        let (at, anchor) =
            if length < width { (Point::new(left, at.y), Anchor::Start) } else { (at, Anchor::Middle) };
        self.labels.push(Text { at, content, anchor, size, color: muted, weight: Weight::Normal });
    }

    /// What the marks mean and where the picture is seen from, in the corner; a small picture has room for less.
    pub(crate) fn captions(
        &mut self,
        ticks: &Ticks,
        rings_au: Option<f64>,
        heights: bool,
        options: &FigureOptions,
    ) {
        let mut lines = Vec::new();
        if !ticks.places.is_empty() {
            let mark = if ticks.interval_d < 365.0 { "ticks" } else { "marks" };
            lines.push(format!("{mark} every {}", ticks.words));
        }
        if let Some(step_au) = rings_au.filter(|_| !self.small) {
            lines.push(format!("ecliptic rings every {} au", short(step_au)));
        }
        if heights && !self.small {
            lines.push("thin: south of the ecliptic".to_owned());
        }
        if options.tilt_deg > 0.0 {
            lines.push(format!("{}° from ecliptic north", number(options.tilt_deg, 0)));
        }
        let (right, bottom) = (self.view.frame.right() - 12.0, self.view.frame.bottom() - 14.0);
        for (k, content) in lines.into_iter().enumerate() {
            let text = Text {
                at: Point::new(right, bottom - 15.0 * k as f64),
                content,
                anchor: Anchor::End,
                size: 11.0,
                color: self.theme.muted,
                weight: Weight::Normal,
            };
            let area = text_box(&text).grown(3.0);
            if !self.room.is_free(&area.grown(-3.0)) {
                return;
            }
            self.fill(area, self.theme.sheet);
            self.room.take(area.grown(-1.5));
            self.labels.push(text);
        }
    }

    /// Sets a label; where it covers a line, the line is interrupted as on a map.
    /// Whether there was room for it.
    pub(crate) fn label(&mut self, content: &str, style: Style, candidates: Vec<Point>, most: f64) -> bool {
        let Some(text) = self.room.place(content, style, candidates, most) else { return false };
        let area = text_box(&text);
        if self.room.covers(&area) {
            self.fill(Rect { height: area.height - 2.0, top: area.top + 1.0, ..area }, self.theme.sheet);
        }
        self.labels.push(text);
        true
    }

    pub(crate) fn style(&self, color: Color) -> Style {
        Style { size: 12.0, color, weight: Weight::Normal }
    }

    fn is_nameless(&self, end: &End) -> bool {
        end.semi_major_axis_au * self.view.px_per_au < NAMELESS
    }

    /// Names of departure and arrival, with their dates where there are some; they take the orbit's name along where
    /// the orbit is too small for it.
    pub(crate) fn end_labels(&mut self, places: &[Place], report: &Report, bodies: &[BodyMark]) {
        // Where nothing is flown there is neither departure nor arrival.
        let (Some(first), Some(last)) = (places.first(), places.last()) else { return };
        if first.t_d == last.t_d {
            return;
        }
        let sun = self.view.sun();
        let style = self.style(self.theme.ink);
        let flight = &report.flight;
        let met = bodies.iter().any(|body| body.met);
        let meeting = format!("meets {}", body_name(&report.ends.to, false));
        let arrival = if met { meeting.as_str() } else { "arrival" };
        for (place, word, end, date) in [
            (last, arrival, &report.ends.to, day(flight.arrive.as_deref())),
            (first, "departure", &report.ends.from, day(flight.depart.as_deref())),
        ] {
            let name = if self.is_nameless(end) { format!(", {}", orbit_name(end)) } else { String::new() };
            let short = format!("{word}{name}");
            let long = date.filter(|_| !self.small).map(|date| format!("{short}, {date}"));
            let out = Point::new(place.at.x - sun.x, place.at.y - sun.y);
            for content in long.iter().chain([&short]) {
                if self.label(content, style, beside(place.at, out, 9.0, content, style), f64::INFINITY) {
                    break;
                }
            }
        }
    }

    pub(crate) fn orbit_label(&mut self, end: &End, pieces: &[Vec<Point>], outside_first: bool) {
        if self.is_nameless(end) || pieces.is_empty() {
            return;
        }
        let content = orbit_name(end);
        let style = self.style(self.theme.muted);
        let candidates = self.along(top_right_first(spots(pieces, 40)), &content, style, outside_first);
        self.label(&content, style, candidates, 3.0 * COVER);
    }

    pub(crate) fn line_labels(&mut self, report: &Report, places: &[Place], impulsive: &[Vec<Point>]) {
        let time = |d: f64| {
            if d < 1461.0 {
                format!("{} d", number(d, if d < 1000.0 { 1 } else { 0 }))
            } else {
                format!("{} d ({} y)", number(d, 0), number(d / 365.25, 1))
            }
        };
        let way: Vec<Point> = places.iter().map(|place| place.at).collect();
        let seen = clip(&way, &self.view.frame);
        if let Some(time_d) = report.flight.time_d.filter(|_| !seen.is_empty()) {
            let content = format!("sail, {}", time(time_d));
            let style = self.style(self.theme.sail);
            let candidates = self.along(middle_first(spots(&seen, 40)), &content, style, true);
            self.label(&content, style, candidates, 3.0 * COVER);
        }
        if !impulsive.is_empty() {
            let content = format!("Hohmann, {}", time(report.impulsive.heliocentric.time_d));
            let style = self.style(self.theme.impulse);
            let candidates = self.along(middle_first(spots(impulsive, 40)), &content, style, false);
            self.label(&content, style, candidates, 3.0 * COVER);
        }
    }

    pub(crate) fn tick_labels(&mut self, ticks: &Ticks) {
        let count = ticks.places.len();
        let most = if self.small { 5 } else { 9 };
        let Some(every) = [1, 2, 3, 5, 6, 10, 12, 20].into_iter().find(|every| count / every <= most) else {
            return;
        };
        let style = Style { size: 11.0, color: self.theme.muted, weight: Weight::Normal };
        let sun = self.view.sun();
        for place in ticks.places.iter().skip(every - 1).step_by(every) {
            let content = ticks.label(place.t_d);
            let out = Point::new(place.at.x - sun.x, place.at.y - sun.y);
            let candidates = beside(place.at, out, 7.0, &content, style).into_iter().take(12).collect();
            self.label(&content, style, candidates, COVER);
        }
    }

    pub(crate) fn sun_label(&mut self) {
        let sun = self.view.sun();
        let style = Style { size: 11.0, color: self.theme.muted, weight: Weight::Normal };
        self.label("Sun", style, beside(sun, Point::new(0.0, 1.0), 9.0, "Sun", style), 0.5);
    }

    /// Candidates for a label on either side of a line at the given spots.
    fn along(
        &self,
        spots: Vec<(Point, Point)>,
        content: &str,
        style: Style,
        outside_first: bool,
    ) -> Vec<Point> {
        let sun = self.view.sun();
        let half_width = text_width(content, style.size, style.weight) / 2.0;
        let half_height = text_height(style.size) / 2.0;
        let mut candidates = Vec::new();
        for (at, along) in spots {
            let mut out = Point::new(-along.y, along.x);
            if out.x * (at.x - sun.x) + out.y * (at.y - sun.y) < 0.0 {
                out = Point::new(-out.x, -out.y);
            }
            let reach = half_width * out.x.abs() + half_height * out.y.abs();
            let sides = if outside_first { [1.0, -1.0] } else { [-1.0, 1.0] };
            candidates.extend(sides.map(|side| at.shifted(out, side * (reach + 5.0))));
        }
        candidates
    }
}

/// Spots of a closed line, round from the one nearest the top right.
fn top_right_first(mut spots: Vec<(Point, Point)>) -> Vec<(Point, Point)> {
    let first = (0..spots.len()).max_by(|&i, &j| {
        let up = |k: usize| spots[k].0.x - 1.3 * spots[k].0.y;
        up(i).total_cmp(&up(j))
    });
    spots.rotate_left(first.unwrap_or(0));
    spots
}

/// Spots of an open line from its middle outwards: both its ends lie on other lines.
fn middle_first(spots: Vec<(Point, Point)>) -> Vec<(Point, Point)> {
    let middle = spots.len() / 2;
    let mut order: Vec<usize> = (0..spots.len()).collect();
    order.sort_by_key(|&k| k.abs_diff(middle));
    order.into_iter().map(|k| spots[k]).collect()
}
