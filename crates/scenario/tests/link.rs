//! The link as a file format: what is read, how it is written, and that everything else is an error that names
//! key, value and rule.

use std::time::Instant;

use scenario::keys::KEYS;
use scenario::link::{LinkError, decode, encode, entries};
use scenario::schema::{Range, Scenario};

#[track_caller]
fn read(text: &str) -> Scenario {
    decode(text).unwrap_or_else(|errors| panic!("{text}: {errors:?}"))
}

#[track_caller]
fn the_error(text: &str) -> LinkError {
    let errors = decode(text).expect_err(text);
    assert_eq!(errors.len(), 1, "{text}: {errors:?}");
    errors[0].clone()
}

/// One error, on this key, repeating this value, with this in its rule.
#[track_caller]
fn check_error(text: &str, key: &str, value: &str, rule: &str) {
    let error = the_error(text);
    assert_eq!((error.key.as_str(), error.value.as_str()), (key, value), "{text}");
    assert!(error.rule.contains(rule), "{text}: {}", error.rule);
}

/// The canonical form of a text.
#[track_caller]
fn check_canonical(text: &str, canonical: &str) {
    assert_eq!(encode(&read(text)), canonical, "{text}");
}

#[test]
fn nothing_at_all_is_the_default_flight() {
    for text in ["", "#", "?", "v=1", "#v=1", "  ", "&&", "https://example.org/sunreach.html"] {
        check_canonical(text, "v=1");
    }
    assert_eq!(read(""), Scenario::default());
}

#[test]
fn version_one_defaults_are_frozen() {
    // Written out by hand: a change here would change the meaning of every link ever shared.
    let frozen = "v=1&area_m2=6400&mass_kg=60&film=ideal&cone_max_deg=90&control=1&from=earth&to=mars\
                  &geometry=coplanar&vinf_km_s=0&vinf_arrive_km_s=0&arrive=orbit&steer=fastest&isp_s=320\
                  &park_km=300&capture_km=none&stage_dry=0.1&span=2030-01-01,2034-01-01&step_d=10&ac_range=0.5,3,20";
    check_canonical(frozen, "v=1");
    for key in [
        "title",
        "temp_max_k",
        "ageing",
        "depart",
        "cone_deg",
        "deadline_d",
        "bus_kg",
        "segments",
        "area_range",
    ] {
        let found = entries(&Scenario::default()).into_iter().find(|(known, _)| *known == key);
        assert_eq!(found, Some((key, String::new())));
    }
}

#[test]
fn links_written_by_hand_are_read() {
    check_canonical("to_orbit=2.77%2C0%2C0&to=orbit", "v=1&to=orbit&to_orbit=2.77");
    check_canonical("to=orbit&to_orbit=0.5,0.1,30,0,0,0,2451545", "v=1&to=orbit&to_orbit=0.5,0.1,30");
    check_canonical("to=orbit&to_orbit=1,0,0,0,0,0,2460000.5", "v=1&to=orbit&to_orbit=1,0,0,0,0,0,2460000.5");
    check_canonical("#ac_mm_s2=1&to=venus", "v=1&ac_mm_s2=1&to=venus");
    check_canonical("https://example.org/a/?x=y#to=venus", "v=1&to=venus");
    check_canonical("https://example.org/a/?to=venus", "v=1&to=venus");
    check_canonical("file:///C:/my%20files/sunreach.html#v=1&to=jupiter", "v=1&to=jupiter");
    check_canonical("to=venus&v=1&ac_mm_s2=.5", "v=1&ac_mm_s2=0.5&to=venus");
    check_canonical("title=First+try%2C+of+3&to=venus", "v=1&title=First+try,+of+3&to=venus");
    check_canonical("area%5Fm2=1e4&mass_kg=6e1", "v=1&area_m2=10000&mass_kg=60");
    check_canonical("park_km=none&capture_km=400", "v=1&park_km=none&capture_km=400");
    check_canonical(
        "film=optics&optics=.88,.94,.05,.55,.79,.55",
        "v=1&film=optics&optics=0.88,0.94,0.05,0.55,0.79,0.55",
    );
    check_canonical("vinf_km_s=1e-300", "v=1&vinf_km_s=1e-300");
    check_canonical("geometry=spatial&depart=2031-05-17", "v=1&geometry=spatial&depart=2031-05-17");
}

