//! A history told in words: its rises, falls, swings and jumps.

use crate::axis::{extent, number, significant};

/// A change smaller than this share of a history's range is not told.
const TOLD: f64 = 0.08;
/// Most changes told one by one.
const MOST_CHANGES: usize = 6;

/// How a quantity is told.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Manner {
    /// Its name, as a sentence begins.
    pub(crate) name: &'static str,
    /// What follows its values.
    pub(crate) unit: &'static str,
    /// The smallest change worth telling, in its unit.
    pub(crate) least: f64,
}

/// An angle (deg) that is known to whole turns only, as a history without the leaps that whole turns make.
pub(crate) fn unwrapped(values: &[f64]) -> Vec<f64> {
    let mut last = 0.0;
    values
        .iter()
        .map(|&value| {
            if value.is_finite() {
                last = value - 360.0 * ((value - last) / 360.0).round();
            }
            if value.is_finite() { last } else { value }
        })
        .collect()
}

/// One change of a history.
struct Change {
    from: (f64, f64),
    to: (f64, f64),
    pace: Pace,
}

/// How fast a change is.
#[derive(Clone, Copy, PartialEq)]
enum Pace {
    /// Over a good part of the flight.
    Slow,
    /// Most of it within a thirtieth of the flight, about this time (d).
    Quick(f64),
    /// At one instant.
    Jump,
}

/// A history told as its rises, falls and jumps; `None` without values.
pub(crate) fn told(t_d: &[f64], values: &[f64], manner: Manner) -> Option<String> {
    let Manner { name, unit, least } = manner;
    let points: Vec<(f64, f64)> = t_d
        .iter()
        .copied()
        .zip(values.iter().copied())
        .filter(|(t, v)| t.is_finite() && v.is_finite())
        .collect();
    let (low, high) = extent(points.iter().map(|(_, v)| v))?;
    let write = |value: f64| {
        // Angles are told within half a turn of zero, however far they have turned.
        let turned = value - 360.0 * (value / 360.0).round();
        let text = if unit == "°" { number(turned, 0) } else { significant(value, 3) };
        format!("{text}{unit}")
    };
    let first = points[0].1;
    if high - low < least {
        return Some(format!("{name} stays near {}.", write((low + high) / 2.0)));
    }
    let changes = changes(&points, least.max(TOLD * (high - low)));
    if changes.len() > MOST_CHANGES {
        let last = points[points.len() - 1].1;
        return Some(format!(
            "{name} starts at {}, swings {} times between {} and {}, and ends at {}.",
            write(first),
            changes.len(),
            write(low),
            write(high),
            write(last)
        ));
    }
    let end_d = points[points.len() - 1].0;
    let told: Vec<String> = changes
        .iter()
        .enumerate()
        .map(|(i, change)| {
            let up = change.to.1 > change.from.1;
            let verb = match change.pace {
                Pace::Jump => "flips",
                Pace::Quick(_) => "swings",
                Pace::Slow if up => "rises",
                Pace::Slow => "falls",
            };
            let from = if i == 0 { format!(" from {}", write(change.from.1)) } else { String::new() };
            let when = match change.pace {
                Pace::Jump => format!("at day {}", number(change.to.0, 0)),
                Pace::Quick(about_d) => format!("about day {}", number(about_d, 0)),
                Pace::Slow if change.to.0 >= end_d => "at arrival".to_owned(),
                Pace::Slow => format!("by day {}", number(change.to.0, 0)),
            };
            format!("{verb}{from} to {} {when}", write(change.to.1))
        })
        .collect();
    Some(format!("{name} {}.", told.join(", ")))
}

/// The rises, falls and jumps of a history, leaving out those smaller than `least`. A jump is two samples at one
/// time.
fn changes(points: &[(f64, f64)], least: f64) -> Vec<Change> {
    let span_d = points[points.len() - 1].0 - points[0].0;
    let jumps = |a: &(f64, f64), b: &(f64, f64)| a.0 == b.0 && (b.1 - a.1).abs() >= least;
    let mut out: Vec<Change> = Vec::new();
    let mut before: Option<(f64, f64)> = None;
    for run in points.chunk_by(|a, b| !jumps(a, b)) {
        if let Some(from) = before {
            out.push(Change { from, to: run[0], pace: Pace::Jump });
        }
        before = run.last().copied();
        out.extend(turning_points(run, least).windows(2).map(|pair| Change {
            from: pair[0],
            to: pair[1],
            pace: pace(run, pair[0], pair[1], span_d / 30.0),
        }));
    }
    out
}

/// Whether the middle 70 % of a change take no longer than `quick_d`.
fn pace(run: &[(f64, f64)], from: (f64, f64), to: (f64, f64), quick_d: f64) -> Pace {
    let crossing = |share: f64| {
        let level = from.1 + share * (to.1 - from.1);
        run.windows(2).filter(|pair| pair[0].0 >= from.0 && pair[1].0 <= to.0).find_map(|pair| {
            let (a, b) = (pair[0], pair[1]);
            let crosses = (a.1 - level) * (b.1 - level) <= 0.0 && a.1 != b.1;
            crosses.then(|| a.0 + (level - a.1) / (b.1 - a.1) * (b.0 - a.0))
        })
    };
    match (crossing(0.15), crossing(0.5), crossing(0.85)) {
        (Some(begin), Some(middle), Some(end)) if end - begin <= quick_d => Pace::Quick(middle),
        _ => Pace::Slow,
    }
}

