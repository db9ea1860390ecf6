//! What the result hangs on that the spec did not say: every default used, in words with its value.

use super::Outcome;
use crate::bend::Stage;
use crate::fibre::FigureName;
use crate::passage::{reed_strokes, sheddings};
use crate::quantity::{plain, significant};
use crate::spec::{DEFAULT_TENSION_N_TEX, Passage, PathModel, SettAt, Spec, System};
use crate::weave::{Closure, Cloth, ClothYarn, SharedBy};
use crate::weave::{shed_pull_n, shed_strain};
use crate::yarn::{Basis, DEFAULT_PACKING, DEFAULT_WIDTH_SHARE, Followed, Yarn};

/// Every default and simplification behind this outcome, in a stable order.
pub fn assumptions(spec: &Spec, outcome: &Outcome) -> Vec<String> {
    let mut said = Vec::new();
    let (weave, cloth) = (&spec.weave, &outcome.cloth);
    said.push(match weave.path {
        PathModel::Taut => {
            "taut path: the yarns bend like strings round each other; stiff yarns bend less sharply, or more in very tight cloth"
                .to_owned()
        }
        PathModel::Stiff => {
            let default = if weave.sett_at_given { "" } else { " (the default)" };
            let (counted, other) = match weave.sett_at {
                SettAt::Finished => ("at rest", "on the loom"),
                SettAt::Loom => ("on the loom", "at rest"),
            };
            format!(
                "stiff path: each yarn takes the course of least energy, elastic and without friction; sett counted {counted}{default}, {other} the yarns keep their lengths"
            )
        }
    });
    said.push(height_shared(cloth));
    if let Some(factor) = cloth.thickness_factor {
        said.push(format!(
            "measured cloth thickness met by yarns {} times as thick as they would lie",
            significant(factor, 3)
        ));
    }
    if let Some(packing) = cloth.raised_packing {
        said.push(format!(
            "the assumed packing of {DEFAULT_PACKING} leaves these yarns no room to interlace; it is raised to {}, the least that does: measure width and thickness",
            significant(packing, 3)
        ));
    }
    let mut fibres: Vec<&str> = Vec::new();
    let mut yarns: Vec<&str> = Vec::new();
    for system in [&weave.warp, &weave.weft] {
        if !fibres.contains(&system.yarn.fibre.id.as_str()) {
            fibres.push(&system.yarn.fibre.id);
            said.extend(fibre_figures(&system.yarn));
        }
        if !yarns.contains(&system.yarn.name.as_str()) {
            yarns.push(&system.yarn.name);
            said.extend(count(&system.yarn));
            said.extend(bundle(&system.yarn, weave.path));
        }
    }
    for (word, system, woven) in [
        ("warp", &weave.warp, &cloth.warp),
        ("weft", &weave.weft, &cloth.weft),
    ] {
        said.push(outline(
            word,
            &system.yarn,
            woven,
            cloth.thickness_factor.is_some(),
        ));
        said.extend(rigidity(word, &system.yarn, woven));
        said.extend(tension(word, system));
    }
    if !weave.peak_given {
        said.push(format!(
            "peak pull {} times the mean (common practice, no source)",
            plain(weave.peak, 3)
        ));
    }
    if !weave.rest_given {
        said.push(format!(
            "off the loom {} % of the mean pull stays in the yarns (an assumption)",
            plain(100.0 * weave.rest, 3)
        ));
    }
    said.extend(way(spec));
    said.extend(open_shed(spec));
    if !spec.require.reserve_given {
        said.push(format!(
            "a reserve of {} counts as holding (the default)",
            plain(spec.require.reserve, 3)
        ));
    }
    said.push(
        "pressure of upper filaments on lower ones, abrasion and repeated bending are left out; strength scatters only where broken filaments are counted"
            .to_owned(),
    );
    said
}

fn height_shared(cloth: &Cloth) -> String {
    let by = match cloth.closed.by {
        SharedBy::Closure(Closure::WarpCrimp(_)) => "measured warp crimp".to_owned(),
        SharedBy::Closure(Closure::WeftCrimp(_)) => "measured weft crimp".to_owned(),
        SharedBy::Closure(Closure::BothCrimps(..)) => {
            let percent = 100.0 * cloth.closed.mismatch.unwrap_or(0.0);
            let word = if percent < 0.0 { "less" } else { "more" };
            format!(
                "both measured crimps, which together ask for {} % {word} height than the yarns' thicknesses give (thickness or crimp is off by that)",
                significant(percent.abs(), 2)
            )
        }
        SharedBy::Closure(Closure::Tensions(..)) => {
            "balance of the contact forces at the given tensions".to_owned()
        }
        SharedBy::Closure(Closure::EqualHeights) => {
            "equal wave heights, as neither crimp nor both tensions are given".to_owned()
        }
        SharedBy::LeastEnergy => {
            "least energy of both: the contact forces of every crossing in balance".to_owned()
        }
        SharedBy::KeptLengths => "least energy, the yarns as long as in the other state".to_owned(),
    };
    let limited = if cloth.closed.jam_limited {
        "; that split does not exist at this sett, the nearest that does is taken (jam limited)"
    } else {
        ""
    };
    format!("warp and weft share the height by {by}{limited}")
}