#[test]
fn plus_signs_in_a_title_are_spaces() {
    assert_eq!(read("title=a+b%2Bc%20d").title.as_deref(), Some("a b+c d"));
}

#[test]
fn area_and_mass_are_written_together() {
    check_canonical("area_m2=6400&mass_kg=50", "v=1&area_m2=6400&mass_kg=50");
    check_canonical("mass_kg=60&area_m2=6400", "v=1");
}

#[test]
fn a_title_is_text_whatever_it_looks_like() {
    for title in ["<img src=x onerror=alert(1)>", "=1+1", "&amp;", "a&b=c#d?e%", "\u{1f680} Ceres"] {
        let scenario = Scenario { title: Some(title.to_owned()), ..Scenario::default() };
        assert_eq!(read(&encode(&scenario)).title.as_deref(), Some(title));
    }
}

#[test]
fn a_title_has_80_characters_at_most_and_none_that_act() {
    assert!(decode(&format!("title={}", "a".repeat(80))).is_ok());
    let long = "a".repeat(81);
    check_error(&format!("title={long}"), "title", &format!("{}...", "a".repeat(60)), "80 characters");
    check_error("title=a%00b", "title", "a\\u{0}b", "control characters");
    check_error("title=a%0Ab", "title", "a\\u{a}b", "control characters");
    check_error("title=a%E2%80%AEb", "title", "a\\u{202e}b", "control characters");
    check_error("title=", "title", "", "empty");
    check_error("title=++", "title", "  ", "empty");
}

#[test]
fn every_number_has_two_edges() {
    for info in KEYS {
        let (Some(min), Some(max)) = (info.min, info.max) else { continue };
        let link = |value: String| {
            let partner = match info.key {
                "area_m2" => "&mass_kg=60",
                "mass_kg" => "&area_m2=6400",
                _ => "",
            };
            format!("{}={value}{partner}", info.key)
        };
        assert!(decode(&link(min.to_string())).is_ok(), "{} at {min}", info.key);
        assert!(decode(&link(max.to_string())).is_ok(), "{} at {max}", info.key);
        let below = (min - min.abs() * 1e-9 - 1e-12).to_string();
        let above = (max * (1.0 + 1e-9)).to_string();
        for wrong in [below.as_str(), above.as_str(), "1e308", "1e999", "-1e999"] {
            let error = the_error(&link(wrong.to_owned()));
            assert_eq!(error.key, info.key);
            let range = info.range.trim_end_matches(", or none");
            assert!(error.rule.contains(range), "{}: {}", info.key, error.rule);
        }
    }
}

#[test]
fn no_number_is_read_from_anything_else() {
    for info in KEYS.iter().filter(|info| info.min.is_some()) {
        for wrong in
            ["", "text", "NaN", "inf", "Infinity", "0x10", "1,5", "1+000", "<b>1</b>", "%3D1%2B1", "1%00"]
        {
            let partner = match info.key {
                "area_m2" => "&mass_kg=60",
                "mass_kg" => "&area_m2=6400",
                _ => "",
            };
            let error = the_error(&format!("{}={wrong}{partner}", info.key));
            assert_eq!(error.key, info.key);
            assert!(error.rule.contains("number") || error.rule.contains("empty"), "{}", error.rule);
        }
    }
}

#[test]
fn no_word_is_read_from_anything_else() {
    for info in KEYS.iter().filter(|info| !info.words.is_empty()) {
        for wrong in ["", "Mars", "none", "0", "pluto", "mars,venus", "+mars"] {
            let error = the_error(&format!("{}={wrong}", info.key));
            assert_eq!(error.key, info.key);
            assert!(error.rule.contains(info.range), "{}: {}", info.key, error.rule);
        }
    }
}

