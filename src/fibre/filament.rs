//! The plain numbers of one fibre, as the mechanics use them, and what one of its filaments does when bent without pull.
//!
//! A round filament of diameter d and axial modulus E, bent to curvature k = 1/R (Euler and Bernoulli; filaments are slender):
//!
//! ```text
//! s_b   = E d k / 2             stress at the outside            bending_stress_mpa
//! M     = pi E d^4 k / 64       moment                           bending_moment_n_mm
//! B     = pi E d^4 / 64         rigidity                         filament_rigidity_n_mm2
//! R_min = E d / (2 s_t)         smallest elastic radius          min_elastic_radius_mm
//! ```
//!
//! | symbol | name | unit |
//! | --- | --- | --- |
//! | d | `diameter_mm` | mm |
//! | E | `modulus_mpa` | MPa |
//! | s_t | `strength_mpa` | MPa |
//! | s_c | `Compression::strength_mpa` | MPa |
//! | k | `curvature_per_mm` | 1/mm |
//!
//! Source: beam theory, in any textbook of the strength of materials; R_min in this form is common practice.
//! Holds for: linear elasticity, equal moduli in tension and compression, no pull.
//! Leaves out: the non-linear modulus of carbon, transverse squeezing at the contact, shear, and pull (the judge adds it).
//! Accuracy: exact for these assumptions.

use std::f64::consts::PI;

use super::kind::{CompressionBasis, FlawKind, Hazard, Kind, StrengthBasis};
use super::origin::{FigureName, Origin};

/// Compressive strength in bending over the uniaxial figure (`general.toml`, `compression_bending_factor`: Attwood et al. 2015,
/// Fawaz et al. 1992; seen for UHMWPE, aramid and carbon; the literature spans 1 to 2).
pub const COMPRESSION_BENDING_FACTOR: f64 = 2.0;

/// A compressive strength and how it was read.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Compression {
    /// The strength in MPa, as read.
    pub strength_mpa: f64,
    /// How it was read.
    pub basis: CompressionBasis,
}

impl Compression {
    /// The strength in MPa that holds in bending: a uniaxial figure times [`COMPRESSION_BENDING_FACTOR`], a figure from
    /// bending as it stands.
    #[must_use]
    pub fn in_bending_mpa(self) -> f64 {
        match self.basis {
            CompressionBasis::Uniaxial => self.strength_mpa * COMPRESSION_BENDING_FACTOR,
            CompressionBasis::Bending => self.strength_mpa,
        }
    }
}

/// How the fibre fails, with the figures that this way of failing needs.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Mechanism {
    /// Fracture on the tension side; on the compressed side too where its strength is known.
    Brittle {
        /// Absent where it is unknown or known only as a lower bound.
        compression: Option<Compression>,
    },
    /// Kink bands on the compressed side, break much later on the other.
    Fibrillar {
        /// Where kinking starts.
        compression: Compression,
        /// Share of tensile strength lost by kinking (0 to 1).
        kink_strength_loss: Option<f64>,
    },
    /// Yield, then break at a strain.
    Ductile {
        /// Yield stress in MPa.
        yield_mpa: f64,
        /// Strain at break (ratio).
        strain_at_break: f64,
    },
}

/// The scatter of strength (Weibull 1951): `strength_mpa` of the fibre is the mean at this gauge length.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Weibull {
    /// Weibull modulus m.
    pub modulus: f64,
    /// Gauge length of the strength in mm.
    pub strength_gauge_mm: f64,
    /// Where the flaws sit.
    pub flaws: FlawKind,
}

/// One fibre in plain numbers: mm, N, MPa, g/cm3, degC, ratios.
#[derive(Debug, Clone, PartialEq)]
pub struct Fibre {
    /// The name a spec or the library has for it.
    pub id: String,
    /// Full name.
    pub name: String,
    /// Family of the library's record it is or starts from, such as `glass`.
    pub family: Option<String>,
    /// How it fails.
    pub mechanism: Mechanism,
    /// The caution that goes with it.
    pub hazard: Hazard,
    /// Filament diameter in mm: a default, which the yarn's own figures replace.
    pub diameter_mm: f64,
    /// Axial tensile modulus in MPa.
    pub modulus_mpa: f64,
    /// Mean tensile strength in MPa.
    pub strength_mpa: f64,
    /// What was pulled to find it.
    pub strength_basis: StrengthBasis,
    /// Density in g/cm3.
    pub density_g_cm3: f64,
    /// Highest temperature in air for handling, degC.
    pub max_temp_c: Option<f64>,
    /// Coefficient of friction on a guide, steel or ceramic, whichever is larger.
    pub friction_on_guide: Option<f64>,
    /// Scatter of strength, where known.
    pub weibull: Option<Weibull>,
    /// Where each number comes from, in the order in which they were taken up.
    pub origins: Vec<(FigureName, Origin)>,
}

impl Fibre {
    /// How it fails, in a word.
    #[must_use]
    pub fn kind(&self) -> Kind {
        match self.mechanism {
            Mechanism::Brittle { .. } => Kind::Brittle,
            Mechanism::Fibrillar { .. } => Kind::Fibrillar,
            Mechanism::Ductile { .. } => Kind::Ductile,
        }
    }

    /// Whether broken filaments can be counted: their scatter is known, and they break before they yield.
    #[must_use]
    pub fn breaks_are_countable(&self) -> bool {
        self.weibull.is_some() && self.kind() != Kind::Ductile
    }

