//! The limits of a filament under pull and bending, by kind of fibre.
//!
//! s_a axial stress, s_b = E d k/2 bending stress; E, d, k as in `fibre`.
//!
//! - brittle: fracture at s_a + s_b = s_t; where the compressive strength is known, s_b - s_a = s_c;
//! - fibrillar: kink bands at s_b - s_a = s_c; past them the kinked section (`kinked`) until its tension side
//!   reaches s_t; compressive strain over 3 % counts as failed;
//! - ductile: yield at E (d k/2 + s_a/E) = s_y, break at a strain d k/2 + s_a/E equal to that at break.
//!
//! s_c is the figure that holds in bending (a uniaxial one counts twice, see `fibre`). Where nothing is
//! compressed (s_b <= s_a) there is no compression limit.

use super::code::Limit;
use super::filament::Filament;
use super::kinked::kinked_section;
use crate::fibre::Mechanism;
use crate::yarn::Yarn;

/// Compressive strain beyond which a kinked fibre is no longer known to hold most of its strength: a
/// high-modulus para-aramid lost 10 % after 3 % (DeTeresa et al. 1984, J. Mater. Sci. 19, 57-72, abstract read).
pub const KINK_STRAIN_LIMIT: f64 = 0.03;

/// One limit held against what is applied.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Check {
    /// Which limit.
    pub limit: Limit,
    /// Applied: MPa, a strain for `Limit::Strain`, broken filaments per metre for `Limit::Filaments`.
    pub applied: f64,
    /// Allowed: MPa, a strain, or a number per metre.
    pub allowed: f64,
    /// Power of allowed over applied that is a reserve on the stress scale: 1, of a count of breaks 1/m.
    power: f64,
}

impl Check {
    #[expect(
        clippy::neg_cmp_op_on_partial_ord,
        reason = "what is no number must not pass"
    )]
    fn new(limit: Limit, applied: f64, allowed: f64) -> Option<Self> {
        // Written so that a value that is no number stays and fails.
        (!(applied <= 0.0)).then_some(Self {
            limit,
            applied,
            allowed,
            power: 1.0,
        })
    }

    /// Broken filaments per metre of yarn against the number allowed; m is the Weibull modulus.
    pub(super) fn filaments(expected_per_m: f64, allowed_per_m: f64, m: f64) -> Option<Self> {
        Some(Self {
            power: 1.0 / m,
            ..Self::new(Limit::Filaments, expected_per_m, allowed_per_m)?
        })
    }

    /// Allowed over applied, on the stress scale.
    pub fn reserve(&self) -> f64 {
        (self.allowed / self.applied).powf(self.power)
    }
}

/// Every limit that applies to the filament; the last place is kept for the count of broken ones.
pub fn checks(yarn: &Yarn, filament: &Filament) -> [Option<Check>; 4] {
    let fibre = &yarn.fibre;
    let modulus = fibre.modulus_mpa;
    let axial = filament.axial_stress_mpa;
    let bending = yarn.bending_stress_mpa(filament.curvature_per_mm);
    let fracture = Check::new(Limit::Fracture, axial + bending, fibre.strength_mpa);
    match fibre.mechanism {
        Mechanism::Brittle { compression } => {
            let compressed = compression.and_then(|compression| {
                Check::new(
                    Limit::Compression,
                    bending - axial,
                    compression.in_bending_mpa(),
                )
            });
            [fracture, compressed, None, None]
        }
        Mechanism::Fibrillar { compression, .. } => {
            let onset = compression.in_bending_mpa();
            // A bonded inner filament may be pressed as a whole beyond the onset; -1 is all of it yielded.
            let section = kinked_section(bending / onset, (axial / onset).max(-1.0));
            let tension = Check::new(Limit::Fracture, section.outer * onset, fibre.strength_mpa);
            let kink = Check::new(Limit::Kink, bending - axial, onset);
            let strain = section.kinked.then(|| {
                // The pull is balanced by the section; what binding imposes on the axis is not.
                let imposed = (bending - axial) / modulus;
                Check::new(
                    Limit::KinkStrain,
                    (section.inner_strain * onset / modulus).max(imposed),
                    KINK_STRAIN_LIMIT,
                )
            });
            [tension, kink, strain.flatten(), None]
        }
        Mechanism::Ductile {
            yield_mpa,
            strain_at_break,
        } => {
            let strain = (bending + axial) / modulus;
            let yields = Check::new(Limit::Yield, modulus * strain, yield_mpa);
            [
                Check::new(Limit::Strain, strain, strain_at_break),
                yields,
                None,
                None,
            ]
        }
    }
}
