//! Woven cloth: how both systems share the height, the cloth's numbers and states, its bends.
//!
//! | file | what is in it |
//! | --- | --- |
//! | `wave` | one system's wave: crimp and slope for a given height, from the pattern and the taut path |
//! | `share` | how warp and weft share the height: measured crimp, tensions, or equal heights |
//! | `heights` | the heights of all crossings of stiff yarns: least energy over the repeat |
//! | `conjugate` | linear equations by conjugate gradients |
//! | `pulled` | stiff yarns under the pull of one state; measured crimp met |
//! | `lengths` | the state in which the yarns have the lengths of another |
//! | `found` | a state that was found, and its cloth |
//! | `states` | the cloth on the loom and at rest; measured thickness met |
//! | `build` | from a weave to its cloth: measured thickness met, yarns that give way in dense cloth |
//! | `cloth` | the cloth and its numbers: crimp, thickness, mass, cover, fibre volume |
//! | `jam` | the largest sett that fits where the yarns asked for cannot interlace |
//! | `shed` | what the open shed adds to the warp's pull |
//! | `crowns` | the bends of the cloth's yarns |

mod build;
mod cloth;
mod conjugate;
mod crowns;
mod found;
mod heights;
mod jam;
mod lengths;
mod pulled;
mod share;
mod shed;
mod states;
mod wave;

pub use cloth::{Cloth, ClothError, ClothYarn, StiffSystem, YarnPath, areal_mass_g_m2, cover};
pub use crowns::crowns;
pub use jam::{Fits, Jammed};
pub use share::{Closed, Closure, Share, SharedBy, share};
pub use shed::{shed_pull_n, shed_strain, warp_peak_n};
pub use states::{RigidityBound, States, Varied};
pub use wave::{Piece, Wave};
