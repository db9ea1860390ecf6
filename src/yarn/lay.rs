//! A yarn laid at its spacing: which outline it takes, and how densely it is packed.
//!
//! The area of fibre is tex / density; the outline's area is that over the packing. Of width, thickness and
//! flatness two fix the outline (and with it the packing), one fixes it together with the packing, none
//! leaves the trade's default: a lens as wide as 0.9 of the spacing, packing 0.65. A single filament is a
//! solid circle; a yarn whose surface fibres lie over 15 degrees to its axis is round. Where a width comes
//! out above the spacing the yarn is squeezed to the spacing; where the other system then finds no way between
//! touching neighbours, to the widest that lets it through (`weave::build`).
//!
//! The defaults 0.9, 0.65 and 15 degrees are common practice without a source. 0.9069 (pi/sqrt 12) is the
//! closest packing of circles, so more than 0.91 is refused.

use super::outline::{Outline, Shape};
use super::{Yarn, YarnForm, helix_angle_rad};
use std::f64::consts::PI;
use thiserror::Error;

/// Fibre area over outline area where nothing else is given.
pub const DEFAULT_PACKING: f64 = 0.65;
/// No circles can be packed closer (0.9069, rounded up as a spec is).
pub const CLOSEST_PACKING: f64 = 0.91;
/// Width over spacing where nothing else is given.
pub const DEFAULT_WIDTH_SHARE: f64 = 0.9;
/// Surface helix angle above which a yarn holds itself round.
pub const ROUND_HELIX_DEG: f64 = 15.0;

/// How far an assumed outline is varied: both 1 for the spec as it stands.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Vary {
    /// Flatness over the assumed flatness, at constant area; a measured outline does not change.
    pub flatness: f64,
    /// Thickness over the laid thickness, at constant width.
    pub thickness: f64,
    /// Share of the spacing that a squeezed yarn may take.
    pub room: f64,
    /// Packing where the spec gives none and no two sizes.
    pub packing: f64,
}

impl Default for Vary {
    fn default() -> Self {
        Self {
            flatness: 1.0,
            thickness: 1.0,
            room: 1.0,
            packing: DEFAULT_PACKING,
        }
    }
}

/// How the outline came about.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Basis {
    /// A single filament: solid and round.
    Solid,
    /// Round, by the spec's shape or by high twist; size from area and packing.
    Round,
    /// Two sizes given: measured outline, packing follows.
    Measured,
    /// One size given, the other from area and packing.
    OneSize,
    /// Nothing given: the default share of the spacing.
    Assumed,
}

/// A yarn in its outline.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Laid {
    /// The outline.
    pub outline: Outline,
    /// Fibre area over outline area.
    pub packing: f64,
    /// How the outline came about.
    pub basis: Basis,
    /// Whether the yarn was squeezed to its spacing.
    pub squeezed: bool,
}

/// Why a yarn cannot lie at its spacing.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum LayError {
    /// A solid filament is thicker than the spacing.
    #[error("a filament of {diameter_mm:.4} mm does not fit a spacing of {spacing_mm:.4} mm")]
    SolidTooWide {
        /// Filament diameter.
        diameter_mm: f64,
        /// Spacing of the yarns.
        spacing_mm: f64,
    },
    /// The yarn would stand on edge.
    #[error(
        "an outline of {area_mm2:.4} mm2 (packing {packing:.2}) does not fit a spacing of {spacing_mm:.4} mm: \
         it would stand on edge"
    )]
    OnEdge {
        /// Area of the outline.
        area_mm2: f64,
        /// Packing used.
        packing: f64,
        /// Spacing of the yarns.
        spacing_mm: f64,
    },
    /// More fibre than the outline holds.
    #[error(
        "{fibre_mm2:.4} mm2 of fibre in an outline of {area_mm2:.4} mm2 is a packing of {packing:.2}, over 0.91"
    )]
    TooDense {
        /// Area of fibre.
        fibre_mm2: f64,
        /// Area of the outline.
        area_mm2: f64,
        /// Resulting packing.
        packing: f64,
    },
    /// The size given is thinner than one filament.
    #[error(
        "a yarn {thickness_mm} mm thick is thinner than one of its filaments, {diameter_mm} mm"
    )]
    ThinnerThanFilament {
        /// Thickness that follows.
        thickness_mm: f64,
        /// Filament diameter.
        diameter_mm: f64,
    },
    /// The sizes given make no outline of this shape.
    #[error("a {shape} cannot be {width_mm} mm wide and {thickness_mm} mm thick")]
    NoOutline {
        /// Shape given.
        shape: &'static str,
        /// Width given.
        width_mm: f64,
        /// Thickness given.
        thickness_mm: f64,
    },
}

