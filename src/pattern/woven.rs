//! A pattern with what follows from it alone, worked out once: floats and changes, and whether it is one cloth.
//!
//! A library of weaves keeps what it has worked out by the text it was asked for, so that a study that reads a
//! thousand variants of one spec does so once.

use super::{Alike, Interlacing, Layers, NotationError, Pattern, Weaves};
use std::collections::HashMap;
use std::sync::{Arc, Mutex, PoisonError};

/// A pattern, its interlacing, and the layers it falls into if it is no one cloth.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Woven {
    /// The smallest repeat.
    pub pattern: Pattern,
    /// Floats and changes of both systems.
    pub interlacing: Interlacing,
    /// Which of its yarns and crossings are alike.
    pub alike: Alike,
    /// Absent where it hangs together.
    pub layers: Option<Layers>,
    /// Its ISO 9354 code, where it has one.
    pub iso_9354: Option<String>,
}

impl Woven {
    /// Works out what follows from a pattern.
    #[must_use]
    pub fn new(pattern: Pattern) -> Self {
        Self {
            interlacing: pattern.interlacing(),
            alike: pattern.alike(),
            layers: pattern.falls_apart(),
            iso_9354: pattern.iso_9354(),
            pattern,
        }
    }
}

/// What a library of weaves has worked out, by the text asked for; shared by its clones.
pub(super) type Kept = Arc<Mutex<HashMap<String, Arc<Woven>>>>;

impl Weaves {
    /// As [`Weaves::pattern`], with what follows from the pattern, kept for the next time.
    ///
    /// # Errors
    /// As [`Weaves::pattern`].
    pub fn woven(&self, text: &str) -> Result<Arc<Woven>, NotationError> {
        // A thread that died while holding the lock left the map whole: it only ever inserts.
        let kept = || self.kept.lock().unwrap_or_else(PoisonError::into_inner);
        if let Some(woven) = kept().get(text) {
            return Ok(Arc::clone(woven));
        }
        let woven = Arc::new(Woven::new(self.pattern(text)?));
        kept().insert(text.to_owned(), Arc::clone(&woven));
        Ok(woven)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_kept_is_what_would_be_worked_out() {
        let weaves = Weaves::builtin();
        for text in ["satin 8 step 3", "plain", "satin 8 step 3"] {
            let woven = weaves.woven(text).unwrap();
            assert_eq!(*woven, Woven::new(weaves.pattern(text).unwrap()), "{text}");
        }
        assert!(weaves.woven("satin 8 step 2").is_err());
    }
}
