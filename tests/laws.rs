//! Laws that every answer must obey, over random scenarios, through the door that page and command line use.

use proptest::prelude::*;
use proptest::test_runner::{RngAlgorithm, TestRng, TestRunner};
use scenario::keys::KEYS;
use scenario::link::decode;
use scenario::report::{Report, Status};
use scenario::run::{Answer, run};
use tests::{flown, time_d};

/// The same cases on every machine and at every run.
fn check<S: Strategy>(cases: u32, strategy: S, law: impl Fn(S::Value) -> Result<(), TestCaseError>) {
    let config = ProptestConfig { failure_persistence: None, ..ProptestConfig::with_cases(cases) };
    let seed = TestRng::from_seed(RngAlgorithm::ChaCha, &[17; 32]);
    if let Err(failure) = TestRunner::new_with_rng(config, seed).run(&strategy, law) {
        panic!("{failure}");
    }
}

/// A circle to circle link with everything said.
fn link(from_au: f64, to_au: f64, ac_mm_s2: f64) -> String {
    format!("ac_mm_s2={ac_mm_s2}&from=orbit&from_orbit={from_au}&to=orbit&to_orbit={to_au}")
}

/// Logarithm of a target radius between 0.2 and 40 au, not nearer to 1 au than a thousandth.
fn target_ln() -> impl Strategy<Value = f64> {
    (0.2f64.ln()..40f64.ln()).prop_filter("not the start circle", |ln| ln.abs() > 1e-3)
}

/// A characteristic acceleration of the checked range, mm/s^2, evenly in its logarithm.
fn acceleration() -> impl Strategy<Value = f64> {
    (0.05f64.ln()..5.8f64.ln()).prop_map(f64::exp)
}

/// JSON with NaN told apart from null: serde_json would write both as null.
fn holds_nan(report: &Report) -> bool {
    format!("{report:?}").contains("NaN") || report.sentence.contains("NaN")
}

#[test]
fn more_acceleration_is_never_slower() {
    check(60, (target_ln(), acceleration(), 1.001f64..1.03), |(ln, ac, more)| {
        let (slow, fast) = (time_d(&link(1.0, ln.exp(), ac)), time_d(&link(1.0, ln.exp(), ac * more)));
        // Times are good to 1e-10; the smallest step here shortens a flight by some 1e-4.
        prop_assert!(fast < slow, "{fast} d at {} against {slow} d at {ac}, to {} au", ac * more, ln.exp());
        Ok(())
    });
}

#[test]
fn scaling_both_radii_scales_time_by_the_three_halves_power() {
    // The force falls with the square of distance as gravity does, so the lightness number is the same everywhere.
    // Radii stay within the 0.2 to 40 au that a link takes.
    let scales = 0.75f64..4.0;
    check(60, (-1.3f64..1.3, acceleration(), scales), |(ln, ac, scale)| {
        prop_assume!(ln.abs() > 1e-3);
        let to_au = ln.exp();
        let (small, large) = (time_d(&link(1.0, to_au, ac)), time_d(&link(scale, scale * to_au, ac)));
        prop_assert!(
            (large / small / scale.powf(1.5) - 1.0).abs() < 1e-9,
            "{small} d and {large} d, {scale}"
        );
        Ok(())
    });
}

#[test]
fn the_impulsive_transfer_back_costs_what_the_transfer_out_does() {
    check(20, (target_ln(), acceleration()), |(ln, ac)| {
        let (out, back) = (flown(&link(1.0, ln.exp(), ac)).report, flown(&link(ln.exp(), 1.0, ac)).report);
        let (out, back) = (out.impulsive.heliocentric, back.impulsive.heliocentric);
        prop_assert_eq!(out.time_d, back.time_d);
        prop_assert!((out.dv_total_km_s / back.dv_total_km_s - 1.0).abs() < 1e-14);
        Ok(())
    });
}

