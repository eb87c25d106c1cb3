//! A figure as an SVG document.

use plotters::prelude::SVGBackend;

use crate::Figure;
use crate::paint::{Pen, paint_with};

/// Device pixels per CSS pixel inside the document: its backend takes whole numbers only.
const SCALE: f64 = 4.0;

/// What the backend divides font sizes by.
const FONT_FACTOR: f64 = 1.24;

/// The backend centres on half the x-height; digits and capitals are centred this much higher.
const DROP_EM: f64 = 0.09;

/// The figure as an SVG document of the figure's size in CSS pixels, with title and description inside.
pub fn svg(figure: &Figure) -> String {
    let (width, height) = (figure.width.round(), figure.height.round());
    let mut body = String::new();
    {
        let size = ((width * SCALE) as u32, (height * SCALE) as u32);
        let mut backend = SVGBackend::with_string(&mut body, size);
        let pen = Pen { scale: SCALE, font_factor: FONT_FACTOR, drop_em: DROP_EM };
        paint_with(figure, pen, &mut backend).expect("writing into a string does not fail");
    }
    // The backend's own root says its own size; ours shows the same drawing at the figure's size.
    let inside = body.split_once('>').map_or("", |(_, inside)| inside);
    format!(
        "<svg width=\"{width}\" height=\"{height}\" viewBox=\"0 0 {} {}\" xmlns=\"http://www.w3.org/2000/svg\" \
         role=\"img\" stroke-linejoin=\"round\">\n<title>{}</title>\n<desc>{}</desc>{inside}",
        width * SCALE,
        height * SCALE,
        escaped(&figure.title),
        escaped(&figure.description),
    )
}

fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '&' => out.push_str("&amp;"),
            other => out.push(other),
        }
    }
    out
}
