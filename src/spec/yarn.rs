//! `[yarn.NAME]`: fibre, count, twist and what is known of the outline.

use super::fibre::Fibres;
use super::field::{Bound, Field, Placed};
use super::keys::YARN;
use super::problem::Problem;
use super::reader::{Table, quantity_problem};
use crate::quantity::{Dimension, TwistDirection, parse_twist, plain, significant};
use crate::span::Span;
use crate::yarn::{
    CLOSEST_PACKING, Count, CountError, CountGiven, Designation, Outline, Shape, Yarn, YarnForm,
};
use std::sync::Arc;

/// Steeper than any yarn is spun (common practice, no source).
const STEEPEST_HELIX_DEG: f64 = 60.0;

/// A yarn of the spec, and where it stands.
#[derive(Debug, Clone)]
pub struct SpecYarn {
    /// The spec's own name.
    pub name: String,
    /// The yarn, or `None` where it has problems (reported).
    pub yarn: Option<Arc<Yarn>>,
    /// Where its outline is told, else where the yarn stands.
    pub form_span: Span,
}

/// Reads every `[yarn.NAME]`.
pub fn read_yarns(spec: &Table<'_>, fibres: &Fibres) -> Vec<SpecYarn> {
    spec.named_tables("yarn", YARN)
        .into_iter()
        .map(|(name, table)| {
            let form_span = ["width", "thickness", "flatness", "packing", "shape"]
                .iter()
                .find_map(|key| table.place_of(key))
                .unwrap_or_else(|| table.span());
            SpecYarn {
                yarn: read_one(&name, &table, fibres).map(Arc::new),
                name: name.value,
                form_span,
            }
        })
        .collect()
}

fn read_one(name: &Placed<String>, table: &Table<'_>, fibres: &Fibres) -> Option<Yarn> {
    let fibre_name = table.required(table.text("fibre"), "fibre", "\"e-glass\"");
    let fibre = fibre_name.and_then(|name| fibres.find(table, &name));
    let (tex, nominal_diameter_mm) = read_linear_density(table);
    let filaments = table.count("filaments");
    let diameter = table.measure("filament_diameter", Dimension::Length, Bound::Positive);
    let counted = [
        matches!(tex, Field::Wrong),
        matches!(filaments, Field::Wrong),
    ];
    let form = read_form(table);
    let twist = read_twist(table);
    let binding = table.number("binding", Bound::Within(0.0, 1.0)).value();
    let rigidity = table.measure("bending_rigidity", Dimension::Rigidity, Bound::Positive);
    let spread = table
        .number("tension_spread", Bound::Within(1.0, 1e3))
        .value();
    let fibre = fibre?;
    let places = [
        tex.clone().given().map(|placed| placed.span),
        filaments.clone().given().map(|p| p.span),
    ];
    let given = CountGiven {
        linear_density_tex: tex.value(),
        filaments: filaments.value(),
        filament_diameter_mm: diameter.value(),
    };
    if counted.contains(&true) {
        return None;
    }
    let count = match Count::resolve(
        given,
        nominal_diameter_mm.unwrap_or(fibre.diameter_mm),
        fibre.density_g_cm3,
    ) {
        Ok(count) => count,
        // A misspelt key has been reported; it is no count that is missing.
        Err(CountError::TooLittle)
            if table.has_misspelt("linear_density") || table.has_misspelt("filaments") =>
        {
            return None;
        }
        Err(error) => {
            let span = places
                .into_iter()
                .flatten()
                .next()
                .unwrap_or_else(|| table.span());
            let (label, help) = match error {
                CountError::TooLittle => (
                    "no count",
                    "give two of `linear_density`, `filaments` and `filament_diameter`; one with the library's diameter will do",
                ),
                CountError::Contradiction { .. } => {
                    ("these do not fit", "leave one of the three out, or mend it")
                }
                CountError::UnderOneFilament { .. } | CountError::TooMany { .. } => (
                    "does not fit the diameter",
                    "check the unit and `filament_diameter`",
                ),
            };
            table.push(Problem::at(span, error.to_string(), label).help(help));
            return None;
        }
    };
    let yarn = Yarn {
        name: name.value.clone(),
        fibre,
        count,
        designated_diameter_mm: nominal_diameter_mm,
        twist_per_mm: twist.map_or(0.0, |(turns, _)| turns),
        twist_direction: twist.and_then(|(_, direction)| direction),
        form,
        binding: binding.unwrap_or(0.0),
        bending_rigidity_n_mm2: rigidity.value(),
        tension_spread: spread.unwrap_or(1.0),
    };
    (form_agrees(table, &yarn) && twist_holds(table, &yarn)).then_some(yarn)
}

/// The linear density, and the nominal filament diameter where a glass yarn's designation tells one, mm.
fn read_linear_density(table: &Table<'_>) -> (Field<f64>, Option<f64>) {
    let key = "linear_density";
    let designation = table
        .peek_text(key)
        .filter(|text| Designation::begins(&text.value));
    let Some(text) = designation else {
        return (
            table.measure(key, Dimension::LinearDensity, Bound::Positive),
            None,
        );
    };
    match Designation::parse(&text.value) {
        Ok(read) => {
            let tex = Placed {
                value: read.linear_density_tex,
                span: text.span,
            };
            (Field::Given(tex), Some(read.filament_diameter_mm))
        }
        Err(error) => {
            table.push(Problem::at(text.span, error.to_string(), "no designation"));
            (Field::Wrong, None)
        }
    }
}

