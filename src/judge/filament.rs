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
//! Free filaments carry the same pull and the innermost is bent most, so it governs for all. In a bonded yarn the
//! stresses are fractions linear in y, so their largest lies at one of both ends, and both are judged. Where breaks are
//! counted all filaments are, in 16 layers. Left out: pressure of the upper filaments on the lower, migration, and in flat
//! twisted yarns the helix's change over the width.

use super::easing::{Free, free_curvature_per_mm};
use crate::bend::{Bend, Stretch};
use crate::path::{bent_helix_curvature_per_mm, bent_helix_peak_per_mm, helix_curvature_per_mm};
use crate::quadrature::places;
use crate::yarn::{Laid, Yarn};
use std::f64::consts::PI;

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

    /// Why it governs.
    pub fn why(self) -> &'static str {
        match self {
            Self::Single => "the yarn is one filament",
            Self::Inside => "nearest to what the yarn is bent over it is bent most",
            Self::Any => "where nothing is bent all carry the same",
            Self::Outside => {
                "bonded to the others it is stretched by the yarn's own bend besides, or bent most to the other side"
            }
            Self::Surface => "on the longest helix it passes the inside of every bend",
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
    /// Whether a larger bend turns it to the other side.
    pub reversed: bool,
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
            reversed: false,
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
        .flat_map(move |stretch| Bundle::new(stretch, bend, yarn, laid).governing())
        .flatten()
}

/// The filaments of a yarn on one stretch.
pub(super) struct Bundle<'a> {
    yarn: &'a Yarn,
    thickness_mm: f64,
    lies_on_mm: Option<f64>,
    added_per_mm: f64,
    free_per_mm: Option<f64>,
    /// What it is bent at least, past yield.
    least_per_mm: f64,
    /// Curvature of the centreline, 1/mm: what is bonded is strained by it.
    centre_per_mm: f64,
    pull_mpa: f64,
}

impl<'a> Bundle<'a> {
    pub(super) fn new(stretch: &Stretch, bend: &Bend, yarn: &'a Yarn, laid: &Laid) -> Self {
        let thickness_mm = laid.outline.thickness_mm();
        let mut bundle = Self {
            yarn,
            thickness_mm,
            lies_on_mm: stretch.lies_on_mm,
            added_per_mm: bend.added_per_mm,
            free_per_mm: None,
            least_per_mm: 0.0,
            centre_per_mm: 0.0,
            pull_mpa: yarn.axial_stress_mpa(bend.pull_n),
        };
        let path_per_mm = bundle.lying(0.5 * thickness_mm);
        (bundle.free_per_mm, bundle.least_per_mm) =
            match free_curvature_per_mm(stretch.easing, path_per_mm, bend.pull_n, yarn, laid) {
                Free::Held => (None, 0.0),
                Free::Eased(free) => (Some(free), 0.0),
                Free::Gathered(free) => (Some(free), free),
            };
        // Plane sections: the yarn's own curvature strains what is bonded.
        bundle.centre_per_mm =
            bundle.lying(0.5 * thickness_mm).min(bundle.eased(0.0)) + bundle.added_per_mm;
        bundle
    }

    /// Curvature `e` above what it lies on, lying on fully, 1/mm.
    fn lying(&self, e: f64) -> f64 {
        let lying = self.lies_on_mm.map_or(0.0, |radius| {
            // Inside of the centreline's own centre there is no room: only the filament's stiffness bounds it.
            if radius + e > 0.0 {
                1.0 / (radius + e)
            } else {
                f64::INFINITY
            }
        });
        lying.max(self.least_per_mm)
    }

    /// Curvature `y` from the centreline by its own stiffness, 1/mm.
    fn eased(&self, y: f64) -> f64 {
        let free = self.free_per_mm.unwrap_or(f64::INFINITY);
        // A bonded yarn that eases bends its inner filaments more than its centreline, to a point at most.
        let inner = 1.0 + self.yarn.binding * y * free;
        if inner > 0.0 {
            free / inner
        } else {
            f64::INFINITY
        }
    }

    fn filament(&self, position: Position, y: f64, lying: f64, eased: f64) -> Filament {
        let added = self.added_per_mm;
        let strain = self.yarn.binding * y * self.centre_per_mm;
        let curvature = lying.min(eased) + added;
        Filament {
            position,
            curvature_per_mm: curvature.abs(),
            reversed: curvature < 0.0,
            lying_per_mm: (lying + added).abs(),
            free_per_mm: self.free_per_mm.map(|free| (free + added).abs()),
            axial_stress_mpa: self.pull_mpa + self.yarn.fibre.modulus_mpa * strain,
        }
    }

    /// The filament whose axis is `e` above what the yarn lies on, mm.
    fn at(&self, position: Position, e: f64) -> Filament {
        let y = e - 0.5 * self.thickness_mm;
        self.filament(position, y, self.lying(e), self.eased(y))
    }

