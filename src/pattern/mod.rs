//! The weave pattern: which yarn lies on top at every crossing, and what follows from that alone.
//!
//! A pattern is a matrix with one column for each end (warp yarn) and one row for each pick (weft yarn). `#`, or `true`,
//! means the warp is up: it lies over the weft, seen from the face. Conventions, each pinned by a test:
//!
//! | matter | rule | source |
//! |---|---|---|
//! | origin | bottom left: ends count from the left, picks from the bottom, so the **last** drawn row is the first pick | ISO 7211-1 (from memory); the same rule in a 19th-century weaving textbook |
//! | numbers | from 0 in the program, from 1 in every text and drawing | |
//! | size | always the smallest repeat, reduced in both directions when the pattern is made | |
//! | order of travel | an end meets pick 0, 1, 2 ...; a pick meets end 0, 1, 2 ... | |
//! | twill line | Z rises to the right on the face, S to the left | ISO 2 for the letters (from memory) |
//! | satin step | the picks by which the stitch rises from one end to the next, for satin and sateen alike | after ISO 9354, "from one thread to the next" (from memory) |
//!
//! The rooms inside:
//! - `matrix`, `turn`: [`Pattern`], the same cloth turned, mirrored, exchanged;
//! - `interlacing`: floats and changes of both systems ([`Interlacing`]);
//! - `hanging`: whether it is one cloth or falls apart ([`Layers`]; Clapham 1980);
//! - `alike`: which ends, picks and crossings are alike ([`Alike`]);
//! - `family`: plain, ribs, hopsack, twills, satins built from their numbers;
//! - `words`, `notation`: the same asked for in a weaver's words ([`parse_notation`]);
//! - `iso`: ISO 9354 codes, read and written ([`parse_iso_9354`]);
//! - `library`, `weave_file`, `builtin`: named weaves, one TOML each, in `weaves/` and in a user's own folder ([`Weaves`]);
//! - `woven`: a pattern with what follows from it, worked out once ([`Woven`]);
//! - `draw`: point paper for the terminal ([`draw()`]).
//!
//! Left out: leno (ends that change their order), lappet and pile loops, which no matrix of this kind can hold. Several
//! layers bound together are one matrix and are legal; several layers not bound are refused by whoever needs one cloth.

mod alike;
mod builtin;
mod draw;
mod family;
mod hanging;
mod interlacing;
mod iso;
mod library;
mod matrix;
mod notation;
mod turn;
mod weave_file;
mod words;
mod woven;

#[cfg(test)]
mod testing;

pub use alike::Alike;
pub use draw::{Marks, draw};
pub use family::{
    FamilyError, TwillLine, hopsack, plain, sateen, satin, satin_steps, twill, warp_rib, weft_rib,
};
pub use hanging::{Layer, Layers};
pub use interlacing::{Float, FloatLength, Interlacing, Side, SystemInterlacing, YarnInterlacing};
pub use iso::{IsoError, parse_iso_9354};
pub use library::{Weave, Weaves};
pub use matrix::{MAX_REPEAT, Pattern, PatternError};
pub use notation::{NotationError, parse_notation};
pub use weave_file::{FolderErrors, WeaveFileError};
pub use woven::Woven;
