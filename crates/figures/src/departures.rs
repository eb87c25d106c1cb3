//! Departure dates against flight time and arrival date: two panels over one calendar.
//!
//! Rows are drawn as they come: a study that still runs is a study with fewer rows.

use serde::{Deserialize, Serialize};

use crate::axis::{Steps, Tick, extent, linear_ticks, number, padded};
use crate::calendar::{date_ticks, start_d};
use crate::geometry::Rect;
use crate::labels::{Room, Style, beside};
use crate::metrics::{text_height, text_width};
use crate::notes;
use crate::shapes::{Anchor, Point, Shape, Stroke, Text, Weight, printable};
use crate::theme::{Color, Theme};
use crate::{Figure, FigureError, FigureMap, FigureOptions, Panel, check_options};

/// Font size of tick labels, CSS pixels.
pub(crate) const TICK_SIZE: f64 = 11.0;
/// Font size of axis names, CSS pixels.
pub(crate) const NAME_SIZE: f64 = 12.0;
/// Height of a panel's name line, CSS pixels.
const NAME_HEIGHT: f64 = 22.0;
/// Height below the last panel: dates and the axis's name.
pub(crate) const FOOT: f64 = 40.0;
/// Most departures that are named in the figure.
const MOST_NAMED: usize = 6;

/// A study of departure dates as far as it has come.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct Departures {
    /// First departure date, ISO 8601, TDB.
    pub start: String,
    /// Days from the first to the last departure date.
    pub span_d: f64,
    /// Days from one departure date to the next.
    pub step_d: f64,
    /// What the flight starts from and goes to, for people.
    pub ends: String,
    /// The rows that are there, in order of dates.
    pub rows: Vec<Departure>,
}

/// One departure date and the fastest flight found for it.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct Departure {
    /// Departure date, ISO 8601, TDB.
    pub depart: String,
    /// Days since the first departure date.
    pub depart_d: f64,
    /// Flight time, d; null where no flight was found.
    pub time_d: Option<f64>,
    /// Arrival date, ISO 8601, TDB.
    pub arrive: Option<String>,
    /// Whether it arrives earlier than a flight that leaves before.
    pub breaks_law: bool,
    /// Whether the flight time is a local minimum.
    pub best: bool,
    /// Whether no other flight of the study arrives earlier.
    pub earliest: bool,
}

/// Lays out flight time and arrival date against departure date.
///
/// # Units
/// CSS pixels, y down. Both panels: x in days since the first departure date; y in days of flight, and in days
/// since the first departure date for the arrival.
///
/// # Errors
/// A size outside its range, or a start that is no date.
pub fn departures(study: &Departures, options: &FigureOptions) -> Result<Figure, FigureError> {
    check_options(options)?;
    let first_d = first_day(&study.start)?;
    let theme = Theme::named(options.theme);
    let theme = if options.stale { theme.greyed() } else { *theme };
    let whole = Rect { left: 0.0, top: 0.0, width: options.width, height: options.height };
    let mut shapes = vec![Shape::Polygon { points: whole.corners(), color: theme.sheet }];
    let used = notes::set(&mut shapes, &sentences(study, options.stale), whole.grown(-10.0), &theme);
    let top = if used > 0.0 { used + 14.0 } else { 4.0 };
    let height = (whole.height - top - FOOT) / 2.0 - NAME_HEIGHT - 4.0;
    let found: Vec<(&Departure, f64)> =
        study.rows.iter().filter_map(|row| row.time_d.map(|time_d| (row, time_d))).collect();
    let times: Vec<f64> = found.iter().map(|(_, time_d)| *time_d).collect();
    let arrivals: Vec<f64> = found.iter().map(|(row, time_d)| row.depart_d + time_d).collect();
    let time_axis = Axis::numbers(&times, height);
    let arrival_axis = Axis::dates(&arrivals, first_d, height);
    let widest = time_axis
        .ticks
        .iter()
        .chain(&arrival_axis.ticks)
        .map(|tick| text_width(&tick.label, TICK_SIZE, Weight::Normal))
        .fold(24.0, f64::max);
    let left = (widest + 14.0).min(whole.width / 3.0);
    let width = (whole.width - left - 16.0).max(8.0);
    let dates = Calendar::new(first_d, [0.0, study.span_d.max(1.0)], left, width, whole.width);

    let mut panels = Vec::new();
    for (k, (name, unit, axis)) in
        [("Flight time (d)", "d", &time_axis), ("Arrival (TDB)", "date", &arrival_axis)]
            .into_iter()
            .enumerate()
    {
        let slot = height + NAME_HEIGHT + 4.0;
        let frame = Rect { left, top: top + slot * k as f64 + NAME_HEIGHT, width, height: height.max(8.0) };
        let mut plot = Plot { shapes: &mut shapes, frame, dates: &dates, axis, theme: &theme };
        plot.frame(name, found.is_empty());
        let value =
            |row: &Departure| row.time_d.map(|time_d| if k == 0 { time_d } else { row.depart_d + time_d });
        plot.rows(study, value);
        plot.named(study, k == 0, value);
        let column = if k == 0 { "time_d" } else { "arrive_d" };
        panels.push(plot.panel(column, unit));
    }
    dates.label(&mut shapes, whole.height - FOOT - 2.0, &theme);
    Ok(Figure {
        width: options.width,
        height: options.height,
        title: printable(&format!("Departure dates: {}", study.ends)),
        description: describe(study),
        shapes,
        map: FigureMap { panels },
    })
}

