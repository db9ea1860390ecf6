//! Published cloths, each with its published thickness given: computed mass beside published and crimp-free mass.
//!
//! Sources of the rows: `tests/reference/fabrics.csv` (industry lists of glass fabric styles, finished mass; generic
//! carbon constructions; many from memory, marked so in the file). A crimp-free mass is counts times tex; published
//! mass holds crimp and finish besides. A model without crimp would fail here: the mean error of the taut path must be
//! smaller than that of the crimp-free mass. The stiff path stands beside it, better or worse.

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
    /// Mass and both crimps with the taut path, and with the stiff one.
    computed: [Option<(f64, f64, f64)>; 2],
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
            let text = |path: &str| format!(
                "name = \"{}\"\n[yarn.a]\nfibre = \"{fibre}\"\nlinear_density = \"{} tex\"\n[yarn.b]\nfibre = \"{fibre}\"\n\
                 linear_density = \"{} tex\"\n[weave]\npattern = \"{}\"\npath = \"{path}\"\nthickness = \"{} mm\"\n\
                 warp = {{ yarn = \"a\", sett = \"{} /cm\" }}\nweft = {{ yarn = \"b\", sett = \"{} /cm\" }}\n",
                &record[0], &record[5], &record[6], &record[2], &record[8], &record[3], &record[4],
                fibre = &record[1],
            );
            let computed = ["taut", "stiff"].map(|path| {
                run(&spec(&text(path)), 1.0).ok().map(|outcome| {
                    let cloth = outcome.cloth;
                    assert!((cloth.thickness_mm / number(8) - 1.0).abs() < 1e-6);
                    (cloth.areal_mass_g_m2, cloth.warp.crimp, cloth.weft.crimp)
                })
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
    let (mut taut, mut stiff, mut free, mut computed) = (0.0, 0.0, 0.0, 0);
    for row in &rows {
        let off = |mass: f64| 100.0 * (mass / row.published - 1.0);
        let by_counts = off(row.crimp_free);
        let told = |of: &Option<(f64, f64, f64)>| match of {
            Some((mass, warp, weft)) => format!(
                "{mass:.1} | {:+.1} % | {:.2}, {:.2}",
                off(*mass),
                100.0 * warp,
                100.0 * weft
            ),
            None => "none | - | -".to_owned(),
        };
        if let [Some((by_taut, ..)), Some((by_stiff, ..))] = row.computed {
            taut += off(by_taut).abs();
            stiff += off(by_stiff).abs();
            free += by_counts.abs();
            computed += 1;
        }
        table += &format!(
            "| {} | {} | {} | {by_counts:+.1} % | {} | {} |\n",
            row.style,
            row.weave,
            row.published,
            told(&row.computed[0]),
            told(&row.computed[1])
        );
    }
    let mean = |sum: f64| sum / f64::from(computed);
    let (taut, stiff, free) = (mean(taut), mean(stiff), mean(free));
    println!(
        "{table}mean error taut {taut:.2} %, stiff {stiff:.2} %, crimp-free {free:.2} %, {computed} rows"
    );
    let of = |model: usize| {
        rows.iter()
            .filter(|row| row.computed[model].is_some())
            .count()
    };
    assert_eq!(of(0), 21, "one dense satin of plied yarn jams");
    assert_eq!(
        of(1),
        20,
        "a satin of closely packed yarns next to its jam is not solved; once it is, say so in the README"
    );
    assert!(taut < free, "{taut} {free}");
    let readme = std::fs::read_to_string(root().join("README.md")).unwrap();
    assert!(
        readme.contains(&table),
        "the README's table should be:\n{table}"
    );
    let means = format!(
        "mean error taut {taut:.2} %, stiff {stiff:.2} %, of the crimp-free mass {free:.2} %"
    );
    assert!(readme.contains(&means), "the README should say: {means}");
}
