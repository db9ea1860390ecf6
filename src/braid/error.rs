//! What is wrong with the numbers of a braid, and what would be right.

use thiserror::Error;

/// Why there is no such braid.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum BraidError {
    /// The carriers do not make two alike sets.
    #[error("{carriers} carriers make no braid; give an even number, at least 4")]
    Carriers {
        /// Carriers given.
        carriers: u32,
    },
    /// The interlacing does not close round the braid.
    #[error(
        "an interlacing {over}/{over} does not close round {carriers} carriers; give a multiple of {} carriers{}",
        2 * u64::from(*over),
        nearest(*over, *carriers)
    )]
    Interlacing {
        /// Crossings passed over, and then under.
        over: u32,
        /// Carriers given.
        carriers: u32,
    },
    /// The interlacing is none, or too long for a pattern.
    #[error("an interlacing {over}/{over} is none; give 1/1 to {most}/{most}")]
    Over {
        /// Crossings passed over, and then under.
        over: u32,
        /// The longest.
        most: u32,
    },
    /// No yarn on the carriers.
    #[error("no end on the carriers; give at least 1 end per carrier")]
    NoEnds,
    /// The axials do not close round the braid.
    #[error(
        "an axial in every {every}. gap does not close round {gaps} gaps; give a number that divides {gaps}"
    )]
    Axials {
        /// Every so many gaps one.
        every: u32,
        /// Gaps round the braid.
        gaps: u32,
    },
    /// The axials are too far apart to work out.
    #[error("axials {crossings} crossings of a braider apart are too far; give at most {most}")]
    AxialsApart {
        /// Crossings from axial to axial.
        crossings: u64,
        /// The most that are worked out.
        most: u64,
    },
    /// A number that is no size.
    #[error("the {what} is {found} {unit}; give a number above 0")]
    Size {
        /// What it is.
        what: &'static str,
        /// What was given.
        found: f64,
        /// Its unit.
        unit: &'static str,
    },
    /// A number that may be zero but not less.
    #[error("the {what} is {found}{unit}; give 0 or more")]
    Negative {
        /// What it is.
        what: &'static str,
        /// What was given.
        found: f64,
        /// Its unit, with its blank.
        unit: &'static str,
    },
    /// A braid angle outside what can be braided.
    #[error("a braid angle of {found_deg} deg is none; give one above 0 and below 90 deg")]
    Angle {
        /// What was given, degrees.
        found_deg: f64,
    },
    /// A stiff yarn that neither pull nor rigidity keeps.
    #[error("a yarn without pull and without rigidity has no stiff path; give either above 0")]
    Limp,
    /// The yarns of a set do not fit side by side.
    #[error(
        "the braid is jammed: {width_mm:.4} mm of yarn on each carrier stand {spacing_mm:.4} mm apart{}",
        fits(*jam_rad)
    )]
    SideBySide {
        /// Width of the ends of one carrier, mm.
        width_mm: f64,
        /// Spacing across one set, mm.
        spacing_mm: f64,
        /// The steepest angle that fits, where one does.
        jam_rad: Option<f64>,
    },
    /// The yarns fit side by side but leave the others no way between.
    #[error(
        "the braid is jammed: between sections {width_mm:.4} mm wide and {spacing_mm:.4} mm apart no yarn of {thickness_mm:.4} mm passes; \
         give thinner or narrower yarns, or fewer carriers"
    )]
    NoWay {
        /// Width of the crossed section as it is met, mm.
        width_mm: f64,
        /// Distance of sections along the yarn, mm.
        spacing_mm: f64,
        /// Thickness of the yarn, mm.
        thickness_mm: f64,
    },
    /// Stiff paths are worked out over one kind of section only.
    #[error("stiff paths over axials are not worked out; take the taut path")]
    StiffOverAxials,
    /// No stiff path was found.
    #[error(
        "no path of least energy was found for the braider, at its crossing {crossing}; take the taut path"
    )]
    NoPath {
        /// Which crossing of the repeat, from 1.
        crossing: usize,
    },
    /// More fibre than the outline holds.
    #[error(
        "{fibre_mm2:.4} mm2 of fibre do not fit an outline of {outline_mm2:.4} mm2; give a larger outline"
    )]
    TooMuchFibre {
        /// Area of fibre, mm2.
        fibre_mm2: f64,
        /// Area of the outline, mm2.
        outline_mm2: f64,
    },
    /// Figures of axials without axials, or the other way round.
    #[error("{}", if *in_braid { "the axials' fibre is not told; give it" } else { "fibre of axials is told, but the braid has none; leave it out" })]
    AxialFibre {
        /// Whether the braid has axials.
        in_braid: bool,
    },
    /// A yarn whose outline and spacing do not settle.
    #[error(
        "the yarn's outline and its spacing on the mandrel do not settle; give the yarn's width and thickness"
    )]
    Unsettled,
    /// A mandrel without stations.
    #[error("a mandrel needs at least one station; give its diameter there")]
    NoStation,
    /// Stations out of order.
    #[error(
        "the mandrel's station at {at_mm} mm does not lie behind the one at {before_mm} mm; give them in order along the axis"
    )]
    Order {
        /// The station, mm.
        at_mm: f64,
        /// The one before it, mm.
        before_mm: f64,
    },
}

