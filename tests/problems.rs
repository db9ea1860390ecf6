//! Wrong specs and the exact message for each: message text is product.

#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests")]

mod common;

use common::lissom;

/// A valid spec; each case replaces one piece of it.
const GOOD: &str = r#"name = "Good"

[fibre.own]
like = "alumina"
filament_diameter = "12 um"

[yarn.face]
fibre = "own"
linear_density = "200 tex"
filaments = 450

[yarn.back]
fibre = "e-glass"
linear_density = "68 tex"
width = "0.5 mm"

[weave]
pattern = "plain"
warp = { yarn = "face", sett = "9 /cm" }
weft = { yarn = "back", sett = "10 /cm" }

[[passage]]
yarn = "warp"
name = "heald eye"
radius = "2 mm"
turn = "12 deg"

[require]
reserve = 2.0
"#;

fn complaint(spec: &str) -> String {
    let output = lissom(&["check", "-"], spec);
    let text = String::from_utf8(output.stderr).unwrap();
    assert_eq!(output.status.code(), Some(2), "{text}");
    assert!(output.stdout.is_empty());
    text
}

/// Wire yields before it breaks, and of an own fibre nobody has told the scatter: a number of breaks is an error then, no pass.
#[test]
fn filaments_that_cannot_be_counted_are_an_error() {
    let counted = GOOD.replace("reserve = 2.0", "broken_filaments = \"5 /m\"");
    assert_eq!(lissom(&["check", "-"], &counted).status.code(), Some(0));
    let wire = counted.replace("like = \"alumina\"", "like = \"stainless\"");
    insta::assert_snapshot!("problem-wire-is-not-counted", complaint(&wire));
    let own = counted.replace(
        "like = \"alumina\"",
        "kind = \"brittle\"\nmodulus = \"380 GPa\"\nstrength = \"3 GPa\"\ndensity = \"3.9 g/cm3\"",
    );
    insta::assert_snapshot!("problem-own-fibre-is-not-counted", complaint(&own));
    let scattered = own.replace(
        "\ndensity =",
        "\nweibull_modulus = 5\ngauge_length = \"25 mm\"\nflaws = \"volume\"\ndensity =",
    );
    // Told, it is counted: the crowns shed.
    assert_eq!(lissom(&["check", "-"], &scattered).status.code(), Some(1));
}

#[test]
fn the_good_spec_is_good() {
    assert_eq!(lissom(&["check", "-"], GOOD).status.code(), Some(0));
}

