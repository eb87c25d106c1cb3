//! The sail's way through the picture: a smooth line through the samples, with the sail's normal along it.

use scenario::report::{Columns, Report};

use crate::shapes::Point;
use crate::view::View;

/// 1 km/s in au/d: seconds per day over kilometres per au (IAU 2012 Resolution B2).
const AU_D_PER_KM_S: f64 = 86_400.0 / 149_597_870.7;

/// Most points that a track is refined to.
const MOST_POINTS: usize = 60_000;

/// One place on the sail's way.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Place {
    /// Time since departure, d.
    pub(crate) t_d: f64,
    /// Where it is, ecliptic axes, au.
    pub(crate) position_au: [f64; 3],
    /// Where it is drawn.
    pub(crate) at: Point,
    /// Length of the drawn line up to here, CSS pixels.
    pub(crate) arc_px: f64,
    /// How the sail points; `None` where that is unknown.
    pub(crate) attitude: Option<Attitude>,
}

/// The sail's unit normal on the side away from the Sun, in two sets of axes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Attitude {
    /// To the right, up and towards the reader in the picture; ecliptic axes before there is a picture.
    pub(crate) normal: [f64; 3],
    /// Away from the Sun, along the motion, along the orbit normal.
    pub(crate) in_orbit: [f64; 3],
}

impl Attitude {
    fn between(from: Option<Attitude>, to: Option<Attitude>, s: f64) -> Option<Attitude> {
        let (from, to) = (from?, to?);
        let mix = |a: [f64; 3], b: [f64; 3]| unit(std::array::from_fn(|i| a[i] + s * (b[i] - a[i])));
        Some(Attitude { normal: mix(from.normal, to.normal)?, in_orbit: mix(from.in_orbit, to.in_orbit)? })
    }
}

/// The attitude at one sample, its normal in ecliptic axes.
///
/// `cone_deg` turns the outward radial direction towards the direction of motion: positive pushes forward. Where it
/// is positive, `clock_deg` turns it about the Sun line, from the direction of motion towards the orbit normal.
/// Flights without an orbit normal (no velocity) move counter-clockwise.
pub(crate) fn attitude(columns: &Columns, row: usize) -> Option<Attitude> {
    let value = |column: &Vec<f64>| column.get(row).copied().unwrap_or(f64::NAN);
    let cone = value(&columns.cone_deg).to_radians();
    let clock = value(&columns.clock_deg).to_radians();
    let radial = unit(position(columns, row))?;
    let pole = unit(cross(radial, velocity(columns, row))).unwrap_or([0.0, 0.0, 1.0]);
    let along = unit(cross(pole, radial))?;
    if !cone.is_finite() {
        return None;
    }
    let (sin_clock, cos_clock) = if cone >= 0.0 && clock.is_finite() { clock.sin_cos() } else { (0.0, 1.0) };
    let (sin, cos) = cone.sin_cos();
    let in_orbit = [cos, sin * cos_clock, sin * sin_clock];
    let normal =
        std::array::from_fn(|i| in_orbit[0] * radial[i] + in_orbit[1] * along[i] + in_orbit[2] * pole[i]);
    Some(Attitude { normal, in_orbit })
}

/// Whether the flight is one in space: it leaves the ecliptic, an end is no circle in it, or it has a date.
pub(crate) fn is_spatial(report: &Report, columns: &Columns) -> bool {
    let ends = [&report.ends.from, &report.ends.to];
    report.flight.depart.is_some()
        || ends.iter().any(|end| end.eccentricity != 0.0 || end.inclination_deg != 0.0)
        || columns.z_au.iter().any(|z| z.abs() > 1e-12)
}

/// Position at a sample, au. Flights without heights are flown in the ecliptic.
pub(crate) fn position(columns: &Columns, row: usize) -> [f64; 3] {
    [columns.x_au[row], columns.y_au[row], columns.z_au.get(row).copied().unwrap_or(0.0)]
}

/// Velocity at a sample, km/s; NaN where there is none.
fn velocity(columns: &Columns, row: usize) -> [f64; 3] {
    let value = |column: &[f64], missing| column.get(row).copied().unwrap_or(missing);
    [value(&columns.vx_km_s, f64::NAN), value(&columns.vy_km_s, f64::NAN), value(&columns.vz_km_s, 0.0)]
}

/// Distance from the Sun at every sample, au.
pub(crate) fn distances(columns: &Columns) -> impl Iterator<Item = f64> + '_ {
    (0..columns.t_d.len()).map(|row| {
        let [x, y, z] = position(columns, row);
        x.hypot(y).hypot(z)
    })
}

