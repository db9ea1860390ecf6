//! How each filament of a yarn is bent and pulled at a bend.
//!
//! A yarn of thickness t lies on something of radius R. A filament whose axis is e above that surface, e from
//! d/2 (inside) to t - d/2 (outside), y = e - t/2 from the centreline:
//!
//! ```text
//! free filaments    k(e) = min( 1/(R + e), k_free )
//! bonded            k(e) = k_c/(1 + k_c y),   k_c = min( 1/(R + t/2), k_free );  axial strain + b y k(e)
//! ```
//!
//! k_free is what an elastic filament (with binding: the yarn) needs to get round at all under its pull:
//! `path::rod`, the edge law at guides and the crown law in cloth. A twisted yarn's filaments lie on a helix:
//! `path::helix`, the exact form, with the centreline's radius 1/k_c. A larger bend on top (a corner of a tool)
//! adds its curvature.
//!
//! All filaments are judged at the ends of e, in the middle, and where k_free begins to govern: between these
//! the stresses change monotonically (they are fractions linear in y). Left out: pressure of the upper
//! filaments on the lower, migration, and in flat twisted yarns the helix's change over the width.

use crate::bend::{Bend, Easing, Stretch};
use crate::path::{
    bent_helix_peak_per_mm, crown_peak_per_mm, edge_peak_per_mm, helix_curvature_per_mm,
};
use crate::yarn::{Laid, Yarn};

/// Which filament of the yarn.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Position {
    /// The only one.
    Single,
    /// Next to what the yarn lies on.
    Inside,
    /// On the centreline.
    Middle,
    /// Farthest from what the yarn lies on.
    Outside,
    /// On the surface of a twisted yarn.
    Surface,
}

impl Position {
    /// The word in reports.
    pub fn word(self) -> &'static str {
        match self {
            Self::Single => "the single filament",
            Self::Inside => "innermost filament",
            Self::Middle => "middle filament",
            Self::Outside => "outermost filament",
            Self::Surface => "surface filament",
        }
    }
}

/// One filament at a bend.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Filament {
    /// Where in the yarn.
    pub position: Position,
    /// Curvature of its axis, 1/mm.
    pub curvature_per_mm: f64,
    /// Curvature it would have lying on fully, 1/mm.
    pub lying_per_mm: f64,
    /// Curvature at which an elastic filament gets round under its pull, 1/mm; absent where it is held.
    pub free_per_mm: Option<f64>,
    /// Axial stress from pull and binding, MPa.
    pub axial_stress_mpa: f64,
}

impl Filament {
    /// A filament that is pulled and not bent.
    pub fn straight(axial_stress_mpa: f64) -> Self {
        Self {
            position: Position::Middle,
            curvature_per_mm: 0.0,
            lying_per_mm: 0.0,
            free_per_mm: None,
            axial_stress_mpa,
        }
    }
}

/// Every filament that may govern, over all stretches of the bend.
pub fn filaments<'a>(
    bend: &'a Bend,
    yarn: &'a Yarn,
    laid: &'a Laid,
) -> impl Iterator<Item = Filament> + 'a {
    let pull_stress = yarn.axial_stress_mpa(bend.pull_n);
    let free_per_mm = free_curvature_per_mm(bend, yarn, laid);
    bend.profile
        .iter()
        .flat_map(move |stretch| on_stretch(stretch, bend, yarn, laid, pull_stress, free_per_mm))
}

/// Curvature at which a filament (with binding: the yarn) gets round under its pull; `None` where it is held.
fn free_curvature_per_mm(bend: &Bend, yarn: &Yarn, laid: &Laid) -> Option<f64> {
    let ratio = yarn.pull_over_rigidity_per_mm2(bend.pull_n, laid);
    match bend.easing {
        Easing::Held => None,
        // Without pull nothing says how far the arms reach: it is taken to lie on.
        Easing::LongArms { .. } if ratio <= 0.0 => None,
        Easing::LongArms { turn_rad } => Some(edge_peak_per_mm(ratio, turn_rad)),
        Easing::Crown {
            drop_mm,
            arm_mm,
            flanks,
        } => Some(crown_peak_per_mm(ratio, drop_mm, arm_mm, flanks)),
    }
}

fn on_stretch(
    stretch: &Stretch,
    bend: &Bend,
    yarn: &Yarn,
    laid: &Laid,
    pull_stress: f64,
    free_per_mm: Option<f64>,
) -> impl Iterator<Item = Filament> + use<> {
    let thickness = laid.outline.thickness_mm();
    let diameter = yarn.count.filament_diameter_mm;
    let (modulus, binding) = (yarn.fibre.modulus_mpa, yarn.binding);
    let cap = free_per_mm.unwrap_or(f64::INFINITY);
    let reach = |e: f64| stretch.lies_on_mm.map_or(0.0, |radius| 1.0 / (radius + e));
    let centre_per_mm = reach(0.5 * thickness).min(cap);
    let at = |position: Position, e: f64| {
        let y = e - 0.5 * thickness;
        let bent = if binding > 0.0 {
            centre_per_mm / (1.0 + centre_per_mm * y)
        } else {
            reach(e).min(cap)
        };
        let curvature_per_mm = bent + bend.added_per_mm;
        Filament {
            position,
            curvature_per_mm,
            lying_per_mm: reach(e) + bend.added_per_mm,
            free_per_mm: free_per_mm.map(|free| free + bend.added_per_mm),
            axial_stress_mpa: pull_stress + modulus * binding * y * curvature_per_mm,
        }
    };
    let (inside, outside) = (
        0.5 * diameter,
        (thickness - 0.5 * diameter).max(0.5 * diameter),
    );
    let mut found: [Option<Filament>; 4] = [None; 4];
    if yarn.is_monofilament() {
        found[0] = Some(at(Position::Single, inside));
    } else if yarn.twist_per_mm > 0.0 {
        let r = (0.5 * (thickness - diameter)).max(0.0);
        let twisted = if centre_per_mm > 0.0 {
            bent_helix_peak_per_mm(r, yarn.twist_per_mm, 1.0 / centre_per_mm)
        } else {
            helix_curvature_per_mm(r, yarn.twist_per_mm)
        };
        // The filament passes the inside and the outside in turn: both signs of the bonded strain are met.
        for (slot, (e, y)) in [(inside, -r), (outside, r)].into_iter().enumerate() {
            let mut filament = at(Position::Surface, e);
            filament.curvature_per_mm = twisted + bend.added_per_mm;
            filament.axial_stress_mpa =
                pull_stress + modulus * binding * y * filament.curvature_per_mm;
            found[slot] = Some(filament);
        }
    } else {
        found[0] = Some(at(Position::Inside, inside));
        found[1] = Some(at(Position::Middle, 0.5 * thickness));
        found[2] = Some(at(Position::Outside, outside));
        // Free filaments nearer than this are capped: stresses may peak where the cap ends.
        let ends_at = stretch.lies_on_mm.map(|radius| 1.0 / cap - radius);
        found[3] = ends_at
            .filter(|e| binding == 0.0 && *e > inside && *e < outside)
            .map(|e| at(Position::Middle, e));
    }
    found.into_iter().flatten()
}
