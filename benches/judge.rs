//! Judging one bend with its broken filaments counted: free filaments, bonded through the thickness, a cloth's crown, a history.

#![allow(missing_docs, clippy::unwrap_used, reason = "a bench")]

use criterion::{Criterion, criterion_group, criterion_main};
use lissom::flow::{broken, run_counted};
use lissom::judge::{Count, Flaws, Required, judge};
use lissom::pattern::Weaves;
use lissom::span::SourceText;
use lissom::spec::Spec;
use std::hint::black_box;

fn spec(binding: f64, stations: usize) -> Spec {
    let mut text = format!(
        "name = \"b\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"200 tex\"\nbinding = {binding}\n[weave]\npattern = \"satin-8\"\n\
         warp = {{ yarn = \"y\", sett = \"8 /cm\" }}\nweft = {{ yarn = \"y\", sett = \"8 /cm\" }}\n"
    );
    for station in 0..stations {
        text += &format!(
            "[[passage]]\nyarn = \"warp\"\nname = \"guide {station}\"\nradius = \"{} mm\"\nturn = \"30 deg\"\n",
            1 + station
        );
    }
    Spec::read(SourceText::new("b", text), &Weaves::builtin()).unwrap()
}

fn bends(c: &mut Criterion) {
    let mut group = c.benchmark_group("judge one bend");
    for (yarn, binding) in [("free", 0.0), ("bonded", 0.7)] {
        let spec = spec(binding, 1);
        let outcome = run_counted(&spec).unwrap();
        let flaws = Flaws::of(&spec.weave.warp.yarn.fibre).unwrap();
        let (warp, laid) = (&spec.weave.warp.yarn, &outcome.cloth.warp.laid);
        for (count, name) in [(Count::Leave, "handbook"), (Count::Tell(&flaws), "counted")] {
            let required = Required {
                reserve: 2.0,
                count,
            };
            for (bend, what) in [(&outcome.bends[0], "guide"), (&outcome.bends[1], "crown")] {
                group.bench_function(format!("{yarn} {what} {name}"), |b| {
                    b.iter(|| judge(black_box(bend), warp, laid, required));
                });
            }
        }
    }
    group.finish();
    let spec = spec(0.0, 12);
    let outcome = run_counted(&spec).unwrap();
    c.bench_function("history of 12 stations and the crowns", |b| {
        b.iter(|| broken(&spec, black_box(&outcome)));
    });
}

criterion_group!(benches, bends);
criterion_main!(benches);
