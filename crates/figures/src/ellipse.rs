//! Heliocentric ellipses: whole orbits, bodies on them, and the half-ellipse of an impulsive transfer.

use std::f64::consts::{PI, TAU};

use orbits::kepler::Elements;
use scenario::report::End;

/// Most corners of one drawn ellipse.
const MOST_CORNERS: usize = 4096;

/// Corners that keep a circle of this radius (CSS pixels) within a tenth of a pixel of the true curve over a full
/// turn: the sagitta of one chord is R (2 pi / n)^2 / 8.
pub(crate) fn corners(radius_px: f64) -> usize {
    ((PI * (5.0 * radius_px.abs()).sqrt()).ceil() as usize).clamp(48, MOST_CORNERS)
}

/// The elements of an end, au, with the mean anomaly at departure or zero where there is none.
pub(crate) fn elements(end: &End) -> Elements {
    Elements {
        semi_major_axis: end.semi_major_axis_au,
        eccentricity: end.eccentricity,
        inclination_rad: end.inclination_deg.to_radians(),
        node_rad: end.node_deg.to_radians(),
        arg_peri_rad: end.arg_peri_deg.to_radians(),
        mean_anomaly_rad: end.mean_anomaly_deg.unwrap_or(0.0).to_radians(),
    }
}

/// The orbit in ecliptic axes, au, `count` segments from perihelion round in the direction of motion; the last
/// point is the first.
pub(crate) fn orbit(end: &End, count: usize) -> Vec<[f64; 3]> {
    let (a, e) = (end.semi_major_axis_au, end.eccentricity);
    let b = a * (1.0 - e * e).max(0.0).sqrt();
    let (towards_perihelion, ahead) = elements(end).perifocal_axes();
    (0..=count)
        .map(|k| {
            let (sin, cos) = (TAU * k as f64 / count as f64).sin_cos();
            (towards_perihelion * (a * (cos - e)) + ahead * (b * sin)).into()
        })
        .collect()
}

/// The ascending and the descending node of an orbit, au.
pub(crate) fn nodes(end: &End) -> [[f64; 3]; 2] {
    let (e, cos_peri) = (end.eccentricity, end.arg_peri_deg.to_radians().cos());
    let p = end.semi_major_axis_au * (1.0 - e * e);
    let (sin, cos) = end.node_deg.to_radians().sin_cos();
    // The perihelion lies the argument of perihelion ahead of the ascending node.
    [p / (1.0 + e * cos_peri), -p / (1.0 - e * cos_peri)].map(|r| [r * cos, r * sin, 0.0])
}

/// Where the body of an end is, au, `t_d` days after departure; `None` where its place is not known.
pub(crate) fn body(end: &End, t_d: f64) -> Option<[f64; 3]> {
    end.mean_anomaly_deg.filter(|_| end.period_d > 0.0)?;
    let at_departure = elements(end);
    let mean_anomaly_rad = at_departure.mean_anomaly_rad + TAU * t_d / end.period_d;
    let state = Elements { mean_anomaly_rad, ..at_departure }.state(1.0).ok()?;
    Some(state.position.into())
}

