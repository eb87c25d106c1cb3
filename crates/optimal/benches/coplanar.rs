//! How long minimum-time flights between circles take: the parts, one flight, and the five hundred listed ones.

use std::hint::black_box;
use std::time::{Duration, Instant};

use criterion::{BatchSize, Criterion, criterion_group, criterion_main};
use numerics::dual::Dual;
use numerics::newton::Equations;
use numerics::ode::{Options, integrate};
use optimal::coplanar::extremal::{Augmented, Extremal};
use optimal::coplanar::flight::fly;
use optimal::coplanar::shooting::{Shooting, Unknowns};
use optimal::coplanar::solve::{Problem, solve};
use orbits::units;

/// Earth to Mars at 1 mm/s^2: 407.72 d and a bit more than one revolution.
fn mars() -> Problem {
    Problem { start_radius: 1.0, target_radius: 1.52371034, lightness: units::lightness(1.0) }
}

/// The listed cases of the reference folder.
fn listed() -> Vec<Problem> {
    let text = include_str!("../../../tests/reference/cases_500.json");
    let table: serde_json::Value = serde_json::from_str(text).expect("the list is JSON");
    let number = |case: &serde_json::Value, key: &str| case[key].as_f64().expect("a number");
    let problem = |case: &serde_json::Value| Problem {
        start_radius: 1.0,
        target_radius: number(case, "r_f_au"),
        lightness: units::lightness(number(case, "ac_mm_s2")),
    };
    table["cases"].as_array().expect("a list of cases").iter().map(problem).collect()
}

fn solved(problem: &Problem) -> Unknowns {
    solve(problem).expect("this flight is solved").unknowns
}

/// Integration of one extremal from departure to arrival, plain and with two derivatives, and a whole Jacobian.
fn parts(criterion: &mut Criterion) {
    let problem = mars();
    let unknowns = solved(&problem);
    let flow = Extremal { lightness: problem.lightness };
    let l = unknowns.costate;
    let start = [1.0, 0.0, 1.0, l.x, l.y, l.z];
    let seeded: Augmented<Dual<2>> =
        std::array::from_fn(|i| Dual { v: start[i], d: [f64::from(i == 4), f64::from(i == 5)] });
    let options = Options { tolerance: 1e-10, max_steps: 40_000 };
    let shooting =
        Shooting { ratio: problem.ratio(), lightness: problem.lightness, tolerance: options.tolerance };
    let mut group = criterion.benchmark_group("mars at 1 mm per s2");
    group.bench_function("integration at 1e-10", |b| {
        b.iter(|| integrate(&flow, black_box(&start), unknowns.time, &options))
    });
    group.bench_function("integration with two derivatives at 1e-10", |b| {
        b.iter(|| integrate(&flow, black_box(&seeded), unknowns.time, &options))
    });
    group.bench_function("jacobian at 1e-10", |b| b.iter(|| shooting.linearised(black_box(&unknowns))));
    group.bench_function("solve, cold", |b| b.iter(|| solve(black_box(&problem))));
    group.bench_function("re-fly as proof, at 1e-13", |b| b.iter(|| fly(&problem, black_box(&unknowns))));
    group.finish();
}

/// What a slider asks for: the flight at the next acceleration, 1 % away each time, up and down between 0.2 and
/// 4 mm/s^2.
fn slider(criterion: &mut Criterion) {
    let steps = (4.0f64 / 0.2).ln() / 1.01f64.ln();
    let mut step = 0.0;
    let mut next = move || {
        step += 1.0;
        let along = 1.0 - (step / steps % 2.0 - 1.0f64).abs();
        Problem { lightness: units::lightness(0.2 * 20f64.powf(along)), ..mars() }
    };
    criterion.bench_function("slider: mars at the next acceleration", |b| {
        b.iter_batched(&mut next, |problem| solve(&problem), BatchSize::SmallInput)
    });
}

/// The five hundred listed flights, each solved from nothing: the mean by criterion, median and worst beside it.
fn five_hundred(criterion: &mut Criterion) {
    let problems = listed();
    let mut times: Vec<Duration> = problems.iter().map(|problem| fastest_of(5, problem)).collect();
    times.sort();
    let [median, ninetieth, worst] = [250, 450, 499].map(|i| times[i].as_secs_f64() * 1e3);
    eprintln!(
        "500 listed flights, cold: median {median:.3} ms, 90 % within {ninetieth:.3} ms, worst {worst:.3} ms"
    );
    let mut group = criterion.benchmark_group("500 listed flights");
    group.sample_size(10);
    group.bench_function("solve all, cold", |b| {
        b.iter(|| problems.iter().filter(|problem| solve(problem).is_some()).count())
    });
    group.finish();
}

/// The shortest of several runs: what other work on the machine adds is left out.
fn fastest_of(runs: usize, problem: &Problem) -> Duration {
    let one = || {
        let start = Instant::now();
        black_box(solve(black_box(problem)));
        start.elapsed()
    };
    (0..runs).map(|_| one()).min().unwrap_or_default()
}

criterion_group!(benches, parts, slider, five_hundred);
criterion_main!(benches);
