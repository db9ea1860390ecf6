//! Linear density, filaments and filament diameter: any two fix the third.
//!
//! ```text
//! tex = 1000 rho N pi d²/4         rho in g/cm3, d in mm (1 tex = 1 g/km, ISO 1144)
//! ```
//!
//! A diameter from the fibre library is only a default and yields to tex and filaments; three values given in
//! the spec may differ by 5 % in tex (size, moisture, rounding) and are refused beyond.

use std::f64::consts::FRAC_PI_4;
use thiserror::Error;

/// How far three given values may disagree, as a share of the tex given.
pub const DISAGREEMENT: f64 = 0.05;

/// What the other two fixed.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Followed {
    /// The linear density.
    LinearDensity,
    /// The number of filaments.
    Filaments,
    /// The filament diameter.
    Diameter,
    /// Nothing: all three were given and agree.
    Nothing,
}

/// A yarn's fibre, counted.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Count {
    /// Linear density, tex.
    pub linear_density_tex: f64,
    /// Number of filaments, at least 1.
    pub filaments: u32,
    /// Filament diameter, mm.
    pub filament_diameter_mm: f64,
    /// Which of the three followed from the others.
    pub followed: Followed,
    /// Whether the library's diameter was one of them.
    pub library_diameter: bool,
}

/// What a spec says of a yarn's fibre.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct CountGiven {
    /// Linear density, tex.
    pub linear_density_tex: Option<f64>,
    /// Number of filaments.
    pub filaments: Option<u32>,
    /// Filament diameter, mm.
    pub filament_diameter_mm: Option<f64>,
}

/// Why the three do not fit.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum CountError {
    /// Neither linear density nor filaments.
    #[error("neither `linear_density` nor `filaments` is given")]
    TooLittle,
    /// All three given, over 5 % apart.
    #[error(
        "{filaments} filaments of {diameter_um:.4} um at {density_g_cm3} g/cm3 make {sum_tex:.1} tex, \
         not {given_tex} tex: {apart_percent:.0} % apart (5 % is allowed)"
    )]
    Contradiction {
        /// Filaments given.
        filaments: u32,
        /// Diameter given, um.
        diameter_um: f64,
        /// Density used.
        density_g_cm3: f64,
        /// What they make.
        sum_tex: f64,
        /// Linear density given.
        given_tex: f64,
        /// The difference as a share of what was given.
        apart_percent: f64,
    },
    /// Less fibre than one filament.
    #[error(
        "{given_tex} tex is less than one filament of {diameter_um:.4} um, which is {one_tex:.3} tex"
    )]
    UnderOneFilament {
        /// Linear density given.
        given_tex: f64,
        /// Diameter used, um.
        diameter_um: f64,
        /// Tex of one filament.
        one_tex: f64,
    },
    /// More filaments than can be counted.
    #[error(
        "{given_tex} tex of {diameter_um:.4} um filaments is more than 4 thousand million filaments"
    )]
    TooMany {
        /// Linear density given.
        given_tex: f64,
        /// Diameter used, um.
        diameter_um: f64,
    },
}

/// Linear density of one filament, tex.
fn filament_tex(diameter_mm: f64, density_g_cm3: f64) -> f64 {
    1e3 * density_g_cm3 * FRAC_PI_4 * diameter_mm * diameter_mm
}