/// The whole way in a view. Between samples the line follows the cubic through both positions and velocities, in
/// pieces short enough to look smooth at this scale; where samples share a time (a jump of attitude) both stay.
pub(crate) fn track(columns: &Columns, view: &View) -> Vec<Place> {
    let near = view.frame.grown(view.frame.width.max(view.frame.height));
    let mut places: Vec<Place> = Vec::with_capacity(columns.t_d.len());
    let mut arc_px = 0.0;
    let mut push = |places: &mut Vec<Place>, t_d: f64, position_au: [f64; 3], attitude: Option<Attitude>| {
        let at = view.px(position_au);
        arc_px += places.last().map_or(0.0, |last: &Place| last.at.distance(at));
        let attitude = attitude.map(|a| Attitude { normal: view.seen(a.normal), ..a });
        places.push(Place { t_d, position_au, at, arc_px, attitude });
    };
    let finite = |position: [f64; 3]| position.iter().all(|x| x.is_finite());
    for row in 0..columns.t_d.len() {
        let here = position(columns, row);
        if !finite(here) {
            continue;
        }
        let attitude_here = attitude(columns, row);
        if row > 0 && finite(position(columns, row - 1)) {
            let before = position(columns, row - 1);
            let span_d = columns.t_d[row] - columns.t_d[row - 1];
            let seen = near.contains(view.px(before)) || near.contains(view.px(here));
            let chord: [f64; 3] = std::array::from_fn(|i| here[i] - before[i]);
            let chord_px = norm(chord) * view.px_per_au;
            let pieces = if seen && span_d > 0.0 { pieces(columns, row, chord_px) } else { 1 };
            let pieces = pieces.min(1 + MOST_POINTS.saturating_sub(places.len()));
            let attitude_before = attitude(columns, row - 1);
            for k in 1..pieces {
                let s = k as f64 / pieces as f64;
                let turned = Attitude::between(attitude_before, attitude_here, s);
                push(
                    &mut places,
                    columns.t_d[row - 1] + s * span_d,
                    hermite(columns, row, span_d, s),
                    turned,
                );
            }
        }
        push(&mut places, columns.t_d[row], here, attitude_here);
    }
    places
}

/// Pieces for the step that ends at `row`, so that each bends by less than a tenth of a pixel from any side: a chord
/// of length c that turns by q has the sagitta c q / 8, and n pieces make that n^2 times smaller.
fn pieces(columns: &Columns, row: usize, chord_px: f64) -> usize {
    let (before, after) = (velocity(columns, row - 1), velocity(columns, row));
    let turn = angle(before, after);
    if turn.is_finite() { ((chord_px * turn / 0.8).sqrt().ceil() as usize).clamp(1, 64) } else { 1 }
}

/// Position at the share `s` of the step that ends at `row`, au: cubic Hermite interpolation.
fn hermite(columns: &Columns, row: usize, span_d: f64, s: f64) -> [f64; 3] {
    let (s2, s3) = (s * s, s * s * s);
    let (h00, h10) = (2.0 * s3 - 3.0 * s2 + 1.0, s3 - 2.0 * s2 + s);
    let (h01, h11) = (3.0 * s2 - 2.0 * s3, s3 - s2);
    let scale = span_d * AU_D_PER_KM_S;
    let (x0, x1) = (position(columns, row - 1), position(columns, row));
    let (v0, v1) = (velocity(columns, row - 1), velocity(columns, row));
    std::array::from_fn(|i| h00 * x0[i] + h01 * x1[i] + scale * (h10 * v0[i] + h11 * v1[i]))
}

/// The place at a time, linear between neighbours. `None` outside the flight.
pub(crate) fn at_time(places: &[Place], t_d: f64) -> Option<Place> {
    let after = places.partition_point(|place| place.t_d < t_d);
    between(places, after, |place| place.t_d, t_d)
}

/// The place at a length along the drawn line, linear between neighbours.
pub(crate) fn at_arc(places: &[Place], arc_px: f64) -> Option<Place> {
    let after = places.partition_point(|place| place.arc_px < arc_px);
    between(places, after, |place| place.arc_px, arc_px)
}

fn between(places: &[Place], after: usize, key: impl Fn(&Place) -> f64, wanted: f64) -> Option<Place> {
    let b = places.get(after)?;
    if after == 0 {
        return (key(b) == wanted).then_some(*b);
    }
    let a = &places[after - 1];
    let width = key(b) - key(a);
    let s = if width > 0.0 { (wanted - key(a)) / width } else { 1.0 };
    let mix = |p: f64, q: f64| p + s * (q - p);
    Some(Place {
        t_d: mix(a.t_d, b.t_d),
        position_au: std::array::from_fn(|i| mix(a.position_au[i], b.position_au[i])),
        at: Point::new(mix(a.at.x, b.at.x), mix(a.at.y, b.at.y)),
        arc_px: mix(a.arc_px, b.arc_px),
        attitude: Attitude::between(a.attitude, b.attitude, s),
    })
}

