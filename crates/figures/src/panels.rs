//! The panels of the histories: which quantities there are, and the scale that shows each well.

use scenario::report::{Columns, End, Ends, Report};

use crate::axis::{Steps, Tick, extent, linear_ticks, log_ticks, padded};
use crate::histories::TICK_SIZE;
use crate::metrics::text_height;
use crate::track::is_spatial;
use crate::{FigureError, PANELS};

/// Decades that a logarithmic panel shows below its largest value; smaller values run along its floor.
const DECADES: f64 = 3.5;

/// How a quantity is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Kind {
    /// An angle: ticks at parts of a right angle, a line at zero, jumps.
    Angle,
    /// An angle from 0 to 90 deg.
    Quarter,
    /// An angle from -180 to 180 deg that goes on at the other end.
    Wrapped,
    /// A distance: the distances of both ends from the Sun are drawn too.
    Distance,
    /// Anything else on a linear axis.
    Plain,
    /// A quantity that spans decades.
    Log,
}

impl Kind {
    pub(crate) fn is_angle(self) -> bool {
        matches!(self, Kind::Angle | Kind::Quarter | Kind::Wrapped)
    }
}

/// One panel before it is drawn.
pub(crate) struct Quantity<'a> {
    pub(crate) column: &'static str,
    pub(crate) name: &'static str,
    pub(crate) unit: &'static str,
    pub(crate) kind: Kind,
    pub(crate) values: &'a [f64],
}

/// The panels shown unless others are asked for: the clock angle joins where it tells something.
pub(crate) fn usual(spatial: bool) -> &'static [&'static str] {
    if spatial {
        &["cone_deg", "clock_deg", "distance_au", "speed_km_s", "turn_rate_deg_d"]
    } else {
        &["cone_deg", "distance_au", "speed_km_s", "turn_rate_deg_d"]
    }
}

/// The quantities asked for, in that order; the usual ones when none are.
///
/// # Errors
/// When no panel has a name asked for.
pub(crate) fn quantities<'a>(
    report: &Report,
    columns: &'a Columns,
    asked: &[String],
) -> Result<Vec<Quantity<'a>>, FigureError> {
    let spatial = is_spatial(report, columns);
    if asked.is_empty() {
        return Ok(usual(spatial).iter().filter_map(|name| quantity(name, columns, spatial)).collect());
    }
    asked
        .iter()
        .map(|name| quantity(name, columns, spatial).ok_or_else(|| FigureError::UnknownPanel(name.clone())))
        .collect()
}

fn quantity<'a>(column: &str, columns: &'a Columns, spatial: bool) -> Option<Quantity<'a>> {
    let column = *PANELS.iter().find(|name| **name == column)?;
    let (name, unit, kind, values) = match column {
        "cone_deg" if spatial => ("Cone angle", "\u{b0}", Kind::Quarter, &columns.cone_deg),
        "cone_deg" => ("Cone angle", "\u{b0}", Kind::Angle, &columns.cone_deg),
        "clock_deg" => ("Clock angle", "\u{b0}", Kind::Wrapped, &columns.clock_deg),
        "distance_au" => ("Distance from the Sun", "au", Kind::Distance, &columns.distance_au),
        "speed_km_s" => ("Speed", "km/s", Kind::Plain, &columns.speed_km_s),
        "turn_rate_deg_d" => ("Turn rate of the sail", "\u{b0}/d", Kind::Log, &columns.turn_rate_deg_d),
        "film_temp_k" => ("Film temperature", "K", Kind::Plain, &columns.film_temp_k),
        "sail_accel_mm_s2" => ("Sail acceleration", "mm/s²", Kind::Plain, &columns.sail_accel_mm_s2),
        "earth_range_au" => ("Distance from the Earth", "au", Kind::Plain, &columns.earth_range_au),
        "sun_earth_craft_deg" => {
            ("Sun\u{2013}Earth\u{2013}craft angle", "\u{b0}", Kind::Angle, &columns.sun_earth_craft_deg)
        }
        _ => return None,
    };
    Some(Quantity { column, name, unit, kind, values })
}

/// The scale of one panel's y axis.
pub(crate) struct Scale {
    pub(crate) min: f64,
    pub(crate) max: f64,
    pub(crate) log: bool,
    pub(crate) ticks: Vec<Tick>,
}

impl Scale {
    /// Height above the bottom edge as a share of the panel's height.
    pub(crate) fn share(&self, value: f64) -> f64 {
        if self.log {
            // Values at or below the floor run along it.
            (value.max(self.min) / self.min).ln() / (self.max / self.min).ln()
        } else {
            (value - self.min) / (self.max - self.min)
        }
    }
}

/// The scale for a panel of this height, CSS pixels.
pub(crate) fn scale(quantity: &Quantity, ends: &Ends, height: f64) -> Scale {
    let apart = text_height(TICK_SIZE) + 4.0;
    let most = (height / apart).floor().max(1.0) as usize + 1;
    let found = extent(quantity.values);
    if quantity.kind == Kind::Log {
        let top = found.map_or(1.0, |(_, high)| high).max(1e-6);
        let positive: Vec<f64> = quantity.values.iter().copied().filter(|&v| v > 0.0).collect();
        let low = extent(&positive).map_or(top / 10.0, |(low, _)| low).max(top / 10.0_f64.powf(DECADES));
        // At least a decade, so that a steady rate does not look eventful.
        let (min, max) = (low.min(top / 10.0) / 1.15, top * 1.15);
        let ticks = log_ticks(min, max, |ticks| {
            let px = |value: f64| height * (value / min).ln() / (max / min).ln();
            ticks.windows(2).all(|pair| px(pair[1].value) - px(pair[0].value) >= apart)
        });
        return Scale { min, max, log: true, ticks };
    }
    let mut range = found.unwrap_or((0.0, 1.0));
    if quantity.kind == Kind::Distance {
        for (nearest, farthest, _) in end_ranges(ends) {
            range = (range.0.min(nearest), range.1.max(farthest));
        }
    }
    let (min, max) = match quantity.kind {
        // Angles are shown in whole steps of 15 degrees: a steady attitude then reads as steady.
        Kind::Angle => {
            let (low, high) = ((range.0 / 15.0).floor() * 15.0, (range.1 / 15.0).ceil() * 15.0);
            if high > low { (low, high) } else { (low - 15.0, high + 15.0) }
        }
        Kind::Quarter => (0.0, 90.0),
        Kind::Wrapped => (-180.0, 180.0),
        _ => padded(range, 0.07),
    };
    let steps = if quantity.kind.is_angle() { Steps::Degrees } else { Steps::Decimal };
    let ticks = linear_ticks(min, max, steps, |ticks| {
        ticks.len() <= most
            && ticks.windows(2).all(|pair| (pair[1].value - pair[0].value) / (max - min) * height >= apart)
    });
    Scale { min, max, log: false, ticks }
}

/// Nearest and farthest distance of each end's orbit from the Sun, au.
pub(crate) fn end_ranges(ends: &Ends) -> [(f64, f64, &End); 2] {
    [&ends.from, &ends.to].map(|end| {
        let (a, e) = (end.semi_major_axis_au, end.eccentricity);
        (a * (1.0 - e), a * (1.0 + e), end)
    })
}
