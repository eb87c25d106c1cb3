//! Every picture of a flight: laid out as plain shapes, then painted on any drawing backend.
//!
//! [`layout`] is a pure function from a report to shapes in CSS pixels; [`paint`] puts them on a plotters backend
//! (the page's canvas), [`svg`] into a document of their own, [`describe`] says in words what a reader would see.
//! Figures hold no number that is not in the report or its columns.

mod axis;
mod bodies;
mod calendar;
mod departure_map;
mod departures;
mod describe;
mod ellipse;
mod geometry;
mod heights;
mod histories;
mod labels;
#[cfg(test)]
mod laws;
mod marks;
mod metrics;
mod notes;
mod orbit;
mod orbit_labels;
mod paint;
mod panels;
#[cfg(test)]
#[path = "../tests/sample/mod.rs"]
mod sample;
mod shapes;
#[cfg(test)]
mod study_laws;
mod svg;
mod theme;
mod told;
mod track;
mod view;

use scenario::report::{Columns, Report};
use scenario::study::StudyReport;
use serde::{Deserialize, Serialize};

pub use describe::describe;
pub use paint::{PaintError, paint};
pub use shapes::{Anchor, Point, Shape, Stroke, Text, Weight};
pub use svg::svg;
pub use theme::{Color, DARK, LIGHT, Theme, ThemeName, tokens};

/// Names of the figures.
pub const NAMES: &[&str] = &["orbit", "histories"];

/// Columns that can be a panel of the histories.
pub const PANELS: &[&str] = &[
    "cone_deg",
    "clock_deg",
    "distance_au",
    "speed_km_s",
    "turn_rate_deg_d",
    "film_temp_k",
    "sail_accel_mm_s2",
    "earth_range_au",
    "sun_earth_craft_deg",
];

/// How a figure is drawn.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct FigureOptions {
    /// Width, CSS pixels, 120-8000.
    pub width: f64,
    /// Height, CSS pixels, 120-8000.
    pub height: f64,
    /// Device pixels per CSS pixel that the figure will be painted at; layout does not depend on it.
    pub scale: f64,
    /// Which look.
    pub theme: ThemeName,
    /// Magnification of the orbit picture; 1 shows all of it, 0.1-1000.
    pub zoom: f64,
    /// Where the orbit picture's centre moves to the right, au; 0 for the whole picture. Untilted and unturned that is
    /// along ecliptic x.
    pub pan_x_au: f64,
    /// The same upwards, au; untilted and unturned along ecliptic y.
    pub pan_y_au: f64,
    /// Angle between ecliptic north and the direction from which the orbit picture is seen, deg: 0 from north, 90
    /// edge-on with north up.
    pub tilt_deg: f64,
    /// Angle by which the orbit picture is turned about ecliptic north, counter-clockwise, deg, -3600 to 3600.
    pub turn_deg: f64,
    /// Time since departure at which the orbit picture shows both bodies of a dated flight, d.
    pub cursor_t_d: Option<f64>,
    /// Panels of the histories from top to bottom, of [`PANELS`]; none for the usual ones: cone angle (and clock
    /// angle in space), distance, speed, turn rate.
    pub panels: Vec<String>,
    /// Whether the report no longer matches the inputs: the figure is greyed and says so.
    pub stale: bool,
}

impl Default for FigureOptions {
    fn default() -> Self {
        FigureOptions {
            width: 760.0,
            height: 760.0,
            scale: 2.0,
            theme: ThemeName::Light,
            zoom: 1.0,
            pan_x_au: 0.0,
            pan_y_au: 0.0,
            tilt_deg: 0.0,
            turn_deg: 0.0,
            cursor_t_d: None,
            panels: Vec::new(),
            stale: false,
        }
    }
}

/// The panels that the histories of a flight show unless others are asked for.
pub fn usual_panels(report: &Report, columns: &Columns) -> &'static [&'static str] {
    panels::usual(track::is_spatial(report, columns))
}