    /// Where a number comes from; `None` where the fibre has no such number.
    #[must_use]
    pub fn origin(&self, name: FigureName) -> Option<&Origin> {
        self.origins
            .iter()
            .find(|(known, _)| *known == name)
            .map(|(_, origin)| origin)
    }

    /// The compressive strength, of brittle fibres where known, of fibrillar fibres always.
    #[must_use]
    pub fn compression(&self) -> Option<Compression> {
        match self.mechanism {
            Mechanism::Brittle { compression } => compression,
            Mechanism::Fibrillar { compression, .. } => Some(compression),
            Mechanism::Ductile { .. } => None,
        }
    }

    /// Compressive strength in bending in MPa: see [`Compression::in_bending_mpa`].
    #[must_use]
    pub fn compressive_strength_in_bending_mpa(&self) -> Option<f64> {
        self.compression().map(Compression::in_bending_mpa)
    }

    /// Cross-section of one filament, pi d^2 / 4, in mm2.
    #[must_use]
    pub fn filament_area_mm2(&self) -> f64 {
        PI * self.diameter_mm.powi(2) / 4.0
    }

    /// Bending rigidity of one filament, B = pi E d^4 / 64, in N mm2.
    #[must_use]
    pub fn filament_rigidity_n_mm2(&self) -> f64 {
        PI * self.modulus_mpa * self.diameter_mm.powi(4) / 64.0
    }

    /// Moment that bends one filament to a curvature (1/mm), M = B k, in N mm.
    #[must_use]
    pub fn bending_moment_n_mm(&self, curvature_per_mm: f64) -> f64 {
        self.filament_rigidity_n_mm2() * curvature_per_mm
    }

    /// Stress at the outside of a filament bent to a curvature (1/mm), E d k / 2, in MPa.
    #[must_use]
    pub fn bending_stress_mpa(&self, curvature_per_mm: f64) -> f64 {
        self.modulus_mpa * self.diameter_mm * curvature_per_mm / 2.0
    }

    /// Radius in mm at which bending alone reaches a stress (MPa), E d / (2 s).
    #[must_use]
    pub fn radius_at_stress_mm(&self, stress_mpa: f64) -> f64 {
        self.modulus_mpa * self.diameter_mm / (2.0 * stress_mpa)
    }

    /// Smallest elastic radius R_min = E d / (2 s_t) in mm. Only a brittle fibre breaks there: a fibrillar one has kinked
    /// before, and a ductile one has yielded.
    #[must_use]
    pub fn min_elastic_radius_mm(&self) -> f64 {
        self.radius_at_stress_mm(self.strength_mpa)
    }

    /// Radius in mm at which a fibrillar fibre starts to kink, E d / (2 s_c) with s_c in bending, no pull.
    #[must_use]
    pub fn kink_radius_mm(&self) -> Option<f64> {
        match self.mechanism {
            Mechanism::Fibrillar { compression, .. } => {
                Some(self.radius_at_stress_mm(compression.in_bending_mpa()))
            }
            _ => None,
        }
    }

    /// Radius in mm at which a ductile fibre starts to yield, E d / (2 s_y), no pull.
    #[must_use]
    pub fn yield_radius_mm(&self) -> Option<f64> {
        match self.mechanism {
            Mechanism::Ductile { yield_mpa, .. } => Some(self.radius_at_stress_mm(yield_mpa)),
            _ => None,
        }
    }

    /// Smallest radius in mm at which the filament stays in one piece without pull, by kind; for sorting and listing:
    /// - brittle: the larger of R_min and the radius at which the compressed side fails, where that is known;
    /// - fibrillar: R_min, on the safe side: past kinking the neutral axis moves and the tension side is spared;
    /// - ductile: d / (2 e) with e the strain at break.
    #[must_use]
    pub fn bend_radius_mm(&self) -> f64 {
        let elastic_mm = self.min_elastic_radius_mm();
        match self.mechanism {
            Mechanism::Brittle { compression } => compression.map_or(elastic_mm, |compression| {
                elastic_mm.max(self.radius_at_stress_mm(compression.in_bending_mpa()))
            }),
            Mechanism::Fibrillar { .. } => elastic_mm,
            Mechanism::Ductile {
                strain_at_break, ..
            } => self.diameter_mm / (2.0 * strain_at_break),
        }
    }

    /// Smallest radius in mm that leaves no mark, without pull: the kink or yield radius, for brittle fibres [`Self::bend_radius_mm`].
    #[must_use]
    pub fn unmarked_radius_mm(&self) -> f64 {
        self.kink_radius_mm()
            .or_else(|| self.yield_radius_mm())
            .map_or_else(
                || self.bend_radius_mm(),
                |radius_mm| radius_mm.max(self.bend_radius_mm()),
            )
    }

    /// Specific modulus E / rho in GPa/(g/cm3), which is MJ/kg.
    #[must_use]
    pub fn specific_modulus_mj_kg(&self) -> f64 {
        self.modulus_mpa / 1000.0 / self.density_g_cm3
    }

    /// Specific strength s_t / rho in GPa/(g/cm3), which is MJ/kg (and N/tex).
    #[must_use]
    pub fn specific_strength_mj_kg(&self) -> f64 {
        self.strength_mpa / 1000.0 / self.density_g_cm3
    }

    /// The same fibre with filaments of another diameter (mm), as its yarn states it.
    #[must_use]
    pub fn with_diameter_mm(mut self, diameter_mm: f64) -> Self {
        self.diameter_mm = diameter_mm;
        self.origins
            .retain(|(name, _)| *name != FigureName::Diameter);
        self.origins.push((FigureName::Diameter, Origin::Given));
        self
    }
}
