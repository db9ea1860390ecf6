//! Published cloths, each with its published thickness given: computed mass beside published and crimp-free mass.
//!
//! Sources of the rows: `tests/reference/fabrics.csv` (industry lists of glass fabric styles, finished mass; generic
//! carbon constructions; many from memory, marked so in the file). A crimp-free mass is counts times tex; published
//! mass holds crimp and finish besides. A model without crimp would fail here: the mean error must be smaller than that
//! of the crimp-free mass.

#![allow(
    clippy::unwrap_used,
    clippy::panic,
    clippy::print_stdout,
    reason = "helpers of tests"
)]

mod common;

use common::{root, spec};
use lissom::flow::run;

struct Row {
    style: String,
    weave: String,
    published: f64,
    crimp_free: f64,
    computed: Option<(f64, f64, f64)>,
}

fn rows() -> Vec<Row> {
    let text = std::fs::read_to_string(root().join("tests/reference/fabrics.csv")).unwrap();
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(text.as_bytes());
    reader
        .records()
        .map(|record| {
            let record = record.unwrap();
            let number = |index: usize| record[index].parse::<f64>().unwrap();
            let text = format!(
                "name = \"{}\"\n[yarn.a]\nfibre = \"{fibre}\"\nlinear_density = \"{} tex\"\n[yarn.b]\nfibre = \"{fibre}\"\n\
                 linear_density = \"{} tex\"\n[weave]\npattern = \"{}\"\nthickness = \"{} mm\"\n\
                 warp = {{ yarn = \"a\", sett = \"{} /cm\" }}\nweft = {{ yarn = \"b\", sett = \"{} /cm\" }}\n",
                &record[0], &record[5], &record[6], &record[2], &record[8], &record[3], &record[4],
                fibre = &record[1],
            );
            let computed = run(&spec(&text), 1.0).ok().map(|outcome| {
                let cloth = outcome.cloth;
                assert!((cloth.thickness_mm / number(8) - 1.0).abs() < 1e-6);
                (cloth.areal_mass_g_m2, cloth.warp.crimp, cloth.weft.crimp)
            });
            Row {
                style: record[0].to_owned(),
                weave: record[2].to_owned(),
                published: number(7),
                crimp_free: (number(3) * number(5) + number(4) * number(6)) / 10.0,
                computed,
            }
        })
        .collect()
}

#[test]
fn computed_mass_is_nearer_to_the_published_than_crimp_free_mass() {
    let rows = rows();
    assert_eq!(rows.len(), 22, "the number of rows never falls");
    let mut table = String::new();
    let (mut ours, mut free, mut computed) = (0.0, 0.0, 0);
    for row in &rows {
        let off = |mass: f64| 100.0 * (mass / row.published - 1.0);
        let by_counts = off(row.crimp_free);
        match row.computed {
            Some((mass, warp, weft)) => {
                ours += off(mass).abs();
                free += by_counts.abs();
                computed += 1;
                table += &format!(
                    "| {} | {} | {} | {by_counts:+.1} % | {mass:.1} | {:+.1} % | {:.2}, {:.2} |\n",
                    row.style,
                    row.weave,
                    row.published,
                    off(mass),
                    100.0 * warp,
                    100.0 * weft
                );
            }
            None => {
                table += &format!(
                    "| {} | {} | {} | {by_counts:+.1} % | jammed | - | - |\n",
                    row.style, row.weave, row.published
                );
            }
        }
    }
    let (ours, free) = (ours / f64::from(computed), free / f64::from(computed));
    println!("{table}mean error {ours:.2} %, crimp-free {free:.2} %, {computed} rows");
    assert_eq!(computed, 21, "one dense satin of plied yarn jams");
    assert!(ours < free, "{ours} {free}");
    let readme = std::fs::read_to_string(root().join("README.md")).unwrap();
    assert!(
        readme.contains(&table),
        "the README's table should be:\n{table}"
    );
    let means = format!("mean error {ours:.2} %, of the crimp-free mass {free:.2} %");
    assert!(readme.contains(&means), "the README should say: {means}");
}