#[test]
fn zero_and_negative_sizes_are_refused() {
    check_error("area_m2=0&mass_kg=60", "area_m2", "0", "must be 0.001");
    check_error("area_m2=6400&mass_kg=-60", "mass_kg", "-60", "must be 0.001");
    check_error("ac_mm_s2=0", "ac_mm_s2", "0", "must be 0.01 to 20 mm/s²");
}

#[test]
fn one_of_a_pair_asks_for_the_other() {
    check_error("area_m2=6400", "area_m2", "6400", "mass_kg");
    check_error("mass_kg=60", "mass_kg", "60", "area_m2");
    check_error("film=optics", "film", "optics", "optics=");
    check_error("to=orbit", "to", "orbit", "to_orbit=");
    check_error("from=orbit", "from", "orbit", "from_orbit=");
}

#[test]
fn both_of_two_alternatives_are_one_too_many() {
    check_error("ac_mm_s2=1&area_m2=6400&mass_kg=60", "ac_mm_s2", "1", "either");
    check_error("area_m2=6400&ac_mm_s2=1", "ac_mm_s2", "1", "either");
}

#[test]
fn values_without_a_meaning_are_refused() {
    check_error("optics=1,1,0,0,0,0", "optics", "1,1,0,0,0,0", "film=optics");
    check_error("to_orbit=2.77", "to_orbit", "2.77", "to=orbit");
    check_error("from=venus&from_orbit=1", "from_orbit", "1", "from=orbit");
}

#[test]
fn lists_need_the_right_numbers() {
    check_error("film=optics&optics=1,1,0,0,0", "optics", "1,1,0,0,0", "six numbers");
    check_error("film=optics&optics=1,1,0,0,0,0,0", "optics", "1,1,0,0,0,0,0", "six numbers");
    check_error("film=optics&optics=1,1,0,0,0,1.5", "optics", "1,1,0,0,0,1.5", "bb must be 0 to 1");
    check_error("film=optics&optics=", "optics", "", "six numbers");
    check_error("film=optics&optics=1,1,0,0,0,x", "optics", "1,1,0,0,0,x", "bb must be a finite");
    check_error("film=aluminised2&ageing=0.1", "ageing", "0.1", "two numbers");
    check_error("ageing=0.1,0", "ageing", "0.1,0", "half-life dose must be");
    check_error("ageing=-1,1", "ageing", "-1,1", "degradation factor must be");
    check_error("ageing=0.1,1,1", "ageing", "0.1,1,1", "two numbers");
    check_error("ageing=,", "ageing", ",", "degradation factor is empty");
}

#[test]
fn orbits_are_ellipses_clear_of_the_sun() {
    check_error("to=orbit&to_orbit=0.1", "to_orbit", "0.1", "a_au must be 0.2 to 40");
    check_error("to=orbit&to_orbit=1,1", "to_orbit", "1,1", "e must be 0 to 0.99");
    check_error("to=orbit&to_orbit=1,1.5", "to_orbit", "1,1.5", "e must be 0 to 0.99");
    check_error("to=orbit&to_orbit=1,-0.1", "to_orbit", "1,-0.1", "e must be 0 to 0.99");
    check_error("to=orbit&to_orbit=1,0,181", "to_orbit", "1,0,181", "i_deg must be 0 to 180");
    check_error("to=orbit&to_orbit=1,0,0,361", "to_orbit", "1,0,0,361", "node_deg must be -360 to 360");
    check_error("to=orbit&to_orbit=1,0,0,0,-361", "to_orbit", "1,0,0,0,-361", "arg_peri_deg must be");
    check_error("to=orbit&to_orbit=1,0,0,0,0,400", "to_orbit", "1,0,0,0,0,400", "mean_anomaly_deg must be");
    check_error("to=orbit&to_orbit=1,0,0,0,0,0,60000", "to_orbit", "1,0,0,0,0,0,60000", "full Julian date");
    check_error("to=orbit&to_orbit=1,0,0,0,0,0,2451545,1", "to_orbit", "1,0,0,0,0,0,2451545,1", "trailing");
    check_error("to=orbit&to_orbit=0.2,0.98", "to_orbit", "0.2,0.98", "dips into the Sun");
    check_error("to=orbit&to_orbit=", "to_orbit", "", "a_au");
    check_error("to=orbit&to_orbit=1,,0", "to_orbit", "1,,0", "e is empty");
}

