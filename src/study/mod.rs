//! Studies run the flow many times over a changed spec.
//!
//! | file | what is in it |
//! | --- | --- |
//! | `sensitivity` | how much the verdict hangs on the yarns' assumed outlines |

mod sensitivity;

pub use sensitivity::{FLATNESS_FACTORS, sensitivity};
