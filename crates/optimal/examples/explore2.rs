//! x
use optimal::spatial::{curves::*, ends::*, orbit_match::*, polish::*};
use orbits::{ephemeris::Traveller, kepler::Elements, planets::Planet, units};
use std::time::Instant;
fn st(t: &Elements, x: f64) -> Option<State> {
    let s = t.later(1.0, x).state(1.0).ok()?;
    let (r, v) = (s.position, s.velocity);
    Some([r.x, r.y, r.z, v.x, v.y, v.z])
}
fn run(name: &str, fe: Elements, ft: Elements, ac: f64) -> (bool, bool, f64) {
    let t = Instant::now();
    let s = Setting { ends: Ends::new(fe, ft), lightness: units::lightness(ac), tolerance: 1e-9 };
    let from = |x: f64| st(&fe, x);
    let to = |x: f64| st(&ft, x);
    let c =
        Conditions { lightness: s.lightness, from: &from, to: &to, target_axis: s.ends.to.semi_major_axis };
    let a = from_given_point(&s, &c);
    let ta = t.elapsed().as_secs_f64() * 1e3;
    let t = Instant::now();
    let f = free_ends(&s, &c);
    let tb = t.elapsed().as_secs_f64() * 1e3;
    let ok = f.first().is_some_and(|x| format!("{:?}", x.evidence.verdict()) == "Converged");
    println!(
        "{name} {ac} given {:?} {:?} ({ta:.0} ms) free {:?} {ok} ({tb:.0} ms)",
        a.as_ref().map(|x| units::days(x.flight.time)),
        a.as_ref().map(|x| x.evidence.verdict()),
        f.iter().map(|x| units::days(x.flight.time)).collect::<Vec<_>>()
    );
    (a.is_some(), ok, tb)
}
fn main() {
    let fe = Traveller::Planet(Planet::Earth).elements(0.0);
    for p in [Planet::Mars, Planet::Venus, Planet::Mercury, Planet::Jupiter] {
        for ac in [0.5, 1.0, 2.0] {
            run(p.name(), fe, Traveller::Planet(p).elements(0.0), ac);
        }
    }
    let mut seed = 12345u64;
    let mut rnd = || {
        seed = seed.wrapping_mul(6364136223846793005).wrapping_add(1442695040888963407);
        (seed >> 11) as f64 / (1u64 << 53) as f64
    };
    for (name, imax, emax, a0, a1) in [("mild", 15.0, 0.3, 0.3, 3.0), ("wide", 60.0, 0.6, 0.6, 3.0)] {
        let (mut g, mut o) = (0, 0);
        for k in 0..100 {
            let a = (0.3f64.ln() + rnd() * (5.0f64 / 0.3).ln()).exp();
            let e = rnd() * emax;
            let i = rnd() * imax;
            let ac = ((a0 as f64).ln() + rnd() * ((a1 / a0) as f64).ln()).exp();
            let ft = Elements {
                semi_major_axis: a,
                eccentricity: e,
                inclination_rad: (i as f64).to_radians(),
                node_rad: rnd() * 6.28,
                arg_peri_rad: rnd() * 6.28,
                mean_anomaly_rad: rnd() * 6.28,
            };
            let (x, y, _) = run(&format!("{name} {k} a {a:.2} e {e:.2} i {i:.1}"), fe, ft, ac);
            g += x as i32;
            o += y as i32;
        }
        println!("{name}: given {g}/100 free {o}/100");
    }
}
