//! Studies from link to report: refusals, rows that open the flight they tell of, order, axes.

use super::*;
use crate::link::decode;
use crate::report::Status;
use crate::run::run;

const LINK: &str = "ac_mm_s2=1&geometry=spatial&arrive=rendezvous";

fn open(name: &str, keys: &str) -> Result<Study, Vec<LinkError>> {
    Study::open(name, &decode(&format!("{LINK}&{keys}")).expect("a link"))
}

/// Everything evaluated, mends included.
fn evaluated(study: &Study) -> Vec<Point> {
    let mut points: Vec<Point> = study.items().iter().flat_map(|item| study.evaluate(item)).collect();
    points.extend(study.mends(&points).iter().flat_map(|item| study.evaluate(item)));
    points
}

#[track_caller]
fn check_refused(name: &str, link: &str, key: &str, part: &str) {
    let errors = Study::open(name, &decode(link).expect("a link")).expect_err("refused on purpose");
    assert_eq!(errors.len(), 1, "{errors:?}");
    assert_eq!(errors[0].key, key);
    assert!(errors[0].rule.contains(part), "{}", errors[0].rule);
}

#[test]
fn what_is_not_studied_says_what_to_do() {
    check_refused("days", LINK, "study", "dates or map");
    check_refused("dates", "arrive=rendezvous", "geometry", "geometry=spatial");
    check_refused("dates", "geometry=spatial", "arrive", "arrive=rendezvous");
    check_refused("dates", &format!("{LINK}&vinf_km_s=1"), "vinf_km_s", "leave it out");
    check_refused("dates", &format!("{LINK}&film=aluminised"), "film", "film=ideal");
    check_refused("map", &format!("{LINK}&area_range=1000,9000,5"), "area_range", "mass");
    check_refused("dates", &format!("{LINK}&span=1800-01-01,2050-12-31&step_d=1"), "span", "widen step_d");
}

#[test]
fn the_departure_date_of_the_link_does_not_matter() {
    let keys = "span=2031-01-01,2031-02-10&step_d=20";
    let (with, without) =
        (open("dates", &format!("{keys}&depart=2035-05-05")).unwrap(), open("dates", keys).unwrap());
    assert_eq!(with.report(&evaluated(&with)).rows, without.report(&evaluated(&without)).rows);
}

#[test]
fn dates_step_from_the_first_to_at_most_the_last() {
    let dates =
        |keys: &str| open("dates", keys).unwrap().dates().iter().map(Date::to_string).collect::<Vec<_>>();
    assert_eq!(dates("span=2032-02-28,2032-03-03&step_d=2"), ["2032-02-28", "2032-03-01", "2032-03-03"]);
    assert_eq!(dates("span=2031-12-31,2032-01-06&step_d=5"), ["2031-12-31", "2032-01-05"]);
    assert_eq!(dates("span=2031-12-31,2031-12-31"), ["2031-12-31"]);
}

#[test]
fn a_row_tells_of_the_flight_that_its_link_opens() {
    for (name, keys) in [
        ("dates", "span=2030-06-01,2032-06-01&step_d=91"),
        ("dates", "to=venus&span=2030-06-01,2032-01-01&step_d=83"),
        ("map", "ac_range=0.6,2.4,3&span=2031-01-01,2032-12-31&step_d=300"),
    ] {
        let study = open(name, keys).unwrap();
        let report = study.report(&evaluated(&study));
        assert_eq!(report.link, format!("v=1&{}", canonical(keys)));
        for row in &report.rows {
            assert_eq!(row.status, Status::Converged, "{row:?}");
            assert_eq!(row.law, LawMark::Kept, "{row:?}");
            let flight = run(&decode(&row.link).expect("a link")).expect("not refused").report.flight;
            assert_eq!(flight.depart.as_deref().map(|instant| &instant[..10]), Some(row.depart.as_str()));
            // Both polish the same equations to 1e-10 of the target's size and speed.
            let (told, opened) = (row.time_d.expect("found"), flight.time_d.expect("found"));
            assert!((told / opened - 1.0).abs() < 1e-8, "{}: {told} against {opened}", row.link);
            let turns = row.revolutions.expect("found") - flight.revolutions.expect("found");
            assert!(turns.abs() < 1e-8, "{}: {turns:e} turns", row.link);
            assert_eq!(row.arrive.as_deref().map(|a| &a[..19]), flight.arrive.as_deref().map(|a| &a[..19]));
        }
    }
}

/// The keys in the order in which links write them, after those of [`LINK`].
fn canonical(keys: &str) -> String {
    encode(&decode(&format!("{LINK}&{keys}")).expect("a link")).trim_start_matches("v=1&").to_owned()
}

#[test]
fn order_changes_no_digit_and_unfinished_studies_say_so() {
    let study = open("map", "ac_range=0.8,1.2,2&span=2031-01-01,2031-09-01&step_d=60").unwrap();
    let items = study.items();
    assert!(items.len() >= 4);
    let forwards: Vec<Point> = items.iter().flat_map(|item| study.evaluate(item)).collect();
    let backwards: Vec<Point> = items.iter().rev().flat_map(|item| study.evaluate(item)).collect();
    assert_eq!(study.report(&forwards), study.report(&backwards));
    let half = study.report(&forwards[..3]);
    assert_eq!(half.rows.len(), 3);
    assert!(half.notes.iter().any(|note| note.contains("Not finished: 3 of 10")), "{:?}", half.notes);
    assert!(study.report(&forwards).notes.iter().all(|note| !note.contains("Not finished")));
}

#[test]
fn areas_take_the_place_of_accelerations() {
    let link = "area_m2=6400&mass_kg=60&geometry=spatial&arrive=rendezvous&area_range=4000,9000,2\
                &span=2031-01-01,2031-01-01";
    let study = Study::open("map", &decode(link).unwrap()).unwrap();
    let report = study.report(&evaluated(&study));
    assert_eq!(report.axes[1].field, "area_m2");
    assert_eq!(report.axes[1].values, [AxisValue::Number(4000.0), AxisValue::Number(9000.0)]);
    assert_eq!(report.rows[0].area_m2, Some(4000.0));
    assert!(report.rows[0].link.starts_with("v=1&area_m2=4000&mass_kg=60"), "{}", report.rows[0].link);
    // 9000 to 4000 at one mass: 2.25 times the acceleration, and a shorter flight.
    assert!((report.rows[1].ac_mm_s2 / report.rows[0].ac_mm_s2 - 2.25).abs() < 1e-12);
    assert!(report.rows[1].time_d < report.rows[0].time_d);
}

#[test]
fn picks_cost_what_the_rows_say() {
    let study = open("dates", "span=2030-01-01,2034-01-01&step_d=40").unwrap();
    let report = study.report(&evaluated(&study));
    let row = |date: &str| report.rows.iter().find(|row| row.depart == date).expect("a row");
    let shortest: Vec<_> =
        report.best.iter().filter(|pick| pick.kind == Kind::Shortest && !pick.at_edge).collect();
    // Four years hold at least one opposition of Mars and its window.
    assert!(!shortest.is_empty() && shortest.len() <= 4, "{}", shortest.len());
    for pick in shortest {
        assert_eq!(pick.time_d, row(&pick.depart).time_d);
        assert!(pick.slips.iter().all(|slip| slip.arrive_later_d > 0.0));
        let slip = pick.slips.first().expect("not the last date");
        assert_eq!(slip.slip_d, 40.0);
        assert!((slip.time_change_d + 40.0 - slip.arrive_later_d).abs() < 1e-9 && slip.time_change_d > 0.0);
    }
}
