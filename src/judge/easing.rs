//! How far a filament stays away from what it is bent over, by its own stiffness.
//!
//! `path::rod` gives the peak curvature of an elastic rod at an edge, a crown, a shoulder. It holds while the
//! filament is elastic. Past that:
//!
//! - brittle fibres break before;
//! - a ductile one bends further at the same pull: its hardening stands in, by the record's figures. The true stress
//!   at break is s_t (1 + e) at the true strain ln(1 + e) (uniform elongation), so E_t = (s_t (1 + e) - s_y)/(ln(1 + e) - s_y/E).
//!   At shoulders, and bonded, it is taken to lie on;
//! - a fibrillar one softens on the compressed side: it is taken to lie on, which is the safe side.

use crate::bend::Easing;
use crate::fibre::Mechanism;
use crate::path::{Hardening, edge_peak_per_mm};
use crate::yarn::{Laid, Yarn};

/// How a filament (with binding: the yarn) gets round under the yarn's pull; curvatures in 1/mm.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Free {
    /// It is held to what it lies on.
    Held,
    /// It is bent so much and no more, where what it lies on would bend it more.
    Eased(f64),
    /// Past yield its bend gathers: it is bent so much, though an elastic one would be bent less.
    Gathered(f64),
}

/// How a filament gets round; `path_per_mm` is the curvature of the yarn's own path there.
pub(super) fn free_curvature_per_mm(
    easing: Easing,
    path_per_mm: f64,
    pull_n: f64,
    yarn: &Yarn,
    laid: &Laid,
) -> Free {
    let ratio = yarn.pull_over_rigidity_per_mm2(pull_n, laid);
    let elastic = match easing {
        Easing::Held => return Free::Held,
        // Without pull nothing says how far the arms reach: it is taken to lie on.
        Easing::LongArms { .. } if ratio <= 0.0 => return Free::Held,
        Easing::LongArms { turn_rad } => edge_peak_per_mm(ratio, turn_rad),
        Easing::Crown(crown) => crown.peak_per_mm(ratio),
        Easing::Shoulder(shoulder) => shoulder.peak_per_mm(ratio),
        // The path is that of the yarn under its pull. A single filament is the yarn; one of many is bent no less, and
        // alone at most as over an edge.
        Easing::Path { .. } if yarn.is_monofilament() => path_per_mm,
        Easing::Path { turn_rad, .. } => path_per_mm.max(edge_peak_per_mm(ratio, turn_rad)),
        Easing::Rounded(crown, shoulder) => {
            crown.peak_per_mm(ratio).max(shoulder.peak_per_mm(ratio))
        }
    };
    let fibre = &yarn.fibre;
    let diameter = yarn.count.filament_diameter_mm;
    let bending = fibre.modulus_mpa * diameter * elastic / 2.0;
    let axial = yarn.axial_stress_mpa(pull_n);
    let free = match fibre.mechanism {
        Mechanism::Brittle { .. } => Some(elastic),
        Mechanism::Fibrillar { compression, .. } => {
            (bending - axial <= compression.in_bending_mpa()).then_some(elastic)
        }
        Mechanism::Ductile { yield_mpa, .. } if bending + axial <= yield_mpa => Some(elastic),
        Mechanism::Ductile { .. } if yarn.binding > 0.0 => None,
        Mechanism::Ductile {
            yield_mpa,
            strain_at_break,
        } => {
            let true_stress = fibre.strength_mpa * (1.0 + strain_at_break);
            let plastic_strain = strain_at_break.ln_1p() - yield_mpa / fibre.modulus_mpa;
            // A record whose break lies at its yield does not harden: it is taken to lie on.
            let hardens = true_stress > yield_mpa && plastic_strain > 0.0;
            let wire = Hardening {
                diameter_mm: diameter,
                yield_mpa,
                modulus_mpa: ((true_stress - yield_mpa) / plastic_strain).min(fibre.modulus_mpa),
            };
            let pull_on_one = yarn.axial_stress_mpa(pull_n) * yarn.filament_area_mm2();
            match easing {
                _ if !hardens => None,
                Easing::LongArms { turn_rad } => Some(edge_peak_per_mm(
                    pull_on_one / wire.rigidity_n_mm2(),
                    turn_rad,
                )),
                Easing::Path {
                    crown, section_mm, ..
                } => {
                    // The bend gathers where the wire yields, up to the section that it lies on.
                    let lying = section_mm.map_or(0.0, |radius| 1.0 / (radius + 0.5 * diameter));
                    let gathered = crown.hardened_peak_per_mm(pull_on_one, &wire).min(lying);
                    let gathered = path_per_mm.max(gathered);
                    if yarn.is_monofilament() {
                        return Free::Gathered(gathered);
                    }
                    Some(gathered)
                }
                Easing::Crown(crown) => Some(crown.hardened_peak_per_mm(pull_on_one, &wire)),
                _ => None,
            }
        }
    };
    free.filter(|curvature| curvature.is_finite())
        .map_or(Free::Held, Free::Eased)
}
