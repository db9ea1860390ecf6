//! Fibres: what is known of them, and what one filament does when bent.
//!
//! # Method
//!
//! Stiff strong filaments break when they are bent too tightly. For a round filament of diameter d and modulus E bent to
//! radius R the outer stress is E d / (2 R); what that stress does depends on the kind of fibre ([`Kind`]):
//!
//! | kind | fails by | radius without pull |
//! | --- | --- | --- |
//! | brittle | fracture of the tension side; of the compressed side where its strength is known and low | E d / (2 s_t), E d / (2 s_c) |
//! | fibrillar | kink bands on the compressed side, damaged but whole | E d / (2 s_c) |
//! | ductile | yield, then break at a strain | E d / (2 s_y), d / (2 e) |
//!
//! Compressive strength read in bending is about twice the uniaxial figure, so each record says which it gives
//! ([`CompressionBasis`]), and the factor [`COMPRESSION_BENDING_FACTOR`] is applied to uniaxial figures only.
//! Pull, scatter of strength, and the history of a filament belong to the room that judges.
//!
//! # What is here
//!
//! - [`library()`]: the built-in records. A [`Record`] holds every figure with its range, its sources, and whether it was read,
//!   derived, or comes from memory ([`Figure`], [`How`]). Grades are generic. The files stand in `data/`.
//! - [`sources`] and [`general`]: the table of sources, and factors that hold for whole classes of fibre.
//! - [`Fibre`]: plain numbers in mm, N, MPa, made from a record, from a record with [`FibreOverrides`], or from given values.
//!
//! # What is left out
//!
//! Fatigue, creep, rate, moisture and the loss of strength in processing: texts say what is known, no number follows from them.
//! Modulus is one number: the compressive modulus of polymer fibres and the non-linear modulus of carbon are not told apart.

mod build;
mod entries;
mod figure;
mod filament;
mod kind;
mod library;
mod origin;
mod overrides;
mod record;
mod source;
#[cfg(test)]
mod tests;

pub use figure::{Figure, How, Statement};
pub use filament::{COMPRESSION_BENDING_FACTOR, Compression, Fibre, Mechanism, Weibull};
pub use kind::{CompressionBasis, FlawKind, Hazard, Kind, StrengthBasis};
pub use library::{FindError, Library, library};
pub use origin::{FigureName, Origin};
pub use overrides::{FibreError, FibreOverrides, FibreProblem};
pub use record::{DataError, Flaws, Record};
pub use source::{
    FigureRange, General, HeatLoss, HeatPoint, Seen, Source, general, source_id, sources,
};
