//! Laws that the pictures of studies keep, over sizes, looks and studies that have not come far.

use scenario::report::Status;
use scenario::study::{Axis, AxisValue, Kind, LawMark, Pick, StudyReport, StudyRow};

use crate::geometry::Rect;
use crate::metrics::text_box;
use crate::{Figure, FigureOptions, LIGHT, Point, Shape, study};

/// Dates ten days apart from 2031-01-01 on: January and February have 59 days.
const DATES: [&str; 6] = ["2031-01-01", "2031-01-11", "2031-01-21", "2031-01-31", "2031-02-10", "2031-02-20"];
const SAILS: [f64; 3] = [0.5, 1.0, 2.0];

/// Invented flight times: a valley over the dates, shorter for more acceleration.
fn time_d(date: usize, ac_mm_s2: f64) -> f64 {
    300.0 / ac_mm_s2.sqrt() + 4.0 * (date as f64 - 2.6).powi(2)
}

fn row(date: usize, ac_mm_s2: f64) -> StudyRow {
    StudyRow {
        depart: DATES[date].to_owned(),
        ac_mm_s2,
        area_m2: None,
        status: Status::Converged,
        time_d: Some(time_d(date, ac_mm_s2)),
        arrive: Some("2031-12-01T00:00:00".to_owned()),
        revolutions: Some(0.8),
        branches: 2,
        law: LawMark::Kept,
        link: "v=1".to_owned(),
    }
}

fn axis(field: &str, values: Vec<AxisValue>) -> Axis {
    Axis {
        field: field.to_owned(),
        label: "Characteristic acceleration".into(),
        unit: "mm/s²".into(),
        values,
    }
}

fn report(name: &str, sails: &[f64]) -> StudyReport {
    let dates = axis("depart", DATES.map(|date| AxisValue::Text(date.to_owned())).to_vec());
    let map =
        (sails.len() > 1).then(|| axis("ac_mm_s2", sails.iter().copied().map(AxisValue::Number).collect()));
    let pick = |&ac_mm_s2: &f64| Pick {
        kind: Kind::Shortest,
        depart: DATES[3].to_owned(),
        ac_mm_s2,
        time_d: Some(time_d(3, ac_mm_s2)),
        arrive: None,
        at_edge: false,
        leave_by: DATES[4].to_owned(),
        slips: Vec::new(),
        link: "v=1".to_owned(),
    };
    StudyReport {
        study: name.to_owned(),
        link: "v=1".to_owned(),
        program: scenario::run::program(),
        axes: std::iter::once(dates).chain(map).collect(),
        rows: sails.iter().flat_map(|&ac| (0..DATES.len()).map(move |date| row(date, ac))).collect(),
        best: sails.iter().map(pick).collect(),
        notes: Vec::new(),
    }
}

fn studies() -> Vec<(&'static str, StudyReport)> {
    let dates = || report("dates", &[1.0]);
    let map = || report("map", &SAILS);
    let with = |mut study: StudyReport, change: &dyn Fn(&mut StudyReport)| {
        change(&mut study);
        study
    };
    vec![
        ("dates", dates()),
        ("map", map()),
        ("dates, begun", with(dates(), &|study| study.rows.truncate(1))),
        ("dates, nothing yet", with(dates(), &|study| (study.rows, study.best) = (Vec::new(), Vec::new()))),
        ("map, nothing yet", with(map(), &|study| (study.rows, study.best) = (Vec::new(), Vec::new()))),
        ("dates, a gap", with(dates(), &|study| drop(study.rows.remove(2)))),
        ("dates, lost and broken", with(dates(), &|study| spoil(study))),
        ("map, lost and broken", with(map(), &|study| spoil(study))),
    ]
}

fn spoil(study: &mut StudyReport) {
    (study.rows[1].time_d, study.rows[1].arrive) = (None, None);
    study.rows[4].law = LawMark::Broken;
}

fn drawn(study_report: &StudyReport, width: f64, height: f64) -> Figure {
    study(study_report, &FigureOptions { width, height, ..FigureOptions::default() }).expect("drawn")
}

fn points(shape: &Shape) -> Vec<Point> {
    match shape {
        Shape::Polyline { points, .. } | Shape::Polygon { points, .. } => points.clone(),
        Shape::Disc { centre, .. } | Shape::Ring { centre, .. } => vec![*centre],
        Shape::Text(text) => vec![text.at],
    }
}