/// Where a continuous history turns, first and last point included; one point when nothing is worth telling.
fn turning_points(points: &[(f64, f64)], least: f64) -> Vec<(f64, f64)> {
    let mut turning = vec![points[0]];
    let mut extreme = points[0];
    let mut rising = None;
    for &point in &points[1..] {
        let past = match rising {
            Some(true) => extreme.1 - point.1,
            Some(false) => point.1 - extreme.1,
            None => (point.1 - turning[0].1).abs(),
        };
        if past >= least {
            if let Some(up) = rising {
                turning.push(extreme);
                rising = Some(!up);
            } else {
                rising = Some(point.1 > turning[0].1);
            }
            extreme = point;
        } else if rising.is_some_and(|up| (point.1 > extreme.1) == up) {
            extreme = point;
        }
    }
    if rising.is_some() {
        // What remains after the last extreme is smaller than worth telling: the last change goes on to the end.
        turning.push(points[points.len() - 1]);
    }
    turning
}

#[cfg(test)]
mod tests {
    use super::*;

    const CONE: Manner = Manner { name: "Cone angle", unit: "°", least: 3.0 };

    fn sampled(value: impl Fn(f64) -> f64) -> (Vec<f64>, Vec<f64>) {
        let t: Vec<f64> = (0..=400).map(f64::from).collect();
        let v = t.iter().map(|&t| value(t)).collect();
        (t, v)
    }

    #[test]
    fn a_fall_a_jump_and_a_fall_are_told_in_order() {
        let (mut t, mut v) =
            sampled(|t| if t <= 93.0 { 22.0 - 12.0 * t / 93.0 } else { 71.0 - 26.0 * (t - 93.0) / 307.0 });
        t.insert(94, 93.0);
        v.insert(94, 71.0);
        assert_eq!(
            told(&t, &v, CONE).unwrap(),
            "Cone angle falls from 22° to 10° by day 93, flips to 71° at day 93, falls to 45° at arrival."
        );
    }

    #[test]
    fn the_fast_swing_of_the_published_transfer_is_told_as_one() {
        // Published: sail angle (rad) at 41 equal steps of the minimum-time transfer with lightness number 0.17 to
        // 1.5237; A. E. Bryson, Dynamic Optimization (1999), fig. 4.14, from the author's companion scripts.
        const ANGLE_RAD: [f64; 41] = [
            0.3894, 0.3515, 0.3123, 0.2724, 0.2329, 0.1965, 0.1690, 0.1710, 0.3638, 1.1163, 1.2479, 1.2412,
            1.2082, 1.1697, 1.1316, 1.0958, 1.0630, 1.0332, 1.0061, 0.9815, 0.9590, 0.9385, 0.9196, 0.9021,
            0.8859, 0.8707, 0.8565, 0.8430, 0.8302, 0.8180, 0.8063, 0.7950, 0.7841, 0.7735, 0.7631, 0.7531,
            0.7432, 0.7335, 0.7241, 0.7148, 0.7057,
        ];
        let t: Vec<f64> = (0..41).map(|k| 406.5 * f64::from(k) / 40.0).collect();
        let v = ANGLE_RAD.map(f64::to_degrees);
        assert_eq!(
            told(&t, &v, CONE).unwrap(),
            "Cone angle falls from 22° to 10° by day 61, swings to 71° about day 86, falls to 40° at arrival."
        );
    }

    #[test]
    fn a_jump_in_the_midst_of_a_rise_is_still_told() {
        let (mut t, mut v) = sampled(|t| if t <= 200.0 { t / 10.0 } else { 20.0 + t / 10.0 });
        t.insert(201, 200.0);
        v.insert(201, 40.0);
        let told = told(&t, &v, CONE).unwrap();
        assert!(told.contains("rises from 0° to 20° by day 200, flips to 40° at day 200"), "{told}");
    }

    #[test]
    fn many_swings_are_counted_and_a_steady_value_is_called_steady() {
        let (t, v) = sampled(|t| 30.0 * (t / 8.0).sin());
        assert!(told(&t, &v, CONE).unwrap().contains("swings"));
        let (t, v) = sampled(|_| 35.264);
        assert_eq!(told(&t, &v, CONE).unwrap(), "Cone angle stays near 35°.");
    }

    #[test]
    fn an_angle_that_passes_half_a_turn_goes_on() {
        let (t, v) = sampled(|t| (100.0 + 0.5 * t + 180.0).rem_euclid(360.0) - 180.0);
        let manner = Manner { name: "Clock angle", unit: "°", least: 10.0 };
        assert_eq!(
            told(&t, &unwrapped(&v), manner).unwrap(),
            "Clock angle rises from 100° to −60° at arrival."
        );
    }
}
