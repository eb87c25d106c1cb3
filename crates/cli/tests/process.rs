//! The command line as a process: what it writes where, and with which exit status it ends.

use std::fs;
use std::io::Read;
use std::path::PathBuf;
use std::process::{Command, Output, Stdio};

use serde_json::Value;

fn sunreach(arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_sunreach")).args(arguments).output().expect("the binary starts")
}

fn status(output: &Output) -> i32 {
    output.status.code().expect("it ends by itself")
}

fn stdout(output: &Output) -> &str {
    std::str::from_utf8(&output.stdout).expect("UTF-8")
}

fn stderr(output: &Output) -> &str {
    std::str::from_utf8(&output.stderr).expect("UTF-8")
}

/// Standard output of a command that ends with status 0 and says nothing else.
#[track_caller]
fn answered(arguments: &[&str]) -> String {
    let output = sunreach(arguments);
    assert_eq!(status(&output), 0, "{arguments:?}: {}", stderr(&output));
    assert_eq!(stderr(&output), "", "{arguments:?}");
    stdout(&output).to_owned()
}

#[track_caller]
fn json(text: &str) -> Value {
    assert!(text.ends_with('\n') && text.trim_end().lines().count() == 1, "one line of JSON");
    serde_json::from_str(text).expect("JSON")
}

/// Ends with this status, writes nothing to standard output, and one line to standard error for each of `parts`.
#[track_caller]
fn check_refused(arguments: &[&str], expected: i32, parts: &[&str]) {
    let output = sunreach(arguments);
    assert_eq!(status(&output), expected, "{arguments:?}: {}", stderr(&output));
    assert_eq!(stdout(&output), "", "{arguments:?}");
    let lines: Vec<&str> = stderr(&output).lines().collect();
    assert_eq!(lines.len(), parts.len(), "{arguments:?}: {lines:?}");
    for (line, part) in lines.iter().zip(parts) {
        assert!(line.starts_with("sunreach: ") && line.contains(part), "{arguments:?}: {line}");
    }
}

/// A file that this test alone writes.
fn scratch(name: &str) -> PathBuf {
    PathBuf::from(env!("CARGO_TARGET_TMPDIR")).join(name)
}

/// Field names of an object, in order.
fn names(value: &Value) -> Vec<&str> {
    value.as_object().expect("an object").keys().map(String::as_str).collect()
}

/// The interface: names and nesting that outside scripts read. Fields may join, none may go or be renamed.
const FIELDS: &[(&str, &[&str])] = &[
    ("", &["program", "link", "sentence", "ends", "craft", "flight", "impulsive", "cautions"]),
    ("/program", &["name", "version", "constants"]),
    (
        "/program/constants",
        &["sun_gm_km3_s2", "au_km", "irradiance_w_m2", "pressure_n_m2", "sun_gravity_mm_s2", "g0_m_s2"],
    ),
    ("/ends", &["from", "to"]),
    (
        "/ends/from",
        &[
            "name",
            "semi_major_axis_au",
            "eccentricity",
            "inclination_deg",
            "node_deg",
            "arg_peri_deg",
            "mean_anomaly_deg",
            "period_d",
        ],
    ),
    (
        "/craft",
        &[
            "ac_mm_s2",
            "lightness",
            "efficiency",
            "loading_g_m2",
            "area_m2",
            "side_m",
            "mass_kg",
            "delivered_kg",
        ],
    ),
    (
        "/flight",
        &[
            "status",
            "message",
            "time_d",
            "revolutions",
            "depart",
            "arrive",
            "vinf_used_km_s",
            "c3_km2_s2",
            "vinf_arrive_km_s",
            "sun_distance_min_au",
            "sun_distance_max_au",
            "film_temp_max_k",
            "turn_rate_max_deg_d",
            "jumps",
            "sail_dv_km_s",
            "lead_angle_deg",
            "earth_range_max_au",
            "earth_view",
            "final_eccentricity",
            "estimate",
            "proof",
            "branches",
            "margin",
        ],
    ),
    (
        "/flight/proof",
        &[
            "position_error_km",
            "speed_error_m_s",
            "hamiltonian_drift",
            "extremals_found",
            "second_order",
            "method",
        ],
    ),
    ("/flight/branches/0", &["time_d", "revolutions", "best"]),
    ("/flight/margin", &["days_in_hand", "mass_growth_pct", "ac_in_hand_pct"]),
    (
        "/impulsive",
        &[
            "heliocentric",
            "same_start_same_end",
            "from_parking",
            "from_parking_note",
            "lead_angle_deg",
            "synodic_d",
            "dated",
            "dated_same_dates",
        ],
    ),
    ("/impulsive/heliocentric", WAY),
    ("/impulsive/same_start_same_end", WAY),
    ("/impulsive/from_parking", WAY),
    (
        "/columns",
        &[
            "t_d",
            "x_au",
            "y_au",
            "z_au",
            "vx_km_s",
            "vy_km_s",
            "vz_km_s",
            "cone_deg",
            "clock_deg",
            "distance_au",
            "speed_km_s",
            "sail_accel_mm_s2",
            "turn_rate_deg_d",
            "film_temp_k",
            "earth_range_au",
            "sun_earth_craft_deg",
        ],
    ),
];

