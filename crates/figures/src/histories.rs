//! Histories of the flight: panels stacked over one shared time axis.

use scenario::report::{Columns, End, Report};

use crate::axis::{Steps, Tick, extent, linear_ticks, log_ticks, padded};
use crate::geometry::{Rect, clip, reduce};
use crate::labels::{Room, Style};
use crate::metrics::{text_height, text_width};
use crate::notes;
use crate::shapes::{Anchor, Point, Shape, Stroke, Text, Weight, printable};
use crate::theme::{Color, Theme};
use crate::{Drawing, FigureOptions, Panel};

/// Font size of tick labels, CSS pixels.
const TICK_SIZE: f64 = 11.0;
/// Font size of panel names, CSS pixels.
const NAME_SIZE: f64 = 12.0;
/// Height of a panel's name line, CSS pixels.
const NAME_HEIGHT: f64 = 20.0;
/// Height below the last panel: tick labels and the time axis's name.
const FOOT: f64 = 38.0;
/// Space between two labels of one axis, CSS pixels.
const GAP: f64 = 8.0;
/// Decades that a logarithmic panel shows below its largest value; smaller values run along its floor.
const DECADES: f64 = 3.5;

/// How a quantity is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Kind {
    /// An angle: ticks at parts of a right angle, a line at zero, jumps.
    Angle,
    /// A distance: the radii of circular orbits at both ends are drawn too.
    Distance,
    /// Anything else on a linear axis.
    Plain,
    /// A quantity that spans decades.
    Log,
}

/// One panel before it is drawn.
struct Quantity<'a> {
    column: &'static str,
    name: &'static str,
    unit: &'static str,
    kind: Kind,
    values: &'a [f64],
}

fn quantities(columns: &Columns) -> [Quantity<'_>; 4] {
    let quantity = |column, name, unit, kind, values| Quantity { column, name, unit, kind, values };
    [
        quantity("cone_deg", "Cone angle", "deg", Kind::Angle, &columns.cone_deg),
        quantity("distance_au", "Distance from the Sun", "au", Kind::Distance, &columns.distance_au),
        quantity("speed_km_s", "Speed", "km/s", Kind::Plain, &columns.speed_km_s),
        quantity("turn_rate_deg_d", "Turn rate of the sail", "deg/d", Kind::Log, &columns.turn_rate_deg_d),
    ]
}

/// The scale of one panel's y axis.
struct Scale {
    min: f64,
    max: f64,
    log: bool,
    ticks: Vec<Tick>,
}

impl Scale {
    /// Height above the bottom edge as a share of the panel's height.
    fn share(&self, value: f64) -> f64 {
        if self.log {
            // Values at or below the floor run along it.
            (value.max(self.min) / self.min).ln() / (self.max / self.min).ln()
        } else {
            (value - self.min) / (self.max - self.min)
        }
    }
}

pub(crate) fn draw(report: &Report, columns: &Columns, options: &FigureOptions, theme: &Theme) -> Drawing {
    let whole = Rect { left: 0.0, top: 0.0, width: options.width, height: options.height };
    let mut shapes = vec![Shape::Polygon { points: whole.corners(), color: theme.sheet }];
    let sentences = notes::sentences(report, columns, options.stale);
    let used = notes::set(&mut shapes, &sentences, whole.grown(-10.0), theme);
    let Some((_, end_d)) = extent(&columns.t_d).filter(|_| notes::has_history(columns)) else {
        return Drawing { shapes, panels: Vec::new() };
    };
    let top = if used > 0.0 { used + 14.0 } else { 6.0 };

    let quantities = quantities(columns);
    let slot = (whole.height - top - FOOT) / quantities.len() as f64;
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
        plot.grid(&times, quantity.kind, k + 1 == quantities.len());
        if quantity.kind == Kind::Distance {
            plot.radii(&report.ends, columns);
        }
        plot.curve(&columns.t_d, quantity);
        panels.push(plot.panel(quantity));
    }
    let foot = top + slot * quantities.len() as f64 - 6.0;
    for tick in &times {
        let at = Point::new(left + width * tick.value / end_d, foot + 4.0 + text_height(TICK_SIZE) / 2.0);
        shapes.push(label(&tick.label, at, Anchor::Middle, TICK_SIZE, theme.muted));
    }
    let at = Point::new(left, whole.height - 10.0);
    shapes.push(label("Time since departure (d)", at, Anchor::Start, NAME_SIZE, theme.ink));
    Drawing { shapes, panels }
}

fn label(content: &str, at: Point, anchor: Anchor, size: f64, color: Color) -> Shape {
    Shape::Text(Text { at, content: printable(content), anchor, size, color, weight: Weight::Normal })
}

/// Ticks of the shared time axis; labels keep apart and inside the picture.
fn time_ticks(end_d: f64, left: f64, width: f64, whole_width: f64) -> Vec<Tick> {
    let span = |tick: &Tick| {
        let half = text_width(&tick.label, TICK_SIZE, Weight::Normal) / 2.0;
        let x = left + width * tick.value / end_d;
        (x - half, x + half)
    };
    let mut ticks = linear_ticks(0.0, end_d, Steps::Decimal, |ticks| {
        ticks.windows(2).all(|pair| span(&pair[0]).1 + GAP <= span(&pair[1]).0)
    });
    ticks.retain(|tick| span(tick).0 >= 1.0 && span(tick).1 <= whole_width - 1.0);
    ticks
}

