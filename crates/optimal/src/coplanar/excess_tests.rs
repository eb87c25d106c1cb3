//! Excess.
use super::*;
use crate::certificate::Verdict;
use orbits::units;

fn spread(index: u64, salt: u64) -> f64 {
    let mut z =
        index.wrapping_mul(0x9E37_79B9_7F4A_7C15).wrapping_add(salt.wrapping_mul(0xD1B5_4A32_D192_ED03));
    z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
    z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
    ((z ^ (z >> 31)) >> 11) as f64 / (1u64 << 53) as f64
}

#[test]
fn explore() {
    for ends in 0..3 {
        let (mut counts, mut bad, mut max_ms, mut total, mut interior, mut worst) =
            ([0; 4], 0, 0.0f64, 0.0, 0, 0.0f64);
        for i in 0..300 {
            let r = (0.3f64.ln() + spread(i, 1) * (10.0f64 / 0.3).ln()).exp();
            let ac = (0.2f64.ln() + spread(i, 2) * 20.0f64.ln()).exp();
            let w = if ends == 1 { 0.0 } else { 5.0 * spread(i, 3) };
            let wa = if ends == 0 { 0.0 } else { 5.0 * spread(i, 4) };
            let problem = Problem {
                circles: solve::Problem {
                    start_radius: 1.0,
                    target_radius: r,
                    lightness: units::lightness(ac),
                },
                allowance: Allowance {
                    departure: units::canonical_speed(w),
                    arrival: units::canonical_speed(wa),
                },
            };
            let t = std::time::Instant::now();
            let x = solve(&problem);
            let ms = t.elapsed().as_secs_f64() * 1e3;
            max_ms = max_ms.max(ms);
            total += ms;
            let Some(x) = x else {
                println!("{i} {r:.3} {ac:.3} {w:.3} {wa:.3} NONE {ms:.1} ms");
                counts[3] += 1;
                continue;
            };
            counts[x.route as usize] += 1;
            let Some(f) = fly(&problem, &x.unknowns) else {
                println!("{i} {r:.3} {ac:.3} {w:.3} {wa:.3} unflown {x:?} {ms:.1}");
                bad += 1;
                continue;
            };
            let less = w * 0.999 > units::km_per_s(f.excess.departure)
                || wa * 0.999 > units::km_per_s(f.excess.arrival);
            interior += less as usize;
            worst = worst.max(f.evidence.excess_misfit);
            if f.evidence.verdict() != Verdict::Converged || x.route == Route::Stronger {
                println!(
                    "{i} {r:.3} {ac:.3} {w:.3} {wa:.3} used {:.3} {:.3} {:?} {:.1} ms res {:.1e} {:?} {:?}",
                    units::km_per_s(f.excess.departure),
                    units::km_per_s(f.excess.arrival),
                    x.route,
                    ms,
                    x.residual,
                    f.evidence.verdict(),
                    f.evidence
                );
            }
            bad += (f.evidence.verdict() != Verdict::Converged) as usize;
        }
        println!(
            "ends {ends}: routes {counts:?} bad {bad} interior {interior} mean {:.2} max {max_ms:.1} worst misfit {worst:.1e}",
            total / 300.0
        );
    }
}