const WAY: &[&str] = &[
    "time_d",
    "dv_depart_km_s",
    "dv_arrive_km_s",
    "dv_total_km_s",
    "propellant_fraction",
    "delivered_kg",
    "phases",
];

#[test]
fn solve_writes_one_report_with_the_promised_fields() {
    let report = json(&answered(&["solve", "deadline_d=500", "--columns"]));
    let mut top = FIELDS[0].1.to_vec();
    top.push("columns");
    let sorted = |mut names: Vec<&'static str>| {
        names.sort();
        names
    };
    for (place, fields) in FIELDS {
        let object = report.pointer(place).unwrap_or_else(|| panic!("nothing at {place:?}"));
        let expected = if place.is_empty() { sorted(top.clone()) } else { sorted(fields.to_vec()) };
        let mut found = names(object);
        found.sort();
        assert_eq!(found, expected, "at {place:?}");
    }
    assert_eq!(report["link"], "v=1&deadline_d=500");
    assert_eq!(report["flight"]["status"], "converged");
    assert_eq!(report["flight"]["proof"]["second_order"], "not_tested");
}

#[test]
fn without_columns_there_are_none() {
    let report = json(&answered(&["solve", ""]));
    assert!(report.get("columns").is_none());
    // Half a day around 412.5 d: an invented craft of 0.968 mm/s2, between the computed 407.72 d at 1 mm/s2 and
    // 560.11 d at 0.5 mm/s2.
    let time_d = report["flight"]["time_d"].as_f64().expect("a time");
    assert!((407.72..420.0).contains(&time_d), "{time_d}");
}

#[test]
fn columns_are_equally_long_and_hold_null_for_what_is_not_there() {
    let text = answered(&["solve", "--columns", "ac_mm_s2=1"]);
    assert!(!text.contains("NaN"));
    let report = json(&text);
    let columns = report["columns"].as_object().expect("columns");
    let rows = columns["t_d"].as_array().expect("times").len();
    assert!(rows > 100, "{rows} rows");
    for (name, values) in columns {
        let values = values.as_array().expect("a list");
        assert_eq!(values.len(), rows, "{name}");
        let dated = name == "earth_range_au" || name == "sun_earth_craft_deg";
        assert!(values.iter().all(|value| value.is_null() == dated), "{name}");
    }
    assert_eq!(columns["t_d"][0], 0.0);
    assert_eq!(columns["t_d"][rows - 1], report["flight"]["time_d"]);
}

#[test]
fn the_two_ways_to_write_a_link_are_one() {
    let by_page = answered(&["solve", "https://example.org/sunreach.html#v=1&to=venus&ac_mm_s2=1"]);
    assert_eq!(answered(&["solve", "to=venus&ac_mm_s2=1"]), by_page);
    assert_eq!(json(&by_page)["link"], "v=1&ac_mm_s2=1&to=venus");
}