#[test]
fn dates_are_days_within_the_elements() {
    check_error("depart=2031-02-29", "depart", "2031-02-29", "calendar");
    check_error("depart=1799-12-31", "depart", "1799-12-31", "1800-01-01");
    check_error("depart=17.5.2031", "depart", "17.5.2031", "YYYY-MM-DD");
    check_error("depart=", "depart", "", "YYYY-MM-DD");
}

#[test]
fn studies_have_keys_of_their_own() {
    let study = read("span=2031-05-17,2033-01-01&step_d=7&ac_range=0.2,1,20&area_range=1e3,4e3,3").study;
    assert_eq!(study.span.map(|date| date.to_string()), ["2031-05-17", "2033-01-01"]);
    assert_eq!(study.step_d, 7);
    assert_eq!(study.ac_range, Range { first: 0.2, last: 1.0, count: 20 });
    assert_eq!(study.area_range.map(|range| range.values()), Some(vec![1000.0, 2000.0, 4000.0]));
    check_canonical("area_range=1e3,4e3,3&ac_range=0.5,3,20&step_d=7", "v=1&step_d=7&area_range=1000,4000,3");
    check_canonical("span=2030-01-01,2030-01-01", "v=1&span=2030-01-01,2030-01-01");
    for (text, part) in [
        ("span=2031-05-17", "two dates"),
        ("span=2031-05-17,2031-02-29", "calendar"),
        ("span=2031-05-17,2031-05-16", "earlier date first"),
        ("span=1799-12-31,2031-05-16", "1800-01-01"),
        ("span=2031-05-17,2031-05-18,2031-05-19", "YYYY-MM-DD"),
        ("step_d=0", "whole number, 1 to 1000 d"),
        ("step_d=2.5", "whole number"),
        ("ac_range=0.5,3", "three numbers"),
        ("ac_range=3,0.5,4", "at least 1.01 times"),
        ("ac_range=0.001,0.5,4", "each acceleration must be 0.01 to 20"),
        ("ac_range=0.5,3,1", "number of values must be 2 to 200"),
        ("ac_range=0.5,3,2.5", "whole number"),
        ("area_range=0,3,4", "each area must be 0.001 to 1000000000"),
    ] {
        let (key, value) = text.split_once('=').expect("a pair");
        check_error(text, key, value, part);
    }
}

#[test]
fn range_values_are_short_and_ascend() {
    let values = read("ac_range=0.5,3,20").study.ac_range.values();
    assert_eq!((values.len(), values[0], values[1], values[19]), (20, 0.5, 0.549446, 3.0));
    let close = read("ac_range=1,1.01,200").study.ac_range.values();
    assert!(close.windows(2).all(|pair| pair[0] < pair[1]));
    let large = read("area_range=1234567,9876543,3").study.area_range.expect("given").values();
    assert_eq!(large[1], 3_491_880.0);
}

#[test]
fn segments_are_counted_in_whole_numbers() {
    assert_eq!(read("segments=1e1").segments, Some(10));
    check_error("segments=2.5", "segments", "2.5", "whole number");
}

#[test]
fn unknown_and_repeated_keys_are_named() {
    check_error("speed=3", "speed", "3", "is not a key");
    check_error("Area_m2=3", "Area_m2", "3", "is not a key");
    check_error("=3", "", "3", "is not a key");
    check_error("mars", "mars", "", "is not a key");
    check_error("to=venus&to=venus", "to", "venus", "more than once");
    check_error("v=1&v=1", "v", "1", "more than once");
    check_error("%3Cb%3E=1", "<b>", "1", "is not a key");
    check_error("a%00=%1B[31m", "a\\u{0}", "\\u{1b}[31m", "is not a key");
}

#[test]
fn broken_escapes_are_named() {
    check_error("title=50%", "title", "50%", "%25");
    check_error("title=%zz", "title", "%zz", "%25");
    check_error("title=%C3%28", "title", "%C3%28", "UTF-8");
    check_error("ti%tle=a", "ti%tle", "a", "%25");
    check_error("area_m2=%&mass_kg=60", "area_m2", "%", "%25");
}

