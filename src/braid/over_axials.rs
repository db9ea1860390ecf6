//! The braiders as tight threads over axials.
//!
//! The axial, met at the braid angle (wa/sin a wide), stands in the middle of its gap and of the wall; the braider passes
//! over it and over the k yarns that cross in that gap, under the next, by the shortest way (`thread`). From one axial to the
//! next tells all: at either the braider runs level, by symmetry. An axial as good as none leaves the path of the two sets
//! alone (tested).
//!
//! Left out: rigidity; axials that give way, tilt or crimp (they are pushed from both sides alike). The yarns of the other
//! set that the axial keeps off are taken to stand where they would without it, which bends the braider no less.

use super::error::BraidError;
use super::laid::Braid;
use super::parts::Axials;
use super::path::BraiderPath;
use super::thread::{Contact, Crossed, Thread, thread};
use crate::bend::{Crown, Easing, Flanks, Shoulder, Stretch};
use crate::yarn::Outline;

impl Braid {
    /// From one axial to the next: crest to trough, or over an even number of gaps to the next crest.
    pub(super) fn taut_over_axials(
        &self,
        axials: &Axials,
        axial: &Outline,
    ) -> Result<BraiderPath, BraidError> {
        let (over, every) = (self.parts().setup().over(), axials.every());
        let spacing_mm = self.lattice().crossing_spacing_mm();
        let gap_mm = f64::from(over) * spacing_mm;
        let thickness_mm = self.parts().braider().thickness_mm();
        let stands = |gap: u32| Crossed {
            at_mm: f64::from(gap) * gap_mm,
            height_mm: 0.0,
            section: *axial,
            over: gap.is_multiple_of(2),
        };
        let mut crossed = vec![stands(0)];
        for gap in 0..=every {
            let lies_over = gap.is_multiple_of(2);
            crossed.extend((0..over).map(|index| Crossed {
                at_mm: f64::from(gap) * gap_mm
                    + (f64::from(index) - 0.5 * f64::from(over - 1)) * spacing_mm,
                height_mm: if lies_over {
                    -0.5 * thickness_mm
                } else {
                    0.5 * thickness_mm
                },
                section: *self.crossed(),
                over: lies_over,
            }));
        }
        crossed.push(stands(every));
        let found = thread(&crossed, 0.5 * thickness_mm).ok_or_else(|| self.no_way())?;
        let crimp = found.length_mm / (f64::from(every) * gap_mm) - 1.0;
        let least = found
            .contacts
            .iter()
            .filter(|contact| contact.bent_mm > 0.0)
            .map(|c| c.radius_mm);
        Ok(BraiderPath {
            crimp,
            wave_height_mm: found.wave_mm,
            slope_rad: found.slope_rad,
            min_radius_mm: least
                .reduce(f64::min)
                .map(|radius| radius + 0.5 * thickness_mm),
            half_crown: half_crown_of(&found, gap_mm, 2.0 * f64::from(every), self.flanks()),
            half_crowns_per_mm: self.half_crowns_per_mm(crimp),
            helix_per_mm: self.lattice().helix_curvature_per_mm(),
        })
    }
}

/// The contacts of a thread, as much of them as one of `halves` half crowns has on average. A contact where the thread runs
/// level is a crown; any other is a shoulder, its straight arm half of the piece that leads to it or away, the shorter.
fn half_crown_of(found: &Thread, gap_mm: f64, halves: f64, flanks: Flanks) -> Vec<Stretch> {
    let crown = Crown {
        drop_mm: 0.5 * found.wave_mm,
        arm_mm: 0.5 * gap_mm,
        flanks,
    };
    let mut stretches = Vec::with_capacity(found.contacts.len() + 1);
    let before = |index: usize| {
        index
            .checked_sub(1)
            .map_or(0.0, |before| found.contacts[before].straight_mm)
    };
    let easing = |index: usize, contact: &Contact| {
        let (into, out) = (contact.into_rad.abs(), contact.out_rad.abs());
        if contact.into_rad * contact.out_rad <= 0.0 {
            return Easing::Crown(crown);
        }
        let arms = [contact.straight_mm, before(index)];
        let straight_mm = arms
            .into_iter()
            .filter(|arm| *arm > 0.0)
            .fold(f64::INFINITY, f64::min);
        let half_straight_mm = if straight_mm.is_finite() {
            0.5 * straight_mm
        } else {
            0.0
        };
        let slope_rad = into.max(out);
        let back_mm = (crown.arm_mm - half_straight_mm * slope_rad.cos()).max(0.0);
        Easing::Shoulder(Shoulder {
            back_mm,
            start_rad: into.min(out),
            slope_rad,
            half_straight_mm,
        })
    };
    for (index, contact) in found.contacts.iter().enumerate() {
        if contact.flat_mm > 0.0 {
            stretches.push(Stretch {
                length_mm: contact.flat_mm / halves,
                lies_on_mm: None,
                easing: Easing::Held,
            });
        }
        if contact.bent_mm > 0.0 {
            stretches.push(Stretch {
                length_mm: contact.bent_mm / halves,
                lies_on_mm: Some(contact.radius_mm),
                easing: easing(index, contact),
            });
        }
    }
    stretches
}
