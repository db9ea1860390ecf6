//! How each filament of a yarn is bent and pulled at a bend.
//!
//! A yarn of thickness t lies on something of radius R. A filament whose axis is e above that surface, e from
//! d/2 (inside) to t - d/2 (outside), y = e - t/2 from the centreline:
//!
//! ```text
//! lying on            k(e) = 1/(R + e)
//! eased               k(e) = k_free/(1 + b y k_free),       of both the smaller
//! bonded              axial strain + b y k_c,               k_c = min( 1/(R + t/2), k_free )
//! ```
//!
//! with the binding b: free filaments (b = 0) ease each about its own axis, a bonded yarn as a whole. k_free is what
//! an elastic filament (with binding: the yarn) needs to get round at all under its pull (`easing`). A twisted
//! yarn's filaments lie on a helix: `path::helix`, the exact form for the centreline's radius R + t/2; eased, at most
//! the straight helix's curvature and k_free together. A larger bend on top (a corner of a tool) adds its curvature; one to
//! the other side (the corner's inner face) takes it off, and what is left is judged by its size, whichever side it
//! turns to: then the outermost filament, bent least by the crown, may be bent most.
//!
//! Free filaments carry the same pull and the innermost is bent most, so it stands for all. In a bonded yarn the
//! stresses are fractions linear in y, so their largest lies at one of both ends, and both are judged. Left out: pressure of the upper filaments on the lower, migration, and in flat
//! twisted yarns the helix's change over the width.

use super::easing::{Free, free_curvature_per_mm};
use crate::bend::{Bend, Stretch};
use crate::path::{bent_helix_peak_per_mm, helix_curvature_per_mm};
use crate::yarn::{Laid, Yarn};

/// Which filament of the yarn.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Position {
    /// The only one.
    Single,
    /// Next to what the yarn lies on.
    Inside,
    /// Any: the yarn is straight.
    Any,
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
            Self::Any => "every filament",
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
            position: Position::Any,
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
    bend.profile
        .iter()
        .flat_map(move |stretch| on_stretch(stretch, bend, yarn, laid))
}

fn on_stretch(
    stretch: &Stretch,
    bend: &Bend,
    yarn: &Yarn,
    laid: &Laid,
) -> impl Iterator<Item = Filament> + use<> {
    let thickness = laid.outline.thickness_mm();
    let diameter = yarn.count.filament_diameter_mm;
    let added = bend.added_per_mm;
    let lying = |e: f64| {
        stretch.lies_on_mm.map_or(0.0, |radius| {
            // Inside of the centreline's own centre there is no room: only the filament's stiffness bounds it.
            if radius + e > 0.0 {
                1.0 / (radius + e)
            } else {
                f64::INFINITY
            }
        })
    };
    let free = free_curvature_per_mm(
        stretch.easing,
        lying(0.5 * thickness),
        bend.pull_n,
        yarn,
        laid,
    );
    let (free_per_mm, least_per_mm) = match free {
        Free::Held => (None, 0.0),
        Free::Eased(free) => (Some(free), 0.0),
        Free::Gathered(free) => (Some(free), free),
    };
    let lying = |e: f64| lying(e).max(least_per_mm);
    let eased = |y: f64| {
        let free = free_per_mm.unwrap_or(f64::INFINITY);
        // A bonded yarn that eases bends its inner filaments more than its centreline, to a point at most.
        let inner = 1.0 + yarn.binding * y * free;
        if inner > 0.0 {
            free / inner
        } else {
            f64::INFINITY
        }
    };
    // Plane sections: the yarn's own curvature strains what is bonded.
    let centre = lying(0.5 * thickness).min(eased(0.0)) + added;
    let pull = yarn.axial_stress_mpa(bend.pull_n);
    let axial = |y: f64| pull + yarn.fibre.modulus_mpa * yarn.binding * y * centre;
    let filament = |position: Position, y: f64, lying: f64, eased: f64| Filament {
        position,
        curvature_per_mm: (lying.min(eased) + added).abs(),
        lying_per_mm: (lying + added).abs(),
        free_per_mm: free_per_mm.map(|free| (free + added).abs()),
        axial_stress_mpa: axial(y),
    };
    let at = |position: Position, e: f64| {
        let y = e - 0.5 * thickness;
        filament(position, y, lying(e), eased(y))
    };
    let (inside, outside) = (
        0.5 * diameter,
        (thickness - 0.5 * diameter).max(0.5 * diameter),
    );
    let found: [Option<Filament>; 2] = if yarn.is_monofilament() {
        [Some(at(Position::Single, inside)), None]
    } else if yarn.twist_per_mm > 0.0 {
        let r = (0.5 * (thickness - diameter)).max(0.0);
        let straight = helix_curvature_per_mm(r, yarn.twist_per_mm);
        let on_surface = match stretch.lies_on_mm {
            Some(radius) => bent_helix_peak_per_mm(r, yarn.twist_per_mm, radius + 0.5 * thickness),
            None => straight,
        };
        // The filament passes the inside and the outside in turn: both signs of the bonded strain are met.
        let of = |y: f64| {
            let mut found = filament(Position::Surface, y, on_surface, straight + eased(-r));
            if centre < 0.0 {
                // Bent to the other side it is the same helix on the same curve.
                found.curvature_per_mm =
                    bent_helix_peak_per_mm(r, yarn.twist_per_mm, -1.0 / centre);
                found.lying_per_mm = found.curvature_per_mm;
            }
            Some(found)
        };
        [of(-r), of(r).filter(|_| yarn.binding > 0.0)]
    } else {
        // Free filaments all carry the same pull, and none is bent more than the innermost, unless to the other side.
        let both = yarn.binding > 0.0 || added < 0.0;
        [
            Some(at(Position::Inside, inside)),
            both.then(|| at(Position::Outside, outside)),
        ]
    };
    found.into_iter().flatten()
}
