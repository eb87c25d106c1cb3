//! The crate from outside: documents, words, options and errors.

mod sample;

use figures::{FigureError, FigureOptions, NAMES, ThemeName, describe, layout, svg};
use sample::{CROSSING, MARS, Spiral, crossing, flight, without_flight};
use scenario::report::Status;

#[test]
fn documents_are_well_formed_of_the_size_asked_and_hold_no_nan() {
    let hostile = Spiral { to: ("</text><script>alert(1)</script>&\u{1}\"'", 1.5), ..MARS };
    let (report, columns) = flight(hostile);
    for name in NAMES {
        let options = FigureOptions { width: 360.0, height: 420.0, ..FigureOptions::default() };
        let document = svg(&layout(name, &report, &columns, &options).unwrap());
        assert!(!document.contains("NaN") && !document.contains("inf"));
        assert!(!document.contains("<script"));
        let tree = roxmltree::Document::parse(&document).unwrap();
        let root = tree.root_element();
        assert_eq!(root.attribute("width"), Some("360"));
        assert_eq!(root.attribute("viewBox"), Some("0 0 1440 1680"));
        let text = |tag: &str| root.children().find(|n| n.has_tag_name(tag)).and_then(|n| n.text());
        assert!(text("title").unwrap().contains("<script>"), "shown as text");
        assert!(!text("desc").unwrap().is_empty());
    }
}

#[test]
fn documents_count_in_quarter_pixels() {
    let (report, columns) = flight(MARS);
    let document = svg(&layout("orbit", &report, &columns, &FigureOptions::default()).unwrap());
    let tree = roxmltree::Document::parse(&document).unwrap();
    let sun = tree.descendants().find(|n| n.attribute("r") == Some("24")).expect("a ring of 6 CSS pixels");
    let coordinate = |name: &str| sun.attribute(name).unwrap().parse::<f64>().unwrap();
    // The circles of both ends fill the square evenly, so the Sun is at its centre.
    assert_eq!((coordinate("cx"), coordinate("cy")), (4.0 * 380.0, 4.0 * 380.0));
}

#[test]
fn words_say_what_a_reader_would_see() {
    let (report, columns) = flight(MARS);
    let histories = describe("histories", &report, &columns).unwrap();
    let cone = "Cone angle falls from 22° to 10° by day 99, flips to 71° at day 99, falls to 45° at arrival.";
    assert!(histories.contains(cone), "{histories}");
    assert!(histories.contains("Distance rises from 1.00 au to 1.52 au at arrival."), "{histories}");
    let orbit = describe("orbit", &report, &columns).unwrap();
    assert!(orbit.contains("Mars\u{2019}s orbit (circle, 1.524 au)"), "{orbit}");
    assert!(orbit.contains("22° forward of the Sun line at departure"), "{orbit}");
}

#[test]
fn words_of_a_failed_solve_name_the_failure() {
    let (report, columns) = without_flight(MARS, Status::Unreachable, "the target is inside the Sun.");
    for name in NAMES {
        assert!(
            describe(name, &report, &columns).unwrap().contains("Unreachable: the target is inside the Sun.")
        );
    }
}

#[test]
fn unknown_names_and_impossible_options_are_errors_that_name_them() {
    let (report, columns) = flight(MARS);
    let options = FigureOptions::default();
    assert_eq!(
        layout("pie", &report, &columns, &options).unwrap_err(),
        FigureError::UnknownName("pie".to_owned())
    );
    for (name, wrong) in [
        ("width", FigureOptions { width: f64::NAN, ..options.clone() }),
        ("height", FigureOptions { height: 3.0, ..options.clone() }),
        ("zoom", FigureOptions { zoom: 0.0, ..options.clone() }),
        ("tilt_deg", FigureOptions { tilt_deg: 91.0, ..options.clone() }),
        ("turn_deg", FigureOptions { turn_deg: f64::NAN, ..options.clone() }),
        ("cursor_t_d", FigureOptions { cursor_t_d: Some(f64::NAN), ..options.clone() }),
        ("pan_x_au", FigureOptions { pan_x_au: f64::INFINITY, ..options.clone() }),
    ] {
        assert!(layout("orbit", &report, &columns, &wrong).unwrap_err().to_string().contains(name));
    }
    let unknown = FigureOptions { panels: vec!["cone_deg".into(), "mood".into()], ..options.clone() };
    let error = layout("histories", &report, &columns, &unknown).unwrap_err();
    assert_eq!(error, FigureError::UnknownPanel("mood".to_owned()));
    assert!(error.to_string().contains("film_temp_k"));
    let mut short = columns.clone();
    short.cone_deg.pop();
    assert!(layout("orbit", &report, &short, &options).unwrap_err().to_string().contains("cone_deg"));
}

#[test]
fn options_cross_as_plain_objects_with_defaults_for_what_is_left_out() {
    let options: FigureOptions =
        serde_json::from_str(r#"{"width": 330, "theme": "dark", "stale": true}"#).unwrap();
    assert_eq!(options.theme, ThemeName::Dark);
    assert!(options.stale && options.width == 330.0 && options.zoom == 1.0);
    assert!(options.tilt_deg == 0.0 && options.cursor_t_d.is_none() && options.panels.is_empty());
}

#[test]
fn panels_come_as_asked() {
    let (report, columns) = crossing(CROSSING);
    let usual = ["cone_deg", "clock_deg", "distance_au", "speed_km_s", "turn_rate_deg_d"];
    assert_eq!(figures::usual_panels(&report, &columns), usual);
    for asked in [vec!["film_temp_k", "sail_accel_mm_s2", "cone_deg"], figures::PANELS.to_vec()] {
        let panels: Vec<String> = asked.iter().map(|name| (*name).to_owned()).collect();
        let height = figures::usual_height("histories", 760.0, panels.len()).unwrap();
        let options = FigureOptions { panels, height, ..FigureOptions::default() };
        let figure = layout("histories", &report, &columns, &options).unwrap();
        let found: Vec<&str> = figure.map.panels.iter().map(|panel| panel.column.as_str()).collect();
        assert_eq!(found, asked);
        assert!(figure.map.panels.iter().all(|panel| panel.project.is_none() && panel.height > 40.0));
    }
}

#[test]
fn words_of_a_flight_in_space_tell_dates_heights_bodies_and_clock() {
    let (report, columns) = crossing(CROSSING);
    let orbit = describe("orbit", &report, &columns).unwrap();
    for wanted in [
        "semi-major axis 1.524 au, eccentricity 0.093, inclination 1.9°",
        "It leaves on 2031-05-17 and arrives on 2032-09-20 (TDB).",
        "au north of the ecliptic at day",
        "au south of the ecliptic at day",
        "the sail in ecliptic longitude at departure; they meet at arrival.",
    ] {
        assert!(orbit.contains(wanted), "{wanted}: {orbit}");
    }
    assert!(!orbit.contains("Hohmann"), "{orbit}");
    let histories = describe("histories", &report, &columns).unwrap();
    assert!(histories.contains("Clock angle rises from 60° to"), "{histories}");
    let tilted = FigureOptions { tilt_deg: 60.0, ..FigureOptions::default() };
    let figure = layout("orbit", &report, &columns, &tilted).unwrap();
    assert!(figure.description.starts_with("Seen 60° from ecliptic north"), "{}", figure.description);
}
