//! Every key a spec may have: what it takes, what holds without it, and what it means.
//!
//! One table for the reader (unknown keys are refused with the nearest known one) and for the documents (a
//! test holds the README's table against this one).

/// One key of a table of the spec.
#[derive(Debug, Clone, Copy)]
pub struct Key {
    /// Its name.
    pub name: &'static str,
    /// What it takes, with an example.
    pub takes: &'static str,
    /// What holds where it is left out.
    pub default: &'static str,
    /// What it means, in one line.
    pub says: &'static str,
}

const fn key(
    name: &'static str,
    takes: &'static str,
    default: &'static str,
    says: &'static str,
) -> Key {
    Key {
        name,
        takes,
        default,
        says,
    }
}

/// The spec's top level.
pub const SPEC: &[Key] = &[
    key(
        "name",
        "text",
        "required",
        "what the report calls the cloth",
    ),
    key("reference", "text", "none", "your own number for the spec"),
    key(
        "fibre",
        "tables `[fibre.NAME]`",
        "none",
        "fibres of your own",
    ),
    key("yarn", "tables `[yarn.NAME]`", "required", "the yarns"),
    key(
        "weave",
        "table `[weave]`",
        "required",
        "the weave and its two systems",
    ),
    key(
        "route",
        "route or list of routes, \"rapier-weaving\", [\"creel-warping\", \"rapier-weaving\"]",
        "none",
        "ready routes, in order; `lissom routes` lists them",
    ),
    key(
        "passage",
        "tables `[[passage]]`",
        "none",
        "what a yarn runs over, in order; of the same `yarn` and `name` as a station of the route it overrides what it gives",
    ),
    key(
        "tool",
        "tables `[[tool]]`",
        "none",
        "corners the cloth is laid over",
    ),
    key(
        "require",
        "table `[require]`",
        "see there",
        "what counts as holding",
    ),
];

/// `[fibre.NAME]`.
pub const FIBRE: &[Key] = &[
    key(
        "like",
        "fibre, \"alumina\"",
        "none: then all figures its kind needs",
        "library record to start from",
    ),
    key(
        "kind",
        "\"brittle\", \"fibrillar\" or \"ductile\"",
        "from `like`",
        "how the fibre fails",
    ),
    key(
        "filament_diameter",
        "length, \"12.5 um\"",
        "from `like`",
        "diameter of one filament",
    ),
    key(
        "modulus",
        "stress, \"373 GPa\"",
        "from `like`",
        "axial Young's modulus",
    ),
    key(
        "strength",
        "stress, \"2.8 GPa\"",
        "from `like`",
        "mean tensile strength",
    ),
    key(
        "strength_basis",
        "\"filament\", \"strand\" or \"yarn\"",
        "from `like`, else yarn",
        "what the strength was measured on",
    ),
    key(
        "weibull_modulus",
        "number, 1 to 200",
        "from `like`, else unknown",
        "scatter of the strength: Weibull modulus",
    ),
    key(
        "gauge_length",
        "length, \"25 mm\"",
        "from `like`",
        "gauge length of the strength; needed with a Weibull modulus",
    ),
    key(
        "flaws",
        "\"surface\", \"volume\", \"both\" or \"none\"",
        "from `like`, else surface",
        "where the flaws lie; all but volume count as surface",
    ),
    key(
        "density",
        "density, \"3.9 g/cm3\"",
        "from `like`",
        "density of the fibre",
    ),
    key(
        "compressive_strength",
        "stress, \"0.45 GPa\"",
        "from `like`",
        "compressive strength or kink onset",
    ),
    key(
        "compression_basis",
        "\"uniaxial\" or \"bending\"",
        "from `like`, else bending",
        "test it was read from; uniaxial counts twice in bending",
    ),
    key(
        "yield_stress",
        "stress, \"250 MPa\"",
        "from `like`",
        "yield stress of a ductile fibre",
    ),
    key(
        "strain_at_break",
        "share, \"30 %\"",
        "from `like`",
        "elongation at break of a ductile fibre",
    ),
    key(
        "kink_strength_loss",
        "share, \"10 %\"",
        "from `like`",
        "strength a fibrillar fibre loses in kink bands",
    ),
    key(
        "max_temperature",
        "temperature, \"300 degC\"",
        "from `like`, else not judged",
        "limit for handling in air",
    ),
    key(
        "hazard",
        "\"conductive-carbon\", \"glass\", \"ceramic\", \"wire\", \"organic-dust\" or \"none\"",
        "from `like`, else not known",
        "the caution the report carries",
    ),
    key(
        "friction",
        "number, 0.25",
        "from `like`, else 0.25",
        "coefficient on a guide",
    ),
];