/// What a reader of the figure would see, in words.
pub(crate) fn describe(study: &Departures) -> String {
    let found: Vec<_> = study.rows.iter().filter(|row| row.time_d.is_some()).collect();
    let mut words = format!(
        "Flight time and arrival date against departure date, {} dates from {}: {} with a flight.",
        study.rows.len(),
        study.start,
        found.len()
    );
    let time = |row: &&&Departure| row.time_d.unwrap_or(f64::INFINITY);
    let best = found.iter().min_by(|a, b| time(a).total_cmp(&time(b)));
    let worst = found.iter().max_by(|a, b| time(a).total_cmp(&time(b)));
    if let (Some(best), Some(worst)) = (best, worst) {
        words += &format!(
            " Shortest {} days, leaving {}; longest {} days, leaving {}.",
            number(time(&best), 1),
            best.depart,
            number(time(&worst), 1),
            worst.depart
        );
    }
    let local: Vec<_> = found.iter().filter(|row| row.best).map(|row| row.depart.as_str()).collect();
    if !local.is_empty() {
        words += &format!(" Best departures around: {}.", local.join(", "));
    }
    let broken = study.rows.iter().filter(|row| row.breaks_law).count();
    if broken > 0 {
        words += &format!(" {broken} arrive earlier than a flight that leaves before.");
    }
    printable(&words)
}

fn sentences(study: &Departures, stale: bool) -> Vec<String> {
    let mut out = Vec::new();
    if stale {
        out.push("Out of date: the inputs have changed.".to_owned());
    }
    if study.rows.iter().any(|row| row.breaks_law) {
        out.push("\u{d7} arrives earlier than a flight that leaves before: for that one a faster flight was missed.".to_owned());
    }
    let lost = study.rows.iter().filter(|row| row.time_d.is_none()).count();
    if lost > 0 {
        out.push(format!("No flight found for {lost} of {} dates (marks at the foot).", study.rows.len()));
    }
    out
}

/// The first departure date, days since J2000.
pub(crate) fn first_day(start: &str) -> Result<f64, FigureError> {
    start_d(Some(start)).ok_or(FigureError::Option {
        name: "start",
        value: f64::NAN,
        rule: "must be a date such as 2031-05-17",
    })
}

/// A vertical axis.
struct Axis {
    min: f64,
    max: f64,
    ticks: Vec<Tick>,
}

impl Axis {
    fn numbers(values: &[f64], height: f64) -> Axis {
        let (min, max) = padded(extent(values).unwrap_or((0.0, 1.0)), 0.08);
        let ticks = linear_ticks(min, max, Steps::Decimal, |ticks| apart(ticks, min, max, height));
        Axis { min, max, ticks }
    }

    fn dates(values: &[f64], first_d: f64, height: f64) -> Axis {
        let (min, max) = padded(extent(values).unwrap_or((0.0, 365.0)), 0.08);
        let shifted = date_ticks(first_d + min, max - min, |ticks| apart(ticks, 0.0, max - min, height));
        let ticks = shifted.into_iter().map(|tick| Tick { value: tick.value + min, ..tick }).collect();
        Axis { min, max, ticks }
    }

    fn share(&self, value: f64) -> f64 {
        (value - self.min) / (self.max - self.min)
    }
}

/// Whether labels one above the other keep apart.
fn apart(ticks: &[Tick], min: f64, max: f64, height: f64) -> bool {
    let least = text_height(TICK_SIZE) + 4.0;
    ticks.windows(2).all(|pair| (pair[1].value - pair[0].value) / (max - min) * height >= least)
}