/// The height that suits a figure of this width and, for the histories, so many panels, CSS pixels; `None` for an
/// unknown name.
pub fn usual_height(name: &str, width: f64, panels: usize) -> Option<f64> {
    match name {
        "orbit" => Some(width),
        "histories" => Some(panels.max(1) as f64 * (width * 0.1875).clamp(120.0, 160.0)),
        _ => None,
    }
}

/// Where the data lie in a figure, for overlays such as a time cursor.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct FigureMap {
    /// The panels, from top to bottom.
    pub panels: Vec<Panel>,
}

/// One panel: a rectangle in CSS pixels and the data range that it shows.
///
/// The left edge is `x_min`, the bottom edge `y_min`. In `histories` x is the time since departure (d) and y the
/// panel's column. In `orbit` the single panel is named `y_au`: x and y are distances to the right and up from the Sun
/// as the picture shows it (au), both to the same scale; untilted and unturned they are ecliptic x and y.
///
/// A heliocentric position (ecliptic x, y, z in au) is drawn `project[0] x + project[1] y + project[2] z` to the right
/// of `center_x` and `project[3] x + project[4] y + project[5] z` below `center_y`.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Panel {
    /// Name of the column on the y axis.
    pub column: String,
    /// Unit of the y axis.
    pub unit: String,
    /// Left edge, CSS pixels.
    pub left: f64,
    /// Top edge, CSS pixels.
    pub top: f64,
    /// Width, CSS pixels.
    pub width: f64,
    /// Height, CSS pixels.
    pub height: f64,
    /// Value at the left edge.
    pub x_min: f64,
    /// Value at the right edge.
    pub x_max: f64,
    /// Value at the bottom edge.
    pub y_min: f64,
    /// Value at the top edge.
    pub y_max: f64,
    /// Whether y is logarithmic: equal heights are equal ratios.
    pub y_log: bool,
    /// Orbit picture: the 2 x 3 matrix of its projection, row by row, CSS pixels per au; null in other figures.
    pub project: Option<[f64; 6]>,
    /// Orbit picture: where the Sun is drawn, CSS pixels from the left, whether inside or not.
    pub center_x: Option<f64>,
    /// The same from the top.
    pub center_y: Option<f64>,
}

/// A figure ready to paint.
#[derive(Clone, Debug, PartialEq)]
pub struct Figure {
    /// Width, CSS pixels.
    pub width: f64,
    /// Height, CSS pixels.
    pub height: f64,
    /// What the figure shows, in a few words.
    pub title: String,
    /// What a reader would see, in sentences.
    pub description: String,
    /// What to paint, in order.
    pub shapes: Vec<Shape>,
    /// Where the data lie.
    pub map: FigureMap,
}

/// Why a figure cannot be laid out.
#[derive(Clone, Debug, PartialEq)]
pub enum FigureError {
    /// No figure has this name.
    UnknownName(String),
    /// No panel of the histories has this name.
    UnknownPanel(String),
    /// An option is outside its range: its name, its value and the rule.
    Option {
        /// Which option.
        name: &'static str,
        /// Its value.
        value: f64,
        /// What is allowed.
        rule: &'static str,
    },
    /// A column is neither empty nor as long as the times: its name, its length and the number of times.
    ColumnLength {
        /// Which column.
        name: &'static str,
        /// How many values it has.
        found: usize,
        /// How many there should be.
        wanted: usize,
    },
}

impl std::fmt::Display for FigureError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            FigureError::UnknownName(name) => {
                write!(f, "no figure is called {name:?}; there are {}", NAMES.join(", "))
            }
            FigureError::UnknownPanel(name) => {
                write!(f, "panels: no panel is called {name:?}; there are {}", PANELS.join(", "))
            }
            FigureError::Option { name, value, rule } => write!(f, "{name} {value}: {rule}"),
            FigureError::ColumnLength { name, found, wanted } => {
                write!(f, "column {name} has {found} values for {wanted} times")
            }
        }
    }
}