/// `[yarn.NAME]`.
pub const YARN: &[Key] = &[
    key(
        "fibre",
        "fibre, \"e-glass\"",
        "required",
        "an id or a full name of the library, or one of your own",
    ),
    key(
        "linear_density",
        "linear density, \"200 tex\", or a glass yarn's designation, \"ECG 75 1/0\", \"EC9 68\"",
        "from filaments and diameter",
        "mass per length",
    ),
    key(
        "filaments",
        "whole number, 420",
        "from linear density and diameter",
        "filaments in the yarn; 1 is a wire or monofilament",
    ),
    key(
        "filament_diameter",
        "length, \"9 um\"",
        "from linear density and filaments, else the fibre's",
        "diameter of one filament",
    ),
    key(
        "twist",
        "turns per length and direction, \"60 /m Z\"",
        "0",
        "twist",
    ),
    key(
        "shape",
        "\"lens\", \"racetrack\", \"ellipse\" or \"round\"",
        "lens; round for one filament or a surface helix over 15 deg",
        "outline of the yarn in the cloth",
    ),
    key(
        "width",
        "length, \"0.50 mm\"",
        "0.9 of the spacing",
        "width of the outline",
    ),
    key(
        "thickness",
        "length, \"0.12 mm\"",
        "from area",
        "thickness of the outline",
    ),
    key(
        "flatness",
        "number, 4.5",
        "from area",
        "width over thickness",
    ),
    key(
        "packing",
        "number up to 0.91",
        "0.65, or from both sizes",
        "fibre area over outline area",
    ),
    key(
        "binding",
        "number 0 to 1",
        "0",
        "0: filaments slide freely, 1: fully bonded",
    ),
    key(
        "bending_rigidity",
        "rigidity, \"0.05 N mm2\"",
        "from filaments and binding",
        "measured rigidity of the yarn: it shapes its path and, with a binding above 0, eases its bends",
    ),
    key(
        "tension_spread",
        "number, 1 or more",
        "1.0",
        "pull of the most loaded filament over the mean",
    ),
];

/// `[weave]`.
pub const WEAVE: &[Key] = &[
    key(
        "pattern",
        "name, words or ISO 9354 code, \"satin-8\", \"twill 2/2 z\", \"30-07 01-01-03\"",
        "required, or `rows`",
        "the weave",
    ),
    key(
        "rows",
        "list of rows, [\"#.\", \".#\"]",
        "required, or `pattern`",
        "the repeat as drawn, `#` where the warp is up; the last row is the first pick",
    ),
    key("warp", "table, see below", "required", "the ends"),
    key("weft", "table, see below", "required", "the picks"),
    key(
        "thickness",
        "length, \"0.23 mm\"",
        "from the yarns",
        "measured cloth thickness, in the state of the sett; the yarns' thicknesses are scaled to meet it",
    ),
    key(
        "path",
        "\"stiff\" or \"taut\"",
        "stiff",
        "model of the yarns' paths: rods of least energy in two states, or flexible threads in one",
    ),
    key(
        "sett_at",
        "\"finished\" or \"loom\"",
        "finished",
        "state in which the sett was counted; in the other the yarns keep their lengths (stiff paths)",
    ),
    key(
        "rest",
        "share, \"10 %\"",
        "10 %",
        "share of the mean pull that stays in the cloth at rest",
    ),
    key(
        "peak",
        "number, 1 or more",
        "2.0",
        "peak over mean tension, on the loom and at every station",
    ),
    key(
        "shed",
        "table, see below",
        "none: no pull of its own",
        "the open shed: it lengthens the warp and adds to its pull",
    ),
];