/// The horizontal axis of departure dates.
pub(crate) struct Calendar {
    range_d: [f64; 2],
    left: f64,
    width: f64,
    ticks: Vec<Tick>,
}

impl Calendar {
    /// The axis from `range_d[0]` to `range_d[1]` (days after `first_d`, days since J2000).
    pub(crate) fn new(first_d: f64, range_d: [f64; 2], left: f64, width: f64, whole_width: f64) -> Calendar {
        let span_d = range_d[1] - range_d[0];
        let reach = |tick: &Tick| {
            let half = text_width(&tick.label, TICK_SIZE, Weight::Normal) / 2.0;
            let x = left + width * tick.value / span_d;
            (x - half, x + half)
        };
        let apart =
            |ticks: &[Tick]| ticks.windows(2).all(|pair| reach(&pair[0]).1 + 8.0 <= reach(&pair[1]).0);
        let inside = |tick: &Tick| reach(tick).0 >= 1.0 && reach(tick).1 <= whole_width - 1.0;
        let ticks = date_ticks(first_d + range_d[0], span_d, apart)
            .into_iter()
            .filter(inside)
            .map(|tick| Tick { value: tick.value + range_d[0], ..tick })
            .collect();
        Calendar { range_d, left, width, ticks }
    }

    pub(crate) fn x(&self, depart_d: f64) -> f64 {
        self.left + self.width * (depart_d - self.range_d[0]) / (self.range_d[1] - self.range_d[0])
    }

    /// Labels below a line at `top`, and the axis's name.
    pub(crate) fn label(&self, shapes: &mut Vec<Shape>, top: f64, theme: &Theme) {
        for tick in &self.ticks {
            let x = self.x(tick.value);
            let points = vec![Point::new(x, top), Point::new(x, top + 4.0)];
            shapes.push(Shape::Polyline { points, stroke: Stroke::solid(theme.edge, 1.0) });
            let at = Point::new(x, top + 6.0 + text_height(TICK_SIZE) / 2.0);
            shapes.push(words(&tick.label, at, Anchor::Middle, TICK_SIZE, theme.muted));
        }
        let at = Point::new(self.left, top + FOOT - 8.0);
        shapes.push(words("Departure (0 h TDB)", at, Anchor::Start, NAME_SIZE, theme.ink));
    }
}

pub(crate) fn words(content: &str, at: Point, anchor: Anchor, size: f64, color: Color) -> Shape {
    Shape::Text(Text { at, content: printable(content), anchor, size, color, weight: Weight::Normal })
}

/// A cross of two strokes.
pub(crate) fn cross(at: Point, half_px: f64, stroke: Stroke) -> [Shape; 2] {
    [1.0, -1.0].map(|side| Shape::Polyline {
        points: vec![
            Point::new(at.x - half_px, at.y - half_px * side),
            Point::new(at.x + half_px, at.y + half_px * side),
        ],
        stroke,
    })
}

/// One panel being drawn.
struct Plot<'a> {
    shapes: &'a mut Vec<Shape>,
    frame: Rect,
    dates: &'a Calendar,
    axis: &'a Axis,
    theme: &'a Theme,
}