impl Yarn {
    /// The shape given, or the default for the yarn's twist.
    pub fn shape(&self) -> Shape {
        self.form.shape.unwrap_or_else(|| {
            let twisted = self.surface_helix_rad().to_degrees() > ROUND_HELIX_DEG;
            if self.is_monofilament() || twisted {
                Shape::Round
            } else {
                Shape::Lens
            }
        })
    }

    /// Angle of the surface filaments to the axis of the yarn, were it round at its packing, rad.
    pub fn surface_helix_rad(&self) -> f64 {
        let packing = self.form.packing.unwrap_or(DEFAULT_PACKING);
        helix_angle_rad(
            (self.fibre_area_mm2() / (PI * packing)).sqrt(),
            self.twist_per_mm,
        )
    }

    /// Lays the yarn beside its neighbours, `spacing_mm` apart.
    ///
    /// # Errors
    /// Where no outline fits: see [`LayError`].
    pub fn laid_at(&self, spacing_mm: f64, vary: Vary) -> Result<Laid, LayError> {
        if self.is_monofilament() {
            return self.laid_solid(spacing_mm);
        }
        let (outline, basis) = self.free_outline(spacing_mm, vary.packing)?;
        let area_mm2 = outline.area_mm2();
        let diameter_mm = self.count.filament_diameter_mm;
        let varied = match basis {
            Basis::OneSize | Basis::Assumed if vary.flatness != 1.0 => {
                let flatness = (outline.flatness() * vary.flatness).max(1.0);
                Outline::with_flatness(outline.shape(), flatness, area_mm2).unwrap_or(outline)
            }
            _ => outline,
        };
        // No yarn is thinner than one filament: an assumed one is as much narrower.
        let varied = match basis {
            _ if varied.thickness_mm() >= diameter_mm => varied,
            Basis::Assumed => Outline::with_thickness(varied.shape(), diameter_mm, area_mm2)
                .or_else(|| Outline::round((4.0 * area_mm2 / PI).sqrt()))
                .unwrap_or(varied),
            _ => {
                return Err(LayError::ThinnerThanFilament {
                    thickness_mm: varied.thickness_mm(),
                    diameter_mm,
                });
            }
        };
        let room_mm = vary.room * spacing_mm;
        let squeezed = varied.width_mm() > room_mm * (1.0 + 1e-12);
        let at_spacing = if squeezed {
            let shape = if varied.shape() == Shape::Round {
                Shape::Ellipse
            } else {
                varied.shape()
            };
            Outline::with_width(shape, room_mm, area_mm2).ok_or(LayError::OnEdge {
                area_mm2,
                packing: self.fibre_area_mm2() / area_mm2,
                spacing_mm,
            })?
        } else {
            varied
        };
        let outline = scaled_thickness(at_spacing, vary.thickness).ok_or(LayError::OnEdge {
            area_mm2: vary.thickness * at_spacing.area_mm2(),
            packing: self.fibre_area_mm2() / (vary.thickness * at_spacing.area_mm2()),
            spacing_mm,
        })?;
        let packing = self.fibre_area_mm2() / outline.area_mm2();
        // The closest packing itself may come back a hair above it.
        if packing > CLOSEST_PACKING * (1.0 + 1e-9) {
            return Err(LayError::TooDense {
                fibre_mm2: self.fibre_area_mm2(),
                area_mm2: outline.area_mm2(),
                packing,
            });
        }
        Ok(Laid {
            outline,
            packing,
            basis,
            squeezed,
        })
    }

    fn laid_solid(&self, spacing_mm: f64) -> Result<Laid, LayError> {
        let diameter_mm = self.count.filament_diameter_mm;
        let too_wide = LayError::SolidTooWide {
            diameter_mm,
            spacing_mm,
        };
        if diameter_mm > spacing_mm {
            return Err(too_wide);
        }
        Ok(Laid {
            outline: Outline::round(diameter_mm).ok_or(too_wide)?,
            packing: 1.0,
            basis: Basis::Solid,
            squeezed: false,
        })
    }

