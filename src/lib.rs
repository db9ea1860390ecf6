#![forbid(unsafe_code)]
//! Bends of technical cloth, held against what its fibres stand.

pub mod fibre;
pub mod pattern;
