//! Flight time over departure date and characteristic acceleration, as a map of cells.

use serde::{Deserialize, Serialize};

use crate::axis::{number, significant};
use crate::departures::{Calendar, FOOT, NAME_SIZE, TICK_SIZE, cross, first_day, words};
use crate::geometry::Rect;
use crate::metrics::{text_height, text_width};
use crate::notes;
use crate::shapes::{Anchor, Point, Shape, Stroke, Weight, printable};
use crate::theme::{Color, Theme};
use crate::{Figure, FigureError, FigureMap, FigureOptions, Panel, check_options};

/// Height of the colour scale above the map, CSS pixels.
const HEAD: f64 = 46.0;
/// Share of the sail's colour in the longest flight; the shortest has all of it.
const PALEST: f64 = 0.10;

/// A study over departure dates and accelerations as far as it has come.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct DepartureMap {
    /// First departure date, ISO 8601, TDB.
    pub start: String,
    /// Days from one departure date to the next.
    pub step_d: f64,
    /// How many departure dates there are.
    pub dates: usize,
    /// Characteristic accelerations, mm/s^2, ascending.
    pub ac_mm_s2: Vec<f64>,
    /// What the flight starts from and goes to, for people.
    pub ends: String,
    /// The cells that are there.
    pub cells: Vec<MapCell>,
}

/// One departure date at one acceleration.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct MapCell {
    /// Number of the departure date, from 0.
    pub date: usize,
    /// Number of the acceleration, from 0.
    pub ac: usize,
    /// Flight time, d; null where no flight was found.
    pub time_d: Option<f64>,
    /// Whether it arrives earlier than a flight of the same acceleration that leaves before.
    pub breaks_law: bool,
    /// Whether the flight time is a local minimum along the dates.
    pub best: bool,
}

/// Lays out the map.
///
/// # Units
/// CSS pixels, y down. The panel: x in days since the first departure date, half a step beyond the first and the
/// last; y counts accelerations from 0, half of one beyond both ends.
///
/// # Errors
/// A size outside its range, or a start that is no date.
pub fn departure_map(study: &DepartureMap, options: &FigureOptions) -> Result<Figure, FigureError> {
    check_options(options)?;
    let first_d = first_day(&study.start)?;
    let theme = Theme::named(options.theme);
    let theme = if options.stale { theme.greyed() } else { *theme };
    let whole = Rect { left: 0.0, top: 0.0, width: options.width, height: options.height };
    let mut shapes = vec![Shape::Polygon { points: whole.corners(), color: theme.sheet }];
    let used = notes::set(&mut shapes, &sentences(study, options.stale), whole.grown(-10.0), &theme);
    let top = if used > 0.0 { used + 12.0 } else { 4.0 };

    let labels: Vec<String> = study.ac_mm_s2.iter().map(|&ac| significant(ac, 3)).collect();
    let widest = labels.iter().map(|label| text_width(label, TICK_SIZE, Weight::Normal)).fold(24.0, f64::max);
    let left = (widest + 14.0).min(whole.width / 3.0);
    let frame = Rect {
        left,
        top: top + HEAD,
        width: (whole.width - left - 16.0).max(8.0),
        height: (whole.height - top - HEAD - FOOT).max(8.0),
    };
    let half_d = study.step_d.max(1e-6) / 2.0;
    let range_d = [-half_d, half_d + study.step_d * (study.dates.max(1) - 1) as f64];
    let dates = Calendar::new(first_d, range_d, left, frame.width, whole.width);
    let count = study.ac_mm_s2.len().max(1) as f64;
    let y = |ac: f64| frame.bottom() - frame.height * (ac + 0.5) / count;
    let cell = |cell: &MapCell| {
        let depart_d = cell.date as f64 * study.step_d;
        let (x0, x1) = (dates.x(depart_d - half_d), dates.x(depart_d + half_d));
        let (y0, y1) = (y(cell.ac as f64 + 0.5), y(cell.ac as f64 - 0.5));
        Rect { left: x0, top: y0, width: x1 - x0, height: y1 - y0 }
    };

    let range = time_range(study);
    shapes.push(Shape::Polygon { points: frame.corners(), color: theme.hairline.towards(theme.sheet, 0.5) });
    for known in &study.cells {
        let area = cell(known);
        let color = match (known.time_d, range) {
            (Some(time_d), Some(range)) => shade(time_d, range, &theme),
            _ => theme.sheet,
        };
        shapes.push(Shape::Polygon { points: area.corners(), color });
        if known.time_d.is_none() || known.breaks_law {
            let half_px = (area.width.min(area.height) / 2.0 - 1.0).clamp(1.0, 4.0);
            shapes.extend(cross(area.centre(), half_px, Stroke::solid(theme.alarm, 1.4)));
        } else if known.best {
            let radius = (area.width.min(area.height) / 4.0).clamp(1.0, 2.5);
            shapes.push(Shape::Disc { centre: area.centre(), radius, color: theme.ink });
        }
    }
    // Every so many accelerations have a label, so that they keep apart.
    let every = (text_height(TICK_SIZE) + 3.0) / (frame.height / count);
    let every = (every.ceil() as usize).max(1);
    for (k, label) in labels.iter().enumerate().filter(|(k, _)| k % every == 0) {
        let at = Point::new(left - 6.0, y(k as f64));
        shapes.push(words(label, at, Anchor::End, TICK_SIZE, theme.muted));
    }
    let at = Point::new(left, frame.top - 10.0);
    shapes.push(words("Characteristic acceleration (mm/s²)", at, Anchor::Start, NAME_SIZE, theme.ink));
    scale(&mut shapes, Rect { left, top: top + 4.0, width: frame.width, height: 12.0 }, range, &theme);
    dates.label(&mut shapes, frame.bottom(), &theme);

    let Rect { left, top, width, height } = frame;
    let panel = Panel {
        column: "ac".to_owned(),
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
        title: printable(&format!("Departure map: {}", study.ends)),
        description: describe(study),
        shapes,
        map: FigureMap { panels: vec![panel] },
    })
}

/// What a reader of the map would see, in words.
fn describe(study: &DepartureMap) -> String {
    let mut text = format!(
        "Flight time over {} departure dates from {} and {} characteristic accelerations; {} cells, {} with a flight.",
        study.dates,
        study.start,
        study.ac_mm_s2.len(),
        study.cells.len(),
        study.cells.iter().filter(|cell| cell.time_d.is_some()).count()
    );
    if let Some([low, high]) = time_range(study) {
        text += &format!(" From {} to {} days.", number(low, 1), number(high, 1));
    }
    let broken = study.cells.iter().filter(|cell| cell.breaks_law).count();
    if broken > 0 {
        text += &format!(" {broken} arrive earlier than a flight that leaves before.");
    }
    printable(&text)
}

fn sentences(study: &DepartureMap, stale: bool) -> Vec<String> {
    let mut out = Vec::new();
    if stale {
        out.push("Out of date: the inputs have changed.".to_owned());
    }
    if study.cells.iter().any(|cell| cell.breaks_law || cell.time_d.is_none()) {
        out.push(
            "\u{d7} no flight found, or one that arrives earlier than a flight that leaves before."
                .to_owned(),
        );
    }
    out
}

/// Shortest and longest flight, d.
fn time_range(study: &DepartureMap) -> Option<[f64; 2]> {
    let times: Vec<f64> = study.cells.iter().filter_map(|cell| cell.time_d).collect();
    crate::axis::extent(&times).map(|(low, high)| [low, high])
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
