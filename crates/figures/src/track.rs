//! The sail's way through the picture: a smooth line through the samples, with the sail's normal along it.

use scenario::report::Columns;

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
    /// Where it is drawn.
    pub(crate) at: Point,
    /// Length of the drawn line up to here, CSS pixels.
    pub(crate) arc_px: f64,
    /// Unit normal of the sail on the side away from the Sun, ecliptic axes; `None` where the attitude is unknown.
    pub(crate) normal: Option<[f64; 3]>,
}

/// Unit normal in ecliptic axes at one sample.
///
/// `cone_deg` turns the outward radial direction towards the direction of motion: positive pushes forward. Where
/// the flight is spatial the cone angle is positive and `clock_deg` turns it about the Sun line, from the direction
/// of motion towards the orbit normal. Flights without an orbit normal (no velocity) move counter-clockwise.
pub(crate) fn normal(columns: &Columns, row: usize, spatial: bool) -> Option<[f64; 3]> {
    let value = |column: &Vec<f64>| column.get(row).copied().unwrap_or(f64::NAN);
    let cone = value(&columns.cone_deg).to_radians();
    let r = [value(&columns.x_au), value(&columns.y_au), value(&columns.z_au)];
    let v = [value(&columns.vx_km_s), value(&columns.vy_km_s), value(&columns.vz_km_s)];
    let radial = unit(r)?;
    let pole = if spatial { unit(cross(r, v)).unwrap_or([0.0, 0.0, 1.0]) } else { [0.0, 0.0, 1.0] };
    let along = unit(cross(pole, radial))?;
    let clock = value(&columns.clock_deg).to_radians();
    let (sin_clock, cos_clock) =
        if spatial && cone >= 0.0 && clock.is_finite() { clock.sin_cos() } else { (0.0, 1.0) };
    if !cone.is_finite() {
        return None;
    }
    let (sin, cos) = cone.sin_cos();
    Some(std::array::from_fn(|i| cos * radial[i] + sin * (cos_clock * along[i] + sin_clock * pole[i])))
}

/// Whether the flight leaves the ecliptic plane anywhere.
pub(crate) fn is_spatial(columns: &Columns) -> bool {
    columns.z_au.iter().any(|z| z.abs() > 1e-12)
}

/// The whole way in a view. Between samples the line follows the cubic through both positions and velocities, in
/// pieces short enough to look smooth at this scale; where samples share a time (a jump of attitude) both stay.
pub(crate) fn track(columns: &Columns, view: &View) -> Vec<Place> {
    let spatial = is_spatial(columns);
    let near = view.frame.grown(view.frame.width.max(view.frame.height));
    let mut places: Vec<Place> = Vec::with_capacity(columns.t_d.len());
    let mut arc_px = 0.0;
    let mut push = |places: &mut Vec<Place>, t_d: f64, at: Point, normal: Option<[f64; 3]>| {
        arc_px += places.last().map_or(0.0, |last: &Place| last.at.distance(at));
        places.push(Place { t_d, at, arc_px, normal });
    };
    let position = |row: usize| [columns.x_au[row], columns.y_au[row]];
    for row in 0..columns.t_d.len() {
        let here = position(row);
        if !(here[0].is_finite() && here[1].is_finite()) {
            continue;
        }
        let normal_here = normal(columns, row, spatial);
        if row > 0 && position(row - 1).iter().all(|x| x.is_finite()) {
            let span_d = columns.t_d[row] - columns.t_d[row - 1];
            let (a, b) = (view.px(position(row - 1)), view.px(here));
            let seen = near.contains(a) || near.contains(b);
            let pieces = if seen && span_d > 0.0 { pieces(columns, row, a.distance(b)) } else { 1 };
            let pieces = pieces.min(1 + MOST_POINTS.saturating_sub(places.len()));
            let normal_before = normal(columns, row - 1, spatial);
            for k in 1..pieces {
                let s = k as f64 / pieces as f64;
                let between = hermite(columns, row, span_d, s);
                let turned = match (normal_before, normal_here) {
                    (Some(n0), Some(n1)) => unit(std::array::from_fn(|i| n0[i] + s * (n1[i] - n0[i]))),
                    _ => None,
                };
                push(&mut places, columns.t_d[row - 1] + s * span_d, view.px(between), turned);
            }
        }
        push(&mut places, columns.t_d[row], view.px(here), normal_here);
    }
    places
}

