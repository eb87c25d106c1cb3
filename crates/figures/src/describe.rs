//! What a reader would see in a figure, in sentences.

use scenario::report::{Columns, End, Report};

use crate::axis::{extent, number, significant};
use crate::bodies::{body_name, meets_target};
use crate::calendar::day;
use crate::ellipse::body;
use crate::heights::{Heights, height_words};
use crate::notes;
use crate::panels::{Quantity, quantities};
use crate::told::{Manner, told, unwrapped};
use crate::track::{distances, is_spatial, position};
use crate::{FigureError, FigureOptions, NAMES};

/// The figure in words: a text alternative that says what a reader would see with the usual options.
///
/// # Errors
/// When no figure has this name.
pub fn describe(name: &str, report: &Report, columns: &Columns) -> Result<String, FigureError> {
    describe_with(name, report, columns, &FigureOptions::default())
}

/// The same for a figure drawn with these options.
pub(crate) fn describe_with(
    name: &str,
    report: &Report,
    columns: &Columns,
    options: &FigureOptions,
) -> Result<String, FigureError> {
    let mut sentences = match name {
        "orbit" => orbit(report, columns, options),
        "histories" => histories(report, columns, &quantities(report, columns, &options.panels)?),
        _ => return Err(FigureError::UnknownName(name.to_owned())),
    };
    debug_assert!(NAMES.contains(&name));
    sentences.extend(notes::sentences(report, columns, false));
    Ok(crate::shapes::printable(&sentences.join(" ")))
}

fn orbit(report: &Report, columns: &Columns, options: &FigureOptions) -> Vec<String> {
    let (from, to) = (&report.ends.from, &report.ends.to);
    let spatial = is_spatial(report, columns);
    let seen = if options.tilt_deg > 0.0 {
        format!("Seen {}° from ecliptic north", number(options.tilt_deg, 0))
    } else {
        "The ecliptic plane seen from the north".to_owned()
    };
    let mut out = vec![format!(
        "{seen}, to scale, the Sun at the {} of {} and {}.",
        if from.eccentricity == 0.0 && to.eccentricity == 0.0 { "centre" } else { "focus" },
        orbit_words(from),
        orbit_words(to)
    )];
    let flight = &report.flight;
    let distances: Vec<f64> = distances(columns).collect();
    if let (Some(time_d), Some((low, high))) = (flight.time_d, extent(&distances)) {
        let turns = flight.revolutions.map_or(String::new(), |turns| {
            format!(" {} revolutions", number(turns, if turns < 10.0 { 2 } else { 1 }))
        });
        let sense = if runs_backward(columns) { " clockwise" } else { " counter-clockwise" };
        out.push(format!(
            "The sail flies{turns}{sense} in {} days, between {} and {} au from the Sun.",
            days(time_d),
            significant(low, 3),
            significant(high, 3)
        ));
        let mut cones = columns.cone_deg.iter().copied().filter(|cone| cone.is_finite());
        if let (Some(first), Some(last)) = (cones.clone().next(), cones.next_back()) {
            out.push(format!(
                "Its normal stands {} at departure and {} at arrival.",
                lean_words(first, spatial),
                lean_words(last, spatial)
            ));
        }
    }
    if flight.time_d.is_some() && !columns.t_d.is_empty() {
        out.extend(dates(report));
        out.extend(heights(report, columns));
        out.extend(bodies(report, columns));
    }
    if from.semi_major_axis_au != to.semi_major_axis_au && !spatial {
        out.push(format!(
            "A dashed half-ellipse from the same start is the Hohmann transfer, {} days.",
            days(report.impulsive.heliocentric.time_d)
        ));
    }
    out
}

/// Whether the flight ends moving clockwise as seen from ecliptic north.
fn runs_backward(columns: &Columns) -> bool {
    let last = |column: &[f64]| column.last().copied().unwrap_or(f64::NAN);
    let (x, y) = (last(&columns.x_au), last(&columns.y_au));
    x * last(&columns.vy_km_s) - y * last(&columns.vx_km_s) < 0.0
}

fn dates(report: &Report) -> Option<String> {
    let depart = day(report.flight.depart.as_deref())?;
    let arrive = day(report.flight.arrive.as_deref());
    let arrival = arrive.map_or(String::new(), |date| format!(" and arrives on {date}"));
    Some(format!("It leaves on {depart}{arrival} (TDB)."))
}

/// The highest places north and south of the ecliptic.
fn heights(report: &Report, columns: &Columns) -> Option<String> {
    let told_from_au = 1e-3 * Heights::of(report, columns).reach_au;
    let by_height = |a: &&(f64, f64), b: &&(f64, f64)| a.1.total_cmp(&b.1);
    let all: Vec<(f64, f64)> = columns
        .t_d
        .iter()
        .copied()
        .zip(columns.z_au.iter().copied())
        .filter(|(_, z)| z.is_finite())
        .collect();
    let north = all.iter().max_by(by_height).filter(|(_, z)| *z > told_from_au);
    let south = all.iter().min_by(by_height).filter(|(_, z)| *z < -told_from_au);
    let told: Vec<String> = [north, south]
        .into_iter()
        .flatten()
        .map(|(t_d, z)| format!("{} of the ecliptic at day {}", height_words(*z), number(*t_d, 0)))
        .collect();
    (!told.is_empty()).then(|| format!("It gets as far as {}.", told.join(" and ")))
}

