//! The checks that page and command line run, held to the tables of `reference/`: they pass, and they expect what
//! the tables say.

use numerics::ode::{Flow, Mode, Options, integrate};
use orbits::constants::{DAY_S, JULIAN_YEAR_D};
use orbits::planets::Planet;
use scenario::checks::{BRYSON_ANGLES_RAD, BRYSON_SWING, CheckRow, published_checks};
use serde_json::Value;
use tests::{check_record, list, number, reference, words};

/// Rows by the start of their name, the place of their value in `published.json`, and what that is multiplied with
/// to come to the row's unit.
const PLACES: &[(&str, &str, f64)] = &[
    ("Earth to Mars, lightness number 0.17: time", "/bryson_kelley/time", 1.0),
    ("Earth to Mars, lightness number 0.17: angle swept", "/bryson_kelley/swept_angle", 1.0),
    ("Earth to Mars, lightness number 0.17: first sail angle", "/bryson_kelley/initial_cone", 1.0),
    ("Cone angle of the largest transverse force", "/flat_sail/0", 1.0),
    ("Largest transverse force over head-on", "/flat_sail/1", 1.0),
    ("Best cone angle for a push 60\u{b0}", "/flat_sail/2", 1.0),
    ("Best cone angle for a push 90\u{b0}", "/flat_sail/3", 1.0),
    ("Best cone angle for a push 120\u{b0}", "/flat_sail/4", 1.0),
    ("Best cone angle for a push 150\u{b0}", "/flat_sail/5", 1.0),
    ("Critical loading", "/loading/0", 1.0),
    ("Radiation pressure at 1 au", "/irradiance/1", 1e6),
    ("Earth-Mars Hohmann: time", "/hohmann/0", 1.0),
    ("Earth-Mars Hohmann: excess at departure", "/hohmann/1", 1.0),
    ("Earth-Mars Hohmann: excess at arrival", "/hohmann/2", 1.0),
    ("Hohmann to 35 781 km altitude: total", "/hohmann/4", 1.0),
    ("Hohmann to 35 781 km altitude: time", "/hohmann/5", 1.0),
    ("Synodic period of Earth and Mars", "/synodic/0", 1.0),
    ("Temperature of aluminised film facing the Sun at 1 au", "/film_temperature/0", 1.0),
    ("Temperature of aluminised film facing the Sun at 0.3871 au", "/film_temperature/1", 1.0),
    ("Temperature of aluminised film facing the Sun at 0.25 au", "/film_temperature/2", 1.0),
    ("Speed gained by 0.058 mm/s\u{b2} in a month", "/rules_of_thumb/0", 1.0),
    ("Speed gained by 0.058 mm/s\u{b2} in sixteen months", "/rules_of_thumb/1", 1.0),
    ("Time for 3.9 km/s at 0.058 mm/s\u{b2}", "/rules_of_thumb/2", 1.0),
    ("Sunlight at Mars over that at the Earth", "/rules_of_thumb/3", 100.0),
];

#[test]
fn every_check_passes() {
    for row in published_checks() {
        let CheckRow { name, source, expected, found, tolerance, unit, .. } = &row;
        assert!(row.passed, "{name}: {found} instead of {expected} {unit} within {tolerance} [{source}]");
        assert!((found - expected).abs() <= *tolerance, "{name} is called passed, and is not");
    }
}

#[test]
fn every_row_expects_what_the_tables_say() {
    let (published, times) = (reference("published.json"), reference("coplanar_times.json"));
    let rows = published_checks();
    for row in &rows {
        let expected = expected_by_tables(row, &published, &times);
        let off = (row.expected - expected).abs();
        assert!(off <= row.tolerance, "{}: {} here, {expected} in the tables", row.name, row.expected);
        // Rounded to the digits shown, but never by more than a thousandth.
        assert!(off <= 1e-3 * expected.abs(), "{}: {} here, {expected} there", row.name, row.expected);
    }
    for (name, ..) in PLACES {
        let count = rows.iter().filter(|row| row.name.starts_with(name)).count();
        assert!(count >= 1, "no row is called {name}");
    }
}

