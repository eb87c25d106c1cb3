//! x
use numerics::arclength::*;
use optimal::spatial::{curves::*, ends::*, growing_open::*, launch::*};
use orbits::{ephemeris::Traveller, kepler::Elements, planets::Planet, units};
fn main() {
    let fe = Traveller::Planet(Planet::Earth).elements(0.0);
    let mut seed = 12345u64;
    let mut rnd = || {
        seed = seed.wrapping_mul(6364136223846793005).wrapping_add(1442695040888963407);
        (seed >> 11) as f64 / (1u64 << 53) as f64
    };
    for _ in 0..600 {
        rnd();
    }
    // mild consumed 100*7
    for _ in 0..100 {
        rnd();
    }
    for k in 0..100 {
        let a = (0.3f64.ln() + rnd() * (5.0f64 / 0.3).ln()).exp();
        let e = rnd() * 0.6;
        let i = rnd() * 60.0;
        let ac = ((0.6f64).ln() + rnd() * ((3.0 / 0.6) as f64).ln()).exp();
        let ft = Elements {
            semi_major_axis: a,
            eccentricity: e,
            inclination_rad: (i as f64).to_radians(),
            node_rad: rnd() * 6.28,
            arg_peri_rad: rnd() * 6.28,
            mean_anomaly_rad: rnd() * 6.28,
        };
        if ![2, 9, 32, 34, 66, 94].contains(&k) {
            continue;
        }
        println!("== {k} a {a:.2} e {e:.2} i {i:.1} ac {ac:.3}");
        let care = Care::CAREFUL;
        let st = Stride {
            first: 0.05,
            largest: 0.6,
            smallest: 1e-6,
            accept: 2e-3,
            wanted_correction: 0.0015,
            budget: 1500,
        };
        for h0 in [0.05, 0.1, 0.3] {
            let s = Setting {
                ends: Ends::new(fe, ft),
                lightness: units::lightness(ac),
                tolerance: care.tolerance,
            };
            let start = coplanar_point(&s).unwrap();
            let f = follow(
                &Growing(&s),
                start,
                &Goal { parameter: Growing::scaled(h0), sign: 1.0 },
                &st,
                &mut |_| true,
            );
            println!("h0 {h0} grow {:?} {} t {:.3}", f.ended, f.jacobians, f.point.time);
            let round = Setting { ends: s.ends.at_shape(h0), ..s };
            for sign in [1.0, -1.0] {
                let p0 = Point { parameter: 0.0, ..f.point };
                let mut log = vec![];
                let mut n = 0;
                let g = |p: &Point| {
                    let st = round.ends.departure(1.0, p.parameter).unwrap();
                    let r = coasting_rate(&st);
                    (0..6).map(|i| p.costate[i] * r[i]).sum::<f64>()
                };
                let mut last = (p0, g(&p0));
                let mut cr = vec![];
                let fo = follow(
                    &Leaving(&round),
                    p0,
                    &Goal { parameter: f64::INFINITY * sign, sign },
                    &st,
                    &mut |p| {
                        n += 1;
                        let q = g(p);
                        if q * last.1 < 0.0 {
                            cr.push((*p, q));
                        }
                        last = (*p, q);
                        if n % 40 == 0 {
                            log.push((p.parameter, p.time, q));
                        }
                        p.parameter.abs() < 6.3
                    },
                );
                println!(
                    "  march {sign} {:?} jac {} points {n} crossings {} {:.2?}",
                    fo.ended,
                    fo.jacobians,
                    cr.len(),
                    log
                );
                for (p, _) in cr {
                    let c = GrowingOpen(&s);
                    let r = follow(
                        &c,
                        OpenPoint { point: Point { parameter: h0, ..p }, departure: p.parameter },
                        &Goal { parameter: Growing::scaled(1.0), sign: 1.0 },
                        &st,
                        &mut |_| true,
                    );
                    println!(
                        "    cross at s0 {:.3} t {:.3}: grow {:?} jac {} h {:.3} t {:.3} s0 {:.2}",
                        p.parameter,
                        p.time,
                        r.ended,
                        r.jacobians,
                        r.point.point.parameter,
                        r.point.point.time,
                        r.point.departure
                    );
                }
            }
        }
    }
}
