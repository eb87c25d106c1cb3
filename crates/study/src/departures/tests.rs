//! Departure studies: items, order, the law and its repair, picks.

use super::*;
use orbits::epochs::start_of_day;
use orbits::planets::Planet;

fn plan(to: Planet, first_d: f64, step_d: f64, dates: usize, accelerations: &[f64]) -> Plan {
    let reference = start_of_day(2030, 1, 1).expect("a day of the calendar");
    Plan {
        from: Traveller::Planet(Planet::Earth),
        to: Traveller::Planet(to),
        departures_j2000_d: (0..dates).map(|k| reference + first_d + step_d * k as f64).collect(),
        sails: accelerations.iter().map(|ac| units::lightness(*ac)).collect(),
    }
}

/// A row with this flight time, d; none where it is not finite.
fn row(date: usize, time_d: f64) -> Row {
    let flight = Seed { date, costate: [0.0; 6], time: units::canonical_time(time_d) };
    let best = time_d.is_finite().then_some(Best { verdict: Verdict::Converged, flight, swept: 0.0 });
    Row { sail: 0, date, branches: 1, best }
}

fn rows(times_d: &[f64]) -> Vec<Row> {
    times_d.iter().enumerate().map(|(date, time_d)| row(date, *time_d)).collect()
}

#[test]
fn items_cover_every_date_of_every_sail_once() {
    for dates in [1, 2, 11, 12, 13, 100] {
        let plan = plan(Planet::Mars, 0.0, 5.0, dates, &[0.5, 1.0]);
        let mut seen = vec![0; 2 * dates];
        for item in plan.items() {
            (item.first..item.end).for_each(|date| seen[item.sail * dates + date] += 1);
        }
        assert!(seen.iter().all(|count| *count == 1), "{dates} dates");
    }
}

#[test]
fn items_span_at_most_a_quarter_of_the_synodic_period() {
    // Synodic periods with the Earth (common knowledge): Mars 780 d, Mercury 116 d.
    for (to, step_d, longest) in
        [(Planet::Mars, 10.0, 12), (Planet::Mars, 60.0, 3), (Planet::Mercury, 10.0, 2)]
    {
        let items = plan(to, 0.0, step_d, 50, &[1.0]).items();
        assert_eq!(items.iter().map(|item| item.end - item.first).max(), Some(longest), "{to:?} {step_d}");
    }
    // Steps longer than that: every date by itself.
    assert_eq!(plan(Planet::Mercury, 0.0, 100.0, 5, &[1.0]).items().len(), 5);
}

#[test]
fn the_order_of_items_changes_no_digit() {
    let plan = plan(Planet::Mars, 250.0, 40.0, 14, &[0.8, 1.2]);
    let items = plan.items();
    assert!(items.len() >= 6);
    let forwards: Vec<Row> = items.iter().flat_map(|item| evaluate(&plan, item)).collect();
    // Shuffled by a stride prime to their number.
    let shuffled = (0..items.len()).map(|i| &items[(5 * i + 2) % items.len()]);
    let shuffled: Vec<Row> = shuffled.flat_map(|item| evaluate(&plan, item)).collect();
    assert_ne!(forwards, shuffled);
    assert_eq!(gathered(&forwards), gathered(&shuffled));
}

#[test]
fn arrivals_keep_their_law_and_more_acceleration_is_never_slower() {
    let plan = plan(Planet::Mars, 200.0, 25.0, 24, &[0.7, 1.0, 1.4]);
    let rows = gathered(&plan.items().iter().flat_map(|item| evaluate(&plan, item)).collect::<Vec<_>>());
    assert_eq!(mends(&plan, &rows), []);
    for (weak, strong) in rows.iter().zip(&rows[24..]) {
        let (weak, strong) = (weak.best.expect("found"), strong.best.expect("found"));
        assert_eq!(weak.verdict, Verdict::Converged);
        assert!(strong.flight.time < weak.flight.time, "date {}", weak.flight.date);
    }
}

#[test]
fn a_broken_law_marks_every_date_that_could_have_waited() {
    let plan = plan(Planet::Mars, 0.0, 10.0, 6, &[1.0]);
    // Arrivals on days 500, 530, 520, 535, nothing, 545.
    let rows = rows(&[500.0, 520.0, 500.0, 505.0, f64::NAN, 495.0]);
    let laws = Law::of_sail(&plan, &rows);
    use Law::*;
    assert_eq!(laws, [Kept, Broken, Kept, Kept, NotTested, Kept]);
    let items = mends(&plan, &rows);
    assert_eq!(items.iter().map(|item| (item.first, item.end)).collect::<Vec<_>>(), [(1, 2), (4, 5)]);
    let dates = |item: &Item| item.seeds.iter().flatten().map(|seed| seed.date).collect::<Vec<_>>();
    assert_eq!(dates(&items[0]), [0, 1, 2]);
    assert_eq!(dates(&items[1]), [3, 5]);
}

#[test]
fn drifting_elements_are_no_broken_law() {
    let plan = plan(Planet::Mars, 0.0, 10.0, 2, &[1.0]);
    // Ten days of waiting may cost a hundredth of a day.
    assert_eq!(Law::of_sail(&plan, &rows(&[500.0, 489.995]))[0], Law::Kept);
    assert_eq!(Law::of_sail(&plan, &rows(&[500.0, 489.985]))[0], Law::Broken);
}

#[test]
fn a_lost_branch_is_mended_from_its_neighbours() {
    let plan = plan(Planet::Mars, 300.0, 10.0, 6, &[1.0]);
    let good = gathered(&plan.items().iter().flat_map(|item| evaluate(&plan, item)).collect::<Vec<_>>());
    // Spoil two dates: one without a flight, one with a flight that arrives too late.
    let mut spoilt = good.clone();
    spoilt[2].best = None;
    if let Some(best) = &mut spoilt[3].best {
        best.flight.time *= 1.3;
    }
    let items = mends(&plan, &spoilt);
    assert_eq!(items.len(), 1);
    spoilt.extend(items.iter().flat_map(|item| evaluate(&plan, item)));
    let mended = gathered(&spoilt);
    assert_eq!(mends(&plan, &mended), []);
    for (good, mended) in good.iter().zip(&mended) {
        let (good, mended) = (good.best.expect("found"), mended.best.expect("mended"));
        assert!((mended.flight.time / good.flight.time - 1.0).abs() < 1e-9, "date {}", good.flight.date);
    }
}

#[test]
fn picks_are_minima_of_time_and_the_earliest_arrival() {
    let plan = plan(Planet::Mars, 0.0, 10.0, 7, &[1.0]);
    let rows = rows(&[500.0, 490.0, 485.0, 487.0, f64::NAN, 480.0, 490.0]);
    let picks = picks(&plan, &rows);
    let told: Vec<_> = picks.iter().map(|pick| (pick.date, pick.kind, pick.at_edge, pick.leave_by)).collect();
    // The first three dates arrive on days 500, 500 and 505: leaving on the second costs nothing.
    assert_eq!(
        told,
        [(0, Kind::Earliest, true, 1), (2, Kind::Shortest, false, 2), (5, Kind::Shortest, false, 5),]
    );
    let slips: Vec<_> = picks[1].slips.iter().map(|slip| (slip.slip_d, slip.arrive_later_d)).collect();
    assert_eq!(slips.len(), 2, "slips of one and of four steps; two steps lead to the date without a flight");
    assert!((slips[0].1 - 12.0).abs() < 1e-9 && (slips[1].0 - 40.0).abs() < 1e-9);
}