/// What the tables say about a row.
fn expected_by_tables(row: &CheckRow, published: &Value, times: &Value) -> f64 {
    // Longest name first: one name may be the beginning of another.
    let places = PLACES.iter().filter(|(name, ..)| row.name.starts_with(name));
    if let Some((_, place, factor)) = places.max_by_key(|(name, ..)| name.len()) {
        return number(published, &format!("{place}/value")) * factor;
    }
    if row.name.contains("38 of 41 times") {
        return 0.0; // a difference; the angles themselves are compared below
    }
    if let Some(rest) = row.name.strip_prefix("Fastest flight to ") {
        let (planet, ac) = rest.split_once(", ").expect("planet, acceleration");
        let ac: f64 = ac.trim_end_matches(" mm/s\u{b2}").parse().expect("a number");
        let same = |case: &&Value| {
            planet.to_lowercase() == words(case, "/target") && ac == number(case, "/ac_mm_s2")
        };
        let case = list(times, "/cases").iter().find(same).unwrap_or_else(|| panic!("no case for {rest}"));
        return number(case, "/time_d_indirect");
    }
    if let Some(rest) = row.name.strip_prefix("Logarithmic spiral to the distance of ") {
        let (planet, lightness) = rest.split_once(", lightness number ").expect("planet, lightness number");
        let same = |case: &&Value| {
            planet.to_lowercase() == words(case, "/target")
                && lightness.parse() == Ok(number(case, "/lightness"))
        };
        let case = list(published, "/spiral").iter().find(same).unwrap_or_else(|| panic!("no spiral {rest}"));
        return number(case, "/time_d");
    }
    panic!("{} has no place in the tables", row.name)
}

#[test]
fn marks_and_sources_are_those_of_the_tables() {
    let published = reference("published.json");
    for row in published_checks() {
        assert!(!row.source.is_empty(), "{} has no source", row.name);
        let known = ["published", "from memory", "computed", "common practice, no source"];
        assert!(known.contains(&row.mark), "{}: {}", row.name, row.mark);
        let places = PLACES.iter().filter(|(name, ..)| row.name.starts_with(name));
        let Some((_, place, _)) = places.max_by_key(|(name, ..)| name.len()) else { continue };
        let mark = words(&published, &format!("{place}/mark"));
        // A row may claim less than the table, never more: only what is published there is called published here.
        assert!(row.mark != "published" || mark == "published", "{}: {} there", row.name, mark);
    }
}

#[test]
fn the_angle_history_in_the_product_is_the_one_in_the_table() {
    let published = reference("published.json");
    let angles: Vec<f64> =
        list(&published, "/bryson_kelley/cone_history/value").iter().filter_map(Value::as_f64).collect();
    assert_eq!(BRYSON_ANGLES_RAD.to_vec(), angles);
    let skipped: Vec<usize> = list(&published, "/bryson_kelley/cone_history/skip_nodes")
        .iter()
        .filter_map(|node| node.as_u64().map(|node| node as usize))
        .collect();
    assert_eq!(BRYSON_SWING.collect::<Vec<_>>(), skipped);
}

/// Motion under a constant push and nothing else: distance and speed, SI units.
struct Push(f64);

impl Flow<f64, 2> for Push {
    fn rates(&self, _: Mode, y: &[f64; 2]) -> [f64; 2] {
        [y[1], self.0]
    }
}

#[test]
fn rules_of_thumb_hold_for_a_propagated_push() {
    let published = reference("published.json");
    let rows = list(&published, "/rules_of_thumb");
    let push_m_s2 = number(&rows[0], "/inputs/push_mm_s2") * 1e-3;
    let speed_m_s = |duration_s: f64| {
        let options = Options { tolerance: 1e-12, max_steps: 1000 };
        integrate(&Push(push_m_s2), &[0.0, 0.0], duration_s, &options).state[1]
    };
    let after_d = |duration_d: f64| speed_m_s(duration_d * DAY_S) * 3.6;
    check_record(&rows[0], after_d(number(&rows[0], "/inputs/duration_d")));
    check_record(&rows[1], after_d(number(&rows[1], "/inputs/duration_d")));
    // The time to a speed, read off two propagated points: speed grows as a straight line.
    let year_s = JULIAN_YEAR_D * DAY_S;
    let years = number(&rows[2], "/inputs/speed_km_s") * 1e3 / (speed_m_s(2.0 * year_s) - speed_m_s(year_s));
    check_record(&rows[2], years);
    for (row, planet) in rows[3..].iter().zip([Planet::Mars, Planet::Jupiter]) {
        check_record(row, planet.circle_radius_au().powi(-2));
    }
    assert_eq!(rows.len(), 5);
}