/// Name of the case, what is replaced, by what.
const CASES: &[(&str, &str, &str)] = &[
    ("wrong designation", "\"68 tex\"", "\"ECX 75 1/0\""),
    (
        "a Weibull modulus without its gauge",
        "like = \"alumina\"",
        "kind = \"brittle\"\nmodulus = \"380 GPa\"\nstrength = \"2 GPa\"\ndensity = \"3.9 g/cm3\"\nweibull_modulus = 5",
    ),
    (
        "a passage with the place of the shed",
        "name = \"heald eye\"",
        "name = \"Open shed\"",
    ),
    (
        "two tools of one name",
        "[require]",
        "[[tool]]\nname = \"rib\"\nradius = \"3 mm\"\n[[tool]]\nname = \"rib\"\nradius = \"5 mm\"\n[require]",
    ),
    (
        "a station overridden twice",
        "name = \"Good\"\n",
        "name = \"Good\"\nroute = \"rapier-weaving\"\n[[passage]]\nyarn = \"warp\"\nname = \"Heald eye\"\nradius = \"1 mm\"\n",
    ),
    ("wrong ISO code", "\"plain\"", "\"30-07 01-01-02\""),
    ("bare number", "\"200 tex\"", "200"),
    ("bare real number", "\"0.5 mm\"", "0.5"),
    ("no unit", "\"200 tex\"", "\"200\""),
    ("unknown unit", "\"200 tex\"", "\"200 texx\""),
    ("unit in wrong case", "\"12 um\"", "\"12 UM\""),
    ("unit of something else", "\"0.5 mm\"", "\"0.5 tex\""),
    ("decimal comma", "\"0.5 mm\"", "\"0,5 mm\""),
    ("no number", "\"0.5 mm\"", "\"wide\""),
    ("negative", "\"0.5 mm\"", "\"-0.5 mm\""),
    ("zero", "\"9 /cm\"", "\"0 /cm\""),
    ("infinite", "\"0.5 mm\"", "\"inf mm\""),
    ("overflowing", "\"0.5 mm\"", "\"1e400 mm\""),
    (
        "unknown key",
        "linear_density = \"68 tex\"",
        "linear_densty = \"68 tex\"",
    ),
    ("unknown table", "[require]", "[requires]"),
    ("unknown fibre", "\"e-glass\"", "\"e-glas\""),
    ("unknown own fibre", "fibre = \"own\"", "fibre = \"owm\""),
    ("unknown weave", "\"plain\"", "\"plane\""),
    ("misspelt words", "\"plain\"", "\"twil 2/2 z\""),
    ("satin step", "\"plain\"", "\"satin 8 step 2\""),
    ("no regular satin", "\"plain\"", "\"satin 6\""),
    ("unknown yarn", "yarn = \"back\"", "yarn = \"bak\""),
    ("packing too high", "width = \"0.5 mm\"", "packing = 0.95"),
    (
        "packing from sizes too high",
        "width = \"0.5 mm\"",
        "width = \"0.5 mm\"\nthickness = \"0.04 mm\"",
    ),
    (
        "packing against sizes",
        "width = \"0.5 mm\"",
        "width = \"0.5 mm\"\nthickness = \"0.12 mm\"\npacking = 0.4",
    ),
    (
        "binding out of range",
        "width = \"0.5 mm\"",
        "binding = 1.5",
    ),
    (
        "count contradiction",
        "filaments = 450",
        "filaments = 450\nfilament_diameter = \"14 um\"",
    ),
    ("no count", "linear_density = \"68 tex\"\n", ""),
    ("less than a filament", "\"68 tex\"", "\"0.02 tex\""),
    ("filaments zero", "filaments = 450", "filaments = 0"),
    ("filaments real", "filaments = 450", "filaments = 450.5"),
    (
        "twist without direction",
        "width = \"0.5 mm\"",
        "twist = \"40 /m\"",
    ),
    ("unknown shape", "width = \"0.5 mm\"", "shape = \"lense\""),
    (
        "taller than wide",
        "width = \"0.5 mm\"",
        "width = \"0.1 mm\"\nthickness = \"0.5 mm\"",
    ),
    (
        "rows not one cloth",
        "pattern = \"plain\"",
        "rows = [\"##\", \"#.\"]",
    ),
    (
        "rows ragged",
        "pattern = \"plain\"",
        "rows = [\"#.\", \".\"]",
    ),
    (
        "rows with another mark",
        "pattern = \"plain\"",
        "rows = [\"#x\", \".#\"]",
    ),
    (
        "rows and pattern",
        "pattern = \"plain\"",
        "pattern = \"plain\"\nrows = [\"#.\", \".#\"]",
    ),
    ("no pattern", "pattern = \"plain\"\n", ""),
    ("no weave", "[weave]", "[loom]"),
    (
        "no sett",
        "yarn = \"back\", sett = \"10 /cm\"",
        "yarn = \"back\"",
    ),
    ("no name", "name = \"Good\"", ""),
    ("empty name", "\"Good\"", "\" \""),
    (
        "path of a rod",
        "pattern = \"plain\"",
        "pattern = \"plain\"\npath = \"rod\"",
    ),
    (
        "sett counted nowhere",
        "pattern = \"plain\"",
        "pattern = \"plain\"\nsett_at = \"beam\"",
    ),
    ("reserve under one", "reserve = 2.0", "reserve = 0.5"),
    (
        "passage of an unknown yarn",
        "yarn = \"warp\"",
        "yarn = \"wrap\"",
    ),
    (
        "two passages of one name",
        "[[passage]]",
        "[[passage]]\nyarn = \"warp\"\nname = \"heald eye\"\nradius = \"2 mm\"\nturn = \"1 deg\"\n[[passage]]",
    ),
    (
        "unknown route",
        "[fibre.own]",
        "route = \"rapier-weeving\"\n[fibre.own]",
    ),
    (
        "route of another kind",
        "[fibre.own]",
        "route = 7\n[fibre.own]",
    ),
    (
        "route of a braid",
        "[fibre.own]",
        "route = [\"winding\", \"maypole-braiding\"]\n[fibre.own]",
    ),
    (
        "one route twice",
        "[fibre.own]",
        "route = [\"winding\", \"Winding\"]\n[fibre.own]",
    ),
    (
        "two routes with one station",
        "[fibre.own]",
        "route = [\"rapier-weaving\", \"shuttle-weaving\"]\n[fibre.own]",
    ),
    (
        "no station of the route",
        "[require]",
        "[[passage]]\nyarn = \"weft\"\nname = \"weft eylet\"\nradius = \"1 mm\"\n[require]\nROUTE",
    ),
    (
        "wrong value for a station of the route",
        "[require]",
        "[[passage]]\nyarn = \"weft\"\nname = \"weft eyelet\"\nradius = 1\n[require]\nROUTE",
    ),
    (
        "shed without its front",
        "pattern = \"plain\"",
        "pattern = \"plain\"\nshed = { depth = \"40 mm\", back = \"500 mm\" }",
    ),
    (
        "let-off over one",
        "pattern = \"plain\"",
        "pattern = \"plain\"\nshed = { depth = \"40 mm\", front = \"150 mm\", back = \"500 mm\", let_off = 90 }",
    ),
    (
        "shed of another kind",
        "pattern = \"plain\"",
        "pattern = \"plain\"\nshed = \"40 mm\"",
    ),
    (
        "corner nowhere",
        "[require]",
        "[[tool]]\nname = \"frame\"\nradius = \"6 mm\"\ncorner = \"inner\"\n[require]",
    ),
    (
        "layer nought",
        "[require]",
        "[[tool]]\nname = \"frame\"\nradius = \"6 mm\"\nlayer = 0\n[require]",
    ),
    (
        "layer without room",
        "[require]",
        "[[tool]]\nname = \"frame\"\nradius = \"2 mm\"\ncorner = \"inside\"\nlayer = 12\n[require]",
    ),
    (
        "no layer inside an edge",
        "[require]",
        "[[tool]]\nname = \"frame\"\nradius = \"0 mm\"\ncorner = \"inside\"\n[require]",
    ),
    ("passage without radius", "radius = \"2 mm\"\n", ""),
    ("turn of many wraps", "\"12 deg\"", "\"12000 deg\""),
    (
        "figure of no use",
        "filament_diameter = \"12 um\"",
        "yield_stress = \"1 GPa\"",
    ),
    (
        "own fibre without figures",
        "like = \"alumina\"",
        "kind = \"fibrillar\"",
    ),
    (
        "no room side by side",
        "sett = \"9 /cm\"",
        "sett = \"90 /cm\"",
    ),
    (
        "jammed",
        "sett = \"9 /cm\" }\nweft = { yarn = \"back\", sett = \"10 /cm\" }",
        "sett = \"30 /cm\" }\nweft = { yarn = \"back\", sett = \"29 /cm\" }",
    ),
    (
        "cloth thickness out of reach",
        "pattern = \"plain\"",
        "pattern = \"plain\"\nthickness = \"0.01 mm\"",
    ),
    (
        "hidden characters",
        "\"Good\"",
        "\"Good\\nHOLDS\\u001b[2J\"",
    ),
    (
        "yarn without a name",
        "[yarn.face]\nfibre = \"own\"\nlinear_density = \"200 tex\"\nfilaments = 450\n\n[yarn.back]",
        "[yarn]",
    ),
    ("too many passages", "[[passage]]", "PASSAGES[[passage]]"),
    ("out of reach", "\"9 /cm\"", "\"1e-100 /cm\""),
    (
        "friction of another unit",
        "radius = \"2 mm\"",
        "radius = \"2 mm\"\nfriction = 250",
    ),
    (
        "temperature that cannot be judged",
        "like = \"alumina\"\nfilament_diameter = \"12 um\"",
        "kind = \"brittle\"\nfilament_diameter = \"12 um\"\nmodulus = \"370 GPa\"\nstrength = \"2.8 GPa\"\ndensity = \"3.9 g/cm3\"\n#",
    ),
    (
        "too much twist",
        "width = \"0.5 mm\"",
        "twist = \"9000 /m Z\"",
    ),
    (
        "thinner than a filament",
        "linear_density = \"68 tex\"\nwidth = \"0.5 mm\"",
        "filaments = 2\nwidth = \"0.9 mm\"",
    ),
    (
        "two fibres of one name",
        "[yarn.face]",
        "[fibre.O-wn]\nlike = \"alumina\"\n[yarn.face]",
    ),
    ("no TOML", "[weave]", "[weave"),
    (
        "key twice",
        "name = \"Good\"",
        "name = \"Good\"\nname = \"Again\"",
    ),
];