fn read_twist(table: &Table<'_>) -> Option<(f64, Option<TwistDirection>)> {
    let text = table.text("twist").given()?;
    match parse_twist(&text.value) {
        Ok((turns, _)) if turns < 0.0 => {
            table.push(
                Problem::at(text.span, "`twist` must not be negative", text.value)
                    .help("the direction is told by S or Z behind the unit"),
            );
            None
        }
        Ok(twist) => Some(twist),
        Err(error) => {
            let help = "write turns per length and the direction, \"60 /m Z\"".to_owned();
            table.push(quantity_problem("twist", text.span, &error, help));
            None
        }
    }
}

fn read_form(table: &Table<'_>) -> YarnForm {
    YarnForm {
        shape: table.word("shape", &Shape::ALL).value(),
        width_mm: table
            .measure("width", Dimension::Length, Bound::Positive)
            .value(),
        thickness_mm: table
            .measure("thickness", Dimension::Length, Bound::Positive)
            .value(),
        flatness: table
            .number("flatness", Bound::Within(1.0, f64::MAX))
            .value(),
        packing: read_packing(table),
    }
}

fn read_packing(table: &Table<'_>) -> Option<f64> {
    let packing = table.number("packing", Bound::Positive).given()?;
    if packing.value > CLOSEST_PACKING {
        table.push(
            Problem::at(
                packing.span,
                format!("`packing` is {}, over {CLOSEST_PACKING}", packing.value),
                "too dense",
            )
            .help(
                "round filaments packed as closely as can be fill 0.907; yarns in cloth 0.5 to 0.8",
            ),
        );
        return None;
    }
    Some(packing.value)
}

/// Whether the twist is one that a yarn can hold: a surface helix of at most 60 degrees.
fn twist_holds(table: &Table<'_>, yarn: &Yarn) -> bool {
    let surface_deg = yarn.surface_helix_rad().to_degrees();
    if surface_deg <= STEEPEST_HELIX_DEG {
        return true;
    }
    let span = table.place_of("twist").unwrap_or_else(|| table.span());
    table.push(
        Problem::at(
            span,
            format!("`twist` lays the surface filaments at {surface_deg:.0} deg to the yarn"),
            "too much twist",
        )
        .help(format!(
            "yarns hold up to about {STEEPEST_HELIX_DEG} deg; check the unit, \"60 /m Z\""
        )),
    );
    false
}

/// Whether the sizes agree with each other and the yarn, whatever the spacing; problems are kept.
fn form_agrees(table: &Table<'_>, yarn: &Yarn) -> bool {
    let problem = form_problem(table, yarn);
    let agrees = problem.is_none();
    problem.into_iter().for_each(|problem| table.push(problem));
    agrees
}

fn form_problem(table: &Table<'_>, yarn: &Yarn) -> Option<Problem> {
    let form = yarn.form;
    let place = |keys: &[&str]| {
        keys.iter()
            .find_map(|key| table.place_of(key))
            .unwrap_or_else(|| table.span())
    };
    if yarn.is_monofilament() {
        let bare = YarnForm {
            shape: form.shape.filter(|shape| *shape == Shape::Round),
            ..YarnForm::default()
        };
        return (form != bare).then(|| {
            Problem::at(
                place(&["width", "thickness", "flatness", "packing", "shape"]),
                "a single filament is a solid circle of its own diameter",
                "has no other outline",
            )
            .help("leave `shape`, `width`, `thickness`, `flatness` and `packing` out")
        });
    }
    let shape = yarn.shape();
    let (w, t) = form.sizes_mm(shape)?;
    if let Some(flatness) = form.flatness
        && (w / t / flatness - 1.0).abs() > 0.05
    {
        return Some(
            Problem::at(
                place(&["flatness"]),
                format!(
                    "width over thickness is {}, not {flatness}",
                    plain(w / t, 3)
                ),
                "contradicts the sizes",
            )
            .help("leave one of `width`, `thickness` and `flatness` out"),
        );
    }
    let Some(outline) = Outline::new(shape, w, t) else {
        return Some(
            Problem::at(
                place(&["thickness", "width", "flatness"]),
                format!("a {} cannot be {w} mm wide and {t} mm thick", shape.word()),
                "no such outline",
            )
            .help("width must not be below thickness; a round yarn has both alike"),
        );
    };
    let packing = yarn.fibre_area_mm2() / outline.area_mm2();
    let sizes = format!(
        "{} mm2 of fibre in a {} of {} mm2 is a packing of {packing:.2}",
        significant(yarn.fibre_area_mm2(), 3),
        shape.word(),
        significant(outline.area_mm2(), 3)
    );
    if packing > CLOSEST_PACKING {
        return Some(
            Problem::at(
                place(&["thickness", "width"]),
                format!("{sizes}, over {CLOSEST_PACKING}"),
                "too small",
            )
            .help("check linear density, width and thickness against each other"),
        );
    }
    let given = form
        .packing
        .filter(|given| (packing / given - 1.0).abs() > 0.05)?;
    Some(
        Problem::at(
            place(&["packing"]),
            format!("{sizes}, not {given}"),
            "contradicts the sizes",
        )
        .help("sizes and linear density fix the packing: leave `packing` out"),
    )
}