/// Where the target's body is at departure and at arrival, where that is known.
fn bodies(report: &Report, columns: &Columns) -> Option<String> {
    let to = &report.ends.to;
    let (first, last) = (position(columns, 0), position(columns, columns.t_d.len() - 1));
    let end_d = columns.t_d.last().copied()?;
    let ahead = |body_au: [f64; 3], craft_au: [f64; 3]| {
        let longitude = |au: [f64; 3]| au[1].atan2(au[0]).to_degrees();
        let degrees = longitude(body_au) - longitude(craft_au);
        let degrees = degrees - 360.0 * (degrees / 360.0).round();
        format!("{}° {}", number(degrees.abs(), 0), if degrees < 0.0 { "behind" } else { "ahead of" })
    };
    let (at_departure, at_arrival) = (body(to, 0.0)?, body(to, end_d)?);
    let arrival = if meets_target(report, last) {
        "they meet at arrival".to_owned()
    } else {
        format!("{} it at arrival", ahead(at_arrival, last))
    };
    let name = body_name(to, false);
    let name = if name == to.name { name } else { format!("The {name}") };
    Some(format!(
        "{name} is {} the sail in ecliptic longitude at departure; {arrival}.",
        ahead(at_departure, first)
    ))
}

fn orbit_words(end: &End) -> String {
    let name = if end.name.ends_with("orbit") {
        format!("the {}", end.name)
    } else {
        format!("{}\u{2019}s orbit", end.name)
    };
    let a = significant(end.semi_major_axis_au, 4);
    let shape = if end.eccentricity == 0.0 {
        format!("circle, {a} au")
    } else {
        format!("semi-major axis {a} au, eccentricity {}", number(end.eccentricity, 3))
    };
    let inclined = if end.inclination_deg.abs() < 0.05 {
        String::new()
    } else {
        format!(", inclination {}°", number(end.inclination_deg, 1))
    };
    format!("{name} ({shape}{inclined})")
}

/// Spatial cone angles carry no sign: their direction is the clock angle's to tell.
fn lean_words(cone_deg: f64, spatial: bool) -> String {
    let angle = number(cone_deg.abs(), 0);
    if angle == "0" {
        "on the Sun line".to_owned()
    } else if spatial {
        format!("{angle}° off the Sun line")
    } else if cone_deg > 0.0 {
        format!("{angle}° forward of the Sun line")
    } else {
        format!("{angle}° backward of the Sun line")
    }
}

fn days(time_d: f64) -> String {
    number(time_d, if time_d < 1000.0 { 1 } else { 0 })
}

fn histories(report: &Report, columns: &Columns, quantities: &[Quantity]) -> Vec<String> {
    if columns.t_d.is_empty() {
        return vec!["Histories against time: no flight to show.".to_owned()];
    }
    let end_d = columns.t_d.last().copied().unwrap_or(0.0);
    let names: Vec<String> = quantities.iter().map(|quantity| lower_first(quantity.name)).collect();
    let listed = match names.split_last() {
        Some((last, [])) => last.clone(),
        Some((last, others)) => format!("{} and {last}", others.join(", ")),
        None => String::new(),
    };
    let mut out = vec![format!("Histories over {} days: {listed}.", days(end_d))];
    out.extend(dates(report));
    out.extend(quantities.iter().filter_map(|quantity| quantity_words(&columns.t_d, quantity)));
    out
}

fn quantity_words(t: &[f64], quantity: &Quantity) -> Option<String> {
    let values = quantity.values;
    let manner = |name, unit, least| Manner { name, unit, least };
    match quantity.column {
        "cone_deg" => told(t, values, manner("Cone angle", "°", 3.0)),
        "clock_deg" => told(t, &unwrapped(values), manner("Clock angle", "°", 10.0)),
        "distance_au" => told(t, values, manner("Distance", " au", 0.002)),
        "speed_km_s" => told(t, values, manner("Speed", " km/s", 0.02)),
        "film_temp_k" => told(t, values, manner("Film temperature", " K", 1.0)),
        "sail_accel_mm_s2" => told(t, values, manner("Sail acceleration", " mm/s²", 1e-4)),
        "earth_range_au" => told(t, values, manner("Distance from the Earth", " au", 0.002)),
        "sun_earth_craft_deg" => told(t, values, manner(quantity.name, "°", 3.0)),
        _ => {
            let fastest =
                values.iter().zip(t).filter(|(rate, _)| rate.is_finite()).max_by(|a, b| a.0.total_cmp(b.0));
            fastest.map(|(rate, at_d)| {
                format!(
                    "The sail turns fastest at day {}, {} deg/d.",
                    number(*at_d, 0),
                    significant(*rate, 2)
                )
            })
        }
    }
}

/// A name as it stands within a sentence; names of the Sun and the Earth keep their capitals.
fn lower_first(name: &str) -> String {
    let mut letters = name.chars();
    match letters.next() {
        Some(first) if !name.starts_with("Sun") => first.to_lowercase().chain(letters).collect(),
        _ => name.to_owned(),
    }
}
