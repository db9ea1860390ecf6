//! Ready routes: what a yarn runs over on a usual machine, as data that a spec names and overrides.
//!
//! A [`Route`] is a list of [`Station`]s in the order of the way; every number of a station is a [`Setting`] with
//! its unit as a spec would write it, the source it has or the words "common practice, no source", and other values
//! where the fibre's family asks for them. `routes/` holds one TOML file each, compiled in. What becomes of the
//! stations (which yarn of the spec runs there, what is overridden) is the spec's to say.

mod builtin;
mod file;
mod library;

pub use file::RouteError;
pub use library::{FindRouteError, find, iter, names};

use crate::bend::Stage;
use serde::Deserialize;

/// Which strand of a fabric runs over a station.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Strand {
    /// The ends of a woven cloth.
    Warp,
    /// The picks of a woven cloth.
    Weft,
    /// The yarns on the carriers of a braider.
    Braider,
}

impl Strand {
    /// The word in route files, specs and listings.
    #[must_use]
    pub fn word(self) -> &'static str {
        match self {
            Self::Warp => "warp",
            Self::Weft => "weft",
            Self::Braider => "braider",
        }
    }

    /// Whether a woven cloth has it.
    #[must_use]
    pub fn is_woven(self) -> bool {
        self != Self::Braider
    }
}

/// A way from one package to the next, or to the cloth.
#[derive(Debug, Clone, PartialEq)]
pub struct Route {
    /// The name by which a spec calls it.
    pub name: String,
    /// What it is, in a few words.
    pub title: String,
    /// What it is, in a sentence.
    pub sentence: String,
    /// What the yarns run over, in order; never empty, no name twice for one strand.
    pub stations: Vec<Station>,
}

/// One thing that yarns run over.
#[derive(Debug, Clone, PartialEq)]
pub struct Station {
    /// The strands that run over it; never empty.
    pub strands: Vec<Strand>,
    /// What the report calls it.
    pub name: String,
    /// Where on the way.
    pub stage: Stage,
    /// Its numbers: each key as a `[[passage]]` has it, and `travel`, the way of the reed along the warp at every
    /// pick. Radius and turn are always there.
    pub settings: Vec<(&'static str, Setting)>,
}

impl Station {
    /// One of its numbers.
    #[must_use]
    pub fn setting(&self, key: &str) -> Option<&Setting> {
        self.settings
            .iter()
            .find(|(name, _)| *name == key)
            .map(|(_, setting)| setting)
    }
}

/// One number of a station.
#[derive(Debug, Clone, PartialEq)]
pub struct Setting {
    /// What is taken, and where it comes from.
    pub usual: Figure,
    /// What is taken instead for fibres of a family.
    pub by_family: Vec<(String, Figure)>,
}

impl Setting {
    /// The figure for a fibre of this family.
    #[must_use]
    pub fn of(&self, family: Option<&str>) -> &Figure {
        self.by_family
            .iter()
            .find(|(name, _)| Some(name.as_str()) == family)
            .map_or(&self.usual, |(_, figure)| figure)
    }
}

/// A value and how it is known.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Figure {
    /// With its unit, as a spec would write it; friction is a bare number.
    pub value: String,
    /// Between which values machines lie, where known.
    pub range: Option<String>,
    /// The source, or "common practice, no source".
    pub source: String,
    /// Anything more.
    pub note: Option<String>,
}