/// Texts that often decode and often do not: known keys with values of all kinds.
fn texts() -> impl Strategy<Value = String> {
    let value = prop_oneof![
        3 => (-3f64..5.0).prop_map(|ln| ln.exp().to_string()),
        2 => prop::sample::select(&["earth", "mars", "venus", "mercury", "orbit", "local", "fixed", "fastest"][..])
            .prop_map(str::to_owned),
        2 => prop::sample::select(&["0.5", "1", "90", "-35", "400", "none", "coplanar", "ideal"][..])
            .prop_map(str::to_owned),
        1 => "[-+0-9.,eEnaif ]{0,8}",
    ];
    let useful =
        ["ac_mm_s2", "from", "to", "from_orbit", "to_orbit", "steer", "cone_deg", "deadline_d", "isp_s"];
    let key = prop_oneof![
        4 => prop::sample::select(useful.to_vec()).prop_map(str::to_owned),
        1 => prop::sample::select(KEYS).prop_map(|info| info.key.to_owned()),
    ];
    prop::collection::vec((key, value), 0..4).prop_map(|pairs| {
        pairs.iter().map(|(key, value)| format!("{key}={value}")).collect::<Vec<_>>().join("&")
    })
}

#[test]
fn whatever_decodes_is_refused_with_reasons_or_answered_with_a_status() {
    let answered = std::cell::Cell::new(0u32);
    check(1500, texts(), |text| {
        let Ok(scenario) = decode(&text) else { return Ok(()) };
        match run(&scenario) {
            Err(reasons) => {
                prop_assert!(!reasons.is_empty(), "{text}: refused without a reason");
                for reason in reasons {
                    prop_assert!(!reason.rule.is_empty() && !reason.key.is_empty(), "{text}");
                }
            }
            Ok(Answer { report, .. }) => {
                answered.set(answered.get() + 1);
                prop_assert!(!holds_nan(&report), "{text}: {report:?}");
                let known = report.flight.time_d.is_some();
                match report.flight.status {
                    Status::Converged | Status::Flown | Status::Approximate => prop_assert!(known, "{text}"),
                    Status::NotConverged | Status::Unreachable => {
                        prop_assert!(!known && report.flight.message.is_some(), "{text}");
                    }
                }
            }
        }
        Ok(())
    });
    // Random texts must reach the solver, or this would be a test of the decoder alone.
    assert!(answered.get() > 150, "only {} texts of 1500 were answered", answered.get());
}

#[test]
fn the_same_link_gives_the_same_report_to_the_last_bit() {
    check(20, (target_ln(), acceleration(), any::<bool>()), |(ln, ac, local)| {
        let text = link(1.0, ln.exp(), ac) + if local { "&steer=local" } else { "" };
        let json = || {
            let Answer { report, columns } = flown(&text);
            (serde_json::to_string(&report).expect("JSON"), serde_json::to_string(&columns).expect("JSON"))
        };
        prop_assert_eq!(json(), json());
        Ok(())
    });
}

#[test]
fn the_canonical_link_of_a_report_gives_that_report() {
    check(40, texts(), |text| {
        let Ok(first) = decode(&text).and_then(|scenario| run(&scenario)) else { return Ok(()) };
        let again = flown(&first.report.link);
        prop_assert_eq!(first.report, again.report);
        Ok(())
    });
}

#[test]
fn a_deadline_equal_to_the_flight_time_leaves_nothing_in_hand() {
    check(20, (-1.2f64..1.8, 0.2f64..4.0), |(ln, ac)| {
        prop_assume!(ln.abs() > 0.02);
        let text = link(1.0, ln.exp(), ac);
        let time_d = time_d(&text);
        prop_assume!((1.0..1e5).contains(&time_d));
        let margin = flown(&format!("{text}&deadline_d={time_d}")).report.flight.margin.expect("a margin");
        prop_assert!(margin.days_in_hand.abs() < 1e-6, "{margin:?}");
        // The acceleration that just makes the date is found to 1e-8 of the time.
        prop_assert!(margin.mass_growth_pct.expect("solved").abs() < 1e-4, "{margin:?}");
        prop_assert!(margin.ac_in_hand_pct.expect("solved").abs() < 1e-4, "{margin:?}");
        Ok(())
    });
}

