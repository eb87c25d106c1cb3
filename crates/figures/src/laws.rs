//! Laws that every figure keeps, checked over flights, sizes and looks.

use scenario::report::{Columns, Report, Status};

use crate::geometry::{Rect, distance_to_segment};
use crate::metrics::text_box;
use crate::sample::{CROSSING, Cone, Crossing, MARS, Spiral, crossing, flight, without_flight};
use crate::{FigureOptions, LIGHT, NAMES, Panel, Point, Shape, ThemeName, layout};

/// Many turns to a steep orbit given by elements.
const STEEP: Crossing = Crossing {
    to: "the 0.48 au orbit",
    shape: (0.48, 0.2),
    angles_deg: [30.0, 20.0, 60.0],
    turns: 6.3,
    ahead_deg: 90.0,
    rows: 2400,
    ..CROSSING
};

fn flights() -> Vec<(&'static str, (Report, Columns))> {
    let long_name = "a given orbit with a name that is far too long for any picture, and <b>marked up</b>";
    vec![
        ("outward", flight(MARS)),
        ("inward", flight(Spiral { to: ("Venus", 0.72333566), ..MARS })),
        ("ninety turns", flight(Spiral { lightness: 0.001, rows: 3000, cone: Cone::Own, ..MARS })),
        ("far", flight(Spiral { to: ("Neptune", 30.0), lightness: 0.17, ..MARS })),
        (
            "edge of the range",
            flight(Spiral { from: ("given orbit", 40.0), to: ("given orbit", 0.2), ..MARS }),
        ),
        ("nearly the same", flight(Spiral { to: ("given orbit", 1.0001), ..MARS })),
        ("two samples", flight(Spiral { rows: 2, cone: Cone::Own, ..MARS })),
        ("long name", flight(Spiral { to: (long_name, 1.5), ..MARS })),
        ("none", without_flight(MARS, Status::NotConverged, &"a long story ".repeat(40))),
        ("impossible", without_flight(MARS, Status::Unreachable, "the deadline is before the departure.")),
        ("in space", crossing(CROSSING)),
        ("steep", crossing(STEEP)),
        ("backward", crossing(Crossing { shape: (3.0, 0.7), angles_deg: [115.0, 300.0, 80.0], ..STEEP })),
        ("same ends", without_flight(Spiral { to: ("Earth", 1.0), ..MARS }, Status::Converged, "")),
    ]
}

fn options(width: f64, height: f64) -> FigureOptions {
    FigureOptions { width, height, ..FigureOptions::default() }
}

fn points(shape: &Shape) -> Vec<Point> {
    match shape {
        Shape::Polyline { points, .. } | Shape::Polygon { points, .. } => points.clone(),
        Shape::Disc { centre, .. } | Shape::Ring { centre, .. } => vec![*centre],
        Shape::Text(text) => vec![text.at],
    }
}

