//! Flight time over departure date and the sail, by its acceleration or its area, as a map of cells.

use std::collections::HashSet;

use scenario::study::{Axis, AxisValue, Kind, LawMark, StudyReport, StudyRow};

use crate::axis::{extent, number, significant};
use crate::departures::{Calendar, Dates, FOOT, NAME_SIZE, TICK_SIZE, cross, sentences, words};
use crate::geometry::Rect;
use crate::metrics::{text_height, text_width};
use crate::notes;
use crate::shapes::{Anchor, Point, Shape, Stroke, Weight, printable};
use crate::theme::{Color, Theme};
use crate::{Figure, FigureError, FigureMap, FigureOptions, Panel};

/// Height of the colour scale above the map, CSS pixels.
const HEAD: f64 = 46.0;
/// Share of the sail's colour in the longest flight; the shortest has all of it.
const PALEST: f64 = 0.10;

/// Lays out the map.
///
/// # Errors
/// A study that is no map over dates.
pub(crate) fn draw(study: &StudyReport, options: &FigureOptions) -> Result<Figure, FigureError> {
    let dates = Dates::of(study)?;
    let sails = study.axes.get(1).ok_or_else(|| FigureError::UnknownName(study.study.clone()))?;
    let theme = Theme::named(options.theme);
    let theme = if options.stale { theme.greyed() } else { *theme };
    let whole = Rect { left: 0.0, top: 0.0, width: options.width, height: options.height };
    let mut shapes = vec![Shape::Polygon { points: whole.corners(), color: theme.sheet }];
    let used = notes::set(&mut shapes, &sentences(study, options.stale), whole.grown(-10.0), &theme);
    let top = if used > 0.0 { used + 12.0 } else { 4.0 };

    let values: Vec<f64> = sails.values.iter().map(value).collect();
    let labels: Vec<String> = values.iter().map(|&value| significant(value, 3)).collect();
    let widest = labels.iter().map(|label| text_width(label, TICK_SIZE, Weight::Normal)).fold(24.0, f64::max);
    let left = (widest + 14.0).min(whole.width / 3.0);
    let frame = Rect {
        left,
        top: top + HEAD,
        width: (whole.width - left - 16.0).max(8.0),
        height: (whole.height - top - HEAD - FOOT).max(8.0),
    };
    let half_d = dates.step_d() / 2.0;
    let range_d = [-half_d, half_d + dates.offsets_d.last().copied().unwrap_or(0.0)];
    let calendar = Calendar::new(dates.first_d, range_d, left, frame.width, whole.width);
    let count = labels.len().max(1) as f64;
    let y = |sail: f64| frame.bottom() - frame.height * (sail + 0.5) / count;
    let cell = |row: &StudyRow| -> Option<Rect> {
        let depart_d = dates.offset_d(&row.depart)?;
        let of_row = held(row, sails)?;
        let sail = values.iter().position(|&value| value == of_row)? as f64;
        let (x0, x1) = (calendar.x(depart_d - half_d), calendar.x(depart_d + half_d));
        let (y0, y1) = (y(sail + 0.5), y(sail - 0.5));
        Some(Rect { left: x0, top: y0, width: x1 - x0, height: y1 - y0 })
    };

    let range = time_range(study);
    shapes.push(Shape::Polygon { points: frame.corners(), color: theme.hairline.towards(theme.sheet, 0.5) });
    let shortest: HashSet<(&str, u64)> = study
        .best
        .iter()
        .filter(|pick| pick.kind == Kind::Shortest && !pick.at_edge)
        .map(|pick| (pick.depart.as_str(), pick.ac_mm_s2.to_bits()))
        .collect();
    for row in &study.rows {
        let Some(area) = cell(row) else { continue };
        let color = match (row.time_d, range) {
            (Some(time_d), Some(range)) => shade(time_d, range, &theme),
            _ => theme.sheet,
        };
        shapes.push(Shape::Polygon { points: area.corners(), color });
        let least = area.width.min(area.height);
        let alarm = Stroke::solid(theme.alarm, 1.4);
        if row.time_d.is_none() {
            let (at, half) = (area.centre(), (least / 2.0 - 1.0).clamp(1.0, 4.0));
            let points = vec![Point::new(at.x, at.y - half), Point::new(at.x, at.y + half)];
            shapes.push(Shape::Polyline { points, stroke: alarm });
        } else if row.law == LawMark::Broken {
            shapes.extend(cross(area.centre(), (least / 2.0 - 1.0).clamp(1.0, 4.0), alarm));
        } else if shortest.contains(&(row.depart.as_str(), row.ac_mm_s2.to_bits())) {
            let radius = (least / 4.0).clamp(1.0, 2.5);
            shapes.push(Shape::Disc { centre: area.centre(), radius, color: theme.ink });
        }
    }
    // Every so many sails have a label, so that they keep apart.
    let every = (text_height(TICK_SIZE) + 3.0) / (frame.height / count);
    let every = (every.ceil() as usize).max(1);
    for (k, label) in labels.iter().enumerate().filter(|(k, _)| k % every == 0) {
        let at = Point::new(left - 6.0, y(k as f64));
        shapes.push(words(label, at, Anchor::End, TICK_SIZE, theme.muted));
    }
    let at = Point::new(left, frame.top - 10.0);
    let name = format!("{} ({})", sails.label, sails.unit);
    shapes.push(words(&name, at, Anchor::Start, NAME_SIZE, theme.ink));
    scale(&mut shapes, Rect { left, top: top + 4.0, width: frame.width, height: 12.0 }, range, &theme);
    calendar.label(&mut shapes, frame.bottom(), &theme);

    let Rect { left, top, width, height } = frame;
    let panel = Panel {
        column: sails.field.clone(),
        unit: String::new(),
        left,
        top,
        width,
        height,
        x_min: range_d[0],
        x_max: range_d[1],
        y_min: -0.5,
        y_max: count - 0.5,
        y_log: false,
        project: None,
        center_x: None,
        center_y: None,
    };
    Ok(Figure {
        width: options.width,
        height: options.height,
        title: "Departure map".to_owned(),
        description: describe(study, &dates, sails),
        shapes,
        map: FigureMap { panels: vec![panel] },
    })
}

