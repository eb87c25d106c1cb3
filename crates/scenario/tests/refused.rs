//! Scenarios that can be written but are not solved: each names its key and the way out, and the rest pass.

use scenario::link::decode;
use scenario::refused::refused;

/// The keys refused, in order.
#[track_caller]
fn check_refused(text: &str, keys: &[&str]) {
    let scenario = decode(text).unwrap_or_else(|errors| panic!("{text}: {errors:?}"));
    let errors = refused(&scenario);
    let found: Vec<_> = errors.iter().map(|error| error.key.as_str()).collect();
    assert_eq!(found, keys, "{text}: {errors:?}");
}

/// One reason, on this key, repeating this value, with this in its rule.
#[track_caller]
fn check_reason(text: &str, key: &str, value: &str, rule: &str) {
    check_refused(text, &[key]);
    let error = refused(&decode(text).unwrap()).remove(0);
    assert_eq!(error.value, value, "{text}");
    assert!(error.rule.contains(rule), "{text}: {}", error.rule);
}

#[test]
fn what_is_solved_passes() {
    for text in [
        "",
        "to=neptune&ac_mm_s2=0.05",
        "from=mercury&to=mercury",
        "from=orbit&from_orbit=0.2&to=orbit&to_orbit=40",
        "to=orbit&to_orbit=2,0,0,10,20,30,2460000.5",
        "steer=local",
        "steer=fixed",
        "steer=fixed&cone_deg=-20",
        "deadline_d=400&assembly_g_m2=5&bus_kg=20",
        "isp_s=450&park_km=none&capture_km=400&stage_dry=0",
        "title=anything",
    ] {
        check_refused(text, &[]);
    }
}

#[test]
fn what_this_version_does_not_solve_is_said_key_by_key() {
    check_reason("film=aluminised", "film", "aluminised", "film=ideal");
    check_reason("film=optics&optics=1,1,0,0,0,0", "film", "optics", "film=ideal");
    check_reason("cone_max_deg=60", "cone_max_deg", "60", "leave it out");
    check_reason("temp_max_k=500", "temp_max_k", "500", "leave it out");
    check_reason("control=0.5", "control", "0.5", "leave it out");
    check_reason("depart=2031-05-17", "depart", "2031-05-17", "geometry=spatial");
    check_reason("vinf_km_s=1&steer=local", "vinf_km_s", "1", "steer=fastest");
    check_reason("vinf_arrive_km_s=1&steer=fixed", "vinf_arrive_km_s", "1", "steer=fastest");
    check_reason("arrive=rendezvous", "arrive", "rendezvous", "geometry=spatial");
    check_reason("arrive=flyby", "arrive", "flyby", "arrive=orbit");
    check_reason("segments=10", "segments", "10", "smooth steering");
    check_reason("ageing=0.1,1", "ageing", "0.1,1", "leave it out");
}

#[test]
fn coplanar_orbits_are_circles() {
    check_reason("to=orbit&to_orbit=1,0.1", "to_orbit", "1,0.1", "e and i_deg 0");
    check_reason("from=orbit&from_orbit=1,0,5", "from_orbit", "1,0,5", "e and i_deg 0");
    check_refused("geometry=spatial&to=orbit&to_orbit=1,0.1", &[]);
}

#[test]
fn a_cone_angle_belongs_to_fixed_steering() {
    check_reason("cone_deg=20", "cone_deg", "20", "steer=fixed");
    check_reason("cone_deg=20&steer=local", "cone_deg", "20", "steer=fixed");
    check_refused("steer=fixed&cone_deg=70&cone_max_deg=60", &["cone_max_deg", "cone_deg"]);
}

#[test]
fn steering_laws_without_an_optimum_fly_between_circles_only() {
    check_refused("steer=local&geometry=spatial", &["steer"]);
    check_refused("steer=fixed&arrive=flyby", &["arrive", "steer"]);
    check_refused("steer=local&segments=10", &["segments"]);
}

#[test]
fn area_and_mass_must_make_a_sail() {
    check_reason("area_m2=1&mass_kg=1000", "area_m2", "1", "0.01 to 20 mm/s²");
    check_reason("area_m2=1000000&mass_kg=0.1", "area_m2", "1000000", "0.01 to 20 mm/s²");
    // 2 P A / m = 0.01 mm/s2 needs 1.10138 m2 per kg.
    check_refused("area_m2=1.1015&mass_kg=1", &[]);
    check_refused("area_m2=1.1013&mass_kg=1", &["area_m2"]);
}

#[test]
fn a_key_gives_one_reason_at_most_and_keys_keep_their_order() {
    let text = "film=aluminised&cone_max_deg=60&temp_max_k=500&ageing=0.1,1&control=0.5&geometry=spatial\
                &depart=2031-05-17&vinf_km_s=1&vinf_arrive_km_s=1&arrive=flyby&steer=local&cone_deg=80&segments=3";
    check_refused(
        text,
        &[
            "film",
            "cone_max_deg",
            "temp_max_k",
            "ageing",
            "control",
            "vinf_km_s",
            "vinf_arrive_km_s",
            "arrive",
            "steer",
            "cone_deg",
            "segments",
        ],
    );
}
