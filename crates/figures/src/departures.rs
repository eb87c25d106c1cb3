//! Departure dates against flight time and arrival date: two panels over one calendar.
//!
//! Rows are drawn as they come: a study that still runs is a study with fewer rows.

use std::collections::HashMap;

use scenario::study::{AxisValue, Kind, LawMark, StudyReport, StudyRow};

use crate::axis::{Steps, Tick, extent, linear_ticks, number, padded};
use crate::calendar::{date_ticks, start_d};
use crate::geometry::Rect;
use crate::labels::{Room, Style, beside};
use crate::metrics::{text_height, text_width};
use crate::notes;
use crate::shapes::{Anchor, Point, Shape, Stroke, Text, Weight, printable};
use crate::theme::{Color, Theme};
use crate::{Figure, FigureError, FigureMap, FigureOptions, Panel};

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

/// The rows of one sail on a calendar, as drawn.
struct Row<'a> {
    row: &'a StudyRow,
    /// Days since the first departure date.
    depart_d: f64,
    kinds: Vec<Kind>,
}

impl Row<'_> {
    fn arrive_d(&self) -> Option<f64> {
        self.row.time_d.map(|time_d| self.depart_d + time_d)
    }

    fn is(&self, kind: Kind) -> bool {
        self.kinds.contains(&kind)
    }
}

/// The departure dates of a study: the first, days since J2000, and days from it to each.
pub(crate) struct Dates {
    pub(crate) first_d: f64,
    pub(crate) offsets_d: Vec<f64>,
    days: HashMap<String, f64>,
}

impl Dates {
    /// # Errors
    /// A study without dates, or one that is none.
    pub(crate) fn of(study: &StudyReport) -> Result<Dates, FigureError> {
        let wrong = || FigureError::UnknownName(study.study.clone());
        let axis = study.axes.first().ok_or_else(wrong)?;
        let mut first_d = None;
        let mut dates = Dates { first_d: 0.0, offsets_d: Vec::new(), days: HashMap::new() };
        for value in &axis.values {
            let AxisValue::Text(date) = value else { return Err(wrong()) };
            let day = start_d(Some(date)).ok_or_else(wrong)?;
            let first = *first_d.get_or_insert(day);
            dates.offsets_d.push(day - first);
            dates.days.insert(date.clone(), day - first);
        }
        dates.first_d = first_d.ok_or_else(wrong)?;
        Ok(dates)
    }

    /// Days from the first date to this one of them.
    pub(crate) fn offset_d(&self, date: &str) -> Option<f64> {
        self.days.get(date).copied()
    }

    fn span_d(&self) -> f64 {
        self.offsets_d.last().copied().unwrap_or(0.0)
    }

    /// Days between two dates, one day for a single one.
    pub(crate) fn step_d(&self) -> f64 {
        self.offsets_d.get(1).copied().unwrap_or(1.0)
    }
}

/// Lays out flight time and arrival date against departure date.
///
/// # Errors
/// A study without dates.
pub(crate) fn draw(study: &StudyReport, options: &FigureOptions) -> Result<Figure, FigureError> {
    let dates = Dates::of(study)?;
    let theme = Theme::named(options.theme);
    let theme = if options.stale { theme.greyed() } else { *theme };
    let whole = Rect { left: 0.0, top: 0.0, width: options.width, height: options.height };
    let mut shapes = vec![Shape::Polygon { points: whole.corners(), color: theme.sheet }];
    let used = notes::set(&mut shapes, &sentences(study, options.stale), whole.grown(-10.0), &theme);
    let top = if used > 0.0 { used + 14.0 } else { 4.0 };
    let height = ((whole.height - top - FOOT) / 2.0 - NAME_HEIGHT - 4.0).max(8.0);
    let rows = rows(study, &dates);
    let times: Vec<f64> = rows.iter().filter_map(|row| row.row.time_d).collect();
    let arrivals: Vec<f64> = rows.iter().filter_map(Row::arrive_d).collect();
    let time_axis = Axis::numbers(&times, height);
    let arrival_axis = Axis::dates(&arrivals, dates.first_d, height);
    let widest = time_axis
        .ticks
        .iter()
        .chain(&arrival_axis.ticks)
        .map(|tick| text_width(&tick.label, TICK_SIZE, Weight::Normal))
        .fold(24.0, f64::max);
    let left = (widest + 14.0).min(whole.width / 3.0);
    let width = (whole.width - left - 16.0).max(8.0);
    let calendar = Calendar::new(dates.first_d, [0.0, dates.span_d().max(1.0)], left, width, whole.width);

    let mut panels = Vec::new();
    let slot = height + NAME_HEIGHT + 4.0;
    for (k, (name, unit, axis)) in
        [("Flight time (d)", "d", &time_axis), ("Arrival (TDB)", "date", &arrival_axis)]
            .into_iter()
            .enumerate()
    {
        let frame = Rect { left, top: top + slot * k as f64 + NAME_HEIGHT, width, height };
        let mut plot = Plot { shapes: &mut shapes, frame, dates: &calendar, axis, theme: &theme };
        plot.frame(name, times.is_empty());
        let value = |row: &Row<'_>| if k == 0 { row.row.time_d } else { row.arrive_d() };
        plot.rows(&rows, &dates, value);
        plot.named(&rows, k == 0, value);
        panels.push(plot.panel(if k == 0 { "time_d" } else { "arrive_d" }, unit));
    }
    calendar.label(&mut shapes, top + 2.0 * slot - 2.0, &theme);
    Ok(Figure {
        width: options.width,
        height: options.height,
        title: "Departure dates".to_owned(),
        description: describe(study),
        shapes,
        map: FigureMap { panels },
    })
}

