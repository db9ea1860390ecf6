//! What is braided: the setup, the outlines of braiders and axials.
//!
//! The ends of one carrier lie side by side: a band as wide as all of them. Axials come up through the hollow horn gears
//! and lie between the sets, one of which stays above and the other below while they pass, so they run straight and the
//! braiders over and under them. All of it is a stack t + t, or t + ta + t, whose middle is the mean diameter.

use super::angle::{BraidAngle, Kinematics};
use super::error::{BraidError, not_negative, size};
use super::laid::Braid;
use super::lattice::Lattice;
use super::setup::Setup;
use crate::yarn::Outline;

/// The most crossings of a braider from axial to axial: far beyond any braider built, and still worked out at once.
const FARTHEST: u64 = 400;

/// Axials between the sets.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Axials {
    every: u32,
    outline: Outline,
    crimp: f64,
}

impl Axials {
    /// Axials of this outline in every `every`-th gap. `crimp`, a ratio, is 0 for straight axials; a measured one counts in
    /// mass and fibre volume, while the braiders' path still takes the axials for straight.
    ///
    /// # Errors
    /// Where there is no gap between, or the crimp is below zero.
    pub fn new(every: u32, outline: Outline, crimp: f64) -> Result<Self, BraidError> {
        if every == 0 {
            return Err(BraidError::Size {
                what: "step from gap to gap with an axial",
                found: 0.0,
                unit: "gaps",
            });
        }
        Ok(Self {
            every,
            outline,
            crimp: not_negative("axials' crimp", crimp, "")?,
        })
    }

    /// Every so many gaps one.
    #[must_use]
    pub fn every(&self) -> u32 {
        self.every
    }

    /// Their outline.
    #[must_use]
    pub fn outline(&self) -> &Outline {
        &self.outline
    }

    /// Their crimp, a ratio.
    #[must_use]
    pub fn crimp(&self) -> f64 {
        self.crimp
    }
}

/// What is braided, on whatever mandrel.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Parts {
    setup: Setup,
    braider: Outline,
    axials: Option<Axials>,
}

impl Parts {
    /// A setup with the outline of one end on its carriers, and axials or none.
    ///
    /// # Errors
    /// Where the axials do not close round the braid, or stand too far apart.
    pub fn new(setup: Setup, braider: Outline, axials: Option<Axials>) -> Result<Self, BraidError> {
        if let Some(axials) = axials {
            if !setup.gaps().is_multiple_of(axials.every) {
                return Err(BraidError::Axials {
                    every: axials.every,
                    gaps: setup.gaps(),
                });
            }
            let crossings = u64::from(axials.every) * u64::from(setup.over());
            if crossings > FARTHEST {
                return Err(BraidError::AxialsApart {
                    crossings,
                    most: FARTHEST,
                });
            }
        }
        Ok(Self {
            setup,
            braider,
            axials,
        })
    }

    /// The setup.
    #[must_use]
    pub fn setup(&self) -> &Setup {
        &self.setup
    }

    /// Outline of one end of the braiders.
    #[must_use]
    pub fn braider(&self) -> &Outline {
        &self.braider
    }

    /// The axials, where there are any.
    #[must_use]
    pub fn axials(&self) -> Option<&Axials> {
        self.axials.as_ref()
    }

    /// How many axials there are round the braid.
    #[must_use]
    pub fn axial_count(&self) -> u32 {
        self.axials
            .map_or(0, |axials| self.setup.gaps() / axials.every)
    }

    /// Width of the ends of one carrier side by side, mm.
    #[must_use]
    pub fn band_width_mm(&self) -> f64 {
        f64::from(self.setup.ends_per_carrier()) * self.braider.width_mm()
    }

    /// Thickness of both sets, and the axials between, mm.
    #[must_use]
    pub fn stack_mm(&self) -> f64 {
        let axial = self
            .axials
            .map_or(0.0, |axials| axials.outline.thickness_mm());
        2.0 * self.braider.thickness_mm() + axial
    }

    /// Mean diameter of the wall on a mandrel, mm: mandrel + 2 t, and the axials' thickness where there are any.
    #[must_use]
    pub fn mean_diameter_mm(&self, mandrel_diameter_mm: f64) -> f64 {
        mandrel_diameter_mm + self.stack_mm()
    }

    /// The braid on a mandrel at a given angle.
    ///
    /// # Errors
    /// Where the mandrel's diameter is not above 0.
    pub fn on_mandrel(
        &self,
        mandrel_diameter_mm: f64,
        angle: BraidAngle,
    ) -> Result<Braid, BraidError> {
        let mandrel_diameter_mm = size("mandrel diameter", mandrel_diameter_mm, "mm")?;
        let mean_diameter_mm = self.mean_diameter_mm(mandrel_diameter_mm);
        let lattice = Lattice::new(&self.setup, mean_diameter_mm, angle)?;
        Braid::new(*self, mandrel_diameter_mm, lattice)
    }

    /// The braid on a mandrel as the machine runs.
    ///
    /// # Errors
    /// As [`Parts::on_mandrel`].
    pub fn on_machine(
        &self,
        mandrel_diameter_mm: f64,
        run: &Kinematics,
    ) -> Result<Braid, BraidError> {
        let mandrel_diameter_mm = size("mandrel diameter", mandrel_diameter_mm, "mm")?;
        self.on_mandrel(
            mandrel_diameter_mm,
            run.angle(self.mean_diameter_mm(mandrel_diameter_mm))?,
        )
    }
}
