//! From a weave to its cloth: measured thickness met, and yarns that give way in dense cloth.
//!
//! A measured cloth thickness scales the thicknesses of both yarns by one factor until the larger of wave
//! height + thickness meets it.
//!
//! Yarns in dense cloth press each other together. Two things may give, in this order:
//!
//! 1. a yarn squeezed to its spacing touches its neighbours and leaves the other system no way between: it
//!    becomes as much narrower as lets it through, down to 0.8 of the spacing;
//! 2. packing that is only assumed is raised, from 0.65 up to the closest, 0.91, and no further than needed: a
//!    dense satin is packed closer than an open plain weave.
//!
//! Both are named in the report. What still does not pass is jammed. That assumed packings give way is common
//! sense of the trade without a source; a packing given, or two sizes, never do.

use super::cloth::{Cloth, ClothError};
use crate::root::rising_root;
use crate::spec::{System, Weave};
use crate::yarn::{CLOSEST_PACKING, DEFAULT_PACKING, Vary};

/// The narrowest that a squeezed yarn becomes, as a share of its spacing.
const NARROWEST: f64 = 0.8;
/// How closely the giving way is found.
const ACCURACY: f64 = 1e-6;

impl Cloth {
    /// The cloth of a weave, its assumed outlines varied by `flatness` (1 for the spec as it stands).
    ///
    /// # Errors
    /// Where the yarns do not fit, or no scaling meets the measured thickness.
    pub fn build(weave: &Weave, flatness: f64) -> Result<Self, ClothError> {
        let Some(asked_mm) = weave.thickness_mm else {
            return unscaled(weave, flatness);
        };
        // Thicker yarns make a thicker cloth, up to the first that jams or stands on edge; thinner ones are
        // packed closer, down to the closest packing.
        let thickness_at = |factor: f64| scaled(weave, flatness, factor);
        let (low, high) = factor_range(|factor| thickness_at(factor).is_ok())
            .ok_or_else(|| thickness_at(1.0).err().unwrap_or(ClothError::Jammed))?;
        let excess = |factor: f64| thickness_at(factor).map_or(0.0, |c| c.thickness_mm) - asked_mm;
        let factor = rising_root(excess, low, high, 1e-12);
        let cloth = thickness_at(factor)?;
        if (cloth.thickness_mm / asked_mm - 1.0).abs() > 1e-6 {
            return Err(ClothError::Thickness {
                asked_mm,
                least_mm: thickness_at(low)?.thickness_mm,
                most_mm: thickness_at(high)?.thickness_mm,
            });
        }
        Ok(Self {
            thickness_factor: Some(factor),
            ..cloth
        })
    }
}

/// The range of thickness factors around a good one in which a cloth exists, each end within 1e-9.
fn factor_range(exists: impl Fn(f64) -> bool) -> Option<(f64, f64)> {
    // A good factor near 1 to start from: yarns as they lie, else thinner ones.
    let good = (0..40)
        .map(|step| 0.97f64.powi(step))
        .find(|factor| exists(*factor))?;
    let edge = |mut inside: f64, mut outside: f64| {
        while (inside - outside).abs() > 1e-9 {
            let middle = 0.5 * (inside + outside);
            if exists(middle) {
                inside = middle
            } else {
                outside = middle
            }
        }
        inside
    };
    let above = (1..20)
        .map(|step| good * 1.5f64.powi(step))
        .find(|factor| !exists(*factor));
    Some((edge(good, 0.0), edge(good, above.unwrap_or(good))))
}

/// The cloth of a weave whose thickness is not measured.
fn unscaled(weave: &Weave, flatness: f64) -> Result<Cloth, ClothError> {
    let with = |packing: f64| {
        let vary = Vary {
            flatness,
            packing,
            ..Vary::default()
        };
        narrowed(weave, vary)
    };
    let as_laid = with(DEFAULT_PACKING);
    let assumed = |system: &System| {
        let form = &system.yarn.form;
        !system.yarn.is_monofilament()
            && form.packing.is_none()
            && form.sizes_mm(system.yarn.shape()).is_none()
    };
    let may_give = assumed(&weave.warp) || assumed(&weave.weft);
    if as_laid.is_ok() || !may_give || with(CLOSEST_PACKING).is_err() {
        return as_laid;
    }
    let packing = last_that(
        |packing| with(packing).is_ok(),
        CLOSEST_PACKING,
        DEFAULT_PACKING,
    );
    Ok(Cloth {
        raised_packing: Some(packing),
        ..with(packing)?
    })
}

/// The cloth with the yarns' thicknesses scaled by a factor: packing follows and cannot give.
pub(super) fn scaled(weave: &Weave, flatness: f64, thickness: f64) -> Result<Cloth, ClothError> {
    let vary = Vary {
        flatness,
        thickness,
        ..Vary::default()
    };
    narrowed(weave, vary)
}