/// Pieces for the step that ends at `row`, so that each bends by less than a tenth of a pixel: a chord of length c
/// that turns by q has the sagitta c q / 8, and n pieces make that n^2 times smaller.
fn pieces(columns: &Columns, row: usize, chord_px: f64) -> usize {
    let direction = |row: usize| {
        let (vx, vy) = (columns.vx_km_s.get(row)?, columns.vy_km_s.get(row)?);
        (vx.is_finite() && vy.is_finite()).then(|| vy.atan2(*vx))
    };
    let (Some(before), Some(after)) = (direction(row - 1), direction(row)) else { return 1 };
    let mut turn = (after - before).abs();
    if turn > std::f64::consts::PI {
        turn = std::f64::consts::TAU - turn;
    }
    ((chord_px * turn / 0.8).sqrt().ceil() as usize).clamp(1, 64)
}

/// Position at the share `s` of the step that ends at `row`, au: cubic Hermite interpolation.
fn hermite(columns: &Columns, row: usize, span_d: f64, s: f64) -> [f64; 2] {
    let (s2, s3) = (s * s, s * s * s);
    let (h00, h10) = (2.0 * s3 - 3.0 * s2 + 1.0, s3 - 2.0 * s2 + s);
    let (h01, h11) = (3.0 * s2 - 2.0 * s3, s3 - s2);
    let scale = span_d * AU_D_PER_KM_S;
    let axis =
        |x: &[f64], v: &[f64]| h00 * x[row - 1] + h01 * x[row] + scale * (h10 * v[row - 1] + h11 * v[row]);
    [axis(&columns.x_au, &columns.vx_km_s), axis(&columns.y_au, &columns.vy_km_s)]
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
    let normal = match (a.normal, b.normal) {
        (Some(n), Some(m)) => unit(std::array::from_fn(|i| mix(n[i], m[i]))),
        _ => None,
    };
    Some(Place {
        t_d: mix(a.t_d, b.t_d),
        at: Point::new(mix(a.at.x, b.at.x), mix(a.at.y, b.at.y)),
        arc_px: mix(a.arc_px, b.arc_px),
        normal,
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

fn unit(a: [f64; 3]) -> Option<[f64; 3]> {
    let length = a.iter().map(|x| x * x).sum::<f64>().sqrt();
    (length.is_finite() && length > 0.0).then(|| a.map(|x| x / length))
}

#[cfg(test)]
mod tests {
    use super::*;

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
        let n = normal(&one_sample(30.0, f64::NAN, 0.0), 0, false).unwrap();
        assert!((n[0] + 0.5).abs() < 1e-12 && (n[1] - 0.75_f64.sqrt()).abs() < 1e-12, "{n:?}");
    }

    #[test]
    fn a_negative_cone_angle_turns_it_backward_whatever_the_clock_says() {
        for clock in [f64::NAN, 180.0] {
            let n = normal(&one_sample(-30.0, clock, 0.0), 0, false).unwrap();
            assert!((n[0] - 0.5).abs() < 1e-12, "{n:?}");
        }
    }

    #[test]
    fn a_clock_angle_of_a_right_angle_lifts_the_normal_out_of_the_orbit() {
        let n = normal(&one_sample(40.0, 90.0, 0.0), 0, true).unwrap();
        assert!((n[2] - 40.0_f64.to_radians().sin()).abs() < 1e-12 && n[0].abs() < 1e-12, "{n:?}");
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
        let view = View { frame, px_per_au: 480.0, centre_au: [0.0, 0.0] };
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
