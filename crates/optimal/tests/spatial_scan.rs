//! Random first costates against the pipeline: none may lead to a faster meeting.
//!
//! Shooting from random starts is no way to solve these flights (few converge), but it knows nothing of the pipeline's
//! curves, so a branch that they all miss would have a chance to show.

use nalgebra::Vector6;
use optimal::certificate::Verdict;
use optimal::spatial::curves::Setting;
use optimal::spatial::ends::{Ends, ordered};
use optimal::spatial::polish::{Conditions, Flight, Kind, sought};
use optimal::spatial::prove::prove;
use optimal::spatial::rendezvous::flights;
use orbits::ephemeris::Traveller;
use orbits::epochs::start_of_day;
use orbits::planets::Planet;
use orbits::units;

/// Random starts a date.
const STARTS: usize = 100;

/// Repeatable numbers in [0, 1): a linear congruential generator (D. E. Knuth's constants).
struct Dice(u64);

impl Dice {
    fn roll(&mut self) -> f64 {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 11) as f64 / (1u64 << 53) as f64
    }
}

#[test]
fn random_starts_never_beat_the_pipeline() {
    let mut dice = Dice(20_310_201);
    let mut converged = 0;
    for (planet, ac_mm_s2, (year, month, day)) in [
        (Planet::Mars, 1.0, (2030, 5, 11)),
        (Planet::Mars, 2.0, (2031, 6, 5)),
        (Planet::Venus, 1.0, (2030, 7, 15)),
        (Planet::Venus, 2.0, (2031, 1, 25)),
        (Planet::Mercury, 2.0, (2030, 3, 1)),
    ] {
        let depart = start_of_day(year, month, day).expect("a day of the calendar");
        let (earth, body) = (Traveller::Planet(Planet::Earth), Traveller::Planet(planet));
        let at = |who: Traveller| {
            move |time: f64| who.state(depart + units::days(time)).ok().map(|state| ordered(&state))
        };
        let (from, to) = (at(earth), at(body));
        let ends = Ends::new(earth.elements(depart), body.elements(depart));
        let lightness = units::lightness(ac_mm_s2);
        let setting = Setting { ends, lightness, tolerance: 1e-7 };
        let conditions = Conditions { lightness, from: &from, to: &to, target_axis: ends.to.semi_major_axis };
        let best = flights(&setting, &conditions)[0].flight;
        for _ in 0..STARTS {
            // Around the answer, far enough to forget it: every component by up to 0.15, the time by up to 40 %.
            let shaken = Vector6::from_fn(|i, _| best.costate[i] + 0.3 * (dice.roll() - 0.5));
            let time = best.time * (0.6 + 0.8 * dice.roll());
            let start = Flight { costate: shaken.normalize(), departure: 0.0, time, arrival: time };
            let Some(found) = sought(Kind::Meeting, &conditions, start, 1e-12) else { continue };
            let Some(flown) = prove(&conditions, &found, 1e-13) else { continue };
            if flown.evidence.verdict() != Verdict::Converged {
                continue;
            }
            converged += 1;
            assert!(
                found.time > best.time * (1.0 - 1e-9),
                "{planet:?} {ac_mm_s2} {year}-{month}-{day}: {} d beats {} d",
                units::days(found.time),
                units::days(best.time)
            );
        }
    }
    // A scan of which nothing converges would prove nothing.
    assert!(converged >= 10, "only {converged} random starts converged");
}
