//! Studies run the flow many times over a changed spec.
//!
//! | file | what is in it |
//! | --- | --- |
//! | `vary` | a key of the spec and the values it takes |
//! | `compare` | specs side by side and grids of values |
//! | `lever`, `margin`, `solve` | what can be changed, how far a place is from holding, where it begins to hold |
//! | `proposed` | a lever's value as keys to be set, and how the place is with them |
//! | `levers` | what a spec lets be changed, with the reach a mill has |
//! | `advice` | what would hold instead, the cheapest first |
//! | `limits` | how far a spec may go |
//! | `sensitivity` | how much the verdict hangs on the yarns' assumed outlines |

mod advice;
mod compare;
mod lever;
mod levers;
mod limits;
mod margin;
mod proposed;
mod sensitivity;
mod solve;
mod vary;

pub use advice::{Proposal, advice};
pub use compare::{Grid, GridError, Place, Told};
pub use lever::{Better, Lever};
pub use limits::{Bound, limits};
pub use margin::{Target, margin, margin_of};
pub use proposed::{Set, values_of};
pub use sensitivity::{FLATNESS_FACTORS, rigidity, sensitivity};
pub use solve::{Found, solve};
pub use vary::{Axis, AxisValue, MOST_VALUES, VaryError};