/// The half-ellipse tangent to circles of radii `from_au` and `to_au`, au, counter-clockwise from the ecliptic
/// longitude `start_rad`; empty when the radii are equal.
pub(crate) fn half_ellipse(from_au: f64, to_au: f64, start_rad: f64, count: usize) -> Vec<[f64; 3]> {
    if from_au == to_au || !(from_au > 0.0 && to_au > 0.0) {
        return Vec::new();
    }
    let e = (to_au - from_au) / (to_au + from_au);
    // Seen from the start this is p / (1 + e cos): perihelion there when going out (e > 0), aphelion going in.
    let p = from_au * (1.0 + e);
    (0..=count)
        .map(|k| {
            let angle = PI * k as f64 / count as f64;
            let r = p / (1.0 + e * angle.cos());
            let (sin, cos) = (start_rad + angle).sin_cos();
            [r * cos, r * sin, 0.0]
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn end(a: f64, e: f64, i: f64, node: f64, peri: f64) -> End {
        End {
            name: "given orbit".into(),
            semi_major_axis_au: a,
            eccentricity: e,
            inclination_deg: i,
            node_deg: node,
            arg_peri_deg: peri,
            mean_anomaly_deg: None,
            period_d: 0.0,
        }
    }

    #[test]
    fn the_first_point_is_the_perihelion() {
        let points = orbit(&end(2.0, 0.4, 0.0, 30.0, 45.0), 64);
        let (sin, cos) = 75.0_f64.to_radians().sin_cos();
        assert!((points[0][0] - 1.2 * cos).abs() < 1e-12 && (points[0][1] - 1.2 * sin).abs() < 1e-12);
        let farthest = points.iter().map(|p| p[0].hypot(p[1])).fold(0.0, f64::max);
        assert!((farthest - 2.8).abs() < 1e-9);
    }

    #[test]
    fn an_inclined_circle_is_squeezed_across_its_node_line() {
        let points = orbit(&end(1.0, 0.0, 60.0, 0.0, 0.0), 360);
        let widest = points.iter().map(|p| p[0].abs()).fold(0.0, f64::max);
        let highest = points.iter().map(|p| p[1].abs()).fold(0.0, f64::max);
        assert!((widest - 1.0).abs() < 1e-9 && (highest - 0.5).abs() < 1e-9);
    }

    #[test]
    fn an_orbit_is_highest_a_quarter_turn_after_its_ascending_node() {
        let end = end(1.0, 0.0, 60.0, 20.0, 0.0);
        let [ascending, descending] = nodes(&end);
        let points = orbit(&end, 4);
        assert!((0..3).all(|i| (points[0][i] - ascending[i]).abs() < 1e-12), "{points:?}");
        assert!((0..3).all(|i| (points[2][i] - descending[i]).abs() < 1e-12), "{points:?}");
        assert!((points[1][2] - 60.0_f64.to_radians().sin()).abs() < 1e-12);
    }

    #[test]
    fn the_nodes_lie_on_the_ellipse() {
        let end = end(1.3, 0.4, 25.0, 110.0, 70.0);
        let points = orbit(&end, 4000);
        for node in nodes(&end) {
            let apart = |p: &[f64; 3]| (0..3).map(|i| (p[i] - node[i]).powi(2)).sum::<f64>().sqrt();
            let nearest = points.iter().map(apart).fold(f64::INFINITY, f64::min);
            // Neighbouring points are some 1.3 au * 2 pi / 4000 apart.
            assert!(nearest < 2e-3, "{nearest}");
        }
    }

    #[test]
    fn a_body_is_at_perihelion_once_a_period_and_at_aphelion_half_way_between() {
        let end = End { mean_anomaly_deg: Some(-90.0), period_d: 400.0, ..end(2.0, 0.4, 30.0, 10.0, 45.0) };
        let distance = |t_d| body(&end, t_d).unwrap().iter().map(|x| x * x).sum::<f64>().sqrt();
        assert!((distance(100.0) - 1.2).abs() < 1e-12 && (distance(500.0) - 1.2).abs() < 1e-12);
        assert!((distance(300.0) - 2.8).abs() < 1e-12);
        assert_eq!(body(&End { mean_anomaly_deg: None, ..end.clone() }, 0.0), None);
        assert_eq!(body(&End { period_d: 0.0, ..end }, 0.0), None);
    }

    #[test]
    fn the_half_ellipse_touches_both_circles_on_opposite_sides_going_out_and_in() {
        for (from, to) in [(1.0, 1.52371034), (1.0, 0.72333566)] {
            let points = half_ellipse(from, to, 0.3, 200);
            let (first, last) = (points[0], points[200]);
            assert!((first[0].hypot(first[1]) - from).abs() < 1e-12);
            assert!((last[0].hypot(last[1]) - to).abs() < 1e-12);
            let cross = first[0] * last[1] - first[1] * last[0];
            assert!(cross.abs() < 1e-12 && first[0] * last[0] < 0.0);
            // Tangent to the circle: the radius hardly changes over the first step.
            assert!((points[1][0].hypot(points[1][1]) - from).abs() < 1e-4);
        }
        assert!(half_ellipse(1.0, 1.0, 0.0, 200).is_empty());
    }
}