    /// Distance of the innermost and the outermost filament's axis from what the yarn lies on, mm.
    fn ends_mm(&self) -> (f64, f64) {
        let half = 0.5 * self.yarn.count.filament_diameter_mm;
        (half, (self.thickness_mm - half).max(half))
    }

    /// The filaments that may govern.
    pub(super) fn governing(&self) -> [Option<Filament>; 2] {
        let (inside, outside) = self.ends_mm();
        let bonded = self.yarn.binding > 0.0;
        if self.yarn.is_monofilament() {
            [Some(self.at(Position::Single, inside)), None]
        } else if self.yarn.twist_per_mm > 0.0 {
            // The filament passes the inside and the outside in turn: both signs of the bonded strain are met.
            let [inner, outer] = self.on_the_surface();
            [Some(inner), bonded.then_some(outer)]
        } else {
            // Free filaments all carry the same pull, and none is bent more than the innermost, unless to the other side.
            let both = bonded || self.added_per_mm < 0.0;
            [
                Some(self.at(Position::Inside, inside)),
                both.then(|| self.at(Position::Outside, outside)),
            ]
        }
    }

    /// A surface filament of a twisted yarn where it passes the inside and the outside.
    fn on_the_surface(&self) -> [Filament; 2] {
        let (thickness, twist) = (self.thickness_mm, self.yarn.twist_per_mm);
        let r = (0.5 * (thickness - self.yarn.count.filament_diameter_mm)).max(0.0);
        let straight = helix_curvature_per_mm(r, twist);
        let on_surface = match self.lies_on_mm {
            Some(radius) => bent_helix_peak_per_mm(r, twist, radius + 0.5 * thickness),
            None => straight,
        };
        [-r, r].map(|y| {
            let mut found =
                self.filament(Position::Surface, y, on_surface, straight + self.eased(-r));
            if self.centre_per_mm < 0.0 {
                // Bent to the other side it is the same helix on the same curve.
                found.curvature_per_mm =
                    bent_helix_peak_per_mm(r, twist, -1.0 / self.centre_per_mm);
                found.lying_per_mm = found.curvature_per_mm;
            }
            found
        })
    }

    /// Filaments of a twisted yarn at four radii that hold a quarter of them each, at four places of their turn.
    fn wound(&self) -> Vec<(f64, Filament)> {
        const PARTS: usize = 4;
        let twist = self.yarn.twist_per_mm;
        let surface = (0.5 * (self.thickness_mm - self.yarn.count.filament_diameter_mm)).max(0.0);
        let middle = |part: usize| (part as f64 + 0.5) / PARTS as f64;
        let mut layers = Vec::with_capacity(PARTS * PARTS);
        for (radius, place) in (0..PARTS).flat_map(|r| (0..PARTS).map(move |f| (r, f))) {
            let r = surface * middle(radius).sqrt();
            let phase = PI * middle(place);
            let y = r * phase.cos();
            let straight = helix_curvature_per_mm(r, twist);
            let bent = |bend_mm: f64| {
                if bend_mm > r {
                    bent_helix_curvature_per_mm(r, twist, bend_mm, phase)
                } else {
                    f64::INFINITY
                }
            };
            let lying = self
                .lies_on_mm
                .map_or(straight, |on| bent(on + 0.5 * self.thickness_mm));
            let mut found = self.filament(Position::Any, y, lying, straight + self.eased(y));
            if self.centre_per_mm < 0.0 {
                found.curvature_per_mm = bent(-1.0 / self.centre_per_mm);
                found.reversed = true;
            }
            layers.push((1.0 / (PARTS * PARTS) as f64, found));
        }
        layers
    }

    /// All filaments by their share, from the inside to the outside: through the thickness by the outline's width there;
    /// of a twisted yarn by radius and place of their turn.
    pub(super) fn layers(&self, laid: &Laid) -> Vec<(f64, Filament)> {
        if self.yarn.is_monofilament() {
            return vec![(1.0, self.at(Position::Single, self.ends_mm().0))];
        }
        if self.yarn.twist_per_mm > 0.0 {
            return self.wound();
        }
        let (inside, outside) = self.ends_mm();
        let middle = 0.5 * self.thickness_mm;
        // A lens has its edge in the middle: two parts.
        let mut layers: Vec<(f64, Filament)> = places(inside, middle, 1)
            .chain(places(middle, outside, 1))
            .map(|(e, weight)| {
                let share = weight * laid.outline.width_at_mm(e - middle);
                (share, self.at(Position::Any, e))
            })
            .collect();
        let whole: f64 = layers.iter().map(|(share, _)| share).sum();
        for (share, _) in &mut layers {
            *share /= whole;
        }
        layers
    }
}
