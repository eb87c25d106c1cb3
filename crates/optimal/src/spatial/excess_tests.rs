//! Excess.
use super::*;
use crate::spatial::curves::Setting;
use crate::spatial::ends::{Ends, ordered};
use crate::spatial::rendezvous::flights;
use orbits::{ephemeris::Traveller, planets::Planet, units};

fn with_date<R>(planet: Planet, ac: f64, date: f64, then: impl FnOnce(&Setting, &Conditions<'_>) -> R) -> R {
    let (earth, body) = (Traveller::Planet(Planet::Earth), Traveller::Planet(planet));
    let ends = Ends::new(earth.elements(date), body.elements(date));
    let setting = Setting { ends, lightness: units::lightness(ac), tolerance: 1e-9 };
    let from = |x: f64| Some(ordered(&earth.state(date + units::days(x)).ok()?));
    let to = |x: f64| Some(ordered(&body.state(date + units::days(x)).ok()?));
    let conditions = Conditions {
        lightness: setting.lightness,
        from: &from,
        to: &to,
        target_axis: ends.to.semi_major_axis,
    };
    then(&setting, &conditions)
}

#[test]
fn explore() {
    for (jd, w, wa, expected) in
        [(2462502.5, 0.0, 1.0, 616.6999581), (2462502.5, 2.0, 0.0, 646.2790414), (2462502.5, 2.0, 2.0, 0.0)]
    {
        with_date(Planet::Mars, 1.0, jd - 2451545.0, |setting, conditions| {
            let plain = flights(setting, conditions);
            let t = std::time::Instant::now();
            let allowance =
                Allowance { departure: units::canonical_speed(w), arrival: units::canonical_speed(wa) };
            let n = plain.len();
            for p in &plain {
                println!("plain {:.5}", units::days(p.flight.time));
            }
            let f = granted(Kind::Meeting, conditions, &allowance, plain);
            println!("{w} {wa} expected {expected} plain {n} {:.1} ms", t.elapsed().as_secs_f64() * 1e3);
            for x in f {
                println!(
                    "   {:.7} used {:.5} {:.5} {:?} {:?}",
                    units::days(x.flight.time),
                    units::km_per_s(x.excess.departure),
                    units::km_per_s(x.excess.arrival),
                    x.evidence.verdict(),
                    x.evidence
                );
            }
        });
    }
}

#[test]
fn survey() {
    for planet in [Planet::Mars, Planet::Venus, Planet::Mercury] {
        for ac in [0.5, 1.0, 2.0] {
            let cases = [(1.0, 0.0), (3.0, 0.0), (5.0, 0.0), (0.0, 2.0), (0.0, 5.0), (3.0, 3.0)];
            let mut n0 = 0;
            let mut n = [0; 6];
            let mut bad = [0; 6];
            let mut used = [0; 6];
            let mut slower = [0; 6];
            let mut nodate = [0; 6];
            let mut ms = [0.0; 6];
            for k in 0..12 {
                let syn = orbits::hohmann::synodic_d(
                    365.25,
                    Traveller::Planet(planet).elements(0.0).semi_major_axis.powf(1.5) * 365.25,
                )
                .unwrap();
                with_date(planet, ac, 9131.0 + syn * k as f64 / 12.0, |setting, conditions| {
                    let plain = flights(setting, conditions);
                    n0 += plain.len();
                    for (i, (w, wa)) in cases.into_iter().enumerate() {
                        let allowance = Allowance {
                            departure: units::canonical_speed(w),
                            arrival: units::canonical_speed(wa),
                        };
                        let t = std::time::Instant::now();
                        let f = granted(Kind::Meeting, conditions, &allowance, plain.clone());
                        ms[i] += t.elapsed().as_secs_f64() * 1e3;
                        let good: Vec<_> =
                            f.iter().filter(|x| x.evidence.verdict() == Verdict::Converged).collect();
                        bad[i] += f.len() - good.len();
                        n[i] += good.len();
                        if good.len() < plain.len() { println!("{planet:?} {ac} {k} {w} {wa}: plain {:?} found {:?}", plain.iter().map(|x| units::days(x.flight.time)).collect::<Vec<_>>(), f.iter().map(|x| (units::days(x.flight.time), x.evidence.hamiltonian_at_arrival, units::km_per_s(x.excess.departure))).collect::<Vec<_>>()); }
                        used[i] += good
                            .iter()
                            .filter(|x| {
                                x.excess.departure < 0.999 * allowance.departure
                                    || x.excess.arrival < 0.999 * allowance.arrival
                            })
                            .count();
                        if good.is_empty() {
                            nodate[i] += 1
                        } else if !plain.is_empty() && good[0].flight.time > plain[0].flight.time {
                            slower[i] += 1
                        }
                    }
                });
            }
            println!(
                "{planet:?} {ac}: plain {n0} kept {n:?} bad {bad:?} part {used:?} slower {slower:?} nodate {nodate:?} ms/branch {:?}",
                ms.map(|x| (x / n0 as f64).round())
            );
        }
    }
}
