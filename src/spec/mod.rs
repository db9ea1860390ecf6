//! From a TOML text to a valid [`Spec`], with every problem of the text found at once.
//!
//! The text is read into TOML's own tree with places (`toml`), walked with [`keys`] in hand, and turned into
//! values in the internal units. A `Spec` that exists is valid: its yarns have a count and an outline that
//! fits their spacing, its pattern is one cloth. Whether the yarns can interlace at that sett is geometry,
//! and the weave room's to say.

mod document;
mod fibre;
mod field;
pub mod keys;
mod laid;
mod problem;
mod reader;
mod route;
mod shed;
mod tree;
mod way;
mod weave;
mod yarn;

pub use document::{Document, KeyPath, NewValue, SetError};
pub use problem::Problem;
pub use shed::Shed;
pub use way::{Corner, OPEN_SHED, Passage, Tool};
pub use weave::{
    DEFAULT_PATH, DEFAULT_PEAK, DEFAULT_REST, DEFAULT_TENSION_N_TEX, PathModel, SettAt, System,
    Weave,
};

use crate::fibre::{Fibre, Kind};
use crate::pattern::Weaves;
use crate::quantity::Dimension;
use crate::span::{SourceText, Span};
use fibre::Fibres;
use field::Bound;
use reader::Table;
use std::sync::Arc;

/// Smallest reserve that counts as holding, where none is given.
pub const DEFAULT_RESERVE: f64 = 2.0;

/// What counts as holding.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Require {
    /// Smallest reserve that counts as holding.
    pub reserve: f64,
    /// Whether the spec gave it.
    pub reserve_given: bool,
    /// Broken filaments per metre of yarn that are allowed, where given.
    pub broken_per_m: Option<f64>,
    /// Whether kink bands fail the spec.
    pub refuse_kinks: bool,
}

/// A valid spec.
#[derive(Debug, Clone)]
pub struct Spec {
    /// The text it was read from.
    pub source: Arc<SourceText>,
    /// What the report calls the cloth.
    pub name: String,
    /// The owner's own number.
    pub reference: Option<String>,
    /// The weave.
    pub weave: Weave,
    /// The yarns' ways, in order.
    pub passages: Vec<Passage>,
    /// The corners the cloth is laid over.
    pub tools: Vec<Tool>,
    /// What counts as holding.
    pub require: Require,
}

impl Spec {
    /// Reads a spec; patterns are looked up in `weaves`.
    ///
    /// # Errors
    /// All problems of the text, in its order. Where the text is no TOML, only those of its syntax.
    pub fn read(source: SourceText, weaves: &Weaves) -> Result<Self, Vec<Problem>> {
        Document::parse(source)?.spec(weaves)
    }
}

fn read_parts(table: &Table<'_>, source: &Arc<SourceText>, weaves: &Weaves) -> Option<Spec> {
    let name = table.required(table.text("name"), "name", "\"Furnace curtain, trial 1\"");
    let reference = table.text("reference").value();
    let fibres = Fibres::read(table);
    let yarns = yarn::read_yarns(table, &fibres);
    let weave = weave::read_weave(table, &yarns, weaves);
    let passages = way::read_passages(table, weave.as_ref());
    let tools = way::read_tools(table);
    let require = read_require(table, weave.as_ref());
    Some(Spec {
        source: Arc::clone(source),
        name: name?.value,
        reference,
        weave: weave?,
        passages,
        tools,
        require,
    })
}

fn read_require(spec: &Table<'_>, weave: Option<&Weave>) -> Require {
    let table = spec.table("require", "[require]", keys::REQUIRE).value();
    let reserve = table.as_ref().and_then(|table| {
        table
            .number("reserve", Bound::Within(1.0, f64::MAX))
            .value()
    });
    let broken = table.as_ref().and_then(|table| {
        let broken = table
            .measure("broken_filaments", Dimension::Number, Bound::Positive)
            .given()?;
        // What cannot be counted is never a pass.
        for system in weave.iter().flat_map(|weave| [&weave.warp, &weave.weft]) {
            if let Some(problem) = uncountable(&system.yarn.fibre, &broken.span) {
                table.push(problem);
                break;
            }
        }
        Some(broken.value)
    });
    let kinks = [("allow", false), ("refuse", true)];
    Require {
        reserve: reserve.unwrap_or(DEFAULT_RESERVE),
        reserve_given: reserve.is_some(),
        broken_per_m: broken,
        refuse_kinks: table
            .and_then(|table| table.word("kinks", &kinks).value())
            .unwrap_or(false),
    }
}

