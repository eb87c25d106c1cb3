//! Puts a laid-out figure on a plotters backend.
//!
//! Backends take whole device pixels, so everything is multiplied by the scale before it is rounded; at two device
//! pixels per CSS pixel or more, lines look smooth. Text goes straight to the backend: nothing is measured there.

use plotters::prelude::{DrawingBackend, RGBColor, ShapeStyle, TextStyle};
use plotters::style::text_anchor::{HPos, Pos, VPos};
use plotters::style::{Color as _, FontDesc, FontFamily, FontStyle};

use crate::Figure;
use crate::geometry::dashes;
use crate::shapes::{Anchor, Point, Shape, Stroke, Text, Weight};
use crate::theme::Color;

/// What the backend said when it could not draw.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PaintError(pub String);

impl std::fmt::Display for PaintError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "the figure could not be drawn: {}", self.0)
    }
}

impl std::error::Error for PaintError {}

/// How a backend differs from whole CSS pixels.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Pen {
    /// Device pixels per CSS pixel.
    pub(crate) scale: f64,
    /// What font sizes are multiplied by so that they come out as asked.
    pub(crate) font_factor: f64,
    /// How far texts are moved down, in units of the font size, so that their digits are centred.
    pub(crate) drop_em: f64,
}

/// Paints a figure at `scale` device pixels per CSS pixel; scales below 1 count as 1. The backend should be
/// `width * scale` by `height * scale` device pixels; 2 or more looks smooth.
///
/// # Errors
/// When the backend fails.
pub fn paint<B: DrawingBackend>(figure: &Figure, scale: f64, backend: &mut B) -> Result<(), PaintError> {
    let scale = if scale.is_finite() { scale.max(1.0) } else { 2.0 };
    paint_with(figure, Pen { scale, font_factor: 1.0, drop_em: 0.0 }, backend)
}

pub(crate) fn paint_with<B: DrawingBackend>(
    figure: &Figure,
    pen: Pen,
    backend: &mut B,
) -> Result<(), PaintError> {
    backend.ensure_prepared().map_err(failed)?;
    for shape in &figure.shapes {
        match shape {
            Shape::Polyline { points, stroke } => line(points, stroke, pen, backend)?,
            Shape::Polygon { points, color } => {
                let corners: Vec<_> = points.iter().map(|&point| pen.device(point)).collect();
                backend.fill_polygon(corners, &filled(*color)).map_err(failed)?;
            }
            Shape::Disc { centre, radius, color } => backend
                .draw_circle(pen.device(*centre), pen.length(*radius), &filled(*color), true)
                .map_err(failed)?,
            Shape::Ring { centre, radius, stroke } => backend
                .draw_circle(pen.device(*centre), pen.length(*radius), &pen.stroke(stroke), false)
                .map_err(failed)?,
            Shape::Text(text) => write(text, pen, backend)?,
        }
    }
    backend.present().map_err(failed)
}

fn failed(error: impl std::fmt::Display) -> PaintError {
    PaintError(error.to_string())
}

fn rgb(color: Color) -> RGBColor {
    RGBColor(color.red, color.green, color.blue)
}

fn filled(color: Color) -> ShapeStyle {
    rgb(color).filled()
}

impl Pen {
    fn device(&self, point: Point) -> (i32, i32) {
        ((point.x * self.scale).round() as i32, (point.y * self.scale).round() as i32)
    }

    fn length(&self, length: f64) -> u32 {
        (length * self.scale).round().max(1.0) as u32
    }

    fn stroke(&self, stroke: &Stroke) -> ShapeStyle {
        rgb(stroke.color).stroke_width(self.length(stroke.width))
    }
}

fn line<B: DrawingBackend>(
    points: &[Point],
    stroke: &Stroke,
    pen: Pen,
    backend: &mut B,
) -> Result<(), PaintError> {
    let pieces = match stroke.dash {
        Some((drawn, left_out)) => dashes(points, drawn, left_out),
        None => vec![points.to_vec()],
    };
    for piece in pieces {
        let mut path: Vec<_> = piece.into_iter().map(|point| pen.device(point)).collect();
        path.dedup();
        if path.len() > 1 {
            backend.draw_path(path, &pen.stroke(stroke)).map_err(failed)?;
        }
    }
    Ok(())
}

fn write<B: DrawingBackend>(text: &Text, pen: Pen, backend: &mut B) -> Result<(), PaintError> {
    let weight = match text.weight {
        Weight::Normal => FontStyle::Normal,
        Weight::Bold => FontStyle::Bold,
    };
    let h_pos = match text.anchor {
        Anchor::Start => HPos::Left,
        Anchor::Middle => HPos::Center,
        Anchor::End => HPos::Right,
    };
    let size = text.size * pen.scale * pen.font_factor;
    let color = rgb(text.color);
    let style = TextStyle::from(FontDesc::new(FontFamily::SansSerif, size, weight))
        .color(&color)
        .pos(Pos::new(h_pos, VPos::Center));
    let at = Point::new(text.at.x, text.at.y + pen.drop_em * text.size);
    backend.draw_text(&text.content, &style, pen.device(at)).map_err(failed)
}