#[test]
fn all_text_stays_inside_and_apart_and_every_coordinate_is_a_number() {
    for (flight_name, (report, columns)) in flights() {
        for (width, height) in
            [(330.0, 330.0), (360.0, 560.0), (760.0, 760.0), (1400.0, 500.0), (330.0, 900.0)]
        {
            let usual = options(width, height);
            let tilted = FigureOptions { tilt_deg: 65.0, turn_deg: 200.0, ..usual.clone() };
            for options in [
                FigureOptions {
                    zoom: 7.0,
                    pan_x_au: 0.8,
                    stale: true,
                    cursor_t_d: Some(40.0),
                    ..tilted.clone()
                },
                FigureOptions { tilt_deg: 90.0, turn_deg: 33.0, ..tilted.clone() },
                FigureOptions { cursor_t_d: Some(99.9), ..tilted },
                FigureOptions { zoom: 7.0, pan_x_au: 0.8, stale: true, ..usual.clone() },
                usual,
            ] {
                let zoom = options.zoom;
                for name in NAMES {
                    let figure = layout(name, &report, &columns, &options).unwrap();
                    let whole = Rect { left: 0.0, top: 0.0, width, height };
                    let mut texts: Vec<(Rect, &str)> = Vec::new();
                    for shape in &figure.shapes {
                        let finite = points(shape).iter().all(|p| p.x.is_finite() && p.y.is_finite());
                        assert!(finite, "{flight_name} {name} {width}: {shape:?}");
                        if let Shape::Text(text) = shape {
                            texts.push((text_box(text), &text.content));
                        }
                    }
                    for (i, (area, content)) in texts.iter().enumerate() {
                        assert!(
                            whole.holds(area),
                            "{flight_name} {name} {width}x{height}: {content:?} {area:?}"
                        );
                        for (other, second) in &texts[i + 1..] {
                            let inner = other.grown(-1.0);
                            assert!(
                                !area.overlaps(&inner),
                                "{flight_name} {name} {width}x{height} x{zoom}: {content:?} on {second:?}"
                            );
                        }
                    }
                }
            }
        }
    }
}

/// The picture's place for ecliptic coordinates, from the map that overlays use.
fn px(panel: &Panel, x_au: f64, y_au: f64) -> Point {
    Point::new(
        panel.left + panel.width * (x_au - panel.x_min) / (panel.x_max - panel.x_min),
        panel.top + panel.height * (panel.y_max - y_au) / (panel.y_max - panel.y_min),
    )
}

#[test]
fn circles_are_round_in_any_frame_and_lie_where_the_map_says() {
    let (report, columns) = flight(MARS);
    for (width, height) in [(330.0, 330.0), (900.0, 400.0), (400.0, 900.0)] {
        let figure = layout("orbit", &report, &columns, &options(width, height)).unwrap();
        let panel = &figure.map.panels[0];
        let sun = px(panel, 0.0, 0.0);
        let (east, north) = (px(panel, 1.0, 0.0).distance(sun), px(panel, 0.0, 1.0).distance(sun));
        assert!((east - north).abs() < 1e-9);
        let round = |radius_au: f64| {
            figure.shapes.iter().any(|shape| match shape {
                Shape::Polyline { points, stroke } if stroke.color == LIGHT.edge => {
                    points.len() > 20
                        && points.iter().all(|p| (p.distance(sun) - radius_au * east).abs() < 0.11)
                }
                _ => false,
            })
        };
        assert!(round(1.0) && round(1.52371034), "{width}x{height}");
    }
}

#[test]
fn the_drawn_way_passes_within_half_a_pixel_of_every_sample() {
    let (report, columns) = flight(Spiral { lightness: 0.004, rows: 5000, cone: Cone::Own, ..MARS });
    let figure = layout("orbit", &report, &columns, &options(760.0, 760.0)).unwrap();
    let panel = &figure.map.panels[0];
    let way = figure
        .shapes
        .iter()
        .filter_map(|shape| match shape {
            Shape::Polyline { points, stroke } if stroke.color == LIGHT.sail => Some(points),
            _ => None,
        })
        .max_by_key(|points| points.len())
        .unwrap();
    assert!(way.len() < columns.t_d.len(), "{} points drawn", way.len());
    for (&x, &y) in columns.x_au.iter().zip(&columns.y_au) {
        let sample = px(panel, x, y);
        let nearest = way
            .windows(2)
            .map(|pair| distance_to_segment(sample, pair[0], pair[1]))
            .fold(f64::INFINITY, f64::min);
        assert!(nearest < 0.5, "{nearest}");
    }
}

