//! The crate from outside: documents, words, options and errors.

mod sample;

use figures::{FigureError, FigureOptions, NAMES, ThemeName, describe, layout, svg};
use sample::{MARS, Spiral, flight, without_flight};
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
        ("width", FigureOptions { width: f64::NAN, ..options }),
        ("height", FigureOptions { height: 3.0, ..options }),
        ("zoom", FigureOptions { zoom: 0.0, ..options }),
        ("pan_x_au", FigureOptions { pan_x_au: f64::INFINITY, ..options }),
    ] {
        assert!(layout("orbit", &report, &columns, &wrong).unwrap_err().to_string().contains(name));
    }
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
}