fn scale(quantity: &Quantity, ends: &scenario::report::Ends, height: f64) -> Scale {
    let apart = text_height(TICK_SIZE) + 4.0;
    let most = (height / apart).floor().max(1.0) as usize + 1;
    let found = extent(quantity.values);
    if quantity.kind == Kind::Log {
        let top = found.map_or(1.0, |(_, high)| high).max(1e-6);
        let positive: Vec<f64> = quantity.values.iter().copied().filter(|&v| v > 0.0).collect();
        let low = extent(&positive).map_or(top / 10.0, |(low, _)| low).max(top / 10.0_f64.powf(DECADES));
        // At least a decade, so that a steady rate does not look eventful.
        let (min, max) = (low.min(top / 10.0) / 1.15, top * 1.15);
        let ticks = log_ticks(min, max, |ticks| {
            let px = |value: f64| height * (value / min).ln() / (max / min).ln();
            ticks.windows(2).all(|pair| px(pair[1].value) - px(pair[0].value) >= apart)
        });
        return Scale { min, max, log: true, ticks };
    }
    let mut range = found.unwrap_or((0.0, 1.0));
    if quantity.kind == Kind::Distance {
        for radius in circle_radii(ends).into_iter().map(|(radius, _)| radius) {
            range = (range.0.min(radius), range.1.max(radius));
        }
    }
    let (min, max) = match quantity.kind {
        // Angles are shown in whole steps of 15 degrees: a steady attitude then reads as steady.
        Kind::Angle => {
            let (low, high) = ((range.0 / 15.0).floor() * 15.0, (range.1 / 15.0).ceil() * 15.0);
            if high > low { (low, high) } else { (low - 15.0, high + 15.0) }
        }
        _ => padded(range, 0.07),
    };
    let steps = if quantity.kind == Kind::Angle { Steps::Degrees } else { Steps::Decimal };
    let ticks = linear_ticks(min, max, steps, |ticks| {
        ticks.len() <= most
            && ticks.windows(2).all(|pair| (pair[1].value - pair[0].value) / (max - min) * height >= apart)
    });
    Scale { min, max, log: false, ticks }
}

/// Radii of the ends whose distance from the Sun does not change, with their names.
fn circle_radii(ends: &scenario::report::Ends) -> Vec<(f64, &End)> {
    [&ends.from, &ends.to]
        .into_iter()
        .filter(|end| end.eccentricity == 0.0)
        .map(|end| (end.semi_major_axis_au, end))
        .collect()
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
            let zero = kind == Kind::Angle && tick.value == 0.0;
            let stroke = if zero { Stroke::solid(self.theme.edge, 1.0) } else { hairline };
            self.segment(Point::new(left, y), Point::new(right, y), stroke);
            let at = Point::new(left - 6.0, y);
            self.shapes.push(label(&tick.label, at, Anchor::End, TICK_SIZE, self.theme.muted));
        }
        let base = if last { Stroke::solid(self.theme.edge, 1.0) } else { hairline };
        self.segment(Point::new(left, bottom), Point::new(right, bottom), base);
    }

    /// Lines at the radii of both ends, named where the curve leaves room.
    fn radii(&mut self, ends: &scenario::report::Ends, columns: &Columns) {
        let Rect { left, width, .. } = self.frame;
        let mut room = Room::new(self.frame);
        let curve: Vec<Point> =
            columns.t_d.iter().zip(&columns.distance_au).map(|(&t, &r)| self.px(t, r)).collect();
        for piece in clip(&curve, &self.frame) {
            room.draw_line(&piece, 3.0);
        }
        let style = Style { size: TICK_SIZE, color: self.theme.muted, weight: Weight::Normal };
        let mut names = Vec::new();
        for (radius, end) in circle_radii(ends) {
            let y = self.px(0.0, radius).y;
            let line = [Point::new(left, y), Point::new(left + width, y)];
            room.draw_line(&line, 0.05);
            self.segment(line[0], line[1], Stroke::solid(self.theme.edge, 1.0));
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

    /// The curve, broken where there is no value; a jump (two samples at one time) is a thin dotted line.
    fn curve(&mut self, t_d: &[f64], quantity: &Quantity) {
        let solid = Stroke::solid(self.theme.sail, 1.8);
        let dotted = Stroke::dashed(self.theme.sail, 1.0, (2.0, 3.0));
        let mut run: Vec<Point> = Vec::new();
        let mut runs: Vec<Vec<Point>> = Vec::new();
        for (i, (&t, &value)) in t_d.iter().zip(quantity.values).enumerate() {
            let jump = i > 0 && t == t_d[i - 1] && quantity.kind == Kind::Angle;
            if !(value.is_finite() && t.is_finite()) {
                runs.push(std::mem::take(&mut run));
                continue;
            }
            let here = self.px(t, value);
            if let Some(&last) = run.last().filter(|_| jump) {
                self.segment(last, here, dotted);
                runs.push(std::mem::take(&mut run));
            }
            run.push(here);
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
