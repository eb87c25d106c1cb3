//! x
use optimal::spatial::{ends::*, launch::Care, polish::*, sweep::*};
use orbits::{ephemeris::Traveller, planets::Planet, units};
fn st(t: &Traveller, d: f64) -> Option<State> {
    let s = t.state(d).ok()?;
    let (r, v) = (s.position, s.velocity);
    Some([r.x, r.y, r.z, v.x, v.y, v.z])
}
fn cpu() -> f64 {
    let s = std::fs::read_to_string("/proc/self/schedstat").unwrap();
    s.split(' ').next().unwrap().parse::<f64>().unwrap() * 1e-6
}
fn main() {
    let a: Vec<String> = std::env::args().collect();
    let step: f64 = a.get(1).map_or(6.5, |x| x.parse().unwrap());
    let n: usize = a.get(2).map_or(12, |x| x.parse().unwrap());
    for (p, ac) in [
        (Planet::Mars, 1.0),
        (Planet::Mars, 0.5),
        (Planet::Mars, 3.0),
        (Planet::Venus, 1.0),
        (Planet::Mercury, 1.0),
        (Planet::Mercury, 0.5),
    ] {
        let fe = Traveller::Planet(Planet::Earth);
        let ft = Traveller::Planet(p);
        let d0 = 9131.0;
        let from = |x: f64| st(&fe, d0 + units::days(x));
        let to = |x: f64| st(&ft, d0 + units::days(x));
        let ends = |x: f64| Ends::new(fe.elements(d0 + units::days(x)), ft.elements(d0 + units::days(x)));
        let conditions = Conditions {
            lightness: units::lightness(ac),
            from: &from,
            to: &to,
            target_axis: ft.elements(d0).semi_major_axis,
        };
        let route = Route { conditions, ends: &ends };
        let syn =
            orbits::hohmann::synodic_d(365.25, ft.elements(0.0).semi_major_axis.powf(1.5) * 365.25).unwrap();
        let chunks = (syn / step / n as f64).ceil() as usize;
        let (mut colds, mut steps, mut settles) = (vec![], vec![], vec![]);
        let (mut lost, mut worse, mut better, mut one) = (0, 0, 0, 0);
        for c in 0..chunks {
            let at = |k: usize| units::canonical_time(step * (c * n + k) as f64);
            let mid = n / 2;
            let t = cpu();
            let mut b = cold(&route, at(mid), &Care::QUICK);
            if b.len() < 2 {
                merge(&mut b, cold(&route, at(mid), &Care::CAREFUL));
            }
            colds.push(cpu() - t);
            if b.len() < 2 {
                one += 1;
            }
            let mut all: Vec<Vec<Branch>> = vec![vec![]; n];
            all[mid] = b.clone();
            for br in &b {
                for fwd in [true, false] {
                    let mut now = br.clone();
                    let ks: Vec<usize> = if fwd { (mid + 1..n).collect() } else { (0..mid).rev().collect() };
                    for k in ks {
                        let t = cpu();
                        let Some(next) = now.marched(&conditions, at(k)) else {
                            lost += 1;
                            break;
                        };
                        steps.push(cpu() - t);
                        now = next;
                        merge(&mut all[k], [now.clone()]);
                    }
                }
            }
            for k in 0..n {
                let t = cpu();
                let s = all[k].first().and_then(|x| settled(&conditions, x));
                settles.push(cpu() - t);
                // reference
                let mut r = cold(&route, at(k), &Care::QUICK);
                if r.len() < 2 {
                    merge(&mut r, cold(&route, at(k), &Care::CAREFUL));
                }
                r.sort_by(|a, b| a.flight.time.total_cmp(&b.flight.time));
                let (x, y) = (s.map_or(1e9, |x| x.flight.time), r.first().map_or(1e9, |x| x.flight.time));
                if x > y * (1.0 + 1e-6) {
                    worse += 1;
                }
                if x < y * (1.0 - 1e-6) {
                    better += 1;
                }
            }
        }
        let med = |v: &mut Vec<f64>| {
            v.sort_by(f64::total_cmp);
            let n = v.len();
            (v.iter().sum::<f64>() / n as f64, v[n / 2], v[n * 95 / 100], v[n - 1])
        };
        println!(
            "{p:?} {ac} chunks {chunks} lost {lost} one {one} worse {worse} better {better} of {}\n  cold {:.2?}\n  step {:.2?}\n  settle {:.2?}",
            chunks * n,
            med(&mut colds),
            med(&mut steps),
            med(&mut settles)
        );
    }
}
