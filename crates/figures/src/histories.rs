//! Histories of the flight: panels stacked over one shared time axis.

use scenario::report::{Columns, Ends, Report};

use crate::axis::{Steps, Tick, extent, linear_ticks};
use crate::calendar::{date_ticks, day, start_d};
use crate::geometry::{Rect, clip, reduce};
use crate::labels::{Room, Style};
use crate::metrics::{text_height, text_width};
use crate::notes;
use crate::panels::{Kind, Quantity, Scale, end_ranges, quantities, scale};
use crate::shapes::{Anchor, Point, Shape, Stroke, Text, Weight, printable};
use crate::theme::{Color, Theme};
use crate::{Drawing, FigureError, FigureOptions, Panel};

/// Font size of tick labels, CSS pixels.
pub(crate) const TICK_SIZE: f64 = 11.0;
/// Font size of panel names, CSS pixels.
const NAME_SIZE: f64 = 12.0;
/// Height of a panel's name line, CSS pixels.
const NAME_HEIGHT: f64 = 20.0;
/// Height below the last panel: tick labels and the time axis's name.
const FOOT: f64 = 38.0;
/// Height of the calendar below the tick labels, CSS pixels.
const CALENDAR: f64 = 20.0;
/// Space between two labels of one axis, CSS pixels.
const GAP: f64 = 8.0;
pub(crate) fn draw(
    report: &Report,
    columns: &Columns,
    options: &FigureOptions,
    theme: &Theme,
) -> Result<Drawing, FigureError> {
    let quantities = quantities(report, columns, &options.panels)?;
    let whole = Rect { left: 0.0, top: 0.0, width: options.width, height: options.height };
    let mut shapes = vec![Shape::Polygon { points: whole.corners(), color: theme.sheet }];
    let sentences = notes::sentences(report, columns, options.stale);
    let used = notes::set(&mut shapes, &sentences, whole.grown(-10.0), theme);
    let Some((_, end_d)) = extent(&columns.t_d).filter(|_| notes::has_history(columns)) else {
        return Ok(Drawing { shapes, panels: Vec::new() });
    };
    let top = if used > 0.0 { used + 14.0 } else { 6.0 };

    let depart_d = start_d(report.flight.depart.as_deref());
    let foot_height = if depart_d.is_some() { FOOT + CALENDAR } else { FOOT };
    let slot = (whole.height - top - foot_height) / quantities.len() as f64;
    let height = (slot - NAME_HEIGHT - 6.0).max(8.0);
    let scales: Vec<Scale> =
        quantities.iter().map(|quantity| scale(quantity, &report.ends, height)).collect();
    let widest = scales
        .iter()
        .flat_map(|scale| &scale.ticks)
        .map(|tick| text_width(&tick.label, TICK_SIZE, Weight::Normal))
        .fold(0.0, f64::max);
    let left = (widest + 14.0).min(whole.width / 3.0);
    let width = whole.width - left - 14.0;
    let times = time_ticks(end_d, left, width, whole.width);

    let mut panels = Vec::new();
    for (k, (quantity, scale)) in quantities.iter().zip(&scales).enumerate() {
        let frame = Rect { left, top: top + slot * k as f64 + NAME_HEIGHT, width, height };
        let mut plot = Plot { shapes: &mut shapes, frame, end_d, scale, theme };
        plot.name(quantity);
        if quantity.kind == Kind::Distance {
            plot.bands(&report.ends);
        }
        plot.grid(&times, quantity.kind, k + 1 == quantities.len());
        if quantity.kind == Kind::Distance {
            plot.end_distances(&report.ends, columns);
        }
        plot.curve(&columns.t_d, quantity);
        panels.push(plot.panel(quantity));
    }
    let foot = top + slot * quantities.len() as f64 - 6.0;
    for tick in &times {
        let at = Point::new(left + width * tick.value / end_d, foot + 4.0 + text_height(TICK_SIZE) / 2.0);
        shapes.push(label(&tick.label, at, Anchor::Middle, TICK_SIZE, theme.muted));
    }
    if let Some(depart_d) = depart_d {
        let line = foot + 4.0 + text_height(TICK_SIZE) + 5.0;
        let span = |tick: &Tick| label_span(tick, end_d, left, width);
        let apart = |ticks: &[Tick]| are_apart(ticks, span);
        let inside = |tick: &Tick| span(tick).0 >= 1.0 && span(tick).1 <= whole.width - 1.0;
        for tick in date_ticks(depart_d, end_d, apart).into_iter().filter(inside) {
            let x = left + width * tick.value / end_d;
            let points = vec![Point::new(x, line - 2.0), Point::new(x, line + 3.0)];
            shapes.push(Shape::Polyline { points, stroke: Stroke::solid(theme.edge, 1.0) });
            let at = Point::new(x, line + 4.0 + text_height(TICK_SIZE) / 2.0);
            shapes.push(label(&tick.label, at, Anchor::Middle, TICK_SIZE, theme.muted));
        }
        let points = vec![Point::new(left, line), Point::new(left + width, line)];
        shapes.push(Shape::Polyline { points, stroke: Stroke::solid(theme.hairline, 1.0) });
    }
    let at = Point::new(left, whole.height - 10.0);
    let name = time_name(day(report.flight.depart.as_deref()).filter(|_| depart_d.is_some()), width);
    shapes.push(label(&name, at, Anchor::Start, NAME_SIZE, theme.ink));
    Ok(Drawing { shapes, panels })
}

