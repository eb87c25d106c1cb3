//! Heliocentric ellipses seen from ecliptic north: whole orbits and the half-ellipse of an impulsive transfer.

use std::f64::consts::{PI, TAU};

use scenario::report::End;

/// Most corners of one drawn ellipse.
const MOST_CORNERS: usize = 4096;

/// Corners that keep a circle of this radius (CSS pixels) within a tenth of a pixel of the true curve over a full
/// turn: the sagitta of one chord is R (2 pi / n)^2 / 8.
pub(crate) fn corners(radius_px: f64) -> usize {
    ((PI * (5.0 * radius_px.abs()).sqrt()).ceil() as usize).clamp(48, MOST_CORNERS)
}

/// The orbit projected on the ecliptic, au, `count` segments from perihelion round in the direction of motion;
/// the last point is the first. Rotations by argument of perihelion, inclination and node (3-1-3).
pub(crate) fn orbit(end: &End, count: usize) -> Vec<[f64; 2]> {
    let (a, e) = (end.semi_major_axis_au, end.eccentricity);
    let b = a * (1.0 - e * e).max(0.0).sqrt();
    let (sin_peri, cos_peri) = end.arg_peri_deg.to_radians().sin_cos();
    let (sin_node, cos_node) = end.node_deg.to_radians().sin_cos();
    let cos_i = end.inclination_deg.to_radians().cos();
    (0..=count)
        .map(|k| {
            let (sin, cos) = (TAU * k as f64 / count as f64).sin_cos();
            let (p, q) = (a * (cos - e), b * sin);
            let (u, v) = (cos_peri * p - sin_peri * q, sin_peri * p + cos_peri * q);
            [cos_node * u - sin_node * cos_i * v, sin_node * u + cos_node * cos_i * v]
        })
        .collect()
}

/// The half-ellipse tangent to circles of radii `from_au` and `to_au`, au, counter-clockwise from the ecliptic
/// longitude `start_rad`; empty when the radii are equal.
pub(crate) fn half_ellipse(from_au: f64, to_au: f64, start_rad: f64, count: usize) -> Vec<[f64; 2]> {
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
            [r * cos, r * sin]
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
