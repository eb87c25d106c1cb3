//! What a figure is made of: a few shapes in CSS pixels, x to the right and y down.

use crate::theme::Color;

/// A place in the figure, CSS pixels from the top left corner.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Point {
    /// To the right.
    pub x: f64,
    /// Down.
    pub y: f64,
}

impl Point {
    /// A point from its coordinates, CSS pixels.
    pub const fn new(x: f64, y: f64) -> Self {
        Point { x, y }
    }

    /// Distance to another point, CSS pixels.
    pub fn distance(self, other: Point) -> f64 {
        (self.x - other.x).hypot(self.y - other.y)
    }

    pub(crate) fn shifted(self, direction: Point, length: f64) -> Point {
        Point::new(self.x + direction.x * length, self.y + direction.y * length)
    }
}

/// How a line is drawn.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Stroke {
    /// Colour.
    pub color: Color,
    /// Width, CSS pixels.
    pub width: f64,
    /// Drawn and left-out lengths, CSS pixels; solid without.
    pub dash: Option<(f64, f64)>,
}

impl Stroke {
    /// A solid line.
    pub const fn solid(color: Color, width: f64) -> Self {
        Stroke { color, width, dash: None }
    }

    /// A dashed line; `dash` holds the drawn and the left-out length, CSS pixels.
    pub const fn dashed(color: Color, width: f64, dash: (f64, f64)) -> Self {
        Stroke { color, width, dash: Some(dash) }
    }
}

/// Which part of a text sits at its point.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Anchor {
    /// The left end.
    Start,
    /// The middle.
    Middle,
    /// The right end.
    End,
}

/// Weight of a text.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Weight {
    /// Ordinary text.
    Normal,
    /// Text that is read first.
    Bold,
}

/// A line of text, centred vertically on its point.
#[derive(Clone, Debug, PartialEq)]
pub struct Text {
    /// Where it stands.
    pub at: Point,
    /// What it says; never holds control characters.
    pub content: String,
    /// Which part sits at the point.
    pub anchor: Anchor,
    /// Font size, CSS pixels.
    pub size: f64,
    /// Colour.
    pub color: Color,
    /// Weight.
    pub weight: Weight,
}

/// One element of a figure.
#[derive(Clone, Debug, PartialEq)]
pub enum Shape {
    /// An open line through points.
    Polyline {
        /// Corners.
        points: Vec<Point>,
        /// Colour, width and dashes.
        stroke: Stroke,
    },
    /// A filled area.
    Polygon {
        /// Corners.
        points: Vec<Point>,
        /// Fill.
        color: Color,
    },
    /// A filled disc.
    Disc {
        /// Centre.
        centre: Point,
        /// Radius, CSS pixels.
        radius: f64,
        /// Fill.
        color: Color,
    },
    /// A circle line.
    Ring {
        /// Centre.
        centre: Point,
        /// Radius, CSS pixels.
        radius: f64,
        /// Colour and width; rings are never dashed.
        stroke: Stroke,
    },
    /// A line of text.
    Text(Text),
}

/// The text without control characters, which no XML document may hold.
pub(crate) fn printable(content: &str) -> String {
    content
        .chars()
        .map(|c| if c.is_control() || matches!(c, '\u{fffe}' | '\u{ffff}') { ' ' } else { c })
        .collect()
}