/// The time axis in words; those of a dated flight are cut to the width there is.
fn time_name(depart: Option<&str>, width: f64) -> String {
    let Some(depart) = depart else { return "Time since departure (d)".to_owned() };
    let long = format!("Time since departure on {depart} (d), and calendar date (TDB)");
    let middle = format!("Time since {depart} (d), and date (TDB)");
    let fits = |name: &String| text_width(name, NAME_SIZE, Weight::Normal) <= width;
    [long, middle].into_iter().find(fits).unwrap_or_else(|| "Time (d), date (TDB)".to_owned())
}

fn label(content: &str, at: Point, anchor: Anchor, size: f64, color: Color) -> Shape {
    Shape::Text(Text { at, content: printable(content), anchor, size, color, weight: Weight::Normal })
}

/// From where to where a tick's label reaches on the shared time axis.
fn label_span(tick: &Tick, end_d: f64, left: f64, width: f64) -> (f64, f64) {
    let half = text_width(&tick.label, TICK_SIZE, Weight::Normal) / 2.0;
    let x = left + width * tick.value / end_d;
    (x - half, x + half)
}

/// Whether labels that reach so far keep apart.
fn are_apart(ticks: &[Tick], span: impl Fn(&Tick) -> (f64, f64)) -> bool {
    ticks.windows(2).all(|pair| span(&pair[0]).1 + GAP <= span(&pair[1]).0)
}

/// Ticks of the shared time axis; labels keep apart and inside the picture.
fn time_ticks(end_d: f64, left: f64, width: f64, whole_width: f64) -> Vec<Tick> {
    let span = |tick: &Tick| label_span(tick, end_d, left, width);
    let mut ticks = linear_ticks(0.0, end_d, Steps::Decimal, |ticks| are_apart(ticks, span));
    ticks.retain(|tick| span(tick).0 >= 1.0 && span(tick).1 <= whole_width - 1.0);
    ticks
}

/// One panel being drawn.
struct Plot<'a> {
    shapes: &'a mut Vec<Shape>,
    frame: Rect,
    end_d: f64,
    scale: &'a Scale,
    theme: &'a Theme,
}