#[test]
fn pretty_is_for_people() {
    let text = answered(&["solve", "--pretty", ""]);
    assert!(serde_json::from_str::<Value>(&text).is_err());
    let first = text.lines().next().expect("a line");
    assert!(first.contains("Mars") && first.contains("days") && first.contains('%'), "{first}");
    for part in ["converged", "re-flown", "Preliminary study only", "#v=1"] {
        assert!(text.contains(part), "{part}");
    }
}

#[test]
fn minus_o_writes_the_file_and_nothing_else() {
    let path = scratch("report.json");
    let name = path.to_str().expect("a plain name");
    assert_eq!(answered(&["solve", "", "-o", name]), "");
    assert_eq!(fs::read_to_string(&path).expect("written"), answered(&["solve", ""]));
    let path = scratch("orbit.svg");
    let name = path.to_str().expect("a plain name");
    assert_eq!(answered(&["figure", "orbit", "", "-o", name]), "");
    assert_eq!(fs::read_to_string(&path).expect("written"), answered(&["figure", "orbit", ""]));
}

#[test]
fn figures_are_svg() {
    for name in ["orbit", "histories"] {
        let svg = answered(&["figure", name, "to=venus"]);
        assert!(svg.starts_with("<svg") || svg.starts_with("<?xml"), "{name}");
        assert!(svg.trim_end().ends_with("</svg>"), "{name}");
        assert!(!svg.contains("NaN"), "{name}");
    }
    check_refused(&["figure", "sunset", ""], 2, &["sunset"]);
}

#[test]
fn checks_say_what_they_compare() {
    let rows = json(&answered(&["checks", "--json"]));
    let rows = rows.as_array().expect("rows");
    assert!(rows.len() >= 30, "{} rows", rows.len());
    for row in rows {
        let fields = ["expected", "found", "mark", "name", "passed", "source", "tolerance", "unit"];
        let mut found = names(row);
        found.sort();
        assert_eq!(found, fields);
        assert_eq!(row["passed"], true, "{}", row["name"]);
    }
    let text = answered(&["checks"]);
    assert!(text.ends_with(&format!("{0} of {0} checks agree\n", rows.len())));
    assert!(text.contains("common practice, no source") && text.contains("published"));
}

#[test]
fn help_and_version_are_answers() {
    assert!(answered(&["--help"]).contains("not for flight operations, navigation or range safety"));
    assert_eq!(answered(&["--help"]), answered(&[]));
    assert_eq!(answered(&["--version"]), format!("sunreach {}\n", env!("CARGO_PKG_VERSION")));
}

#[test]
fn a_flight_that_does_not_arrive_ends_with_1_and_still_reports() {
    let output = sunreach(&["solve", "steer=fixed&cone_deg=-35"]);
    assert_eq!(status(&output), 1);
    let report = json(stdout(&output));
    assert_eq!(report["flight"]["status"], "not_converged");
    assert!(report["flight"]["time_d"].is_null());
    assert!(report["flight"]["message"].as_str().is_some_and(|message| message.contains("Sun")));
    let steered = answered(&["solve", "steer=local"]);
    assert_eq!(json(&steered)["flight"]["status"], "flown");
}

#[test]
fn bad_input_ends_with_2_and_names_the_key() {
    check_refused(&["solve", "ac_mm_s2=zero"], 2, &["ac_mm_s2: zero"]);
    check_refused(&["solve", "ac_mm_s2=NaN"], 2, &["ac_mm_s2: NaN"]);
    check_refused(&["solve", "area_m2=0&mass_kg=-1"], 2, &["area_m2: 0", "mass_kg: -1"]);
    check_refused(&["solve", "to=venus&to=mars"], 2, &["to: mars"]);
    check_refused(&["solve", "gravity=off"], 2, &["gravity: off"]);
    check_refused(&["solve", "v=2"], 2, &["v: 2"]);
    check_refused(&["solve", "area_m2=100"], 2, &["area_m2: 100"]);
    check_refused(&["solve", "title=%00"], 2, &["title"]);
    check_refused(&["solve", "to=%F"], 2, &["to"]);
    check_refused(&["figure", "orbit", "to=pluto"], 2, &["to: pluto"]);
    check_refused(&["solve", &"x".repeat(100_000)], 2, &["2000 characters"]);
}

