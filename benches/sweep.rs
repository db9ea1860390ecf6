//! How many of a random sweep of valid specs are solved at once, by following the path, or not at all; and how long
//! one takes. No criterion here: shares are counted, not times compared. `cargo bench --bench sweep -- COUNT`;
//! `-- repeats` times irregular repeats of 25 to 200 ends and picks once each.

#![allow(
    missing_docs,
    clippy::unwrap_used,
    clippy::print_stdout,
    reason = "a measurement"
)]

use lissom::pattern::{Pattern, Weaves};
use lissom::span::SourceText;
use lissom::spec::Spec;
use lissom::weave::{ClothError, States, Varied, YarnPath};
use std::time::Instant;

/// A multiplicative congruential generator (Knuth's constants): the same sweep on every machine.
struct Dice(u64);

impl Dice {
    fn roll(&mut self) -> f64 {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 11) as f64 / (1u64 << 53) as f64
    }

    fn between(&mut self, low: f64, high: f64) -> f64 {
        low * (high / low).powf(self.roll())
    }

    fn of<'a>(&mut self, all: &[&'a str]) -> &'a str {
        all[(self.roll() * all.len() as f64) as usize]
    }
}

const PATTERNS: [&str; 14] = [
    "plain",
    "twill 2/2 z",
    "twill 2/1 s",
    "twill 3/1 z",
    "twill 4/2 1/1 z",
    "satin 5",
    "satin 8 step 3",
    "satin 12 step 5",
    "hopsack 2/2",
    "hopsack 3/3",
    "warp rib 2/2",
    "weft rib 3/1",
    "crowfoot",
    "mock leno",
];
const FIBRES: [&str; 10] = [
    "e-glass",
    "carbon-pan-sm",
    "carbon-pitch-uhm",
    "aramid-std",
    "quartz",
    "alumina",
    "basalt",
    "uhmwpe",
    "s-glass",
    "pbo",
];
const WIRES: [&str; 2] = ["stainless-annealed", "copper-annealed"];

fn yarn(dice: &mut Dice, name: &str) -> String {
    if dice.roll() < 0.12 {
        let size = dice.between(0.03, 0.5);
        return format!(
            "[yarn.{name}]\nfibre = \"{}\"\nfilaments = 1\nfilament_diameter = \"{size:.4} mm\"\n",
            dice.of(&WIRES)
        );
    }
    let tex = dice.between(10.0, 1600.0);
    let shape = dice.of(&["round", "ellipse", "lens", "racetrack"]);
    let mut text = format!(
        "[yarn.{name}]\nfibre = \"{}\"\nlinear_density = \"{tex:.2} tex\"\nshape = \"{shape}\"\n",
        dice.of(&FIBRES)
    );
    if dice.roll() < 0.3 {
        text.push_str(&format!("binding = {:.3}\n", dice.roll()));
    }
    if dice.roll() < 0.2 && shape != "round" {
        text.push_str(&format!("flatness = {:.2}\n", dice.between(1.0, 30.0)));
    }
    text
}

fn spec(dice: &mut Dice) -> String {
    let (a, b) = (yarn(dice, "a"), yarn(dice, "b"));
    let sett = |dice: &mut Dice| dice.between(0.8, 40.0);
    let (ends, picks) = (sett(dice), sett(dice));
    let tension = |dice: &mut Dice| match dice.roll() {
        r if r < 0.05 => ", tension = \"0 N\"".to_owned(),
        r if r < 0.5 => format!(", tension = \"{:.4} N\"", dice.between(0.01, 20.0)),
        _ => String::new(),
    };
    let crimp = |dice: &mut Dice| {
        if dice.roll() < 0.05 {
            format!(", crimp = \"{:.2} %\"", dice.between(0.1, 8.0))
        } else {
            String::new()
        }
    };
    let (t1, t2) = (tension(dice), tension(dice));
    let (c1, c2) = (crimp(dice), crimp(dice));
    let extra = match dice.roll() {
        r if r < 0.1 => "sett_at = \"loom\"\n",
        r if r < 0.15 => "rest = \"0 %\"\n",
        _ => "",
    };
    format!(
        "name = \"sweep\"\n{a}{b}[weave]\npattern = \"{}\"\n{extra}\
         warp = {{ yarn = \"a\", sett = \"{ends:.3} /cm\"{t1}{c1} }}\n\
         weft = {{ yarn = \"b\", sett = \"{picks:.3} /cm\"{t2}{c2} }}\n",
        dice.of(&PATTERNS)
    )
}

