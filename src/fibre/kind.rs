//! The words that sort fibres and their figures.

use std::fmt;

use serde::{Deserialize, Serialize};

/// Defines an enum whose variants are written in kebab case in data, specs and reports.
macro_rules! words {
    ($(#[$doc:meta])* $name:ident { $($(#[$vdoc:meta])* $variant:ident = $word:literal,)+ }) => {
        $(#[$doc])*
        #[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
        pub enum $name {
            $($(#[$vdoc])* #[serde(rename = $word)] $variant,)+
        }

        impl $name {
            /// Every variant, in the order of the definition.
            pub const ALL: &'static [Self] = &[$(Self::$variant,)+];

            /// The word in data files, specs and reports.
            #[must_use]
            pub fn word(self) -> &'static str {
                match self {
                    $(Self::$variant => $word,)+
                }
            }

            /// The variant that a word names, exactly as [`Self::word`] writes it.
            #[must_use]
            pub fn from_word(word: &str) -> Option<Self> {
                Self::ALL.iter().copied().find(|variant| variant.word() == word)
            }
        }

        impl fmt::Display for $name {
            fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                f.write_str(self.word())
            }
        }
    };
}

words! {
    /// How a fibre fails when bent.
    Kind {
        /// Breaks on the tension side: glass, quartz, basalt, carbon, ceramic, boron.
        Brittle = "brittle",
        /// Kinks on the compressed side long before it breaks: para-aramid, PBO, UHMWPE, LCP, flax.
        Fibrillar = "fibrillar",
        /// Yields, then breaks at a strain: metal wire, melt-spun polymers, meta-aramid, silk.
        Ductile = "ductile",
    }
}

words! {
    /// What was pulled when the tensile strength was measured.
    StrengthBasis {
        /// Single filaments.
        Filament = "filament",
        /// A strand impregnated with resin: weak filaments share their load.
        Strand = "strand",
        /// A dry yarn: filaments slack and unequal, so below the filament figure.
        Yarn = "yarn",
    }
}

impl StrengthBasis {
    /// Whether counts of broken filaments from such a strength are indicative only.
    #[must_use]
    pub fn counts_are_indicative(self) -> bool {
        self != Self::Filament
    }
}

words! {
    /// How a compressive strength was read. A bending test reads about twice the uniaxial figure.
    CompressionBasis {
        /// Recoil, direct compression, or back-calculated from composites.
        Uniaxial = "uniaxial",
        /// Loop, knot or cantilever test: holds in bending as it stands.
        Bending = "bending",
    }
}

words! {
    /// Where the flaws sit that set the strength.
    FlawKind {
        /// On the surface.
        Surface = "surface",
        /// In the volume.
        Volume = "volume",
        /// On the surface and in the volume.
        Both = "both",
        /// No flaws in the sense of the weakest link (fibrillar splitting, yield).
        NoFlaws = "none",
    }
}

words! {
    /// The caution that goes with handling and breaking the fibre.
    Hazard {
        /// Carbon: fragments conduct, drift far and short electrical gear.
        ConductiveCarbon = "conductive-carbon",
        /// Glass, quartz, basalt: fragments irritate skin, eyes and airways.
        Glass = "glass",
        /// Ceramic and boron: as glass; some ceramic fibres are classed as hazardous to breathe.
        Ceramic = "ceramic",
        /// Metal wire: springs, cuts, conducts.
        Wire = "wire",
        /// Organic fibrils or dust that can be breathed in.
        OrganicDust = "organic-dust",
        /// Nothing beyond lint.
        NoHazard = "none",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_word_reads_back() {
        for kind in Kind::ALL {
            assert_eq!(Kind::from_word(kind.word()), Some(*kind));
        }
        for hazard in Hazard::ALL {
            assert_eq!(Hazard::from_word(hazard.word()), Some(*hazard));
        }
        assert_eq!(FlawKind::from_word("none"), Some(FlawKind::NoFlaws));
        assert_eq!(StrengthBasis::from_word("Yarn"), None);
    }

    #[test]
    fn only_filament_strengths_give_counts_that_are_more_than_indicative() {
        assert!(!StrengthBasis::Filament.counts_are_indicative());
        assert!(StrengthBasis::Strand.counts_are_indicative());
        assert!(StrengthBasis::Yarn.counts_are_indicative());
    }
}
