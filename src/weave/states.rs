//! The states of a cloth: taut yarns have one, stiff yarns two, on the loom and at rest.
//!
//! On the loom the yarns carry their mean weaving tension, at rest the share of it that friction and set keep.
//! The two are one cloth: in the state in which the sett was counted the spacings are given and the heights
//! of least energy follow (`heights`), and with them the yarns' lengths; in the other state the yarns keep those lengths
//! and the spacings follow (`lengths`).
//!
//! Outlines, packing and whether the yarns can interlace at all are those of the taut cloth (`build`): a stiff yarn passes
//! where a thread does. A measured crimp or thickness is one of the state of the sett.

use super::build::scaled;
use super::cloth::{Cloth, ClothError};
use super::pulled::Pulled;
use crate::root::rising_root;
use crate::spec::{PathModel, SettAt, Weave};
use std::cell::{Cell, RefCell};

/// Which rigidity the yarns have.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum RigidityBound {
    /// Their own: measured, or from filaments and binding.
    #[default]
    Own,
    /// That of filaments that slide freely.
    Free,
    /// That of the fully bonded yarn.
    Bonded,
}

/// What is varied of a weave beside its spec.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Varied {
    /// Factor on assumed flatness.
    pub flatness: f64,
    /// Which rigidity.
    pub rigidity: RigidityBound,
}

impl Default for Varied {
    fn default() -> Self {
        Self {
            flatness: 1.0,
            rigidity: RigidityBound::Own,
        }
    }
}

/// A cloth in its states.
#[derive(Debug, Clone, PartialEq)]
pub struct States {
    /// At rest, or the one state of taut yarns.
    pub cloth: Cloth,
    /// On the loom; absent for taut yarns.
    pub on_loom: Option<Cloth>,
}

impl States {
    /// The cloth of a weave in its states.
    ///
    /// # Errors
    /// Where there is no cloth, or a stiff path or balance was not found.
    pub fn build(weave: &Weave, varied: Varied) -> Result<Self, ClothError> {
        let taut = Cloth::build(weave, varied.flatness)?;
        if weave.path == PathModel::Taut {
            return Ok(Self {
                cloth: taut,
                on_loom: None,
            });
        }
        let taut = measured(weave, varied, taut)?;
        let (rest, loom) = (weave.rest, 1.0);
        let (first, second) = match weave.sett_at {
            SettAt::Finished => (rest, loom),
            SettAt::Loom => (loom, rest),
        };
        let counted = Pulled::new(weave, &taut, first, varied.rigidity).balanced()?;
        let other = Pulled::new(weave, &taut, second, varied.rigidity);
        let other = match other.with_lengths(&counted) {
            Ok(other) => other,
            Err(why) => {
                let (state, other) = match weave.sett_at {
                    SettAt::Finished => ("at rest", "on the loom"),
                    SettAt::Loom => ("on the loom", "at rest"),
                };
                return Err(match why {
                    ClothError::Jammed => ClothError::NoOtherState { state, other },
                    why => why,
                });
            }
        };
        let (counted, other) = (counted.cloth(weave, &taut), other.cloth(weave, &taut));
        Ok(match weave.sett_at {
            SettAt::Finished => Self {
                cloth: counted,
                on_loom: Some(other),
            },
            SettAt::Loom => Self {
                cloth: other,
                on_loom: Some(counted),
            },
        })
    }

    /// The cloth under the loom's pull: the same where there is one state.
    pub fn on_loom(&self) -> &Cloth {
        self.on_loom.as_ref().unwrap_or(&self.cloth)
    }
}

/// The taut cloth whose yarns are scaled so that the stiff cloth meets the measured thickness.
fn measured(weave: &Weave, varied: Varied, taut: Cloth) -> Result<Cloth, ClothError> {
    let (Some(asked_mm), Some(begun)) = (weave.thickness_mm, taut.thickness_factor) else {
        return Ok(taut);
    };
    let share = match weave.sett_at {
        SettAt::Finished => weave.rest,
        SettAt::Loom => 1.0,
    };
    // The thinnest and the thickest cloth met on the way.
    let met_mm = Cell::new((f64::INFINITY, 0.0_f64));
    let thickness = |factor: f64| -> Result<f64, ClothError> {
        let taut = scaled(weave, varied.flatness, factor)?;
        let found = Pulled::new(weave, &taut, share, varied.rigidity).balanced()?;
        let found = found.thickness_mm();
        met_mm.set((met_mm.get().0.min(found), met_mm.get().1.max(found)));
        Ok(found)
    };
    let trouble = RefCell::new(None);
    let factor = secant(&thickness, begun, asked_mm).unwrap_or_else(|| {
        // Near the jam the thickness has a kink: closed in from both sides. Yarns that do not fit are too thick above the
        // taut factor, and packed too closely below it.
        let excess = |factor: f64| match thickness(factor) {
            Ok(found) => found - asked_mm,
            Err(why) => {
                if !matches!(why, ClothError::Jammed | ClothError::Lay { .. }) {
                    trouble.borrow_mut().get_or_insert(why);
                }
                asked_mm * if factor > begun { 1.0 } else { -1.0 }
            }
        };
        rising_root(excess, 0.6 * begun, 1.3 * begun, 1e-10 * begun)
    });
    // Where the root stands at the edge of what is solved, or of what can be woven, it is none.
    let met = thickness(factor);
    let off = |met: &f64| (met - asked_mm).abs() > 1e-6 * asked_mm;
    if met.as_ref().map_or(true, off) {
        if let Some(why) = trouble.into_inner() {
            return Err(why);
        }
        let _ = met?;
        let (least_mm, most_mm) = met_mm.get();
        return Err(ClothError::Thickness {
            asked_mm,
            least_mm,
            most_mm,
        });
    }
    Ok(Cloth {
        thickness_factor: Some(factor),
        ..scaled(weave, varied.flatness, factor)?
    })
}

/// The factor that meets a thickness, from one near by; `None` where the secant does not come to it.
fn secant(
    thickness: &impl Fn(f64) -> Result<f64, ClothError>,
    begun: f64,
    asked_mm: f64,
) -> Option<f64> {
    let (mut a, mut b) = (begun, begun * 0.995);
    let (mut at_a, mut at_b) = (thickness(a).ok()? - asked_mm, thickness(b).ok()? - asked_mm);
    for _ in 0..10 {
        if at_b.abs() <= 1e-7 * asked_mm {
            return Some(b);
        }
        let slope = (at_b - at_a) / (b - a);
        if !(slope.is_finite() && slope > 0.1 * asked_mm / begun) {
            return None;
        }
        (a, at_a) = (b, at_b);
        b -= at_b / slope;
        at_b = thickness(b).ok()? - asked_mm;
    }
    None
}