impl Plot<'_> {
    fn px(&self, t_d: f64, value: f64) -> Point {
        let frame = &self.frame;
        Point::new(
            frame.left + frame.width * t_d / self.end_d,
            frame.bottom() - frame.height * self.scale.share(value),
        )
    }

    fn segment(&mut self, a: Point, b: Point, stroke: Stroke) {
        self.shapes.push(Shape::Polyline { points: vec![a, b], stroke });
    }

    fn name(&mut self, quantity: &Quantity) {
        let at = Point::new(self.frame.left, self.frame.top - NAME_HEIGHT / 2.0);
        let unit = if self.scale.log { format!("{}, log", quantity.unit) } else { quantity.unit.to_owned() };
        let content = format!("{} ({unit})", quantity.name);
        self.shapes.push(label(&content, at, Anchor::Start, NAME_SIZE, self.theme.ink));
        if !quantity.values.iter().any(|v| v.is_finite()) {
            let at = self.frame.centre();
            self.shapes.push(label("no values", at, Anchor::Middle, TICK_SIZE, self.theme.muted));
        }
    }

    fn grid(&mut self, times: &[Tick], kind: Kind, last: bool) {
        let Rect { left, top, .. } = self.frame;
        let (right, bottom) = (self.frame.right(), self.frame.bottom());
        let hairline = Stroke::solid(self.theme.hairline, 1.0);
        for tick in times {
            let x = self.px(tick.value, self.scale.min).x;
            self.segment(Point::new(x, top), Point::new(x, bottom), hairline);
        }
        for tick in &self.scale.ticks {
            let y = self.px(0.0, tick.value).y;
            let zero = matches!(kind, Kind::Angle | Kind::Wrapped) && tick.value == 0.0;
            let stroke = if zero { Stroke::solid(self.theme.edge, 1.0) } else { hairline };
            self.segment(Point::new(left, y), Point::new(right, y), stroke);
            let at = Point::new(left - 6.0, y);
            self.shapes.push(label(&tick.label, at, Anchor::End, TICK_SIZE, self.theme.muted));
        }
        let base = if last { Stroke::solid(self.theme.edge, 1.0) } else { hairline };
        self.segment(Point::new(left, bottom), Point::new(right, bottom), base);
    }

    /// What an end's orbit of some eccentricity spans, between its nearest and farthest distance.
    fn bands(&mut self, ends: &Ends) {
        let Rect { left, width, .. } = self.frame;
        for (nearest, farthest, _) in end_ranges(ends).into_iter().filter(|(near, far, _)| near < far) {
            let (top, bottom) = (self.px(0.0, farthest).y, self.px(0.0, nearest).y);
            let color = self.theme.hairline.towards(self.theme.sheet, 0.55);
            self.shapes.push(Shape::Polygon {
                points: Rect { left, top, width, height: (bottom - top).max(1.0) }.corners(),
                color,
            });
        }
    }

    /// Lines at the distances of both ends (bands for ellipses stand already), named where the curve leaves room.
    fn end_distances(&mut self, ends: &Ends, columns: &Columns) {
        let Rect { left, width, .. } = self.frame;
        let mut room = Room::new(self.frame);
        let curve: Vec<Point> =
            columns.t_d.iter().zip(&columns.distance_au).map(|(&t, &r)| self.px(t, r)).collect();
        for piece in clip(&curve, &self.frame) {
            room.draw_line(&piece, 3.0);
        }
        let style = Style { size: TICK_SIZE, color: self.theme.muted, weight: Weight::Normal };
        let mut names = Vec::new();
        for (nearest, farthest, end) in end_ranges(ends) {
            let y = self.px(0.0, (nearest + farthest) / 2.0).y;
            if nearest == farthest {
                let line = [Point::new(left, y), Point::new(left + width, y)];
                room.draw_line(&line, 0.05);
                self.segment(line[0], line[1], Stroke::solid(self.theme.edge, 1.0));
            }
            names.push((y, end.name.clone()));
        }
        for (y, name) in names {
            let half = text_width(&name, TICK_SIZE, Weight::Normal) / 2.0;
            let beside = text_height(TICK_SIZE) / 2.0 + 2.5;
            let spots = [0.02, 0.98, 0.25, 0.5, 0.75].into_iter().flat_map(|share| {
                let x = left + 4.0 + half + (width - 8.0 - 2.0 * half) * share;
                [Point::new(x, y - beside), Point::new(x, y + beside)]
            });
            if let Some(text) = room.place(&name, style, spots, 2.0) {
                self.shapes.push(Shape::Text(text));
            }
        }
    }

    /// The curve, broken where there is no value; a jump (two samples at one time) is a thin dotted line. An angle
    /// that passes 180 deg leaves at one edge and goes on at the other.
    fn curve(&mut self, t_d: &[f64], quantity: &Quantity) {
        let solid = Stroke::solid(self.theme.sail, 1.8);
        let dotted = Stroke::dashed(self.theme.sail, 1.0, (2.0, 3.0));
        let mut run: Vec<Point> = Vec::new();
        let mut runs: Vec<Vec<Point>> = Vec::new();
        let mut before: Option<(f64, f64)> = None;
        for (&t, &value) in t_d.iter().zip(quantity.values) {
            if !(value.is_finite() && t.is_finite()) {
                runs.push(std::mem::take(&mut run));
                before = None;
                continue;
            }
            let here = self.px(t, value);
            if let Some((t0, v0)) = before {
                let jump = t == t0 && value != v0;
                let wraps = quantity.kind == Kind::Wrapped && (value - v0).abs() > 180.0;
                if jump {
                    self.segment(self.px(t0, v0), here, dotted);
                    runs.push(std::mem::take(&mut run));
                } else if wraps {
                    let edge = 180.0_f64.copysign(v0);
                    let gone = (edge - v0) / (value + 2.0 * edge - v0);
                    let crossing = t0 + (t - t0) * gone;
                    run.push(self.px(crossing, edge));
                    runs.push(std::mem::take(&mut run));
                    run.push(self.px(crossing, -edge));
                }
            }
            run.push(here);
            before = Some((t, value));
        }
        runs.push(run);
        for run in runs {
            for piece in clip(&reduce(&extremes_per_pixel(&run), 0.1), &self.frame.grown(1.0)) {
                self.shapes.push(Shape::Polyline { points: piece, stroke: solid });
            }
        }
    }

    fn panel(&self, quantity: &Quantity) -> Panel {
        let Rect { left, top, width, height } = self.frame;
        Panel {
            column: quantity.column.to_owned(),
            unit: quantity.unit.to_owned(),
            left,
            top,
            width,
            height,
            x_min: 0.0,
            x_max: self.end_d,
            y_min: self.scale.min,
            y_max: self.scale.max,
            y_log: self.scale.log,
            project: None,
            center_x: None,
            center_y: None,
        }
    }
}