fn value(value: &AxisValue) -> f64 {
    match value {
        AxisValue::Number(number) => *number,
        AxisValue::Text(_) => f64::NAN,
    }
}

/// What a row holds of an axis of sails.
fn held(row: &StudyRow, axis: &Axis) -> Option<f64> {
    if axis.field == "area_m2" { row.area_m2 } else { Some(row.ac_mm_s2) }
}

/// What a reader of the map would see, in words.
fn describe(study: &StudyReport, dates: &Dates, sails: &Axis) -> String {
    let mut text = format!(
        "Flight time over {} departure dates and {} values of {}; {} flights so far.",
        dates.offsets_d.len(),
        sails.values.len(),
        sails.label.to_lowercase(),
        study.rows.len()
    );
    if let Some([low, high]) = time_range(study) {
        text += &format!(" From {} to {} days.", number(low, 1), number(high, 1));
    }
    let broken = study.rows.iter().filter(|row| row.law == LawMark::Broken).count();
    if broken > 0 {
        text += &format!(" {broken} arrive after a flight that leaves later.");
    }
    printable(&text)
}

/// Shortest and longest flight, d.
fn time_range(study: &StudyReport) -> Option<[f64; 2]> {
    let times: Vec<f64> = study.rows.iter().filter_map(|row| row.time_d).collect();
    extent(&times).map(|(low, high)| [low, high])
}

/// The shorter the flight, the fuller the colour; equal steps are equal ratios of time.
fn shade(time_d: f64, [low, high]: [f64; 2], theme: &Theme) -> Color {
    let share = if high > low { (time_d / low).ln() / (high / low).ln() } else { 0.0 };
    theme.sheet.towards(theme.sail, 1.0 - (1.0 - PALEST) * share)
}

/// The colour scale with the times that it stands for.
fn scale(shapes: &mut Vec<Shape>, area: Rect, range: Option<[f64; 2]>, theme: &Theme) {
    let Some([low, high]) = range else { return };
    let name = "Flight time (d)";
    let used = text_width(name, NAME_SIZE, Weight::Normal) + 10.0;
    let middle = area.top + area.height / 2.0;
    shapes.push(words(name, Point::new(area.left, middle), Anchor::Start, NAME_SIZE, theme.ink));
    let ends = [low, high].map(|time_d| number(time_d, 0));
    let [first, last] = [&ends[0], &ends[1]].map(|end| text_width(end, TICK_SIZE, Weight::Normal) + 6.0);
    let width = (area.width - used - first - last).clamp(40.0, 240.0);
    let bar = Rect { left: area.left + used + first, top: area.top, width, height: area.height };
    let steps = 48;
    for k in 0..steps {
        let share = f64::from(k) / f64::from(steps);
        let time_d = low * (high / low).powf(share + 0.5 / f64::from(steps));
        let step = Rect { left: bar.left + bar.width * share, width: bar.width / f64::from(steps), ..bar };
        shapes.push(Shape::Polygon { points: step.corners(), color: shade(time_d, [low, high], theme) });
    }
    let at = |x: f64| Point::new(x, middle);
    shapes.push(words(&ends[0], at(bar.left - 6.0), Anchor::End, TICK_SIZE, theme.muted));
    shapes.push(words(&ends[1], at(bar.right() + 6.0), Anchor::Start, TICK_SIZE, theme.muted));
}