impl Count {
    /// From what is given, the library's diameter and the fibre's density.
    ///
    /// # Errors
    /// Too little given, a contradiction, or less fibre than one filament.
    pub fn resolve(
        given: CountGiven,
        library_diameter_mm: f64,
        density_g_cm3: f64,
    ) -> Result<Self, CountError> {
        let of_diameter = |d: f64| filament_tex(d, density_g_cm3);
        let diameter = given.filament_diameter_mm.unwrap_or(library_diameter_mm);
        let library_diameter = given.filament_diameter_mm.is_none();
        match (given.linear_density_tex, given.filaments) {
            (None, None) => Err(CountError::TooLittle),
            (None, Some(filaments)) => Ok(Self {
                linear_density_tex: of_diameter(diameter) * f64::from(filaments),
                filaments,
                filament_diameter_mm: diameter,
                followed: Followed::LinearDensity,
                library_diameter,
            }),
            (Some(tex), None) => {
                let exact = tex / of_diameter(diameter);
                let diameter_um = 1e3 * diameter;
                if exact < 0.5 {
                    return Err(CountError::UnderOneFilament {
                        given_tex: tex,
                        diameter_um,
                        one_tex: of_diameter(diameter),
                    });
                }
                if exact > f64::from(u32::MAX) {
                    return Err(CountError::TooMany {
                        given_tex: tex,
                        diameter_um,
                    });
                }
                Ok(Self {
                    linear_density_tex: tex,
                    filaments: exact.round() as u32,
                    filament_diameter_mm: diameter,
                    followed: Followed::Filaments,
                    library_diameter,
                })
            }
            (Some(tex), Some(filaments)) => {
                if let Some(given_diameter) = given.filament_diameter_mm {
                    let sum_tex = of_diameter(given_diameter) * f64::from(filaments);
                    let apart = (sum_tex / tex - 1.0).abs();
                    if apart > DISAGREEMENT {
                        return Err(CountError::Contradiction {
                            filaments,
                            diameter_um: 1e3 * given_diameter,
                            density_g_cm3,
                            sum_tex,
                            given_tex: tex,
                            apart_percent: 100.0 * apart,
                        });
                    }
                }
                let followed = if library_diameter {
                    Followed::Diameter
                } else {
                    Followed::Nothing
                };
                let implied =
                    (tex / (1e3 * density_g_cm3 * FRAC_PI_4 * f64::from(filaments))).sqrt();
                Ok(Self {
                    linear_density_tex: tex,
                    filaments,
                    filament_diameter_mm: given.filament_diameter_mm.unwrap_or(implied),
                    followed,
                    library_diameter: false,
                })
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn given(tex: Option<f64>, filaments: Option<u32>, um: Option<f64>) -> CountGiven {
        CountGiven {
            linear_density_tex: tex,
            filaments,
            filament_diameter_mm: um.map(|um| um * 1e-3),
        }
    }

    /// US strand designations (yield 7500 and 45 000 yd/lb, 400 and 200 filaments, density 2.58 g/cm3): implied
    /// diameters 9.03 and 5.22 um; industry yarn tables, the count of the second from memory.
    #[test]
    fn tex_and_filaments_fix_the_diameter() {
        for (tex, filaments, um) in [(66.14, 400, 9.03), (11.02, 200, 5.22)] {
            let count =
                Count::resolve(given(Some(tex), Some(filaments), None), 0.02, 2.58).unwrap();
            assert!((1e3 * count.filament_diameter_mm - um).abs() < 0.01);
            assert_eq!(count.followed, Followed::Diameter);
            assert!(!count.library_diameter, "the library's 20 um yields");
        }
    }

    #[test]
    fn two_of_three_in_every_order_agree() {
        let by_count = Count::resolve(given(None, Some(420), Some(12.5)), 0.01, 3.9).unwrap();
        let tex = by_count.linear_density_tex;
        let by_tex = Count::resolve(given(Some(tex), None, Some(12.5)), 0.01, 3.9).unwrap();
        assert_eq!(by_tex.filaments, 420);
        let all = Count::resolve(given(Some(tex), Some(420), Some(12.5)), 0.01, 3.9).unwrap();
        assert_eq!(all.followed, Followed::Nothing);
    }

    #[test]
    fn a_contradiction_shows_the_sum() {
        let error =
            Count::resolve(given(Some(260.0), Some(420), Some(12.5)), 0.01, 3.9).unwrap_err();
        assert_eq!(
            error.to_string(),
            "420 filaments of 12.5000 um at 3.9 g/cm3 make 201.0 tex, not 260 tex: 23 % apart (5 % is allowed)"
        );
        assert!(Count::resolve(given(Some(206.0), Some(420), Some(12.5)), 0.01, 3.9).is_ok());
        assert_eq!(
            Count::resolve(given(None, None, Some(9.0)), 0.01, 2.5),
            Err(CountError::TooLittle)
        );
        assert!(matches!(
            Count::resolve(given(Some(0.01), None, Some(9.0)), 0.01, 2.5),
            Err(CountError::UnderOneFilament { .. })
        ));
    }
}