    /// The outline before any squeeze: from the sizes given, the packing and the spacing.
    fn free_outline(
        &self,
        spacing_mm: f64,
        assumed_packing: f64,
    ) -> Result<(Outline, Basis), LayError> {
        let shape = self.shape();
        let packing = self.form.packing.unwrap_or(assumed_packing);
        let area_mm2 = self.fibre_area_mm2() / packing;
        let on_edge = || LayError::OnEdge {
            area_mm2,
            packing,
            spacing_mm,
        };
        let YarnForm {
            width_mm,
            thickness_mm,
            flatness,
            ..
        } = self.form;
        if let Some((width_mm, thickness_mm)) = self.form.sizes_mm(shape) {
            let outline =
                Outline::new(shape, width_mm, thickness_mm).ok_or(LayError::NoOutline {
                    shape: shape.word(),
                    width_mm,
                    thickness_mm,
                })?;
            return Ok((outline, Basis::Measured));
        }
        let (outline, basis) = match (width_mm, thickness_mm, flatness) {
            (Some(w), ..) => (Outline::with_width(shape, w, area_mm2), Basis::OneSize),
            (_, Some(t), _) => (Outline::with_thickness(shape, t, area_mm2), Basis::OneSize),
            (.., Some(f)) => (Outline::with_flatness(shape, f, area_mm2), Basis::OneSize),
            _ if shape == Shape::Round => {
                (Outline::round((4.0 * area_mm2 / PI).sqrt()), Basis::Round)
            }
            _ => (
                Outline::with_width(shape, DEFAULT_WIDTH_SHARE * spacing_mm, area_mm2)
                    // Too much fibre for 0.9 of the spacing: let it take the whole spacing.
                    .or_else(|| Outline::with_width(shape, spacing_mm, area_mm2)),
                Basis::Assumed,
            ),
        };
        Ok((outline.ok_or_else(on_edge)?, basis))
    }
}