/// Unit direction of motion on the picture at a length along the line.
pub(crate) fn heading(places: &[Place], arc_px: f64) -> Option<Point> {
    let total = places.last()?.arc_px;
    let (a, b) = (at_arc(places, (arc_px - 1.5).max(0.0))?, at_arc(places, (arc_px + 1.5).min(total))?);
    let length = a.at.distance(b.at);
    (length > 1e-9).then(|| Point::new((b.at.x - a.at.x) / length, (b.at.y - a.at.y) / length))
}

fn cross(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
}

/// Angle between two vectors, rad, exact for small ones too.
pub(crate) fn angle(a: [f64; 3], b: [f64; 3]) -> f64 {
    norm(cross(a, b)).atan2(a[0] * b[0] + a[1] * b[1] + a[2] * b[2])
}

fn norm(a: [f64; 3]) -> f64 {
    a.iter().map(|x| x * x).sum::<f64>().sqrt()
}

fn unit(a: [f64; 3]) -> Option<[f64; 3]> {
    let length = norm(a);
    (length.is_finite() && length > 0.0).then(|| a.map(|x| x / length))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::view::Aspect;

    fn one_sample(cone_deg: f64, clock_deg: f64, z_au: f64) -> Columns {
        Columns {
            t_d: vec![0.0],
            x_au: vec![0.0],
            y_au: vec![1.0],
            z_au: vec![z_au],
            // Counter-clockwise at +y is towards -x.
            vx_km_s: vec![-29.8],
            vy_km_s: vec![0.0],
            vz_km_s: vec![0.0],
            cone_deg: vec![cone_deg],
            clock_deg: vec![clock_deg],
            ..Columns::default()
        }
    }

    #[test]
    fn a_positive_cone_angle_turns_the_normal_forward() {
        let n = attitude(&one_sample(30.0, f64::NAN, 0.0), 0).unwrap().normal;
        assert!((n[0] + 0.5).abs() < 1e-12 && (n[1] - 0.75_f64.sqrt()).abs() < 1e-12, "{n:?}");
    }

    #[test]
    fn a_negative_cone_angle_turns_it_backward_whatever_the_clock_says() {
        for clock in [f64::NAN, 180.0] {
            let n = attitude(&one_sample(-30.0, clock, 0.0), 0).unwrap().normal;
            assert!((n[0] - 0.5).abs() < 1e-12, "{n:?}");
        }
    }

    #[test]
    fn a_clock_angle_of_a_right_angle_lifts_the_normal_out_of_the_orbit() {
        let n = attitude(&one_sample(40.0, 90.0, 0.0), 0).unwrap().normal;
        assert!((n[2] - 40.0_f64.to_radians().sin()).abs() < 1e-12 && n[0].abs() < 1e-12, "{n:?}");
    }

    #[test]
    fn a_positive_cone_angle_at_clock_180_turns_the_normal_backward() {
        let n = attitude(&one_sample(30.0, 180.0, 0.0), 0).unwrap();
        assert!((n.normal[0] - 0.5).abs() < 1e-12, "{n:?}");
        assert!((n.in_orbit[1] + 0.5).abs() < 1e-12, "{n:?}");
    }

    #[test]
    fn the_line_between_coarse_samples_of_a_circle_stays_on_the_circle() {
        // Circular speed at 1 au from the Sun's gravitational parameter 1.32712440018e11 km^3/s^2.
        let speed = (1.327_124_400_18e11_f64 / 149_597_870.7).sqrt();
        let period_d = std::f64::consts::TAU / (speed * AU_D_PER_KM_S);
        let mut columns = Columns::default();
        for k in 0..=24 {
            let (sin, cos) = (std::f64::consts::TAU * f64::from(k) / 24.0).sin_cos();
            columns.t_d.push(period_d * f64::from(k) / 24.0);
            columns.x_au.push(cos);
            columns.y_au.push(sin);
            columns.z_au.push(0.0);
            columns.vx_km_s.push(-speed * sin);
            columns.vy_km_s.push(speed * cos);
            columns.vz_km_s.push(0.0);
            columns.cone_deg.push(0.0);
            columns.clock_deg.push(f64::NAN);
        }
        let frame = crate::geometry::Rect { left: 0.0, top: 0.0, width: 1000.0, height: 1000.0 };
        let corners = [[-1.0, -1.0, 0.0], [1.0, 1.0, 0.0]];
        let fitted = View::fitting(&corners, Aspect::default(), frame, 0.0);
        let view = View { px_per_au: 480.0, ..fitted };
        let places = track(&columns, &view);
        let sun = frame.centre();
        // Cubic Hermite error is (step angle)^4 / 384 of the radius: 1.2e-5, far below the tenth of a pixel allowed.
        let worst = places
            .windows(2)
            .map(|p| Point::new((p[0].at.x + p[1].at.x) / 2.0, (p[0].at.y + p[1].at.y) / 2.0))
            .map(|middle| (middle.distance(sun) - 480.0).abs())
            .fold(0.0, f64::max);
        assert!(worst < 0.12, "{worst}");
    }
}