#[test]
fn the_highest_and_lowest_values_of_a_history_are_drawn() {
    let (report, mut columns) = flight(Spiral { rows: 9000, cone: Cone::Own, ..MARS });
    // One sample that stands out, as a fast swing between two pixels would.
    columns.cone_deg[4321] = -57.3;
    let figure = layout("histories", &report, &columns, &options(330.0, 560.0)).unwrap();
    let panel = &figure.map.panels[0];
    let wanted = panel.top + panel.height * (panel.y_max + 57.3) / (panel.y_max - panel.y_min);
    let lowest = figure
        .shapes
        .iter()
        .filter_map(|shape| match shape {
            Shape::Polyline { points, stroke } if stroke.color == LIGHT.sail => Some(points),
            _ => None,
        })
        .flatten()
        .filter(|p| p.y <= panel.top + panel.height)
        .map(|p| p.y)
        .fold(0.0, f64::max);
    assert!((lowest - wanted).abs() < 0.5, "{lowest} {wanted}");
}

#[test]
fn drawn_sails_push_forward_for_positive_cone_angles_and_backward_for_negative_ones() {
    for (cone_deg, forward) in [(35.0, true), (-35.0, false)] {
        let (report, mut columns) = flight(Spiral { cone: Cone::Own, ..MARS });
        columns.cone_deg.fill(cone_deg);
        let figure = layout("orbit", &report, &columns, &options(760.0, 760.0)).unwrap();
        let sun = px(&figure.map.panels[0], 0.0, 0.0);
        let normals: Vec<(Point, Point)> = figure
            .shapes
            .iter()
            .filter_map(|shape| match shape {
                Shape::Polyline { points, stroke }
                    if stroke.color == LIGHT.sail && stroke.width == 1.0 && points.len() == 2 =>
                {
                    Some((points[0], points[1]))
                }
                _ => None,
            })
            .collect();
        assert!(normals.len() > 5);
        for (root, tip) in normals {
            // y is up on the sky: counter-clockwise is forward.
            let radial = (root.x - sun.x, sun.y - root.y);
            let n = (tip.x - root.x, root.y - tip.y);
            let cross = radial.0 * n.1 - radial.1 * n.0;
            let dot = radial.0 * n.0 + radial.1 * n.1;
            assert!(dot > 0.0, "the normal stands on the side away from the Sun");
            assert_eq!(cross > 0.0, forward);
            // Attitudes between samples are interpolated, hence not to the last digit.
            assert!((cross.atan2(dot).to_degrees() - cone_deg).abs() < 0.5);
        }
    }
}

#[test]
fn panels_share_the_time_axis_and_lie_below_one_another() {
    let (report, columns) = flight(MARS);
    let options = FigureOptions { theme: ThemeName::Dark, ..options(760.0, 560.0) };
    let figure = layout("histories", &report, &columns, &options).unwrap();
    let names: Vec<&str> = figure.map.panels.iter().map(|panel| panel.column.as_str()).collect();
    assert_eq!(names, ["cone_deg", "distance_au", "speed_km_s", "turn_rate_deg_d"]);
    for pair in figure.map.panels.windows(2) {
        assert!(pair[0].top + pair[0].height < pair[1].top);
        assert_eq!(
            (pair[0].left, pair[0].width, pair[0].x_max),
            (pair[1].left, pair[1].width, pair[1].x_max)
        );
    }
}

#[test]
fn without_a_flight_the_orbits_and_a_sentence_remain() {
    let (report, columns) = without_flight(MARS, Status::NotConverged, "the budget is spent.");
    let figure = layout("orbit", &report, &columns, &options(760.0, 760.0)).unwrap();
    let said = |wanted: &str| {
        figure.shapes.iter().any(|s| matches!(s, Shape::Text(text) if text.content.contains(wanted)))
    };
    assert!(said("Not converged: the budget is spent.") && said("512 d") && said("Mars\u{2019}s orbit"));
    let sail = |shape: &Shape| matches!(shape, Shape::Polyline { stroke, .. } if stroke.color == LIGHT.sail);
    assert!(!figure.shapes.iter().any(sail));
}

