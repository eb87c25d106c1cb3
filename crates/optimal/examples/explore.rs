//! x
use optimal::spatial::{curves::*, ends::*, polish::*, rendezvous::*};
use orbits::{ephemeris::Traveller, planets::Planet, units};
use std::time::Instant;
fn st(t: &Traveller, d: f64) -> Option<State> {
    let s = t.state(d).ok()?;
    let (r, v) = (s.position, s.velocity);
    Some([r.x, r.y, r.z, v.x, v.y, v.z])
}
fn main() {
    for p in [Planet::Mars, Planet::Venus, Planet::Mercury] {
        for ac in [0.2, 0.3, 0.5, 1.0, 2.0, 4.0, 6.0] {
            let mut times = vec![];
            let mut br = 0;
            let mut dates = 0;
            let mut prev = f64::NEG_INFINITY;
            let mut viol = vec![];
            let mut bad = 0;
            let fe = Traveller::Planet(Planet::Earth);
            let ft = Traveller::Planet(p);
            let syn = orbits::hohmann::synodic_d(365.25, ft.elements(0.0).semi_major_axis.powf(1.5) * 365.25)
                .unwrap();
            for k in 0..24 {
                let d0 = 9131.0 + syn * k as f64 / 24.0;
                let t = Instant::now();
                let s = Setting {
                    ends: Ends::new(fe.elements(d0), ft.elements(d0)),
                    lightness: units::lightness(ac),
                    tolerance: 1e-9,
                };
                let from = |x: f64| st(&fe, d0 + units::days(x));
                let to = |x: f64| st(&ft, d0 + units::days(x));
                let c = Conditions {
                    lightness: s.lightness,
                    from: &from,
                    to: &to,
                    target_axis: s.ends.to.semi_major_axis,
                };
                let f = flights(&s, &c);
                times.push(t.elapsed().as_secs_f64() * 1e3);
                br += f.len();
                for e in &f {
                    if format!("{:?}", e.evidence.verdict()) != "Converged" {
                        bad += 1;
                        println!("{:e} {:e}", e.evidence.position_error, e.evidence.speed_error);
                    }
                }
                if !f.is_empty() {
                    dates += 1;
                    let m = units::days(f[0].flight.time);
                    if d0 + m < prev - 0.01 {
                        viol.push((k, prev - d0 - m));
                    }
                    prev = d0 + m;
                }
            }
            times.sort_by(f64::total_cmp);
            println!(
                "{:?} {ac} dates {dates} branches {br} bad {bad} viol {viol:?} median {:.1} ms max {:.1}",
                p, times[12], times[23]
            );
        }
    }
}