/// The cloth with squeezed yarns as much narrower as they must be.
fn narrowed(weave: &Weave, vary: Vary) -> Result<Cloth, ClothError> {
    let as_laid = Cloth::build_varied(weave, vary);
    let squeezed = |system: &System| {
        system
            .yarn
            .laid_at(system.spacing_mm(), vary)
            .is_ok_and(|laid| laid.squeezed)
    };
    if as_laid != Err(ClothError::Jammed) || !(squeezed(&weave.warp) || squeezed(&weave.weft)) {
        return as_laid;
    }
    let with = |room: f64| Cloth::build_varied(weave, Vary { room, ..vary });
    // Narrower yarns are thicker, so passing may end again: look for the first that passes.
    let step = 0.02;
    let first = (1..)
        .map(|index| 1.0 - step * f64::from(index))
        .take_while(|room| *room >= NARROWEST);
    match first.into_iter().find(|room| with(*room).is_ok()) {
        Some(room) => with(last_that(|room| with(room).is_ok(), room, room + step)),
        None => as_laid,
    }
}

/// The value nearest to `wanted` that still passes, from `passes` on.
fn last_that(does: impl Fn(f64) -> bool, passes: f64, wanted: f64) -> f64 {
    let (mut passes, mut fails) = (passes, wanted);
    while (fails - passes).abs() > ACCURACY {
        let middle = 0.5 * (passes + fails);
        if does(middle) {
            passes = middle;
        } else {
            fails = middle;
        }
    }
    passes
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pattern::Weaves;
    use crate::span::SourceText;
    use crate::spec::Spec;

    fn weave(yarn: &str, weave: &str, warp: &str, weft: &str) -> Weave {
        let text = format!(
            "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\n{yarn}\n[weave]\n{weave}\n\
             warp = {{ yarn = \"y\", sett = \"{warp}\" }}\nweft = {{ yarn = \"y\", sett = \"{weft}\" }}\n"
        );
        Spec::read(SourceText::new("t", text), &Weaves::builtin())
            .unwrap()
            .weave
    }

    const SATIN: &str = "pattern = \"satin-8\"";

    /// 57 x 54 per inch of 66 tex, an eight-end satin of the industry tables: woven daily, and too dense for the
    /// default packing. It gets the least packing that passes, and a given packing does not give way.
    #[test]
    fn an_assumed_packing_gives_way_as_far_as_it_must() {
        let dense = weave("linear_density = \"66.14 tex\"", SATIN, "57 /in", "54 /in");
        let cloth = Cloth::build(&dense, 1.0).unwrap();
        let packing = cloth.raised_packing.unwrap();
        assert!(
            packing > DEFAULT_PACKING && packing < CLOSEST_PACKING,
            "{packing}"
        );
        assert!((cloth.warp.laid.packing - packing).abs() < 1e-9);
        let given = |packing: f64| {
            let yarn = format!("linear_density = \"66.14 tex\"\npacking = {packing}");
            Cloth::build(&weave(&yarn, SATIN, "57 /in", "54 /in"), 1.0)
        };
        assert_eq!(given(packing - 1e-4), Err(ClothError::Jammed));
        assert!(given(packing + 1e-4).is_ok());
    }

    #[test]
    fn an_open_cloth_keeps_the_default_packing() {
        let open = weave("linear_density = \"66.14 tex\"", SATIN, "12 /cm", "12 /cm");
        assert_eq!(Cloth::build(&open, 1.0).unwrap().raised_packing, None);
    }

    #[test]
    fn squeezed_yarns_leave_the_others_a_way_through() {
        let yarn = "linear_density = \"66.14 tex\"\nwidth = \"0.9 mm\"";
        let touching = weave(yarn, "pattern = \"plain\"", "12 /cm", "12 /cm");
        let cloth = Cloth::build(&touching, 1.0).unwrap();
        let share = cloth.warp.laid.outline.width_mm() / cloth.warp.spacing_mm;
        assert!(
            cloth.warp.laid.squeezed && share < 1.0 && share > 0.95,
            "{share}"
        );
    }

    #[test]
    fn a_measured_thickness_is_met_by_one_factor() {
        let loose = weave(
            "linear_density = \"66.14 tex\"",
            "pattern = \"plain\"",
            "44 /in",
            "32 /in",
        );
        let free = Cloth::build(&loose, 1.0).unwrap();
        let text = "pattern = \"plain\"\nthickness = \"0.18 mm\"";
        let measured = weave("linear_density = \"66.14 tex\"", text, "44 /in", "32 /in");
        let cloth = Cloth::build(&measured, 1.0).unwrap();
        assert!((cloth.thickness_mm - 0.18).abs() < 1e-6);
        let factor = cloth.thickness_factor.unwrap();
        for (a, b) in [(&cloth.warp, &free.warp), (&cloth.weft, &free.weft)] {
            let ratio = a.laid.outline.thickness_mm() / b.laid.outline.thickness_mm();
            assert!((ratio - factor).abs() < 1e-9);
            assert_eq!(a.laid.outline.width_mm(), b.laid.outline.width_mm());
        }
        let height = |y: &crate::weave::ClothYarn| y.wave_height_mm + y.laid.outline.thickness_mm();
        assert!((height(&cloth.warp).max(height(&cloth.weft)) - 0.18).abs() < 1e-6);
    }
}
