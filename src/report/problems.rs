//! Problems of a spec, each with its line and a mark under the place.

use crate::quantity::significant;
use crate::span::SourceText;
use crate::spec::{Problem, Spec};
use crate::weave::{ClothError, Jammed};
use annotate_snippets::{AnnotationKind, Group, Level, Renderer, Snippet};

/// Beyond these a person mends first and asks again.
const MOST_SHOWN: usize = 50;

/// Draws the problems of a text, with colour codes: print them through a stream that knows its terminal.
pub fn problems(source: &SourceText, problems: &[Problem]) -> String {
    let renderer = Renderer::styled();
    let mut drawn = String::new();
    for problem in problems.iter().take(MOST_SHOWN) {
        let group: Group<'_> = Level::ERROR
            .primary_title(problem.message.as_str())
            .element(
                Snippet::source(source.text.as_str())
                    .path(source.name.as_str())
                    .annotation(
                        AnnotationKind::Primary
                            .span(problem.span.clone())
                            .label(problem.label.as_str()),
                    ),
            );
        let helps = problem
            .help
            .iter()
            .map(|help| Level::HELP.message(help.as_str()));
        drawn.push_str(&renderer.render(&[group.elements(helps)]));
        drawn.push_str("\n\n");
    }
    if let Some(more) = problems
        .len()
        .checked_sub(MOST_SHOWN)
        .filter(|more| *more > 0)
    {
        drawn.push_str(&format!("and {more} more like these\n\n"));
    }
    let count = match problems.len() {
        1 => "1 problem".to_owned(),
        many => format!("{many} problems"),
    };
    drawn.push_str(&format!("{}: {count}; nothing was checked\n", source.name));
    drawn
}

/// The problem of a cloth that cannot be woven, with the largest setts that fit.
pub fn jammed(spec: &Spec, jammed: &Jammed) -> Problem {
    let weave = &spec.weave;
    let per_cm = |per_mm: f64| significant(floor_4_digits(10.0 * per_mm), 4);
    let sett = |name: &str, system: &crate::spec::System| {
        format!("{} /cm {name}", significant(10.0 * system.sett_per_mm, 4))
    };
    let message = match &jammed.why {
        ClothError::Jammed => format!(
            "jammed: these yarns cannot interlace at {} and {}",
            sett("in the warp", &weave.warp),
            sett("in the weft", &weave.weft)
        ),
        other => other.to_string(),
    };
    if let ClothError::Corner {
        name,
        layer,
        thickness_mm,
        radius_mm,
    } = &jammed.why
    {
        let place = spec.tools.iter().find(|tool| tool.name == *name);
        let span = place.map_or_else(|| weave.span.clone(), |tool| tool.radius_span.clone());
        let layers = layers_inside(*radius_mm, *thickness_mm);
        let fits = match layers {
            0 => "no layer fits at this radius".to_owned(),
            _ => format!("at this radius the last layer that fits is {layers}"),
        };
        return Problem::at(span, message, "no room")
            .help(fits)
            .help(format!(
                "layer {layer} needs a radius above {} mm",
                significant(ceil_3_digits((f64::from(*layer) - 0.5) * thickness_mm), 3)
            ));
    }
    let span = match jammed.why {
        ClothError::Thickness { .. } => weave.span.clone(),
        _ => weave.warp.sett_span.clone(),
    };
    if matches!(
        jammed.why,
        ClothError::NoPath { .. } | ClothError::NoBalance { .. } | ClothError::NoOtherState { .. }
    ) {
        return Problem::at(weave.span.clone(), message, "not solved")
            .help("this is no verdict: the yarns may well be woven")
            .help("`path = \"taut\"` under `[weave]` answers for flexible threads; or measure `crimp` or widths and give them");
    }
    let mut problem = Problem::at(span, message, "too close");
    if matches!(jammed.why, ClothError::Thickness { .. }) {
        problem.label = "out of reach".into();
        return problem
            .help("check the thickness and the yarns' linear densities against each other");
    }
    let fits = &jammed.fits;
    if let Some((ends, picks)) = fits.both_per_mm {
        problem = problem.help(format!(
            "largest setts that fit, in the same ratio: {} /cm and {} /cm",
            per_cm(ends),
            per_cm(picks)
        ));
    }
    if let Some(ends) = fits.warp_per_mm {
        problem = problem.help(format!(
            "or the weft as it is, and {} /cm in the warp",
            per_cm(ends)
        ));
    }
    if let Some(picks) = fits.weft_per_mm {
        problem = problem.help(format!(
            "or the warp as it is, and {} /cm in the weft",
            per_cm(picks)
        ));
    }
    problem
        .help("or a weave with longer floats, or yarns measured flatter in the cloth (`width`, `thickness`)")
        .help("`lissom explain jammed` tells the method")
}

/// The last layer whose middle lies at a radius above zero.
fn layers_inside(radius_mm: f64, thickness_mm: f64) -> u32 {
    ((radius_mm / thickness_mm + 0.5).ceil() - 1.0).max(0.0) as u32
}

/// Rounded up to three digits, for a limit that has to be passed.
fn ceil_3_digits(value: f64) -> f64 {
    let scale = 10f64.powf(2.0 - value.log10().floor());
    (value * scale).ceil() / scale
}

fn floor_4_digits(value: f64) -> f64 {
    let scale = 10f64.powf(3.0 - value.log10().floor());
    (value * scale).floor() / scale
}
