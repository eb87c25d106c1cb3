//! The bodies of a dated flight: where both are when it leaves, when it arrives, and at the time cursor.

use scenario::report::{End, Report};

use crate::ellipse::body;
use crate::geometry::Rect;
use crate::labels::{Style, beside};
use crate::orbit::Sheet;
use crate::orbit_labels::COVER;
use crate::shapes::{Point, Shape, Stroke, Weight};
use crate::track::Place;

/// A body this close to the craft, as a share of its distance from the Sun, is with it: half a degree, far more than
/// the elements of the departure date misplace a planet by the end of a flight.
const WITH_CRAFT: f64 = 0.01;

/// A body as drawn.
pub(crate) struct BodyMark {
    at: Point,
    label: Option<String>,
    /// Whether this is the target where the craft meets it.
    pub(crate) met: bool,
}

/// The name of a body: a planet's, else what it is to the flight.
pub(crate) fn body_name(end: &End, is_start: bool) -> String {
    match (end.name.ends_with("orbit"), is_start) {
        (false, _) => end.name.clone(),
        (true, true) => "start body".to_owned(),
        (true, false) => "target body".to_owned(),
    }
}

fn is_with(a: [f64; 3], b: [f64; 3]) -> bool {
    let apart = (0..3).map(|i| (a[i] - b[i]).powi(2)).sum::<f64>();
    apart < WITH_CRAFT * WITH_CRAFT * a.iter().map(|x| x * x).sum::<f64>()
}

/// Whether the craft meets the target's body at the end of a dated flight.
pub(crate) fn meets_target(report: &Report, arrival_au: [f64; 3]) -> bool {
    let place = report.flight.time_d.and_then(|time_d| body(&report.ends.to, time_d));
    place.is_some_and(|au| is_with(arrival_au, au))
}

impl Sheet<'_> {
    /// Both bodies at departure (open) and at arrival (filled), where the flight has dates.
    pub(crate) fn bodies(&mut self, report: &Report, places: &[Place]) -> Vec<BodyMark> {
        let (Some(first), Some(last)) = (places.first(), places.last()) else { return Vec::new() };
        let inside = self.view.frame.grown(-6.0);
        let edge = self.theme.edge;
        let mut marks = Vec::new();
        for (end, is_start) in [(&report.ends.from, true), (&report.ends.to, false)] {
            for (craft, word, filled) in [(first, "departure", false), (last, "arrival", true)] {
                let Some(au) = body(end, craft.t_d) else { continue };
                let at = self.view.px(au);
                if !inside.contains(at) {
                    continue;
                }
                self.shapes.push(Shape::Disc { centre: at, radius: 5.0, color: self.theme.sheet });
                self.shapes.push(if filled {
                    Shape::Disc { centre: at, radius: 3.8, color: edge }
                } else {
                    Shape::Ring { centre: at, radius: 3.4, stroke: Stroke::solid(edge, 1.4) }
                });
                // The craft's own mark and name stand for a body that it is with.
                let with_craft = is_with(au, craft.position_au);
                let label = (!with_craft).then(|| format!("{} at {word}", body_name(end, is_start)));
                marks.push(BodyMark { at, label, met: with_craft && filled && !is_start });
            }
        }
        for mark in &marks {
            self.room.take(Rect::around(mark.at, 8.0, 8.0));
        }
        marks
    }

    pub(crate) fn body_labels(&mut self, bodies: &[BodyMark]) {
        let style = Style { size: 11.0, color: self.theme.muted, weight: Weight::Normal };
        for mark in bodies {
            if let Some(content) = &mark.label {
                // A small picture has no room for names that interrupt lines.
                let most = if self.small { COVER } else { 3.0 * COVER };
                self.beside_body(mark.at, content, style, most);
            }
        }
    }

    /// Both bodies at a time since departure.
    pub(crate) fn cursor(&mut self, report: &Report, t_d: f64) {
        let inside = self.view.frame.grown(-6.0);
        let style = self.style(self.theme.ink);
        let ends = [(&report.ends.from, true), (&report.ends.to, false)];
        // The same body is drawn once.
        let count = if report.ends.from == report.ends.to { 1 } else { 2 };
        for (end, is_start) in ends.into_iter().take(count) {
            let Some(at) = body(end, t_d).map(|au| self.view.px(au)).filter(|at| inside.contains(*at)) else {
                continue;
            };
            self.shapes.push(Shape::Disc { centre: at, radius: 6.0, color: self.theme.sheet });
            self.shapes.push(Shape::Disc { centre: at, radius: 4.4, color: self.theme.muted });
            self.beside_body(at, &body_name(end, is_start), style, 3.0 * COVER);
        }
    }

    fn beside_body(&mut self, at: Point, content: &str, style: Style, most: f64) {
        let sun = self.view.sun();
        let out = Point::new(at.x - sun.x, at.y - sun.y);
        let candidates = beside(at, out, 8.0, content, style);
        self.label(content, style, candidates, most);
    }
}