fn fibre_figures(yarn: &Yarn) -> Option<String> {
    let fibre = &yarn.fibre;
    let mut figures = vec![(
        FigureName::Modulus,
        format!("modulus {} GPa", plain(fibre.modulus_mpa / 1e3, 4)),
    )];
    figures.push((
        FigureName::Strength,
        format!(
            "strength {} GPa ({})",
            plain(fibre.strength_mpa / 1e3, 4),
            fibre.strength_basis.word()
        ),
    ));
    if let Some(compression) = fibre.compression() {
        figures.push((
            FigureName::Compression,
            format!(
                "compressive strength {} GPa ({}), {} GPa in bending",
                plain(compression.strength_mpa / 1e3, 4),
                compression.basis.word(),
                plain(compression.in_bending_mpa() / 1e3, 4)
            ),
        ));
    }
    let told: Vec<String> = figures
        .into_iter()
        .filter_map(|(name, text)| {
            let origin = fibre.origin(name)?;
            (*origin != crate::fibre::Origin::Given).then(|| format!("{text}: {origin}"))
        })
        .collect();
    (!told.is_empty()).then(|| format!("fibre `{}`: {}", fibre.id, told.join("; ")))
}

fn count(yarn: &Yarn) -> Option<String> {
    let count = &yarn.count;
    let um = significant(1e3 * count.filament_diameter_mm, 3);
    let library = if count.library_diameter {
        " (the fibre's diameter)"
    } else {
        ""
    };
    let text = match count.followed {
        Followed::Nothing => return None,
        Followed::Diameter => format!("filaments are {um} um thick, from linear density and count"),
        Followed::Filaments => format!(
            "{} filaments, from linear density and a diameter of {um} um{library}",
            count.filaments
        ),
        Followed::LinearDensity => format!(
            "{} tex, from {} filaments of {um} um{library}",
            significant(count.linear_density_tex, 4),
            count.filaments
        ),
    };
    Some(format!("yarn `{}`: {text}", yarn.name))
}

/// How the filaments hang together.
fn bundle(yarn: &Yarn, path: PathModel) -> Option<String> {
    if yarn.is_monofilament() || yarn.binding > 0.0 {
        return None;
    }
    let measured = if yarn.bending_rigidity_n_mm2.is_some() {
        match path {
            PathModel::Taut => "; the measured rigidity is of no account then",
            PathModel::Stiff => {
                "; the measured rigidity shapes the yarn's path, not its filaments' own bends"
            }
        }
    } else {
        ""
    };
    let twist = if yarn.twist_per_mm == 0.0 {
        ", untwisted"
    } else {
        ""
    };
    Some(format!(
        "yarn `{}`: filaments slide freely over each other (binding 0){twist}, pull spread {}{measured}",
        yarn.name,
        plain(yarn.tension_spread, 3)
    ))
}

/// Where the rigidity of a stiff yarn comes from, and between which bounds it lies.
fn rigidity(word: &str, yarn: &Yarn, woven: &ClothYarn) -> Option<String> {
    let system = woven.solved()?;
    let value = |rigidity: f64| significant(rigidity, 2);
    let (free, bonded) = (
        yarn.free_rigidity_n_mm2(),
        yarn.bonded_rigidity_n_mm2(&woven.laid),
    );
    let basis = if yarn.bending_rigidity_n_mm2.is_some() {
        "as given".to_owned()
    } else if yarn.is_monofilament() {
        "a single filament".to_owned()
    } else {
        format!("from filaments and binding {}", plain(yarn.binding, 3))
    };
    let bounds = if yarn.is_monofilament() {
        String::new()
    } else {
        format!("; free {}, fully bonded {}", value(free), value(bonded))
    };
    Some(format!(
        "{word} yarn `{}`: bending rigidity {} N mm2 ({basis}{bounds})",
        yarn.name,
        value(system.rigidity_n_mm2)
    ))
}

