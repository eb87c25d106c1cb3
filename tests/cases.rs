//! Five hundred flights, listed once and for all: every one converges with its proof, and none reports a number
//! that is none.

use scenario::report::{Columns, Flight, Status};
use tests::{flown, list, number, reference};

/// The links of the listed cases.
fn links() -> Vec<String> {
    let table = reference("cases_500.json");
    let link = |case| {
        let (ac, target_au) = (number(case, "/ac_mm_s2"), number(case, "/r_f_au"));
        format!("ac_mm_s2={ac}&from=orbit&from_orbit=1&to=orbit&to_orbit={target_au}")
    };
    list(&table, "/cases").iter().map(link).collect()
}

#[test]
fn all_five_hundred_converge_with_their_proof() {
    let links = links();
    assert_eq!(links.len(), 500);
    let mut missed = Vec::new();
    for link in &links {
        let report = flown(link).report;
        if report.flight.status != Status::Converged {
            missed.push(format!("{link}: {:?} {:?}", report.flight.status, report.flight.message));
            continue;
        }
        check_proof(link, &report.flight, report.ends.to.semi_major_axis_au, report.program.constants.au_km);
    }
    assert!(missed.is_empty(), "{} of 500 missed:\n{}", missed.len(), missed.join("\n"));
}

/// The thresholds of a converged flight, written out once more: 1e-7 of the target's distance and speed, 1e-8 of
/// the Hamiltonian.
#[track_caller]
fn check_proof(link: &str, flight: &Flight, target_au: f64, au_km: f64) {
    let proof = &flight.proof;
    let circular_m_s = 29_784.69 / target_au.sqrt();
    assert!(proof.position_error_km.is_some_and(|km| km <= 1e-7 * target_au * au_km), "{link}: {proof:?}");
    assert!(proof.speed_error_m_s.is_some_and(|m_s| m_s <= 1e-7 * circular_m_s), "{link}: {proof:?}");
    assert!(proof.hamiltonian_drift.is_some_and(|drift| drift <= 1e-8), "{link}: {proof:?}");
    assert!(proof.extremals_found >= 1 && !proof.method.is_empty(), "{link}: {proof:?}");
}

#[test]
fn every_number_of_the_report_is_one() {
    for link in links().iter().step_by(5) {
        let answer = flown(link);
        let report = serde_json::to_value(&answer.report).expect("a report is JSON");
        // JSON has no NaN: one would be written as null, so nulls may stand only where nothing is known.
        let mut nulls = Vec::new();
        collect_nulls("", &report, &mut nulls);
        let expected = [
            "/craft/area_m2",
            "/craft/delivered_kg",
            "/craft/mass_kg",
            "/craft/side_m",
            "/ends/from/mean_anomaly_deg",
            "/ends/to/mean_anomaly_deg",
            "/flight/arrive",
            "/flight/depart",
            "/flight/earth_range_max_au",
            "/flight/earth_view",
            "/flight/estimate",
            "/flight/margin",
            "/flight/message",
            "/impulsive/dated",
            "/impulsive/dated_same_dates",
            "/impulsive/from_parking",
            "/impulsive/heliocentric/delivered_kg",
            "/impulsive/same_start_same_end/delivered_kg",
        ];
        nulls.sort();
        assert_eq!(nulls, expected, "{link}");
        assert!(!report.to_string().contains("NaN"), "{link}");
        check_columns(link, &answer.columns, answer.report.flight.jumps.len());
    }
}

fn collect_nulls(place: &str, value: &serde_json::Value, found: &mut Vec<String>) {
    match value {
        serde_json::Value::Null => found.push(place.to_owned()),
        serde_json::Value::Object(fields) => {
            for (name, field) in fields {
                collect_nulls(&format!("{place}/{name}"), field, found);
            }
        }
        serde_json::Value::Array(items) => {
            for (i, item) in items.iter().enumerate() {
                collect_nulls(&format!("{place}/{i}"), item, found);
            }
        }
        _ => {}
    }
}

/// Every column is as long as the time column and whole, but for what does not exist: the clock angle where the
/// normal is on the Sun line, the turn rate at a jump, and what needs a date.
#[track_caller]
fn check_columns(link: &str, columns: &Columns, jumps: usize) {
    for (name, values) in Columns::NAMES.iter().zip(columns.values()) {
        assert_eq!(values.len(), columns.t_d.len(), "{link}: {name}");
        let absent = values.iter().filter(|value| !value.is_finite()).count();
        match *name {
            "earth_range_au" | "sun_earth_craft_deg" => assert_eq!(absent, values.len(), "{link}: {name}"),
            "turn_rate_deg_d" => assert!(absent <= jumps, "{link}: {absent} in {name}, {jumps} jumps"),
            "clock_deg" => {
                let on_sun_line = columns.cone_deg.iter().filter(|cone| cone.abs() < 0.01).count();
                assert_eq!(absent, on_sun_line, "{link}: {name}");
            }
            _ => assert_eq!(absent, 0, "{link}: {name}"),
        }
    }
    assert!(columns.t_d.windows(2).all(|pair| pair[0] <= pair[1]), "{link}: time runs backwards");
}
