//! The one currency of the program: a length of yarn held at some curvature, under some pull.
//!
//! The rooms that know geometry make [`Bend`]s and know no strength; the room that judges sees only these.
//! A new source of bends is one new room that makes them.
//!
//! Sign: curvature is positive where the bend's inside is the side the yarn lies on. All bends of a cloth and of a
//! corner lie in the plane of the yarn's own path; which side of a filament a bend loads is not told yet.

use crate::span::Span;
use std::borrow::Cow;

/// Which yarns of the cloth.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum SystemName {
    /// The ends.
    Warp,
    /// The picks.
    Weft,
}

impl SystemName {
    /// The word in spec and report.
    pub fn word(self) -> &'static str {
        match self {
            Self::Warp => "warp",
            Self::Weft => "weft",
        }
    }
}

/// Where on its way the yarn meets the bend.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Stage {
    /// From package to package.
    Winding,
    /// Creel, warping, beam.
    Warping,
    /// From beam or package to the fell.
    Weaving,
    /// From the carrier's spool to the mandrel.
    Braiding,
    /// In the cloth, at the peak of the loom's pull.
    Loom,
    /// In the cloth off the loom.
    Rest,
    /// Washing, heat, coating.
    Finishing,
    /// Laid over a tool.
    Draping,
}

impl Stage {
    /// The word in spec and report.
    pub fn word(self) -> &'static str {
        match self {
            Self::Winding => "winding",
            Self::Warping => "warping",
            Self::Weaving => "weaving",
            Self::Braiding => "braiding",
            Self::Loom => "loom",
            Self::Rest => "rest",
            Self::Finishing => "finishing",
            Self::Draping => "draping",
        }
    }
}

/// Which sides of a contact fall away to the other face.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Flanks {
    /// Both: the yarn passes to the other face on either side.
    Both,
    /// One: on the other side the yarn floats on.
    One,
}

/// The crown of a wave: the inflection lies this far below the crest and along the cloth.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Crown {
    /// Drop from the crest to the inflection, mm.
    pub drop_mm: f64,
    /// Distance along the cloth, mm.
    pub arm_mm: f64,
    /// Which sides fall away.
    pub flanks: Flanks,
}

/// The shoulder of a wide section, where a taut yarn turns down beside its tip.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Shoulder {
    /// Distance along the cloth from the crest to where the taut yarn leaves the section, mm.
    pub back_mm: f64,
    /// Slope with which the section's outline comes to the shoulder, rad.
    pub start_rad: f64,
    /// Slope of the straight piece behind it, rad.
    pub slope_rad: f64,
    /// Half of that straight piece: from the shoulder to the inflection, mm.
    pub half_straight_mm: f64,
}

/// How a stiff yarn or filament may stay away from what it is bent over; without it, it lies on.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Easing {
    /// It is held: it follows whatever it lies on.
    Held,
    /// Straight arms on either side, much longer than the bend: the edge law with this turn, rad.
    LongArms {
        /// Turn at the contact, rad.
        turn_rad: f64,
    },
    /// Over a crest.
    Crown(Crown),
    /// Over a shoulder.
    Shoulder(Shoulder),
    /// On a path of least energy: it is bent as the path is, and a filament by itself no less.
    Path {
        /// Turn of the whole crown, rad.
        turn_rad: f64,
        /// The crown, for what bends past yield.
        crown: Crown,
        /// Radius of the crossed outline at its crest, mm; absent where it is flat.
        section_mm: Option<f64>,
    },
    /// Over an outline that turns from crest to shoulder without a corner: whichever bends it more.
    Rounded(Crown, Shoulder),
}

/// A stretch of yarn of one curvature.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stretch {
    /// Length on the yarn's centreline, mm.
    pub length_mm: f64,
    /// Radius of the yarn's inner side, mm: of what it lies on, zero for an edge, below zero where the centreline is
    /// bent more sharply than half of the yarn's thickness; `None` is a straight stretch.
    pub lies_on_mm: Option<f64>,
    /// How it may ease away.
    pub easing: Easing,
}

/// One bend a yarn meets.
#[derive(Debug, Clone, PartialEq)]
pub struct Bend {
    /// What a person calls the place.
    pub place: Cow<'static, str>,
    /// Where on the way.
    pub stage: Stage,
    /// Which yarns.
    pub system: SystemName,
    /// The stretches of the yarn, in order.
    pub profile: Vec<Stretch>,
    /// Curvature of a larger bend that comes on top in the same plane and sense, 1/mm.
    pub added_per_mm: f64,
    /// Pull on the yarn, N, at its peak.
    pub pull_n: f64,
    /// Temperature of the yarn there, degrees C, where known.
    pub temperature_c: Option<f64>,
    /// How much yarn meets it.
    pub meets: Meets,
    /// The line of the spec that governs it.
    pub governed_by: Span,
    /// The line that governs its temperature.
    pub heated_by: Option<Span>,
}

/// How much of the yarn meets a bend.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Meets {
    /// So many times per metre of yarn, over the profile's length.
    TimesPerMetre(f64),
    /// All of it travels over the bend.
    All,
}
