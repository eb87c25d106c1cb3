//! Flights and formulas against the tables of `reference/`, through the door that page and command line use.

use orbits::constants::{IRRADIANCE_W_M2, PRESSURE_N_M2};
use orbits::escape::Burn;
use orbits::hohmann::{Circles, hohmann, synodic_d};
use orbits::planets::Planet;
use orbits::units;
use sail::film::ALUMINISED;
use sail::motion::steered::{Ending, Law, Plan, fly};
use sail::spiral::Spiral;
use sail::steering::primer::ideal_attitude;
use sail::temperature::film_temperature_k;
use sail::{force, loading};
use scenario::report::Status;
use serde_json::Value;
use tests::{check_record, flown, list, number, reference, words};

/// Relative difference allowed against the computed times: both methods behind the table agree to 2e-9, and the
/// last digits of constants may differ.
const TIMES: f64 = 1e-5;

#[test]
fn minimum_times_are_those_of_collocation_and_of_an_independent_indirect_method() {
    let table = reference("coplanar_times.json");
    let cases = list(&table, "/cases");
    assert!(cases.len() >= 16, "only {} cases", cases.len());
    for case in cases {
        let (target_au, ac) = (number(case, "/r_f_au"), number(case, "/ac_mm_s2"));
        let link = format!("ac_mm_s2={ac}&from=orbit&from_orbit=1&to=orbit&to_orbit={target_au}");
        let flight = flown(&link).report.flight;
        assert_eq!(flight.status, Status::Converged, "{link}");
        let time_d = flight.time_d.expect("a converged flight takes a time");
        for key in ["/time_d_collocation", "/time_d_indirect"] {
            let expected = number(case, key);
            let off = time_d / expected - 1.0;
            assert!(off.abs() < TIMES, "{link}: {time_d} d instead of {expected} d, {off:.1e} off ({key})");
        }
        let swept = flight.revolutions.expect("a path") * std::f64::consts::TAU;
        let expected = number(case, "/swept_angle_rad");
        assert!((swept / expected - 1.0).abs() < TIMES, "{link}: sweeps {swept} rad, not {expected}");
    }
}

#[test]
fn planets_of_the_table_are_the_planets_of_the_link() {
    let table = reference("coplanar_times.json");
    let mut named = 0;
    for case in list(&table, "/cases") {
        let Some(planet) = Planet::ALL.iter().find(|planet| planet.key() == words(case, "/target")) else {
            continue;
        };
        named += 1;
        let link = format!("ac_mm_s2={}&to={}", number(case, "/ac_mm_s2"), planet.key());
        let expected = number(case, "/time_d_indirect");
        assert!((tests::time_d(&link) / expected - 1.0).abs() < TIMES, "{link}");
    }
    // Mercury, Venus, Mars and Jupiter at four accelerations each.
    assert_eq!(named, 16);
}

#[test]
fn bryson_and_kelleys_transfer_comes_out_again() {
    let table = reference("published.json");
    let of = |key: &str| table.pointer(&format!("/bryson_kelley/{key}")).expect(key);
    let ac = units::mm_per_s2(number(&table, "/bryson_kelley/lightness"));
    let target_au = number(&table, "/bryson_kelley/r_f_au");
    let answer = flown(&format!("ac_mm_s2={ac}&from=orbit&from_orbit=1&to=orbit&to_orbit={target_au}"));
    let flight = &answer.report.flight;
    let time_d = flight.time_d.expect("a flight");
    check_record(of("time"), units::canonical_time(time_d));
    check_record(of("swept_angle"), flight.revolutions.expect("a path") * std::f64::consts::TAU);
    check_record(of("initial_cone"), answer.columns.cone_deg[0].to_radians());

    let history = of("cone_history");
    let skip: Vec<u64> = list(history, "/skip_nodes").iter().filter_map(Value::as_u64).collect();
    let angles = list(history, "/value");
    assert_eq!((angles.len(), skip.len()), (41, 3));
    let (times, cones) = (&answer.columns.t_d, &answer.columns.cone_deg);
    for (i, angle) in angles.iter().enumerate().filter(|(i, _)| !skip.contains(&(*i as u64))) {
        let at_d = time_d * i as f64 / (angles.len() - 1) as f64;
        let next = times.partition_point(|&t| t < at_d).clamp(1, times.len() - 1);
        let share = (at_d - times[next - 1]) / (times[next] - times[next - 1]);
        let cone = (cones[next - 1] + share * (cones[next] - cones[next - 1])).to_radians();
        let expected = angle.as_f64().expect("a number");
        assert!(
            (cone - expected).abs() <= number(history, "/tolerance"),
            "node {i}: {cone} rad instead of {expected} [{}]",
            words(history, "/source")
        );
    }
}

#[test]
fn remembered_times_to_mars_are_near() {
    let table = reference("published.json");
    for row in list(&table, "/mars_rough") {
        let ac = number(row, "/inputs/ac_mm_s2");
        let (low, high, slack) =
            (number(row, "/value/0"), number(row, "/value/1"), number(row, "/tolerance"));
        let time_d = tests::time_d(&format!("ac_mm_s2={ac}"));
        let near = low * (1.0 - slack)..=high * (1.0 + slack);
        assert!(near.contains(&time_d), "{time_d} d at {ac} mm/s2 [{}]", words(row, "/source"));
    }
}

