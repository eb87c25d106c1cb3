//! Sentences that a figure carries when it does not show a proven, current flight.

use scenario::report::{Columns, Report, Status};

use crate::axis::{extent, significant};
use crate::geometry::Rect;
use crate::metrics::{text_height, wrap};
use crate::shapes::{Anchor, Point, Shape, Text, Weight, printable};
use crate::theme::Theme;

/// Font size of the sentences, CSS pixels.
const SIZE: f64 = 12.0;

/// What must be said about a figure, most important first; empty for a proven, current flight.
pub(crate) fn sentences(report: &Report, columns: &Columns, stale: bool) -> Vec<String> {
    let mut out = Vec::new();
    if stale {
        out.push("Out of date: the inputs have changed.".to_owned());
    }
    let flight = &report.flight;
    let told = flight.message.as_deref().map(str::trim).filter(|message| !message.is_empty());
    match flight.status {
        Status::NotConverged => {
            out.push(format!("Not converged: {}", told.unwrap_or("no flight was found.")));
            if let Some(days) = flight.estimate {
                out.push(format!("An estimate, not a flight: {} d.", significant(days, 3)));
            }
        }
        Status::Unreachable => {
            out.push(format!("Unreachable: {}", told.unwrap_or("no such flight exists.")));
        }
        Status::Approximate => out.push("Approximate: the proof's thresholds are missed.".to_owned()),
        Status::Converged | Status::Flown if !has_history(columns) => {
            let nothing_to_fly = flight.time_d == Some(0.0);
            out.push(if nothing_to_fly {
                "The ends are the same: there is nothing to fly.".to_owned()
            } else {
                "This report carries no histories.".to_owned()
            });
        }
        Status::Converged | Status::Flown => {}
    }
    out
}

/// Whether the columns hold a flight that takes time.
pub(crate) fn has_history(columns: &Columns) -> bool {
    extent(&columns.t_d).is_some_and(|(start, end)| end > start)
}

/// Sets the sentences from the top of an area down, in the alarm colour, and returns the height used. Long ones are
/// cut so that at most a third of the area is taken.
pub(crate) fn set(shapes: &mut Vec<Shape>, sentences: &[String], area: Rect, theme: &Theme) -> f64 {
    let height = text_height(SIZE) + 2.0;
    let most_lines = ((area.height / 3.0 / height).floor() as usize).max(1);
    let mut used = 0;
    for sentence in sentences {
        let room = most_lines.saturating_sub(used).min(4);
        if room == 0 {
            break;
        }
        for content in wrap(&printable(sentence), SIZE, area.width, room) {
            let at = Point::new(area.left, area.top + (used as f64 + 0.5) * height);
            shapes.push(Shape::Text(Text {
                at,
                content,
                anchor: Anchor::Start,
                size: SIZE,
                color: theme.alarm,
                weight: Weight::Normal,
            }));
            used += 1;
        }
    }
    used as f64 * height
}