#[test]
fn texts_stay_inside_and_apart_and_every_coordinate_is_a_number() {
    for (name, report) in studies() {
        for (width, height) in [(330.0, 400.0), (700.0, 460.0), (1400.0, 520.0)] {
            let figure = drawn(&report, width, height);
            let whole = Rect { left: 0.0, top: 0.0, width, height };
            let mut texts: Vec<(String, Rect)> = Vec::new();
            for shape in &figure.shapes {
                assert!(points(shape).iter().all(|p| p.x.is_finite() && p.y.is_finite()), "{name}");
                let Shape::Text(text) = shape else { continue };
                let area = text_box(text);
                assert!(whole.holds(&area), "{name} {width}: {:?}", text.content);
                if let Some((other, _)) = texts.iter().find(|(_, other)| area.overlaps(&other.grown(-1.0))) {
                    panic!("{name} {width}: {:?} on {other:?}", text.content);
                }
                texts.push((text.content.clone(), area));
            }
            assert!(figure.description.len() > 40, "{name}");
        }
    }
}

#[test]
fn the_curve_lies_where_the_map_says() {
    let figure = drawn(&report("dates", &[1.0]), 700.0, 460.0);
    let [times, arrivals] = &figure.map.panels[..] else { panic!("two panels") };
    for (panel, value) in [(times, time_d(3, 1.0)), (arrivals, 30.0 + time_d(3, 1.0))] {
        let at = Point::new(
            panel.left + panel.width * (30.0 - panel.x_min) / (panel.x_max - panel.x_min),
            panel.top + panel.height * (panel.y_max - value) / (panel.y_max - panel.y_min),
        );
        let passes = figure.shapes.iter().any(|shape| match shape {
            Shape::Polyline { points, stroke } => {
                stroke.color == LIGHT.sail && points.iter().any(|p| p.distance(at) < 1e-6)
            }
            _ => false,
        });
        assert!(passes, "{}", panel.column);
    }
}

/// Lines of the sail's colour with at least two points.
fn curves(figure: &Figure) -> usize {
    let is_curve =
        |shape: &&Shape| matches!(shape, Shape::Polyline { stroke, .. } if stroke.color == LIGHT.sail);
    figure.shapes.iter().filter(is_curve).count()
}

#[test]
fn a_date_that_is_missing_or_without_a_flight_breaks_the_curve() {
    let mut study = report("dates", &[1.0]);
    let whole = curves(&drawn(&study, 700.0, 460.0));
    study.rows.remove(2);
    assert_eq!(curves(&drawn(&study, 700.0, 460.0)), 2 * whole);
    study.rows.insert(2, StudyRow { time_d: None, arrive: None, ..row(2, 1.0) });
    assert_eq!(curves(&drawn(&study, 700.0, 460.0)), 2 * whole);
}

#[test]
fn what_breaks_the_law_or_was_not_found_is_marked_and_said() {
    for name in ["dates", "map"] {
        let sails: &[f64] = if name == "map" { &SAILS } else { &[1.0] };
        let alarms = |study: &StudyReport| {
            let figure = drawn(study, 700.0, 460.0);
            let is_alarm = |shape: &&Shape| match shape {
                Shape::Polyline { stroke, .. } => stroke.color == LIGHT.alarm,
                Shape::Text(text) => text.color == LIGHT.alarm,
                _ => false,
            };
            figure.shapes.iter().filter(is_alarm).count()
        };
        let mut study = report(name, sails);
        assert_eq!(alarms(&study), 0);
        study.rows[4].law = LawMark::Broken;
        let broken = alarms(&study);
        assert!(broken >= 3, "{name}: a cross and a sentence");
        study.rows[1].time_d = None;
        assert!(alarms(&study) > broken, "{name}");
        assert!(drawn(&study, 700.0, 460.0).description.contains("leaves later"));
    }
}

#[test]
fn the_shorter_the_flight_the_fuller_its_cell() {
    let study_report = report("map", &SAILS);
    let figure = drawn(&study_report, 700.0, 460.0);
    let panel = &figure.map.panels[0];
    let cell = |date: f64, sail: f64| {
        let x = panel.left + panel.width * (10.0 * date - panel.x_min) / (panel.x_max - panel.x_min);
        let y = panel.top + panel.height * (panel.y_max - sail) / (panel.y_max - panel.y_min);
        let mut colors = figure.shapes.iter().filter_map(|shape| match shape {
            Shape::Polygon { points, color } => {
                let centre = Point::new((points[0].x + points[2].x) / 2.0, (points[0].y + points[2].y) / 2.0);
                (centre.distance(Point::new(x, y)) < 1e-6).then_some(*color)
            }
            _ => None,
        });
        colors.next().expect("a cell there")
    };
    // From white paper to the sail's colour: less blue is fuller.
    for date in 0..6 {
        let blues = [0.0, 1.0, 2.0].map(|sail| cell(f64::from(date), sail).blue);
        assert!(blues[0] > blues[1] && blues[1] > blues[2], "{date}: {blues:?}");
    }
    assert_eq!(cell(3.0, 2.0), LIGHT.sail);
}

#[test]
fn a_study_without_dates_is_an_error() {
    let mut study_report = report("dates", &[1.0]);
    study_report.axes.clear();
    assert!(study(&study_report, &FigureOptions::default()).is_err());
}
