//! Braids: two sets of yarns laid in opposite helices on a mandrel or into a sleeve, with or without axials.
//!
//! The geometry alone: plain numbers in, lengths, angles, curvatures and stretches of yarn out; no strength, no spec.
//! Angles are measured from the mandrel's axis; diameters marked mean are those of the wall's middle.
//!
//! | file | what is in it |
//! | --- | --- |
//! | `angle` | the braid angle, given or from carrier speed and take-up |
//! | `setup` | the braider: carriers, interlacing k/k, ends per carrier; its pattern |
//! | `lattice` | spacings of the unrolled braid |
//! | `section` | a yarn's outline as an oblique yarn meets it |
//! | `parts` | what is braided: setup, outlines, axials |
//! | `settle` | the outline of a yarn that hangs on its own spacing |
//! | `laid` | the braid on its mandrel: mean diameter, spacings, sections |
//! | `jam` | where yarns of a set lie side by side |
//! | `cover` | share of the surface covered, by formula and drawn |
//! | `wall` | thickness, mass, fibre volume |
//! | `path` | crimp and bends of the braiders: taut |
//! | `stiff`, `over_axials` | the same of stiff yarns; over axials |
//! | `thread` | a tight thread over sections of more than one kind: braiders over axials |
//! | `sleeve` | a braid without mandrel |
//! | `mandrel` | a mandrel whose diameter changes: a table along it |
//! | `error` | what is wrong with the numbers given |
//!
//! One idea carries the room. Unrolled, a braid is a cloth whose systems cross at twice the braid angle, so that all of
//! it follows from the pitch c of one set round the mandrel:
//!
//! ```text
//! c = pi D/(N/2)              pitch of one set round the mandrel
//! s = c cos a                 spacing across one set
//! p = s/sin 2a = c/(2 sin a)  crossings along a yarn
//! ```
//!
//! Source: Du and Popper 1994; Potluri et al. 2003 (from memory); checked against independent solutions.
//! Left out: yarns that slip on a steep mandrel, the way from guide ring to fell, nesting, hairiness.

mod angle;
mod cover;
mod error;
mod jam;
mod laid;
mod lattice;
mod mandrel;
mod over_axials;
mod parts;
mod path;
mod section;
mod settle;
mod setup;
mod sleeve;
mod stiff;
mod thread;
mod wall;

pub use angle::{BraidAngle, Kinematics};
pub use error::BraidError;
pub use jam::JamState;
pub use laid::Braid;
pub use lattice::Lattice;
pub use mandrel::{AlongMandrel, Row, Station, TakeUp};
pub use parts::{Axials, Parts};
pub use path::BraiderPath;
pub use section::met_obliquely;
pub use settle::Bed;
pub use setup::Setup;
pub use sleeve::Sleeve;
pub use stiff::StiffPull;
pub use wall::{Strand, Wall};
