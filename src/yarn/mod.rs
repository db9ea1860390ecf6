//! Yarns: how much fibre, in how many filaments, laid into which outline.
//!
//! | file | what is in it |
//! | --- | --- |
//! | `outline` | the four outlines, their area and polygon, and how a thread touches them |
//! | `count` | linear density, filaments and filament diameter: two fix the third |
//! | `lay` | a yarn laid at its spacing: width, thickness and packing from what is given |
//! | `rigidity` | bending rigidity of the yarn and pull on one filament |

mod outline;

pub use outline::{Arc, Outline, Shape, Touch};