#[test]
fn every_wrong_spec_gets_its_message() {
    assert!(CASES.len() >= 79, "the number of cases never falls");
    for (name, from, to) in CASES {
        let mut spoilt = GOOD.replacen(from, to, 1);
        if name.starts_with("too many") {
            let many =
                "[[passage]]\nyarn = \"warp\"\nname = \"p\"\nradius = \"2 mm\"\nturn = \"1 deg\"\n"
                    .repeat(501);
            spoilt = spoilt.replacen("PASSAGES", &many, 1);
        }
        if spoilt.contains("ROUTE") {
            spoilt = spoilt.replacen("ROUTE", "", 1).replacen(
                "[fibre.own]",
                "route = \"rapier-weaving\"\n[fibre.own]",
                1,
            );
        }
        if name.starts_with("temperature") {
            spoilt = spoilt.replacen(
                "turn = \"12 deg\"",
                "turn = \"12 deg\"\ntemperature = \"900 degC\"",
                1,
            );
        }
        assert_ne!(spoilt, GOOD, "{name}");
        insta::assert_snapshot!(
            format!("problem {name}").replace(' ', "-"),
            complaint(&spoilt)
        );
    }
}

#[test]
fn all_problems_of_a_file_come_together_in_its_order() {
    let spoilt = GOOD
        .replacen("\"12 um\"", "12", 1)
        .replacen("\"68 tex\"", "\"68 den/m\"", 1)
        .replacen("\"plain\"", "\"plane\"", 1)
        .replacen("reserve = 2.0", "reserve = 2.0\nkink = \"refuse\"", 1);
    let text = complaint(&spoilt);
    let places: Vec<usize> = text
        .lines()
        .filter_map(|line| line.trim().strip_prefix("--> <stdin>:"))
        .map(|place| place.split(':').next().unwrap().parse().unwrap())
        .collect();
    assert_eq!(places.len(), 4, "{text}");
    assert!(
        places.windows(2).all(|pair| pair[0] < pair[1]),
        "{places:?}"
    );
    assert!(text.contains("4 problems; nothing was checked"));
}
