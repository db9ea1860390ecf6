//! Fibre records.
