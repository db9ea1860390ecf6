//! Curves of yarns and rods, and their curvature.
//!
//! | file | what is in it |
//! | --- | --- |
//! | `taut` | a tight, flexible thread from the crest of one section to the trough under the next |
//! | `stiff` | a stiff yarn under pull over and under sections: least energy |
//! | `rod` | the peak curvature of a stiff thread under pull: over an edge, at a crown, at a shoulder; wire past yield |
//! | `half_crown` | a taut yarn's half crown in stretches |
//! | `helix` | curvature of a filament in a twisted, bent yarn |
//! | `guide` | tension along a row of guides |

mod guide;
mod half_crown;
mod helix;
mod rod;
mod stiff;
mod taut;

pub use guide::tension_after;
pub use half_crown::half_crown;
pub use helix::{bent_helix_curvature_per_mm, bent_helix_peak_per_mm, helix_curvature_per_mm};
pub use rod::{Hardening, edge_peak_per_mm};
pub use stiff::{NoPath, Response, Sample, StiffPath, StiffYarn, Strand, Way};
pub use taut::{Crest, Passing, Rest};
