//! Weave patterns.