#[test]
fn a_craft_grown_by_its_margin_just_makes_the_date() {
    let crafts = (1000f64..9000.0, 20f64..80.0, 1.02f64..1.6);
    check(20, crafts, |(area_m2, mass_kg, slack)| {
        let of = |mass_kg: f64| format!("area_m2={area_m2}&mass_kg={mass_kg}&to=venus");
        let deadline_d = time_d(&of(mass_kg)) * slack;
        let margin = flown(&format!("{}&deadline_d={deadline_d}", of(mass_kg))).report.flight.margin;
        let margin = margin.expect("a margin");
        let growth = margin.mass_growth_pct.expect("a longer flight needs less acceleration") / 100.0;
        prop_assert!(growth > 0.0 && margin.days_in_hand > 0.0, "{margin:?}");
        // Acceleration goes as one over mass.
        let lost = margin.ac_in_hand_pct.expect("solved with it") / 100.0;
        prop_assert!(((1.0 + growth) * (1.0 - lost) - 1.0).abs() < 1e-12, "{margin:?}");
        let grown_d = time_d(&of(mass_kg * (1.0 + growth)));
        prop_assert!((grown_d / deadline_d - 1.0).abs() < 1e-7, "{grown_d} d instead of {deadline_d} d");
        Ok(())
    });
}

#[test]
fn identical_ends_take_no_time() {
    check(20, (0.2f64..40.0, acceleration()), |(au, ac)| {
        let report = flown(&link(au, au, ac)).report;
        prop_assert_eq!(report.flight.status, Status::Converged);
        prop_assert_eq!(report.flight.time_d, Some(0.0));
        prop_assert_eq!(report.impulsive.heliocentric.dv_total_km_s, 0.0);
        prop_assert_eq!(report.impulsive.synodic_d, None);
        Ok(())
    });
    for planet in ["mercury", "venus", "earth", "mars", "jupiter", "saturn", "uranus", "neptune"] {
        assert_eq!(time_d(&format!("from={planet}&to={planet}")), 0.0, "{planet}");
    }
}

#[test]
fn local_steering_ends_on_the_semi_major_axis_with_the_eccentricity_it_states() {
    check(30, (-1.4f64..1.6, 0.1f64..3.0), |(ln, ac)| {
        prop_assume!(ln.abs() > 0.01);
        let Answer { report, columns } = flown(&format!("{}&steer=local", link(1.0, ln.exp(), ac)));
        prop_assert_eq!(report.flight.status, Status::Flown);
        let last = columns.t_d.len() - 1;
        let (x, y) = (columns.x_au[last], columns.y_au[last]);
        // From the columns alone, in au and km: vis-viva and the eccentricity vector.
        let constants = &report.program.constants;
        let gm = constants.sun_gm_km3_s2 / constants.au_km;
        let (vx, vy) = (columns.vx_km_s[last], columns.vy_km_s[last]);
        let (r, v2) = (x.hypot(y), vx * vx + vy * vy);
        let axis_au = 1.0 / (2.0 / r - v2 / gm);
        prop_assert!((axis_au / ln.exp() - 1.0).abs() < 1e-9, "{axis_au} au instead of {}", ln.exp());
        let along = x * vx + y * vy;
        let eccentricity =
            ((v2 / gm - 1.0 / r) * x - along / gm * vx).hypot((v2 / gm - 1.0 / r) * y - along / gm * vy);
        let stated = report.flight.final_eccentricity.expect("stated");
        prop_assert!((eccentricity - stated).abs() < 1e-9, "{eccentricity} but {stated} is stated");
        // No optimum is promised, so none is proven.
        prop_assert!(report.flight.proof.hamiltonian_drift.is_none());
        Ok(())
    });
}

#[test]
fn the_sail_never_pulls_sunward_and_no_flight_outruns_its_own_push() {
    check(30, (target_ln(), acceleration()), |(ln, ac)| {
        let Answer { report, columns } = flown(&link(1.0, ln.exp(), ac));
        for (cone, (distance, push)) in
            columns.cone_deg.iter().zip(columns.distance_au.iter().zip(&columns.sail_accel_mm_s2))
        {
            prop_assert!(cone.abs() <= 90.0 + 1e-9, "cone angle {cone}");
            // a_c (1 au/r)^2 cos^2 of the cone angle, written once more from the columns.
            let expected = ac / (distance * distance) * cone.to_radians().cos().powi(2);
            prop_assert!((push - expected).abs() < 1e-9 * ac / (distance * distance), "{push} {expected}");
        }
        // Gravity does no work between circles but what their energies differ by: the sail must have given at least
        // the difference of circular speeds.
        let least = (1.0 - (-0.5 * ln).exp()).abs() * 29.78;
        prop_assert!(report.flight.sail_dv_km_s.expect("flown") > least);
        Ok(())
    });
}