#[test]
fn a_link_of_another_version_says_so_and_nothing_else() {
    check_error("v=2&warp=9", "v", "2", "future version");
    check_error("warp=9&v=15", "v", "15", "future version");
    check_error("v=0", "v", "0", "must be 1");
    check_error("v=", "v", "", "must be 1");
    check_error("v=1.0", "v", "1.0", "must be 1");
    check_error("v=one", "v", "one", "must be 1");
}

#[test]
fn every_error_is_collected_in_the_order_of_the_link() {
    let errors = decode("to=pluto&area_m2=-1&mass_kg=60&warp=9&isp_s=x&to=venus&depart=never").unwrap_err();
    let keys: Vec<_> = errors.iter().map(|error| error.key.as_str()).collect();
    assert_eq!(keys, ["to", "area_m2", "warp", "isp_s", "to", "depart"]);
}

#[test]
fn an_error_reads_as_one_line() {
    let error = the_error("isp_s=1e9");
    assert_eq!(error.to_string(), "isp_s: 1e9 \u{2014} must be 50 to 10000 s");
}

#[test]
fn a_megabyte_is_refused_at_once() {
    for text in
        ["a=1&".repeat(250_000), "%".repeat(1_000_000), format!("#title={}", "\u{1f680}".repeat(250_000))]
    {
        let start = Instant::now();
        let error = the_error(&text);
        // Milliseconds here; the bound only tells "at once" from "while you wait", even on a busy machine.
        assert!(start.elapsed().as_millis() < 500, "{:?}", start.elapsed());
        assert_eq!(error.key, "link");
        assert!(error.value.len() < 300 && error.rule.contains("2000 characters"));
    }
}

#[test]
fn a_link_has_2000_characters_at_most() {
    // Empty pairs pad the link without changing its meaning.
    let padded = |characters: usize| format!("to=venus{}", "&".repeat(characters - 8));
    assert!(decode(&padded(2000)).is_ok());
    assert_eq!(the_error(&padded(2001)).key, "link");
    // The address in front does not count.
    assert!(decode(&format!("file:///{}/s.html#{}", "d".repeat(3000), padded(2000))).is_ok());
}

#[test]
fn what_is_read_can_be_written() {
    // Eighty rockets are short as they are and long once escaped: with sixteen digits in every other key beside
    // them, the canonical link would not fit.
    let title = "\u{1f680}".repeat(80);
    let eleven = "11.12345678901234";
    let tiny = "0.00001234567890123456";
    let orbit = [eleven, tiny, tiny, tiny, tiny, tiny, "2451545.123456789"].join(",");
    let short = format!("title={title}&from=orbit&from_orbit={orbit}&to=orbit&to_orbit={orbit}");
    assert!(decode(&short).is_ok());
    let mut long = format!("{short}&film=optics&optics={}&ageing={tiny},{eleven}", [tiny; 6].join(","));
    for key in KEYS
        .iter()
        .filter(|info| info.min.is_some() && !["ac_mm_s2", "segments", "step_d"].contains(&info.key))
    {
        // A number with many digits that lies in the range of each of these keys.
        let value = match key.key {
            "control" => "0.1234567890123456",
            "stage_dry" | "vinf_km_s" | "vinf_arrive_km_s" | "assembly_g_m2" | "bus_kg" => tiny,
            "isp_s" | "park_km" | "capture_km" | "temp_max_k" => "511.12345678901234",
            _ => eleven,
        };
        long = format!("{long}&{}={value}", key.key);
    }
    long.push_str("&geometry=spatial&depart=2031-05-17&arrive=rendezvous&steer=fixed&segments=200");
    assert!(long.chars().count() <= 2000);
    let error = the_error(&long);
    assert_eq!(error.key, "title");
    assert!(error.rule.contains("2000 characters"), "{}", error.rule);
}

#[test]
fn altitudes_may_be_left_uncounted() {
    check_error("park_km=-1", "park_km", "-1", "must be 50 to 1000000 km, or none");
    check_error("capture_km=", "capture_km", "", "empty");
}
