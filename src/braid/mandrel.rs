//! A mandrel whose diameter changes: the braid at each station along it.
//!
//! Either the machine runs on unchanged, and the angle follows the diameter (tan a = pi D n/v: steeper where it is thick),
//! or the take-up is led so that the angle stays, and the advance per turn follows. Spacing, cover and jam follow at each
//! station from the braid that lies there; the first station that jams, or opens below a cover asked for, is told.
//!
//! Left out: the delay with which the fell follows a change (the mandrel moves on by about the length of the cone of yarns
//! before a new angle is reached), the slope of the surface itself, and yarns that slip down it.

use super::angle::{BraidAngle, Kinematics};
use super::error::BraidError;
use super::jam::JamState;
use super::laid::Braid;
use super::parts::Parts;

/// A place on the mandrel.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Station {
    /// Place along the axis, mm.
    pub at_mm: f64,
    /// Diameter of the mandrel there, mm.
    pub diameter_mm: f64,
}

/// How the mandrel is taken up.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum TakeUp {
    /// The machine runs on unchanged.
    Constant(Kinematics),
    /// As keeps this angle.
    KeepsAngle(BraidAngle),
}

/// The braid at one station.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Row {
    /// Place along the axis, mm.
    pub at_mm: f64,
    /// The braid there: angle, spacings, helix; paths while it is not jammed.
    pub braid: Braid,
    /// Advance of the mandrel in one turn of the carriers, mm.
    pub advance_mm_per_turn: f64,
    /// Share of the surface that is covered.
    pub cover: f64,
    /// How the yarns of one set lie beside each other.
    pub jam: JamState,
}

/// The braid along a mandrel, station after station.
#[derive(Debug, Clone, PartialEq)]
pub struct AlongMandrel {
    rows: Vec<Row>,
}

impl AlongMandrel {
    /// Braids these parts along the stations.
    ///
    /// # Errors
    /// Where there is no station, one does not lie behind the one before, or a diameter is not above 0.
    pub fn new(parts: &Parts, stations: &[Station], take_up: TakeUp) -> Result<Self, BraidError> {
        if stations.is_empty() {
            return Err(BraidError::NoStation);
        }
        let mut before_mm = f64::NEG_INFINITY;
        let mut rows = Vec::with_capacity(stations.len());
        for Station { at_mm, diameter_mm } in stations.iter().copied() {
            if !(at_mm.is_finite() && at_mm > before_mm) {
                return Err(BraidError::Order { at_mm, before_mm });
            }
            before_mm = at_mm;
            let braid = match take_up {
                TakeUp::Constant(run) => parts.on_machine(diameter_mm, &run)?,
                TakeUp::KeepsAngle(angle) => parts.on_mandrel(diameter_mm, angle)?,
            };
            rows.push(Row {
                at_mm,
                advance_mm_per_turn: braid.lattice().advance_mm_per_turn(),
                cover: braid.cover(),
                jam: braid.jam(),
                braid,
            });
        }
        Ok(Self { rows })
    }

    /// All stations in order.
    #[must_use]
    pub fn rows(&self) -> &[Row] {
        &self.rows
    }

    /// The first station at which the yarns do not fit side by side.
    #[must_use]
    pub fn first_jammed(&self) -> Option<&Row> {
        self.rows
            .iter()
            .find(|row| matches!(row.jam, JamState::Jammed { .. }))
    }

    /// The first station that is covered less than asked for.
    #[must_use]
    pub fn first_below_cover(&self, least: f64) -> Option<&Row> {
        self.rows.iter().find(|row| row.cover < least)
    }
}

#[cfg(test)]
mod tests {
    use super::super::Setup;
    use super::*;
    use crate::yarn::{Outline, Shape};

    fn parts() -> Parts {
        let outline = Outline::new(Shape::Lens, 2.0, 0.3).unwrap();
        Parts::new(Setup::new(48, 2, 1).unwrap(), outline, None).unwrap()
    }

    fn cone() -> Vec<Station> {
        (0..6)
            .map(f64::from)
            .map(|step| Station {
                at_mm: 50.0 * step,
                diameter_mm: 25.0 + 6.0 * step,
            })
            .collect()
    }

    #[test]
    fn at_constant_take_up_the_angle_follows_the_diameter() {
        let run = Kinematics::new(0.5, 60.0).unwrap();
        let along = AlongMandrel::new(&parts(), &cone(), TakeUp::Constant(run)).unwrap();
        for row in along.rows() {
            let lattice = row.braid.lattice();
            let ratio = lattice.angle().radians().tan() / lattice.mean_diameter_mm();
            assert!((ratio - std::f64::consts::PI * 0.5 / 60.0).abs() < 1e-12);
            assert!((row.advance_mm_per_turn - 120.0).abs() < 1e-9);
        }
    }

    /// By hand: w N/(2 pi cos 45) = 21.6 mm is the closed mean diameter of 48 yarns 2 mm wide: a mandrel of 21.008 mm.
    #[test]
    fn at_constant_angle_it_jams_on_the_thin_end_and_opens_on_the_thick() {
        let angle = BraidAngle::from_degrees(45.0).unwrap();
        let mut thin = cone();
        thin.iter_mut()
            .for_each(|station| station.diameter_mm -= 10.0);
        let along = AlongMandrel::new(&parts(), &thin, TakeUp::KeepsAngle(angle)).unwrap();
        let jammed: Vec<bool> = along
            .rows()
            .iter()
            .map(|row| matches!(row.jam, JamState::Jammed { .. }))
            .collect();
        assert_eq!(
            jammed,
            [true, true, false, false, false, false],
            "15 and 21 mm, then 27"
        );
        assert_eq!(along.first_jammed().map(|row| row.at_mm), Some(0.0));
        let opens = along.first_below_cover(0.8).unwrap();
        assert!(opens.cover < 0.8 && opens.at_mm > 0.0);
        assert!(
            along
                .rows()
                .windows(2)
                .all(|pair| pair[1].cover <= pair[0].cover)
        );
        assert!(
            along
                .rows()
                .iter()
                .all(|row| (row.braid.lattice().angle().degrees() - 45.0).abs() < 1e-12)
        );
    }

    #[test]
    fn stations_out_of_order_are_refused() {
        let angle = TakeUp::KeepsAngle(BraidAngle::from_degrees(45.0).unwrap());
        assert_eq!(
            AlongMandrel::new(&parts(), &[], angle),
            Err(BraidError::NoStation)
        );
        let mut stations = cone();
        stations[3].at_mm = 100.0;
        assert!(matches!(
            AlongMandrel::new(&parts(), &stations, angle),
            Err(BraidError::Order { .. })
        ));
        stations = cone();
        stations[2].diameter_mm = 0.0;
        assert!(matches!(
            AlongMandrel::new(&parts(), &stations, angle),
            Err(BraidError::Size { .. })
        ));
    }
}
