#![forbid(unsafe_code)]
//! Bends of technical cloth, held against what its fibres stand.

pub mod bend;
pub mod braid;
pub mod drape;
pub mod fibre;
pub mod flow;
pub mod judge;
pub mod passage;
pub mod path;
pub mod pattern;
pub mod quadrature;
pub mod quantity;
pub mod report;
pub mod root;
pub mod route;
pub mod span;
pub mod spec;
pub mod study;
pub mod weave;
pub mod yarn;