impl std::error::Error for FigureError {}

/// Lays a figure out.
///
/// # Units
/// CSS pixels, y down; data as in the columns.
///
/// # Errors
/// An unknown figure or panel, an option outside its range, or columns of unequal lengths. A report without a flight
/// is no error: the figure shows what is known and says so.
pub fn layout(
    name: &str,
    report: &Report,
    columns: &Columns,
    options: &FigureOptions,
) -> Result<Figure, FigureError> {
    check_options(options)?;
    check_columns(columns)?;
    let description = describe::describe_with(name, report, columns, options)?;
    let theme = Theme::named(options.theme);
    let theme = if options.stale { theme.greyed() } else { *theme };
    let ends = &report.ends;
    let (title, drawing) = match name {
        "orbit" => ("Orbit picture", orbit::draw(report, columns, options, &theme)),
        "histories" => ("Histories", histories::draw(report, columns, options, &theme)?),
        _ => return Err(FigureError::UnknownName(name.to_owned())),
    };
    Ok(Figure {
        width: options.width,
        height: options.height,
        title: shapes::printable(&format!("{title}: {} to {}", ends.from.name, ends.to.name)),
        description,
        shapes: drawing.shapes,
        map: FigureMap { panels: drawing.panels },
    })
}

/// Lays out the picture of a study of departure dates: curves over one axis, a map over two.
///
/// # Units
/// CSS pixels, y down. Every panel's x counts days since the first departure date; a map's reaches half a step beyond
/// the first and the last. With one axis there are two panels: y in days of flight (`time_d`), and for the arrival in
/// days since the first departure date (`arrive_d`). A map has one, named after the field of its sails: y counts them
/// from 0, half of one beyond both ends.
///
/// # Errors
/// An option outside its range, or a study without dates.
pub fn study(study: &StudyReport, options: &FigureOptions) -> Result<Figure, FigureError> {
    check_options(options)?;
    if study.axes.len() > 1 { departure_map::draw(study, options) } else { departures::draw(study, options) }
}

/// Shapes and panels of a figure being laid out.
#[derive(Debug, Default)]
pub(crate) struct Drawing {
    pub(crate) shapes: Vec<Shape>,
    pub(crate) panels: Vec<Panel>,
}

fn check_options(options: &FigureOptions) -> Result<(), FigureError> {
    let within = |name, value: f64, low: f64, high: f64, rule| {
        if (low..=high).contains(&value) { Ok(()) } else { Err(FigureError::Option { name, value, rule }) }
    };
    within("width", options.width, 120.0, 8000.0, "120 to 8000 CSS pixels")?;
    within("height", options.height, 120.0, 8000.0, "120 to 8000 CSS pixels")?;
    within("zoom", options.zoom, 0.1, 1000.0, "0.1 to 1000")?;
    within("pan_x_au", options.pan_x_au, -1000.0, 1000.0, "-1000 to 1000 au")?;
    within("pan_y_au", options.pan_y_au, -1000.0, 1000.0, "-1000 to 1000 au")?;
    within("tilt_deg", options.tilt_deg, 0.0, 90.0, "0 to 90 deg")?;
    within("turn_deg", options.turn_deg, -3600.0, 3600.0, "-3600 to 3600 deg")?;
    // Far beyond any flight; farther off, whole turns of the bodies would lose their digits.
    within("cursor_t_d", options.cursor_t_d.unwrap_or(0.0), -1e7, 1e7, "-1e7 to 1e7 d")
}

fn check_columns(columns: &Columns) -> Result<(), FigureError> {
    let wanted = columns.t_d.len();
    let wrong = Columns::NAMES.into_iter().zip(columns.values()).find(|(name, column)| {
        let needed = matches!(*name, "x_au" | "y_au");
        column.len() != wanted && (needed || !column.is_empty())
    });
    match wrong {
        Some((name, column)) => Err(FigureError::ColumnLength { name, found: column.len(), wanted }),
        None => Ok(()),
    }
}
