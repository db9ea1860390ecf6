//! How fast stiff paths are found: one yarn, plain cloth, a satin in both states, and how time grows with an irregular
//! repeat (25 x 25 by criterion; larger ones once each with `cargo bench --bench sweep -- repeats`).

#![allow(missing_docs, clippy::unwrap_used, reason = "a bench")]

use criterion::{Criterion, criterion_group, criterion_main};
use lissom::path::{StiffYarn, Strand};
use lissom::pattern::Weaves;
use lissom::span::SourceText;
use lissom::spec::Spec;
use lissom::weave::{States, Varied};
use lissom::yarn::{Outline, Shape};
use std::hint::black_box;

fn one_yarn(c: &mut Criterion) {
    let mut group = c.benchmark_group("one yarn of 8 crossings");
    let section = Outline::new(Shape::Lens, 0.5, 0.12).unwrap();
    let over: Vec<bool> = "OOUOUOUU".chars().map(|c| c == 'O').collect();
    let height: Vec<f64> = over.iter().map(|o| if *o { -0.06 } else { 0.06 }).collect();
    for (name, pull_n) in [("loom", 0.7), ("rest", 0.07), ("no pull", 0.0)] {
        let strand = Strand {
            half_thickness_mm: 0.06,
            pull_n,
            rigidity_n_mm2: 0.01,
        };
        let yarn = StiffYarn::new(&strand, &section, 1e-3);
        group.bench_function(name, |b| {
            b.iter(|| {
                yarn.path(0.62, black_box(&over), &height, None, true)
                    .unwrap()
            });
        });
    }
    group.finish();
}

fn cloths(c: &mut Criterion) {
    let mut group = c.benchmark_group("cloth, both states");
    for (name, pattern) in [("plain", "plain"), ("8-end satin", "satin-8")] {
        let text = format!(
            "name = \"b\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\npattern = \"{pattern}\"\n\
             warp = {{ yarn = \"y\", sett = \"17 /cm\" }}\nweft = {{ yarn = \"y\", sett = \"13 /cm\" }}\n"
        );
        let spec = Spec::read(SourceText::new("b", text), &Weaves::builtin()).unwrap();
        group.bench_function(name, |b| {
            b.iter(|| States::build(black_box(&spec.weave), Varied::default()).unwrap());
        });
    }
    group.finish();
}

criterion_group!(benches, one_yarn, cloths);
criterion_main!(benches);