fn outline(word: &str, yarn: &Yarn, woven: &ClothYarn, scaled: bool) -> String {
    let outline = &woven.laid.outline;
    let size = format!(
        "{} {} x {} mm, packing {}",
        outline.shape().word(),
        significant(outline.width_mm(), 3),
        significant(outline.thickness_mm(), 3),
        significant(woven.laid.packing, 2)
    );
    let packing = match yarn.form.packing {
        _ if scaled => "from the measured thickness of the cloth",
        Some(_) => "as given",
        None => "assumed",
    };
    let basis = match woven.laid.basis {
        Basis::Solid => "a single filament".to_owned(),
        Basis::Round => format!("round, packing {packing}"),
        Basis::Measured => "sizes as given, packing follows".to_owned(),
        Basis::OneSize => format!("one size as given, packing {packing}"),
        Basis::Assumed => {
            format!("width assumed as {DEFAULT_WIDTH_SHARE} of the spacing, packing {packing}")
        }
    };
    let squeezed = if woven.laid.squeezed {
        let share = outline.width_mm() / woven.spacing_mm;
        format!(
            "; squeezed to {} of its spacing, all that the other system leaves",
            significant(share, 3)
        )
    } else {
        String::new()
    };
    format!("{word} yarn `{}`: {size} ({basis}{squeezed})", yarn.name)
}

fn tension(word: &str, system: &System) -> Option<String> {
    (!system.tension_given).then(|| {
        format!(
            "{word} tension {} cN: {} cN/tex (common practice, no source)",
            significant(100.0 * system.tension_n, 3),
            plain(100.0 * DEFAULT_TENSION_N_TEX, 3)
        )
    })
}

/// The ready routes, and what the spec overrides of them.
fn routes(spec: &Spec) -> Vec<String> {
    let mut names: Vec<&str> = Vec::new();
    for route in spec.passages.iter().filter_map(|passage| passage.route) {
        if !names.contains(&route) {
            names.push(route);
        }
    }
    let told = |name: &&str| {
        let overridden: Vec<String> = spec
            .passages
            .iter()
            .filter(|passage| passage.route == Some(*name) && passage.number.is_some())
            .map(|passage| format!("{} ({})", passage.name, passage.system.word()))
            .collect();
        let overridden = if overridden.is_empty() {
            String::new()
        } else {
            format!("; overridden at: {}", overridden.join(", "))
        };
        format!(
            "route `{name}`: radii, turns and tensions of its stations are common practice without a source where `lissom routes {name}` tells no other{overridden}"
        )
    };
    names.iter().map(told).collect()
}

/// What the open shed does to the warp, and how often it and the reed come.
fn open_shed(spec: &Spec) -> Vec<String> {
    let mut said = Vec::new();
    if let (Some(shed), Some(times)) = (&spec.weave.shed, sheddings(&spec.weave)) {
        said.push(format!(
            "open shed: the warp is lengthened by {} % after let-off ({} of it taken up), elastically, which adds {} cN; a point of the warp sees {} sheddings, each counted once",
            significant(100.0 * shed_strain(shed), 3),
            plain(shed.let_off, 3),
            significant(100.0 * shed_pull_n(&spec.weave), 3),
            significant(times, 3)
        ));
    }
    said.extend(reed_strokes(spec).map(|strokes| {
        format!(
            "a point of the warp meets {} strokes of the reed; its rubbing is left out",
            significant(strokes, 3)
        )
    }));
    said
}

fn way(spec: &Spec) -> Vec<String> {
    let mut said = routes(spec);
    let guessed: Vec<String> = spec
        .passages
        .iter()
        .filter(|passage| !passage.friction_given)
        .map(|passage| format!("{} {}", passage.place, plain(passage.friction, 3)))
        .collect();
    if !guessed.is_empty() {
        said.push(format!(
            "friction of the fibre, or 0.25 where it has none, at: {}",
            guessed.join(", ")
        ));
    }
    // A tension anywhere on a stage is the chain's for the whole of it.
    let chained = |passage: &Passage| {
        spec.passages.iter().any(|other| {
            (other.system, other.stage) == (passage.system, passage.stage)
                && other.tension_n.is_some()
        })
    };
    let elsewhere = |passage: &&Passage| passage.stage != Stage::Weaving && !chained(passage);
    if let Some(passage) = spec.passages.iter().find(elsewhere) {
        said.push(format!(
            "pull while {} taken as that of weaving where no station gives one",
            passage.stage.word()
        ));
    }
    if !spec.passages.is_empty() {
        said.push("straight arms on both sides of every station, long against the bend".to_owned());
    }
    for tool in spec
        .tools
        .iter()
        .filter(|tool| tool.bend_axis_rad.is_none())
    {
        said.push(format!(
            "{}: edge of unknown direction, both systems bent fully",
            tool.name
        ));
    }
    said
}