#[test]
fn refused_combinations_end_with_2_and_say_what_to_do() {
    check_refused(&["solve", "cone_deg=20"], 2, &["cone_deg: 20"]);
    check_refused(&["solve", "arrive=rendezvous"], 2, &["arrive: rendezvous"]);
    check_refused(&["solve", "geometry=spatial&steer=local"], 2, &["steer: local"]);
    check_refused(&["solve", "to=orbit&to_orbit=1.5,0.2"], 2, &["to_orbit: 1.5,0.2"]);
}

#[test]
fn wrong_arguments_end_with_2() {
    check_refused(&["fly"], 2, &["fly"]);
    check_refused(&["solve"], 2, &["one scenario link"]);
    check_refused(&["solve", "", "--quickly"], 2, &["--quickly"]);
    check_refused(&["solve", "", "--columns", "--pretty"], 2, &["--columns"]);
}

#[test]
fn what_cannot_be_written_ends_with_3() {
    let folder = scratch("no/such/folder/report.json");
    let name = folder.to_str().expect("a plain name");
    check_refused(&["solve", "", "-o", name], 3, &[name]);
    check_refused(&["figure", "orbit", "", "-o", name], 3, &[name]);
}

#[cfg(target_os = "linux")]
#[test]
fn a_full_disk_ends_with_3() {
    let full = fs::OpenOptions::new().write(true).open("/dev/full").expect("Linux has a device that is full");
    let mut child = Command::new(env!("CARGO_BIN_EXE_sunreach"));
    let output = child.args(["solve", "--columns", ""]).stdout(full).stderr(Stdio::piped()).output();
    let output = output.expect("the binary starts");
    assert_eq!(status(&output), 3);
    assert!(stderr(&output).starts_with("sunreach: cannot write to standard output"), "{}", stderr(&output));
}

#[test]
fn a_reader_that_goes_away_ends_with_3_and_no_panic() {
    let mut child = Command::new(env!("CARGO_BIN_EXE_sunreach"));
    // More than a pipe holds, so that writing must wait for a reader that never comes.
    let mut child = child
        .args(["solve", "--columns", "ac_mm_s2=0.05&to=mercury"])
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("the binary starts");
    drop(child.stdout.take());
    let mut message = String::new();
    child.stderr.take().expect("a pipe").read_to_string(&mut message).expect("UTF-8");
    assert_eq!(child.wait().expect("it ends").code(), Some(3), "{message}");
    assert!(message.starts_with("sunreach: cannot write to standard output"), "{message}");
    assert!(!message.contains("panic"), "{message}");
}

/// Fields of a study report's rows, by name.
const STUDY_ROW: &[&str] = &[
    "ac_mm_s2",
    "area_m2",
    "arrive",
    "branches",
    "depart",
    "law",
    "link",
    "revolutions",
    "status",
    "time_d",
];

#[test]
fn a_study_says_the_same_for_any_number_of_jobs() {
    let link = "geometry=spatial&arrive=rendezvous&ac_range=0.8,1.2,2&span=2031-01-01,2032-06-01&step_d=60";
    let alone = answered(&["study", "map", link, "--jobs", "1"]);
    assert_eq!(alone, answered(&["study", "map", link, "--jobs", "3"]));
    let report = json(&alone);
    assert_eq!(names(&report), ["axes", "best", "link", "notes", "program", "rows", "study"]);
    assert_eq!(report["study"], "map");
    let rows = report["rows"].as_array().expect("rows");
    assert_eq!(rows.len(), 2 * 9);
    assert_eq!(names(&rows[0]), STUDY_ROW);
    // A row's link opens that very flight.
    let flight = json(&answered(&["solve", rows[5]["link"].as_str().expect("a link")]));
    let (told, opened) = (rows[5]["time_d"].as_f64(), flight["flight"]["time_d"].as_f64());
    assert!((told.expect("d") / opened.expect("d") - 1.0).abs() < 1e-8);
}

#[test]
fn studies_that_are_refused_name_the_key() {
    check_refused(&["study", "dates", "to=venus"], 2, &["geometry", "arrive"]);
    check_refused(&["study", "days", ""], 2, &["study: days"]);
    check_refused(&["study", "dates", "span=2031-05-17"], 2, &["span"]);
}
