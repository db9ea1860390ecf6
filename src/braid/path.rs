//! Crimp and bends of the braiders.
//!
//! Both sets are alike: same yarn, same pull, same interlacing. Turning the braid over about a line round the mandrel
//! exchanges them, keeps what lies on top, and changes up for down, so at every crossing the sections of both stand t/2
//! above and below the middle. Nothing is left to share: a braider is one yarn over and under sections of known height,
//!
//! ```text
//! spacing p = s/sin 2a,  section w/sin 2a by t,  wave height t,  crimp (1/k)(l/p - 1)
//! ```
//!
//! taut by `path::Crest` (Peirce 1937 and after), stiff in `stiff`, over axials in `over_axials`. At 45 degrees, with one end
//! on a carrier, it is the plain cloth, or the even twill, of the same yarns and spacing (tested).
//!
//! Left out: what the helix adds to the crimp (its curvature is told, `helix_per_mm`, for the bends); the ends of one carrier
//! cross as one band.

use super::error::BraidError;
use super::jam::JamState;
use super::laid::Braid;
use crate::bend::{Flanks, Stretch};
use crate::path::{Crest, half_crown};

/// The path of the braiders; all of them run alike.
#[derive(Debug, Clone, PartialEq)]
pub struct BraiderPath {
    /// Straightened over helix length, less 1.
    pub crimp: f64,
    /// Height of the wave from crest to trough of the centreline, mm.
    pub wave_height_mm: f64,
    /// Steepest slope, rad.
    pub slope_rad: f64,
    /// Smallest radius of the centreline from crimp alone, mm; absent where the yarn runs straight.
    pub min_radius_mm: Option<f64>,
    /// What a half crown is made of, on average; from the crest outwards where the path is taut and crosses one kind of
    /// section.
    pub half_crown: Vec<Stretch>,
    /// Half crowns per mm of yarn.
    pub half_crowns_per_mm: f64,
    /// Curvature of the helix, 1/mm: adds to crests on the outside, takes off from troughs on the inside.
    pub helix_per_mm: f64,
}

impl Braid {
    /// The braiders as tight threads.
    ///
    /// # Errors
    /// Where the braid is jammed.
    pub fn taut(&self) -> Result<BraiderPath, BraidError> {
        self.fits()?;
        match (self.parts().axials(), self.crossed_axial()) {
            (Some(axials), Some(section)) => self.taut_over_axials(axials, section),
            _ => self.taut_alone(),
        }
    }

    fn taut_alone(&self) -> Result<BraiderPath, BraidError> {
        let crest = self.crest();
        let thickness_mm = self.parts().braider().thickness_mm();
        // A hair of rounding must not jam what just passes.
        let wave_mm = thickness_mm.min(crest.highest_wave_mm());
        if wave_mm < thickness_mm * (1.0 - 1e-12) {
            return Err(self.no_way());
        }
        let passing = crest.pass(wave_mm).ok_or_else(|| self.no_way())?;
        let changes = self.changes_per_crossing();
        let crimp = changes * (passing.length_mm / crest.spacing_mm - 1.0);
        let radius = |radius_mm: f64| radius_mm + crest.half_thickness_mm;
        Ok(BraiderPath {
            crimp,
            wave_height_mm: wave_mm,
            slope_rad: passing.slope_rad,
            min_radius_mm: passing
                .rests
                .iter()
                .filter_map(|rest| rest.outline_radius_mm)
                .map(radius)
                .reduce(f64::min),
            half_crown: half_crown(&crest, &passing, wave_mm, self.flanks()),
            half_crowns_per_mm: self.half_crowns_per_mm(crimp),
            helix_per_mm: self.lattice().helix_curvature_per_mm(),
        })
    }

    /// Whether the yarns of one set fit side by side.
    pub(super) fn fits(&self) -> Result<(), BraidError> {
        match self.jam() {
            JamState::Jammed { .. } => Err(BraidError::SideBySide {
                width_mm: self.parts().band_width_mm(),
                spacing_mm: self.lattice().spacing_mm(),
                jam_rad: self.jam_angle().map(|angle| angle.radians()),
            }),
            JamState::Open { .. } | JamState::Closed => Ok(()),
        }
    }

    fn crest(&self) -> Crest {
        Crest {
            section: *self.crossed(),
            half_thickness_mm: 0.5 * self.parts().braider().thickness_mm(),
            spacing_mm: self.lattice().crossing_spacing_mm(),
        }
    }

    /// What is said where the yarns leave no way between.
    pub(super) fn no_way(&self) -> BraidError {
        let axials = self.crossed_axial().zip(self.axial_spacing_mm());
        let (section, spacing_mm) = match axials {
            Some((axial, apart_mm)) if axial.width_mm() > self.crossed().width_mm() => {
                (axial, apart_mm / self.lattice().angle().radians().sin())
            }
            _ => (self.crossed(), self.lattice().crossing_spacing_mm()),
        };
        BraidError::NoWay {
            width_mm: section.width_mm(),
            spacing_mm,
            thickness_mm: self.parts().braider().thickness_mm(),
        }
    }

    /// Changes of side over crossings: 1/k.
    fn changes_per_crossing(&self) -> f64 {
        1.0 / f64::from(self.parts().setup().over())
    }