/// At most four points for each half pixel of width: the first, the lowest, the highest and the last of those that
/// fall into it, in their order. No extreme is lost.
fn extremes_per_pixel(points: &[Point]) -> Vec<Point> {
    let column = |point: &Point| (point.x * 2.0).floor() as i64;
    let mut kept = Vec::new();
    for group in points.chunk_by(|a, b| column(a) == column(b)) {
        if group.len() <= 4 {
            kept.extend_from_slice(group);
            continue;
        }
        let by_height = |&i: &usize, &j: &usize| group[i].y.total_cmp(&group[j].y);
        let lowest = (0..group.len()).max_by(by_height).unwrap_or(0);
        let highest = (0..group.len()).min_by(by_height).unwrap_or(0);
        let mut rows = [0, lowest, highest, group.len() - 1];
        rows.sort_unstable();
        let mut last = None;
        for row in rows {
            if last != Some(row) {
                kept.push(group[row]);
            }
            last = Some(row);
        }
    }
    kept
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn time_labels_are_few_apart_and_inside(
            end_exponent in -1.0..5.0_f64, width in 150.0..1400.0_f64, left in 20.0..60.0_f64
        ) {
            let end_d = 10.0_f64.powf(end_exponent);
            let whole = left + width + 14.0;
            let ticks = time_ticks(end_d, left, width, whole);
            prop_assert!(!ticks.is_empty() && ticks.len() <= crate::axis::MAX_TICKS);
            let spans: Vec<(f64, f64)> = ticks
                .iter()
                .map(|tick| {
                    let half = text_width(&tick.label, TICK_SIZE, Weight::Normal) / 2.0;
                    let x = left + width * tick.value / end_d;
                    (x - half, x + half)
                })
                .collect();
            prop_assert!(spans.windows(2).all(|pair| pair[0].1 < pair[1].0), "{ticks:?}");
            prop_assert!(spans.iter().all(|s| s.0 >= 0.0 && s.1 <= whole), "{ticks:?}");
        }

        #[test]
        fn reduction_keeps_the_extremes(
            values in prop::collection::vec(0.0..300.0_f64, 5..3000), width in 50.0..800.0_f64
        ) {
            let count = values.len() as f64;
            let points: Vec<Point> = values
                .iter()
                .enumerate()
                .map(|(i, &y)| Point::new(width * i as f64 / count, y))
                .collect();
            let kept = extremes_per_pixel(&points);
            prop_assert!(kept.len() <= 4 * (2.0 * width + 2.0) as usize);
            let range = |points: &[Point]| extent(&points.iter().map(|p| p.y).collect::<Vec<_>>());
            prop_assert_eq!(range(&kept), range(&points));
            prop_assert!(kept.windows(2).all(|pair| pair[0].x <= pair[1].x));
        }
    }
}