fn said(shapes: &[Shape]) -> Vec<&str> {
    shapes
        .iter()
        .filter_map(|shape| match shape {
            Shape::Text(text) => Some(text.content.as_str()),
            _ => None,
        })
        .collect()
}

#[test]
fn the_map_projects_every_sample_onto_the_drawn_way_at_any_tilt() {
    let (report, columns) = crossing(STEEP);
    for (tilt_deg, turn_deg) in [(0.0, 0.0), (37.0, 0.0), (90.0, 110.0)] {
        let options = FigureOptions { tilt_deg, turn_deg, ..options(760.0, 700.0) };
        let figure = layout("orbit", &report, &columns, &options).unwrap();
        let panel = &figure.map.panels[0];
        let (m, x, y) = (panel.project.unwrap(), panel.center_x.unwrap(), panel.center_y.unwrap());
        let ways: Vec<&Vec<Point>> = figure
            .shapes
            .iter()
            .filter_map(|shape| match shape {
                // Normals, plates, ticks and bars have their own widths.
                Shape::Polyline { points, stroke }
                    if stroke.color == LIGHT.sail && ![1.0, 1.2, 1.5, 3.0].contains(&stroke.width) =>
                {
                    Some(points)
                }
                _ => None,
            })
            .collect();
        for row in (0..columns.t_d.len()).step_by(7) {
            let p = [columns.x_au[row], columns.y_au[row], columns.z_au[row]];
            let at = Point::new(
                x + m[0] * p[0] + m[1] * p[1] + m[2] * p[2],
                y + m[3] * p[0] + m[4] * p[1] + m[5] * p[2],
            );
            let nearest = ways
                .iter()
                .flat_map(|points| points.windows(2))
                .map(|pair| distance_to_segment(at, pair[0], pair[1]))
                .fold(f64::INFINITY, f64::min);
            // The line is thinned by a fifth of a pixel at most and bends less than a tenth between its points.
            assert!(nearest < 0.5, "{tilt_deg} {turn_deg} row {row}: {nearest}");
        }
        // Untilted the edges of the panel say the same.
        if tilt_deg == 0.0 {
            assert!(px(panel, 0.3, -0.2).distance(Point::new(x + m[0] * 0.3, y - m[4] * 0.2)) < 1e-9);
        }
    }
}

#[test]
fn tilting_keeps_the_scale_and_shows_heights_by_lines_that_stand_upright() {
    let (report, columns) = crossing(STEEP);
    let drawn = |tilt_deg| {
        let options = FigureOptions { tilt_deg, ..options(760.0, 760.0) };
        layout("orbit", &report, &columns, &options).unwrap()
    };
    let upright = |figure: &crate::Figure| {
        let thin = |stroke: &crate::Stroke| stroke.color == LIGHT.edge && stroke.width == 0.8;
        figure
            .shapes
            .iter()
            .filter(|shape| match shape {
                Shape::Polyline { points, stroke } => {
                    thin(stroke) && points.len() == 2 && (points[0].x - points[1].x).abs() < 1e-9
                }
                _ => false,
            })
            .count()
    };
    assert_eq!(upright(&drawn(0.0)), 0);
    assert!(upright(&drawn(50.0)) > 4);
    let scale = |figure: &crate::Figure| figure.map.panels[0].project.unwrap()[0];
    assert_eq!(scale(&drawn(0.0)), scale(&drawn(50.0)));
    assert!(said(&drawn(50.0).shapes).contains(&"50° from ecliptic north"));
    assert!(said(&drawn(0.0).shapes).iter().any(|text| text.ends_with("au north")));
}

