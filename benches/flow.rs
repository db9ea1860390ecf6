//! How fast the taut flow runs: one variant after another in one process, without a report.

#![allow(missing_docs, clippy::unwrap_used, reason = "a bench")]

use criterion::{Criterion, Throughput, criterion_group, criterion_main};
use lissom::flow::{Outcome, run};
use lissom::pattern::Weaves;
use lissom::span::SourceText;
use lissom::spec::Spec;
use std::hint::black_box;

fn read(name: &str) -> Spec {
    let path = format!("{}/examples/{name}.toml", env!("CARGO_MANIFEST_DIR"));
    let text = std::fs::read_to_string(path).unwrap();
    Spec::read(SourceText::new(name, text), &Weaves::builtin()).unwrap()
}

/// A variant of the spec: another sett, so that nothing can be kept from the last one.
fn variant(spec: &mut Spec, index: u32) -> Outcome {
    spec.weave.warp.sett_per_mm = 1.2 + 1e-4 * f64::from(index % 1000);
    run(spec, 1.0).unwrap()
}

fn flow(c: &mut Criterion) {
    let mut group = c.benchmark_group("taut flow, variants");
    group.throughput(Throughput::Elements(1));
    // Satin with tensions (the height is searched), plain with equal heights, wire.
    for name in ["kiln-curtain", "oven-tape", "intake-screen"] {
        let mut spec = read(name);
        let mut index = 0;
        group.bench_function(name, |b| {
            b.iter(|| {
                index += 1;
                black_box(variant(&mut spec, index))
            });
        });
    }
    group.finish();
}

fn reading(c: &mut Criterion) {
    let path = format!("{}/examples/kiln-curtain.toml", env!("CARGO_MANIFEST_DIR"));
    let text = std::fs::read_to_string(path).unwrap();
    c.bench_function("read a spec", |b| {
        b.iter(|| Spec::read(SourceText::new("bench", text.clone()), &Weaves::builtin()).unwrap());
    });
}

criterion_group!(benches, flow, reading);
criterion_main!(benches);