/// Why the broken filaments of a fibre cannot be counted.
fn uncountable(fibre: &Fibre, at: &Span) -> Option<Problem> {
    if fibre.breaks_are_countable() {
        return None;
    }
    let (why, help) = match fibre.kind() {
        Kind::Ductile => (
            "it yields long before it breaks",
            "leave `broken_filaments` out",
        ),
        _ => (
            "how its strength scatters is not known",
            "give `weibull_modulus` and `gauge_length` under the fibre, or leave `broken_filaments` out",
        ),
    };
    let message = format!(
        "broken filaments of fibre `{}` cannot be counted: {why}",
        fibre.id
    );
    Some(Problem::at(at.clone(), message, "cannot be judged").help(help))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::bend::{Stage, SystemName};
    use crate::yarn::Shape;

    const FULL: &str = r##"
name = "Full"
reference = "X-1"
[fibre.own]
like = "alumina"
filament_diameter = "12 um"
max_temperature = "1112 degF"
[yarn.face]
fibre = "OWN"
linear_density = "1800 den"
filaments = 420
twist = "60 /m S"
shape = "racetrack"
width = "20 mil"
packing = 0.7
binding = 0.25
bending_rigidity = "0.05 N mm2"
tension_spread = 1.5
[yarn.back]
fibre = "PAN carbon, standard modulus"
linear_density = "198 tex"
[weave]
rows = ["#.", ".#"]
thickness = "0.9 mm"
rest = "20 %"
peak = 1.5
warp = { yarn = "face", sett = "25.4 /in", tension = "2.5 cN/tex", crimp = "2.1 %" }
weft = { yarn = "back", sett = "5 /cm", tension = "40 cN" }
[[passage]]
yarn = "weft"
name = "eyelet"
stage = "winding"
radius = "0 mm"
turn = "90 deg"
tension = "20 cN"
temperature = "250 degC"
[[tool]]
name = "corner"
radius = "6 mm"
bend_axis = "30 deg"
[require]
reserve = 1.5
broken_filaments = "5000 /km"
kinks = "refuse"
"##;

    #[test]
    fn every_value_arrives_in_internal_units_with_its_place() {
        let spec = Spec::read(SourceText::new("full", FULL), &Weaves::builtin()).unwrap();
        assert_eq!(
            (spec.name.as_str(), spec.reference.as_deref()),
            ("Full", Some("X-1"))
        );
        let near = |a: f64, b: f64| assert!((a - b).abs() < 1e-9, "{a} {b}");
        let face = &spec.weave.warp.yarn;
        assert_eq!(
            (face.name.as_str(), face.fibre.id.as_str()),
            ("face", "own")
        );
        near(face.count.linear_density_tex, 200.0);
        assert_eq!(face.count.filaments, 420);
        near(face.twist_per_mm, 0.06);
        assert_eq!(face.form.shape, Some(Shape::Racetrack));
        near(face.form.width_mm.unwrap(), 0.508);
        near(face.binding, 0.25);
        near(face.bending_rigidity_n_mm2.unwrap(), 0.05);
        near(face.tension_spread, 1.5);
        near(face.fibre.max_temp_c.unwrap(), 600.0);
        assert_eq!(spec.weave.weft.yarn.fibre.id, "carbon-pan-sm");
        near(spec.weave.warp.sett_per_mm, 1.0);
        near(spec.weave.warp.tension_n, 0.025 * 200.0);
        near(spec.weave.warp.crimp.unwrap(), 0.021);
        near(spec.weave.weft.tension_n, 0.4);
        near(spec.weave.thickness_mm.unwrap(), 0.9);
        near(spec.weave.rest, 0.2);
        near(spec.weave.peak, 1.5);
        let passage = &spec.passages[0];
        assert_eq!(
            (passage.system, passage.stage),
            (SystemName::Weft, Stage::Winding)
        );
        near(passage.turn_rad, std::f64::consts::FRAC_PI_2);
        near(passage.tension_n.unwrap(), 0.2);
        near(passage.temperature_c.unwrap(), 250.0);
        assert!(!passage.friction_given && passage.friction > 0.0);
        near(spec.tools[0].bend_axis_rad.unwrap(), 30f64.to_radians());
        assert!(spec.require.refuse_kinks);
        near(spec.require.broken_per_m.unwrap(), 5.0);
        near(spec.require.reserve, 1.5);
        assert_eq!(&spec.source.text[passage.radius_span.clone()], "\"0 mm\"");
        assert_eq!(
            &spec.source.text[spec.weave.warp.sett_span.clone()],
            "\"25.4 /in\""
        );
        assert!(spec.source.text[spec.weave.weft.span.clone()].starts_with("{ yarn = \"back\""));
    }

    /// G 75 by its yield is 66.14 tex of 9 um; with the count given, tex and count fix the diameter (9.1 um at 2.54 g/cm3).
    #[test]
    fn a_glass_designation_gives_tex_and_filament() {
        let text = "name = \"n\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"ECG 75 1/0\"\n[weave]\n\
            pattern = \"30-07 01-01-03\"\nwarp = { yarn = \"y\", sett = \"10 /cm\" }\nweft = { yarn = \"y\", sett = \"10 /cm\" }\n";
        let count = |text: &str| {
            let spec = Spec::read(SourceText::new("n", text), &Weaves::builtin()).unwrap();
            assert_eq!(spec.weave.woven.iso_9354.as_deref(), Some("30-07 01-01-03"));
            spec.weave.warp.yarn.count
        };
        let by_letter = count(text);
        assert!((by_letter.linear_density_tex - 66.14).abs() < 0.005);
        assert_eq!(by_letter.filaments, 409);
        assert!((by_letter.filament_diameter_mm - 0.009).abs() < 1e-12);
        let counted = count(&text.replace("1/0\"", "1/0\"\nfilaments = 400"));
        assert!((1e3 * counted.filament_diameter_mm - 9.104).abs() < 0.001);
    }

    #[test]
    fn what_is_left_out_takes_the_default_of_the_trade() {
        let text = "name = \"n\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\n\
            pattern = \"plain\"\nwarp = { yarn = \"y\", sett = \"10 /cm\" }\nweft = { yarn = \"y\", sett = \"10 /cm\" }\n";
        let spec = Spec::read(SourceText::new("n", text), &Weaves::builtin()).unwrap();
        let weave = &spec.weave;
        assert!((weave.warp.tension_n - 0.68).abs() < 1e-12 && !weave.warp.tension_given);
        assert_eq!((weave.rest, weave.peak), (DEFAULT_REST, DEFAULT_PEAK));
        assert_eq!(spec.require.reserve, DEFAULT_RESERVE);
        assert!(spec.passages.is_empty() && spec.tools.is_empty());
    }
}