#[test]
fn a_flat_sail_pushes_as_the_books_say() {
    let table = reference("published.json");
    let cone_deg = |psi_deg: f64| {
        let (sin, cos) = psi_deg.to_radians().sin_cos();
        let (c, s) = ideal_attitude(cos, sin);
        s.atan2(c).to_degrees()
    };
    let rows = list(&table, "/flat_sail");
    check_record(&rows[0], cone_deg(90.0));
    let (sin, cos) = cone_deg(90.0).to_radians().sin_cos();
    check_record(&rows[1], force::ideal(cos, sin).transverse);
    for row in &rows[2..] {
        check_record(row, cone_deg(number(row, "/inputs/psi_deg")));
    }

    // Mean over all attitudes, both faces alike: the outward force cos^3 over the sphere, by midpoints of cos.
    let nodes = 20_000;
    let midpoint = |i: usize| (i as f64 + 0.5) / nodes as f64;
    let outward = |cos: f64| force::ideal(cos, (1.0 - cos * cos).sqrt()).radial;
    let mean = (0..nodes).map(|i| outward(midpoint(i))).sum::<f64>() / nodes as f64;
    // The midpoint rule errs by f''/24 n^2, here 6e-10: looser than the record, which is exact.
    assert!((mean - number(&table, "/attitude_mean/value")).abs() < 1e-9, "{mean}");
}

#[test]
fn loading_and_sunlight_are_the_published_ones() {
    let table = reference("published.json");
    let rows = list(&table, "/loading");
    check_record(&rows[0], loading::critical_loading_g_m2());
    check_record(
        &rows[1],
        loading::acceleration_mm_s2(1000.0, 1.0, 1.0) * loading::loading_g_m2(1000.0, 1.0),
    );
    let rows = list(&table, "/irradiance");
    check_record(&rows[0], IRRADIANCE_W_M2);
    check_record(&rows[1], PRESSURE_N_M2);
    check_record(&rows[2], IRRADIANCE_W_M2);
}

#[test]
fn spirals_are_flown_as_their_closed_form_says() {
    let table = reference("published.json");
    let rows = list(&table, "/spiral");
    assert_eq!(rows.len(), 3);
    for row in rows {
        let (lightness, cone_deg) = (number(row, "/lightness"), number(row, "/cone_deg"));
        let planet = Planet::ALL.into_iter().find(|planet| planet.key() == words(row, "/target"));
        let target = planet.expect("a planet").circle_radius_au();
        let spiral = Spiral::new(lightness, cone_deg.to_radians()).expect("a weak sail spirals");
        let (u, v) = spiral.speeds(1.0);
        let law = Law::Fixed { cone_deg };
        let flown = fly(&Plan { lightness, start: [1.0, u, v], target, law, time_limit: 200.0 });
        assert_eq!(flown.ending, Ending::Arrived);
        let source = words(row, "/source");
        let angle_deg = flown.end[1].atan2(flown.end[2]).to_degrees();
        for (name, found, tolerance) in [
            ("/time_d", units::days(flown.time), number(row, "/tolerance")),
            ("/gamma_deg", angle_deg, number(row, "/gamma_tolerance_deg")),
        ] {
            let expected = number(row, name);
            assert!((found - expected).abs() <= tolerance, "{name}: {found}, not {expected} [{source}]");
        }
    }
}

#[test]
fn impulsive_transfers_are_those_of_the_textbooks() {
    let table = reference("published.json");
    let circles = |row: &Value| Circles {
        gm_km3_s2: number(row, "/inputs/mu_km3_s2"),
        from_km: number(row, "/inputs/r_1_km"),
        to_km: number(row, "/inputs/r_2_km"),
    };
    let of = |row: &Value| hohmann(circles(row)).expect("sound circles");
    let rows = list(&table, "/hohmann");
    let parked = |row: &Value| {
        let radius_km = number(row, "/inputs/radius_earth_km") + number(row, "/inputs/park_km");
        let burn = Burn::at_radius(number(row, "/inputs/mu_earth_km3_s2"), radius_km).expect("a sound orbit");
        burn.from_circle_km_s(of(row).depart_km_s).expect("a sound excess")
    };
    let found: [f64; 6] = [
        of(&rows[0]).time_d,
        of(&rows[1]).depart_km_s,
        of(&rows[2]).arrive_km_s,
        parked(&rows[3]),
        of(&rows[4]).total_km_s(),
        of(&rows[5]).time_d * 24.0,
    ];
    assert_eq!(rows.len(), found.len());
    for (row, found) in rows.iter().zip(found) {
        check_record(row, found);
    }
    let row = &list(&table, "/synodic")[0];
    let year_d = |a_au: f64| units::days(std::f64::consts::TAU * a_au.powf(1.5));
    let (first, second) = (number(row, "/inputs/a_1_au"), number(row, "/inputs/a_2_au"));
    check_record(row, synodic_d(year_d(first), year_d(second)).expect("two periods"));
}

#[test]
fn films_get_as_hot_as_the_formula_says() {
    let table = reference("published.json");
    for row in list(&table, "/film_temperature") {
        assert_eq!(number(row, "/inputs/irradiance_w_m2"), IRRADIANCE_W_M2);
        check_record(row, film_temperature_k(&ALUMINISED, number(row, "/inputs/distance_au"), 1.0));
    }
}

#[test]
fn every_section_of_the_published_values_has_its_check() {
    let here = [
        "bryson_kelley",
        "mars_rough",
        "flat_sail",
        "attitude_mean",
        "loading",
        "irradiance",
        "spiral",
        "hohmann",
        "synodic",
        "film_temperature",
    ];
    let in_published_rows = ["rules_of_thumb"];
    let in_orbits = ["constants", "lambert", "interplanetary"];
    let not_modelled = ["optical_film", "cranking", "ageing", "film_limits"];
    let table = reference("published.json");
    let known = [&here[..], &in_published_rows, &in_orbits, &not_modelled, &["about"]].concat();
    for section in table.as_object().expect("an object").keys() {
        assert!(known.contains(&section.as_str()), "no check is known for {section}");
    }
    assert_eq!(table.as_object().expect("an object").len(), known.len());
}
