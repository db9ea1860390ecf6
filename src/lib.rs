#![forbid(unsafe_code)]
//! Bends of technical cloth, held against what its fibres stand.

pub mod fibre;
pub mod path;
pub mod pattern;
pub mod quantity;
pub mod root;
pub mod span;
pub mod yarn;