    /// Half crowns per mm of yarn with this crimp.
    pub(super) fn half_crowns_per_mm(&self, crimp: f64) -> f64 {
        2.0 * self.changes_per_crossing() / (self.lattice().crossing_spacing_mm() * (1.0 + crimp))
    }

    /// Which sides of its sharpest crowns fall away.
    pub(super) fn flanks(&self) -> Flanks {
        if self.parts().setup().over() == 1 {
            Flanks::Both
        } else {
            Flanks::One
        }
    }
}

#[cfg(test)]
mod tests {
    use super::super::{Axials, BraidAngle, Parts, Setup, StiffPull};
    use super::*;
    use crate::yarn::{Outline, Shape};
    use proptest::prelude::*;

    fn lens(width: f64, thickness: f64) -> Outline {
        Outline::new(Shape::Lens, width, thickness).unwrap()
    }

    fn braid(over: u32, axials: Option<(u32, Outline)>, angle_deg: f64) -> Braid {
        let axials = axials.map(|(every, outline)| Axials::new(every, outline, 0.0).unwrap());
        let parts = Parts::new(Setup::new(48, over, 1).unwrap(), lens(1.5, 0.25), axials).unwrap();
        parts
            .on_mandrel(40.0, BraidAngle::from_degrees(angle_deg).unwrap())
            .unwrap()
    }

    /// Axials as good as none leave the braid of the two sets alone.
    #[test]
    fn the_thinnest_axial_changes_nothing() {
        for over in [1, 2, 3, 4] {
            for every in [1, 2, 3] {
                let alone = braid(over, None, 50.0).taut().unwrap();
                if 48 / over % every != 0 {
                    continue;
                }
                let with = braid(over, Some((every, lens(1e-6, 1e-6))), 50.0)
                    .taut()
                    .unwrap();
                assert!(
                    (with.crimp / alone.crimp - 1.0).abs() < 1e-3,
                    "{over} {every}: {} {}",
                    with.crimp,
                    alone.crimp
                );
                assert!((with.wave_height_mm - alone.wave_height_mm).abs() < 1e-5);
            }
        }
    }

    #[test]
    fn braiders_rise_over_axials() {
        let axial = lens(2.0, 0.4);
        for over in [1, 2] {
            let alone = braid(over, None, 50.0).taut().unwrap();
            let each = braid(over, Some((1, axial)), 50.0).taut().unwrap();
            let fourth = braid(over, Some((4, axial)), 50.0).taut().unwrap();
            assert!(
                (each.wave_height_mm - 0.65).abs() < 1e-9,
                "axial and braider"
            );
            assert!(
                each.crimp > fourth.crimp && fourth.crimp > alone.crimp,
                "{} {} {}",
                each.crimp,
                fourth.crimp,
                alone.crimp
            );
        }
    }

    #[test]
    fn a_jammed_braid_has_no_paths_and_says_what_fits() {
        let jammed = braid(1, None, 75.0);
        let said = jammed.taut().unwrap_err();
        assert!(
            matches!(
                said,
                BraidError::SideBySide {
                    jam_rad: Some(_),
                    ..
                }
            ),
            "{said}"
        );
        assert_eq!(
            jammed.stiff(StiffPull {
                pull_n: 1.0,
                rigidity_n_mm2: 0.1
            }),
            Err(said)
        );
        let limp = braid(1, None, 45.0).stiff(StiffPull {
            pull_n: 0.0,
            rigidity_n_mm2: 0.0,
        });
        assert_eq!(limp, Err(BraidError::Limp));
        let over = braid(1, Some((1, lens(1.0, 0.2))), 45.0).stiff(StiffPull {
            pull_n: 1.0,
            rigidity_n_mm2: 0.1,
        });
        assert_eq!(over, Err(BraidError::StiffOverAxials));
    }

    proptest! {
        #![proptest_config(ProptestConfig { cases: 48, failure_persistence: None, ..ProptestConfig::default() })]

        /// Whatever is given, an answer or an error; crimp above zero, and half crowns no longer than the yarn.
        #[test]
        fn every_braid_has_paths_or_an_error(
            over in 1u32..4, every in 0u32..4, width in 0.2..3.0f64, flat in 1.0..12.0f64, axial in 0.2..4.0f64,
            diameter in 2.0..80.0f64, angle_deg in 2.0..88.0f64, ends in 1u32..4,
        ) {
            let axials = (every > 0).then(|| Axials::new(every, lens(axial, axial / flat), 0.0).unwrap());
            let parts = Parts::new(Setup::new(24 * over, over, ends).unwrap(), lens(width, width / flat), axials).unwrap();
            let braid = parts.on_mandrel(diameter, BraidAngle::from_degrees(angle_deg).unwrap()).unwrap();
            if let Ok(path) = braid.taut() {
                prop_assert!(path.crimp > 0.0 && path.crimp.is_finite());
                let length: f64 = path.half_crown.iter().map(|stretch| stretch.length_mm).sum();
                prop_assert!(length * path.half_crowns_per_mm <= 1.0 + 1e-6, "{}", length * path.half_crowns_per_mm);
                prop_assert!(path.half_crown.iter().all(|stretch| stretch.length_mm >= 0.0));
            }
        }
    }
}