impl Plot<'_> {
    fn px(&self, depart_d: f64, value: f64) -> Point {
        Point::new(self.dates.x(depart_d), self.frame.bottom() - self.frame.height * self.axis.share(value))
    }

    fn frame(&mut self, name: &str, empty: bool) {
        let Rect { left, top, .. } = self.frame;
        let (right, bottom) = (self.frame.right(), self.frame.bottom());
        let hairline = Stroke::solid(self.theme.hairline, 1.0);
        let mut segment = |a: Point, b: Point, stroke| {
            self.shapes.push(Shape::Polyline { points: vec![a, b], stroke });
        };
        for tick in &self.dates.ticks {
            let x = self.dates.x(tick.value);
            segment(Point::new(x, top), Point::new(x, bottom), hairline);
        }
        segment(Point::new(left, bottom), Point::new(right, bottom), Stroke::solid(self.theme.edge, 1.0));
        let at = Point::new(left, top - NAME_HEIGHT / 2.0);
        self.shapes.push(words(name, at, Anchor::Start, NAME_SIZE, self.theme.ink));
        if empty {
            let at = self.frame.centre();
            self.shapes.push(words("no flight yet", at, Anchor::Middle, TICK_SIZE, self.theme.muted));
            return;
        }
        for tick in &self.axis.ticks {
            let y = self.px(0.0, tick.value).y;
            let points = vec![Point::new(left, y), Point::new(right, y)];
            self.shapes.push(Shape::Polyline { points, stroke: hairline });
            let at = Point::new(left - 6.0, y);
            self.shapes.push(words(&tick.label, at, Anchor::End, TICK_SIZE, self.theme.muted));
        }
    }

    /// Lines between neighbouring dates, a dot for each, marks for what is wrong.
    fn rows(&mut self, study: &Departures, value: impl Fn(&Departure) -> Option<f64>) {
        let sail = self.theme.sail;
        let mut runs: Vec<Vec<Point>> = vec![Vec::new()];
        let mut last_d = f64::NEG_INFINITY;
        for row in &study.rows {
            // A date that is not there yet leaves a gap.
            if row.depart_d - last_d > 1.5 * study.step_d {
                runs.push(Vec::new());
            }
            last_d = row.depart_d;
            match (value(row), runs.last_mut()) {
                (Some(value), Some(run)) => run.push(self.px(row.depart_d, value)),
                _ => runs.push(Vec::new()),
            }
        }
        let roomy = self.frame.width / (study.span_d / study.step_d.max(1e-9)).max(1.0) > 5.0;
        for run in runs {
            if roomy || run.len() == 1 {
                let dot = |&centre: &Point| Shape::Disc { centre, radius: 2.2, color: sail };
                self.shapes.extend(run.iter().map(dot));
            }
            if run.len() > 1 {
                self.shapes.push(Shape::Polyline { points: run, stroke: Stroke::solid(sail, 1.6) });
            }
        }
        let alarm = self.theme.alarm;
        for row in &study.rows {
            match value(row) {
                Some(value) if row.breaks_law => {
                    let at = self.px(row.depart_d, value);
                    self.shapes.extend(cross(at, 4.5, Stroke::solid(alarm, 1.8)));
                }
                Some(_) => {}
                None => {
                    let (x, foot) = (self.dates.x(row.depart_d), self.frame.bottom());
                    let points = vec![Point::new(x, foot), Point::new(x, foot - 7.0)];
                    self.shapes.push(Shape::Polyline { points, stroke: Stroke::solid(alarm, 1.8) });
                }
            }
        }
    }

    /// Rings and dates at the best departures, or at the earliest arrival.
    fn named(&mut self, study: &Departures, times: bool, value: impl Fn(&Departure) -> Option<f64>) {
        let mut room = Room::new(self.frame);
        let drawn: Vec<Point> =
            study.rows.iter().filter_map(|row| value(row).map(|v| self.px(row.depart_d, v))).collect();
        room.draw_line(&drawn, 2.0);
        let ink = self.theme.ink;
        let mut chosen: Vec<(&Departure, f64)> = study
            .rows
            .iter()
            .filter(|row| if times { row.best } else { row.earliest })
            .filter_map(|row| value(row).map(|v| (row, v)))
            .collect();
        chosen.sort_by(|a, b| a.1.total_cmp(&b.1));
        let style = Style { size: TICK_SIZE, color: ink, weight: Weight::Normal };
        for (rank, (row, v)) in chosen.into_iter().enumerate() {
            let at = self.px(row.depart_d, v);
            self.shapes.push(Shape::Disc { centre: at, radius: 5.5, color: self.theme.sheet });
            self.shapes.push(Shape::Disc { centre: at, radius: 2.5, color: self.theme.sail });
            self.shapes.push(Shape::Ring { centre: at, radius: 5.0, stroke: Stroke::solid(ink, 1.4) });
            if rank >= MOST_NAMED {
                continue;
            }
            let content = match (times, &row.arrive) {
                (true, _) => format!("{}: {} d", row.depart, number(v, 1)),
                (false, Some(arrive)) => format!("earliest {}", arrive.get(..10).unwrap_or(arrive)),
                (false, None) => continue,
            };
            let below = Point::new(0.0, if times { 1.0 } else { -1.0 });
            if let Some(text) = room.place(&content, style, beside(at, below, 9.0, &content, style), 40.0) {
                self.shapes.push(Shape::Text(text));
            }
        }
    }

    fn panel(&self, column: &str, unit: &str) -> Panel {
        let Rect { left, top, width, height } = self.frame;
        Panel {
            column: column.to_owned(),
            unit: unit.to_owned(),
            left,
            top,
            width,
            height,
            x_min: self.dates.range_d[0],
            x_max: self.dates.range_d[1],
            y_min: self.axis.min,
            y_max: self.axis.max,
            y_log: false,
            project: None,
            center_x: None,
            center_y: None,
        }
    }
}
