//! How long a whole answer takes: from a link to the report with its proof, comparison and histories.

use std::hint::black_box;

use criterion::{Criterion, criterion_group, criterion_main};
use scenario::checks::published_checks;
use scenario::link::{decode, encode};
use scenario::run::run;

fn answers(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("answer");
    for (name, link) in [
        ("default flight", ""),
        ("jupiter at 0.5 mm per s2", "ac_mm_s2=0.5&to=jupiter"),
        ("mercury at 0.1 mm per s2, many revolutions", "ac_mm_s2=0.1&to=mercury"),
        ("venus with a deadline", "area_m2=1800&mass_kg=45&to=venus&deadline_d=400"),
        ("locally optimal steering", "steer=local"),
    ] {
        let scenario = decode(link).expect("a sound link");
        group.bench_function(name, |b| b.iter(|| run(black_box(&scenario))));
    }
    group.finish();
}

fn links(criterion: &mut Criterion) {
    let link = "v=1&title=Venus+in+400+days&area_m2=1800&mass_kg=45&to=venus&deadline_d=400";
    criterion.bench_function("link, read and written", |b| {
        b.iter(|| decode(black_box(link)).map(|scenario| encode(&scenario)))
    });
}

fn checks(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("checks");
    group.sample_size(10);
    group.bench_function("all published checks", |b| b.iter(published_checks));
    group.finish();
}

criterion_group!(benches, answers, links, checks);
criterion_main!(benches);
