//! The braiders as stiff yarns: least energy under a pull.
//!
//! As the heights of all crossings are known (`path`), one yarn tells all: `path::StiffYarn` over and under the sections of
//! the other set, met obliquely. Each end of a carrier is a yarn of its own over a band of the others.
//!
//! Left out: axials (their sections are of another kind; refused), the helix, friction, flattening.

use super::error::{BraidError, not_negative};
use super::laid::Braid;
use super::path::BraiderPath;
use crate::bend::{Crown, Easing, Stretch};
use crate::path::{NoPath, StiffYarn, Strand};

/// Crimp and largest curvature, relative.
const ACCURACY: f64 = 1e-3;
/// Samples of a free piece of yarn.
const PARTS: usize = 8;

/// What makes a braider stiff, one end of a carrier.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StiffPull {
    /// Pull, N.
    pub pull_n: f64,
    /// Bending rigidity, N mm2.
    pub rigidity_n_mm2: f64,
}

impl Braid {
    /// The braiders as stiff yarns of least energy under a pull.
    ///
    /// # Errors
    /// Where the braid is jammed, has axials, or no path was found.
    pub fn stiff(&self, of: StiffPull) -> Result<BraiderPath, BraidError> {
        let StiffPull {
            pull_n,
            rigidity_n_mm2,
        } = of;
        not_negative("pull", pull_n, " N")?;
        not_negative("bending rigidity", rigidity_n_mm2, " N mm2")?;
        if pull_n + rigidity_n_mm2 == 0.0 {
            return Err(BraidError::Limp);
        }
        if self.crossed_axial().is_some() {
            return Err(BraidError::StiffOverAxials);
        }
        // A stiff yarn passes where a thread does.
        self.taut()?;
        let thickness_mm = self.parts().braider().thickness_mm();
        let strand = Strand {
            half_thickness_mm: 0.5 * thickness_mm,
            pull_n,
            rigidity_n_mm2,
        };
        let yarn = StiffYarn::new(&strand, self.crossed(), ACCURACY);
        let over_count = self.parts().setup().over() as usize;
        let over: Vec<bool> = (0..2 * over_count)
            .map(|crossing| crossing < over_count)
            .collect();
        let heights: Vec<f64> = over
            .iter()
            .map(|over| {
                if *over {
                    -0.5 * thickness_mm
                } else {
                    0.5 * thickness_mm
                }
            })
            .collect();
        let spacing_mm = self.lattice().crossing_spacing_mm();
        let path = yarn
            .path(spacing_mm, &over, &heights, None, true)
            .map_err(|why| match why {
                NoPath::Jammed(_) => self.no_way(),
                NoPath::Lost(crossing) => BraidError::NoPath {
                    crossing: crossing + 1,
                },
            })?;
        let (length_mm, _) = yarn.length_and_energy(&path);
        let crimp = length_mm / (spacing_mm * over.len() as f64) - 1.0;
        let (peak, wave_height_mm) = (yarn.peak_per_mm(&path), yarn.wave_mm(&path));
        let crown = Crown {
            drop_mm: 0.5 * wave_height_mm,
            arm_mm: 0.5 * spacing_mm,
            flanks: self.flanks(),
        };
        let mut samples = yarn.samples(&path, PARTS);
        samples.sort_by(|a, b| {
            a.curvature_per_mm
                .abs()
                .total_cmp(&b.curvature_per_mm.abs())
        });
        let half_crown = samples
            .iter()
            .filter(|sample| sample.length_mm > 0.0)
            .map(|sample| Stretch {
                // Two changes in a repeat: four half crowns.
                length_mm: sample.length_mm / 4.0,
                lies_on_mm: (sample.curvature_per_mm != 0.0)
                    .then(|| 1.0 / sample.curvature_per_mm.abs() - strand.half_thickness_mm),
                easing: Easing::Path {
                    turn_rad: sample.turn_rad,
                    crown,
                    section_mm: yarn.section_radius_mm(),
                },
            })
            .collect();
        Ok(BraiderPath {
            crimp,
            wave_height_mm,
            slope_rad: yarn.slope_and_range(&path).0,
            min_radius_mm: (peak > 0.0).then(|| 1.0 / peak),
            half_crown,
            half_crowns_per_mm: self.half_crowns_per_mm(crimp),
            helix_per_mm: self.lattice().helix_curvature_per_mm(),
        })
    }
}