#[test]
fn a_rendezvous_names_the_meeting_and_an_orbit_match_the_body_left_aside() {
    let at = |flown| {
        let (report, columns) = crossing(flown);
        let figure = layout("orbit", &report, &columns, &options(760.0, 760.0)).unwrap();
        said(&figure.shapes).into_iter().map(str::to_owned).collect::<Vec<String>>()
    };
    let met = at(CROSSING);
    for wanted in ["meets Mars, 2032-09-20", "departure, 2031-05-17", "Mars at departure", "Earth at arrival"]
    {
        assert!(met.iter().any(|text| text == wanted), "{wanted}: {met:?}");
    }
    assert!(!met.iter().any(|text| text.contains("Hohmann") || text == "Mars at arrival"), "{met:?}");
    let apart = at(Crossing { ahead_deg: 50.0, ..CROSSING });
    assert!(apart.iter().any(|text| text == "Mars at arrival"), "{apart:?}");
    assert!(apart.iter().any(|text| text == "arrival, 2032-09-20"), "{apart:?}");
    let undated = at(Crossing { dates: None, ..CROSSING });
    assert!(!undated.iter().any(|text| text.contains(" at ")), "{undated:?}");
}

#[test]
fn the_cursor_moves_the_bodies_and_nothing_else() {
    let (report, columns) = crossing(CROSSING);
    let drawn = |cursor_t_d| {
        let options = FigureOptions { cursor_t_d, tilt_deg: 40.0, ..options(760.0, 760.0) };
        layout("orbit", &report, &columns, &options).unwrap().shapes
    };
    let (without, with) = (drawn(None), drawn(Some(250.0)));
    assert!(without.iter().all(|shape| with.contains(shape)));
    let discs = |shapes: &[Shape]| {
        shapes
            .iter()
            .filter(|shape| matches!(shape, Shape::Disc { color, .. } if *color == LIGHT.muted))
            .count()
    };
    assert_eq!(discs(&with) - discs(&without), 2);
}

#[test]
fn the_clock_angle_leaves_at_one_edge_and_goes_on_at_the_other() {
    let (report, columns) = crossing(CROSSING);
    let figure = layout("histories", &report, &columns, &options(760.0, 700.0)).unwrap();
    let panel = figure.map.panels.iter().find(|panel| panel.column == "clock_deg").unwrap();
    assert_eq!((panel.y_min, panel.y_max), (-180.0, 180.0));
    let (top, bottom) = (panel.top, panel.top + panel.height);
    let curves: Vec<&Vec<Point>> = figure
        .shapes
        .iter()
        .filter_map(|shape| match shape {
            Shape::Polyline { points, stroke } if stroke.color == LIGHT.sail && stroke.dash.is_none() => {
                Some(points)
            }
            _ => None,
        })
        .filter(|points| points.iter().all(|p| (top - 1.0..=bottom + 1.0).contains(&p.y)))
        .collect();
    // Twice the angle passes half a turn, and once it jumps.
    assert_eq!(curves.len(), 4);
    let near = |y: f64, edge: f64| (y - edge).abs() < 0.5;
    assert!(near(curves[0][curves[0].len() - 1].y, top) && near(curves[1][0].y, bottom));
    for curve in curves {
        assert!(curve.windows(2).all(|pair| (pair[1].y - pair[0].y).abs() < panel.height / 4.0));
    }
}

#[test]
fn dated_histories_carry_dates_beside_days_and_undated_ones_do_not() {
    let texts = |dates| {
        let (report, columns) = crossing(Crossing { dates, ..CROSSING });
        let figure = layout("histories", &report, &columns, &options(760.0, 700.0)).unwrap();
        said(&figure.shapes).into_iter().map(str::to_owned).collect::<Vec<String>>()
    };
    let dated = texts(CROSSING.dates);
    let months: Vec<&String> =
        dated.iter().filter(|text| text.len() == 7 && text.starts_with("203")).collect();
    assert!((2..=7).contains(&months.len()), "{dated:?}");
    assert!(dated.iter().any(|text| text.starts_with("Time since departure on 2031-05-17 (d)")), "{dated:?}");
    assert!(texts(None).iter().any(|text| text == "Time since departure (d)"));
}
