//! Studies run the flow many times over a changed spec.
//!
//! | file | what is in it |
//! | --- | --- |
//! | `vary` | a key of the spec and the values it takes |
//! | `compare` | specs side by side and grids of values |
//! | `sensitivity` | how much the verdict hangs on the yarns' assumed outlines |

mod compare;
mod sensitivity;
mod vary;

pub use compare::{Grid, GridError, Place, Told};
pub use sensitivity::{FLATNESS_FACTORS, sensitivity};
pub use vary::{Axis, AxisValue, MOST_VALUES, VaryError};