/// The nearest numbers of carriers that close.
fn nearest(over: u32, carriers: u32) -> String {
    let step = 2 * u64::from(over);
    let below = u64::from(carriers) / step * step;
    if below >= 4 {
        format!(", such as {below} or {}", below + step)
    } else {
        format!(", such as {}", step.max(4))
    }
}

fn fits(jam_rad: Option<f64>) -> String {
    match jam_rad {
        Some(jam) => format!(
            "; give a braid angle below {:.2} deg, narrower yarns or fewer carriers",
            jam.to_degrees()
        ),
        None => {
            "; no angle has room for them: give narrower yarns, fewer carriers or a larger mandrel"
                .to_owned()
        }
    }
}

/// A size: finite and above zero.
pub(super) fn size(what: &'static str, found: f64, unit: &'static str) -> Result<f64, BraidError> {
    if found.is_finite() && found > 0.0 {
        Ok(found)
    } else {
        Err(BraidError::Size { what, found, unit })
    }
}

/// A number that may be zero.
pub(super) fn not_negative(
    what: &'static str,
    found: f64,
    unit: &'static str,
) -> Result<f64, BraidError> {
    if found.is_finite() && found >= 0.0 {
        Ok(found)
    } else {
        Err(BraidError::Negative { what, found, unit })
    }
}

#[cfg(test)]
mod tests {
    use super::super::{BraidAngle, Setup};
    use super::*;

    #[test]
    fn messages_say_what_would_be_right() {
        let said = |error: BraidError| error.to_string();
        assert_eq!(
            said(Setup::new(7, 1, 1).unwrap_err()),
            "7 carriers make no braid; give an even number, at least 4"
        );
        assert_eq!(
            said(Setup::new(18, 2, 1).unwrap_err()),
            "an interlacing 2/2 does not close round 18 carriers; give a multiple of 4 carriers, such as 16 or 20"
        );
        assert_eq!(
            said(Setup::new(4, 3, 1).unwrap_err()),
            "an interlacing 3/3 does not close round 4 carriers; give a multiple of 6 carriers, such as 6"
        );
        assert_eq!(
            said(BraidAngle::from_degrees(90.0).unwrap_err()),
            "a braid angle of 90 deg is none; give one above 0 and below 90 deg"
        );
        assert_eq!(
            said(size("mandrel diameter", -1.0, "mm").unwrap_err()),
            "the mandrel diameter is -1 mm; give a number above 0"
        );
        let jammed = BraidError::SideBySide {
            width_mm: 2.0,
            spacing_mm: 1.5,
            jam_rad: Some(0.5),
        };
        assert_eq!(
            said(jammed),
            "the braid is jammed: 2.0000 mm of yarn on each carrier stand 1.5000 mm apart; give a braid angle below 28.65 deg, narrower yarns or fewer carriers"
        );
    }
}