/// The rows with a place on the calendar, in order of dates, with why they are picked.
fn rows<'a>(study: &'a StudyReport, dates: &Dates) -> Vec<Row<'a>> {
    let mut rows: Vec<Row<'a>> = study
        .rows
        .iter()
        .filter_map(|row| {
            let picked = study.best.iter().filter(|pick| pick.depart == row.depart).map(|pick| pick.kind);
            Some(Row { row, depart_d: dates.offset_d(&row.depart)?, kinds: picked.collect() })
        })
        .collect();
    rows.sort_by(|a, b| a.depart_d.total_cmp(&b.depart_d));
    rows
}

/// What a reader of the figure would see, in words.
fn describe(study: &StudyReport) -> String {
    let found: Vec<(&StudyRow, f64)> =
        study.rows.iter().filter_map(|row| row.time_d.map(|time_d| (row, time_d))).collect();
    let mut words = format!(
        "Flight time and arrival date against departure date: {} dates so far, {} with a flight.",
        study.rows.len(),
        found.len()
    );
    let best = found.iter().min_by(|a, b| a.1.total_cmp(&b.1));
    let worst = found.iter().max_by(|a, b| a.1.total_cmp(&b.1));
    if let (Some((best, short)), Some((worst, long))) = (best, worst) {
        words += &format!(
            " Shortest {} days, leaving {}; longest {} days, leaving {}.",
            number(*short, 1),
            best.depart,
            number(*long, 1),
            worst.depart
        );
    }
    let picked = |kind| {
        let all = study.best.iter().filter(|pick| pick.kind == kind).map(|pick| pick.depart.as_str());
        all.collect::<Vec<_>>().join(", ")
    };
    let (shortest, earliest) = (picked(Kind::Shortest), picked(Kind::Earliest));
    if !shortest.is_empty() {
        words += &format!(" Shorter than their neighbours: {shortest}.");
    }
    if !earliest.is_empty() {
        words += &format!(" Earliest arrival, leaving: {earliest}.");
    }
    let broken = study.rows.iter().filter(|row| row.law == LawMark::Broken).count();
    if broken > 0 {
        words += &format!(" {broken} arrive after a flight that leaves later.");
    }
    printable(&words)
}

/// What must be said in the picture.
pub(crate) fn sentences(study: &StudyReport, stale: bool) -> Vec<String> {
    let mut out = Vec::new();
    if stale {
        out.push("Out of date: the inputs have changed.".to_owned());
    }
    if study.rows.iter().any(|row| row.law == LawMark::Broken) {
        out.push(
            "\u{d7} a flight that leaves later arrives earlier: a faster one exists than was found."
                .to_owned(),
        );
    }
    let lost = study.rows.iter().filter(|row| row.time_d.is_none()).count();
    if lost > 0 {
        out.push(format!("| no flight found: {lost} of {}.", study.rows.len()));
    }
    out
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
    fn rows(&mut self, rows: &[Row<'_>], dates: &Dates, value: impl Fn(&Row<'_>) -> Option<f64>) {
        let sail = self.theme.sail;
        let mut runs: Vec<Vec<Point>> = vec![Vec::new()];
        let mut last_d = f64::NEG_INFINITY;
        for row in rows {
            // A date that is not there yet leaves a gap.
            if row.depart_d - last_d > 1.5 * dates.step_d() {
                runs.push(Vec::new());
            }
            last_d = row.depart_d;
            match (value(row), runs.last_mut()) {
                (Some(value), Some(run)) => run.push(self.px(row.depart_d, value)),
                _ => runs.push(Vec::new()),
            }
        }
        let roomy = self.frame.width > 5.0 * dates.offsets_d.len() as f64;
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
        for row in rows {
            match value(row) {
                Some(value) if row.row.law == LawMark::Broken => {
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

    /// Rings and dates at the shortest flights, or at the earliest arrival.
    fn named(&mut self, rows: &[Row<'_>], times: bool, value: impl Fn(&Row<'_>) -> Option<f64>) {
        let mut room = Room::new(self.frame);
        let drawn: Vec<Point> =
            rows.iter().filter_map(|row| value(row).map(|v| self.px(row.depart_d, v))).collect();
        room.draw_line(&drawn, 2.0);
        let kind = if times { Kind::Shortest } else { Kind::Earliest };
        let mut chosen: Vec<(&Row<'_>, f64)> =
            rows.iter().filter(|row| row.is(kind)).filter_map(|row| value(row).map(|v| (row, v))).collect();
        chosen.sort_by(|a, b| a.1.total_cmp(&b.1));
        let ink = self.theme.ink;
        let style = Style { size: TICK_SIZE, color: ink, weight: Weight::Normal };
        for (rank, (row, v)) in chosen.into_iter().enumerate() {
            let at = self.px(row.depart_d, v);
            self.shapes.push(Shape::Disc { centre: at, radius: 5.5, color: self.theme.sheet });
            self.shapes.push(Shape::Disc { centre: at, radius: 2.5, color: self.theme.sail });
            self.shapes.push(Shape::Ring { centre: at, radius: 5.0, stroke: Stroke::solid(ink, 1.4) });
            if rank >= MOST_NAMED {
                continue;
            }
            let content = match (times, &row.row.arrive) {
                (true, _) => format!("{}: {} d", row.row.depart, number(v, 1)),
                (false, Some(arrive)) => format!("earliest {}", arrive.get(..10).unwrap_or(arrive)),
                (false, None) => continue,
            };
            let first = Point::new(0.0, if times { 1.0 } else { -1.0 });
            if let Some(text) = room.place(&content, style, beside(at, first, 9.0, &content, style), 40.0) {
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