/// The same outline thicker or thinner; a circle becomes an ellipse.
fn scaled_thickness(outline: Outline, by: f64) -> Option<Outline> {
    if by == 1.0 {
        return Some(outline);
    }
    let shape = if outline.shape() == Shape::Round {
        Shape::Ellipse
    } else {
        outline.shape()
    };
    Outline::new(shape, outline.width_mm(), by * outline.thickness_mm())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fibre::library;
    use crate::yarn::{Count, CountGiven};

    fn glass(tex: f64, filaments: Option<u32>, twist_per_mm: f64, form: YarnForm) -> Yarn {
        let fibre = library().find("e-glass").unwrap().fibre().unwrap();
        let given = CountGiven {
            linear_density_tex: Some(tex),
            filaments,
            filament_diameter_mm: None,
        };
        Yarn {
            name: "y".into(),
            count: Count::resolve(given, fibre.diameter_mm, fibre.density_g_cm3).unwrap(),
            fibre,
            twist_per_mm,
            twist_direction: None,
            form,
            binding: 0.0,
            bending_rigidity_n_mm2: None,
            tension_spread: 1.0,
            designated_diameter_mm: None,
        }
    }

    /// 66 tex at 2.54 g/cm3: 0.025 98 mm2 of fibre; at packing 0.65 an outline of 0.039 98 mm2 (hand calculation).
    #[test]
    fn without_sizes_it_is_a_lens_of_nine_tenths_of_the_spacing() {
        let laid = glass(66.0, None, 0.0, YarnForm::default())
            .laid_at(0.5, Vary::default())
            .unwrap();
        assert_eq!(laid.outline.shape(), Shape::Lens);
        assert!((laid.outline.width_mm() - 0.45).abs() < 1e-12);
        assert!((laid.outline.area_mm2() - 0.066 / 2.54 / 0.65).abs() < 1e-9);
        assert!((laid.packing - 0.65).abs() < 1e-9);
        assert_eq!((laid.basis, laid.squeezed), (Basis::Assumed, false));
    }

    /// Surface helix over 15 deg: radius 0.1128 mm, so 0.4 turns per mm make 15.8 deg and 0.35 make 13.9 deg.
    #[test]
    fn high_twist_and_single_filaments_are_round() {
        let shape = |twist: f64| glass(66.0, None, twist, YarnForm::default()).shape();
        assert_eq!(shape(0.35), Shape::Lens);
        assert_eq!(shape(0.40), Shape::Round);
        let wire = glass(20.0, Some(1), 0.0, YarnForm::default());
        let laid = wire.laid_at(0.2, Vary::default()).unwrap();
        assert_eq!((laid.basis, laid.packing), (Basis::Solid, 1.0));
        assert_eq!(laid.outline.width_mm(), wire.count.filament_diameter_mm);
        assert!(matches!(
            wire.laid_at(0.05, Vary::default()),
            Err(LayError::SolidTooWide { .. })
        ));
    }

    #[test]
    fn two_sizes_fix_the_packing_and_one_of_a_circle_does() {
        let form = YarnForm {
            width_mm: Some(0.40),
            flatness: Some(3.2),
            ..YarnForm::default()
        };
        let laid = glass(66.0, None, 0.0, form)
            .laid_at(0.5, Vary::default())
            .unwrap();
        assert_eq!(laid.basis, Basis::Measured);
        assert!((laid.outline.thickness_mm() - 0.125).abs() < 1e-12);
        assert!((laid.packing * laid.outline.area_mm2() - 0.066 / 2.54).abs() < 1e-12);
        let round = YarnForm {
            shape: Some(Shape::Round),
            width_mm: Some(0.24),
            ..YarnForm::default()
        };
        let laid = glass(66.0, None, 0.0, round)
            .laid_at(0.5, Vary::default())
            .unwrap();
        assert_eq!(
            (laid.basis, laid.outline.thickness_mm()),
            (Basis::Measured, 0.24)
        );
        let dense = YarnForm {
            width_mm: Some(0.2),
            ..round
        };
        let refused = glass(
            66.0,
            None,
            0.0,
            YarnForm {
                width_mm: Some(0.18),
                ..dense
            },
        );
        assert!(matches!(
            refused.laid_at(0.5, Vary::default()),
            Err(LayError::TooDense { .. })
        ));
    }

    #[test]
    fn wider_than_the_spacing_is_squeezed_at_the_same_area() {
        let form = YarnForm {
            width_mm: Some(0.6),
            ..YarnForm::default()
        };
        let yarn = glass(66.0, None, 0.0, form);
        let laid = yarn.laid_at(0.5, Vary::default()).unwrap();
        assert!(laid.squeezed);
        assert!((laid.outline.width_mm() - 0.5).abs() < 1e-12);
        assert!((laid.packing - 0.65).abs() < 1e-9);
        assert!(matches!(
            yarn.laid_at(0.2, Vary::default()),
            Err(LayError::OnEdge { .. })
        ));
    }

    /// Two filaments of 0.14 mm lie side by side at the thinnest, not as a film across the spacing.
    #[test]
    fn no_yarn_is_thinner_than_one_filament() {
        let mut few = glass(66.0, Some(2), 0.0, YarnForm::default());
        let d = few.count.filament_diameter_mm;
        let laid = few.laid_at(2.5, Vary::default()).unwrap();
        assert!((laid.outline.thickness_mm() - d).abs() < 1e-12);
        assert!((laid.outline.area_mm2() * 0.65 - few.fibre_area_mm2()).abs() < 1e-9);
        few.form.width_mm = Some(2.0);
        assert!(matches!(
            few.laid_at(2.5, Vary::default()),
            Err(LayError::ThinnerThanFilament { .. })
        ));
    }

    #[test]
    fn only_assumed_outlines_are_varied_and_keep_their_area() {
        let flatter = Vary {
            flatness: 1.2,
            ..Vary::default()
        };
        let yarn = glass(66.0, None, 0.0, YarnForm::default());
        let (one, other) = (
            yarn.laid_at(0.5, Vary::default()).unwrap(),
            yarn.laid_at(0.5, flatter).unwrap(),
        );
        assert!((other.outline.flatness() / one.outline.flatness() - 1.2).abs() < 1e-9);
        assert!((other.outline.area_mm2() / one.outline.area_mm2() - 1.0).abs() < 1e-9);
        let measured = YarnForm {
            width_mm: Some(0.4),
            thickness_mm: Some(0.12),
            ..YarnForm::default()
        };
        let yarn = glass(66.0, None, 0.0, measured);
        assert_eq!(
            yarn.laid_at(0.5, Vary::default()),
            yarn.laid_at(0.5, flatter)
        );
    }

    /// A single filament is E pi d^4/64; N free ones N times that; fully bonded at packing 1 would be the solid E I.
    #[test]
    fn rigidity_lies_between_free_and_bonded() {
        let mut yarn = glass(66.0, Some(400), 0.0, YarnForm::default());
        let laid = yarn.laid_at(0.5, Vary::default()).unwrap();
        let d = yarn.count.filament_diameter_mm;
        let one = 73_000.0 * PI * d.powi(4) / 64.0;
        assert!((yarn.free_rigidity_n_mm2() / (400.0 * one) - 1.0).abs() < 1e-12);
        let added = 73_000.0 * laid.packing * laid.outline.second_moment_mm4();
        assert!((yarn.bonded_rigidity_n_mm2(&laid) - 400.0 * one - added).abs() < 1e-9);
        assert_eq!(yarn.rigidity_n_mm2(&laid), yarn.free_rigidity_n_mm2());
        yarn.binding = 0.5;
        let half = yarn.free_rigidity_n_mm2() + 0.25 * added;
        assert!((yarn.rigidity_n_mm2(&laid) / half - 1.0).abs() < 1e-12);
        yarn.bending_rigidity_n_mm2 = Some(0.07);
        assert_eq!(yarn.rigidity_n_mm2(&laid), 0.07);
        // Pull shared by 400 filaments; the most loaded one carries 1.3 times its share.
        yarn.tension_spread = 1.3;
        let stress = 1.3 * 0.8 / (400.0 * PI / 4.0 * d * d);
        assert!((yarn.axial_stress_mpa(0.8) / stress - 1.0).abs() < 1e-12);
    }
}