/// An irregular repeat of this many ends and picks that is one cloth.
fn irregular(size: usize, dice: &mut Dice) -> String {
    loop {
        let rows: Vec<String> = (0..size)
            .map(|_| {
                (0..size)
                    .map(|_| if dice.roll() < 0.5 { '#' } else { '.' })
                    .collect()
            })
            .collect();
        if Pattern::from_rows(&rows).unwrap().falls_apart().is_none() {
            return format!("[\"{}\"]", rows.join("\", \""));
        }
    }
}

/// Irregular repeats, both states, once each: how time grows with the size.
fn repeats() {
    let weaves = Weaves::builtin();
    let mut dice = Dice(7);
    for size in [25, 50, 100, 200] {
        let rows = irregular(size, &mut dice);
        let text = format!(
            "name = \"r\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\nrows = {rows}\n\
             warp = {{ yarn = \"y\", sett = \"15 /cm\" }}\nweft = {{ yarn = \"y\", sett = \"13 /cm\" }}\n"
        );
        let spec = Spec::read(SourceText::new("r", text), &weaves).unwrap();
        let start = Instant::now();
        let states = States::build(&spec.weave, Varied::default());
        let told = match states {
            Ok(states) => format!("warp crimp {:.3} %", 100.0 * states.cloth.warp.crimp),
            Err(why) => why.to_string(),
        };
        println!(
            "{size} x {size}: {:.2} s, {told}",
            start.elapsed().as_secs_f64()
        );
    }
}

fn main() {
    if std::env::args().any(|arg| arg == "repeats") {
        repeats();
        return;
    }
    let count: usize = std::env::args()
        .skip(1)
        .find_map(|arg| arg.parse().ok())
        .unwrap_or(1000);
    let weaves = Weaves::builtin();
    let mut dice = Dice(2026);
    let (mut direct, mut followed, mut unsolved, mut jammed, mut refused) = (0, 0, 0, 0, 0);
    let mut limited = 0;
    let mut times = Vec::new();
    while direct + followed + unsolved < count {
        let text = spec(&mut dice);
        let Ok(spec) = Spec::read(SourceText::new("sweep", text.clone()), &weaves) else {
            refused += 1;
            continue;
        };
        let start = Instant::now();
        let states = States::build(&spec.weave, Varied::default());
        let took = start.elapsed().as_secs_f64() * 1e3;
        match states {
            Ok(states) => {
                times.push((took, direct + followed));
                let by_hand = [&states.cloth, states.on_loom()].iter().any(|cloth| {
                    [&cloth.warp, &cloth.weft].iter().any(
                        |yarn| matches!(&yarn.path, YarnPath::Stiff(system) if system.followed),
                    )
                });
                limited += usize::from(states.cloth.closed.jam_limited);
                if by_hand {
                    followed += 1;
                } else {
                    direct += 1;
                }
            }
            Err(ClothError::Jammed | ClothError::Lay { .. }) => jammed += 1,
            Err(why) => {
                unsolved += 1;
                println!("unsolved after {took:.0} ms: {why}\n{text}");
            }
        }
    }
    times.sort_by(|a, b| a.0.total_cmp(&b.0));
    let at = |share: f64| times[((times.len() - 1) as f64 * share) as usize].0;
    println!(
        "{count} specs: at once {direct}, followed {followed}, not at all {unsolved}; jam limited {limited}; \
         beside them jammed {jammed}, refused {refused}"
    );
    println!(
        "ms each: median {:.2}, 90 % {:.2}, 99 % {:.2}, most {:.1}",
        at(0.5),
        at(0.9),
        at(0.99),
        at(1.0)
    );
}