/// `warp` and `weft` under `[weave]`.
pub const SYSTEM: &[Key] = &[
    key(
        "yarn",
        "yarn, \"face\"",
        "required",
        "one of the spec's yarns",
    ),
    key(
        "sett",
        "threads per length, \"18 /cm\"",
        "required",
        "ends or picks per length of cloth",
    ),
    key(
        "tension",
        "force or force per tex, \"40 cN\", \"1 cN/tex\"",
        "1 cN/tex",
        "mean pull on one yarn at the fell",
    ),
    key(
        "crimp",
        "share, \"2.1 %\"",
        "found from equilibrium",
        "measured crimp, straightened over cloth length less 1, in the state of the sett",
    ),
];

/// `shed` under `[weave]`.
pub const SHED: &[Key] = &[
    key(
        "depth",
        "length, \"40 mm\"",
        "required",
        "how far an end is lifted from the straight line between backrest and fell",
    ),
    key(
        "front",
        "length, \"150 mm\"",
        "required",
        "from the heald to the fell",
    ),
    key(
        "back",
        "length, \"500 mm\"",
        "required",
        "from the heald back to the backrest",
    ),
    key(
        "let_off",
        "share, \"90 %\", or number 0 to 1",
        "0",
        "share of the lengthening that an easing backrest or the let-off takes up",
    ),
];

/// `[[passage]]`.
pub const PASSAGE: &[Key] = &[
    key(
        "yarn",
        "\"warp\" or \"weft\"",
        "required",
        "which yarn runs over it",
    ),
    key(
        "name",
        "text, \"heald eye\"",
        "required",
        "what the report calls it",
    ),
    key(
        "stage",
        "\"winding\", \"warping\", \"weaving\" or \"finishing\"",
        "the route's, else weaving",
        "where on the way it stands",
    ),
    key(
        "radius",
        "length, \"1.5 mm\"; \"0 mm\" is a knife edge",
        "the route's, else required",
        "radius of the edge, guide or roller",
    ),
    key(
        "turn",
        "angle, \"12 deg\"",
        "the route's, else required",
        "wrap angle",
    ),
    key(
        "friction",
        "number, 0.25",
        "the route's, else the fibre's",
        "coefficient of friction on it",
    ),
    key(
        "tension",
        "force or force per tex, \"20 cN\"",
        "the route's, else from the chain",
        "mean pull in front of it; restarts the chain (creel, beam, spool)",
    ),
    key(
        "temperature",
        "temperature, \"250 degC\"",
        "the route's, else none",
        "temperature of the yarn there",
    ),
];

/// `[[tool]]`.
pub const TOOL: &[Key] = &[
    key(
        "name",
        "text, \"frame corner\"",
        "required",
        "what the report calls it",
    ),
    key(
        "radius",
        "length, \"6 mm\"",
        "required",
        "radius of the corner",
    ),
    key(
        "bend_axis",
        "angle from the warp, \"0 deg\"",
        "both systems bent fully",
        "direction of the corner's edge",
    ),
    key(
        "corner",
        "\"outside\" or \"inside\"",
        "outside",
        "over a convex edge (male tool) or into a concave one (female tool)",
    ),
    key(
        "layer",
        "whole number, 3",
        "1",
        "which layer of the lay, counted from the tool, each as thick as the cloth",
    ),
];

/// `[require]`.
pub const REQUIRE: &[Key] = &[
    key(
        "reserve",
        "number, 1 or more",
        "2.0",
        "smallest reserve that counts as holding",
    ),
    key(
        "broken_filaments",
        "number per length, \"5 /m\"",
        "counted, not judged",
        "broken filaments allowed per metre of one yarn, at each bend",
    ),
    key(
        "kinks",
        "\"allow\" or \"refuse\"",
        "allow",
        "whether kink bands in fibrillar fibres fail the spec",
    ),
];

/// Every table with the words the documents use for it.
pub const TABLES: &[(&str, &[Key])] = &[
    ("top level", SPEC),
    ("[fibre.NAME]", FIBRE),
    ("[yarn.NAME]", YARN),
    ("[weave]", WEAVE),
    ("warp, weft", SYSTEM),
    ("shed", SHED),
    ("[[passage]]", PASSAGE),
    ("[[tool]]", TOOL),
    ("[require]", REQUIRE),
];
